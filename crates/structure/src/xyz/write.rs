//! Writing XYZ.

use crate::molecule::Molecule;
use std::fmt::Write as _;

/// The molecule as extended XYZ (Å, ten decimals), readable by [`crate::read_xyz`]:
/// `charge=`, `unpaired=` where it is known, `title=` and `Properties=` on the
/// second line.
pub fn write_xyz(molecule: &Molecule) -> String {
    let mut text = String::new();
    // Writing to a String cannot fail.
    let _ = writeln!(text, "{}", molecule.len());
    let _ = write!(
        text,
        "Properties=species:S:1:pos:R:3 charge={}",
        molecule.charge
    );
    if let Some(unpaired) = molecule.unpaired {
        let _ = write!(text, " unpaired={unpaired}");
    }
    if !molecule.title.is_empty() {
        let plain = |c: char| match c {
            '"' => '\'',
            c if c.is_control() => ' ',
            c => c,
        };
        let title: String = molecule.title.chars().map(plain).collect();
        let _ = write!(text, " title=\"{title}\"");
    }
    text.push('\n');
    for (element, position) in molecule.elements.iter().zip(&molecule.positions) {
        // Adding zero turns −0 into 0; rounding first catches −1e-12 too.
        let [x, y, z] = position.map(|x| (x * 1e10).round() / 1e10 + 0.0);
        let _ = writeln!(
            text,
            "{:<2} {x:>16.10} {y:>16.10} {z:>16.10}",
            element.symbol()
        );
    }
    text
}
