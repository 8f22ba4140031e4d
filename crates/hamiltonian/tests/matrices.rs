//! S and H of whole molecules: closed forms, invariances, lanes, derivatives, in every form of H.

// A failed expectation is the message of a test.
#![allow(clippy::unwrap_used)]

use approx::assert_abs_diff_eq;
use nalgebra::{DMatrix, SymmetricEigen};
use orbend_hamiltonian::{Basis, Coupling, HamiltonianPlan, Method, PairGradient, ParameterSet};
use orbend_overlap::{LANES, Lanes};
use orbend_structure::Element;

const FORMS: [Coupling; 7] = [
    Coupling::Constant,
    Coupling::Weighted,
    Coupling::GeometricMean,
    Coupling::Cusachs,
    Coupling::DistanceDependent {
        delta_per_angstrom: 0.35,
        weighted: true,
    },
    Coupling::DistanceDependent {
        delta_per_angstrom: 0.6,
        weighted: false,
    },
    Coupling::Anderson,
];

/// A crooked molecule with s, p, d and polarised hydrogen: nothing in it is symmetric.
const CROOKED: [(&str, [f64; 3]); 5] = [
    ("Ni", [0.1, -0.2, 0.3]),
    ("C", [1.4, 0.5, 1.1]),
    ("O", [2.1, 0.9, 2.0]),
    ("H", [-0.9, 0.8, -0.5]),
    ("H", [-0.3, -1.7, 0.6]),
];

fn elements(symbols: &[&str]) -> Vec<Element> {
    symbols
        .iter()
        .map(|symbol| Element::from_symbol(symbol).unwrap())
        .collect()
}

fn crooked(coupling: Coupling) -> (HamiltonianPlan, Vec<[f64; 3]>) {
    let method = Method {
        polarised_hydrogen: true,
        ..Method::with_coupling(coupling)
    };
    let symbols = CROOKED.map(|atom| atom.0);
    let basis = Basis::new(&elements(&symbols), &ParameterSet::default(), &method).unwrap();
    (
        HamiltonianPlan::new(&basis, &method).unwrap(),
        CROOKED.map(|atom| atom.1).to_vec(),
    )
}

fn matrices(plan: &HamiltonianPlan, positions: &[[f64; 3]]) -> (Vec<f64>, Vec<f64>) {
    let n = plan.len();
    // NaN shows any element that is not filled.
    let (mut s, mut h) = (vec![f64::NAN; n * n], vec![f64::NAN; n * n]);
    plan.fill(positions, &mut s, &mut h);
    (s, h)
}

/// Eigenvalues of H C = S C ε by S^(−1/2).
fn levels(plan: &HamiltonianPlan, positions: &[[f64; 3]]) -> Vec<f64> {
    let n = plan.len();
    let (s, h) = matrices(plan, positions);
    let s = SymmetricEigen::try_new(DMatrix::from_row_slice(n, n, &s), 1e-15, 10_000).unwrap();
    let root = DMatrix::from_diagonal(&s.eigenvalues.map(|value| 1.0 / value.sqrt()));
    let root = &s.eigenvectors * root * s.eigenvectors.transpose();
    let h = &root * DMatrix::from_row_slice(n, n, &h) * &root;
    let solved = SymmetricEigen::try_new(h, 1e-15, 10_000).unwrap();
    let mut values: Vec<f64> = solved.eigenvalues.iter().copied().collect();
    values.sort_by(f64::total_cmp);
    values
}

/// Eight geometries about `positions`, each a little different.
fn scattered(positions: &[[f64; 3]]) -> [Vec<[f64; 3]>; LANES] {
    std::array::from_fn(|lane| {
        let mut moved = positions.to_vec();
        for (atom, position) in moved.iter_mut().enumerate() {
            for (axis, x) in position.iter_mut().enumerate() {
                *x += 0.01 * (lane as f64) * ((atom * 3 + axis) as f64 - 5.0) / 7.0;
            }
        }
        moved
    })
}

fn in_lanes(geometries: &[Vec<[f64; 3]>; LANES]) -> Vec<[Lanes; 3]> {
    (0..geometries[0].len())
        .map(|atom| {
            std::array::from_fn(|axis| std::array::from_fn(|lane| geometries[lane][atom][axis]))
        })
        .collect()
}

#[test]
fn hydrogen_molecule_in_closed_form() {
    // ε± = H (1 ± K S)/(1 ± S), exact. At 0.74 Å: S = 0.6364, −17.567 and +4.252 eV with ζ 1.3;
    // S = 0.7534, −17.983 and +17.560 eV with ζ 1.0 (computed from the closed form of S).
    for (choice, s_known, low, high) in [
        ("H:A", 0.6364, -17.567, 4.252),
        ("H:1963", 0.7534, -17.983, 17.560),
    ] {
        let set = ParameterSet::default().choose(&[choice]).unwrap();
        let method = Method::default();
        let basis = Basis::new(&elements(&["H", "H"]), &set, &method).unwrap();
        let plan = HamiltonianPlan::new(&basis, &method).unwrap();
        let positions = [[0.0; 3], [0.0, 0.0, 0.74]];
        let (s, h) = matrices(&plan, &positions);
        let zeta = if choice == "H:A" { 1.3 } else { 1.0 };
        let p: f64 = zeta * 0.74 / 0.529_177_210_903;
        assert_abs_diff_eq!(s[1], (-p).exp() * (1.0 + p + p * p / 3.0), epsilon = 1e-14);
        assert_abs_diff_eq!(s[1], s_known, epsilon = 5e-5);
        assert_abs_diff_eq!(h[1], 1.75 * s[1] * -13.6, epsilon = 1e-12);
        let values = levels(&plan, &positions);
        assert_abs_diff_eq!(values[0], low, epsilon = 5e-4);
        assert_abs_diff_eq!(values[1], high, epsilon = 5e-4);
        let exact = -13.6 * (1.0 + 1.75 * s[1]) / (1.0 + s[1]);
        assert_abs_diff_eq!(values[0], exact, epsilon = 1e-11);
    }
}

#[test]
fn two_different_atoms_in_closed_form() {
    // H₁ = −13.6, H₂ = −24.6, S = 0.435, K = 1.75: H₁₂ = −14.5399, E = −25.5741, −5.9394 eV. Helium
    // is given −24.6, and the distance that has this S is found by halving.
    let text = "[set]\nname = \"x\"\nenergy = \"eV\"\nexponent = \"1/bohr\"\n[He]\nshells = [{ shell = \"1s\", hii = -24.6, zeta = 1.688 }]\n";
    let set = ParameterSet::default().overlay(text, "x.toml").unwrap();
    let method = Method::default();
    let basis = Basis::new(&elements(&["H", "He"]), &set, &method).unwrap();
    let plan = HamiltonianPlan::new(&basis, &method).unwrap();
    let at = |r: f64| [[0.0; 3], [0.0, r, 0.0]];
    let (mut near, mut far) = (0.3, 3.0);
    for _ in 0..60 {
        let middle = 0.5 * (near + far);
        if matrices(&plan, &at(middle)).0[1] > 0.435 {
            near = middle
        } else {
            far = middle
        }
    }
    let (_, h) = matrices(&plan, &at(near));
    assert_abs_diff_eq!(h[1], -14.5399, epsilon = 5e-5);
    let values = levels(&plan, &at(near));
    assert_abs_diff_eq!(values[0], -25.5741, epsilon = 5e-5);
    assert_abs_diff_eq!(values[1], -5.9394, epsilon = 5e-5);
}

#[test]
fn matrices_are_symmetric_with_bounded_overlaps() {
    for form in FORMS {
        let (plan, positions) = crooked(form);
        let n = plan.len();
        let (s, h) = matrices(&plan, &positions);
        for i in 0..n {
            assert_abs_diff_eq!(s[i * n + i], 1.0, epsilon = 0.0);
            for j in 0..n {
                assert_eq!(s[i * n + j].to_bits(), s[j * n + i].to_bits());
                assert_eq!(h[i * n + j].to_bits(), h[j * n + i].to_bits());
                assert!(s[i * n + j].abs() <= 1.0 && h[i * n + j].is_finite());
            }
        }
        // On one atom S is the unit matrix here and H is diagonal.
        for atom in plan.atoms() {
            for i in atom.clone() {
                for j in atom.clone().filter(|j| *j != i) {
                    assert_eq!((s[i * n + j], h[i * n + j]), (0.0, 0.0));
                }
            }
        }
    }
}

#[test]
fn levels_do_not_turn_with_the_molecule() {
    // Rotation about (1, 2, 2)/3 by 1.1 rad, a shift, and a reflection.
    let (sine, cosine) = 1.1_f64.sin_cos();
    let u = [1.0 / 3.0, 2.0 / 3.0, 2.0 / 3.0];
    let turn = |p: [f64; 3]| -> [f64; 3] {
        let dot = u[0] * p[0] + u[1] * p[1] + u[2] * p[2];
        let cross = [
            u[1] * p[2] - u[2] * p[1],
            u[2] * p[0] - u[0] * p[2],
            u[0] * p[1] - u[1] * p[0],
        ];
        std::array::from_fn(|i| {
            let sign = if i == 0 { -1.0 } else { 1.0 };
            sign * (p[i] * cosine + cross[i] * sine + u[i] * dot * (1.0 - cosine)) + 3.0
        })
    };
    for form in FORMS {
        let (plan, positions) = crooked(form);
        let turned: Vec<[f64; 3]> = positions.iter().map(|p| turn(*p)).collect();
        for (here, there) in levels(&plan, &positions).iter().zip(levels(&plan, &turned)) {
            assert!((here - there).abs() < 1e-9, "{form}: {here} {there}");
        }
    }
}

#[test]
fn lanes_have_the_bits_of_one_geometry() {
    for form in FORMS {
        let (plan, positions) = crooked(form);
        let n = plan.len();
        let geometries = scattered(&positions);
        let (mut s, mut h) = (
            vec![[f64::NAN; LANES]; n * n],
            vec![[f64::NAN; LANES]; n * n],
        );
        plan.fill_lanes(&in_lanes(&geometries), &mut s, &mut h);
        for lane in 0..LANES {
            let (s_one, h_one) = matrices(&plan, &geometries[lane]);
            for at in 0..n * n {
                assert_eq!(s[at][lane].to_bits(), s_one[at].to_bits());
                assert_eq!(h[at][lane].to_bits(), h_one[at].to_bits(), "{form}");
            }
        }
        // H again from S, with the diagonal and K that the plan has.
        let diagonal: Vec<Lanes> = plan
            .diagonal_ev()
            .iter()
            .map(|&value| [value; LANES])
            .collect();
        let mut again = vec![[f64::NAN; LANES]; n * n];
        let k = [plan.method().k; LANES];
        plan.couple_lanes(&in_lanes(&geometries), &diagonal, &k, &s, &mut again);
        for (one, other) in h.iter().flatten().zip(again.iter().flatten()) {
            assert_abs_diff_eq!(one, other, epsilon = 1e-13);
        }
    }
}

#[test]
fn refilling_moved_pairs_is_enough() {
    for form in [Coupling::Constant, Coupling::Anderson] {
        let (plan, start) = crooked(form);
        let mut end = start.clone();
        end[4][0] += 0.3;
        let moving = plan.moving_pairs([start.as_slice(), end.as_slice()]);
        let expected: Vec<usize> = (0..plan.pairs().len())
            .filter(|&pair| plan.pairs()[pair].b == 4)
            .collect();
        assert_eq!(moving, expected);
        let (mut s, mut h) = matrices(&plan, &start);
        plan.refill(&end, &moving, &mut s, &mut h);
        assert_eq!((s, h), matrices(&plan, &end));
    }
}

#[test]
fn gradients_meet_finite_differences() {
    let step = 1e-4;
    for form in FORMS {
        let (plan, positions) = crooked(form);
        let n = plan.len();
        for (index, pair) in plan.pairs().iter().enumerate() {
            let mut exact = PairGradient::default();
            plan.pair_gradient(index, &positions, &mut exact);
            for axis in 0..3 {
                let at = |shift: f64| {
                    let mut moved = positions.clone();
                    moved[pair.b][axis] += shift;
                    matrices(&plan, &moved)
                };
                let ((s1, h1), (s2, h2)) = (at(step), at(-step));
                let ((s3, h3), (s4, h4)) = (at(2.0 * step), at(-2.0 * step));
                let slope = |one: f64, two: f64, three: f64, four: f64| {
                    (8.0 * (one - two) - (three - four)) / (12.0 * step)
                };
                for (row, i) in plan.atoms()[pair.a].clone().enumerate() {
                    for (column, j) in plan.atoms()[pair.b].clone().enumerate() {
                        let at = i * n + j;
                        let here = (axis * exact.rows + row) * exact.columns + column;
                        let (ds, dh) = (
                            exact.overlap_gradient[here],
                            exact.hamiltonian_gradient[here],
                        );
                        let ds_found = slope(s1[at], s2[at], s3[at], s4[at]);
                        let dh_found = slope(h1[at], h2[at], h3[at], h4[at]);
                        assert!((ds - ds_found).abs() < 1e-9, "{form} S {ds} {ds_found}");
                        // Cusachs's |S| has a corner where a diatomic overlap changes sign.
                        assert!((dh - dh_found).abs() < 1e-7, "{form} H {dh} {dh_found}");
                    }
                }
            }
        }
    }
}

#[test]
fn gradient_lanes_have_the_bits_of_one_geometry() {
    for form in FORMS {
        let (plan, positions) = crooked(form);
        let geometries = scattered(&positions);
        let (mut one, mut all) = (PairGradient::default(), PairGradient::default());
        for index in 0..plan.pairs().len() {
            plan.pair_gradient_lanes(index, &in_lanes(&geometries), &mut all);
            for (lane, geometry) in geometries.iter().enumerate() {
                plan.pair_gradient(index, geometry, &mut one);
                for (a, b) in one.overlap_gradient.iter().zip(&all.overlap_gradient) {
                    assert_eq!(a.to_bits(), b[lane].to_bits());
                }
                for (a, b) in one
                    .hamiltonian_gradient
                    .iter()
                    .zip(&all.hamiltonian_gradient)
                {
                    assert_eq!(a.to_bits(), b[lane].to_bits());
                }
            }
        }
    }
}

#[test]
fn scaling_and_separation() {
    let (mut plan, positions) = crooked(Coupling::Constant);
    let before = levels(&plan, &positions);
    let scaled: Vec<f64> = plan.diagonal_ev().iter().map(|value| 1.3 * value).collect();
    plan.set_diagonal(&scaled).unwrap();
    for (one, other) in before.iter().zip(levels(&plan, &positions)) {
        assert_abs_diff_eq!(1.3 * one, other, epsilon = 1e-9);
    }
    let apart: Vec<[f64; 3]> = (0..5)
        .map(|atom| [60.0 * f64::from(atom), 0.0, 0.0])
        .collect();
    let mut diagonal = plan.diagonal_ev().to_vec();
    diagonal.sort_by(f64::total_cmp);
    for (one, other) in diagonal.iter().zip(levels(&plan, &apart)) {
        assert_abs_diff_eq!(*one, other, epsilon = 1e-9);
    }
}

#[test]
fn charge_response_moves_the_diagonal_and_keeps_the_kernels() {
    let (mut plan, positions) = crooked(Coupling::Weighted);
    let (s, h) = matrices(&plan, &positions);
    plan.set_atom_shifts(&[0.5, -0.2, -0.4, 0.1, 0.1]).unwrap();
    let (s_moved, h_moved) = matrices(&plan, &positions);
    assert_eq!(s, s_moved);
    assert_abs_diff_eq!(h_moved[0], h[0] + 0.5, epsilon = 1e-12);
    plan.set_atom_shifts(&[0.0; 5]).unwrap();
    assert_eq!(matrices(&plan, &positions), (s, h));
    assert!(plan.set_atom_shifts(&[0.0; 4]).is_err());
    assert!(
        plan.set_atom_shifts(&[0.0, 0.0, 0.0, 5.0, 0.0]).is_err(),
        "H 2p above zero"
    );
    assert!(
        plan.set_atom_shifts(&[f64::NAN, 0.0, 0.0, 0.0, 0.0])
            .is_err()
    );
}

#[test]
fn two_s_shells_on_one_atom_keep_their_true_overlap() {
    let text = "[set]\nname = \"x\"\nenergy = \"eV\"\nexponent = \"1/bohr\"\n[He]\nshells = [{ shell = \"1s\", hii = -24.6, zeta = 1.3 }, { shell = \"2s\", hii = -4.0, zeta = 1.3 }]\n";
    let set = ParameterSet::default().overlay(text, "x.toml").unwrap();
    let method = Method::default();
    let basis = Basis::new(&elements(&["He"]), &set, &method).unwrap();
    let plan = HamiltonianPlan::new(&basis, &method).unwrap();
    let (s, h) = matrices(&plan, &[[0.0; 3]]);
    // ⟨1s|2s⟩ of equal exponents is √3/2, exact.
    assert_abs_diff_eq!(s[1], 0.75_f64.sqrt(), epsilon = 1e-14);
    assert_eq!(h, [-24.6, 0.0, 0.0, -4.0]);
}
