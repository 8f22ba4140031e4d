use super::*;
use crate::coordinate::CoordinateKind;
use crate::measure::measure;
use crate::test_molecules::*;
use crate::vector::{distance, norm, subtract};

use CoordinateKind::{Bend, Pyramid, Stretch, Twist};

fn coordinate(kind: CoordinateKind, text: &str) -> Coordinate {
    Coordinate::parse(kind, text).unwrap()
}

fn plan(
    molecule: &Molecule,
    coordinates: &[(CoordinateKind, &str)],
) -> Result<PathPlan, PathError> {
    let list: Vec<Coordinate> = coordinates.iter().map(|(k, t)| coordinate(*k, t)).collect();
    PathPlan::new(molecule, &list, &equivalences(molecule))
}

/// Every point has its values, on the named atoms and on all partners.
fn check_reached(plan: &PathPlan) {
    for point in 0..plan.points() {
        let values = plan.values(point);
        let molecule = plan.molecule(&values).unwrap();
        for (k, coordinate) in plan.coordinates().iter().enumerate() {
            if coordinate.kind == Pyramid {
                continue;
            }
            let mut all = plan.moved_along()[k].clone();
            all.push(coordinate.atoms.clone());
            for atoms in all {
                let reached = measure(coordinate.kind, &atoms, &molecule.positions).unwrap();
                let mut off = reached - values[k];
                if coordinate.kind == Twist {
                    off -= 360.0 * (off / 360.0).round();
                }
                assert!(off.abs() < 1e-10, "{} {off:e}", plan.place(&values));
            }
        }
    }
}

/// Largest displacement, over the points, of the operation `op` with its
/// permutation from being a symmetry operation about the origin.
fn broken(plan: &PathPlan, op: [[f64; 3]; 3], permutation: &[usize]) -> f64 {
    let mut worst: f64 = 0.0;
    for point in 0..plan.points() {
        let positions = plan.molecule(&plan.values(point)).unwrap().positions;
        for (atom, &place) in positions.iter().enumerate() {
            let image = motion::transform(&op, place);
            worst = worst.max(norm(subtract(image, positions[permutation[atom]])));
        }
    }
    worst
}

const C2Z: [[f64; 3]; 3] = [[-1.0, 0.0, 0.0], [0.0, -1.0, 0.0], [0.0, 0.0, 1.0]];
const C2X: [[f64; 3]; 3] = [[1.0, 0.0, 0.0], [0.0, -1.0, 0.0], [0.0, 0.0, -1.0]];
const C2Y: [[f64; 3]; 3] = [[-1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, -1.0]];

#[test]
fn symmetric_bend_keeps_its_axis() {
    let plan = plan(&water(), &[(Bend, "2-1-3=60..180:2")]).unwrap();
    assert_eq!(plan.points(), 61);
    check_reached(&plan);
    assert!(broken(&plan, C2Z, &[0, 2, 1]) < 1e-14);
    let last = plan.molecule(&[180.0]).unwrap().positions;
    assert!(last[1][2].abs() < 1e-15 && last[2][2].abs() < 1e-15);
    assert!(
        plan.describe().contains("both arms by half"),
        "{}",
        plan.describe()
    );
}

#[test]
fn alone_moves_the_last_named_arm() {
    let bend = coordinate(Bend, "2-1-3=60..180:2").alone();
    let plan = PathPlan::new(&water(), &[bend], &equivalences(&water())).unwrap();
    check_reached(&plan);
    let moved = plan.molecule(&[90.0]).unwrap();
    assert!(distance(moved.positions[1], water().positions[1]) < 1e-300);
    let stretch = coordinate(Stretch, "1-2=0.8..1.6:0.1").alone();
    let plan = PathPlan::new(&water(), &[stretch], &equivalences(&water())).unwrap();
    check_reached(&plan);
    assert!(plan.moved_along()[0].is_empty());
}

#[test]
fn linear_start_bends_in_a_stated_plane() {
    let start = carbon_dioxide();
    let bend = plan(&start, &[(Bend, "2-1-3=180..60:5")]).unwrap();
    check_reached(&bend);
    assert!(broken(&bend, C2X, &[0, 2, 1]) < 1e-14);
    let trans = plan(&acetylene(), &[(Bend, "3-1-2=180..120:5")]).unwrap();
    check_reached(&trans);
    assert_eq!(trans.moved_along()[0], [vec![3, 1, 0]]);
    let twist = [3, 1, 0, 2];
    let bent = trans.molecule(&[120.0]).unwrap();
    let torsion = measure(Twist, &twist, &bent.positions).unwrap();
    assert!((torsion.abs() - 180.0).abs() < 1e-9, "{torsion}");
}

#[test]
fn noise_on_a_linear_start_chooses_no_plane() {
    let noisy = build("C 0 0 0; C 0 0 -1.2; H 3e-9 0 1.06; H 0 4e-9 -2.26");
    let permutations = [vec![0, 1, 2, 3], vec![1, 0, 3, 2]];
    let bend = [coordinate(Bend, "3-1-2=180..120:5")];
    let plan = PathPlan::new(&noisy, &bend, &permutations).unwrap();
    check_reached(&plan);
    let bent = plan.molecule(&[120.0]).unwrap();
    let torsion = measure(Twist, &[2, 0, 1, 3], &bent.positions).unwrap();
    assert!((torsion.abs() - 180.0).abs() < 1e-4, "{torsion}");
}

#[test]
fn square_planar_folds_to_tetrahedral() {
    let fold = plan(&square_planar(), &[(Bend, "2-1-4=180..110:10")]).unwrap();
    check_reached(&fold);
    assert_eq!(fold.moved_along()[0], [vec![2, 0, 4]]);
    // S4 about z: (x, y, z) → (−y, x, −z).
    let s4 = [[0.0, -1.0, 0.0], [1.0, 0.0, 0.0], [0.0, 0.0, -1.0]];
    assert!(broken(&fold, s4, &[0, 2, 3, 4, 1]) < 1e-14);
}

#[test]
fn stretches() {
    let both = plan(&water(), &[(Stretch, "1-2=0.8..1.6:0.05")]).unwrap();
    check_reached(&both);
    assert_eq!(both.moved_along()[0], [vec![0, 2]]);
    assert!(broken(&both, C2Z, &[0, 2, 1]) < 1e-14);
    let middle = plan(&ethylene(), &[(Stretch, "1-2=1.2..2:0.1")]).unwrap();
    check_reached(&middle);
    assert!(broken(&middle, C2X, &[1, 0, 5, 4, 3, 2]) < 1e-14);
    let hydrogens = plan(&ethylene(), &[(Stretch, "1-3=0.9..2:0.1")]).unwrap();
    assert_eq!(hydrogens.moved_along()[0].len(), 3);
    check_reached(&hydrogens);
    let pieces = plan(
        &build("H 0 0 0; H 0 0 0.74; Ar 4 0 0"),
        &[(Stretch, "1-3=3..6:0.5")],
    );
    check_reached(&pieces.unwrap());
}

#[test]
fn twists_turn_both_halves() {
    let both = plan(&ethylene(), &[(Twist, "3-1-2-5=0..90:5")]).unwrap();
    check_reached(&both);
    for (op, permutation) in [
        (C2Z, [0, 1, 3, 2, 5, 4]),
        (C2X, [1, 0, 5, 4, 3, 2]),
        (C2Y, [1, 0, 4, 5, 2, 3]),
    ] {
        assert!(broken(&both, op, &permutation) < 1e-14);
    }
    let peroxide = plan(&hydrogen_peroxide(), &[(Twist, "3-1-2-4=-180..180:10")]).unwrap();
    check_reached(&peroxide);
    assert!(broken(&peroxide, C2Z, &[1, 0, 3, 2]) < 1e-14);
    let far = plan(&ethylene(), &[(Twist, "3-1-2-5=180..360:20")]).unwrap();
    check_reached(&far);
}

#[test]
fn twist_across_a_straight_chain() {
    let allene = build(
        "C 0 0 0; C 0 0 1.31; C 0 0 -1.31; H 0 0.93 1.87; H 0 -0.93 1.87; H 0.93 0 -1.87; H -0.93 0 -1.87",
    );
    let twist = plan(&allene, &[(Twist, "4-2-3-6=0..90:10")]).unwrap();
    check_reached(&twist);
}

#[test]
fn pyramid_keeps_the_axis_and_reaches_the_plane() {
    let start = ammonia();
    let pyramid = plan(&start, &[(Pyramid, "1=90..120:1")]).unwrap();
    let c3 = motion::rotation([0.0, 0.0, 1.0], 120.0);
    assert!(broken(&pyramid, c3, &[0, 2, 3, 1]) < 1e-13);
    for point in 0..pyramid.points() {
        let values = pyramid.values(point);
        let p = pyramid.molecule(&values).unwrap().positions;
        for (i, j) in [(1, 2), (2, 3), (3, 1)] {
            let angle = measure(Bend, &[i, 0, j], &p).unwrap();
            assert!((angle - values[0]).abs() < 1e-10);
        }
        assert!(
            (distance(p[0], p[1]) - distance(start.positions[0], start.positions[1])).abs() < 1e-14
        );
    }
    let flat = pyramid.molecule(&[120.0]).unwrap().positions;
    assert!(flat.iter().all(|p| p[2].abs() < 1e-14));
    // A planar start leaves the plane, on one side for all values.
    let up = PathPlan::new(
        &Molecule::new(start.elements.clone(), flat, 0, None, "").unwrap(),
        &[coordinate(Pyramid, "1=120..90:5")],
        &equivalences(&start),
    )
    .unwrap();
    let side: Vec<f64> = (1..up.points())
        .map(|i| up.molecule(&up.values(i)).unwrap().positions[1][2])
        .collect();
    assert!(side.iter().all(|z| z * side[0] > 0.0));
}

#[test]
fn both_ends_of_hydrazine_go_pyramidal() {
    let start = hydrazine();
    let permutations = equivalences(&start);
    assert!(permutations.len() >= 2);
    let pyramid = [coordinate(Pyramid, "1=95..118:1")];
    let plan = PathPlan::new(&start, &pyramid, &permutations).unwrap();
    assert_eq!(plan.moved_along()[0], [vec![1]]);
    let swap = permutations.iter().find(|p| p[0] == 1).unwrap();
    assert!(broken(&plan, C2Z, swap) < 1e-13);
}

#[test]
fn partners_of_bends() {
    let scissors = plan(&methane(), &[(Bend, "2-1-3=90..130:5")]).unwrap();
    assert_eq!(scissors.moved_along()[0], [vec![3, 0, 4]]);
    check_reached(&scissors);
    let hydrogens = plan(&ethylene(), &[(Bend, "3-1-4=90..150:5")]).unwrap();
    assert_eq!(hydrogens.moved_along()[0], [vec![4, 1, 5]]);
    check_reached(&hydrogens);
    assert!(broken(&hydrogens, C2X, &[1, 0, 5, 4, 3, 2]) < 1e-14);
    let one = plan(&ammonia(), &[(Bend, "2-1-3=90..118:2")]).unwrap();
    assert!(one.moved_along()[0].is_empty());
    assert!(
        one.describe().contains("2 equivalent bend"),
        "{}",
        one.describe()
    );
    let mixed = build("N 0 0 0; F 1.1 0.75 0.4; F -1.1 0.75 0.4; H 0 -0.95 0.4");
    let plan = plan(&mixed, &[(Bend, "4-1-2=90..115:5")]).unwrap();
    assert_eq!(plan.moved_along()[0], [vec![3, 0, 2]]);
    check_reached(&plan);
    let mirror = [[-1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];
    assert!(broken(&plan, mirror, &[0, 2, 1, 3]) < 1e-14);
}

#[test]
fn grids_reach_both_values() {
    let grid = plan(
        &water(),
        &[(Bend, "2-1-3=80..180:20"), (Stretch, "1-2=0.8..1.2:0.2")],
    )
    .unwrap();
    assert_eq!(grid.points(), 18);
    assert_eq!(grid.values(4), [100.0, 1.0]);
    check_reached(&grid);
    // Two angles at one atom that disturb one another.
    let angles = build("N 0 0 0; F 1.1 0.75 0.4; Cl -1.1 0.9 0.4; H 0 -0.95 0.4");
    let grid = plan(
        &angles,
        &[(Bend, "2-1-3=95..115:5"), (Bend, "4-1-2=95..115:5")],
    )
    .unwrap();
    check_reached(&grid);
    let peroxide = hydrogen_peroxide();
    let grid = plan(
        &peroxide,
        &[(Twist, "3-1-2-4=0..180:30"), (Bend, "3-1-2=90..120:10")],
    )
    .unwrap();
    check_reached(&grid);
}

#[test]
fn coordinates_in_step() {
    let list = [
        coordinate(Bend, "2-1-3=90..180:2"),
        coordinate(Stretch, "1-2=0.98..0.935:0.001"),
    ];
    let plan = PathPlan::together(&water(), &list, &equivalences(&water())).unwrap();
    assert_eq!((plan.points(), plan.axes().len()), (46, 1));
    for point in 0..46 {
        let p = plan.molecule(&plan.values(point)).unwrap().positions;
        let length = measure(Stretch, &[0, 2], &p).unwrap();
        assert!((length - list[1].range.value(point)).abs() < 1e-12);
        let angle = measure(Bend, &[1, 0, 2], &p).unwrap();
        assert!((angle - list[0].range.value(point)).abs() < 1e-10);
    }
    let other = [list[0].clone(), coordinate(Stretch, "1-2=1..2:0.1")];
    let error = PathPlan::together(&water(), &other, &[]).unwrap_err();
    assert!(matches!(
        error,
        PathError::PointCounts {
            points: 11,
            other_points: 46,
            ..
        }
    ));
    let rows = [vec![100.0, 0.96], vec![120.0, 0.95], vec![110.0, 0.97]];
    let table = PathPlan::following(&water(), &list, &rows, &[]).unwrap();
    assert_eq!(table.axes()[0].values, [1.0, 2.0, 3.0]);
    let p = table.molecule(&[2.5]).unwrap().positions;
    assert!((measure(Bend, &[1, 0, 2], &p).unwrap() - 115.0).abs() < 1e-10);
    assert!(
        PathPlan::following(&water(), &list, &[vec![1.0, 2.0], vec![190.0, 1.0]], &[]).is_err()
    );
}

#[test]
fn refused_by_name() {
    let message = |molecule: &Molecule, kind, text: &str| -> String {
        plan(molecule, &[(kind, text)]).unwrap_err().to_string()
    };
    let text = message(&water(), Bend, "2-1-4=90..180:2");
    assert!(text.contains("no atom 4, the molecule has 3"), "{text}");
    let text = message(&water(), Bend, "1-2-3=90..180:2");
    assert!(text.contains("H2 and H3 are not bonded"), "{text}");
    let text = message(&water(), Stretch, "2-3=1..2:0.1");
    assert!(
        text.contains("not bonded") && text.contains("1-2, 1-3"),
        "{text}"
    );
    let text = message(&cyclopropane(), Bend, "1-2-3=60..90:2");
    assert!(text.contains("lies in a ring"), "{text}");
    assert!(message(&cyclopropane(), Stretch, "1-2=1..2:0.1").contains("ring"));
    assert!(message(&cyclopropane(), Twist, "4-1-2-6=0..90:10").contains("ring"));
    let text = message(&acetylene(), Twist, "3-1-2-4=0..90:10");
    assert!(text.contains("H3, C1 and C2 are in line"), "{text}");
    let text = message(&water(), Pyramid, "1=90..120:10");
    assert!(text.contains("O1 has 2 bonded neighbours"), "{text}");
    let text = message(&water(), Bend, "2-1-3=2..180:2");
    assert!(
        text.contains("H2 and H3 come to") && text.contains("bend 2-1-3 = "),
        "{text}"
    );
    let text = message(&ethylene(), Twist, "5-1-2-3=0..90:10");
    assert!(text.contains("H5 does not hang on the C1 side"), "{text}");
    let grid = [(Bend, "3-1-2=90..180:5"), (Twist, "3-1-2-4=0..180:5")];
    let text = plan(&hydrogen_peroxide(), &grid).unwrap_err().to_string();
    assert!(
        text.contains("twist 3-1-2-4: undefined at bend 3-1-2 = 180 degree"),
        "{text}"
    );
    let big = [(Twist, "3-1-2-4=0..180:0.01"), (Bend, "3-1-2=90..100:0.01")];
    assert!(matches!(
        plan(&hydrogen_peroxide(), &big),
        Err(PathError::TooManyPoints { .. })
    ));
    let bend = [coordinate(Bend, "2-1-3=90..180:2")];
    let error = PathPlan::new(&water(), &bend, &[vec![1, 0, 2]]).unwrap_err();
    assert!(matches!(error, PathError::NotAPermutation { index: 1, .. }));
    assert!(matches!(
        PathPlan::new(&water(), &[], &[]),
        Err(PathError::NoCoordinate)
    ));
}

#[test]
fn values_outside_are_refused() {
    let plan = plan(&water(), &[(Bend, "2-1-3=90..180:2")]).unwrap();
    let mut out = [[0.0; 3]; 3];
    assert!(plan.positions(&[91.37], &mut out).is_ok());
    assert!(matches!(
        plan.positions(&[89.0], &mut out),
        Err(PathError::Outside { .. })
    ));
    assert!(plan.positions(&[f64::NAN], &mut out).is_err());
    assert!(matches!(
        plan.positions(&[90.0, 1.0], &mut out),
        Err(PathError::Shape { .. })
    ));
    assert!(matches!(
        plan.positions(&[90.0], &mut out[..2]),
        Err(PathError::Shape { .. })
    ));
}

#[test]
fn clash_between_two_points_is_found() {
    // The far H passes through He; both ends of the two-point range are clear.
    let start = build("He 0 0 0; H 0.75 0 0; H -3.25 0 0");
    let line = coordinate(Stretch, "2-3=4..0.5:3.5").alone();
    let error = PathPlan::new(&start, &[line], &[]).unwrap_err();
    assert!(
        error.to_string().starts_with("He1 and H3 come to 0."),
        "{error}"
    );
    let apart = coordinate(Stretch, "2-3=4..1:3").alone();
    assert!(PathPlan::new(&start, &[apart], &[]).is_ok());
    let frames = [
        build("He 0 0 0; H 1 0.01 0"),
        build("He 0 0 0; H -1 0.01 0"),
    ];
    // Alignment turns the second frame onto the first: no clash is left.
    assert!(PathPlan::frames(&frames, &FrameValues::Number).is_ok());
}

#[test]
fn frames_are_points_of_the_path() {
    let bend = plan(&water(), &[(Bend, "2-1-3=90..130:20")]).unwrap();
    let mut frames: Vec<Molecule> = (0..3)
        .map(|i| bend.molecule(&bend.values(i)).unwrap())
        .collect();
    let turn = motion::rotation([0.6, 0.0, 0.8], 50.0);
    for position in &mut frames[1].positions {
        *position = motion::transform(&turn, *position).map(|x| x + 3.0);
    }
    let path = PathPlan::frames(&frames, &FrameValues::Number).unwrap();
    assert_eq!(path.axes()[0].values, [1.0, 2.0, 3.0]);
    let first = path.molecule(&[1.0]).unwrap();
    assert_eq!(first.positions, frames[0].positions);
    for (i, frame) in frames.iter().enumerate() {
        let p = path.molecule(&path.values(i)).unwrap().positions;
        for (a, b) in [(0, 1), (1, 2), (0, 2)] {
            let wanted = distance(frame.positions[a], frame.positions[b]);
            assert!((distance(p[a], p[b]) - wanted).abs() < 1e-13);
        }
    }
    assert!(broken(&path, C2Z, &[0, 2, 1]) < 1e-9);
    let given = FrameValues::Given {
        name: "time".into(),
        unit: "fs".into(),
        values: vec![0.0, 2.0, 1.0],
    };
    assert!(matches!(
        PathPlan::frames(&frames, &given),
        Err(PathError::Frame { .. })
    ));
    assert!(PathPlan::frames(&frames[..1], &FrameValues::Number).is_err());
    let mut other = frames.clone();
    other[2] = carbon_dioxide();
    let error = PathPlan::frames(&other, &FrameValues::Number)
        .unwrap_err()
        .to_string();
    assert!(error.contains("frame 3: atom 1 is C, but O"), "{error}");
    other[2] = frames[2].clone();
    other[2].charge = 1;
    assert!(PathPlan::frames(&other, &FrameValues::Number).is_err());
}

#[test]
fn frames_that_swap_atoms_clash() {
    let first = build("He 0 0 0; H 0 0.3 1; H 0 -0.3 1; Ar 3 0 0; Ne 0 0 -3");
    let second = build("He 0 0 0; H 0 -0.3 1; H 0 0.3 1; Ar 3 0 0; Ne 0 0 -3");
    let error = PathPlan::frames(&[first, second], &FrameValues::Number).unwrap_err();
    assert!(
        error.to_string().contains("H2 and H3 come to 0.0"),
        "{error}"
    );
}

/// Speeds against central differences of the positions (which leave an error of 1e-9 where
/// coordinates settle among one another).
fn check_speeds(plan: &PathPlan) {
    for point in 0..plan.points() {
        let values = plan.values(point);
        let mut speeds = vec![[0.0; 3]; plan.start().len()];
        for axis in 0..plan.axes().len() {
            let (low, high) = plan.axes()[axis].limits();
            if values[axis] - low < 0.1 || high - values[axis] < 0.1 {
                continue;
            }
            plan.speeds(&values, axis, &mut speeds).unwrap();
            let at = |shift: f64| {
                let mut values = values.clone();
                values[axis] += shift;
                plan.molecule(&values).unwrap().positions
            };
            let h = 1e-3;
            let (a, b, c, d) = (at(-2.0 * h), at(-h), at(h), at(2.0 * h));
            for atom in 0..speeds.len() {
                for k in 0..3 {
                    let fourth_order =
                        (8.0 * (c[atom][k] - b[atom][k]) - d[atom][k] + a[atom][k]) / (12.0 * h);
                    let off = (fourth_order - speeds[atom][k]).abs();
                    assert!(off < 2e-9, "{} atom {atom}: {off:e}", plan.place(&values));
                }
            }
        }
    }
}

#[test]
fn speeds_are_the_derivatives_of_the_positions() {
    let cases: [(&Molecule, &[(CoordinateKind, &str)]); 6] = [
        (&water(), &[(Bend, "2-1-3=90..180:10")]),
        (&ammonia(), &[(Pyramid, "1=90..118:4")]),
        (&ethylene(), &[(Twist, "3-1-2-5=0..90:10")]),
        (&ethylene(), &[(Stretch, "1-2=1.2..1.6:0.1")]),
        (
            &water(),
            &[(Bend, "2-1-3=90..150:30"), (Stretch, "1-2=0.8..1.2:0.2")],
        ),
        (
            &ethylene(),
            &[(Bend, "3-1-4=100..130:10"), (Twist, "3-1-2-5=0..60:20")],
        ),
    ];
    for (molecule, coordinates) in cases {
        check_speeds(&plan(molecule, coordinates).unwrap());
    }
    let ammonia = ammonia();
    let planar = plan(&ammonia, &[(Pyramid, "1=90..120:5")]).unwrap();
    let mut speeds = vec![[0.0; 3]; 4];
    assert!(matches!(
        planar.speeds(&[120.0], 0, &mut speeds),
        Err(PathError::NoSpeed { .. })
    ));
}
