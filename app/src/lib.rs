//! The studio: a window and a command line over one core.

pub mod app;
pub mod command;
pub mod headless;
pub mod platform;
pub mod rooms;
pub mod session;
pub mod shell;
pub mod theme;
pub mod widgets;
pub mod window;

use app::{App, Surroundings};
use eframe::AppCreator;
use std::process::ExitCode;

/// The whole program: a verb of the command line, or the window.
#[must_use]
pub fn main() -> ExitCode {
    let start = match headless::run() {
        Ok(start) => start,
        Err(code) => return code,
    };
    let make = || -> AppCreator<'static> {
        let start = start.clone();
        Box::new(move |creation| {
            let around = Surroundings::of_this_computer()?;
            Ok(Box::new(App::new(&creation.egui_ctx, around, &start)))
        })
    };
    match window::run(make) {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("assize: {error}");
            ExitCode::from(2)
        }
    }
}
