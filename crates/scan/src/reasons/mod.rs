//! Reasons and the hand-off: what to compute next, and why.
//!
//! [`HandOff`] draws start geometries, states, changes of order and active spaces from a sweep that
//! has run and from shape verdicts of the same atoms.

mod handoff;
mod makeup;
mod roots;
mod sets;
mod space;
mod states;
mod terms;

pub use handoff::{HandOff, OtherCharge, Start, StartKind};
pub use makeup::{BONDING, Makeup};
pub use roots::{RootFlip, RootKind};
pub use space::{ActiveSpace, MOST_FUNCTIONS, SpaceKind, SpaceStop, state_functions};
pub use states::{SMALL_GAP_EV, State};
pub use terms::Term;
