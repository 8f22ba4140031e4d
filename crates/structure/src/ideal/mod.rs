//! Ideal geometries from a formula: a start for a sweep, not a prediction.

mod connect;
mod length;
mod shape;
#[cfg(test)]
mod tests;

pub use length::{BondLengthUsed, BondOverride, BondOverrideError};
pub use shape::ShapeClass;

use crate::element::Element;
use crate::formula::{Formula, FormulaError};
use crate::molecule::Molecule;
use crate::vector::{Vector, add, scale};
use connect::Plan;
use length::Lengths;

/// A geometry built from a formula, with all that was assumed.
#[derive(Clone, Debug, PartialEq)]
pub struct IdealGeometry {
    /// The molecule: the centre first, then the ligands in the order of the
    /// formula (A, A, then the ligands of the first and of the second A for
    /// chains such as H2O2).
    pub molecule: Molecule,
    /// Every bond length with its source.
    pub bonds: Vec<BondLengthUsed>,
    /// The shape that was chosen.
    pub shape_class: ShapeClass,
    /// Why: electrons counted and angles set, one sentence.
    pub because: String,
}

/// Builds the ideal geometry of a formula.
///
/// Connections: one centre with up to six ligands, or two equal centres in a
/// row (HAAH, H2AAH2). Centre: the element that occurs once and is least
/// electronegative, but not H, and no alkali metal or halogen where there is
/// another; carbon before the heavier chalcogens; in HAB the middle letter as
/// written. Shape: by the electrons that the ligands leave on the centre
/// (Walsh, J. Chem. Soc. 1953, 2260; Gillespie & Nyholm, Q. Rev. Chem. Soc.
/// 11, 339 (1957)). Lengths: `overrides`, then published standard lengths, then
/// covalent radii. A charge in the formula and `charge` must agree; `charge`
/// `None` means that of the formula, or 0.
///
/// # Errors
/// A formula of another kind (give a geometry file), contradicting charges, an
/// override that no bond uses.
pub fn ideal_geometry(
    formula: &Formula,
    charge: Option<i32>,
    overrides: &[BondOverride],
) -> Result<IdealGeometry, FormulaError> {
    let charge = match (formula.charge, charge) {
        (Some(written), Some(given)) if written != given => {
            return Err(formula.error(
                format!("it has the charge {written:+}, but {given:+} was asked for"),
                "state the charge once",
            ));
        }
        (written, given) => given.or(written).unwrap_or(0),
    };
    let plan = connect::connect(formula, charge)?;
    let mut lengths = Lengths::new(overrides);
    let built = match &plan {
        Plan::Atom(element) => Built {
            elements: vec![*element],
            positions: vec![[0.0; 3]],
            class: ShapeClass::Atom,
            because: "one atom".into(),
        },
        Plan::Diatomic(pair) => diatomic(*pair, charge, &mut lengths),
        Plan::Centre { centre, ligands } => around_centre(*centre, ligands, charge, &mut lengths),
        Plan::Chain {
            centre,
            ligand,
            each,
        } => chain(*centre, *ligand, *each, charge, &mut lengths),
    };
    if let Some(unused) = lengths.unused() {
        return Err(formula.error(
            format!(
                "the length given for {}–{} is not used: there is no such bond",
                unused.first, unused.second
            ),
            format!("the bonds of the molecule are {}", lengths.pairs(&built.elements)),
        ));
    }
    let bonds = lengths.into_used();
    let molecule = Molecule::new(
        built.elements,
        built.positions,
        charge,
        None,
        format!("{} (ideal geometry, {})", formula.text, built.class.name()),
    )
    .map_err(|error| formula.error(error.to_string(), "change the bond lengths"))?;
    Ok(IdealGeometry {
        molecule,
        bonds,
        shape_class: built.class,
        because: built.because,
    })
}

struct Built {
    elements: Vec<Element>,
    positions: Vec<Vector>,
    class: ShapeClass,
    because: String,
}

fn diatomic(pair: [Element; 2], charge: i32, lengths: &mut Lengths) -> Built {
    let order = length::diatomic_order(pair, charge);
    let length = lengths.take(pair, [0, 1], order, 1);
    Built {
        elements: pair.to_vec(),
        positions: vec![[0.0; 3], [0.0, 0.0, length]],
        class: ShapeClass::Diatomic,
        because: format!("two atoms, bond order {order}"),
    }
}

fn around_centre(
    centre: Element,
    ligands: &[Vec<Element>],
    charge: i32,
    lengths: &mut Lengths,
) -> Built {
    let chosen = shape::choose(centre, ligands, charge);
    let mut elements = vec![centre];
    let mut positions = vec![[0.0; 3]];
    for (k, ligand) in ligands.iter().enumerate() {
        let direction = chosen.directions[k];
        let order = if ligand.len() > 1 {
            1.0
        } else {
            chosen.orders[k]
        };
        let at = elements.len();
        let mut reach = lengths.take([centre, ligand[0]], [0, at], order, ligands.len());
        elements.push(ligand[0]);
        positions.push(scale(direction, reach));
        // A bracketed ligand goes straight on: M–C–O.
        for (step, pair) in ligand.windows(2).enumerate() {
            let atoms = [at + step, at + step + 1];
            reach += lengths.take([pair[0], pair[1]], atoms, 3.0, 2);
            elements.push(pair[1]);
            positions.push(scale(direction, reach));
        }
    }
    Built {
        elements,
        positions,
        class: chosen.class,
        because: chosen.because,
    }
}

/// X–A–A–X and X2A–AX2 with a twofold axis along z.
fn chain(
    centre: Element,
    ligand: Element,
    each: usize,
    charge: i32,
    lengths: &mut Lengths,
) -> Built {
    let chosen = shape::choose_chain(centre, each, charge);
    let half = 0.5 * lengths.take([centre, centre], [0, 1], chosen.order, 2);
    let mut elements = vec![centre, centre];
    let mut positions = vec![[0.0, half, 0.0], [0.0, -half, 0.0]];
    let mut ends = [Vec::new(), Vec::new()];
    for (k, direction) in chosen.directions.iter().enumerate() {
        let atoms = [0, 2 + k];
        let length = lengths.take([centre, ligand], atoms, 1.0, each + 1);
        let place = add(positions[0], scale(*direction, length));
        ends[0].push(place);
        ends[1].push([-place[0], -place[1], place[2]]);
        lengths.repeat([1, 2 + each + k]);
    }
    for end in ends {
        elements.extend(std::iter::repeat_n(ligand, each));
        positions.extend(end);
    }
    Built {
        elements,
        positions,
        class: chosen.class,
        because: chosen.because,
    }
}
