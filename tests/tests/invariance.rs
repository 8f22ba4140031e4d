//! Turning, shifting, mirroring and renumbering a molecule changes no energy and no label.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use orbend_checks::{moved, named, random_motion};
use orbend_scan::{Request, Sweep};
use orbend_structure::{Coordinate, CoordinateKind, Molecule};
use proptest::prelude::*;

/// Molecules of many groups and of none.
const MOLECULES: [&str; 12] = [
    "g2:SH2",
    "g2:SO2",
    "g2:CO2",
    "g2:HCN",
    "g2:NH3",
    "g2:BF3",
    "g2:CF4",
    "g2:C2H4",
    "g2:H2O2",
    "g2:HOCl",
    "g2:C3H4_D2d",
    "species:PtCl4 2-",
];

/// Energy and label of every level, degenerate ones in the order of their labels.
fn levels(molecule: &Molecule) -> (String, Vec<(f64, String)>) {
    let sweep = Request::new(molecule.clone()).run().expect("levels");
    (sweep.point_group(0).to_owned(), listed(&sweep, 0))
}

fn listed(sweep: &Sweep, point: usize) -> Vec<(f64, String)> {
    let mut levels: Vec<(f64, String)> = sweep
        .point(point)
        .expect("a point")
        .levels
        .iter()
        .map(|level| {
            let path_label = &sweep.plan().lines()[level.line].name.plain;
            (
                level.energy,
                format!("{} {path_label}", level.full_name.plain),
            )
        })
        .collect();
    let rank = |energy: f64| (energy * 1e6).round();
    levels.sort_by(|a, b| rank(a.0).total_cmp(&rank(b.0)).then(a.1.cmp(&b.1)));
    levels
}

fn same(a: &[(f64, String)], b: &[(f64, String)]) -> Result<(), TestCaseError> {
    prop_assert_eq!(a.len(), b.len());
    for (one, other) in a.iter().zip(b) {
        prop_assert!((one.0 - other.0).abs() < 1e-9, "{:?} {:?}", one, other);
        prop_assert_eq!(&one.1, &other.1);
    }
    Ok(())
}

/// An order of `count` atoms from random numbers.
fn order(count: usize, keys: &[u32]) -> Vec<usize> {
    let mut order: Vec<usize> = (0..count).collect();
    order.sort_by_key(|&atom| keys[atom % keys.len()].rotate_left(atom as u32));
    order
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 60, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn of_levels(
        which in 0..MOLECULES.len(),
        turn in prop::array::uniform4(-1.0..1.0_f64),
        shift in prop::array::uniform3(-5.0..5.0_f64),
        mirrored in any::<bool>(),
        keys in prop::array::uniform8(any::<u32>()),
    ) {
        let molecule = named(MOLECULES[which]);
        let other = moved(&molecule, random_motion(turn, mirrored), shift, &order(molecule.len(), &keys));
        let ((group, a), (other_group, b)) = (levels(&molecule), levels(&other));
        prop_assert_eq!(group, other_group, "{}", MOLECULES[which]);
        same(&a, &b)?;
    }

    #[test]
    fn of_a_bend(
        which in 0..3_usize,
        turn in prop::array::uniform4(-1.0..1.0_f64),
        shift in prop::array::uniform3(-5.0..5.0_f64),
        mirrored in any::<bool>(),
        swapped in any::<bool>(),
    ) {
        let molecule = named(["g2:SH2", "g2:SO2", "g2:CO2"][which]);
        let order = if swapped { [0, 2, 1] } else { [0, 1, 2] };
        let run = |molecule: Molecule| {
            let bend = Coordinate::parse(CoordinateKind::Bend, "2-1-3=90..180:15").expect("a coordinate");
            Request::new(molecule).coordinate(bend).run().expect("a sweep")
        };
        let plain = run(molecule.clone());
        let other = run(moved(&molecule, random_motion(turn, mirrored), shift, &order));
        prop_assert_eq!(&plain.plan().path_group().name, &other.plan().path_group().name);
        for point in 0..plain.points() {
            prop_assert_eq!(plain.point_group(point), other.point_group(point));
            same(&listed(&plain, point), &listed(&other, point))?;
        }
    }
}
