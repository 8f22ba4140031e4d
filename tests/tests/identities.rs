//! Exact identities of the method, from the closed forms they rest on.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use nalgebra::DMatrix;
use orbend_checks::{atoms, check_point, energies, matrices, named, ring, set_of};
use orbend_hamiltonian::{Coupling, Method, ParameterSet, weighted_k};
use orbend_overlap::{Primitive, slater_overlap};
use orbend_scan::{Request, Sweep};
use orbend_structure::{BOHR_IN_ANGSTROM, Coordinate, CoordinateKind, Element, Molecule};

const K: f64 = 1.75;

fn diatomic(a: &str, b: &str, length: f64) -> Molecule {
    atoms(&[a, b], vec![[0.0; 3], [0.0, 0.0, length]])
}

fn constant() -> Method {
    Method::default()
}

fn weighted() -> Method {
    Method {
        coupling: Coupling::Weighted,
        ..Method::default()
    }
}

/// Hii and ζ of a shell in the set.
fn shell(set: &ParameterSet, symbol: &str, l: u8) -> (f64, Primitive) {
    let element = set
        .element(Element::from_symbol(symbol).expect("element"))
        .expect("values");
    let shell = element.shells().find(|shell| shell.l == l).expect("shell");
    (
        shell.hii_ev,
        Primitive {
            n: shell.n,
            l,
            zeta: shell.terms[0].0,
        },
    )
}

/// Both energies of a 2 × 2 problem: (h₁ − E)(h₂ − E) = (h₁₂ − E s)².
fn two_level(h1: f64, h2: f64, h12: f64, s: f64) -> [f64; 2] {
    let (a, b, c) = (1.0 - s * s, 2.0 * h12 * s - h1 - h2, h1 * h2 - h12 * h12);
    let root = (b * b - 4.0 * a * c).sqrt();
    [(-b - root) / (2.0 * a), (-b + root) / (2.0 * a)]
}

fn assert_contains(levels: &[f64], wanted: &[f64], times: usize, what: &str) {
    for &energy in wanted {
        let found = levels
            .iter()
            .filter(|level| (*level - energy).abs() < 1e-8)
            .count();
        assert_eq!(found, times, "{what}: {energy} among {levels:?}");
    }
}

#[test]
fn hydrogen_molecule_in_closed_form() {
    // Hoffmann, J. Chem. Phys. 39, 1397 (1963): ε± = H (1 ± K S)/(1 ± S).
    for (name, digits) in [
        ("hoffmann", [-17.567, 4.252]),
        ("hoffmann-1963", [-17.983, 17.560]),
    ] {
        let set = ParameterSet::builtin(name).expect("a set");
        let (h, one) = shell(&set, "H", 0);
        let p: f64 = one.zeta * 0.74 / BOHR_IN_ANGSTROM;
        let s = (1.0 + p + p * p / 3.0) * (-p).exp();
        let exact = [h * (1.0 + K * s) / (1.0 + s), h * (1.0 - K * s) / (1.0 - s)];
        for method in [constant(), weighted()] {
            let levels = energies(&diatomic("H", "H", 0.74), &set, &method);
            for i in 0..2 {
                assert!((levels[i] - exact[i]).abs() < 1e-10, "{levels:?} {exact:?}");
                assert!(
                    (levels[i] - digits[i]).abs() < 6e-4,
                    "{levels:?} {digits:?}"
                );
            }
        }
    }
}

#[test]
fn the_hydrogen_molecule_has_no_bond_length() {
    // The same closed form: monotonic down to H (1 + K)/2 = −18.70 eV at R = 0.
    let set = ParameterSet::default();
    let mut before = f64::INFINITY;
    for step in (1..=60).rev() {
        let lowest = energies(
            &diatomic("H", "H", 0.2 + 0.03 * f64::from(step)),
            &set,
            &constant(),
        )[0];
        assert!(lowest < before);
        before = lowest;
    }
    let mut close = diatomic("H", "H", 0.3);
    close.positions[1][2] = 0.01;
    let (h, _) = shell(&set, "H", 0);
    assert!((energies(&close, &set, &constant())[0] - h * (1.0 + K) / 2.0).abs() < 1e-3);
}

#[test]
fn heteronuclear_pair_in_closed_form() {
    // Input of the HHe⁺ type: H₁ −13.6, H₂ −24.6 eV, S = 0.435 (a worked number, exact arithmetic).
    let set = set_of(
        "eV",
        &[
            ("H", &[("1s", -13.6, 1.3)]),
            ("He", &[("1s", -24.6, 1.688)]),
        ],
    );
    let (a, b) = (
        Primitive {
            n: 1,
            l: 0,
            zeta: 1.3,
        },
        Primitive {
            n: 1,
            l: 0,
            zeta: 1.688,
        },
    );
    let overlap = |r: f64| slater_overlap(a, b, 0, r / BOHR_IN_ANGSTROM).expect("an overlap");
    let (mut near, mut far) = (0.3, 3.0);
    for _ in 0..80 {
        let middle = 0.5 * (near + far);
        if overlap(middle) > 0.435 {
            near = middle
        } else {
            far = middle
        }
    }
    let pair = diatomic("H", "He", near);
    let levels = energies(&pair, &set, &constant());
    assert!(
        (levels[0] + 25.5741).abs() < 6e-5 && (levels[1] + 5.9394).abs() < 6e-5,
        "{levels:?}"
    );
    let s = overlap(near);
    for (method, k) in [(constant(), K), (weighted(), weighted_k(K, -13.6, -24.6))] {
        let exact = two_level(-13.6, -24.6, k * s * (-13.6 - 24.6) / 2.0, s);
        assert_contains(&energies(&pair, &set, &method), &exact, 1, "HHe");
    }
}

fn bend_sweep(spec: &Molecule, range: &str, method: Method) -> Sweep {
    let coordinate = Coordinate::parse(CoordinateKind::Bend, range).expect("a coordinate");
    let mut request = Request::new(spec.clone()).coordinate(coordinate);
    request.method = method;
    request.run().expect("a sweep")
}

#[test]
fn an_orbital_of_its_own_symmetry_keeps_its_energy() {
    // b1 of AH2 (πu when linear) is the pure p orbital: ε = Hpp at every angle and length.
    let mut worst = 0.0_f64;
    for (symbol, length) in [
        ("O", 0.958),
        ("C", 1.1),
        ("S", 1.336),
        ("Be", 1.326),
        ("Si", 1.52),
    ] {
        let (hpp, _) = shell(&ParameterSet::default(), symbol, 1);
        let start = atoms(
            &[symbol, "H", "H"],
            vec![[0.0; 3], [0.0, length, 0.3], [0.0, -length, 0.3]],
        );
        for method in [constant(), weighted()] {
            let sweep = bend_sweep(&start, "2-1-3=60..180:10", method);
            let line = sweep
                .plan()
                .lines()
                .iter()
                .position(|line| line.name.valence_plain == "1b1")
                .expect("a b1 line");
            for energy in sweep.line_energies(line) {
                worst = worst.max((energy - hpp).abs());
            }
        }
    }
    println!("ε(b1) of AH2 against Hpp: worst {worst:.1e} eV");
    assert!(worst < 1e-10);
}

/// h and S of a combination of `count` like neighbours, each pair with overlap `s`, in phase
/// (`count − 1` partners) or orthogonal to the sum of all.
fn group(h: f64, s: f64, partners: f64) -> (f64, f64) {
    (
        h * (1.0 + partners * K * s) / (1.0 + partners * s),
        1.0 + partners * s,
    )
}

#[test]
fn small_blocks_against_the_whole_problem() {
    let set = ParameterSet::default();
    let mut compared = 0;
    for (symbol, length) in [
        ("Be", 1.326),
        ("B", 1.19),
        ("C", 1.09),
        ("N", 1.01),
        ("Si", 1.48),
    ] {
        let ((hs, s), (hp, p), (hh, one)) = (
            shell(&set, symbol, 0),
            shell(&set, symbol, 1),
            shell(&set, "H", 0),
        );
        let bohr = length / BOHR_IN_ANGSTROM;
        let to_s = slater_overlap(s, one, 0, bohr).expect("overlap");
        let to_p = slater_overlap(p, one, 0, bohr).expect("overlap").abs();
        let third = 3.0_f64.sqrt() / 2.0;
        let c = length / 3.0_f64.sqrt();
        let shapes: [(&str, Vec<[f64; 3]>, f64, f64, f64, f64, f64); 3] = [
            // name, ligands, H···H distance, partners in phase and across, weights of s and p, copies of the p level
            (
                "linear",
                vec![[0.0, 0.0, length], [0.0, 0.0, -length]],
                2.0 * length,
                2.0_f64.sqrt(),
                2.0_f64.sqrt(),
                1.0,
                1.0,
            ),
            (
                "trigonal",
                vec![
                    [length, 0.0, 0.0],
                    [-0.5 * length, third * length, 0.0],
                    [-0.5 * length, -third * length, 0.0],
                ],
                3.0_f64.sqrt() * length,
                3.0_f64.sqrt(),
                1.5_f64.sqrt(),
                2.0,
                2.0,
            ),
            (
                "tetrahedral",
                vec![[c, c, c], [c, -c, -c], [-c, c, -c], [-c, -c, c]],
                (8.0_f64 / 3.0).sqrt() * length,
                2.0,
                2.0 / 3.0_f64.sqrt(),
                3.0,
                3.0,
            ),
        ];
        for (shape, ligands, apart, weight_s, weight_p, partners, copies) in shapes {
            let shh = slater_overlap(one, one, 0, apart / BOHR_IN_ANGSTROM).expect("overlap");
            let mut symbols = vec![symbol];
            symbols.resize(ligands.len() + 1, "H");
            let mut positions = vec![[0.0; 3]];
            positions.extend(ligands);
            let whole = energies(&atoms(&symbols, positions), &set, &constant());
            let (h_in, norm_in) = group(hh, shh, partners);
            let (h_out, norm_out) = group(hh, shh, -1.0);
            let s_in = weight_s * to_s / norm_in.sqrt();
            let s_out = weight_p * to_p / norm_out.sqrt();
            // The coupling of the group orbital carries the bare Hii of hydrogen.
            let in_phase = two_level(hs, h_in, K * (hs + hh) / 2.0 * s_in, s_in);
            let across = two_level(hp, h_out, K * (hp + hh) / 2.0 * s_out, s_out);
            let what = format!("{shape} {symbol}H{}", symbols.len() - 1);
            assert_contains(&whole, &in_phase, 1, &what);
            assert_contains(&whole, &across, copies as usize, &what);
            compared += 4;
        }
    }
    assert_eq!(compared, 60);
}

#[test]
fn pi_levels_of_rings_in_closed_form() {
    // ε_j = Hpp (1 + K s_j)/(1 + s_j), s_j = Σ_m S_π(d_m) cos(2πjm/N).
    let set = ParameterSet::default();
    let (hpp, p) = shell(&set, "C", 1);
    for (count, cc) in [(3_usize, 1.36), (4, 1.42), (5, 1.42), (6, 1.40), (8, 1.40)] {
        let whole = energies(&ring(count, cc, 1.08), &set, &constant());
        let radius = cc / (2.0 * (std::f64::consts::PI / count as f64).sin());
        for j in 0..count {
            let mut sum = 0.0;
            for m in 1..count {
                let apart = 2.0 * radius * (std::f64::consts::PI * m as f64 / count as f64).sin();
                let s = slater_overlap(p, p, 1, apart / BOHR_IN_ANGSTROM)
                    .expect("overlap")
                    .abs();
                sum += s * (2.0 * std::f64::consts::PI * (j * m) as f64 / count as f64).cos();
            }
            let exact = hpp * (1.0 + K * sum) / (1.0 + sum);
            assert!(
                whole.iter().any(|level| (level - exact).abs() < 1e-9),
                "ring of {count}: {exact}"
            );
        }
    }
}

#[test]
fn levels_of_one_irrep_never_cross_and_blocks_hold_the_whole_spectrum() {
    // von Neumann, Wigner, Phys. Z. 30, 467 (1929).
    let mut worst = 0.0_f64;
    for (spec, range) in [
        ("g2:CO2", "2-1-3=80..180:5"),
        ("g2:SO2", "2-1-3=80..180:5"),
        ("g2:SH2", "2-1-3=60..180:5"),
    ] {
        let sweep = bend_sweep(&named(spec), range, constant());
        let lines = sweep.plan().lines();
        for point in 0..sweep.points() {
            let at = sweep.point(point).expect("a point");
            let placed = Molecule {
                positions: at.positions,
                ..sweep.plan().molecule().clone()
            };
            let whole = energies(&placed, &ParameterSet::default(), &constant());
            for (one, level) in whole.iter().zip(&at.levels) {
                worst = worst.max((one - level.energy).abs());
            }
            for irrep in 0..sweep.plan().path_group().irreps.len() {
                let inside: Vec<f64> = (0..lines.len())
                    .filter(|&line| lines[line].irrep == irrep)
                    .map(|line| sweep.energy(line, point))
                    .collect();
                assert!(
                    inside.windows(2).all(|pair| pair[0] < pair[1]),
                    "{spec} at {:?}",
                    at.at
                );
            }
        }
    }
    println!("levels from blocks against the whole matrix: worst {worst:.1e} eV");
    assert!(worst < 1e-9);
}

#[test]
fn invariants_of_every_point() {
    let mut worst = orbend_checks::Residuals::default();
    for (spec, range) in [
        ("g2:CO2", "2-1-3=80..180:20"),
        ("g2:SO2", "2-1-3=80..180:20"),
        ("g2:H2O", "2-1-3=60..180:20"),
    ] {
        for method in [constant(), weighted()] {
            let sweep = bend_sweep(&named(spec), range, method);
            for point in 0..sweep.points() {
                worst = worst.max(check_point(&sweep, point));
            }
        }
    }
    for spec in [
        "g2:C6H6",
        "g2:CF4",
        "g2:C2H5",
        "species:SF6",
        "species:Ni(CO)4",
        "species:PF5",
    ] {
        let sweep = Request::new(named(spec)).run().expect("levels");
        worst = worst.max(check_point(&sweep, 0));
    }
    println!("invariants: {worst:?}");
}

#[test]
fn far_apart_every_level_is_a_diagonal_element() {
    let set = ParameterSet::default();
    let apart = atoms(
        &["Si", "F", "O"],
        vec![[0.0; 3], [50.0, 0.0, 0.0], [0.0, 50.0, 10.0]],
    );
    let m = matrices(&apart, &set, &constant());
    let mut diagonal: Vec<f64> = (0..m.n).map(|i| m.h[i * m.n + i]).collect();
    diagonal.sort_by(f64::total_cmp);
    for (level, hii) in energies(&apart, &set, &constant()).iter().zip(diagonal) {
        assert!((level - hii).abs() < 1e-9, "{level} {hii}");
    }
}

#[test]
fn scaled_and_shifted_diagonal_elements() {
    let scaled = |factor: f64, shift: f64| {
        let row = |h: f64| h * factor + shift;
        set_of(
            "eV",
            &[
                ("H", &[("1s", row(-13.6), 1.3)]),
                ("O", &[("2s", row(-32.3), 2.275), ("2p", row(-14.8), 2.275)]),
            ],
        )
    };
    let water = named("g2:H2O");
    for method in [constant(), weighted()] {
        let plain = energies(&water, &scaled(1.0, 0.0), &method);
        for (double, single) in energies(&water, &scaled(1.5, 0.0), &method)
            .iter()
            .zip(&plain)
        {
            assert!((double - 1.5 * single).abs() < 1e-9, "{double} {single}");
        }
        // A constant added to all Hii does not shift the levels by it, because Hij carries K …
        let shifted = energies(&water, &scaled(1.0, -2.0), &method);
        let difference = shifted
            .iter()
            .zip(&plain)
            .map(|(a, b)| (a - b + 2.0).abs())
            .fold(0.0, f64::max);
        assert!(difference > 0.1, "{difference}");
    }
    // … unless K = 1.
    let one = Method {
        k: 1.0,
        ..constant()
    };
    let plain = energies(&water, &scaled(1.0, 0.0), &one);
    for (a, b) in energies(&water, &scaled(1.0, -2.0), &one)
        .iter()
        .zip(&plain)
    {
        assert!((a - b + 2.0).abs() < 1e-9, "{a} {b}");
    }
}

#[test]
fn trace_of_the_inverse_overlap_times_the_hamiltonian() {
    for spec in ["g2:C2H5", "g2:PF3", "g2:HOCl", "species:PtCl4 2-"] {
        let molecule = named(spec);
        let m = matrices(&molecule, &ParameterSet::default(), &weighted());
        let s = DMatrix::from_row_slice(m.n, m.n, &m.s)
            .cholesky()
            .expect("positive definite");
        let trace = s.solve(&DMatrix::from_row_slice(m.n, m.n, &m.h)).trace();
        let sum: f64 = energies(&molecule, &ParameterSet::default(), &weighted())
            .iter()
            .sum();
        assert!(
            (trace - sum).abs() < 1e-9 * sum.abs().max(1.0),
            "{spec}: {trace} {sum}"
        );
    }
}
