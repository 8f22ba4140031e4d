//! Problems with known properties, and one check for every solution.
#![allow(dead_code, clippy::unwrap_used, clippy::needless_range_loop)] // shared by the test files, each uses a part

/// A small generator of numbers in −1 … 1 (linear congruence of Knuth, MMIX).
pub(crate) struct Numbers(u64);

impl Numbers {
    pub(crate) fn new(seed: u64) -> Self {
        Numbers(seed.wrapping_mul(0x9e37_79b9_7f4a_7c15).wrapping_add(1))
    }

    pub(crate) fn next(&mut self) -> f64 {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 11) as f64 / (1u64 << 52) as f64 - 1.0
    }
}

/// H and S, n × n.
#[derive(Clone)]
pub(crate) struct Problem {
    pub(crate) n: usize,
    pub(crate) h: Vec<f64>,
    pub(crate) s: Vec<f64>,
}

/// Like a molecule: S from Gaussians on random places of a chain, H = 1.75 S (hᵢ+hⱼ)/2.
pub(crate) fn molecule_like(n: usize, seed: u64) -> Problem {
    let mut numbers = Numbers::new(seed);
    let places: Vec<[f64; 3]> = (0..n)
        .map(|i| {
            [
                i as f64 * 0.9 + 0.2 * numbers.next(),
                numbers.next(),
                numbers.next(),
            ]
        })
        .collect();
    let levels: Vec<f64> = (0..n).map(|_| -15.0 - 5.0 * numbers.next()).collect();
    let mut s = vec![0.0; n * n];
    let mut h = vec![0.0; n * n];
    for i in 0..n {
        for j in 0..n {
            let square: f64 = (0..3).map(|x| (places[i][x] - places[j][x]).powi(2)).sum();
            s[i * n + j] = if i == j {
                1.0
            } else {
                0.95 * (-0.4 * square).exp()
            };
            h[i * n + j] = if i == j {
                levels[i]
            } else {
                1.75 * s[i * n + j] * (levels[i] + levels[j]) / 2.0
            };
        }
    }
    Problem { n, h, s }
}

/// A random orthogonal matrix (product of n random reflections), row-major.
pub(crate) fn orthogonal(n: usize, seed: u64) -> Vec<f64> {
    let mut numbers = Numbers::new(seed);
    let mut q = vec![0.0; n * n];
    for i in 0..n {
        q[i * n + i] = 1.0;
    }
    for _ in 0..n {
        let v: Vec<f64> = (0..n).map(|_| numbers.next()).collect();
        let square: f64 = v.iter().map(|x| x * x).sum();
        for row in q.chunks_mut(n) {
            let dot: f64 = row.iter().zip(&v).map(|(a, b)| a * b).sum();
            for (x, y) in row.iter_mut().zip(&v) {
                *x -= 2.0 * dot / square * y;
            }
        }
    }
    q
}

/// Q diag(values) Qᵀ, exactly symmetric.
pub(crate) fn with_spectrum(values: &[f64], seed: u64) -> Vec<f64> {
    let n = values.len();
    let q = orthogonal(n, seed);
    let mut m = vec![0.0; n * n];
    for i in 0..n {
        for j in 0..i + 1 {
            let x: f64 = (0..n)
                .map(|k| q[i * n + k] * values[k] * q[j * n + k])
                .sum();
            m[i * n + j] = x;
            m[j * n + i] = x;
        }
    }
    m
}

/// Lᵀ-free reference: Cholesky reduction and nalgebra's symmetric solver; ascending eigenvalues.
pub(crate) fn reference_values(p: &Problem) -> Vec<f64> {
    let h = nalgebra::DMatrix::from_row_slice(p.n, p.n, &p.h);
    let s = nalgebra::DMatrix::from_row_slice(p.n, p.n, &p.s);
    let l = s.cholesky().unwrap().l();
    let half = l.solve_lower_triangular(&h).unwrap();
    let a = l.solve_lower_triangular(&half.transpose()).unwrap();
    let a = (&a + a.transpose()) * 0.5;
    let mut values: Vec<f64> = nalgebra::SymmetricEigen::try_new(a, 1e-15, 10_000)
        .unwrap()
        .eigenvalues
        .iter()
        .copied()
        .collect();
    values.sort_by(f64::total_cmp);
    values
}

pub(crate) fn largest(x: &[f64]) -> f64 {
    x.iter().fold(0.0, |m, y| m.max(y.abs()))
}

/// Everything that must hold for a solution; `slack` multiplies the bound 1e-15·n·max|ε|, where S
/// is so ill-conditioned that more cannot be asked.
pub(crate) fn check(p: &Problem, values: &[f64], vectors: &[f64], slack: f64) {
    let n = p.n;
    assert!(values.windows(2).all(|w| w[0] <= w[1]), "not sorted");
    let energy = largest(values).max(largest(&p.h));
    let bound = 1e-15 * n.max(4) as f64 * slack;
    for k in 0..n {
        let c = &vectors[k * n..(k + 1) * n];
        let times = |m: &[f64], i: usize| {
            m[i * n..(i + 1) * n]
                .iter()
                .zip(c)
                .map(|(a, b)| a * b)
                .sum::<f64>()
        };
        let sc: Vec<f64> = (0..n).map(|i| times(&p.s, i)).collect();
        for i in 0..n {
            let residual = (times(&p.h, i) - values[k] * sc[i]).abs();
            assert!(
                residual <= bound * energy * largest(c).max(1.0),
                "n {n} level {k}: residual {residual:e}, energy {energy:e}"
            );
        }
        for (l, other) in vectors.chunks(n).enumerate() {
            let dot: f64 = other.iter().zip(&sc).map(|(a, b)| a * b).sum();
            let error = (dot - if k == l { 1.0 } else { 0.0 }).abs();
            assert!(
                error <= bound * 4.0,
                "n {n} levels {k} {l}: orthonormality {error:e}"
            );
        }
        let limit = largest(c) * (1.0 - 1e-9);
        assert!(
            *c.iter().find(|x| x.abs() >= limit).unwrap() > 0.0,
            "sign rule"
        );
    }
}

/// Packs up to eight problems in lanes; missing ones repeat the last.
pub(crate) fn lanes_of(problems: &[Problem]) -> (Vec<[f64; 8]>, Vec<[f64; 8]>) {
    let size = problems[0].n * problems[0].n;
    let pick = |lane: usize| &problems[lane.min(problems.len() - 1)];
    let h = (0..size)
        .map(|i| core::array::from_fn(|l| pick(l).h[i]))
        .collect();
    let s = (0..size)
        .map(|i| core::array::from_fn(|l| pick(l).s[i]))
        .collect();
    (h, s)
}

/// One lane's numbers.
pub(crate) fn lane(from: &[[f64; 8]], lane: usize) -> Vec<f64> {
    from.iter().map(|x| x[lane]).collect()
}
