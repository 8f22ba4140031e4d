//! Butadiene closes to cyclobutene in the two symmetric ways: Woodward and Hoffmann, J. Am. Chem. Soc.
//! 87, 395 (1965). With four electrons the conrotatory way (a twofold axis is kept) is allowed, the
//! disrotatory one (a mirror plane is kept) forbidden: there the highest occupied and the lowest empty
//! line cross.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use orbend_checks::named;
use orbend_scan::{MappingChoice, Request, Route, ScanError, Sweep};
use orbend_structure::{Coordinate, CoordinateKind, Molecule, PathPlan};

/// The planar s-cis form of the G2 geometry of butadiene.
fn cis() -> Molecule {
    let trans = named("g2:butadiene");
    let twist =
        Coordinate::parse(CoordinateKind::Twist, "1-2-3-4=0..180:30").expect("a coordinate");
    let path = PathPlan::new(&trans, &[twist], &[]).expect("a path");
    path.molecule(&[0.0]).expect("a geometry")
}

/// Cyclobutene (G2) with its atoms in another order.
fn ring() -> Molecule {
    let molecule = named("g2:cyclobutene");
    let order = [4, 9, 0, 7, 2, 5, 3, 8, 1, 6];
    Molecule {
        elements: order.iter().map(|&k| molecule.elements[k]).collect(),
        positions: order.iter().map(|&k| molecule.positions[k]).collect(),
        ..molecule
    }
}

fn closing(choice: MappingChoice) -> Result<Sweep, ScanError> {
    Request {
        route: Route::Toward {
            other: Box::new(ring()),
            points: 21,
            choice,
        },
        ..Request::new(cis())
    }
    .run()
}

fn keeping(group: &str) -> MappingChoice {
    MappingChoice {
        keep: Some(group.into()),
        ..MappingChoice::default()
    }
}

/// Labels of the lines at crossings that change the ground configuration, and their places.
fn changes(sweep: &Sweep) -> Vec<(String, String, f64)> {
    let name = |line: usize| sweep.plan().lines()[line].name.plain.clone();
    let crossings = sweep.crossings().expect("crossings");
    crossings
        .iter()
        .filter(|crossing| crossing.changes_configuration)
        .map(|crossing| (name(crossing.lines.0), name(crossing.lines.1), crossing.at))
        .collect()
}

#[test]
fn the_conrotatory_way_is_allowed_and_the_disrotatory_one_forbidden() {
    let con = closing(keeping("C2")).expect("a sweep");
    assert_eq!(con.plan().path_group().name, "C2");
    let dis = closing(keeping("Cs")).expect("a sweep");
    assert_eq!(dis.plan().path_group().name, "Cs");
    for sweep in [&con, &dis] {
        assert_eq!(
            (sweep.point_group(0), sweep.point_group(20)),
            ("C2v", "C2v")
        );
    }
    assert!(changes(&con).is_empty(), "{:?}", changes(&con));
    let found = changes(&dis);
    println!("disrotatory: {found:?}; conrotatory: none");
    assert_eq!(found.len(), 1, "{found:?}");
    // Odd and even under the mirror.
    assert!(found[0].0.ends_with("a''") && found[0].1.ends_with("a'"));
    // Electrons by irrep at both ends: the same only where the way is allowed.
    let electrons = |sweep: &Sweep, point: usize| -> Vec<f64> {
        let mut sums = vec![0.0; sweep.plan().path_group().irreps.len()];
        for level in sweep.point(point).expect("a point").levels {
            sums[sweep.plan().lines()[level.line].irrep] += level.occupation;
        }
        sums
    };
    assert_eq!(electrons(&con, 0), electrons(&con, 20));
    assert_ne!(electrons(&dis, 0), electrons(&dis, 20));
}

#[test]
fn a_pair_of_atoms_chooses_the_way() {
    // Exchanging what the two hydrogens of one end become turns the one way into the other.
    let (start, end) = (cis(), ring());
    let mappings = PathPlan::mappings(&start, &end);
    let own = &mappings[0];
    let plain = closing(MappingChoice::default()).expect("a sweep");
    // The two hydrogens at either end of the chain.
    let at = |carbon: usize| -> [usize; 2] {
        let near = |atom: &usize| {
            let [a, b] = [start.positions[*atom], start.positions[carbon]];
            (0..3).map(|i| (a[i] - b[i]).powi(2)).sum::<f64>() < 1.5
        };
        let found: Vec<usize> = (4..10).filter(near).collect();
        found.try_into().expect("two hydrogens")
    };
    let ([a, b], [c, d]) = (at(0), at(3));
    let exchanged = closing(MappingChoice {
        pairs: vec![(a, own[b]), (b, own[a]), (c, own[c]), (d, own[d])],
        keep: None,
    })
    .expect("a sweep");
    let mut names = [
        plain.plan().path_group().name.clone(),
        exchanged.plan().path_group().name.clone(),
    ];
    println!("by default {}, exchanged {}", names[0], names[1]);
    names.sort();
    assert_eq!(names, ["C2", "Cs"]);
}

#[test]
fn impossible_choices_are_refused_in_words() {
    let error = closing(keeping("C3")).expect_err("no such way").to_string();
    assert!(error.contains("C3") && error.contains("C2, Cs"), "{error}");
    let pairs = |pairs: Vec<(usize, usize)>| MappingChoice { pairs, keep: None };
    // Carbon 1 onto a hydrogen, an atom that is not there, an atom twice.
    for (choice, word) in [
        (pairs(vec![(0, 0)]), "cannot become"),
        (pairs(vec![(0, 40)]), "not there"),
        (pairs(vec![(4, 0), (4, 1)]), "twice"),
    ] {
        let error = closing(choice).expect_err("refused").to_string();
        assert!(error.contains(word), "{error}");
    }
}
