//! One eigenproblem: in lanes, alone, values only, with and without the check; nalgebra beside it.

#![allow(missing_docs)] // made by criterion's macros

use std::error::Error;
use std::hint::black_box;

use criterion::{BenchmarkId, Criterion, Throughput};
use orbend_eigen::{LANES, LaneWorkspace, Lanes, Workspace, solve};

/// H and S like a molecule's: S from Gaussians along a zigzag chain, H = 1.75 S (hᵢ + hⱼ)/2.
fn problem(n: usize, shift: f64) -> (Vec<f64>, Vec<f64>) {
    let place = |i: usize| {
        let x = i as f64;
        [0.9 * x, (1.7 * x + shift).sin(), (2.9 * x - shift).cos()]
    };
    let level = |i: usize| -15.0 - 5.0 * (3.1 * i as f64).sin();
    let (mut h, mut s) = (vec![0.0; n * n], vec![0.0; n * n]);
    for i in 0..n {
        for j in 0..n {
            let (a, b) = (place(i), place(j));
            let square: f64 = (0..3).map(|x| (a[x] - b[x]).powi(2)).sum();
            s[i * n + j] = if i == j {
                1.0
            } else {
                0.95 * (-0.4 * square).exp()
            };
            h[i * n + j] = if i == j {
                level(i)
            } else {
                0.875 * s[i * n + j] * (level(i) + level(j))
            };
        }
    }
    (h, s)
}

fn bench(criterion: &mut Criterion) -> Result<(), Box<dyn Error>> {
    for n in [6, 12, 30, 60] {
        let problems: Vec<_> = (0..LANES).map(|k| problem(n, 0.1 * k as f64)).collect();
        let pack = |pick: &dyn Fn(usize, usize) -> f64| -> Vec<Lanes> {
            (0..n * n)
                .map(|i| core::array::from_fn(|lane| pick(lane, i)))
                .collect()
        };
        let h = pack(&|lane, i| problems[lane].0[i]);
        let s = pack(&|lane, i| problems[lane].1[i]);
        let mut lanes = LaneWorkspace::new(n);
        let mut alone = Workspace::new(n);
        alone.set_smallest_overlap(false);
        lanes.solve(&h, &s, true)?;
        for (h, s) in &problems {
            solve(n, h, s)?;
        }
        let mut group = criterion.benchmark_group("eigen");
        group.throughput(Throughput::Elements(LANES as u64));
        group.bench_function(BenchmarkId::new("eight in lanes", n), |b| {
            b.iter(|| lanes.solve(black_box(&h), black_box(&s), true).is_ok());
        });
        group.bench_function(BenchmarkId::new("eight in lanes, values only", n), |b| {
            b.iter(|| lanes.solve(black_box(&h), black_box(&s), false).is_ok());
        });
        group.throughput(Throughput::Elements(1));
        let (h, s) = &problems[0];
        group.bench_function(BenchmarkId::new("one", n), |b| {
            b.iter(|| alone.solve(black_box(h), black_box(s)).is_ok());
        });
        group.bench_function(BenchmarkId::new("one, checked", n), |b| {
            b.iter(|| solve(n, black_box(h), black_box(s)).is_ok());
        });
        group.bench_function(BenchmarkId::new("one, nalgebra", n), |b| {
            b.iter(|| {
                let s = nalgebra::DMatrix::from_row_slice(n, n, black_box(s));
                let h = nalgebra::DMatrix::from_row_slice(n, n, black_box(h));
                let l = s.cholesky()?.l();
                let half = l.solve_lower_triangular(&h)?.transpose();
                let a = l.solve_lower_triangular(&half)?;
                let solved = nalgebra::SymmetricEigen::try_new(a, 1e-15, 1000)?;
                l.tr_solve_lower_triangular(&solved.eigenvectors)
            });
        });
        group.finish();
    }
    Ok(())
}

fn main() -> Result<(), Box<dyn Error>> {
    let mut criterion = Criterion::default().configure_from_args();
    bench(&mut criterion)?;
    criterion.final_summary();
    Ok(())
}
