//! Overlap of one pair of atoms, eight geometries at a time.

#![allow(
    clippy::expect_used,
    reason = "a bench whose input fails has nothing to measure"
)]

use std::hint::black_box;

use criterion::{Criterion, Throughput, criterion_group, criterion_main};
use orbend_overlap::{LANES, Lanes, PairKernel, Shell, Term};

fn shell(n: u8, l: u8, terms: &[(f64, f64)]) -> Shell {
    let terms = terms
        .iter()
        .map(|&(zeta, coefficient)| Term { zeta, coefficient })
        .collect();
    // Printed coefficients of double-ζ functions are rounded.
    Shell { n, l, terms }.normalised().expect("shell")
}

fn pairs(criterion: &mut Criterion) {
    let hydrogen = [shell(1, 0, &[(1.3, 1.0)])];
    let oxygen = [shell(2, 0, &[(2.275, 1.0)]), shell(2, 1, &[(2.275, 1.0)])];
    let carbon = [shell(2, 0, &[(1.625, 1.0)]), shell(2, 1, &[(1.625, 1.0)])];
    let sulfur = [shell(3, 0, &[(2.122, 1.0)]), shell(3, 1, &[(1.827, 1.0)])];
    let silicon = [
        shell(3, 0, &[(1.383, 1.0)]),
        shell(3, 1, &[(1.383, 1.0)]),
        shell(3, 2, &[(1.383, 1.0)]),
    ];
    let nickel = [
        shell(4, 0, &[(2.1, 1.0)]),
        shell(4, 1, &[(2.1, 1.0)]),
        shell(3, 2, &[(5.75, 0.5683), (2.0, 0.6292)]),
    ];
    let mut group = criterion.benchmark_group("overlap pair");
    group.throughput(Throughput::Elements(LANES as u64));
    for (name, a, b) in [
        ("1s-1s", &hydrogen[..], &hydrogen[..]),
        ("sp-sp, C-O", &carbon[..], &oxygen[..]),
        ("sp-sp, four exponents, S-S", &sulfur[..], &sulfur[..]),
        ("spd-spd, Si-Si", &silicon[..], &silicon[..]),
        ("double-zeta d, Ni-Ni", &nickel[..], &nickel[..]),
    ] {
        let kernel = PairKernel::new(a, b).expect("kernel");
        let functions = |shells: &[Shell]| {
            shells
                .iter()
                .map(|s| 2 * usize::from(s.l) + 1)
                .sum::<usize>()
        };
        let mut out: Vec<Lanes> = vec![[0.0; LANES]; functions(a) * functions(b)];
        let at: Lanes = std::array::from_fn(|lane| 1.9 + 0.1 * lane as f64);
        let displacement = [at, at.map(|x| 0.3 * x), at.map(|x| 1.0 - x)];
        group.bench_function(name, |bencher| {
            bencher.iter(|| kernel.block_lanes(black_box(&displacement), black_box(&mut out)));
        });
    }
    group.finish();
}

criterion_group!(benches, pairs);
criterion_main!(benches);
