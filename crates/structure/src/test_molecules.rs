//! Geometries that the unit tests share. Idealised: angles and lengths are
//! standard values, not measurements.

use crate::element::Element;
use crate::molecule::Molecule;

/// A molecule from `"O 0 0 0; H 0 0 1"`.
pub(crate) fn build(text: &str) -> Molecule {
    let mut elements = Vec::new();
    let mut positions = Vec::new();
    for atom in text.split(';') {
        let words: Vec<&str> = atom.split_whitespace().collect();
        elements.push(Element::from_symbol(words[0]).unwrap());
        positions.push([1, 2, 3].map(|i| words[i].parse::<f64>().unwrap()));
    }
    Molecule::new(elements, positions, 0, None, "").unwrap()
}

pub(crate) fn water() -> Molecule {
    build("O 0 0 0; H 0.757 0 0.587; H -0.757 0 0.587")
}

pub(crate) fn carbon_dioxide() -> Molecule {
    build("C 0 0 0; O 0 0 1.16; O 0 0 -1.16")
}

pub(crate) fn acetylene() -> Molecule {
    build("C 0 0 0.6; C 0 0 -0.6; H 0 0 1.66; H 0 0 -1.66")
}

pub(crate) fn ethylene() -> Molecule {
    build("C 0 0 0.67; C 0 0 -0.67; H 0 0.92 1.24; H 0 -0.92 1.24; H 0 0.92 -1.24; H 0 -0.92 -1.24")
}

pub(crate) fn ammonia() -> Molecule {
    let (s, h) = (3.0_f64.sqrt() / 2.0 * 0.94, 0.38);
    build(&format!(
        "N 0 0 0; H 0.94 0 {h}; H -0.47 {s} {h}; H -0.47 -{s} {h}"
    ))
}

pub(crate) fn methane() -> Molecule {
    build("C 0 0 0; H .63 .63 .63; H -.63 -.63 .63; H .63 -.63 -.63; H -.63 .63 -.63")
}

pub(crate) fn square_planar() -> Molecule {
    build("Pt 0 0 0; Cl 2.3 0 0; Cl 0 2.3 0; Cl -2.3 0 0; Cl 0 -2.3 0")
}

pub(crate) fn hydrogen_peroxide() -> Molecule {
    build("O 0 0.73 0; O 0 -0.73 0; H 0.8 0.9 0.5; H -0.8 -0.9 0.5")
}

pub(crate) fn hydrazine() -> Molecule {
    build("N 0 0.72 0; N 0 -0.72 0; H 0.9 1.1 0.3; H -0.5 1.0 0.8; H -0.9 -1.1 0.3; H 0.5 -1.0 0.8")
}

pub(crate) fn cyclopropane() -> Molecule {
    let mut atoms = Vec::new();
    for k in 0..3 {
        let (s, c) = (f64::from(k) * 2.0 * std::f64::consts::PI / 3.0).sin_cos();
        atoms.push((0, format!("C {} {} 0", 0.87 * c, 0.87 * s)));
        for z in [0.91, -0.91] {
            atoms.push((1, format!("H {} {} {z}", 1.45 * c, 1.45 * s)));
        }
    }
    atoms.sort_by_key(|(kind, _)| *kind);
    let words: Vec<String> = atoms.into_iter().map(|(_, word)| word).collect();
    build(&words.join(";"))
}

/// All atom permutations that keep every distance within 1e-6 Å and every
/// element: the permutations of the symmetry operations, found by brute force.
pub(crate) fn equivalences(molecule: &Molecule) -> Vec<Vec<usize>> {
    fn extend(molecule: &Molecule, partial: &mut Vec<usize>, found: &mut Vec<Vec<usize>>) {
        let atom = partial.len();
        if atom == molecule.len() {
            found.push(partial.clone());
            return;
        }
        let p = &molecule.positions;
        for image in 0..molecule.len() {
            let fits = !partial.contains(&image)
                && molecule.elements[image] == molecule.elements[atom]
                && (0..atom).all(|k| {
                    let before = crate::vector::distance(p[atom], p[k]);
                    (before - crate::vector::distance(p[image], p[partial[k]])).abs() < 1e-6
                });
            if fits {
                partial.push(image);
                extend(molecule, partial, found);
                partial.pop();
            }
        }
    }
    let mut found = Vec::new();
    extend(molecule, &mut Vec::new(), &mut found);
    found
}
