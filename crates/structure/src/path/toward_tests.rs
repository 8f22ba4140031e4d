use super::*;
use crate::coordinate::CoordinateKind;
use crate::measure::measure;
use crate::range::Range;
use crate::test_molecules::*;
use crate::vector::distance;

fn bent_water(angle: f64) -> Molecule {
    let range = format!("2-1-3=60..{angle}:{}", angle - 60.0);
    let bend = [Coordinate::parse(CoordinateKind::Bend, &range).unwrap()];
    let plan = PathPlan::new(&water(), &bend, &equivalences(&water())).unwrap();
    plan.molecule(&[angle]).unwrap()
}

/// The same molecule turned, shifted, and with its atoms in another order.
fn scrambled(molecule: &Molecule, order: &[usize]) -> Molecule {
    let turn = motion::rotation([0.48, 0.6, 0.64], 77.0);
    let place = |atom: usize| motion::transform(&turn, molecule.positions[atom]).map(|x| x - 2.0);
    let elements = order.iter().map(|&atom| molecule.elements[atom]).collect();
    let positions = order.iter().map(|&atom| place(atom)).collect();
    Molecule::new(elements, positions, molecule.charge, None, "").unwrap()
}

fn distances(molecule: &Molecule) -> Vec<f64> {
    let p = &molecule.positions;
    let pairs = (0..p.len()).flat_map(|i| (0..i).map(move |j| (i, j)));
    pairs.map(|(i, j)| distance(p[i], p[j])).collect()
}

#[test]
fn ends_are_exact_and_order_is_found() {
    let end = scrambled(&bent_water(150.0), &[1, 0, 2]);
    let (plan, report) = PathPlan::toward(&water(), &end, 41, None).unwrap();
    assert_eq!(
        (plan.points(), report.permuted, report.changed_bonds),
        (41, true, 0)
    );
    assert!(report.internal);
    assert_eq!(report.mapping[0], 1);
    assert!(plan.describe().contains("O1=2"), "{}", plan.describe());
    assert_eq!(plan.molecule(&[0.0]).unwrap().positions, water().positions);
    let last = plan.molecule(&[1.0]).unwrap();
    for (a, b) in distances(&last).iter().zip(distances(&bent_water(150.0))) {
        assert!((a - b).abs() < 1e-12);
    }
    // The twofold axis stays where it is.
    for point in 0..41 {
        let p = plan.molecule(&plan.values(point)).unwrap().positions;
        assert!((p[1][0] + p[2][0]).abs() < 1e-8 && (p[1][2] - p[2][2]).abs() < 1e-8);
    }
}

#[test]
fn reversed_path_is_the_same() {
    let peroxide = hydrogen_peroxide();
    let twist = [Coordinate::parse(CoordinateKind::Twist, "3-1-2-4=20..160:70").unwrap()];
    let twisted = PathPlan::new(&peroxide, &twist, &equivalences(&peroxide)).unwrap();
    let (a, b) = (
        twisted.molecule(&[20.0]).unwrap(),
        twisted.molecule(&[160.0]).unwrap(),
    );
    let (forth, report) = PathPlan::toward(&a, &b, 21, None).unwrap();
    let (back, _) = PathPlan::toward(&b, &a, 21, None).unwrap();
    assert!(report.internal);
    for point in 0..21 {
        let first = distances(&forth.molecule(&forth.values(point)).unwrap());
        let second = distances(&back.molecule(&back.values(20 - point)).unwrap());
        for (x, y) in first.iter().zip(second) {
            assert!((x - y).abs() < 1e-7, "{point}: {x} {y}");
        }
        let symmetric = forth.molecule(&forth.values(point)).unwrap();
        let d = |i: usize, j: usize| distance(symmetric.positions[i], symmetric.positions[j]);
        assert!((d(0, 2) - d(1, 3)).abs() < 1e-8);
    }
    // Between the points the curve stays smooth and inside the range.
    let mut last = forth.molecule(&[0.3]).unwrap().positions;
    for k in 1..=100 {
        let next = forth
            .molecule(&[0.3 + 0.001 * f64::from(k)])
            .unwrap()
            .positions;
        assert!(last.iter().zip(&next).all(|(&a, &b)| distance(a, b) < 0.02));
        last = next;
    }
}

#[test]
fn equal_order_is_kept_where_bonds_agree() {
    // Swapping the two hydrogens of one CH2 changes no bond: the file is
    // trusted, and the path that exchanges them in their plane is refused.
    let start = ethylene();
    let mut swapped = bent(&start);
    swapped.positions.swap(2, 3);
    let error = PathPlan::toward(&start, &swapped, 11, None).unwrap_err();
    assert!(
        error.to_string().starts_with("H3 and H4 come to 0."),
        "{error}"
    );
    let mapping = [0, 1, 3, 2, 4, 5];
    let (_, report) = PathPlan::toward(&start, &swapped, 11, Some(&mapping)).unwrap();
    assert!(report.permuted && report.internal);
    // A given mapping is followed.
    let (_, given) = PathPlan::toward(&start, &bent(&start), 5, Some(&[1, 0, 4, 5, 2, 3])).unwrap();
    assert!(given.permuted && given.changed_bonds == 0);
    assert!(PathPlan::toward(&start, &bent(&start), 5, Some(&[0, 0, 2, 3, 4, 5])).is_err());
    assert!(PathPlan::toward(&start, &bent(&start), 5, Some(&[2, 1, 0, 3, 4, 5])).is_err());
}

fn bent(start: &Molecule) -> Molecule {
    let bend = [Coordinate::parse(CoordinateKind::Bend, "3-1-4=110..130:20").unwrap()];
    let plan = PathPlan::new(start, &bend, &equivalences(start)).unwrap();
    plan.molecule(&[130.0]).unwrap()
}

#[test]
fn reactions_with_permuted_atoms() {
    // HCN → HNC: the hydrogen changes its partner; atoms reordered.
    let start = build("H -1.06 0 0; C 0 0 0; N 1.16 0 0");
    let end = scrambled(&build("H 1.0 1.6 0.1; C 0 0 0; N 1.18 0 0"), &[2, 0, 1]);
    let (_, report) = PathPlan::toward(&start, &end, 21, None).unwrap();
    assert_eq!(report.mapping, [1, 2, 0]);
    // Cyclopropane opens into a bent chain; the file lists hydrogens first.
    let ring = cyclopropane();
    let stretched = {
        let mut open = ring.clone();
        for (atom, place) in open.positions.iter_mut().enumerate() {
            // One CH2 and its hydrogens move outwards.
            if [1, 5, 6].contains(&atom) {
                place[1] += 0.9;
            }
        }
        open
    };
    let order = [8, 7, 6, 5, 4, 3, 2, 1, 0];
    let (_, report) = PathPlan::toward(&ring, &scrambled(&stretched, &order), 15, None).unwrap();
    let carbons: Vec<usize> = (0..3).map(|i| report.mapping[i]).collect();
    assert!(carbons.iter().all(|&k| k >= 6), "{:?}", report.mapping);
    for carbon in 0..3 {
        // Every carbon keeps its own two hydrogens.
        for hydrogen in [3 + 2 * carbon, 4 + 2 * carbon] {
            let original = |k: usize| order[report.mapping[k]];
            assert_eq!((original(hydrogen) - 3) / 2, original(carbon));
        }
    }
}

#[test]
fn mirror_images_fall_back_to_straight_lines() {
    let start = hydrogen_peroxide();
    let mut mirror = start.clone();
    for place in &mut mirror.positions {
        place[0] = -place[0];
    }
    let (plan, report) = PathPlan::toward(&start, &mirror, 11, None).unwrap();
    let twist = |t: f64| {
        let p = plan.molecule(&[t]).unwrap().positions;
        measure(CoordinateKind::Twist, &[2, 0, 1, 3], &p).unwrap()
    };
    assert!((twist(0.0) + twist(1.0)).abs() < 1e-9);
    assert_eq!(plan.describe().contains("straight line"), !report.internal);
    assert!(!report.internal);
}

#[test]
fn refusals() {
    let error = |a: &Molecule, b: &Molecule, points| {
        PathPlan::toward(a, b, points, None)
            .unwrap_err()
            .to_string()
    };
    assert!(error(&water(), &carbon_dioxide(), 5).contains("H2O and CO2"));
    assert!(error(&water(), &bent_water(90.0), 1).contains("1 points"));
    let mut charged = bent_water(90.0);
    charged.charge = 1;
    assert!(error(&water(), &charged, 5).contains("+0 and +1"));
    assert!(error(&water(), &scrambled(&water(), &[0, 1, 2]), 5).contains("same geometry"));
}

#[test]
fn along_a_displacement() {
    let mode = [[0.0; 3], [0.0, 0.0, 0.1], [0.0, 0.0, 0.1]];
    let range = Range::new(-2.0, 2.0, 0.5).unwrap();
    let plan = PathPlan::along(&water(), &mode, range).unwrap();
    assert_eq!(plan.points(), 9);
    for point in 0..9 {
        let values = plan.values(point);
        let z = plan.molecule(&values).unwrap().positions[1][2];
        assert!((z - (0.587 + 0.1 * values[0])).abs() < 1e-14);
    }
    assert!(PathPlan::along(&water(), &mode[..2], range).is_err());
    assert!(PathPlan::along(&water(), &[[0.0; 3]; 3], range).is_err());
    let towards = [[0.0; 3], [-0.757, 0.0, 0.0], [0.757, 0.0, 0.0]];
    let error = PathPlan::along(&water(), &towards, Range::new(0.0, 2.0, 0.1).unwrap());
    assert!(
        error
            .unwrap_err()
            .to_string()
            .contains("H2 and H3 come to 0.000 Å")
    );
}

#[test]
fn planar_to_perpendicular_keeps_the_common_symmetry() {
    let start = ethylene();
    let twist = [Coordinate::parse(CoordinateKind::Twist, "3-1-2-5=0..90:90").unwrap()];
    let twisted = PathPlan::new(&start, &twist, &equivalences(&start)).unwrap();
    let end = twisted.molecule(&[90.0]).unwrap();
    let (path, report) = PathPlan::toward(&start, &end, 10, None).unwrap();
    assert!(report.internal && !report.permuted);
    for point in 0..10 {
        let p = path.molecule(&path.values(point)).unwrap().positions;
        let ch = [
            distance(p[0], p[2]),
            distance(p[0], p[3]),
            distance(p[1], p[4]),
            distance(p[1], p[5]),
        ];
        assert!(ch.iter().all(|d| (d - ch[0]).abs() < 1e-8), "{ch:?}");
        assert!((ch[0] - distance(start.positions[0], start.positions[2])).abs() < 0.01);
    }
}

/// Ring closing of butadiene by the order of the hydrogens in the second file:
/// conrotatory keeps the twofold axis, disrotatory the mirror plane (Woodward &
/// Hoffmann, J. Am. Chem. Soc. 87, 395 (1965)). Geometries drawn by hand.
#[test]
fn ring_closing_both_ways() {
    let open = build(
        "C -1.45 1.13 0; C -0.73 0 0; C 0.73 0 0; C 1.45 1.13 0; H -0.9 2.06 0; H 0.9 2.06 0; \
         H -2.53 1.18 0; H 2.53 1.18 0; H -1.25 -0.95 0; H 1.25 -0.95 0",
    );
    let ring = |right: f64| {
        build(&format!(
            "C -0.785 1.5 0; C -0.67 0 0; C 0.67 0 0; C 0.785 1.5 0; H -1.24 1.9 0.89; \
             H 1.24 1.9 {}; H -1.24 1.9 -0.89; H 1.24 1.9 {}; H -1.5 -0.7 0; H 1.5 -0.7 0",
            0.89 * right,
            -0.89 * right
        ))
    };
    for (right, z) in [(-1.0, -1.0), (1.0, 1.0)] {
        let (plan, report) = PathPlan::toward(&open, &ring(right), 21, None).unwrap();
        assert!(report.internal && !report.permuted);
        assert_eq!(report.changed_bonds, 1);
        let partner = [3, 2, 1, 0, 5, 4, 7, 6, 9, 8];
        for point in 0..21 {
            let p = plan.molecule(&plan.values(point)).unwrap().positions;
            for (atom, &image) in partner.iter().enumerate() {
                let expected = [-p[atom][0], p[atom][1], z * p[atom][2]];
                assert!(distance(expected, p[image]) < 1e-7, "{point} {atom}");
            }
        }
    }
    let order = [3, 0, 2, 1, 9, 8, 4, 5, 6, 7];
    let (_, report) = PathPlan::toward(&open, &scrambled(&ring(-1.0), &order), 21, None).unwrap();
    assert!(report.permuted && report.changed_bonds == 1, "{report:?}");
}
