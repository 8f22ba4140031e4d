//! What a user may choose about a figure, and what can be wrong with the choice.

use orbend_structure::HARTREE_IN_EV;

use crate::document::DocumentError;

use super::pictures::EndPictures;
use super::support::Support;

/// Width of the page.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum FigureWidth {
    /// One column of a journal: 84 mm.
    #[default]
    Column,
    /// The full width of a journal page: 174 mm.
    Page,
    /// A slide of 16:9.
    Slide,
}

/// Colours.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Theme {
    /// Colours on white.
    #[default]
    Light,
    /// Colours on a dark ground.
    Dark,
    /// Greys on white: irreps by dash pattern and label alone.
    Grey,
}

/// Unit of the energy axis.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum EnergyUnit {
    /// eV.
    #[default]
    ElectronVolt,
    /// Hartree.
    Hartree,
}

impl EnergyUnit {
    pub(crate) fn of_ev(self, energy: f64) -> f64 {
        match self {
            Self::ElectronVolt => energy,
            Self::Hartree => energy / HARTREE_IN_EV,
        }
    }

    pub(crate) fn to_ev(self, energy: f64) -> f64 {
        match self {
            Self::ElectronVolt => energy,
            Self::Hartree => energy * HARTREE_IN_EV,
        }
    }

    pub(crate) fn symbol(self) -> &'static str {
        match self {
            Self::ElectronVolt => "eV",
            Self::Hartree => "hartree",
        }
    }
}

/// Which orbitals the numbers in labels count.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Numbering {
    /// Core orbitals too, as in correlated work.
    #[default]
    Core,
    /// Valence levels only.
    Valence,
}

/// What a line of the figure keeps from point to point.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Follow {
    /// Its place in the energy order of its irrep: lines of one irrep repel.
    #[default]
    Energy,
    /// Its character: lines of one irrep pass each other where they exchange it.
    Character,
}

/// Where the electrons are drawn on the lines.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub enum ElectronMarks {
    /// At the point where the occupied lines are farthest apart.
    #[default]
    Clear,
    /// At the point nearest to this coordinate, in the coordinate's unit.
    At(f64),
    /// Nowhere.
    None,
}

/// Choices about a figure. The default is a colour figure for one journal column.
#[derive(Clone, Debug, PartialEq)]
pub struct FigureOptions {
    /// Width of the page.
    pub width: FigureWidth,
    /// Colours.
    pub theme: Theme,
    /// Unit of the energy axis.
    pub energy_unit: EnergyUnit,
    /// Numbering of the labels.
    pub numbering: Numbering,
    /// Lowest and highest energy in eV; chosen from the document where none is given.
    pub energies: Option<(f64, f64)>,
    /// Labels of the lines to draw, in any of their names; all where none is given.
    pub lines: Option<Vec<String>>,
    /// What a line keeps from point to point.
    pub follow: Follow,
    /// Where the electrons are drawn.
    pub electrons: ElectronMarks,
    /// The sum as a second panel below, with its lowest place marked.
    pub sum_panel: bool,
    /// Marks at crossings and avoided crossings.
    pub crossings: bool,
    /// Shade between the highest occupied and the lowest empty line.
    pub gap: bool,
    /// Leave out wide empty stretches of the energy axis, with a mark.
    pub axis_breaks: bool,
    /// The formula above the diagram.
    pub title: bool,
    /// A line below that explains the marks.
    pub key: bool,
    /// The range of a shape verdict's angle in the panel of the sum.
    pub support: Option<Support>,
    /// Contour pictures of the orbitals beside the labels.
    pub pictures: Option<EndPictures>,
    /// Start of every `id` in the file: choose another one per figure when several share a page.
    pub id_prefix: String,
}

impl Default for FigureOptions {
    fn default() -> Self {
        Self {
            width: FigureWidth::default(),
            theme: Theme::default(),
            energy_unit: EnergyUnit::default(),
            numbering: Numbering::default(),
            energies: None,
            lines: None,
            follow: Follow::default(),
            electrons: ElectronMarks::default(),
            sum_panel: true,
            crossings: true,
            gap: true,
            axis_breaks: true,
            title: true,
            key: true,
            support: None,
            pictures: None,
            id_prefix: "orbend".to_owned(),
        }
    }
}

/// Why a figure cannot be drawn.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum FigureError {
    /// No line has this name.
    #[error("no line is called \"{name}\"; nearest: {}", nearest.join(", "))]
    UnknownLine {
        /// The name asked for.
        name: String,
        /// Names that exist, nearest first.
        nearest: Vec<String>,
    },
    /// Nothing lies in the energy window.
    #[error(
        "no line between {from} and {to} eV: the lines lie between {lowest:.2} and {highest:.2} eV"
    )]
    EmptyWindow {
        /// Lower end asked for, in eV.
        from: f64,
        /// Upper end asked for, in eV.
        to: f64,
        /// Lowest energy of the lines, in eV.
        lowest: f64,
        /// Highest energy of the lines, in eV.
        highest: f64,
    },
    /// The window's ends are in the wrong order, equal, or not finite.
    #[error(
        "the energy window {from}..{to} eV is empty: the first energy has to be below the second"
    )]
    ReversedWindow {
        /// Lower end asked for, in eV.
        from: f64,
        /// Upper end asked for, in eV.
        to: f64,
    },
    /// An interaction diagram has two sides.
    #[error(
        "{fragments} fragments: an interaction diagram has two sides; name two fragments, or ask for --out FILE.json"
    )]
    NotTwoFragments {
        /// Fragments in the document.
        fragments: usize,
    },
    /// A grid has no lines.
    #[error("a grid over two coordinates has no lines to draw: sweep one coordinate for a figure")]
    Grid,
    /// A correlation diagram needs two points.
    #[error("{points} point(s) make no diagram: give the range at least two points")]
    TooFewPoints {
        /// Points in the document.
        points: usize,
    },
    /// The points do not run in one direction along the coordinate.
    #[error("the coordinate does not run in one direction at point {point}")]
    Unordered {
        /// The first point that turns back, counted from 1.
        point: usize,
    },
    /// The document has no lines or levels.
    #[error("the document holds no lines or levels to draw")]
    Nothing,
    /// Electrons were asked for outside the range.
    #[error("electrons cannot be shown at {at}: the sweep runs from {from} to {to}")]
    ElectronsOutside {
        /// Coordinate asked for.
        at: f64,
        /// First coordinate.
        from: f64,
        /// Last coordinate.
        to: f64,
    },
    /// The shape document is about something else.
    #[error(
        "the shape document has no verdict on {wanted} along this coordinate; it has: {}", held.join(", ")
    )]
    NoVerdict {
        /// Molecule of the sweep with its charge and unpaired electrons.
        wanted: String,
        /// What the document has verdicts on.
        held: Vec<String>,
    },
    /// The document contradicts itself.
    #[error(transparent)]
    Document(#[from] DocumentError),
    /// The data for the metadata element could not be written.
    #[error("the figure's data could not be written: {0}")]
    Metadata(String),
}
