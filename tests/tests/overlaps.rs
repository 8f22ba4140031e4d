//! Slater overlaps against high-precision values, published tables and closed forms.

use std::f64::consts::PI;
use std::fs;
use std::path::Path;

use orbend_overlap::{
    PairKernel, Primitive, Shell, Term, harmonics, slater_overlap, slater_overlap_derivative,
};

/// CODATA 2018, as in the units of the structure crate.
const BOHR_ANGSTROM: f64 = 0.529_177_210_903;

fn slater(n: u8, l: u8, zeta: f64) -> Primitive {
    Primitive { n, l, zeta }
}

fn reference(name: &str) -> String {
    let path = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("reference")
        .join(name);
    fs::read_to_string(&path).unwrap_or_else(|error| panic!("{}: {error}", path.display()))
}

/// One row of `reference/overlap.csv` (made by `reference/overlap.py`).
struct Row {
    a: Primitive,
    b: Primitive,
    m: u8,
    distance: f64,
    overlap: f64,
    slope: f64,
}

fn rows() -> Vec<Row> {
    let number = |text: &str| text.parse::<f64>().unwrap();
    let small = |text: &str| text.parse::<u8>().unwrap();
    let read = |line: &str| {
        let c: Vec<&str> = line.split(',').collect();
        Row {
            a: slater(small(c[0]), small(c[1]), number(c[5])),
            b: slater(small(c[2]), small(c[3]), number(c[6])),
            m: small(c[4]),
            distance: number(c[7]),
            overlap: number(c[8]),
            slope: number(c[9]),
        }
    };
    reference("overlap.csv").lines().skip(1).map(read).collect()
}

/// Worst, 99th percentile and median.
fn distribution(mut errors: Vec<f64>) -> [f64; 3] {
    errors.sort_by(f64::total_cmp);
    let at = |share: f64| errors[((errors.len() - 1) as f64 * share) as usize];
    [at(1.0), at(0.99), at(0.5)]
}

fn report(what: &str, errors: Vec<f64>) -> f64 {
    let count = errors.len();
    let [worst, p99, median] = distribution(errors);
    println!("{what}: worst {worst:.1e}, 99 % {p99:.1e}, median {median:.1e} ({count} values)");
    worst
}

#[test]
fn absolute_error_over_the_whole_domain() {
    let (mut small, mut all) = (Vec::new(), Vec::new());
    for row in rows() {
        let value = slater_overlap(row.a, row.b, row.m, row.distance).unwrap();
        let error = (value - row.overlap).abs();
        if row.a.n <= 4 && row.b.n <= 4 {
            small.push(error);
        }
        all.push(error);
    }
    assert!(all.len() >= 10_000 && small.len() >= 5_000);
    assert!(report("overlap, n ≤ 4", small) <= 2e-14);
    assert!(report("overlap, n ≤ 7", all) <= 2e-13);
}

#[test]
fn derivative_over_the_whole_domain() {
    // A derivative has the size of ζ: its error is counted in units of ζ + ζ′.
    let (mut small, mut all) = (Vec::new(), Vec::new());
    for row in rows() {
        let slope = slater_overlap_derivative(row.a, row.b, row.m, row.distance).unwrap();
        let error = (slope - row.slope).abs() / (row.a.zeta + row.b.zeta);
        if row.a.n <= 4 && row.b.n <= 4 {
            small.push(error);
        }
        all.push(error);
    }
    assert!(report("dS/dR over ζ+ζ′, n ≤ 4", small) <= 2e-14);
    assert!(report("dS/dR over ζ+ζ′, n ≤ 7", all) <= 2e-13);
}

/// "2ps" → (2, 1, 0): letters s, p, d and s, p, d for σ, π, δ.
fn function(name: &str) -> (u8, u8, u8) {
    let letter = |c: char| "spd".find(c).unwrap() as u8;
    let mut chars = name.chars();
    let n = chars.next().unwrap().to_digit(10).unwrap() as u8;
    let l = letter(chars.next().unwrap());
    (n, l, chars.next().map_or(0, letter))
}

/// Overlap in the convention of Mulliken, Rieke, Orloff & Orloff, J. Chem. Phys. 17, 1248 (1949):
/// the z axes of the two centres face each other, which turns the sign of an m function of B by
/// (−1)^(l+m).
fn facing(a: &str, b: &str, zeta_a: f64, zeta_b: f64, distance: f64) -> f64 {
    let ((n_a, l_a, m), (n_b, l_b, m_b)) = (function(a), function(b));
    assert_eq!(m, m_b);
    let (a, b) = (slater(n_a, l_a, zeta_a), slater(n_b, l_b, zeta_b));
    let sign = if (l_b + m).is_multiple_of(2) {
        1.0
    } else {
        -1.0
    };
    sign * slater_overlap(a, b, m, distance).unwrap()
}

#[test]
fn closed_forms_for_equal_exponents() {
    // S e^p as polynomials in p = ζR: printed for 1s1s, 2s2s, 2pσ2pσ, 2pπ2pπ in Mulliken et al.
    // 1949 (from memory), the others re-derived by computer algebra in the same convention.
    let r3 = 3.0_f64.sqrt();
    let r2 = 2.0_f64.sqrt();
    let r6 = 6.0_f64.sqrt();
    let forms: [(&str, &str, f64, &[f64]); 17] = [
        ("1s", "1s", 1.0, &[1.0, 1.0, 1.0 / 3.0]),
        ("1s", "2s", r3, &[0.5, 0.5, 2.0 / 9.0, 1.0 / 18.0]),
        ("1s", "2ps", 1.0, &[0.0, 0.5, 0.5, 1.0 / 6.0]),
        (
            "2s",
            "2s",
            1.0,
            &[1.0, 1.0, 4.0 / 9.0, 1.0 / 9.0, 1.0 / 45.0],
        ),
        (
            "2s",
            "2ps",
            r3,
            &[0.0, 1.0 / 6.0, 1.0 / 6.0, 7.0 / 90.0, 1.0 / 45.0],
        ),
        (
            "2ps",
            "2ps",
            1.0,
            &[-1.0, -1.0, -0.2, 2.0 / 15.0, 1.0 / 15.0],
        ),
        ("2pp", "2pp", 1.0, &[1.0, 1.0, 0.4, 1.0 / 15.0]),
        (
            "3s",
            "3s",
            1.0,
            &[
                1.0,
                1.0,
                7.0 / 15.0,
                2.0 / 15.0,
                2.0 / 75.0,
                1.0 / 225.0,
                1.0 / 1575.0,
            ],
        ),
        (
            "3s",
            "3ps",
            r3,
            &[
                0.0,
                1.0 / 9.0,
                1.0 / 9.0,
                4.0 / 75.0,
                11.0 / 675.0,
                17.0 / 4725.0,
                1.0 / 1575.0,
            ],
        ),
        (
            "3ps",
            "3ps",
            1.0,
            &[
                -1.0,
                -1.0,
                -9.0 / 25.0,
                -2.0 / 75.0,
                34.0 / 1575.0,
                13.0 / 1575.0,
                1.0 / 525.0,
            ],
        ),
        (
            "3pp",
            "3pp",
            1.0,
            &[
                1.0,
                1.0,
                34.0 / 75.0,
                3.0 / 25.0,
                31.0 / 1575.0,
                1.0 / 525.0,
            ],
        ),
        ("1s", "3ds", r2, &[0.0, 0.0, 0.1, 0.1, 1.0 / 30.0]),
        (
            "2ps",
            "3ds",
            r2,
            &[0.0, -1.0 / 3.0, -1.0 / 3.0, -0.1, 1.0 / 90.0, 1.0 / 90.0],
        ),
        (
            "2pp",
            "3dp",
            r6,
            &[0.0, 1.0 / 6.0, 1.0 / 6.0, 1.0 / 15.0, 1.0 / 90.0],
        ),
        (
            "3ds",
            "3ds",
            1.0,
            &[
                1.0,
                1.0,
                5.0 / 21.0,
                -2.0 / 21.0,
                -2.0 / 35.0,
                -1.0 / 315.0,
                1.0 / 315.0,
            ],
        ),
        (
            "3dp",
            "3dp",
            1.0,
            &[-1.0, -1.0, -2.0 / 7.0, 1.0 / 21.0, 1.0 / 21.0, 1.0 / 105.0],
        ),
        (
            "3dd",
            "3dd",
            1.0,
            &[1.0, 1.0, 3.0 / 7.0, 2.0 / 21.0, 1.0 / 105.0],
        ),
    ];
    for (a, b, factor, polynomial) in forms {
        for step in 1..=120 {
            let p = 0.1 * f64::from(step);
            let sum = polynomial.iter().rev().fold(0.0, |sum, c| sum * p + c);
            let expected = factor * sum * (-p).exp();
            for zeta in [0.7, 1.0, 3.2] {
                let error = (facing(a, b, zeta, zeta, p / zeta) - expected).abs();
                assert!(error < 1e-10, "{a} {b} p = {p}: {error:e}");
            }
        }
    }
}

#[test]
fn table_by_p_and_t() {
    let text = reference("slater_pt.csv");
    let mut lines = text.lines().filter(|line| !line.starts_with('#'));
    let header: Vec<&str> = lines.next().unwrap().split(',').collect();
    let mut errors = Vec::new();
    for line in lines {
        let cells: Vec<&str> = line.split(',').collect();
        let (a, b) = cells[0].split_once(' ').unwrap();
        let t: f64 = cells[1].parse().unwrap();
        for (name, cell) in header.iter().zip(&cells).skip(2) {
            let p: f64 = name[1..].parse().unwrap();
            let expected: f64 = cell.parse().unwrap();
            let (zeta_a, zeta_b) = (p * (1.0 + t), p * (1.0 - t));
            errors.push((facing(a, b, zeta_a, zeta_b, 1.0) - expected).abs());
            // The other order: the picture seen from the other side.
            errors.push((facing(b, a, zeta_b, zeta_a, 1.0) - expected).abs());
        }
    }
    assert!(errors.len() > 1500);
    assert!(report("table by (p, t), 8 figures", errors) < 1e-7);
}

#[test]
fn printed_numbers() {
    let bohr = |angstrom: f64| angstrom / BOHR_ANGSTROM;
    // Mulliken, Rieke, Orloff & Orloff 1949; Mulliken, J. Am. Chem. Soc. 72, 4493 (1950), carbon
    // with ζ 1.625 (from memory).
    let pi = |length: f64| facing("2pp", "2pp", 1.625, 1.625, bohr(length));
    assert!((pi(1.34) - 0.27).abs() < 0.005);
    assert!((pi(1.39) - 0.25).abs() < 0.005);
    assert!((pi(1.20) - 0.34).abs() < 0.005);
    // Facing hybrids s cos + p sin: Mulliken 1950; Coulson, Valence (from memory).
    let hybrid = |s_share: f64, length: f64| {
        let r = bohr(length);
        let [ss, sp, pp] = [("2s", "2s"), ("2s", "2ps"), ("2ps", "2ps")]
            .map(|(a, b)| facing(a, b, 1.625, 1.625, r));
        let p_share = 1.0 - s_share;
        s_share * ss + 2.0 * (s_share * p_share).sqrt() * sp + p_share * pp
    };
    assert!((hybrid(0.25, 1.54) - 0.65).abs() < 0.005);
    assert!((hybrid(1.0 / 3.0, 1.34) - 0.77).abs() < 0.005);
    assert!((hybrid(0.5, 1.20) - 0.875).abs() < 0.008);
    // Methane of Lowe & Peterson, Quantum Chemistry, ch. 10: r(CH) 1.1 Å, ζ 1.625 and 1.2 (from
    // memory).
    let r = bohr(1.1);
    assert!((facing("2s", "1s", 1.625, 1.2, r) - 0.5133).abs() < 1e-4);
    assert!((facing("2ps", "1s", 1.625, 1.2, r) - 0.4855).abs() < 1e-4);
    let hh = r * (8.0_f64 / 3.0).sqrt();
    assert!((facing("1s", "1s", 1.2, 1.2, hh) - 0.1805).abs() < 1e-4);
}

#[test]
fn sign_convention() {
    // Both z axes along A→B: p functions pointing the same way give +1 on one centre …
    let p = slater(2, 1, 1.625);
    assert!((slater_overlap(p, p, 0, 0.0).unwrap() - 1.0).abs() < 1e-15);
    // … and an s on A meets the negative lobe of a p on B.
    let s = slater(2, 0, 1.625);
    assert!(slater_overlap(s, p, 0, 2.5).unwrap() < -0.1);
    assert!(slater_overlap(p, s, 0, 2.5).unwrap() > 0.1);
}

/// A rotation (improper for odd `k`) that is different for each `k`.
fn turn(k: u32) -> [[f64; 3]; 3] {
    let angles = [1.0, 2.3, 3.1].map(|f| f * (1.0 + f64::from(k)) % PI);
    let about = |angle: f64, i: usize, j: usize| {
        let mut m = [[0.0; 3]; 3];
        m[3 - i - j][3 - i - j] = 1.0;
        (m[i][i], m[j][j]) = (angle.cos(), angle.cos());
        (m[i][j], m[j][i]) = (-angle.sin(), angle.sin());
        m
    };
    let product = |a: [[f64; 3]; 3], b: [[f64; 3]; 3]| {
        let mut out = [[0.0; 3]; 3];
        for (row, target) in a.iter().zip(&mut out) {
            for (j, cell) in target.iter_mut().enumerate() {
                *cell = (0..3).map(|x| row[x] * b[x][j]).sum();
            }
        }
        out
    };
    let proper = product(
        about(angles[0], 0, 1),
        product(about(angles[1], 1, 2), about(angles[2], 0, 2)),
    );
    let sign = if k % 2 == 1 { -1.0 } else { 1.0 };
    proper.map(|row| row.map(|x| sign * x))
}

fn metal() -> Vec<Shell> {
    let terms = vec![
        Term {
            zeta: 5.75,
            coefficient: 0.5683,
        },
        Term {
            zeta: 2.0,
            coefficient: 0.6292,
        },
    ];
    vec![
        Shell::single(4, 0, 2.1),
        Shell::single(4, 1, 2.1),
        Shell { n: 3, l: 2, terms }.normalised().unwrap(),
        Shell::single(4, 3, 3.3),
    ]
}

/// The rotation on all functions of some shells, D[j][i] row-major.
fn block_rotation(shells: &[Shell], matrix: &[[f64; 3]; 3]) -> Vec<Vec<f64>> {
    let size = shells.iter().map(Shell::functions).sum();
    let mut out = vec![vec![0.0; size]; size];
    let mut first = 0;
    for shell in shells {
        let d = harmonics::rotation(shell.l, matrix);
        for j in 0..shell.functions() {
            for i in 0..shell.functions() {
                out[first + j][first + i] = d[j][i];
            }
        }
        first += shell.functions();
    }
    out
}

#[test]
fn rotated_block_is_the_transformed_block() {
    let shells = metal();
    let kernel = PairKernel::new(&shells, &shells).unwrap();
    let n = kernel.rows();
    let mut worst = 0.0_f64;
    for k in 0..40 {
        let place = [0.3 + 0.1 * f64::from(k), -1.2, 0.9];
        let matrix = turn(k);
        let turned = matrix.map(|row| (0..3).map(|x| row[x] * place[x]).sum());
        let d = block_rotation(&shells, &matrix);
        let (mut before, mut after) = (vec![0.0; n * n], vec![0.0; n * n]);
        kernel.block(place, &mut before);
        kernel.block(turned, &mut after);
        for i in 0..n {
            for j in 0..n {
                let mut sum = 0.0;
                for p in 0..n {
                    for q in 0..n {
                        sum += d[i][p] * before[p * n + q] * d[j][q];
                    }
                }
                worst = worst.max((sum - after[i * n + j]).abs());
            }
        }
    }
    println!("S(Rr) against D S Dᵀ, s p d f: worst {worst:.1e}");
    assert!(worst < 1e-14);
}

#[test]
fn gradient_against_central_differences() {
    let (a, b) = (
        metal(),
        vec![
            Shell::single(2, 0, 1.625),
            Shell::single(2, 1, 1.625),
            Shell::single(5, 2, 9.0),
        ],
    );
    let kernel = PairKernel::new(&a, &b).unwrap();
    let size = kernel.rows() * kernel.columns();
    let h = 1e-4;
    let mut worst = 0.0_f64;
    for place in [
        [0.4, -0.3, 0.6],
        [1.5, 2.0, -0.7],
        [0.0, 0.0, 2.5],
        [0.0, -3.0, 0.0],
        [4.0, 4.0, 0.1],
    ] {
        let (mut value, mut gradient) = (vec![0.0; size], vec![0.0; 3 * size]);
        kernel.gradient(place, &mut value, &mut gradient);
        for axis in 0..3 {
            let at = |step: f64| {
                let mut moved = place;
                moved[axis] += step;
                let mut block = vec![0.0; size];
                kernel.block(moved, &mut block);
                block
            };
            // Five points: the error of the formula is of the fourth order.
            let [far_down, down, up, far_up] = [-2.0 * h, -h, h, 2.0 * h].map(at);
            for e in 0..size {
                let slope = (8.0 * (up[e] - down[e]) - (far_up[e] - far_down[e])) / (12.0 * h);
                worst = worst.max((slope - gradient[axis * size + e]).abs());
            }
        }
    }
    println!("gradient of blocks against five-point differences: worst {worst:.1e}");
    assert!(worst < 2e-11);
}

#[test]
fn gradient_along_and_across_the_bond() {
    // Along the bond the gradient is dS/dR of the diatomic integrals, across it the first-order
    // turn of the functions: for s and p, ∂⟨s|p_x⟩/∂x = ⟨s|pσ⟩/R at a bond along z.
    let p = slater(2, 1, 1.625);
    let s = slater(3, 0, 2.1);
    let shells = |q: Primitive| vec![Shell::single(q.n, q.l, q.zeta)];
    let kernel = PairKernel::new(&shells(s), &shells(p)).unwrap();
    for r in [0.3, 1.9, 5.0] {
        let (mut value, mut gradient) = ([0.0; 3], [0.0; 9]);
        kernel.gradient([0.0, 0.0, r], &mut value, &mut gradient);
        let along = slater_overlap_derivative(s, p, 0, r).unwrap();
        let across = slater_overlap(s, p, 0, r).unwrap() / r;
        assert!(
            (gradient[6] - along).abs() < 1e-14,
            "z component of ⟨s|p_z⟩"
        );
        // Two s functions alone: along the bond only.
        let alone = PairKernel::new(&shells(s), &shells(s)).unwrap();
        let (mut value, mut slopes) = ([0.0; 1], [0.0; 3]);
        alone.gradient([0.0, 0.0, r], &mut value, &mut slopes);
        let expected = slater_overlap_derivative(s, s, 0, r).unwrap();
        assert!(
            (slopes[2] - expected).abs() < 1e-14 && expected < -1e-3,
            "⟨s|s⟩"
        );
        assert!(slopes[0].abs() + slopes[1].abs() < 1e-15, "⟨s|s⟩ across");
        assert!(
            (gradient[1] - across).abs() < 1e-14,
            "x component of ⟨s|p_x⟩"
        );
        assert!(
            (gradient[5] - across).abs() < 1e-14,
            "y component of ⟨s|p_y⟩"
        );
    }
}
