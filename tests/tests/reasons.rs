//! Derivatives of levels against differences of energies and closed forms; the slope ledger's parts
//! add up and do not depend on where the molecule lies; textbook arguments as signs.

#![allow(
    clippy::expect_used,
    reason = "a failed expectation in a check is its message"
)]

use orbend_checks::{atoms, file, moved, random_motion};
use orbend_hamiltonian::{Coupling, Method};
use orbend_scan::reasons::{Gradients, slope};
use orbend_scan::{Request, SweepPlan};
use orbend_structure::{Coordinate, CoordinateKind, Formula, Molecule, ideal_geometry};

use CoordinateKind::{Bend, Pyramid, Stretch, Twist};

fn formula(text: &str) -> Molecule {
    let formula = Formula::parse(text).expect("formula");
    ideal_geometry(&formula, None, &[])
        .expect("geometry")
        .molecule
}

fn plan(molecule: Molecule, kind: CoordinateKind, coordinate: &str, method: Method) -> SweepPlan {
    let mut request =
        Request::new(molecule).coordinate(Coordinate::parse(kind, coordinate).expect("coordinate"));
    request.method = method;
    request.plan().expect("plan")
}

/// Molecules, coordinates and a value inside.
fn cases() -> Vec<(Molecule, CoordinateKind, &'static str, f64)> {
    vec![
        (formula("H2S"), Bend, "2-1-3=92..180:2", 118.0),
        (formula("SiF2"), Bend, "2-1-3=80..180:2", 100.0),
        (formula("PF3"), Pyramid, "1=90..120:1", 104.0),
        (formula("H2S"), Stretch, "1-2=1.2..1.6:0.1", 1.4),
        (file("ethylene"), Twist, "3-1-2-5=0..90:5", 35.0),
    ]
}

fn forms() -> [Method; 4] {
    let with = |coupling| Method {
        coupling,
        ..Method::default()
    };
    [
        Method::default(),
        with(Coupling::Weighted),
        with(Coupling::Cusachs),
        with(Coupling::Anderson),
    ]
}

fn line(plan: &SweepPlan, label: &str) -> usize {
    plan.lines()
        .iter()
        .position(|head| head.name.plain == label)
        .expect("a line of this label")
}

#[test]
fn slopes_are_the_derivatives_of_the_energies() {
    let mut worst = 0.0_f64;
    for method in forms() {
        for (molecule, kind, coordinate, at) in cases() {
            let plan = plan(molecule, kind, coordinate, method);
            let slopes = plan.slopes(&[at], 0).expect("slopes");
            let h = if kind == Stretch { 1e-3 } else { 0.05 };
            let energies = |shift: f64| plan.orbitals(&[at + shift]).expect("orbitals").energies;
            let [a, b, c, d] = [-2.0 * h, -h, h, 2.0 * h].map(energies);
            for (line, slope) in slopes.iter().enumerate() {
                // Fourth order: what is left is about h⁴ ε⁗′/30 and 1e-13 eV / h.
                let found = (8.0 * (c[line] - b[line]) - (d[line] - a[line])) / (12.0 * h);
                let off = (found - slope).abs() / slope.abs().max(1.0);
                worst = worst.max(off);
            }
        }
    }
    println!("slopes against five-point differences of energies: worst {worst:.1e}");
    assert!(worst < 1e-8, "{worst:e}");
}

#[test]
fn parts_add_up_to_slopes_and_changes() {
    for method in forms() {
        for (molecule, kind, coordinate, at) in cases() {
            let plan = plan(molecule, kind, coordinate, method);
            let slopes = plan.slopes(&[at], 0).expect("slopes");
            let ends = [plan.path().values(0)[0], at];
            let [first, last] = ends.map(|at| plan.orbitals(&[at]).expect("orbitals").energies);
            for line in 0..plan.lines().len() {
                let split = plan.slope(line, &[at], 0).expect("slope");
                assert!((split.value_ev - slopes[line]).abs() < 1e-9);
                let change = plan.change(line, ends[0], ends[1]).expect("change");
                let mixing: f64 = change.mixing.iter().map(|mixing| mixing.value_ev).sum();
                let off = change.first_order_ev() + mixing - (last[line] - first[line]);
                assert!(off.abs() < 1e-9, "line {line}: {off:e}");
                assert!((0.0..=1.0 + 1e-9).contains(&change.kept));
                let grouped: f64 = plan
                    .grouped(&change.first_order)
                    .iter()
                    .map(|group| group.value_ev)
                    .sum();
                assert!((grouped - change.first_order_ev()).abs() < 1e-11);
            }
        }
    }
}

/// Five Gauss–Legendre nodes and weights on −1..1 (Abramowitz & Stegun, table 25.4).
const NODES: [(f64, f64); 5] = [
    (0.0, 0.568_888_888_888_888_9),
    (0.538_469_310_105_683_1, 0.478_628_670_499_366_47),
    (-0.538_469_310_105_683_1, 0.478_628_670_499_366_47),
    (0.906_179_845_938_664, 0.236_926_885_056_189_08),
    (-0.906_179_845_938_664, 0.236_926_885_056_189_08),
];

#[test]
fn slopes_integrate_to_the_change() {
    let plan = plan(formula("H2S"), Bend, "2-1-3=92..180:2", Method::default());
    let mut totals = vec![0.0; plan.lines().len()];
    for piece in 0..44 {
        let middle = 93.0 + 2.0 * f64::from(piece);
        for (node, weight) in NODES {
            let slopes = plan.slopes(&[middle + node], 0).expect("slopes");
            for (total, slope) in totals.iter_mut().zip(slopes) {
                *total += weight * slope;
            }
        }
    }
    let [first, last] = [92.0, 180.0].map(|at| plan.orbitals(&[at]).expect("orbitals").energies);
    for (line, total) in totals.iter().enumerate() {
        let off = (total - (last[line] - first[line])).abs();
        assert!(off < 1e-9, "line {line}: {off:e}");
    }
}

#[test]
fn the_sum_has_its_gradient() {
    let molecule = formula("PF3");
    let plan = Request::new(molecule.clone()).plan().expect("plan");
    let orbitals = plan.orbitals(&[]).expect("orbitals");
    // 26 electrons in 13 orbitals.
    let occupations: Vec<f64> = (0..plan.lines().len())
        .map(|line| if line < 13 { 2.0 } else { 0.0 })
        .collect();
    let gradient = plan.gradients(&[]).expect("gradients").sum(
        &orbitals.coefficients,
        &orbitals.energies,
        &occupations,
    );
    let request = Request::new(molecule.clone());
    let sum = |molecule: &Molecule| -> f64 {
        orbend_checks::energies(molecule, &request.parameters, &request.method)[..13]
            .iter()
            .map(|energy| 2.0 * energy)
            .sum()
    };
    let h = 1e-3;
    let start = plan.molecule().clone();
    for (atom, slopes) in gradient.iter().enumerate() {
        for (axis, slope) in slopes.iter().enumerate() {
            let at = |shift: f64| {
                let mut moved = start.clone();
                moved.positions[atom][axis] += shift;
                sum(&moved)
            };
            let found = (8.0 * (at(h) - at(-h)) - (at(2.0 * h) - at(-2.0 * h))) / (12.0 * h);
            let off = (found - slope).abs();
            assert!(off < 1e-8, "atom {atom} axis {axis}: {off:e}");
        }
    }
    let shift = vec![[0.3, -0.2, 0.9]; 4];
    assert!(
        slope(&gradient, &shift).abs() < 1e-10,
        "a shift changes nothing"
    );
}

#[test]
fn a_split_set_has_the_eigenvalues_of_its_matrix() {
    // NH3 in C3v, 1e under a motion of one hydrogen: the two levels go apart.
    let molecule = file("ammonia");
    let plan = Request::new(molecule).plan().expect("plan");
    let orbitals = plan.orbitals(&[]).expect("orbitals");
    let set = plan.set_of(line(&plan, "1e"));
    assert_eq!(set.len(), 2);
    let energy = orbitals.energies[set[0]];
    let mut displacement = vec![[0.0; 3]; 4];
    displacement[1] = [0.2, 0.1, -0.3];
    let matrix = plan.gradients(&[]).expect("gradients").within_set(
        &orbitals.coefficients,
        &set,
        energy,
        &displacement,
    );
    let (mean, half) = (
        0.5 * (matrix[[0, 0]] + matrix[[1, 1]]),
        0.5 * (matrix[[0, 0]] - matrix[[1, 1]]),
    );
    let spread = half.hypot(matrix[[0, 1]]);
    let request = Request::new(plan.molecule().clone());
    let place = (0..orbitals.energies.len())
        .filter(|&other| orbitals.energies[other] < energy - 1e-6)
        .count();
    let at = |amount: f64| {
        let mut moved = plan.molecule().clone();
        for (position, change) in moved.positions.iter_mut().zip(&displacement) {
            for axis in 0..3 {
                position[axis] += amount * change[axis];
            }
        }
        let energies = orbend_checks::energies(&moved, &request.parameters, &request.method);
        [energies[place], energies[place + 1]]
    };
    let h = 1e-4;
    let (up, down) = (at(h), at(-h));
    // The lower level of one side continues as the upper one of the other.
    let found = [(up[0] - down[1]) / (2.0 * h), (up[1] - down[0]) / (2.0 * h)];
    assert!((found[0] - (mean - spread)).abs() < 1e-5, "{found:?}");
    assert!((found[1] - (mean + spread)).abs() < 1e-5, "{found:?}");
    assert!(spread > 0.01);
}

#[test]
fn two_levels_in_closed_form() {
    // H2: ε± = α (1 ± K S)/(1 ± S), dε±/dR = ± α (K − 1) S′/(1 ± S)² with
    // S = e^−p (1 + p + p²/3), p = ζR (Mulliken et al., J. Chem. Phys. 17, 1248 (1949)).
    let plan = plan(
        atoms(&["H", "H"], vec![[0.0; 3], [0.0, 0.0, 0.74]]),
        Stretch,
        "1-2=0.6..1.4:0.1",
        Method::default(),
    );
    let function = &plan.basis().shells[0];
    let (alpha, zeta) = (function.hii_ev, function.terms[0].0);
    let per_angstrom = orbend_structure::Bohr::from(orbend_structure::Angstrom(1.0)).0;
    let s = |r: f64| {
        let p = zeta * r * per_angstrom;
        let slope = -(-p).exp() * p * (1.0 + p) / 3.0 * zeta * per_angstrom;
        ((-p).exp() * (1.0 + p + p * p / 3.0), slope)
    };
    let k = 1.75;
    for r in [0.6, 0.74, 1.3] {
        let slopes = plan.slopes(&[r], 0).expect("slopes");
        let (s, ds) = s(r);
        for (line, sign) in [(0, 1.0), (1, -1.0)] {
            let expected = sign * alpha * (k - 1.0) * ds / (1.0 + sign * s).powi(2);
            assert!((slopes[line] - expected).abs() < 1e-10 * expected.abs());
        }
    }
    // By symmetry nothing mixes: the change is the term of the one pair of shells.
    let change = plan.change(0, 0.74, 1.2).expect("change");
    let energy = |r: f64| alpha * (1.0 + k * s(r).0) / (1.0 + s(r).0);
    assert_eq!(change.first_order.len(), 1);
    assert!(
        change
            .mixing
            .iter()
            .all(|mixing| mixing.value_ev.abs() < 1e-12)
    );
    assert!((change.first_order_ev() - (energy(1.2) - energy(0.74))).abs() < 1e-10);
    assert!((change.kept - 1.0).abs() < 1e-12);
}

#[test]
fn the_ledger_does_not_depend_on_where_the_molecule_lies() {
    let here = file("ethylene");
    let matrix = random_motion([0.3, -0.7, 0.2, 0.5], false);
    let order: Vec<usize> = (0..here.positions.len()).collect();
    let there = moved(&here, matrix, [1.0, -2.0, 0.4], &order);
    let plans =
        [here, there].map(|molecule| plan(molecule, Twist, "3-1-2-5=0..90:5", Method::default()));
    for line in 0..plans[0].lines().len() {
        let [a, b] = [0, 1].map(|k| plans[k].slope(line, &[35.0], 0).expect("slope"));
        for (one, other) in a.terms.iter().zip(&b.terms) {
            assert_eq!((one.atoms, one.shells), (other.atoms, other.shells));
            assert!((one.value_ev - other.value_ev).abs() < 1e-9, "line {line}");
        }
        let [a, b] = [0, 1].map(|k| plans[k].change(line, 0.0, 60.0).expect("change"));
        for (one, other) in a.first_order.iter().zip(&b.first_order) {
            assert!((one.value_ev - other.value_ev).abs() < 1e-8, "line {line}");
        }
        for (one, other) in a.mixing.iter().zip(&b.mixing) {
            assert!((one.value_ev - other.value_ev).abs() < 1e-8, "line {line}");
        }
    }
}

/// The largest first-order group and the sign of the change.
fn dominant(plan: &SweepPlan, label: &str, from: f64, to: f64) -> (String, f64, f64) {
    let change = plan.change(line(plan, label), from, to).expect("change");
    let first = plan.grouped(&change.first_order).remove(0);
    println!(
        "{label}: {}",
        plan.change_in_words(line(plan, label), &change)
            .expect("words")
    );
    (first.name, first.value_ev, change.difference_ev())
}

#[test]
fn arguments_of_the_textbooks() {
    // Gimarc, Acc. Chem. Res. 7, 384 (1974) (signs and leading overlaps, from memory).
    let h2s = plan(formula("H2S"), Bend, "2-1-3=92..180:2", Method::default());
    // AH2: 3a1 (here 5a1) is bonding in the bent molecule and rises to linear;
    let (name, value, change) = dominant(&h2s, "5a1", 92.0, 180.0);
    assert!(
        name == "S 3p–H 1s" && value > 0.0 && change > 0.5,
        "{name} {value} {change}"
    );
    // 1b2 (here 2b2) gains overlap of the p orbital with both hydrogens.
    let (name, value, change) = dominant(&h2s, "2b2", 92.0, 180.0);
    assert!(
        name == "S 3p–H 1s" && value < 0.0 && change < -0.2,
        "{name} {value} {change}"
    );
    // Ethylene: the π level loses its overlap on twisting.
    let ethylene = plan(
        file("ethylene"),
        Twist,
        "3-1-2-5=0..90:5",
        Method::default(),
    );
    let homo = ethylene.lines()[5].name.plain.clone();
    let (name, value, change) = dominant(&ethylene, &homo, 0.0, 60.0);
    assert!(
        name == "C 2p–C 2p" && value > 0.0 && change > 0.2,
        "{name} {value} {change}"
    );
    // Gradients of a fixed geometry and of the plan are the same thing.
    let gradients = ethylene.gradients(&[30.0]).expect("gradients");
    let speeds = ethylene.speeds(&[30.0], 0).expect("speeds");
    let orbitals = ethylene.orbitals(&[30.0]).expect("orbitals");
    let level = gradients.level(orbitals.coefficients.row(5), orbitals.energies[5]);
    let slopes = ethylene.slopes(&[30.0], 0).expect("slopes");
    assert!((slope(&level, &speeds) - slopes[5]).abs() < 1e-10);
    assert_eq!(Gradients::functions(&gradients), 12);
}
