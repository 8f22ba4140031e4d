//! The same words for the same things in figures and text.

use orbend_structure::Formula;

use crate::document::{
    CoordinateRecord, CoordinateUnit, MoleculeRecord, MotionKind, SweepDocument,
};

use super::ticks;

/// What the coordinate is, as in `H–S–H angle` (`dash` joins the atoms).
pub(crate) fn coordinate_name(
    coordinate: &CoordinateRecord,
    molecule: &MoleculeRecord,
    dash: &str,
) -> String {
    let symbol = |atom: &u32| -> String {
        let index = (*atom as usize).checked_sub(1);
        let element = index.and_then(|index| molecule.elements.get(index));
        element.cloned().unwrap_or_else(|| atom.to_string())
    };
    let chain: Vec<String> = coordinate.atoms.iter().map(symbol).collect();
    let chain = chain.join(dash);
    match coordinate.kind {
        MotionKind::Bend => format!("{chain} angle"),
        MotionKind::Stretch => format!("{chain} distance"),
        MotionKind::Twist => format!("{chain} torsion"),
        MotionKind::Pyramid => {
            let ligand = only_ligand(coordinate, molecule).unwrap_or("ligand");
            format!("{ligand}{dash}{chain}{dash}{ligand} angle")
        }
        MotionKind::Toward => "share of the path".to_owned(),
        MotionKind::Frames => "frame".to_owned(),
        MotionKind::Mode => "amplitude".to_owned(),
        MotionKind::Table => "row of the table".to_owned(),
    }
}

/// The ligands' element where a four-atom molecule leaves no doubt.
fn only_ligand<'a>(coordinate: &CoordinateRecord, molecule: &'a MoleculeRecord) -> Option<&'a str> {
    let centre = (*coordinate.atoms.first()? as usize).checked_sub(1)?;
    let mut others = molecule
        .elements
        .iter()
        .enumerate()
        .filter(|(k, _)| *k != centre);
    let first = others.next()?.1;
    let alike = others.all(|(_, element)| element == first);
    (molecule.elements.len() == 4 && alike).then_some(first.as_str())
}

/// The formula for a heading: as the user wrote it where the title is a formula of the same atoms
/// (`SiF2`), else in Hill order (`F2Si`).
pub(crate) fn heading_formula(molecule: &MoleculeRecord) -> &str {
    let title = molecule.title.trim();
    let Ok(formula) = Formula::parse(title) else {
        return &molecule.formula;
    };
    let mut written: Vec<&str> = formula
        .elements()
        .iter()
        .map(|element| element.symbol())
        .collect();
    let mut present: Vec<&str> = molecule.elements.iter().map(String::as_str).collect();
    written.sort_unstable();
    present.sort_unstable();
    if written != present {
        return &molecule.formula;
    }
    // The charge is set beside the heading.
    match (formula.charge, title.rfind('(')) {
        (None, _) => title,
        (Some(_), Some(bracket)) if title.ends_with(')') => &title[..bracket],
        _ => title.trim_end_matches(['+', '-', '\u{2212}']),
    }
}

/// Symbol of a coordinate's unit.
pub(crate) fn unit_symbol(unit: CoordinateUnit) -> &'static str {
    match unit {
        CoordinateUnit::Degree => "°",
        CoordinateUnit::Angstrom => "Å",
        CoordinateUnit::Share | CoordinateUnit::Number => "",
    }
}

/// A value with its unit, as in `104°` or `1.59 Å`.
pub(crate) fn value_with_unit(value: f64, unit: CoordinateUnit) -> String {
    match unit {
        CoordinateUnit::Degree => format!("{}°", ticks::short(value, 1)),
        CoordinateUnit::Angstrom => format!("{} Å", ticks::short(value, 3)),
        CoordinateUnit::Share | CoordinateUnit::Number => ticks::short(value, 3),
    }
}

/// A value that was refined on the model, to 0.001° or 10⁻⁵ Å.
pub(crate) fn exact_value(value: f64, unit: CoordinateUnit) -> String {
    match unit {
        CoordinateUnit::Degree => format!("{}°", ticks::ascii_number(value, 3)),
        CoordinateUnit::Angstrom => format!("{} Å", ticks::ascii_number(value, 5)),
        CoordinateUnit::Share | CoordinateUnit::Number => ticks::ascii_number(value, 5),
    }
}

/// The sum's lowest place: as stated by the document, else its lowest point. Coordinate, sum, and
/// whether it lies inside the range. None where all sums agree within 10⁻⁶ eV.
pub(crate) fn lowest_sum(document: &SweepDocument) -> Option<(f64, f64, bool)> {
    let known: Vec<(f64, f64)> = document
        .points
        .iter()
        .filter_map(|point| Some((point.at.first()?.get(), point.sum?.get())))
        .collect();
    let low = known.iter().copied().min_by(|a, b| a.1.total_cmp(&b.1))?;
    let high = known.iter().copied().max_by(|a, b| a.1.total_cmp(&b.1))?;
    if high.1 - low.1 < 1e-6 {
        return None;
    }
    if let Some(minimum) = &document.minimum {
        return Some((minimum.at.get(), minimum.sum.get(), minimum.inside));
    }
    let ends = [known.first()?.0, known.last()?.0];
    let inside = ends.iter().all(|end| (end - low.0).abs() > 1e-9);
    Some((low.0, low.1, inside))
}

/// Charge as a superscript: `+`, `2−`; empty for none.
pub(crate) fn charge(charge: i32) -> String {
    let sign = if charge > 0 { "+" } else { "\u{2212}" };
    match charge.unsigned_abs() {
        0 => String::new(),
        1 => sign.to_owned(),
        more => format!("{more}{sign}"),
    }
}

/// Charge in running text: `(2−)`; empty for none.
pub(crate) fn bracketed_charge(value: i32) -> String {
    match charge(value) {
        none if none.is_empty() => none,
        some => format!("({some})"),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::synthetic;

    #[test]
    fn a_heading_keeps_the_users_formula_of_the_same_atoms() {
        let mut molecule = synthetic::silicon_difluoride().molecule;
        assert_eq!(heading_formula(&molecule), "SiF2");
        for other in ["SiF4", "my molecule", "sif2", "SiF99999999999"] {
            molecule.title = other.into();
            assert_eq!(heading_formula(&molecule), "F2Si");
        }
    }

    #[test]
    fn coordinates_are_named_by_their_atoms() {
        let document = synthetic::boron_trifluoride();
        let name = coordinate_name(&document.coordinates[0], &document.molecule, "-");
        assert_eq!(name, "F-B-F angle");
        assert_eq!(charge(-2), "2\u{2212}");
        assert_eq!(value_with_unit(1.590, CoordinateUnit::Angstrom), "1.59 Å");
    }
}
