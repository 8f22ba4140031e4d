//! Parameter sets: what they hold, how they are read, overlaid, chosen from and fingerprinted.

mod element;
mod element_reader;
mod fingerprint;
mod problem;
mod reader;
mod set;
mod shell_name;

pub use element::{Checked, Confidence, ElementParameters, ShellParameters, Variant};
pub use problem::{FileProblems, ParameterError, Problem};
pub use set::{DEFAULT_SET, ParameterSet, SET_NAMES};
pub use shell_name::ShellName;
