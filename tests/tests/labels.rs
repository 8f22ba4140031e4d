//! Labels do not depend on where a molecule stands in space, on the order of its atoms, or on noise
//! in the last digits.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use orbend_checks::{moved, named, random_motion};
use orbend_scan::Request;
use orbend_structure::Molecule;

/// Thirty molecules of 17 groups.
const MOLECULES: [&str; 30] = [
    "g2:H2O",
    "g2:SH2",
    "g2:SO2",
    "g2:O3",
    "g2:CO2",
    "g2:CS2",
    "g2:HCN",
    "g2:N2O",
    "g2:C2H2",
    "g2:NH3",
    "g2:PF3",
    "g2:BF3",
    "g2:AlCl3",
    "g2:CF4",
    "g2:SiH4",
    "g2:CH3Cl",
    "g2:C2H4",
    "g2:C2H6",
    "g2:H2CO",
    "g2:N2H4",
    "g2:HOCl",
    "g2:CH3CONH2",
    "g2:trans-butane",
    "g2:C3H4_D2d",
    "g2:C3H6_D3h",
    "g2:C6H6",
    "species:PtCl4 2-",
    "species:PF5",
    "species:SF6",
    "species:P4",
];
const CASES: usize = 1000;
/// Displacement of every coordinate, Å.
const NOISE: f64 = 1e-9;

/// Numbers in −1..1: Marsaglia's xorshift, J. Stat. Softw. 8, 14 (2003).
struct Random(u64);

impl Random {
    fn next(&mut self) -> f64 {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        (self.0 >> 11) as f64 / (1u64 << 52) as f64 - 1.0
    }
}

/// The group and the labels by energy; those of one set, or within 1e-6 eV, in the order of names.
fn labels(molecule: &Molecule) -> (String, Vec<String>) {
    let sweep = Request::new(molecule.clone()).run().expect("levels");
    let point = sweep.point(0).expect("a point");
    let mut sets: Vec<(f64, Vec<String>)> = Vec::new();
    for level in point.levels {
        match sets.last_mut() {
            Some((energy, set)) if (level.energy - *energy).abs() < 1e-6 => {
                set.push(level.full_name.plain);
            }
            _ => sets.push((level.energy, vec![level.full_name.plain])),
        }
    }
    for (_, set) in &mut sets {
        set.sort();
    }
    (
        point.point_group,
        sets.into_iter().flat_map(|set| set.1).collect(),
    )
}

#[test]
fn a_thousand_moved_molecules_keep_their_labels() {
    let mut random = Random(0x9E37_79B9_7F4A_7C15);
    let known: Vec<(Molecule, (String, Vec<String>))> = MOLECULES
        .iter()
        .map(|name| {
            let molecule = named(name);
            let found = labels(&molecule);
            (molecule, found)
        })
        .collect();
    let mut changed = Vec::new();
    let mut compared = 0;
    for case in 0..CASES {
        let (molecule, wanted) = &known[case % known.len()];
        let turn = [random.next(), random.next(), random.next(), random.next()];
        let shift = [
            5.0 * random.next(),
            5.0 * random.next(),
            5.0 * random.next(),
        ];
        let mut order: Vec<usize> = (0..molecule.len()).collect();
        let keys: Vec<f64> = order.iter().map(|_| random.next()).collect();
        order.sort_by(|&a, &b| keys[a].total_cmp(&keys[b]));
        let mut other = moved(molecule, random_motion(turn, case % 2 == 1), shift, &order);
        for position in &mut other.positions {
            for value in position {
                *value += NOISE * random.next();
            }
        }
        let found = labels(&other);
        compared += found.1.len();
        if found != *wanted {
            changed.push(MOLECULES[case % known.len()]);
        }
    }
    println!(
        "{CASES} motions of {} molecules, {compared} labels: {} changed",
        known.len(),
        changed.len()
    );
    assert!(changed.is_empty(), "{changed:?}");
}
