//! Labels do not depend on how the molecule lies, on the order of atoms or on noise; paths,
//! near misses and the screen.
#![allow(missing_docs, clippy::unwrap_used, clippy::panic)]

mod common;

use common::molecules::*;
use common::{Matrix3, TOLERANCE, apply, atoms, group, product, rotation};
use orbend_symmetry::{GroupScreen, Nucleus, PointGroup, find, path_group, symmetrize};

/// Numbers that look random, the same in every run.
struct Sequence(u64);

impl Sequence {
    fn next(&mut self) -> f64 {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 11) as f64 / (1_u64 << 53) as f64
    }

    fn rotation(&mut self) -> Matrix3 {
        let axis = [self.next() - 0.5, self.next() - 0.5, self.next() - 0.5];
        let first = rotation(axis, self.next());
        product(&first, &rotation([1.0, 0.3, -0.2], self.next()))
    }
}

fn zoo() -> Vec<(&'static str, Vec<Nucleus>)> {
    let chiral = atoms(&[
        (6, [0.0; 3]),
        (1, [0.6, 0.6, 0.65]),
        (9, [-0.8, -0.75, 0.8]),
        (17, [-1.0, 1.0, -1.05]),
        (35, [1.1, -1.1, -1.15]),
    ]);
    vec![
        ("C2v", bent(8, 1, 0.958, 104.5)),
        ("C2v", formaldehyde()),
        ("C3v", trigonal(7, 1, 0.94, 0.38)),
        ("D3h", trigonal(5, 9, 1.31, 0.0)),
        ("Td", tetrahedral(6, 1, 1.09)),
        ("Oh", octahedral(16, 9, 1.56)),
        ("D4h", square(78, 17, 2.3)),
        ("D6h", benzene()),
        ("D2h", ethylene(0.0)),
        ("D2", ethylene(33.0)),
        ("D2d", ethylene(90.0)),
        ("D2d", allene()),
        ("D3d", ethane()),
        ("C2", peroxide(8, 1, 112.0)),
        ("C2h", peroxide(7, 9, 180.0)),
        ("C2v", peroxide(8, 1, 0.0)),
        ("D5d", ferrocene(true)),
        ("D5h", ferrocene(false)),
        ("Oh", cubane()),
        ("Ih", borane12()),
        ("Ih", c60()),
        ("Dinfh", bent(6, 8, 1.16, 180.0)),
        ("Cinfv", line(&[(1, -1.06), (6, 0.0), (7, 1.15)])),
        ("C1", chiral),
    ]
}

fn content(nuclei: &[Nucleus], g: &PointGroup) -> String {
    g.content(&g.count(&shells(nuclei, Some(26))).unwrap())
}

#[test]
fn labels_do_not_depend_on_position_order_or_noise() {
    let mut random = Sequence(7);
    for (name, nuclei) in zoo() {
        let g = group(&nuclei);
        assert_eq!(g.name, name);
        let expected = content(&nuclei, &g);
        let rounds = if nuclei.len() > 20 { 3 } else { 25 };
        for round in 0..rounds {
            let mut turn = random.rotation();
            if round % 2 == 1 {
                turn = turn.map(|row| row.map(|x| -x));
            }
            let shift = [random.next() * 9.0, random.next() * 9.0, -random.next()];
            let mut order: Vec<(f64, usize)> =
                (0..nuclei.len()).map(|k| (random.next(), k)).collect();
            order.sort_by(|a, b| a.0.total_cmp(&b.0));
            let moved: Vec<Nucleus> = order
                .iter()
                .map(|&(_, k)| {
                    let p = apply(&turn, nuclei[k].position);
                    let noise = [0; 3].map(|_| 2e-9 * (random.next() - 0.5));
                    let position = [0, 1, 2].map(|i| p[i] + shift[i] + noise[i]);
                    Nucleus {
                        kind: nuclei[k].kind,
                        position,
                    }
                })
                .collect();
            let other = group(&moved);
            assert_eq!(other.name, name);
            assert_eq!(content(&moved, &other), expected, "{name}");
            assert_eq!(other.convention, g.convention);
        }
    }
}

/// Mulliken, J. Chem. Phys. 23, 1997 (1955): a planar C2v molecule has x across its plane, so the
/// lone pair of water is b1 whichever plane the input uses.
#[test]
fn water_turned_by_a_right_angle_about_its_axis_keeps_its_labels() {
    let water = bent(8, 1, 0.958, 104.5);
    let quarter = rotation([0.0, 0.0, 1.0], 0.25);
    let turned: Vec<Nucleus> = water
        .iter()
        .map(|n| Nucleus {
            kind: n.kind,
            position: apply(&quarter, n.position),
        })
        .collect();
    for (nuclei, lone_pair) in [(water, 1 + 1), (turned, 1 + 2)] {
        let g = group(&nuclei);
        assert_eq!(g.convention, "z along C2, x perpendicular to the plane");
        let list = shells(&nuclei, None);
        let basis = g.adapt(&list).unwrap();
        // Functions of O: s, then p in the order z, x, y.
        let mut vector = vec![0.0; 6];
        vector[lone_pair] = 1.0;
        let mut weights = vec![0.0; 4];
        basis.weights(&vector, &vector, &mut weights);
        let b1 = g.irrep("b1").unwrap();
        assert!((weights[b1] - 1.0).abs() < 1e-12);
        assert_eq!(g.other_axes("1b1"), "1b2");
        assert_eq!(g.other_axes("3a1"), "3a1");
    }
}

#[test]
fn other_axes_are_known_where_names_depend_on_them() {
    let ethylene = group(&ethylene(0.0));
    assert_eq!(ethylene.other_axes("1b3u"), "1b1u");
    assert_eq!(ethylene.other_axes("b2g"), "b2g");
    let benzene = group(&benzene());
    assert_eq!(benzene.other_axes("2b1u"), "2b2u");
    assert_eq!(benzene.other_axes("1e1g"), "1e1g");
    assert_eq!(group(&tetrahedral(6, 1, 1.09)).other_convention(), None);
}

#[test]
fn near_misses_are_reported_and_can_be_reached() {
    let mut methane = tetrahedral(6, 1, 1.09);
    methane[1].position[0] += 0.012;
    methane[3].position[1] -= 0.02;
    let found = find(&methane, TOLERANCE).unwrap();
    assert_ne!(found.group.name, "Td");
    let miss = found.near_misses.last().unwrap();
    assert_eq!(miss.name, "Td");
    assert!((0.005..0.06).contains(&miss.tolerance_angstrom), "{miss:?}");
    let loose = find(&methane, miss.tolerance_angstrom + 1e-6).unwrap();
    assert_eq!(loose.group.name, "Td");
    let (moved, by) = symmetrize(&methane, &loose.group);
    assert!(by > 0.004 && by < 0.03, "{by}");
    let exact = find(&moved, 1e-7).unwrap();
    assert_eq!(exact.group.name, "Td");
    assert!(exact.deviation_angstrom < 1e-12);
    let nearly_straight = find(&bent(8, 1, 1.0, 179.0), TOLERANCE).unwrap();
    assert_eq!(nearly_straight.group.name, "C2v");
    assert_eq!(nearly_straight.near_misses.last().unwrap().name, "Dinfh");
}

fn positions(nuclei: &[Nucleus]) -> Vec<[f64; 3]> {
    nuclei.iter().map(|n| n.position).collect()
}

#[test]
fn a_path_keeps_what_all_its_points_keep() {
    let walsh: Vec<Vec<[f64; 3]>> = (0..=18)
        .rev()
        .map(|k| positions(&bent(8, 1, 0.96, 90.0 + 5.0 * f64::from(k))))
        .collect();
    let path = path_group(&[8, 1, 1], &walsh, TOLERANCE).unwrap();
    assert_eq!(path.group.name, "C2v");
    assert_eq!(path.axes_from, 1);
    assert_eq!(
        path.group.convention,
        "z along C2, x perpendicular to the plane"
    );

    let kinds = [7, 1, 1, 1];
    let umbrella: Vec<Vec<[f64; 3]>> = (0..8)
        .map(|k| positions(&trigonal(7, 1, 0.98, 0.05 * f64::from(k))))
        .collect();
    assert_eq!(
        path_group(&kinds, &umbrella, TOLERANCE).unwrap().group.name,
        "C3v"
    );

    let kinds = [6, 6, 1, 1, 1, 1];
    let twist: Vec<Vec<[f64; 3]>> = (0..=6)
        .map(|k| positions(&ethylene(15.0 * f64::from(k))))
        .collect();
    let path = path_group(&kinds, &twist, TOLERANCE).unwrap();
    assert_eq!(path.group.name, "D2");
    // x stays across the plane of the start, z along CC.
    assert!(path.group.axes.z[2].abs() > 0.999_999);
    assert!(path.group.axes.x[0].abs() > 0.999_999);

    let stretch: Vec<Vec<[f64; 3]>> = (0..4)
        .map(|k| {
            positions(&line(&[
                (6, 0.0),
                (8, 1.16),
                (8, -1.16 - 0.1 * f64::from(k)),
            ]))
        })
        .collect();
    assert_eq!(
        path_group(&[6, 8, 8], &stretch, TOLERANCE)
            .unwrap()
            .group
            .name,
        "Cinfv"
    );
    assert_eq!(
        path_group(&[6, 8, 8], &stretch[..1], TOLERANCE)
            .unwrap()
            .group
            .name,
        "Dinfh"
    );
}

#[test]
fn the_screen_tells_special_points_from_generic_ones() {
    let screen = GroupScreen::new(&bent(8, 1, 0.96, 100.0), TOLERANCE).unwrap();
    assert!(screen.unchanged(&positions(&bent(8, 1, 0.96, 170.0))));
    assert!(!screen.unchanged(&positions(&bent(8, 1, 0.96, 180.0))));
    let mut lopsided = positions(&bent(8, 1, 0.96, 100.0));
    lopsided[1][2] += 0.01;
    assert!(!screen.unchanged(&lopsided));

    let screen = GroupScreen::new(&ethylene(33.0), TOLERANCE).unwrap();
    let flags: Vec<bool> = (0..=6)
        .map(|k| screen.unchanged(&positions(&ethylene(15.0 * f64::from(k)))))
        .collect();
    assert_eq!(flags, [false, true, true, true, true, true, false]);

    let screen = GroupScreen::new(&trigonal(7, 1, 0.95, 0.3), TOLERANCE).unwrap();
    assert!(screen.unchanged(&positions(&trigonal(7, 1, 0.95, 0.1))));
    assert!(!screen.unchanged(&positions(&trigonal(7, 1, 0.95, 0.0))));
}

/// Counted by hand from the permutations: 60 radial π functions of C60 (Haddon, Brus &
/// Raghavachari, Chem. Phys. Lett. 125, 459 (1986)); cage and CH or BH functions of cubane and
/// B12H12 (2−) from the vertices of the cube and the icosahedron.
#[test]
fn cages_span_the_irreps_of_their_vertices() {
    let s_only = |nuclei: &[Nucleus], kind: u32| {
        let g = group(nuclei);
        let list: Vec<orbend_symmetry::OrbitalShell> = (0..nuclei.len())
            .filter(|&k| nuclei[k].kind == kind)
            .map(|atom| orbend_symmetry::OrbitalShell { atom, l: 0 })
            .collect();
        g.content(&g.count(&list).unwrap())
    };
    assert_eq!(
        s_only(&c60(), 6),
        "ag + t1g + t2g + 2gg + 3hg + 2t1u + 2t2u + 2gu + 2hu"
    );
    assert_eq!(s_only(&cubane(), 1), "a1g + t2g + a2u + t1u");
    assert_eq!(s_only(&borane12(), 1), "ag + hg + t1u + t2u");
    assert_eq!(
        s_only(&ferrocene(true), 1),
        "a1g + e1g + e2g + a2u + e1u + e2u"
    );
    assert_eq!(
        s_only(&ferrocene(false), 1),
        "a1' + e1' + e2' + a2'' + e1'' + e2''"
    );
}

#[test]
fn bad_input_is_refused() {
    assert!(find(&[], TOLERANCE).is_err());
    assert!(find(&atoms(&[(1, [f64::NAN, 0.0, 0.0])]), TOLERANCE).is_err());
    assert!(find(&atoms(&[(1, [0.0; 3]), (2, [0.0; 3])]), TOLERANCE).is_err());
    assert!(find(&atoms(&[(1, [0.0; 3])]), 0.0).is_err());
    assert!(find(&atoms(&[(1, [0.0; 3])]), f64::NAN).is_err());
}
