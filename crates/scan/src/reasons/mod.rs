//! Why a level moves: analytic derivatives, the slope ledger, populations and what they say.

mod gradients;
mod ledger;
mod populations;
mod turning;
mod words;

pub use gradients::{Gradients, slope};
pub use ledger::{Change, Mixing, ShellTerm, Slope};
pub use populations::{
    AGAINST, BONDING, Bond, Characters, LONE_PAIR, LineCharacter, METAL_D, ONE_KIND,
};
pub use words::TermGroup;
