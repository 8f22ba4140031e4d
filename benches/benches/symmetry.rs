//! The point group of large molecules: C60, an icosahedral fullerene, and clusters of some 200 atoms.

#![allow(
    clippy::expect_used,
    reason = "a bench whose input fails has nothing to measure"
)]

use std::hint::black_box;

use criterion::{Criterion, criterion_group, criterion_main};
use orbend_symmetry::{Nucleus, find};

fn nuclei(positions: Vec<[f64; 3]>) -> Vec<Nucleus> {
    positions
        .into_iter()
        .map(|position| Nucleus { kind: 6, position })
        .collect()
}

/// Truncated icosahedron with edges of 1.43 Å: even permutations of (0, ±1, ±3φ), (±1, ±(2 + φ), ±2φ)
/// and (±φ, ±2, ±(2φ + 1)) have edges of 2.
fn fullerene() -> Vec<Nucleus> {
    let golden = 0.5 * (1.0 + 5.0_f64.sqrt());
    let mut positions: Vec<[f64; 3]> = Vec::new();
    for [a, b, c] in [
        [0.0, 1.0, 3.0 * golden],
        [1.0, 2.0 + golden, 2.0 * golden],
        [golden, 2.0, 2.0 * golden + 1.0],
    ] {
        for signs in 0..8 {
            let sign = |bit: u32| if signs >> bit & 1 == 0 { 1.0 } else { -1.0 };
            let [a, b, c] = [a * sign(0), b * sign(1), c * sign(2)].map(|x: f64| 0.715 * x);
            for place in [[a, b, c], [c, a, b], [b, c, a]] {
                let known = positions
                    .iter()
                    .any(|p| (0..3).all(|k| (p[k] - place[k]).abs() < 1e-9));
                if !known {
                    positions.push(place);
                }
            }
        }
    }
    nuclei(positions)
}

/// The 201 atoms of a face-centred cubic crystal nearest to one of them; the neighbours stand 2.5 Å apart.
fn crystal() -> Vec<Nucleus> {
    let mut positions = Vec::new();
    for x in -5_i32..=5 {
        for y in -5_i32..=5 {
            for z in -5_i32..=5 {
                if (x + y + z) % 2 == 0 && x * x + y * y + z * z <= 20 {
                    positions.push([x, y, z].map(|k| f64::from(k) * 2.5 / 2.0_f64.sqrt()));
                }
            }
        }
    }
    nuclei(positions)
}

/// The same without symmetry: every atom displaced by up to 0.1 Å (xorshift).
fn disordered() -> Vec<Nucleus> {
    let mut state = 0x9E37_79B9_7F4A_7C15_u64;
    let mut random = || {
        state ^= state << 13;
        state ^= state >> 7;
        state ^= state << 17;
        0.1 * ((state >> 11) as f64 / (1u64 << 52) as f64 - 1.0)
    };
    let mut atoms = crystal();
    for atom in &mut atoms {
        for value in &mut atom.position {
            *value += random();
        }
    }
    atoms
}

fn groups(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("point group");
    for (name, atoms, expected) in [
        ("C60", fullerene(), "Ih"),
        ("cluster of 201 atoms", crystal(), "Oh"),
        ("201 atoms without symmetry", disordered(), "C1"),
    ] {
        let found = find(&atoms, 0.001).expect("a group").group.name;
        assert_eq!(found, expected, "{name}: {} atoms", atoms.len());
        group.bench_function(name, |bencher| {
            bencher.iter(|| black_box(find(&atoms, 0.001).expect("a group")));
        });
    }
    group.finish();
}

criterion_group!(benches, groups);
criterion_main!(benches);
