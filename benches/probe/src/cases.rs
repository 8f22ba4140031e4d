//! The sweeps that are timed.

use std::error::Error;

use orbend_scan::{Request, SweepPlan};
use orbend_structure::{
    Coordinate, CoordinateKind, Formula, Molecule, XyzOptions, ideal_geometry, read_xyz,
};

const BENZENE: &str = include_str!("../../../tests/data/geometries/benzene.xyz");

/// A molecule and what moves in it.
pub(crate) struct Case {
    molecule: Molecule,
    kind: CoordinateKind,
    words: &'static str,
}

impl Case {
    /// `ah2` (H2S, 6 functions, C2v), `ab2` (SiF2, 12, C2v), `ab3` (PF3, 16, C3v) or `benzene`
    /// (30, D6h; all C–H bonds stretched).
    pub(crate) fn named(name: &str) -> Result<Self, Box<dyn Error>> {
        let ideal = |formula: &str| -> Result<Molecule, Box<dyn Error>> {
            Ok(ideal_geometry(&Formula::parse(formula)?, None, &[])?.molecule)
        };
        let (molecule, kind, words) = match name {
            "ah2" => (ideal("H2S")?, CoordinateKind::Bend, "2-1-3=90..172:0.02"),
            "ab2" => (ideal("SiF2")?, CoordinateKind::Bend, "2-1-3=90..172:0.02"),
            "ab3" => (ideal("PF3")?, CoordinateKind::Pyramid, "1=90..110:0.005"),
            "benzene" => {
                let molecule = read_xyz(BENZENE, &XyzOptions::default())?
                    .remove(0)
                    .molecule;
                (molecule, CoordinateKind::Stretch, "1-7=1.0..1.2:0.0001")
            }
            other => return Err(format!("{other}: ah2, ab2, ab3 or benzene").into()),
        };
        Ok(Self {
            molecule,
            kind,
            words,
        })
    }

    /// Planned anew each time: running a plan uses it up.
    pub(crate) fn plan(&self) -> Result<SweepPlan, Box<dyn Error>> {
        let coordinate = Coordinate::parse(self.kind, self.words)?;
        Ok(Request::new(self.molecule.clone())
            .coordinate(coordinate)
            .plan()?)
    }
}
