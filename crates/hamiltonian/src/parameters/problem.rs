//! Errors of parameter files, all of them at once, and their text for people.

use std::fmt;
use std::ops::Range;

use annotate_snippets::{AnnotationKind, Level, Renderer, Snippet};

use crate::nearest::nearest;

/// One thing that is wrong in a file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Problem {
    /// Line, from 1.
    pub line: usize,
    /// Column in characters, from 1.
    pub column: usize,
    /// Byte range in the text.
    pub span: Range<usize>,
    /// What is wrong.
    pub cause: String,
    /// What to do about it.
    pub fix: String,
}

/// Everything that is wrong in one file, in the order of the file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct FileProblems {
    /// Name of the file.
    pub file: String,
    /// At least one problem.
    pub problems: Vec<Problem>,
    text: String,
}

impl FileProblems {
    pub(crate) fn new(file: &str, text: &str, found: Vec<(Range<usize>, String, String)>) -> Self {
        let mut problems: Vec<Problem> = found
            .into_iter()
            .map(|(span, cause, fix)| {
                let start = (0..=span.start.min(text.len()))
                    .rev()
                    .find(|at| text.is_char_boundary(*at));
                let before = &text[..start.unwrap_or(0)];
                let line_start = before.rfind('\n').map_or(0, |at| at + 1);
                Problem {
                    line: before.matches('\n').count() + 1,
                    column: before[line_start..].chars().count() + 1,
                    span,
                    cause,
                    fix,
                }
            })
            .collect();
        problems.sort_by(|a, b| (a.span.start, &a.cause).cmp(&(b.span.start, &b.cause)));
        Self {
            file: file.to_owned(),
            problems,
            text: text.to_owned(),
        }
    }

    /// The problems with the lines of the file that they point at, with or without colour.
    pub fn render(&self, colour: bool) -> String {
        let renderer = if colour {
            Renderer::styled()
        } else {
            Renderer::plain()
        };
        let reports: Vec<String> = self
            .problems
            .iter()
            .map(|problem| {
                let end = problem.span.end.min(self.text.len());
                let span = problem.span.start.min(end)..end;
                let report = [Level::ERROR
                    .primary_title(problem.cause.as_str())
                    .element(
                        Snippet::source(self.text.as_str())
                            .path(self.file.as_str())
                            .annotation(AnnotationKind::Primary.span(span)),
                    )
                    .element(Level::HELP.message(problem.fix.as_str()))];
                renderer.render(&report)
            })
            .collect();
        reports.join("\n")
    }
}

impl fmt::Display for FileProblems {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (index, problem) in self.problems.iter().enumerate() {
            if index > 0 {
                writeln!(f)?;
            }
            write!(
                f,
                "{}:{}:{}: {}; {}",
                self.file, problem.line, problem.column, problem.cause, problem.fix
            )?;
        }
        Ok(())
    }
}

/// A parameter set that cannot be had.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum ParameterError {
    /// No set of that name.
    #[error("no parameter set is called `{name}`{}; known: {}", meant(name), super::SET_NAMES.join(", "))]
    UnknownSet {
        /// The name asked for.
        name: String,
    },
    /// A file with problems.
    #[error("{0}")]
    InFile(FileProblems),
    /// A choice such as `S:B` or `S+3d` that the set does not offer.
    #[error("`{choice}`: {cause}; {fix}")]
    Choice {
        /// The choice asked for.
        choice: String,
        /// What is wrong with it.
        cause: String,
        /// What to do about it.
        fix: String,
    },
}

fn meant(name: &str) -> String {
    nearest(name, &super::SET_NAMES)
        .map_or_else(String::new, |word| format!(" (did you mean `{word}`?)"))
}
