//! What the program has to say outside the evaluation: files, refusals, what was opened.

use assize_core::project::evaluate::Severity;

/// One message.
#[derive(Debug, Clone, PartialEq)]
pub struct Message {
    /// How much it matters.
    pub severity: Severity,
    /// What happened.
    pub text: String,
    /// What to do about it; may be empty.
    pub hint: String,
}

impl Message {
    /// Something that stopped.
    #[must_use]
    pub fn stop(text: impl Into<String>, hint: impl Into<String>) -> Self {
        Self { severity: Severity::Stop, text: text.into(), hint: hint.into() }
    }

    /// Something to be looked at.
    #[must_use]
    pub fn look(text: impl Into<String>, hint: impl Into<String>) -> Self {
        Self { severity: Severity::Look, text: text.into(), hint: hint.into() }
    }

    /// Something worth knowing.
    #[must_use]
    pub fn note(text: impl Into<String>) -> Self {
        Self { severity: Severity::Note, text: text.into(), hint: String::new() }
    }
}

/// Messages in order of arrival; a person closes them, or the next step does.
#[derive(Debug, Clone, Default)]
pub struct Messages {
    list: Vec<Message>,
}

impl Messages {
    /// Says something, once.
    pub fn say(&mut self, message: Message) {
        self.list.retain(|m| m.text != message.text);
        self.list.push(message);
    }

    /// All of them, newest last.
    #[must_use]
    pub fn all(&self) -> &[Message] {
        &self.list
    }

    /// Closes the one with this text.
    pub fn close(&mut self, text: &str) {
        self.list.retain(|m| m.text != text);
    }

    /// After a step that went well, what only concerned the step before is closed.
    pub fn close_passing(&mut self) {
        self.list.retain(|m| m.severity == Severity::Stop);
    }

    /// Closes all.
    pub fn clear(&mut self) {
        self.list.clear();
    }
}
