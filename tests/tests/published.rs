//! Numbers printed in the literature, each with its source.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use orbend_checks::{atoms, energies, matrices, ring, set_of};
use orbend_hamiltonian::{Basis, Coupling, Method, PairRepulsion, ParameterSet};
use orbend_scan::{Request, Sweep};
use orbend_structure::{Coordinate, CoordinateKind, HARTREE_IN_EV, Molecule};

/// Energy of the level with this label in the molecule's own group.
fn level(sweep: &Sweep, label: &str) -> f64 {
    let point = sweep.point(0).expect("a point");
    let found = point
        .levels
        .iter()
        .find(|level| level.full_name.plain == label);
    found.unwrap_or_else(|| panic!("no level {label}")).energy
}

#[test]
fn printed_pi_levels_of_ethylene_and_benzene() {
    // Hoffmann, J. Chem. Phys. 39, 1397 (1963), from memory; both are closed forms of S_π.
    let (x, y) = (
        1.10 * (60.0_f64).to_radians().cos(),
        1.10 * (60.0_f64).to_radians().sin(),
    );
    let ethylene = atoms(
        &["C", "C", "H", "H", "H", "H"],
        vec![
            [0.0, 0.0, 0.67],
            [0.0, 0.0, -0.67],
            [0.0, y, 0.67 + x],
            [0.0, -y, 0.67 + x],
            [0.0, y, -0.67 - x],
            [0.0, -y, -0.67 - x],
        ],
    );
    let sweep = Request::new(ethylene).run().expect("ethylene");
    assert!((level(&sweep, "1b3u") + 13.22).abs() < 0.006);
    assert!((level(&sweep, "1b2g") + 8.24).abs() < 0.006);
    let sweep = Request::new(ring(6, 1.40, 1.10)).run().expect("benzene");
    assert!((level(&sweep, "1e1g") + 12.80).abs() < 0.006);
    assert!((level(&sweep, "1e2u") + 8.3).abs() < 0.06);
}

#[test]
fn methane_of_the_textbook() {
    // Lowe & Peterson, Quantum Chemistry, chapter 10 (from memory): r 1.1 Å, ζ_H 1.2, hartree.
    let set = set_of(
        "hartree",
        &[
            ("H", &[("1s", -0.5, 1.2)]),
            ("C", &[("2s", -0.7144, 1.625), ("2p", -0.3921, 1.625)]),
        ],
    );
    let c = 1.1 / 3.0_f64.sqrt();
    let methane = atoms(
        &["C", "H", "H", "H", "H"],
        vec![[0.0; 3], [c, c, c], [c, -c, -c], [-c, c, -c], [-c, -c, c]],
    );
    let s = matrices(&methane, &set, &Method::default());
    let along = (0..3)
        .map(|k| s.s[(1 + k) * s.n + 4].powi(2))
        .sum::<f64>()
        .sqrt();
    assert!((s.s[4] - 0.5133).abs() < 6e-5);
    assert!((along - 0.4855).abs() < 6e-5);
    assert!((s.s[4 * s.n + 5] - 0.1805).abs() < 6e-5);
    let levels: Vec<f64> = energies(&methane, &set, &Method::default())
        .iter()
        .map(|energy| energy / HARTREE_IN_EV)
        .collect();
    for (index, printed) in [
        (0, -0.8519),
        (1, -0.5487),
        (2, -0.5487),
        (3, -0.5487),
        (7, 1.1904),
    ] {
        assert!((levels[index] - printed).abs() < 5e-4, "{levels:?}");
    }
}

fn ethane(twist: f64) -> Molecule {
    // C–C 1.54, C–H 1.10 Å, tetrahedral angles.
    let (radius, rise) = (1.10 * 8.0_f64.sqrt() / 3.0, 1.10 / 3.0);
    let mut positions = vec![[0.0, 0.0, 0.77], [0.0, 0.0, -0.77]];
    for (side, turn) in [(1.0, 0.0), (-1.0, twist)] {
        for k in 0..3 {
            let angle = (120.0 * f64::from(k) + turn).to_radians();
            positions.push([
                radius * angle.cos(),
                radius * angle.sin(),
                side * (0.77 + rise),
            ]);
        }
    }
    atoms(&["C", "C", "H", "H", "H", "H", "H", "H"], positions)
}

#[test]
fn barrier_of_ethane_with_the_parameters_of_1963() {
    // Hoffmann, J. Chem. Phys. 39, 1397 (1963), from memory: 4.0 kcal/mol.
    let set = ParameterSet::builtin("hoffmann-1963").expect("a set");
    for method in [
        Method::default(),
        Method {
            coupling: Coupling::Weighted,
            ..Method::default()
        },
    ] {
        let sum = |twist| -> f64 {
            energies(&ethane(twist), &set, &method)[..7]
                .iter()
                .map(|e| 2.0 * e)
                .sum()
        };
        let barrier = (sum(0.0) - sum(60.0)) * 23.0605;
        println!(
            "ethane, {} form: {barrier:.3} kcal/mol",
            method.coupling.name()
        );
        assert!((barrier - 4.0).abs() < 0.05, "{barrier}");
    }
}

#[test]
fn angles_of_methylene() {
    // Hoffmann, Zeiss, Van Dine, J. Am. Chem. Soc. 90, 1485 (1968), from memory: 115° with σ², 155°
    // with σ¹p¹; the 5° grid of their figures.
    for (unpaired, length, printed) in [(0, 1.10, 115.0), (2, 1.08, 155.0)] {
        let y: f64 = length / 2.0_f64.sqrt();
        let mut start = atoms(&["C", "H", "H"], vec![[0.0; 3], [0.0, y, y], [0.0, -y, y]]);
        start.unpaired = Some(unpaired);
        let bend =
            Coordinate::parse(CoordinateKind::Bend, "2-1-3=90..180:5").expect("a coordinate");
        let sweep = Request::new(start).coordinate(bend).run().expect("a sweep");
        let best = (0..sweep.points())
            .min_by(|&a, &b| sweep.sum(a).total_cmp(&sweep.sum(b)))
            .expect("points");
        let angle = sweep.point(best).expect("a point").at[0];
        assert!(
            (angle - printed).abs() < 1e-9,
            "{unpaired} unpaired: {angle}"
        );
    }
}

/// Two hydrogen atoms have no minimum by the sum of level energies, and one near the measured
/// 0.741 Å (Huber & Herzberg 1979) with the pair repulsion added, as Anderson & Hoffmann, J. Chem.
/// Phys. 60, 4271 (1974), found (both from memory).
#[test]
fn hydrogen_molecule_with_pair_repulsion() {
    let (set, method) = (ParameterSet::default(), Method::default());
    let at = |length: f64| atoms(&["H", "H"], vec![[0.0; 3], [0.0, 0.0, length]]);
    let basis = Basis::new(&at(1.0).elements, &set, &method).expect("a basis");
    let repulsion = PairRepulsion::new(&basis);
    let lengths: Vec<f64> = (0..121).map(|i| 0.3 + 0.01 * f64::from(i)).collect();
    let sums: Vec<f64> = lengths
        .iter()
        .map(|&length| 2.0 * energies(&at(length), &set, &method)[0])
        .collect();
    assert!(sums.windows(2).all(|pair| pair[0] < pair[1]), "{sums:?}");
    let total = |i: usize| sums[i] + repulsion.energy(&at(lengths[i]).positions);
    let best = (0..lengths.len())
        .min_by(|&a, &b| total(a).total_cmp(&total(b)))
        .expect("points");
    println!("H2: minimum at {:.2} Å", lengths[best]);
    assert!((lengths[best] - 0.741).abs() < 0.15, "{}", lengths[best]);
}
