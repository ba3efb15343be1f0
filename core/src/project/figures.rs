//! Figures: every number that window, command line and report show, made once.

/// One figure with the text in which all three presentations show it.
#[derive(Debug, Clone, PartialEq)]
pub struct Figure {
    /// Stable name, e.g. `coefficient.b0`, `residual_sd`.
    pub key: String,
    /// What stands beside it, e.g. `worst read-back`.
    pub label: String,
    /// The number behind it, in the declared unit; `None` when the text is all there is.
    pub value: Option<f64>,
    /// The figure as shown, without unit.
    pub text: String,
    /// Its unit; may be empty.
    pub unit: String,
}

impl Figure {
    /// A figure.
    #[must_use]
    pub fn new(key: &str, label: &str, value: Option<f64>, text: String, unit: &str) -> Self {
        Self { key: key.to_owned(), label: label.to_owned(), value, text, unit: unit.to_owned() }
    }

    /// Text and unit together.
    #[must_use]
    pub fn shown(&self) -> String {
        if self.unit.is_empty() { self.text.clone() } else { format!("{} {}", self.text, self.unit) }
    }
}

/// The figure with this key, if it is there.
#[must_use]
pub fn find<'a>(figures: &'a [Figure], key: &str) -> Option<&'a Figure> {
    figures.iter().find(|f| f.key == key)
}
