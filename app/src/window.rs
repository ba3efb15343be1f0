//! Opens the window, with whatever way of drawing this computer has.
//!
//! One way of drawing may be missing: no OpenGL in a remote session on Windows, no Vulkan on an
//! old machine, a library not installed. The next way is tried before giving up, and the reason
//! given is the first one, because later ones only complain about the first.

use std::{
    any::Any,
    panic::{self, AssertUnwindSafe},
    sync::{
        Arc,
        atomic::{AtomicBool, Ordering},
    },
};

use eframe::{
    AppCreator, NativeOptions, Renderer,
    egui::{Vec2, ViewportBuilder, vec2},
    egui_wgpu::{WgpuSetup, WgpuSetupCreateNew},
    wgpu::DeviceType,
};
use thiserror::Error;

use crate::theme;

/// Name by which the system knows the window and its folder.
pub const APP_ID: &str = "assize";
/// Size of the first window, points; less on a smaller monitor.
const SIZE: Vec2 = vec2(1440.0, 900.0);
/// Smallest size, points.
const SMALLEST: Vec2 = vec2(800.0, 500.0);
/// What can be done without a window.
const WITHOUT: &str = "without a window there are: assize fit, new, choose, convert, report, verify";

/// Why there is no window. The text is one line; the program then ends with status 2.
#[derive(Debug, Error)]
pub enum WindowError {
    /// No screen to show it on.
    #[error("cannot open a window: neither DISPLAY nor WAYLAND_DISPLAY is set; {WITHOUT}")]
    NoDisplay,
    /// No way of drawing works here.
    #[error("cannot open a window: {reason}{}; {WITHOUT}", hint(reason))]
    CannotOpen {
        /// What the first way of drawing said.
        reason: String,
    },
    /// The window was open, then the system took it away.
    #[error("the window was lost: {reason}")]
    Lost {
        /// What the system said.
        reason: String,
    },
}

/// A way of drawing.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Drawing {
    /// OpenGL.
    Glow,
    /// Vulkan, Direct3D or Metal.
    Wgpu,
    /// The same on a software device.
    Software,
}

/// The ways of drawing in the order they are tried.
///
/// Without a GPU, Linux draws about five times faster with OpenGL; Windows without a driver has
/// only OpenGL 1.1, but always a software device for Direct3D.
const ORDER: &[Drawing] =
    if cfg!(windows) { &[Drawing::Wgpu, Drawing::Software, Drawing::Glow] } else { &[Drawing::Glow, Drawing::Wgpu] };

/// Opens the window and returns when it was closed.
///
/// `make_app` is asked once per attempt, since an attempt consumes what it gives. Typefaces and
/// themes are installed before the app is made.
///
/// # Errors
/// When no way of drawing works, or the window was lost.
pub fn run(make_app: impl Fn() -> AppCreator<'static>) -> Result<(), WindowError> {
    if !has_display(|name| std::env::var_os(name).is_some_and(|value| !value.is_empty())) {
        return Err(WindowError::NoDisplay);
    }
    in_order(ORDER, |drawing| attempt(drawing, make_app()))
}

/// Whether the system names a screen; only where it would name one in the environment.
fn has_display(is_set: impl Fn(&str) -> bool) -> bool {
    let names = ["WAYLAND_DISPLAY", "WAYLAND_SOCKET", "DISPLAY"];
    !cfg!(all(unix, not(target_os = "macos"))) || names.into_iter().any(is_set)
}

/// How an attempt ended.
enum Ended {
    /// The person closed the window.
    Closed,
    /// There never was a window.
    NeverOpened(String),
    /// There was one, but it did not end well.
    Lost(String),
}

fn in_order(order: &[Drawing], mut attempt: impl FnMut(Drawing) -> Ended) -> Result<(), WindowError> {
    let mut first = None;
    for &drawing in order {
        match attempt(drawing) {
            Ended::Closed => return Ok(()),
            Ended::Lost(reason) => return Err(WindowError::Lost { reason }),
            Ended::NeverOpened(reason) => drop(first.get_or_insert(reason)),
        }
    }
    let reason = first.unwrap_or_else(|| "no way of drawing is built in".to_owned());
    Err(WindowError::CannotOpen { reason })
}

fn attempt(drawing: Drawing, make: AppCreator<'static>) -> Ended {
    let opened = Arc::new(AtomicBool::new(false));
    let flag = Arc::clone(&opened);
    let creator: AppCreator<'static> = Box::new(move |creation| {
        flag.store(true, Ordering::SeqCst);
        theme::install(&creation.egui_ctx);
        make(creation)
    });
    let result = quiet_until(&opened, || {
        // A missing keyboard library is a panic deep inside, not an error.
        panic::catch_unwind(AssertUnwindSafe(|| eframe::run_native(APP_ID, options(drawing), creator)))
    });
    let was_open = opened.load(Ordering::SeqCst);
    match result {
        Ok(Ok(())) => Ended::Closed,
        Ok(Err(error)) if was_open => Ended::Lost(one_line(&error.to_string())),
        Ok(Err(error)) => Ended::NeverOpened(one_line(&error.to_string())),
        // A fault of ours, to be seen as such.
        Err(panic) if was_open => panic::resume_unwind(panic),
        Err(panic) => Ended::NeverOpened(one_line(&panic_text(panic.as_ref()))),
    }
}

/// Runs `work`; panics before `opened` print nothing, since their text is reported otherwise.
fn quiet_until<T>(opened: &Arc<AtomicBool>, work: impl FnOnce() -> T) -> T {
    let usual = Arc::new(panic::take_hook());
    let (hook, flag) = (Arc::clone(&usual), Arc::clone(opened));
    panic::set_hook(Box::new(move |info| {
        if flag.load(Ordering::SeqCst) {
            hook(info);
        }
    }));
    let result = work();
    panic::set_hook(Box::new(move |info| usual(info)));
    result
}

fn options(drawing: Drawing) -> NativeOptions {
    let mut options = NativeOptions {
        viewport: ViewportBuilder::default()
            .with_title("Assize")
            .with_app_id(APP_ID)
            .with_icon(theme::icon())
            .with_inner_size(SIZE)
            .with_min_inner_size(SMALLEST)
            .with_clamp_size_to_monitor_size(true),
        renderer: match drawing {
            Drawing::Glow => Renderer::Glow,
            Drawing::Wgpu | Drawing::Software => Renderer::Wgpu,
        },
        // The same look on every machine.
        system_font_fallback: false,
        ..NativeOptions::default()
    };
    if drawing == Drawing::Software {
        let mut setup = WgpuSetupCreateNew::without_display_handle();
        setup.native_adapter_selector = Some(Arc::new(|adapters, _| {
            let software = |adapter: &&eframe::wgpu::Adapter| adapter.get_info().device_type == DeviceType::Cpu;
            let found = adapters.iter().find(software).cloned();
            found.ok_or_else(|| "no software device".to_owned())
        }));
        options.wgpu_options.wgpu_setup = WgpuSetup::CreateNew(setup);
    }
    options
}

fn panic_text(panic: &(dyn Any + Send)) -> String {
    let text = panic.downcast_ref::<&str>().map(|text| (*text).to_owned());
    text.or_else(|| panic.downcast_ref::<String>().cloned())
        .unwrap_or_else(|| "the window system failed without a reason".to_owned())
}

/// The text on one line, without the places in source files that libraries put into it.
fn one_line(text: &str) -> String {
    let text = text.split_whitespace().collect::<Vec<_>>().join(" ");
    let after_place = text.rfind(".rs:").and_then(|place| {
        let (_, rest) = text[place + 4..].split_once(": ")?;
        Some(rest.to_owned())
    });
    after_place.unwrap_or(text)
}

/// Which package of Debian or Ubuntu is probably missing.
fn hint(reason: &str) -> &'static str {
    let reason = reason.to_lowercase();
    if reason.contains("xkbcommon") {
        " (on Debian: install libxkbcommon-x11-0)"
    } else if reason.contains("xlib") {
        " (on Debian: install libx11-6 libx11-xcb1 libxcursor1 libxi6)"
    } else if reason.contains("glutin configs") {
        " (on Debian: install libgl1)"
    } else {
        ""
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_second_way_is_tried_and_the_first_reason_kept() {
        let mut tried = Vec::new();
        let worked = in_order(&[Drawing::Glow, Drawing::Wgpu], |drawing| {
            tried.push(drawing);
            match drawing {
                Drawing::Glow => Ended::NeverOpened("no OpenGL".to_owned()),
                _ => Ended::Closed,
            }
        });
        assert!(worked.is_ok());
        assert_eq!(tried, [Drawing::Glow, Drawing::Wgpu]);

        let mut reasons = ["first", "second"].into_iter();
        let failed = in_order(&[Drawing::Glow, Drawing::Wgpu], |_| {
            Ended::NeverOpened(reasons.next().expect("two attempts").to_owned())
        });
        let text = failed.expect_err("nothing works").to_string();
        assert!(text.starts_with("cannot open a window: first; without"), "{text}");
    }

    #[test]
    fn a_window_that_was_open_is_not_opened_again() {
        let mut attempts = 0;
        let lost = in_order(ORDER, |_| {
            attempts += 1;
            Ended::Lost("gone".to_owned())
        });
        assert!(matches!(lost, Err(WindowError::Lost { .. })));
        assert_eq!(attempts, 1);
    }

    #[test]
    fn the_message_is_one_line_and_names_every_command() {
        let reason = one_line("Library libxkbcommon-x11.so\ncould not be loaded.");
        for error in [WindowError::NoDisplay, WindowError::CannotOpen { reason }] {
            let text = error.to_string();
            assert_eq!(text.lines().count(), 1, "{text}");
            for command in ["fit", "new", "choose", "convert", "report", "verify"] {
                assert!(text.contains(command), "{command} in {text}");
            }
        }
        assert!(hint("libxkbcommon-x11.so could not be loaded").contains("libxkbcommon-x11-0"));
    }

    #[test]
    fn places_in_source_files_are_left_out() {
        let text = one_line("os error at src/linux/mod.rs:788: Failed to open\nconnection");
        assert_eq!(text, "Failed to open connection");
        assert_eq!(one_line("GLXBadFBConfig: [a7]"), "GLXBadFBConfig: [a7]");
    }

    #[test]
    #[cfg(all(unix, not(target_os = "macos")))]
    fn a_display_is_needed_and_any_kind_will_do() {
        assert!(!has_display(|_| false));
        assert!(has_display(|name| name == "DISPLAY"));
        assert!(has_display(|name| name == "WAYLAND_DISPLAY"));
    }
}
