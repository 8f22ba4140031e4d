//! Fragments: the frontier sets of metal fragments as published, sums and invariances.
//!
//! Elian & Hoffmann, Inorg. Chem. 14, 1058 (1975); Hoffmann, Angew. Chem. Int. Ed. 21, 711 (1982)
//! (orders from memory; axes as printed here).

use orbend_checks::{moved, named, random_motion};
use orbend_scan::reasons::{Fragment, FragmentAnalysis};
use orbend_scan::{Request, Sweep};
use orbend_structure::{Element, Molecule};

const BOND: f64 = 1.82;
const CARBONYL: f64 = 1.15;

fn molecule(atoms: &[(&str, [f64; 3])]) -> Molecule {
    Molecule {
        elements: atoms
            .iter()
            .map(|(symbol, _)| Element::from_symbol(symbol).expect("an element"))
            .collect(),
        positions: atoms.iter().map(|(_, position)| *position).collect(),
        charge: 0,
        unpaired: None,
        title: String::new(),
    }
}

/// M(CO)n with the carbonyls along unit vectors.
fn carbonyls(metal: &'static str, ends: &[[f64; 3]]) -> Vec<(&'static str, [f64; 3])> {
    let mut atoms = vec![(metal, [0.0; 3])];
    for end in ends {
        atoms.push(("C", end.map(|x| x * BOND)));
        atoms.push(("O", end.map(|x| x * (BOND + CARBONYL))));
    }
    atoms
}

fn five() -> Vec<(&'static str, [f64; 3])> {
    carbonyls(
        "Mn",
        &[
            [1.0, 0.0, 0.0],
            [-1.0, 0.0, 0.0],
            [0.0, 1.0, 0.0],
            [0.0, -1.0, 0.0],
            [0.0, 0.0, -1.0],
        ],
    )
}

fn run(molecule: Molecule) -> Sweep {
    Request::new(molecule).run().expect("solved")
}

/// Irreps (without numbers), by rising energy, of the sets whose metal d share is at least `share`
/// among those between `low` and `high` eV.
fn d_sets(sweep: &Sweep, share: f64, low: f64, high: f64) -> Vec<String> {
    let plan = sweep.plan();
    let orbitals = sweep.orbitals(0).expect("orbitals");
    let populations = orbitals.populations(plan.basis(), &vec![0.0; plan.lines().len()]);
    let mut sets: Vec<String> = Vec::new();
    for level in sweep.point(0).expect("a point").levels {
        let d: f64 = plan
            .basis()
            .shells
            .iter()
            .enumerate()
            .filter(|(_, shell)| shell.atom == 0 && shell.l == 2)
            .map(|(index, _)| populations.shares[[level.line, index]])
            .sum();
        let plain = &level.full_name.plain;
        if d >= share && level.energy > low && level.energy < high {
            let irrep = plain.trim_start_matches(|c: char| c.is_ascii_digit());
            if sets.last().map(String::as_str) != Some(irrep) || level.degeneracy == 1 {
                sets.push(irrep.to_owned());
            }
        }
    }
    sets
}

#[test]
fn frontier_sets_of_metal_fragments() {
    // ML5, a square pyramid: b2 and e (three of octahedral descent), above them one a1 hybrid.
    let ml5 = run(molecule(&five()));
    assert_eq!(ml5.point_group(0), "C4v");
    assert_eq!(d_sets(&ml5, 0.2, -13.5, -9.5), ["b2", "e", "a1"]);
    // The hybrid holds the odd electron of Mn(CO)5 (isolobal with CH3).
    let half: Vec<String> = ml5
        .point(0)
        .expect("a point")
        .levels
        .iter()
        .filter(|level| (level.occupation - 1.0).abs() < 1e-9)
        .map(|level| level.full_name.plain.clone())
        .collect();
    assert_eq!(half, ["17a1"]);
    // ML4 with two cis sites free: three low sets, then the filled one that is odd under the exchange
    // of the sites, then the empty a1: the other way round than in CH2.
    let side = 0.5_f64.sqrt();
    let ml4 = run(molecule(&carbonyls(
        "Fe",
        &[
            [1.0, 0.0, 0.0],
            [-1.0, 0.0, 0.0],
            [0.0, side, -side],
            [0.0, -side, -side],
        ],
    )));
    assert_eq!(ml4.point_group(0), "C2v");
    let order = d_sets(&ml4, 0.15, -13.5, -9.5);
    assert_eq!(order.len(), 5, "{order:?}");
    assert!(order[3].starts_with('b') && order[4] == "a1", "{order:?}");
    let levels = ml4.point(0).expect("a point").levels;
    let homo = levels
        .iter()
        .rfind(|level| level.occupation > 1e-9)
        .expect("filled");
    assert!(homo.full_name.plain.ends_with(&order[3]));
    // CpM: e2 and a1 close together, above them e1.
    let turn = |k: u32| 2.0 * std::f64::consts::PI * f64::from(k) / 5.0;
    let ring = 1.40 / (2.0 * (std::f64::consts::PI / 5.0).sin());
    let mut atoms = vec![("Mn", [0.0; 3])];
    for (symbol, radius) in [("C", ring), ("H", ring + 1.08)] {
        for k in 0..5 {
            atoms.push((
                symbol,
                [radius * turn(k).cos(), radius * turn(k).sin(), 1.70],
            ));
        }
    }
    let cp = run(molecule(&atoms));
    assert_eq!(cp.point_group(0), "C5v");
    assert_eq!(d_sets(&cp, 0.5, -12.5, -9.0), ["e2", "a1", "e1"]);
}

#[test]
fn the_hybrid_binds_hydrogen() {
    let mut atoms = five();
    atoms.push(("H", [0.0, 0.0, 1.6]));
    let sweep = run(molecule(&atoms));
    let fragments = Fragment::parse("1-11 | 12", 12).expect("fragments");
    let analysis = FragmentAnalysis::new(&sweep, 0, &fragments).expect("solved");
    assert_eq!(analysis.fragments[0].group, "C4v");
    let (a, b) = analysis.pairs[0].orbitals;
    assert_eq!(analysis.orbitals[a].name.plain, "17a1");
    assert_eq!(analysis.orbitals[b].fragment, 1);
    assert!(analysis.pairs[0].energy < -0.5);
    check_sums(&sweep, &analysis);
}

fn check_sums(sweep: &Sweep, analysis: &FragmentAnalysis) {
    for line in &analysis.lines {
        let sum: f64 = line.shares.iter().sum();
        assert!((sum - 1.0).abs() < 1e-9, "{sum}");
    }
    let electrons: f64 = analysis
        .orbitals
        .iter()
        .map(|orbital| orbital.population)
        .sum();
    let all = f64::from(sweep.plan().electrons().total());
    assert!((electrons - all).abs() < 1e-8, "{electrons} of {all}");
}

#[test]
fn sums_and_invariance() {
    let start = named("g2:C2H6");
    let atoms = start.len();
    let half: Vec<usize> = (0..atoms)
        .filter(|&a| {
            let (c1, c2) = (start.positions[0], start.positions[1]);
            let away = |c: [f64; 3]| -> f64 {
                (0..3).map(|k| (start.positions[a][k] - c[k]).powi(2)).sum()
            };
            away(c1) < away(c2)
        })
        .collect();
    let words = |list: &[usize]| {
        list.iter()
            .map(|a| (a + 1).to_string())
            .collect::<Vec<_>>()
            .join(",")
    };
    let rest: Vec<usize> = (0..atoms).filter(|a| !half.contains(a)).collect();
    let text = format!("{} | {}", words(&half), words(&rest));
    let fragments = Fragment::parse(&text, atoms).expect("fragments");
    let sweep = run(start.clone());
    let analysis = FragmentAnalysis::new(&sweep, 0, &fragments).expect("solved");
    check_sums(&sweep, &analysis);
    // Two methyl radicals: their singly filled a1 orbitals make the bond.
    let (a, b) = analysis.pairs[0].orbitals;
    for index in [a, b] {
        assert!((analysis.orbitals[index].electrons - 1.0).abs() < 1e-9);
        assert!(analysis.orbitals[index].name.plain.ends_with("a1"));
    }
    let turned = moved(
        &start,
        random_motion([0.3, -0.7, 0.45, 0.6], false),
        [1.5, -0.25, 3.0],
        &(0..atoms).collect::<Vec<_>>(),
    );
    let sweep = run(turned);
    let again = FragmentAnalysis::new(&sweep, 0, &fragments).expect("solved");
    check_sums(&sweep, &again);
    for (x, y) in analysis.pairs.iter().zip(&again.pairs) {
        assert!((x.energy - y.energy).abs() < 1e-6, "{x:?} {y:?}");
        assert!((x.population - y.population).abs() < 1e-6);
    }
    for (x, y) in analysis.orbitals.iter().zip(&again.orbitals) {
        assert!((x.population - y.population).abs() < 1e-6);
    }
}
