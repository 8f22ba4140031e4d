//! Point groups and irrep counts against `tests/reference`: a general-purpose symmetry library and an exhaustive search over
//! the G2 geometries, clusters of known construction, and counts from unmoved atoms.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use std::collections::BTreeMap;

use orbend_checks::{Record, records};
use orbend_symmetry::{Nucleus, OrbitalShell, PointGroup, find};

fn group_of(record: &Record, tolerance: f64) -> PointGroup {
    let mut kinds: Vec<&String> = record.elements.iter().collect();
    kinds.sort();
    kinds.dedup();
    let nuclei: Vec<Nucleus> = record
        .elements
        .iter()
        .zip(&record.positions_angstrom)
        .map(|(element, position)| Nucleus {
            kind: u32::try_from(kinds.binary_search(&element).expect("listed")).expect("small"),
            position: *position,
        })
        .collect();
    match find(&nuclei, tolerance) {
        Ok(symmetry) => symmetry.group,
        Err(error) => panic!("{} {}: {error}", record.group, record.name),
    }
}

fn compare(text: &str, tolerance: f64) {
    let records = records(text);
    let mut wrong = Vec::new();
    for record in &records {
        let found = group_of(record, tolerance);
        if found.name != record.group {
            wrong.push(format!(
                "{}: {} instead of {}",
                record.name, found.name, record.group
            ));
        } else if !found.linear && record.order.is_some_and(|order| order != found.order()) {
            wrong.push(format!(
                "{}: order {} instead of {:?}",
                record.name,
                found.order(),
                record.order
            ));
        }
    }
    assert!(
        wrong.is_empty(),
        "{} of {}: {wrong:#?}",
        wrong.len(),
        records.len()
    );
}

/// Geometries: Curtiss, Raghavachari, Redfern, Pople, J. Chem. Phys. 106, 1063 (1997).
#[test]
fn g2_geometries() {
    compare(include_str!("../reference/g2_point_groups.json"), 0.01);
}

#[test]
fn groups_known_by_construction() {
    compare(include_str!("../reference/synthetic_groups.json"), 0.001);
}

#[test]
fn irreps_counted_from_unmoved_atoms() {
    let text = include_str!("../reference/symmetric_species.json");
    compare(text, 0.001);
    let records = records(text);
    for record in &records {
        let group = group_of(record, 0.001);
        let mut shells = Vec::new();
        for (atom, element) in record.elements.iter().enumerate() {
            shells.push(OrbitalShell { atom, l: 0 });
            if element != "H" {
                shells.push(OrbitalShell { atom, l: 1 });
            }
        }
        let counts = group.count(&shells).expect("counted");
        let found: BTreeMap<String, usize> = group
            .irreps
            .iter()
            .zip(&counts)
            .filter(|(_, count)| **count > 0)
            .map(|(irrep, count)| (irrep.plain.clone(), *count))
            .collect();
        assert_eq!(found, record.irreps, "{} in {}", record.name, group.name);
    }
}
