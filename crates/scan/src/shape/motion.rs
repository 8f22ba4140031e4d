//! The coordinates of the verdicts: how far from the symmetric form, and at which angle.

use orbend_structure::{Coordinate, CoordinateError, CoordinateKind, Range};

use super::centre::Centre;

/// The motion along which the shape is judged; bond lengths stay.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Motion {
    /// The angle at the centre, 180° to 70°; the distortion is 180° minus the angle.
    Bend,
    /// Three ligands out of the plane; the distortion is their tilt τ, 0° to 45°.
    Pyramid,
}

impl Motion {
    /// Distortions (degrees, from 0) of the nominal curves, or of the ensemble's.
    pub(crate) fn grid(self, fine: bool) -> Vec<f64> {
        let (step, points) = match (self, fine) {
            (Self::Bend, true) => (5.0, 23),
            (Self::Bend, false) => (10.0, 12),
            (Self::Pyramid, true) => (3.0, 16),
            (Self::Pyramid, false) => (5.0, 10),
        };
        (0..points).map(|index| step * f64::from(index)).collect()
    }

    /// The angle (degrees) at a distortion: ligand–centre–ligand, for the pyramid
    /// α = 2 asin(cos τ √3/2).
    pub fn angle(self, distortion: f64) -> f64 {
        match self {
            Self::Bend => 180.0 - distortion,
            Self::Pyramid if distortion.abs() < 1e-12 => 120.0,
            Self::Pyramid => {
                let tilt = distortion.to_radians();
                (2.0 * libm::asin(libm::cos(tilt) * 3f64.sqrt() / 2.0)).to_degrees()
            }
        }
    }

    /// The distortion at which a line is asked whether it responds: 120°, or a tilt of 24°.
    pub fn reference(self) -> f64 {
        match self {
            Self::Bend => 60.0,
            Self::Pyramid => 24.0,
        }
    }

    /// `linear` or `planar`.
    pub fn symmetric_word(self) -> &'static str {
        match self {
            Self::Bend => "linear",
            Self::Pyramid => "planar",
        }
    }

    /// `bent` or `pyramidal`.
    pub fn distorted_word(self) -> &'static str {
        match self {
            Self::Bend => "bent",
            Self::Pyramid => "pyramidal",
        }
    }

    /// The coordinate along which this motion is drawn as a diagram: the angle from 80° to 180° in
    /// steps of 2°, or the pyramid from 90° to 120° in steps of 1°.
    ///
    /// # Errors
    /// None for a centre that was found.
    pub fn path(self, centre: &Centre) -> Result<Coordinate, CoordinateError> {
        let (kind, atoms, from, to, step) = match self {
            Self::Bend => (
                CoordinateKind::Bend,
                vec![centre.ligands[0], centre.atom, centre.ligands[1]],
                80.0,
                180.0,
                2.0,
            ),
            Self::Pyramid => (CoordinateKind::Pyramid, vec![centre.atom], 90.0, 120.0, 1.0),
        };
        Coordinate::new(kind, atoms, Range { from, to, step }, false)
    }

    /// The coordinate of the path.
    pub(crate) fn coordinate(self, centre: &Centre) -> Result<Coordinate, CoordinateError> {
        let last = self.grid(false).last().copied().unwrap_or(45.0);
        let (kind, atoms, from, points) = match self {
            Self::Bend => (
                CoordinateKind::Bend,
                vec![centre.ligands[0], centre.atom, centre.ligands[1]],
                180.0,
                12,
            ),
            Self::Pyramid => (CoordinateKind::Pyramid, vec![centre.atom], 120.0, 10),
        };
        let to = self.angle(last);
        let range = Range::with_points(from, to, points).unwrap_or(Range {
            from,
            to,
            step: (from - to).abs(),
        });
        Coordinate::new(kind, atoms, range, false)
    }
}
