//! Warnings as values: what was noticed, and what the user can do about it.

use serde::Serialize;

/// Something the user should know about a result that was still produced.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct Warning {
    /// A short stable key, for programs (`no_deck_samples`, ...).
    pub key: &'static str,
    /// What was noticed, as a sentence for people.
    pub cause: String,
    /// What would settle it; empty when nothing is to be done.
    pub action: String,
}

impl Warning {
    /// A warning with its stable `key`, its `cause` and the `action` that settles it.
    pub fn new(key: &'static str, cause: impl Into<String>, action: impl Into<String>) -> Self {
        Self { key, cause: cause.into(), action: action.into() }
    }
}

impl std::fmt::Display for Warning {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        if self.action.is_empty() {
            write!(f, "{}", self.cause)
        } else {
            write!(f, "{} ({})", self.cause, self.action)
        }
    }
}
