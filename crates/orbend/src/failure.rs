//! What ends a run, and the exit code that says so.

use std::fmt;

/// A message with its place, cause and fix, and the exit code.
#[derive(Debug)]
pub(crate) struct Failure {
    message: String,
    fix: Option<String>,
    code: u8,
}

impl Failure {
    /// Something is wrong with the request or the input: exit code 2.
    pub(crate) fn request(message: impl Into<String>) -> Self {
        Self { message: message.into(), fix: None, code: 2 }
    }

    /// Something failed while running: exit code 1.
    pub(crate) fn running(message: impl Into<String>) -> Self {
        Self { message: message.into(), fix: None, code: 1 }
    }

    /// What the user can do about it.
    #[must_use]
    pub(crate) fn fix(mut self, fix: impl Into<String>) -> Self {
        self.fix = Some(fix.into());
        self
    }

    /// The exit code.
    pub(crate) fn code(&self) -> u8 {
        self.code
    }
}

impl fmt::Display for Failure {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}", self.message)?;
        if let Some(fix) = &self.fix {
            write!(f, "\n  fix: {fix}")?;
        }
        Ok(())
    }
}

impl Failure {
    /// A scan that could not be planned (bad request) or run.
    pub(crate) fn scan(error: &orbend_scan::ScanError) -> Self {
        use orbend_scan::ScanError;
        match error {
            ScanError::Eigen { .. } | ScanError::Threads { .. } => Self::running(error.to_string()),
            _ => Self::request(error.to_string()),
        }
    }

    /// A document that could not be written.
    pub(crate) fn document(error: impl fmt::Display) -> Self {
        Self::running(error.to_string())
    }
}
