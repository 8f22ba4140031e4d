//! Why a level moves: analytic derivatives, the slope ledger, populations and what they say.

mod gradients;
mod ledger;
mod words;

pub use gradients::{Gradients, slope};
pub use ledger::{Change, Mixing, ShellTerm, Slope};
pub use words::TermGroup;
