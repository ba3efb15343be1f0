//! The pages of the report as they will print: the PDF's own pages, drawn in the background.

use super::pages;
use crate::theme::Theme;
use assize_core::{quantity::Moment, trail::Document};
use eframe::egui::{
    ColorImage, Context, Frame, Image, Label, Role, ScrollArea, Stroke, TextureHandle, TextureOptions, Ui, Vec2,
    WidgetInfo, vec2,
};
use std::sync::{
    Arc,
    atomic::{AtomicBool, Ordering},
    mpsc::{self, Receiver},
};

/// How a document becomes the bytes of a PDF.
pub type Make = fn(&Document, Moment) -> Result<Vec<u8>, String>;

/// What the pages shown belong to: revision of the project, width in pixels.
type Key = (u64, u16);

/// The pages shown, and those on their way.
#[derive(Default)]
pub struct Preview {
    key: Option<Key>,
    pages: Vec<TextureHandle>,
    problem: Option<String>,
    job: Option<Job>,
}

struct Job {
    sent: Receiver<Sent>,
    cancel: Arc<AtomicBool>,
    /// Pages of an older revision stay in sight until the first new one is there.
    fresh: bool,
}

enum Sent {
    Page(ColorImage),
    Done,
    Failed(String),
}

impl Drop for Job {
    fn drop(&mut self) {
        self.cancel.store(true, Ordering::Relaxed);
    }
}

impl Preview {
    /// Shows the pages, and has them made anew when the project or the width changed.
    pub fn show(&mut self, ui: &mut Ui, document: &Document, revision: u64, make: Make) {
        let theme = Theme::of(ui);
        let width = (ui.available_width() - 24.0).clamp(200.0, 820.0);
        let pixels = width * ui.ctx().pixels_per_point();
        // In steps, so that a window being dragged larger does not start a job a frame.
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "200 to a few thousand")]
        let key = (revision, ((pixels / 64.0).ceil() * 64.0) as u16);
        if self.key != Some(key) {
            self.key = Some(key);
            self.start(ui.ctx(), document.clone(), key.1, make);
        }
        self.receive(ui.ctx());
        if let Some(problem) = &self.problem {
            ui.add(Label::new(problem).wrap());
        }
        if self.pages.is_empty() && self.problem.is_none() {
            ui.label("The pages are being drawn …");
        }
        ScrollArea::vertical().auto_shrink([false, false]).id_salt("pages").show(ui, |ui| {
            let count = self.pages.len();
            for (n, page) in self.pages.iter().enumerate() {
                let size = page.size_vec2();
                let size = vec2(width, width * size.y / size.x.max(1.0));
                one(ui, page, size, &format!("Page {} of {count}", n + 1), theme);
            }
        });
    }

    fn start(&mut self, ctx: &Context, document: Document, width: u16, make: Make) {
        let (sender, sent) = mpsc::channel();
        let cancel = Arc::new(AtomicBool::new(false));
        let (stop, ctx) = (Arc::clone(&cancel), ctx.clone());
        let work = move || {
            let tell = |what: Sent| {
                // Nobody listens when a newer job took over.
                let _ = sender.send(what);
                ctx.request_repaint();
            };
            let done = make(&document, crate::session::clock()).and_then(|pdf| {
                pages::draw(&pdf, width, |page| {
                    tell(Sent::Page(page));
                    !stop.load(Ordering::Relaxed)
                })
            });
            tell(done.map_or_else(Sent::Failed, |()| Sent::Done));
        };
        let spawned = std::thread::Builder::new().name("pages".to_owned()).spawn(work);
        if let Err(why) = spawned {
            self.problem = Some(format!("The pages cannot be drawn: {why}."));
        }
        self.job = Some(Job { sent, cancel, fresh: true });
    }

    fn receive(&mut self, ctx: &Context) {
        let Some(job) = &mut self.job else { return };
        let mut over = false;
        while let Ok(sent) = job.sent.try_recv() {
            match sent {
                Sent::Page(image) => {
                    if std::mem::take(&mut job.fresh) {
                        self.pages.clear();
                        self.problem = None;
                    }
                    let name = format!("page {}", self.pages.len());
                    self.pages.push(ctx.load_texture(name, image, TextureOptions::LINEAR));
                }
                Sent::Done => over = true,
                Sent::Failed(why) => {
                    self.pages.clear();
                    self.problem = Some(format!("The report cannot be shown: {why}"));
                    over = true;
                }
            }
        }
        if over {
            self.job = None;
        }
    }
}

fn one(ui: &mut Ui, page: &TextureHandle, size: Vec2, name: &str, theme: &Theme) {
    let edge = Stroke::new(theme.spacing.hair, theme.rule);
    Frame::new().stroke(edge).show(ui, |ui| {
        let response = ui.add(Image::from_texture(page).fit_to_exact_size(size));
        response.widget_info(|| WidgetInfo::labeled(Role::Image, true, name));
    });
    ui.add_space(theme.spacing.panel);
}
