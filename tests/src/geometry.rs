//! Geometries of the checks: committed files, reference tables, and the same molecule elsewhere in space.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use std::collections::BTreeMap;

use orbend_structure::{Element, Molecule, XyzOptions, read_xyz};
use serde::Deserialize;

#[derive(Deserialize)]
struct Table {
    records: Vec<Record>,
}

/// A geometry of a reference table and what the table says of it.
#[derive(Debug, Deserialize)]
pub struct Record {
    /// Name, where it has one.
    #[serde(default)]
    pub name: String,
    /// Plain Schoenflies symbol.
    pub group: String,
    /// Element symbols.
    pub elements: Vec<String>,
    /// Positions, Å.
    pub positions_angstrom: Vec<[f64; 3]>,
    /// Charge.
    #[serde(default)]
    pub charge: i32,
    /// How often each irrep occurs, where that was counted.
    #[serde(default)]
    pub irreps: BTreeMap<String, usize>,
    /// Number of operations, where it is given.
    pub order: Option<usize>,
}

/// The geometries of a table of `tests/reference` (its JSON text).
///
/// # Panics
/// Not such a table.
#[must_use]
pub fn records(json: &str) -> Vec<Record> {
    let table: Table = serde_json::from_str(json).expect("a table");
    table.records
}

fn elements<S: AsRef<str>>(symbols: &[S]) -> Vec<Element> {
    symbols
        .iter()
        .map(|symbol| Element::from_symbol(symbol.as_ref()).expect("element"))
        .collect()
}

/// A geometry of `tests/data/geometries`, by name.
///
/// # Panics
/// No such file, or it is not readable.
pub fn file(name: &str) -> Molecule {
    let path = format!("{}/data/geometries/{name}.xyz", env!("CARGO_MANIFEST_DIR"));
    let text = std::fs::read_to_string(&path).unwrap_or_else(|error| panic!("{path}: {error}"));
    read_xyz(&text, &XyzOptions::default())
        .expect("an XYZ file")
        .remove(0)
        .molecule
}

/// `g2:NAME`, `species:NAME` (reference tables) or `xyz:` with atoms separated by `; `.
///
/// # Panics
/// A name that no table holds.
pub fn named(text: &str) -> Molecule {
    if let Some(atoms) = text.strip_prefix("xyz:") {
        let rows: Vec<Vec<&str>> = atoms
            .split(';')
            .map(|row| row.split_whitespace().collect())
            .collect();
        let symbols: Vec<&str> = rows.iter().map(|row| row[0]).collect();
        let positions = rows
            .iter()
            .map(|row| [1, 2, 3].map(|k| row[k].parse().expect("number")))
            .collect();
        return Molecule::new(elements(&symbols), positions, 0, None, text.to_owned())
            .expect("molecule");
    }
    let (name, json) = match text.split_once(':') {
        Some(("g2", name)) => (name, include_str!("../reference/g2_point_groups.json")),
        Some(("species", name)) => (name, include_str!("../reference/symmetric_species.json")),
        _ => panic!("{text}: no such kind of geometry"),
    };
    let record = records(json).into_iter().find(|record| record.name == name);
    let record = record.unwrap_or_else(|| panic!("{text}: not in the table"));
    Molecule::new(
        elements(&record.elements),
        record.positions_angstrom,
        record.charge,
        None,
        text.to_owned(),
    )
    .expect("molecule")
}

/// The molecule after `position → matrix · position + shift`, its atoms listed in a new order.
#[must_use]
pub fn moved(
    molecule: &Molecule,
    matrix: [[f64; 3]; 3],
    shift: [f64; 3],
    order: &[usize],
) -> Molecule {
    let place = |p: [f64; 3]| {
        [0, 1, 2].map(|i| (0..3).map(|j| matrix[i][j] * p[j]).sum::<f64>() + shift[i])
    };
    Molecule {
        elements: order.iter().map(|&atom| molecule.elements[atom]).collect(),
        positions: order
            .iter()
            .map(|&atom| place(molecule.positions[atom]))
            .collect(),
        ..molecule.clone()
    }
}

/// A rotation (a reflection with it where `mirrored`) from four numbers in −1..1, as a unit quaternion.
#[must_use]
pub fn random_motion(numbers: [f64; 4], mirrored: bool) -> [[f64; 3]; 3] {
    let length = numbers.iter().map(|x| x * x).sum::<f64>().sqrt();
    let unit = if length < 1e-2 {
        [1.0, 0.0, 0.0, 0.0]
    } else {
        numbers.map(|number| number / length)
    };
    let [w, x, y, z] = unit;
    let sign = if mirrored { -1.0 } else { 1.0 };
    [
        [
            1.0 - 2.0 * (y * y + z * z),
            2.0 * (x * y - w * z),
            2.0 * (x * z + w * y),
        ],
        [
            2.0 * (x * y + w * z),
            1.0 - 2.0 * (x * x + z * z),
            2.0 * (y * z - w * x),
        ],
        [
            2.0 * (x * z - w * y),
            2.0 * (y * z + w * x),
            1.0 - 2.0 * (x * x + y * y),
        ],
    ]
    .map(|row| row.map(|value| sign * value))
}

/// A molecule from element symbols and positions, Å.
///
/// # Panics
/// Not a molecule.
#[must_use]
pub fn atoms(symbols: &[&str], positions: Vec<[f64; 3]>) -> Molecule {
    let elements = symbols
        .iter()
        .map(|symbol| Element::from_symbol(symbol).expect("element"))
        .collect();
    Molecule::new(elements, positions, 0, None, String::new()).expect("molecule")
}

/// Regular ring of CH in the xy plane: C–C and C–H lengths, Å.
#[must_use]
pub fn ring(count: usize, cc: f64, ch: f64) -> Molecule {
    let radius = cc / (2.0 * (std::f64::consts::PI / count as f64).sin());
    let mut positions = Vec::new();
    for r in [radius, radius + ch] {
        for k in 0..count {
            let angle = 2.0 * std::f64::consts::PI * k as f64 / count as f64;
            positions.push([r * angle.cos(), r * angle.sin(), 0.0]);
        }
    }
    let mut symbols = vec!["C"; count];
    symbols.resize(2 * count, "H");
    atoms(&symbols, positions)
}
