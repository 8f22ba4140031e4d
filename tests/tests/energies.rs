//! Level energies against an independent engine: `tests/reference/energies.py` (three-dimensional quadrature of the
//! overlaps in random orientations, LAPACK) wrote the table; both forms, K from 1.5 to 2, and the further published forms.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use std::fmt::Write;

use orbend_hamiltonian::{Basis, Coupling, HamiltonianPlan, Method, ParameterSet};
use orbend_structure::Element;
use serde::Deserialize;
use std::collections::BTreeMap;

/// Largest difference allowed in an energy, eV.
const TOLERANCE_EV: f64 = 1e-10;
/// Largest difference allowed in an overlap.
const TOLERANCE_OVERLAP: f64 = 1e-13;

#[derive(Deserialize)]
struct Table {
    records: Vec<Record>,
}

#[derive(Deserialize)]
struct Record {
    name: String,
    elements: Vec<String>,
    polarised_hydrogen: bool,
    positions_angstrom: Vec<[f64; 3]>,
    parameters: BTreeMap<String, Vec<Shell>>,
    smallest_overlap_eigenvalue: f64,
    cases: Vec<Level>,
    overlap: Option<Vec<Vec<f64>>>,
}

#[derive(Deserialize)]
struct Shell {
    n: u8,
    l: u8,
    hii_ev: f64,
    zeta: Vec<[f64; 2]>,
}

#[derive(Deserialize)]
struct Level {
    form: String,
    k: f64,
    eigenvalues_ev: Vec<f64>,
}

fn table() -> Table {
    serde_json::from_str(include_str!("../reference/energies.json")).expect("energies.json")
}

/// The record's own values laid over the default set, so that no choice of ours enters.
fn parameters(record: &Record) -> ParameterSet {
    let mut text =
        String::from("[set]\nname = \"record\"\nenergy = \"eV\"\nexponent = \"1/bohr\"\n");
    for (symbol, shells) in &record.parameters {
        writeln!(
            text,
            "\n[{symbol}]\nsource = \"energies.py\"\nchecked = \"memory\"\nshells = ["
        )
        .expect("text");
        for shell in shells
            .iter()
            .filter(|shell| !(symbol == "H" && shell.l == 1))
        {
            let letter = ['s', 'p', 'd', 'f'][usize::from(shell.l)];
            let terms: Vec<String> = shell
                .zeta
                .iter()
                .map(|[zeta, c]| format!("[{zeta:?}, {c:?}]"))
                .collect();
            let zeta = if terms.len() == 1 {
                format!("{:?}", shell.zeta[0][0])
            } else {
                format!("[{}]", terms.join(", "))
            };
            writeln!(
                text,
                "  {{ shell = \"{}{letter}\", hii = {:?}, zeta = {zeta} }},",
                shell.n, shell.hii_ev
            )
            .expect("text");
        }
        text.push_str("]\n");
    }
    ParameterSet::default()
        .overlay(&text, "record.toml")
        .unwrap_or_else(|error| panic!("{}: {error}\n{text}", record.name))
}

struct Matrices {
    n: usize,
    s: Vec<f64>,
    h: Vec<f64>,
}

fn matrices(record: &Record, set: &ParameterSet, form: &str, k: f64) -> Matrices {
    let elements: Vec<Element> = record
        .elements
        .iter()
        .map(|symbol| Element::from_symbol(symbol).expect("element"))
        .collect();
    let coupling = Coupling::from_name(form).expect("form");
    let method = Method {
        coupling,
        k,
        polarised_hydrogen: record.polarised_hydrogen,
    };
    let basis = Basis::new(&elements, set, &method).expect("basis");
    let plan = HamiltonianPlan::new(&basis, &method).expect("plan");
    let n = plan.len();
    let (mut s, mut h) = (vec![0.0; n * n], vec![0.0; n * n]);
    plan.fill(&record.positions_angstrom, &mut s, &mut h);
    Matrices { n, s, h }
}

#[test]
fn energies_agree_with_quadrature_and_lapack() {
    let mut worst = (0.0_f64, String::new());
    let (mut molecules, mut compared) = (0, 0);
    for record in table().records {
        let set = parameters(&record);
        molecules += 1;
        for level in &record.cases {
            let m = matrices(&record, &set, &level.form, level.k);
            let solution = orbend_eigen::solve(m.n, &m.h, &m.s).expect("solved");
            assert_eq!(
                solution.values.len(),
                level.eigenvalues_ev.len(),
                "{}",
                record.name
            );
            let place = format!("{} {} K = {}", record.name, level.form, level.k);
            for (ours, theirs) in solution.values.iter().zip(&level.eigenvalues_ev) {
                let difference = (ours - theirs).abs();
                compared += 1;
                if difference > worst.0 {
                    worst = (difference, place.clone());
                }
            }
            let smallest =
                (solution.smallest_overlap_eigenvalue - record.smallest_overlap_eigenvalue).abs();
            assert!(
                smallest < 1e-12,
                "{place}: smallest eigenvalue of S differs by {smallest:e}"
            );
        }
    }
    println!(
        "{molecules} molecules, {compared} levels, worst difference {:.1e} eV ({})",
        worst.0, worst.1
    );
    assert!(molecules >= 16);
    assert!(
        worst.0 <= TOLERANCE_EV,
        "{} differs by {:e} eV",
        worst.1,
        worst.0
    );
}

#[test]
fn overlaps_agree_function_by_function() {
    let mut compared = 0;
    for record in table().records {
        let Some(reference) = &record.overlap else {
            continue;
        };
        let m = matrices(&record, &parameters(&record), "constant", 1.75);
        for (i, row) in reference.iter().enumerate() {
            for (j, theirs) in row.iter().enumerate() {
                let difference = (m.s[i * m.n + j] - theirs).abs();
                compared += 1;
                assert!(
                    difference <= TOLERANCE_OVERLAP,
                    "{} S[{i}][{j}]: {difference:e}",
                    record.name
                );
            }
        }
    }
    assert!(compared > 1000);
}
