//! Labelled points and whole sweeps: overlap, Hamiltonian, blocks, eigenvalues,
//! names and lines together.

#![allow(
    clippy::expect_used,
    reason = "a bench whose input fails has nothing to measure"
)]

use std::hint::black_box;

use criterion::{BatchSize, Criterion, Throughput, criterion_group, criterion_main};
use orbend_scan::{Request, Sweep};
use orbend_structure::{Coordinate, CoordinateKind, Element, Formula, Molecule, ideal_geometry};

fn request(formula: &str, kind: CoordinateKind, coordinate: &str) -> Request {
    let formula = Formula::parse(formula).expect("formula");
    let molecule = ideal_geometry(&formula, None, &[])
        .expect("geometry")
        .molecule;
    let coordinate = Coordinate::parse(kind, coordinate).expect("coordinate");
    Request::new(molecule).coordinate(coordinate)
}

/// Time per labelled point: sweeps of some 4000 points on one thread, planned before.
fn points(criterion: &mut Criterion) {
    let pool = rayon::ThreadPoolBuilder::new()
        .num_threads(1)
        .build()
        .expect("pool");
    let mut group = criterion.benchmark_group("labelled point");
    for (name, formula, kind, coordinate) in [
        (
            "H2S bend",
            "H2S",
            CoordinateKind::Bend,
            "2-1-3=90..172:0.02",
        ),
        (
            "SiF2 bend",
            "SiF2",
            CoordinateKind::Bend,
            "2-1-3=90..172:0.02",
        ),
        (
            "PF3 pyramid",
            "PF3",
            CoordinateKind::Pyramid,
            "1=90..110:0.005",
        ),
    ] {
        let request = request(formula, kind, coordinate);
        let points = request.plan().expect("plan").points();
        group.throughput(Throughput::Elements(points as u64));
        group.bench_function(name, |bencher| {
            bencher.iter_batched(
                || request.plan().expect("plan"),
                |plan| pool.install(|| black_box(Sweep::run(plan).expect("sweep"))),
                BatchSize::LargeInput,
            );
        });
    }
    group.finish();
}

/// Request to typed result: the sweep of the README's figure.
fn sweeps(criterion: &mut Criterion) {
    let request = request("SiF2", CoordinateKind::Bend, "2-1-3=80..180:2");
    criterion.bench_function("sweep SiF2, 51 points, plan and run", |bencher| {
        bencher.iter(|| black_box(request.run().expect("sweep")));
    });
}

/// Labels of a single geometry of D6h: its group, adapted functions, energies and names.
fn benzene(criterion: &mut Criterion) {
    let mut positions = Vec::new();
    for radius in [1.397, 2.481] {
        for k in 0..6 {
            let angle = std::f64::consts::FRAC_PI_3 * f64::from(k);
            positions.push([radius * angle.cos(), radius * angle.sin(), 0.0]);
        }
    }
    let elements = ["C"; 6].into_iter().chain(["H"; 6]);
    let elements = elements.map(|symbol| Element::from_symbol(symbol).expect("element"));
    let molecule = Molecule::new(elements.collect(), positions, 0, None, String::new());
    let request = Request::new(molecule.expect("molecule"));
    criterion.bench_function("levels of benzene, plan and run", |bencher| {
        bencher.iter(|| black_box(request.run().expect("levels")));
    });
}

criterion_group!(benches, points, sweeps, benzene);
criterion_main!(benches);
