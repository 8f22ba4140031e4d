//! Figures as SVG with real text: the correlation diagram of a sweep, the ladder of one geometry.

mod axes;
pub(crate) mod canvas;
mod electrons;
mod gallery;
mod interaction;
mod key;
mod labels;
mod ladder;
mod measure;
mod metadata;
mod options;
mod panel;
mod pictures;
pub(crate) mod scale;
mod series;
mod series_classes;
mod sheet;
mod sum;
mod support;
pub(crate) mod sweep;
#[cfg(test)]
mod tests;
pub(crate) mod theme;
pub(crate) mod xml;

pub use interaction::interaction_figure;
pub use ladder::levels_figure;
pub use options::{
    ElectronMarks, EnergyUnit, FigureError, FigureOptions, FigureWidth, Follow, Numbering, Theme,
};
pub use pictures::{EndPictures, OrbitalPicture};
pub use series::shape_figure;
pub use support::Support;
pub use sweep::sweep_figure;
