//! Lines of a project file and the chain of digests through them.
//!
//! `(n:3,by:"…",at:"…",because:None,does:…,chain:"64 hex digits")`: the digest of line n is
//! SHA-256(digest of line n−1 ‖ text of line n before `,chain:`), the header being line 0. The very bytes
//! stored are hashed; nothing is encoded again to check them.

use crate::{
    project::command::{Act, Command},
    quantity::{Moment, Text},
};
use serde::{Deserialize, Serialize};
use sha2::{Digest as _, Sha256};

/// First line of every project file, version 1.
pub const HEADER: &str = "assize project, version 1";

const CHAIN: &str = ",chain:\"";

/// A SHA-256 digest.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Digest(pub [u8; 32]);

impl Digest {
    /// The digest of some bytes.
    #[must_use]
    pub fn of(bytes: &[u8]) -> Self {
        Self(Sha256::digest(bytes).into())
    }

    fn then(self, text: &str) -> Self {
        let mut hash = Sha256::new();
        hash.update(self.0);
        hash.update(text.as_bytes());
        Self(hash.finalize().into())
    }

    /// 64 hexadecimal digits.
    #[must_use]
    pub fn hex(self) -> String {
        self.0.iter().map(|b| format!("{b:02x}")).collect()
    }

    /// First and last digits, enough to compare by eye: `3e91 77ac … 0b5d`.
    #[must_use]
    pub fn short(self) -> String {
        let hex = self.hex();
        format!("{} {} … {}", &hex[..4], &hex[4..8], &hex[60..])
    }
}

/// The digest before the first entry.
#[must_use]
pub fn start() -> Digest {
    Digest::of(HEADER.as_bytes())
}

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct Line {
    n: u32,
    by: Text,
    at: Moment,
    because: Option<Text>,
    does: Command,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
#[expect(dead_code, reason = "`chain` is read from the bytes, not from this field")]
struct StoredLine {
    n: u32,
    by: Text,
    at: Moment,
    because: Option<Text>,
    does: Command,
    chain: String,
}

/// An act as the text of its line (without line feed), and the digest after it.
///
/// # Errors
/// [`FileProblem::Unwritable`] if the act cannot be written, e.g. it holds a number that is not finite.
pub fn encode(number: u32, act: &Act, before: Digest) -> Result<(String, Digest), FileProblem> {
    let line =
        Line { n: number, by: act.by.clone(), at: act.at, because: act.because.clone(), does: act.command.clone() };
    let text = ron::to_string(&line).map_err(|e| FileProblem::Unwritable { reason: e.to_string() })?;
    let body = text.strip_suffix(')').unwrap_or(&text);
    let digest = before.then(body);
    Ok((format!("{body}{CHAIN}{}\")", digest.hex()), digest))
}

/// What is wrong with a project file.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
pub enum FileProblem {
    /// Nothing in it.
    #[error("the file is empty; a project starts with the line \"{HEADER}\"")]
    Empty,
    /// Another kind of file.
    #[error("line 1: {found:?} is not the start of a project; expected \"{HEADER}\"")]
    NotAProject {
        /// Start of what was found.
        found: String,
    },
    /// A line that cannot be read.
    #[error("line {line}, column {column}: {reason}")]
    Unreadable {
        /// Line in the file.
        line: usize,
        /// Column in that line.
        column: usize,
        /// What the reader says.
        reason: String,
    },
    /// The chain does not hold.
    #[error("line {line}: the entry or one before it was changed after it was written (its digest does not match)")]
    Changed {
        /// First line that does not match.
        line: usize,
    },
    /// Numbers out of order.
    #[error("line {line}: entry {found} where entry {expected} belongs; entries were removed, added or moved")]
    OutOfOrder {
        /// Line.
        line: usize,
        /// Number found.
        found: u32,
        /// Number expected.
        expected: u32,
    },
    /// An entry that cannot be applied.
    #[error("line {line}: the entry cannot be applied: {reason}")]
    Refused {
        /// Line.
        line: usize,
        /// Why.
        reason: String,
    },
    /// Bytes that are no text.
    #[error("byte {at}: not UTF-8 text")]
    NotText {
        /// Position.
        at: usize,
    },
    /// Something that cannot be written.
    #[error("the entry cannot be written: {reason}")]
    Unwritable {
        /// Why.
        reason: String,
    },
}

/// Entries read from bytes, the digest after the last one, and the rest of a line that was cut short.
#[derive(Debug, Clone, PartialEq)]
pub struct Loaded {
    /// The acts in order.
    pub acts: Vec<Act>,
    /// Digest after each act.
    pub digests: Vec<Digest>,
    /// Bytes of whole, good lines.
    pub good_bytes: usize,
    /// A last line without line feed, as left by a loss of power while writing.
    pub torn: Option<String>,
}

/// Reads a project file.
///
/// A last line without its line feed was never acknowledged: it is reported in `torn`, not an error.
///
/// # Errors
/// [`FileProblem`] with the line of the first thing that is wrong.
pub fn decode(bytes: &[u8]) -> Result<Loaded, FileProblem> {
    let text = std::str::from_utf8(bytes).map_err(|e| FileProblem::NotText { at: e.valid_up_to() })?;
    if text.is_empty() {
        return Err(FileProblem::Empty);
    }
    let not_ours = |first: &str| FileProblem::NotAProject { found: first.chars().take(40).collect() };
    let rest = text.strip_prefix(HEADER).ok_or_else(|| not_ours(text.lines().next().unwrap_or_default()))?;
    let rest = rest.strip_prefix('\n').ok_or_else(|| not_ours(text.lines().next().unwrap_or_default()))?;
    let mut loaded = Loaded { acts: Vec::new(), digests: Vec::new(), good_bytes: HEADER.len() + 1, torn: None };
    let mut before = start();
    for (index, piece) in rest.split_inclusive('\n').enumerate() {
        let Some(line) = piece.strip_suffix('\n') else {
            loaded.torn = Some(piece.to_owned());
            break;
        };
        let (act, digest) = read_line(index, line, before)?;
        before = digest;
        loaded.acts.push(act);
        loaded.digests.push(digest);
        loaded.good_bytes += piece.len();
    }
    Ok(loaded)
}

fn read_line(index: usize, line: &str, before: Digest) -> Result<(Act, Digest), FileProblem> {
    let number = index + 2;
    let changed = FileProblem::Changed { line: number };
    let (body, tail) = line.rsplit_once(CHAIN).ok_or(changed.clone())?;
    let digest = before.then(body);
    if tail.strip_suffix("\")") != Some(digest.hex().as_str()) {
        return Err(changed);
    }
    let stored: StoredLine = ron::from_str(line).map_err(|e| FileProblem::Unreadable {
        line: number,
        column: e.span.start.col,
        reason: e.code.to_string(),
    })?;
    let expected = u32::try_from(index + 1).unwrap_or(u32::MAX);
    if stored.n != expected {
        return Err(FileProblem::OutOfOrder { line: number, found: stored.n, expected });
    }
    Ok((Act { by: stored.by, at: stored.at, because: stored.because, command: stored.does }, digest))
}
