//! Molecules of many groups, from committed geometries: content in irreps, frontier levels, and
//! paths that change the group.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use std::collections::BTreeMap;

use orbend_checks::{check_point, file};
use orbend_scan::{Request, Sweep};
use orbend_structure::{Coordinate, CoordinateKind, Formula, ideal_geometry};

fn levels(name: &str) -> Sweep {
    let sweep = Request::new(file(name))
        .run()
        .unwrap_or_else(|error| panic!("{name}: {error}"));
    check_point(&sweep, 0);
    sweep
}

/// How often each irrep occurs, by plain name.
fn content(sweep: &Sweep) -> String {
    let mut counts: BTreeMap<&str, usize> = BTreeMap::new();
    for line in sweep.plan().lines().iter().filter(|line| line.row == 0) {
        *counts
            .entry(sweep.plan().path_group().irreps[line.irrep].plain.as_str())
            .or_default() += 1;
    }
    let words: Vec<String> = counts
        .iter()
        .map(|(irrep, count)| format!("{count}{irrep}"))
        .collect();
    words.join("+")
}

/// Names of the highest occupied and the lowest empty level.
fn frontier(sweep: &Sweep) -> (String, String) {
    let levels = sweep.point(0).expect("a point").levels;
    let split = levels
        .iter()
        .filter(|level| level.occupation > 1e-9)
        .count();
    (
        levels[split - 1].full_name.plain.clone(),
        levels[split].full_name.plain.clone(),
    )
}

#[test]
fn groups_and_content() {
    // Counted by hand from the functions on each set of equivalent atoms.
    let expected = [
        (
            "benzene",
            "D6h",
            "3a1g+1a2g+1a2u+3b1u+1b2g+1b2u+1e1g+4e1u+4e2g+1e2u",
        ),
        ("bf3", "D3h", "3a1'+1a2'+2a2''+4e'+1e''"),
        ("ethylene", "D2h", "3ag+3b1u+1b2g+2b2u+2b3g+1b3u"),
        // Middle C: s a1, p b2 + e; outer C: 2(a1 + b2) + 2e; four H: a1 + b2 + e.
        ("allene", "D2d", "4a1+4b2+4e"),
        ("ethane_staggered", "D3d", "3a1g+3a2u+2eg+2eu"),
        ("hydrogen_peroxide", "C2", "5a+5b"),
        ("difluorodiazene_trans", "C2h", "6ag+2au+2bg+6bu"),
        (
            "carbon_disulfide",
            "Dinfh",
            "1pi_g+2pi_u+3sigma_g++3sigma_u+",
        ),
        ("phosphaethyne", "Cinfv", "2pi+5sigma+"),
        ("bromochlorofluoromethane", "C1", "17a"),
        (
            "tetrachloroplatinate",
            "D4h",
            "4a1g+1a2g+2a2u+3b1g+2b2g+1b2u+2eg+4eu",
        ),
        ("nickel_tetracarbonyl", "Td", "5a1+3e+2t1+8t2"),
    ];
    for (name, group, wanted) in expected {
        let sweep = levels(name);
        assert_eq!(sweep.point_group(0), group, "{name}");
        let found = content(&sweep);
        println!("{name}: {group}, {found}");
        assert_eq!(found, wanted, "{name}");
    }
}

#[test]
fn frontier_levels_that_every_course_names() {
    assert_eq!(
        frontier(&levels("ethylene")),
        ("1b3u".into(), "1b2g".into())
    );
    assert_eq!(frontier(&levels("benzene")), ("1e1g".into(), "1e2u".into()));
    // d8, square planar: the empty d level is b1g (x² − y²).
    let platinum = levels("tetrachloroplatinate");
    assert_eq!(platinum.plan().electrons().total(), 40);
    assert!(
        frontier(&platinum).1.ends_with("b1g"),
        "{:?}",
        frontier(&platinum)
    );
    // d10, tetrahedral, 18 electrons around Ni: t2 above e, both filled.
    let nickel = levels("nickel_tetracarbonyl");
    let (highest, lowest) = frontier(&nickel);
    println!(
        "PtCl4 2-: {:?}; Ni(CO)4: {highest}, {lowest}",
        frontier(&platinum)
    );
    assert!(highest.ends_with("t2"), "{highest}");
    // Both metals carry a function of two exponents.
    for sweep in [&platinum, &nickel] {
        assert!(
            sweep
                .plan()
                .basis()
                .shells
                .iter()
                .any(|shell| shell.l == 2 && shell.terms.len() == 2)
        );
    }
}

fn sweep(start: Request, coordinates: &[(CoordinateKind, &str)]) -> Sweep {
    let request = coordinates.iter().fold(start, |request, (kind, text)| {
        request.coordinate(Coordinate::parse(*kind, text).expect("a coordinate"))
    });
    let sweep = request.run().expect("a sweep");
    for point in [0, sweep.points() / 2, sweep.points() - 1] {
        check_point(&sweep, point);
    }
    sweep
}

fn formula(text: &str) -> Request {
    let formula = Formula::parse(text).expect("a formula");
    Request::new(
        ideal_geometry(&formula, None, &[])
            .expect("a geometry")
            .molecule,
    )
}

/// Names of a line at the first and the last point.
fn ends(sweep: &Sweep, label: &str) -> (String, String) {
    let line = sweep
        .plan()
        .lines()
        .iter()
        .position(|line| line.name.plain == label);
    let line = line.unwrap_or_else(|| panic!("no line {label}"));
    let name = |point| sweep.full_name(line, point).0.plain.clone();
    (name(0), name(sweep.points() - 1))
}

#[test]
fn ammonia_becomes_planar() {
    let sweep = sweep(
        Request::new(file("ammonia")),
        &[(CoordinateKind::Pyramid, "1=90..120:1")],
    );
    assert_eq!(sweep.plan().path_group().name, "C3v");
    assert_eq!(
        (sweep.point_group(0), sweep.point_group(30)),
        ("C3v", "D3h")
    );
    assert_eq!(ends(&sweep, "3a1"), ("3a1".into(), "1a2''".into()));
    assert_eq!(ends(&sweep, "1e"), ("1e".into(), "1e'".into()));
    println!(
        "NH3: {} -> {}, 3a1 -> 1a2''",
        sweep.point_group(0),
        sweep.point_group(30)
    );
}

#[test]
fn ethylene_is_twisted() {
    let start = file("ethylene");
    let text = start.positions[2];
    // The two hydrogens of the first carbon stand on its side of the bond.
    let partner = if text[2] * start.positions[4][2] < 0.0 {
        5
    } else {
        3
    };
    let own = if text[2] * start.positions[0][2] > 0.0 {
        [1, 2]
    } else {
        [2, 1]
    };
    let coordinate = format!("3-{}-{}-{partner}=0..90:10", own[0], own[1]);
    let sweep = sweep(Request::new(start), &[(CoordinateKind::Twist, &coordinate)]);
    assert_eq!(sweep.plan().path_group().name, "D2");
    assert_eq!((sweep.point_group(0), sweep.point_group(9)), ("D2h", "D2d"));
    let last = sweep.point(9).expect("a point");
    // π and π* meet in one e level at 90°.
    let frontier: Vec<&str> = last.levels[5..7]
        .iter()
        .map(|level| level.full_name.plain.as_str())
        .collect();
    assert_eq!(frontier[0], frontier[1]);
    assert!(
        frontier[0].ends_with('e') && last.levels[5].degeneracy == 2,
        "{frontier:?}"
    );
    println!(
        "C2H4 twist: {} -> {}, frontier {}",
        sweep.point_group(0),
        sweep.point_group(9),
        frontier[0]
    );
}

#[test]
fn both_bonds_of_silylene_are_stretched() {
    let sweep = sweep(
        formula("SiF2"),
        &[(CoordinateKind::Stretch, "1-2=1.4..1.9:0.1")],
    );
    assert_eq!(sweep.plan().path_group().name, "C2v");
    for point in 0..sweep.points() {
        let at = sweep.point(point).expect("a point");
        for ligand in [1, 2] {
            let [a, b] = [at.positions[0], at.positions[ligand]];
            let length = (0..3).map(|k| (a[k] - b[k]).powi(2)).sum::<f64>().sqrt();
            assert!((length - at.at[0]).abs() < 1e-10, "{length}");
        }
    }
}

#[test]
fn a_grid_of_bend_and_stretch() {
    let sweep = sweep(
        formula("SiF2"),
        &[
            (CoordinateKind::Bend, "2-1-3=90..180:15"),
            (CoordinateKind::Stretch, "1-2=1.5..1.7:0.1"),
        ],
    );
    assert_eq!(sweep.points(), 7 * 3);
    // The first coordinate runs slowest.
    assert!((sweep.point(1).expect("a point").at[1] - 1.6).abs() < 1e-12);
    assert_eq!(sweep.point_group(20), "Dinfh");
    println!(
        "SiF2 grid: {} points, {} at the last",
        sweep.points(),
        sweep.point_group(20)
    );
}
