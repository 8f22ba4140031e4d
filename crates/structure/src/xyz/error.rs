//! Errors of a file: line, column, cause, fix.

use thiserror::Error;

/// What is wrong with an XYZ file, and where.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error("line {line}, column {column}: {cause}; {fix}")]
pub struct XyzError {
    /// Line, counted from 1.
    pub line: usize,
    /// Column in characters, counted from 1.
    pub column: usize,
    /// What is wrong.
    pub cause: String,
    /// What to do.
    pub fix: String,
}

impl XyzError {
    pub(crate) fn new(
        line: usize,
        column: usize,
        cause: impl Into<String>,
        fix: impl Into<String>,
    ) -> Self {
        Self {
            line,
            column,
            cause: cause.into(),
            fix: fix.into(),
        }
    }
}

/// The column (from 1, in characters) of `word`, a slice of `text`.
pub(crate) fn column_of(text: &str, word: &str) -> usize {
    let byte = (word.as_ptr() as usize).saturating_sub(text.as_ptr() as usize);
    text.get(..byte)
        .map_or(1, |before| before.chars().count() + 1)
}

/// A word short and harmless enough for a message.
pub(crate) fn shown(word: &str) -> String {
    let clean = word
        .chars()
        .map(|c| if c.is_control() { '\u{fffd}' } else { c });
    let mut text: String = clean.clone().take(24).collect();
    if clean.count() > 24 {
        text.push('…');
    }
    text
}
