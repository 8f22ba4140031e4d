//! The ideal geometry that stands behind a formula, for a person to read.

use std::fmt::Write as _;

use crate::geometry::Geometry;

/// Atoms with their numbers and positions, bond lengths with their sources; empty for a geometry
/// that the user gave.
pub(crate) fn geometry_text(geometry: &Geometry, width: usize) -> String {
    let record = &geometry.record;
    if record.origin != "formula" {
        return String::new();
    }
    let mut out = wrapped(&record.notes.join("; "), width);
    for (atom, (element, [x, y, z])) in (1..).zip(
        geometry
            .molecule
            .elements
            .iter()
            .zip(&geometry.molecule.positions),
    ) {
        // Adding zero turns a negative zero into a plain one.
        let [x, y, z] = [x, y, z].map(|value| (value * 1e4).round() / 1e4 + 0.0);
        let _ = writeln!(
            out,
            "{atom:5} {:<2} {x:10.4} {y:10.4} {z:10.4}",
            element.symbol()
        );
    }
    // Equal lengths of one source stand together.
    let mut groups: Vec<(String, String)> = Vec::new();
    for bond in &record.bonds {
        let tail = format!(" {:.4} Å ({})", bond.length.get(), bond.source);
        let pair = format!("{}-{}", bond.atoms[0], bond.atoms[1]);
        match groups.iter_mut().find(|(_, known)| *known == tail) {
            Some((pairs, _)) => *pairs = format!("{pairs}, {pair}"),
            None => groups.push((pair, tail)),
        }
    }
    for (pairs, tail) in groups {
        out.push_str(&wrapped(&format!("bond {pairs}{tail}"), width));
    }
    out.push('\n');
    out
}

/// Words in lines of at most `width` letters; further lines are indented.
fn wrapped(text: &str, width: usize) -> String {
    let mut out = String::new();
    let mut used = 0;
    for word in text.split_whitespace() {
        let length = word.chars().count();
        if used == 0 {
            out.push_str(word);
            used = length;
        } else if used + 1 + length > width {
            out.push_str("\n  ");
            out.push_str(word);
            used = length + 2;
        } else {
            out.push(' ');
            out.push_str(word);
            used += 1 + length;
        }
    }
    out.push('\n');
    out
}
