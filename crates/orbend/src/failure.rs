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
        Self {
            message: message.into(),
            fix: None,
            code: 2,
        }
    }

    /// Something failed while running: exit code 1.
    pub(crate) fn running(message: impl Into<String>) -> Self {
        Self {
            message: message.into(),
            fix: None,
            code: 1,
        }
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
    /// A message of a library, `cause; fix`.
    pub(crate) fn from_library(error: impl fmt::Display) -> Self {
        let text = error.to_string();
        match text.rsplit_once("; ") {
            Some((cause, fix)) => Self::request(cause).fix(fix),
            None => Self::request(text),
        }
    }

    /// The same message with its place before it: the geometry it is about.
    #[must_use]
    pub(crate) fn within(mut self, geometry: &str) -> Self {
        let place = if geometry == "-" {
            "standard input"
        } else {
            geometry
        };
        self.message = format!("{place}: {}", self.message);
        self
    }

    /// A scan that could not be planned (bad request) or run.
    pub(crate) fn scan(error: &orbend_scan::ScanError) -> Self {
        use orbend_hamiltonian::BasisError;
        use orbend_scan::ScanError;
        match error {
            ScanError::Eigen { .. } | ScanError::Threads { .. } => Self::running(error.to_string()),
            ScanError::Basis(BasisError::MissingElement { .. }) => Self::from_library(error)
                .fix("give them in a TOML file and lay it over the set: --params FILE"),
            _ => Self::from_library(error),
        }
    }

    /// A result that could not become a document.
    pub(crate) fn result(error: &orbend_report::FromScanError) -> Self {
        match error {
            orbend_report::FromScanError::Scan(error) => Self::scan(error),
            other => Self::running(other.to_string()),
        }
    }

    /// A sweep that could not be written as it ran.
    pub(crate) fn stream(error: &orbend_report::StreamError) -> Self {
        match error {
            orbend_report::StreamError::Scan(error) => Self::scan(error),
            other => Self::running(other.to_string()),
        }
    }

    /// A document that could not be written.
    pub(crate) fn document(error: impl fmt::Display) -> Self {
        Self::running(error.to_string())
    }
}
