//! What a shape document says about the coordinate of a sweep.

use orbend_structure::Formula;

use crate::document::{Case, CoordinateRecord, MoleculeRecord, ShapeDocument, SweepDocument};
use crate::draw::ticks::short;
use crate::draw::wording::{bracketed_charge, heading_formula};

use super::options::FigureError;

/// A verdict as the panel of the sum shows it; angles in degrees.
#[derive(Clone, Debug, PartialEq)]
pub struct Support {
    /// `bent`, `linear`, …
    pub verdict: String,
    /// Share of the perturbed calculations that agree, 0 to 1.
    pub share: Option<f64>,
    /// Angle of the lowest point.
    pub angle: Option<f64>,
    /// 10 to 90 % range of the angle over the perturbed calculations.
    pub range: Option<(f64, f64)>,
}

impl Support {
    /// The verdict on the molecule of a sweep, for its charge, unpaired electrons and coordinate.
    ///
    /// # Errors
    /// [`FigureError::NoVerdict`] where the shape document is about other molecules or coordinates.
    pub fn of(shape: &ShapeDocument, sweep: &SweepDocument) -> Result<Self, FigureError> {
        let wanted = &sweep.molecule;
        let same = |case: &&Case| {
            let coordinate = case.coordinate.as_ref().or(shape.coordinate.as_ref());
            elements(shape, case) == sorted(wanted.elements.clone())
                && case.charge == wanted.charge
                && case.unpaired == wanted.unpaired
                && coordinate
                    .zip(sweep.coordinates.first())
                    .is_some_and(|(a, b)| same_motion(a, b))
        };
        let case = shape
            .cases
            .iter()
            .find(same)
            .ok_or_else(|| FigureError::NoVerdict {
                wanted: name(heading_formula(wanted), wanted.charge, wanted.unpaired),
                held: shape
                    .cases
                    .iter()
                    .map(|case| {
                        let formula = case.formula.as_deref();
                        let formula = formula.unwrap_or_else(|| heading_formula(&shape.molecule));
                        name(formula, case.charge, case.unpaired)
                    })
                    .collect(),
            })?;
        Ok(Self {
            verdict: case.verdict.clone(),
            share: case.support.map(|share| share.get()),
            angle: case.angle.map(|angle| angle.get()),
            range: case.angle_range.map(|[a, b]| (a.get(), b.get())),
        })
    }

    /// The verdict in words: `bent, support 1: 86° (83° to 89°)`.
    pub(crate) fn words(&self) -> String {
        let mut words = self.verdict.clone();
        if let Some(share) = self.share {
            words.push_str(&format!(", support {}", short(share, 2)));
        }
        if let Some(angle) = self.angle {
            words.push_str(&format!(": {}°", short(angle, 0)));
        }
        if let Some((from, to)) = self.range {
            words.push_str(&format!(" ({}° to {}°)", short(from, 0), short(to, 0)));
        }
        words
    }
}

fn name(formula: &str, charge: i32, unpaired: u32) -> String {
    format!(
        "{formula}{} with {unpaired} unpaired",
        bracketed_charge(charge)
    )
}

fn elements(shape: &ShapeDocument, case: &Case) -> Vec<String> {
    let of_document = |molecule: &MoleculeRecord| sorted(molecule.elements.clone());
    let Some(formula) = &case.formula else {
        return of_document(&shape.molecule);
    };
    Formula::parse(formula).map_or_else(
        |_| Vec::new(),
        |formula| {
            let elements = formula.elements();
            let symbols = elements.iter();
            sorted(symbols.map(|element| element.symbol().to_owned()).collect())
        },
    )
}

fn sorted(mut symbols: Vec<String>) -> Vec<String> {
    symbols.sort_unstable();
    symbols
}

/// The same kind of motion of the same atoms, in either direction.
fn same_motion(a: &CoordinateRecord, b: &CoordinateRecord) -> bool {
    a.kind == b.kind && (a.atoms == b.atoms || a.atoms.iter().rev().eq(&b.atoms))
}
