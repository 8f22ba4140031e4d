//! What the figure and the terminal drawing share: curves, bundles of lines, ticks, label placing.

pub(crate) mod bundle;
pub(crate) mod curve;
pub(crate) mod nearest;
pub(crate) mod spread;
pub(crate) mod ticks;
pub(crate) mod wording;
