//! The kernels whose instructions are counted.

use std::error::Error;
use std::hint::black_box;

use orbend_eigen::{LANES, LaneWorkspace, Lanes};
use orbend_overlap::{PairKernel, Shell, Term};
use orbend_scan::Sweep;

use crate::cases::Case;

/// `overlap` (eight geometries of C–O, Si–Si with d and Ni–Ni with double-ζ d), `eigen` (eight
/// problems of 6, 12 and 30 functions, with vectors) or `sweep` (the labelled sweep of bent AH2).
pub(crate) fn run(kernel: &str, repetitions: usize) -> Result<(), Box<dyn Error>> {
    match kernel {
        "overlap" => overlap(repetitions),
        "eigen" => eigen(repetitions),
        "sweep" => sweep(repetitions),
        other => Err(format!("{other}: overlap, eigen or sweep").into()),
    }
}

fn shell(n: u8, l: u8, terms: &[(f64, f64)]) -> Result<Shell, Box<dyn Error>> {
    let terms = terms
        .iter()
        .map(|&(zeta, coefficient)| Term { zeta, coefficient })
        .collect();
    Ok(Shell { n, l, terms }.normalised()?)
}

fn overlap(repetitions: usize) -> Result<(), Box<dyn Error>> {
    let one = |n, l, zeta| shell(n, l, &[(zeta, 1.0)]);
    let carbon = vec![one(2, 0, 1.625)?, one(2, 1, 1.625)?];
    let oxygen = vec![one(2, 0, 2.275)?, one(2, 1, 2.275)?];
    let silicon = vec![one(3, 0, 1.383)?, one(3, 1, 1.383)?, one(3, 2, 1.383)?];
    let nickel = vec![
        one(4, 0, 2.1)?,
        one(4, 1, 2.1)?,
        shell(3, 2, &[(5.75, 0.5683), (2.0, 0.6292)])?,
    ];
    let at: Lanes = std::array::from_fn(|lane| 1.9 + 0.1 * lane as f64);
    let displacement = [at, at.map(|x| 0.3 * x), at.map(|x| 1.0 - x)];
    let mut out: Vec<Lanes> = vec![[0.0; LANES]; 81];
    for (a, b) in [(&carbon, &oxygen), (&silicon, &silicon), (&nickel, &nickel)] {
        let kernel = PairKernel::new(a, b)?;
        for _ in 0..repetitions {
            kernel.block_lanes(black_box(&displacement), black_box(&mut out));
        }
    }
    Ok(())
}

fn eigen(repetitions: usize) -> Result<(), Box<dyn Error>> {
    for n in [6, 12, 30] {
        let at = |lane: usize, i: usize| {
            let (x, shift) = (i as f64, 0.1 * lane as f64);
            [0.9 * x, (1.7 * x + shift).sin(), (2.9 * x - shift).cos()]
        };
        let level = |i: usize| -15.0 - 5.0 * (3.1 * i as f64).sin();
        let (mut h, mut s) = (vec![[0.0; LANES]; n * n], vec![[0.0; LANES]; n * n]);
        for i in 0..n {
            for j in 0..n {
                for lane in 0..LANES {
                    let (a, b) = (at(lane, i), at(lane, j));
                    let square: f64 = (0..3).map(|x| (a[x] - b[x]).powi(2)).sum();
                    let value = if i == j {
                        1.0
                    } else {
                        0.95 * (-0.4 * square).exp()
                    };
                    s[i * n + j][lane] = value;
                    h[i * n + j][lane] = if i == j {
                        level(i)
                    } else {
                        0.875 * value * (level(i) + level(j))
                    };
                }
            }
        }
        let mut room = LaneWorkspace::new(n);
        for _ in 0..repetitions {
            room.solve(black_box(&h), black_box(&s), true)?;
        }
    }
    Ok(())
}

fn sweep(repetitions: usize) -> Result<(), Box<dyn Error>> {
    let pool = rayon::ThreadPoolBuilder::new().num_threads(1).build()?;
    let case = Case::named("ah2")?;
    for _ in 0..repetitions {
        let plan = case.plan()?;
        black_box(pool.install(|| Sweep::run(plan))?);
    }
    Ok(())
}
