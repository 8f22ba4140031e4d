//! Lines and crossings of whole sweeps: positions that do not depend on the step, both views of a
//! line, and every name along a path that changes its group twice.

#![allow(
    clippy::expect_used,
    clippy::panic,
    reason = "a failed expectation in a check is its message"
)]

use orbend_checks::{atoms, check_point, file, named};
use orbend_scan::{Crossing, Followed, MappingChoice, MeetingKind, Request, Route, Sweep};
use orbend_structure::{Coordinate, CoordinateKind, Molecule};

fn along(molecule: Molecule, kind: CoordinateKind, text: &str) -> Sweep {
    let coordinate = Coordinate::parse(kind, text).expect("a coordinate");
    Request::new(molecule)
        .coordinate(coordinate)
        .run()
        .expect("a sweep")
}

fn bend(molecule: Molecule, text: &str) -> Sweep {
    along(molecule, CoordinateKind::Bend, text)
}

/// Kind, both labels and place of every crossing.
fn listed(sweep: &Sweep) -> Vec<(MeetingKind, String, String, f64)> {
    let name = |line: usize| sweep.plan().lines()[line].name.plain.clone();
    let crossings = sweep.crossings().expect("crossings");
    crossings
        .iter()
        .map(|c| (c.kind, name(c.lines.0), name(c.lines.1), c.at))
        .collect()
}

fn between<'a>(sweep: &Sweep, crossings: &'a [Crossing], labels: [&str; 2]) -> Vec<&'a Crossing> {
    let name = |line: usize| sweep.plan().lines()[line].name.plain.as_str();
    crossings
        .iter()
        .filter(|c| {
            let pair = [name(c.lines.0), name(c.lines.1)];
            pair == labels || pair == [labels[1], labels[0]]
        })
        .collect()
}

fn followed(sweep: &Sweep) -> Vec<Followed> {
    let crossings = sweep.crossings().expect("crossings");
    sweep.followed(&crossings).expect("followed lines")
}

#[test]
fn crossings_of_a_coarse_sweep_are_those_of_a_very_fine_one() {
    let of = |step: &str| listed(&bend(named("g2:SO2"), &format!("2-1-3=60..180:{step}")));
    let fine = of("0.01");
    assert!(fine.len() >= 8, "{fine:?}");
    let mut worst: f64 = 0.0;
    for step in ["2", "10"] {
        let coarse = of(step);
        assert_eq!(
            coarse.len(),
            fine.len(),
            "step {step}: {coarse:?}\n{fine:?}"
        );
        for (a, b) in coarse.iter().zip(&fine) {
            assert_eq!((a.0, &a.1, &a.2), (b.0, &b.1, &b.2), "step {step}");
            worst = worst.max((a.3 - b.3).abs());
        }
    }
    println!(
        "SO2: {} meetings, positions agree to {worst:.1e} degrees",
        fine.len()
    );
    assert!(worst < 1e-6, "{worst}");
}

#[test]
fn two_lines_of_hydrogen_sulfide_cross() {
    // r0(S–H) = 1.328 Å: Herzberg, Electronic Spectra of Polyatomic Molecules (1966), table 51; from
    // memory. The place moves by 0.1 degree for 0.003 Å.
    let half = 1.328 * 46.1_f64.to_radians().sin();
    let down = 1.328 * 46.1_f64.to_radians().cos();
    let molecule = atoms(
        &["S", "H", "H"],
        vec![[0.0; 3], [half, 0.0, down], [-half, 0.0, down]],
    );
    let sweep = bend(molecule, "2-1-3=80..180:5");
    let crossings = sweep.crossings().expect("crossings");
    let found = between(&sweep, &crossings, ["3b2", "6a1"]);
    println!("H2S: 3b2 and 6a1 cross at {:.3} degrees", found[0].at);
    assert_eq!(found.len(), 1);
    assert!((found[0].at - 118.3).abs() < 0.1, "{}", found[0].at);
}

/// The torsion of ethylene that keeps D2, with hydrogens on the same side of the bond.
const TWIST: &str = "3-1-2-5=0..180:";

#[test]
fn ethylene_meets_at_ninety_degrees() {
    let sweep = along(file("ethylene"), CoordinateKind::Twist, "3-1-2-5=0..180:20");
    assert_eq!(sweep.plan().path_group().name, "D2");
    let crossings = sweep.crossings().expect("crossings");
    let found = between(&sweep, &crossings, ["2b2", "2b3"]);
    assert_eq!(found.len(), 1);
    println!("C2H4: 2b2 and 2b3 cross at {:.6} degrees", found[0].at);
    assert!((found[0].at - 90.0).abs() < 1e-6);
    assert!(found[0].changes_configuration);
    // At the place itself the group is D2d and the two are one e set.
    let fine = along(file("ethylene"), CoordinateKind::Twist, "3-1-2-5=0..180:10");
    assert_eq!(fine.point_group(9), "D2d");
    let place = |label: &str| {
        let lines = fine.plan().lines();
        lines
            .iter()
            .position(|line| line.name.plain == label)
            .expect("a line")
    };
    let (a, b) = (
        fine.full_name(place("2b2"), 9),
        fine.full_name(place("2b3"), 9),
    );
    assert_eq!(a, b);
    assert!(a.0.plain.ends_with('e') && a.1 == 2, "{a:?}");
    check_point(&fine, 9);
    // The irreps say which line goes on as which: both views agree, and no comparison is needed.
    for (line, followed) in followed(&fine).iter().enumerate() {
        assert!(followed.lines.iter().all(|&now| now == line));
        assert!(followed.overlap.is_none() && followed.ambiguous.is_empty());
    }
}

#[test]
fn without_symmetry_the_two_views_of_a_twist_differ() {
    // One longer C–H bond leaves C1: π and π* repel a little, and the energy order keeps the lower
    // one the lower one, while the character passes.
    let mut molecule = file("ethylene");
    let [hydrogen, carbon] = [molecule.positions[2], molecule.positions[0]];
    for k in 0..3 {
        molecule.positions[2][k] += 0.05 * (hydrogen[k] - carbon[k]);
    }
    let mut ends: Vec<Vec<usize>> = Vec::new();
    for step in ["1", "5", "20", "60"] {
        let sweep = along(
            molecule.clone(),
            CoordinateKind::Twist,
            &format!("{TWIST}{step}"),
        );
        assert_eq!(sweep.plan().path_group().name, "C1");
        let crossings = sweep.crossings().expect("crossings");
        let avoided: Vec<&Crossing> = crossings
            .iter()
            .filter(|c| c.lines == (5, 6) && c.kind == MeetingKind::Avoided)
            .collect();
        assert_eq!(avoided.len(), 1, "{crossings:?}");
        let followed = followed(&sweep);
        if step == "5" {
            println!(
                "C2H4, one bond longer: gap {:.4} eV at {:.3} degrees, exchange {:.3}",
                avoided[0].gap.expect("a gap"),
                avoided[0].at,
                avoided[0].exchange.expect("an exchange")
            );
        }
        // Energy order: the sixth level all the way. Character: π becomes the seventh.
        let pi = &followed[5];
        assert_eq!(
            (pi.lines[0], pi.lines[sweep.points() - 1]),
            (5, 6),
            "step {step}"
        );
        assert!(pi.overlap.expect("compared") > 0.5);
        assert!(pi.ambiguous.is_empty(), "{:?}", pi.ambiguous);
        assert_eq!(pi.exchanges.len(), 1);
        ends.push(
            followed
                .iter()
                .map(|line| *line.lines.last().expect("points"))
                .collect(),
        );
    }
    assert!(ends.windows(2).all(|pair| pair[0] == pair[1]), "{ends:?}");
}

#[test]
fn a_molecule_without_symmetry_has_certificates() {
    let mut results: Vec<Vec<(usize, usize, usize)>> = Vec::new();
    for step in ["2", "5", "20"] {
        let sweep = bend(
            file("bromochlorofluoromethane"),
            &format!("2-1-3=90..150:{step}"),
        );
        assert_eq!(sweep.plan().path_group().name, "C1");
        let followed = followed(&sweep);
        let mut result = Vec::new();
        for line in &followed {
            let overlap = line.overlap.expect("compared");
            assert!((0.5..=1.0 + 1e-9).contains(&overlap), "{overlap}");
            for stretch in line.exchanges.iter().chain(&line.ambiguous) {
                assert!(90.0 <= stretch.from && stretch.from < stretch.to && stretch.to <= 150.0);
            }
            let last = *line.lines.last().expect("points");
            result.push((last, line.exchanges.len(), line.ambiguous.len()));
        }
        // Every point has every line once.
        for point in 0..sweep.points() {
            let mut seen: Vec<usize> = followed.iter().map(|line| line.lines[point]).collect();
            seen.sort_unstable();
            assert!(seen.iter().enumerate().all(|(place, line)| place == *line));
        }
        results.push(result);
    }
    assert!(
        results.windows(2).all(|pair| pair[0] == pair[1]),
        "{results:?}"
    );
    let passed = results[0].iter().filter(|line| line.1 > 0).count();
    println!(
        "CHFClBr: {passed} of {} lines pass another one",
        results[0].len()
    );
    assert!(passed >= 2);
}

#[test]
fn square_planar_becomes_tetrahedral() {
    // Si–F 1.56 Å in the square, the G2 geometry at the end; the atoms of the square in another order.
    let square = atoms(
        &["F", "F", "Si", "F", "F"],
        vec![
            [1.56, 0.0, 0.0],
            [0.0, 1.56, 0.0],
            [0.0; 3],
            [-1.56, 0.0, 0.0],
            [0.0, -1.56, 0.0],
        ],
    );
    let request = Request {
        route: Route::Toward {
            other: Box::new(named("g2:SiF4")),
            points: 11,
            choice: MappingChoice::default(),
        },
        ..Request::new(square)
    };
    let sweep = request.run().expect("a sweep");
    assert_eq!(sweep.plan().path_group().name, "D2d");
    let groups: Vec<&str> = [0, 5, 10].map(|k| sweep.point_group(k)).to_vec();
    assert_eq!(groups, ["D4h", "D2d", "Td"]);
    for point in [0, 5, 10] {
        check_point(&sweep, point);
    }
    let lines = sweep.plan().lines();
    let ends = |label: &str| {
        let of = |line: usize| {
            (
                sweep.full_name(line, 0).0.plain.clone(),
                sweep.full_name(line, 10).0.plain.clone(),
            )
        };
        let line = lines.iter().position(|line| line.name.plain == label);
        of(line.unwrap_or_else(|| panic!("no line {label}")))
    };
    // Descent (Herzberg 1966; Altmann and Herzig 1994): Td to D2d takes t2 to b2 + e, e to a1 + b1 and
    // t1 to a2 + e; D4h to D2d with the C2'' between the ligands takes b1g and a2u to b2, b2g to b1,
    // b2u to a1, a2g to a2 and both eg and eu to e.
    assert_eq!(ends("3b2"), ("2b1g".into(), "3t2".into()));
    assert_eq!(ends("4b2"), ("2a2u".into(), "4t2".into()));
    assert_eq!(ends("1a2"), ("1a2g".into(), "1t1".into()));
    assert_eq!(ends("5e"), ("1eg".into(), "1t1".into()));
    assert_eq!(ends("1b1"), ("1b2g".into(), "1e".into()));
    assert_eq!(ends("6a1"), ("1b2u".into(), "1e".into()));
    // Sets stay whole in the view by character too.
    for (line, followed) in followed(&sweep).iter().enumerate() {
        for &now in &followed.lines {
            assert_eq!(lines[now].irrep, lines[line].irrep);
            assert_eq!(lines[now].row, lines[line].row);
        }
    }
}
