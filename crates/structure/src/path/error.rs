//! Why a path is refused.

use crate::coordinate::CoordinateError;
use crate::molecule::MoleculeError;
use thiserror::Error;

/// A path that cannot be followed. Atoms in messages are counted from 1.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum PathError {
    /// The coordinate itself is impossible.
    #[error(transparent)]
    Coordinate(#[from] CoordinateError),
    /// A geometry is not usable.
    #[error(transparent)]
    Molecule(#[from] MoleculeError),
    /// No coordinate was given.
    #[error("there is no coordinate to move along; give a bend, stretch, twist or pyramid")]
    NoCoordinate,
    /// An atom number beyond the last atom.
    #[error(
        "{coordinate}: there is no atom {atom}, the molecule has {atoms}; atoms are counted from 1"
    )]
    NoSuchAtom {
        /// Name of the coordinate.
        coordinate: String,
        /// The atom named.
        atom: usize,
        /// Atoms of the molecule.
        atoms: usize,
    },
    /// A permutation that is none.
    #[error(
        "equivalence {index} is not a permutation of the {atoms} atoms that keeps the elements"
    )]
    NotAPermutation {
        /// Which one, counted from 1.
        index: usize,
        /// Atoms of the molecule.
        atoms: usize,
    },
    /// Two atoms that should be bonded are not.
    #[error(
        "{coordinate}: {first} and {second} are not bonded; name atoms that are bonded ({bonds})"
    )]
    NotBonded {
        /// Name of the coordinate.
        coordinate: String,
        /// First atom.
        first: String,
        /// Second atom.
        second: String,
        /// The bonds that there are.
        bonds: String,
    },
    /// A bond in a ring, which cannot move alone.
    #[error(
        "{coordinate}: the bond {first}–{second} lies in a ring, which cannot open along this coordinate; name a bond outside the ring, or give a path to another geometry"
    )]
    Ring {
        /// Name of the coordinate.
        coordinate: String,
        /// First atom.
        first: String,
        /// Second atom.
        second: String,
    },
    /// A torsion whose atoms are in line.
    #[error(
        "{coordinate}: undefined at {at}, because {first}, {second} and {third} are in line; name other atoms or keep them out of line"
    )]
    InLine {
        /// Name of the coordinate.
        coordinate: String,
        /// Where on the path.
        at: String,
        /// First atom.
        first: String,
        /// Middle atom.
        second: String,
        /// Last atom.
        third: String,
    },
    /// A pyramid at an atom without three neighbours.
    #[error(
        "{coordinate}: {atom} has {count} bonded neighbours, a pyramid needs three; name a three-coordinate atom"
    )]
    NotThreeCoordinate {
        /// Name of the coordinate.
        coordinate: String,
        /// The atom.
        atom: String,
        /// Its neighbours.
        count: usize,
    },
    /// The atoms of a torsion do not hang on the two ends of its middle bond.
    #[error(
        "{coordinate}: {atom} does not hang on the {end} side of the middle bond; name the four atoms in their order along the chain"
    )]
    WrongSide {
        /// Name of the coordinate.
        coordinate: String,
        /// The atom.
        atom: String,
        /// Its expected side.
        end: String,
    },
    /// Two atoms meet on the path.
    #[error(
        "{first} and {second} come to {distance:.3} Å (closer than 0.2 Å) at {at}; shorten the range"
    )]
    Clash {
        /// First atom.
        first: String,
        /// Second atom.
        second: String,
        /// Distance, Å.
        distance: f64,
        /// Where on the path.
        at: String,
    },
    /// Coordinates that cannot have their values at once.
    #[error(
        "{coordinate}: its value cannot be set together with the other coordinates ({value} instead of {wanted} at {at}); name coordinates that do not move one another"
    )]
    NotIndependent {
        /// Name of the coordinate.
        coordinate: String,
        /// What was reached.
        value: f64,
        /// What was asked for.
        wanted: f64,
        /// Where on the path.
        at: String,
    },
    /// Too many points.
    #[error("the path has {points:.3e} points; at most 10 million are computed, so enlarge a step")]
    TooManyPoints {
        /// Number of points.
        points: f64,
    },
    /// Coordinates that move in step but have different numbers of points.
    #[error(
        "{coordinate} has {points} points, but {other} has {other_points}; coordinates that move in step need the same number"
    )]
    PointCounts {
        /// Name of the coordinate.
        coordinate: String,
        /// Its points.
        points: usize,
        /// Name of the first coordinate.
        other: String,
        /// Its points.
        other_points: usize,
    },
    /// A value outside the path.
    #[error("{value} lies outside {from}..{to} of {axis}")]
    Outside {
        /// Name of the axis.
        axis: String,
        /// The value.
        value: f64,
        /// Smaller end.
        from: f64,
        /// Larger end.
        to: f64,
    },
    /// Wrong number of values or positions handed over.
    #[error("{given} {what} were given, {needed} are needed")]
    Shape {
        /// Which list.
        what: &'static str,
        /// Its length.
        given: usize,
        /// The length needed.
        needed: usize,
    },
    /// Frames that do not belong to one path.
    #[error("frame {frame}: {cause}; {fix}")]
    Frame {
        /// The frame, counted from 1.
        frame: usize,
        /// What is wrong.
        cause: String,
        /// What to do.
        fix: String,
    },
    /// Two geometries that cannot be joined.
    #[error("the two geometries cannot be joined: {cause}; {fix}")]
    Toward {
        /// What is wrong.
        cause: String,
        /// What to do.
        fix: String,
    },
    /// Positions that have no finite derivative.
    #[error("at {at} there is no derivative along {axis}: {cause}; ask at another value")]
    NoSpeed {
        /// The axis.
        axis: String,
        /// The parameter values, with names.
        at: String,
        /// Why.
        cause: String,
    },
}
