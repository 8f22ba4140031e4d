//! Why a level moves: analytic derivatives and what they are made of.

mod gradients;

pub use gradients::{Gradients, slope};
