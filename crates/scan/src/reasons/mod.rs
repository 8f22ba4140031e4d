//! Why a level moves, what will distort, and what to compute next.
//!
//! [`Gradients`] are the analytic derivatives and what they are made of. [`HandOff`] draws start
//! geometries, states, changes of order and active spaces from a sweep that has run and from shape
//! verdicts of the same atoms. [`Distortions`] says which vibrations a geometry gives in to.
//! [`FragmentAnalysis`] takes a molecule apart.

mod directions;
mod distortion;
mod fragments;
mod gradients;
mod handoff;
mod ledger;
mod makeup;
mod populations;
mod roots;
mod sets;
mod space;
mod states;
mod terms;
mod turning;
mod words;

pub use distortion::{Distortions, FALL_EV, Hint, HintOrder, MIXING_FALL_EV, Trial};
pub use fragments::{
    Fragment, FragmentAnalysis, FragmentError, FragmentHead, FragmentLine, FragmentOrbital,
    FragmentPair, two_orbital_energy,
};
pub use gradients::{Gradients, slope};
pub use handoff::{HandOff, OtherCharge, Start, StartKind, usual_path};
pub use ledger::{Change, Mixing, ShellTerm, Slope};
pub use makeup::Makeup;
pub use populations::{
    AGAINST, BONDING, Bond, Characters, LONE_PAIR, LineCharacter, METAL_D, ONE_KIND,
};
pub use roots::{RootFlip, RootKind};
pub use space::{ActiveSpace, MOST_FUNCTIONS, SpaceKind, SpaceStop, state_functions};
pub use states::{SMALL_GAP_EV, State};
pub use terms::Term;
pub use words::TermGroup;
