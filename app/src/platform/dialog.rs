//! The system's file dialog, off the window's thread.

use std::{
    path::PathBuf,
    sync::mpsc::{self, Receiver, TryRecvError},
    time::Duration,
};

use super::Stopwatch;

/// A dialog that comes back empty sooner than this was never shown.
///
/// The answers "cancelled" and "there is no dialog on this machine" look the same otherwise;
/// nobody cancels within a third of a second.
const NEVER_SHOWN: Duration = Duration::from_millis(300);

/// What to ask for.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Ask {
    /// An existing file of one of these kinds.
    Open(Vec<FileKind>),
    /// Where to save.
    Save {
        /// Kinds offered.
        kinds: Vec<FileKind>,
        /// File name to start with.
        name: String,
    },
    /// A folder.
    Folder,
}

/// A kind of file, by its endings.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct FileKind {
    /// Name on screen, e.g. "Table".
    pub name: String,
    /// Endings without the dot, e.g. `csv`.
    pub endings: Vec<String>,
}

impl FileKind {
    /// A kind of file from its name and endings.
    #[must_use]
    pub fn new(name: &str, endings: &[&str]) -> Self {
        Self { name: name.to_owned(), endings: endings.iter().map(|ending| (*ending).to_owned()).collect() }
    }
}

/// What came of a dialog.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Answer {
    /// A path was chosen.
    Path(PathBuf),
    /// The person closed the dialog.
    Cancelled,
    /// This machine shows no file dialog.
    NoDialog,
}

/// A dialog that is open, or has been answered.
#[derive(Debug)]
pub struct Dialog(Receiver<Answer>);

impl Dialog {
    /// The answer, once; `None` while the dialog is open.
    #[must_use]
    pub fn answer(&self) -> Option<Answer> {
        match self.0.try_recv() {
            Ok(answer) => Some(answer),
            Err(TryRecvError::Empty) => None,
            // The thread died: as good as no dialog.
            Err(TryRecvError::Disconnected) => Some(Answer::NoDialog),
        }
    }
}

/// Opens a file dialog, starting in `folder`, and calls `wake` when it was answered.
#[must_use]
pub fn ask(what: Ask, folder: Option<PathBuf>, wake: impl FnOnce() + Send + 'static) -> Dialog {
    run(move || show(&what, folder), wake)
}

fn run(show: impl FnOnce() -> Option<PathBuf> + Send + 'static, wake: impl FnOnce() + Send + 'static) -> Dialog {
    let (sender, receiver) = mpsc::channel();
    let work = move || {
        let watch = Stopwatch::start();
        let path = show();
        let answer = sort(path, watch.elapsed());
        // Nobody listens any more when the window is gone.
        let _ = sender.send(answer);
        wake();
    };
    // Without a thread the sender is dropped, which reads as "no dialog".
    let _ = std::thread::Builder::new().name("file dialog".to_owned()).spawn(work);
    Dialog(receiver)
}

fn sort(path: Option<PathBuf>, took: Duration) -> Answer {
    match path {
        Some(path) => Answer::Path(path),
        None if took < NEVER_SHOWN => Answer::NoDialog,
        None => Answer::Cancelled,
    }
}

fn show(what: &Ask, folder: Option<PathBuf>) -> Option<PathBuf> {
    let mut dialog = rfd::FileDialog::new();
    if let Some(folder) = folder {
        dialog = dialog.set_directory(folder);
    }
    match what {
        Ask::Open(kinds) => with_kinds(dialog, kinds).pick_file(),
        Ask::Save { kinds, name } => with_kinds(dialog, kinds).set_file_name(name).save_file(),
        Ask::Folder => dialog.pick_folder(),
    }
}

fn with_kinds(dialog: rfd::FileDialog, kinds: &[FileKind]) -> rfd::FileDialog {
    kinds.iter().fold(dialog, |dialog, kind| dialog.add_filter(&kind.name, &kind.endings))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_empty_answer_is_a_cancel_only_if_somebody_had_time_to_cancel() {
        let path = PathBuf::from("a.csv");
        let (fast, slow) = (Duration::from_millis(20), Duration::from_millis(900));
        assert_eq!(sort(Some(path.clone()), fast), Answer::Path(path));
        assert_eq!(sort(None, fast), Answer::NoDialog);
        assert_eq!(sort(None, slow), Answer::Cancelled);
    }

    #[test]
    fn the_answer_comes_back_from_the_thread_and_wakes_the_window() {
        let (woken, wakes) = mpsc::channel();
        let dialog = run(|| Some(PathBuf::from("a.csv")), move || woken.send(()).expect("listening"));
        wakes.recv_timeout(Duration::from_secs(5)).expect("woken within five seconds");
        assert_eq!(dialog.answer(), Some(Answer::Path("a.csv".into())));
    }

    #[test]
    fn a_dialog_that_dies_is_no_dialog() {
        let (sender, receiver) = mpsc::channel();
        drop(sender);
        assert_eq!(Dialog(receiver).answer(), Some(Answer::NoDialog));
    }
}
