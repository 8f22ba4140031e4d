//! The coordinates of the verdicts: how far from the first form, and at which angle.

use orbend_structure::{Coordinate, CoordinateError, CoordinateKind, Range};

use super::centre::Centre;

/// What moves.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum MotionKind {
    /// The angle at a centre with two ligands, 180° to 70°.
    Bend,
    /// Three ligands out of the plane, tilt τ 0° to 45°.
    Pyramid,
    /// Four ligands between square-planar (two angles of 180°) and tetrahedral, in D2d.
    Squash,
    /// Both angles of a chain X–A–A–X, 180° to 90°, to opposite sides.
    Ends,
    /// A torsion between two forms, both symmetric.
    Twist,
    /// A coordinate and range that the user chose, without known symmetric forms.
    Free(CoordinateKind),
}

/// The motion along which the shape is judged; bond lengths stay.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Motion {
    /// What moves.
    pub kind: MotionKind,
    /// Value (degrees or Å) of the first form.
    start: f64,
    /// Largest distortion, degrees or Å.
    length: f64,
    /// Whether the value rises with the distortion.
    rising: bool,
    /// Points of the nominal curves and of the ensemble's.
    points: [usize; 2],
}

/// How a curve goes on beyond its ends.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Beyond {
    /// Even about the first point.
    Start,
    /// Even about the first and the last point.
    Both,
    /// Unknown.
    Open,
}

impl Motion {
    const fn new(kind: MotionKind, start: f64, length: f64, points: [usize; 2]) -> Self {
        Self {
            kind,
            start,
            length,
            rising: matches!(kind, MotionKind::Twist),
            points,
        }
    }

    /// The bend of a centre with two ligands.
    pub const BEND: Self = Self::new(MotionKind::Bend, 180.0, 110.0, [23, 12]);
    /// The pyramid of a centre with three.
    pub const PYRAMID: Self = Self::new(MotionKind::Pyramid, 120.0, 45.0, [16, 10]);
    /// Square-planar to tetrahedral.
    pub const SQUASH: Self = Self::new(MotionKind::Squash, 180.0, 110.0, [23, 12]);
    /// Both ends of a straight chain.
    pub const ENDS: Self = Self::new(MotionKind::Ends, 180.0, 90.0, [19, 10]);

    /// The torsion from 0° to the other symmetric form: 180° between single ligands (cis, trans),
    /// 90° between planar ends (planar, perpendicular), 60° between threefold ends (eclipsed,
    /// staggered).
    pub(crate) const fn twist(length: f64) -> Self {
        Self::new(MotionKind::Twist, 0.0, length, [19, 10])
    }

    /// The motion of a coordinate that the user gave: one of the known ones where the range starts
    /// or ends at its symmetric form, otherwise a free one. `known` is what the molecule would have
    /// without it.
    pub(crate) fn given(coordinate: &Coordinate, two_ligands: bool, known: Option<Self>) -> Self {
        let range = coordinate.range;
        let (low, high) = (range.from.min(range.to), range.from.max(range.to));
        let points = range.points().clamp(5, 201);
        let points = [points, points.min(13)];
        let at = |value: f64, wanted: f64| (value - wanted).abs() < 1e-9;
        let turn = known.filter(|motion| motion.kind == MotionKind::Twist);
        match (coordinate.kind, turn) {
            (CoordinateKind::Bend, _) if at(high, 180.0) && two_ligands => {
                Self::new(MotionKind::Bend, 180.0, 180.0 - low, points)
            }
            (CoordinateKind::Pyramid, _) if at(high, 120.0) => {
                let half = libm::sin(0.5 * low.to_radians());
                let tilt = libm::acos((half * 2.0 / 3f64.sqrt()).min(1.0)).to_degrees();
                Self::new(MotionKind::Pyramid, 120.0, tilt, points)
            }
            (CoordinateKind::Twist, Some(turn)) if at(low, 0.0) && at(high, turn.length) => {
                Self { points, ..turn }
            }
            (kind, _) => Self {
                kind: MotionKind::Free(kind),
                start: range.from,
                length: high - low,
                rising: range.to > range.from,
                points,
            },
        }
    }

    /// Distortions (degrees or Å, from 0) of the nominal curves, or of the ensemble's.
    pub(crate) fn grid(self, fine: bool) -> Vec<f64> {
        let points = self.points[usize::from(!fine)];
        (0..points)
            .map(|index| self.length * index as f64 / (points - 1) as f64)
            .collect()
    }

    /// Distance of two points of the grid.
    pub(crate) fn step(self, fine: bool) -> f64 {
        self.length / (self.points[usize::from(!fine)] - 1) as f64
    }

    pub(crate) fn beyond(self) -> Beyond {
        match self.kind {
            MotionKind::Twist => Beyond::Both,
            MotionKind::Free(_) => Beyond::Open,
            _ => Beyond::Start,
        }
    }

    /// The value (degrees or Å) at a distortion: ligand–centre–ligand angle, for the pyramid
    /// α = 2 asin(cos τ √3/2), or torsion.
    pub fn angle(self, distortion: f64) -> f64 {
        match self.kind {
            MotionKind::Pyramid if distortion.abs() < 1e-12 => 120.0,
            MotionKind::Pyramid => {
                let tilt = distortion.to_radians();
                (2.0 * libm::asin(libm::cos(tilt) * 3f64.sqrt() / 2.0)).to_degrees()
            }
            _ if self.rising => self.start + distortion,
            _ => self.start - distortion,
        }
    }

    /// Largest distortion, degrees or Å.
    pub fn length(self) -> f64 {
        self.length
    }

    /// The distortion at which a line is asked whether it responds: 120°, a tilt of 24°, 110° for
    /// four ligands, the other end elsewhere.
    pub fn reference(self) -> f64 {
        let usual: f64 = match self.kind {
            MotionKind::Bend | MotionKind::Ends => 60.0,
            MotionKind::Pyramid => 24.0,
            MotionKind::Squash => 70.0,
            MotionKind::Twist | MotionKind::Free(_) => self.length,
        };
        usual.min(self.length)
    }

    /// Whether the frontier line has a vote: its veto was calibrated on bends and pyramids only.
    pub(crate) fn frontier_votes(self) -> bool {
        matches!(self.kind, MotionKind::Bend | MotionKind::Pyramid)
    }

    /// Whether there is one symmetric form, at the first point.
    pub(crate) fn one_sided(self) -> bool {
        self.beyond() == Beyond::Start
    }

    /// `linear`, `planar`, `square-planar`, `cis`, `eclipsed` …: the first form.
    pub fn symmetric_word(self) -> &'static str {
        match self.kind {
            MotionKind::Bend | MotionKind::Ends => "linear",
            MotionKind::Pyramid => "planar",
            MotionKind::Squash => "square-planar",
            MotionKind::Twist if self.length > 135.0 => "cis",
            MotionKind::Twist if self.length > 75.0 => "planar",
            MotionKind::Twist => "eclipsed",
            MotionKind::Free(_) => "start",
        }
    }

    /// `bent`, `pyramidal`, `tetrahedral`, `trans-bent`, `skew`: between the forms.
    pub fn distorted_word(self) -> &'static str {
        match self.kind {
            MotionKind::Bend => "bent",
            MotionKind::Ends => "trans-bent",
            MotionKind::Pyramid => "pyramidal",
            MotionKind::Squash => "tetrahedral",
            MotionKind::Twist => "skew",
            MotionKind::Free(_) => "inside",
        }
    }

    /// `trans`, `perpendicular`, `staggered`: the last form, where it is one.
    pub fn opposite_word(self) -> &'static str {
        match self.kind {
            MotionKind::Twist if self.length > 135.0 => "trans",
            MotionKind::Twist if self.length > 75.0 => "perpendicular",
            MotionKind::Twist => "staggered",
            _ => "end",
        }
    }

    /// The coordinates of the path; more than one move in step.
    pub(crate) fn coordinates(self, centre: &Centre) -> Result<Vec<Coordinate>, CoordinateError> {
        let [first, second] = centre.ends;
        let (kind, atoms): (_, Vec<Vec<usize>>) = match self.kind {
            MotionKind::Bend | MotionKind::Ends => {
                (CoordinateKind::Bend, vec![vec![first, centre.atom, second]])
            }
            MotionKind::Pyramid => (CoordinateKind::Pyramid, vec![vec![centre.atom]]),
            MotionKind::Squash => (CoordinateKind::Bend, centre.pairs()),
            MotionKind::Twist => (
                CoordinateKind::Twist,
                vec![vec![first, centre.atom, centre.other, second]],
            ),
            MotionKind::Free(kind) => (kind, vec![centre.named.clone()]),
        };
        let (from, to) = (self.angle(0.0), self.angle(self.length));
        let range = Range::with_points(from, to, self.points[1]).unwrap_or(Range {
            from,
            to,
            step: (from - to).abs(),
        });
        atoms
            .into_iter()
            .map(|atoms| Coordinate::new(kind, atoms, range, false))
            .collect()
    }
}
