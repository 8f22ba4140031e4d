//! Fragments of a transition metal as their basal ligands bend away from the apical one, and the
//! frontier levels of C60.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use orbend_checks::{atoms, check_point, named};
use orbend_scan::{Crossing, MeetingKind, Request, Sweep};
use orbend_structure::{Coordinate, CoordinateKind};

/// Chromium with four hydrides at 1.65 Å in a plane and an apical ligand, charge −5: six d electrons.
fn square_pyramid(apex: &str, length: f64) -> Sweep {
    let mut molecule = atoms(
        &["Cr", apex, "H", "H", "H", "H"],
        vec![
            [0.0; 3],
            [0.0, 0.0, length],
            [1.65, 0.0, 0.0],
            [0.0, 1.65, 0.0],
            [-1.65, 0.0, 0.0],
            [0.0, -1.65, 0.0],
        ],
    );
    molecule.charge = -5;
    let bend = Coordinate::parse(CoordinateKind::Bend, "2-1-3=80..115:5").expect("a coordinate");
    let sweep = Request::new(molecule)
        .coordinate(bend)
        .run()
        .expect("a sweep");
    assert_eq!(sweep.plan().path_group().name, "C4v");
    for point in 0..sweep.points() {
        check_point(&sweep, point);
    }
    sweep
}

fn line(sweep: &Sweep, label: &str) -> usize {
    let lines = sweep.plan().lines();
    let found = lines.iter().position(|line| line.name.plain == label);
    found.unwrap_or_else(|| panic!("no line {label}"))
}

fn change(sweep: &Sweep, label: &str) -> f64 {
    // From 90 to 115 degrees.
    let line = line(sweep, label);
    sweep.energy(line, sweep.points() - 1) - sweep.energy(line, 2)
}

fn pair(sweep: &Sweep, crossing: &Crossing) -> [String; 2] {
    let name = |line: usize| sweep.plan().lines()[line].name.plain.clone();
    let mut names = [name(crossing.lines.0), name(crossing.lines.1)];
    names.sort();
    names
}

#[test]
fn five_sigma_ligands() {
    // Rossi and Hoffmann, Inorg. Chem. 14, 365 (1975): with σ ligands only, xz, yz (e) and xy (b2) are
    // pure d and equal at 90 degrees; as the basal ligands bend away from the apical one, e rises and
    // the a1 above it (z²) falls, as does the empty b1 (x² − y²).
    let sweep = square_pyramid("H", 1.65);
    let [e, b2, a1, b1] = ["4e", "1b2", "8a1", "2b1"].map(|label| change(&sweep, label));
    println!(
        "CrH5 5-: e {e:+.3}, b2 {b2:+.1e}, a1 {a1:+.3}, b1 {b1:+.3} eV from 90 to 115 degrees"
    );
    assert!(e > 0.2 && b2.abs() < 1e-9 && a1 < -0.5 && b1 < -0.3);
    let touching: Vec<Crossing> = sweep
        .crossings()
        .expect("crossings")
        .into_iter()
        .filter(|crossing| crossing.kind == MeetingKind::Touching)
        .collect();
    assert_eq!(touching.len(), 1, "{touching:?}");
    assert_eq!(pair(&sweep, &touching[0]), ["1b2", "4e"]);
    assert!((touching[0].at - 90.0).abs() < 1e-3, "{}", touching[0].at);
    // Six d electrons: e and b2 are full, a1 is the lowest empty level.
    let levels = sweep.point(2).expect("a point").levels;
    let filled = levels.iter().filter(|level| level.occupation > 1.9).count();
    assert_eq!((filled, levels.len()), (8, 14));
    assert_eq!(levels[filled].full_name.plain, "8a1");
}

#[test]
fn a_pi_donor_at_the_apex() {
    // Chloride instead of the apical hydride pushes xz, yz up (π donor), so that e lies above b2 at
    // every angle and meets the falling a1: another ground configuration behind it.
    let sweep = square_pyramid("Cl", 2.3);
    let (e, b2) = (line(&sweep, "6e"), line(&sweep, "1b2"));
    assert!((0..sweep.points()).all(|point| sweep.energy(e, point) > sweep.energy(b2, point)));
    let crossings = sweep.crossings().expect("crossings");
    let changing: Vec<&Crossing> = crossings
        .iter()
        .filter(|crossing| crossing.changes_configuration)
        .collect();
    assert_eq!(changing.len(), 1, "{changing:?}");
    assert_eq!(pair(&sweep, changing[0]), ["12a1", "6e"]);
    println!(
        "CrH4Cl 5-: 6e and 12a1 cross at {:.3} degrees",
        changing[0].at
    );
}

#[test]
fn frontier_levels_of_buckminsterfullerene() {
    // Haddon, Brus and Raghavachari, Chem. Phys. Lett. 125, 459 (1986): HOMO hu, LUMO t1u, next t1g.
    let sweep = Request::new(named("species:C60")).run().expect("levels");
    assert_eq!(sweep.point_group(0), "Ih");
    let levels = sweep.point(0).expect("a point").levels;
    let filled = levels
        .iter()
        .filter(|level| level.occupation > 1e-9)
        .count();
    assert_eq!(filled, 120);
    let irrep = |place: usize| {
        let name = &levels[place].full_name.plain;
        (
            name.trim_start_matches(|c: char| c.is_ascii_digit())
                .to_owned(),
            levels[place].degeneracy,
        )
    };
    println!(
        "C60: {} {:.3}, {} {:.3}, {} {:.3} eV",
        levels[119].full_name.plain,
        levels[119].energy,
        levels[120].full_name.plain,
        levels[120].energy,
        levels[123].full_name.plain,
        levels[123].energy
    );
    assert_eq!(irrep(119), ("hu".into(), 5));
    assert_eq!(irrep(120), ("t1u".into(), 3));
    assert_eq!(irrep(123), ("t1g".into(), 3));
}
