//! Adapted blocks: content, identical rows, transforms.
#![allow(missing_docs, clippy::unwrap_used, clippy::panic)]

mod common;

use common::molecules::*;
use common::{TOLERANCE, cluster, group, moved, rotation};
use orbend_symmetry::{AdaptedBasis, Nucleus, OrbitalShell, PointGroup, find};

/// REFERENCE 2.5 (group theory, counted by hand from the characters; standard tabulation in
/// Cotton, *Chemical Applications of Group Theory*): valence s and p functions only.
#[test]
fn valence_functions_span_the_published_irreps() {
    let nh3 = trigonal(7, 1, 0.94, 0.38);
    let nf3 = trigonal(7, 9, 1.24, 0.5);
    let cases: Vec<(Vec<Nucleus>, &str, &str)> = vec![
        (bent(8, 1, 0.958, 104.5), "C2v", "3a1 + b1 + 2b2"),
        (
            bent(4, 1, 1.33, 180.0),
            "Dinfh",
            "2sigma_g+ + 2sigma_u+ + pi_u",
        ),
        (nh3, "C3v", "3a1 + 2e"),
        (trigonal(5, 1, 1.19, 0.0), "D3h", "2a1' + 2e' + a2''"),
        (tetrahedral(6, 1, 1.09), "Td", "2a1 + 2t2"),
        (
            bent(6, 8, 1.16, 180.0),
            "Dinfh",
            "3sigma_g+ + pi_g + 3sigma_u+ + 2pi_u",
        ),
        (bent(16, 8, 1.43, 119.5), "C2v", "5a1 + a2 + 2b1 + 4b2"),
        (
            trigonal(5, 9, 1.31, 0.0),
            "D3h",
            "3a1' + a2' + 4e' + 2a2'' + e''",
        ),
        (nf3, "C3v", "5a1 + a2 + 5e"),
        (tetrahedral(6, 9, 1.32), "Td", "3a1 + e + t1 + 4t2"),
        (
            line(&[(7, 0.0), (7, 1.1)]),
            "Dinfh",
            "2sigma_g+ + pi_g + 2sigma_u+ + pi_u",
        ),
        (
            line(&[(1, -1.06), (6, 0.0), (7, 1.15)]),
            "Cinfv",
            "5sigma+ + 2pi",
        ),
        (
            line(&[(1, -1.66), (6, -0.6), (6, 0.6), (1, 1.66)]),
            "Dinfh",
            "3sigma_g+ + pi_g + 3sigma_u+ + pi_u",
        ),
        (ethylene(0.0), "D2h", "3ag + b2g + 2b3g + 3b1u + 2b2u + b3u"),
        (formaldehyde(), "C2v", "5a1 + 2b1 + 3b2"),
        (
            benzene(),
            "D6h",
            "3a1g + a2g + b2g + e1g + 4e2g + a2u + 3b1u + b2u + 4e1u + e2u",
        ),
        (
            octahedral(16, 9, 1.56),
            "Oh",
            "3a1g + 2eg + t1g + t2g + 4t1u + t2u",
        ),
    ];
    let turn = rotation([0.4, -0.7, 1.1], 0.213);
    for (nuclei, name, content) in cases {
        for nuclei in [nuclei.clone(), moved(&nuclei, &turn, [1.0, 2.0, -3.0], 2)] {
            let g = group(&nuclei);
            assert_eq!(g.name, name);
            let list = shells(&nuclei, None);
            assert_eq!(g.content(&g.count(&list).unwrap()), content, "{name}");
        }
    }
    let sf6 = octahedral(16, 9, 1.56);
    let g = group(&sf6);
    let with_d = g.count(&shells(&sf6, Some(16))).unwrap();
    assert_eq!(g.content(&with_d), "3a1g + 3eg + t1g + 2t2g + 4t1u + t2u");
}

fn dense(n: usize, columns: &[Vec<(usize, f64)>]) -> Vec<Vec<f64>> {
    columns
        .iter()
        .map(|column| {
            let mut v = vec![0.0; n];
            for &(f, c) in column {
                v[f] = c;
            }
            v
        })
        .collect()
}

fn image(m: &[f64], v: &[f64]) -> Vec<f64> {
    m.chunks_exact(v.len()).map(|row| dot(row, v)).collect()
}

fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(x, y)| x * y).sum()
}

/// Everything that an adapted basis promises, for an invariant matrix.
fn check(g: &PointGroup, basis: &AdaptedBasis, n: usize, s: &[f64], label: &str) {
    let mut all: Vec<(usize, usize, Vec<f64>, Vec<f64>)> = Vec::new();
    for block in &basis.blocks {
        let m = block.size();
        let mut out = vec![0.0; m * m];
        block.transform(n, s, &mut out);
        for row in 0..block.row_count() {
            let columns = dense(n, block.row(row));
            let images: Vec<Vec<f64>> = columns.iter().map(|c| image(s, c)).collect();
            for i in 0..m {
                for j in 0..m {
                    let direct = dot(&columns[i], &images[j]);
                    assert!(
                        (direct - out[i * m + j]).abs() < 1e-11,
                        "{label} {} row {row} ({i},{j}): {direct} {}",
                        g.irreps[block.irrep].plain,
                        out[i * m + j]
                    );
                }
            }
            all.extend(
                columns
                    .into_iter()
                    .zip(images)
                    .map(|(c, s)| (block.irrep, row, c, s)),
            );
        }
        let wide: Vec<[f64; 8]> = s.iter().map(|&x| [x; 8]).collect();
        let mut lanes = vec![[0.0; 8]; m * m];
        block.transform_lanes(n, &wide, &mut lanes);
        for (x, y) in lanes.iter().zip(&out) {
            assert!(x.iter().all(|x| x.to_bits() == y.to_bits()));
        }
    }
    assert_eq!(all.len(), n, "{label}");
    for (k, (irrep, row, a, _)) in all.iter().enumerate() {
        for (l, (other, other_row, b, image)) in all.iter().enumerate() {
            let plain = dot(a, b);
            assert!(
                (plain - f64::from(u8::from(k == l))).abs() < 1e-12,
                "{label}"
            );
            if (irrep, row) != (other, other_row) {
                let coupling = dot(a, image);
                assert!(
                    coupling.abs() < 1e-11,
                    "{label}: {} row {row} couples to {} row {other_row}: {coupling}",
                    g.irreps[*irrep].plain,
                    g.irreps[*other].plain
                );
            }
        }
    }
}

#[test]
fn blocks_of_all_rows_are_identical_and_do_not_couple() {
    let turn = rotation([0.4, -0.7, 1.1], 0.213);
    let mut cases: Vec<(String, Vec<Nucleus>, u8)> = vec![
        ("water".into(), bent(8, 1, 0.958, 104.5), 3),
        ("linear".into(), bent(6, 8, 1.16, 180.0), 3),
        ("hcn".into(), line(&[(1, -1.06), (6, 0.0), (7, 1.15)]), 3),
        ("ammonia".into(), trigonal(7, 1, 0.94, 0.38), 3),
        ("bf3".into(), trigonal(5, 9, 1.31, 0.0), 3),
        ("methane".into(), tetrahedral(6, 1, 1.09), 3),
        ("sf6".into(), octahedral(16, 9, 1.56), 3),
        ("benzene".into(), benzene(), 2),
        ("allene".into(), allene(), 2),
        ("ferrocene".into(), ferrocene(true), 1),
        ("b12h12".into(), borane12(), 2),
        ("atom".into(), atoms_one(), 3),
    ];
    for (family, n) in [
        ("T", 1),
        ("Th", 1),
        ("O", 1),
        ("Cn", 5),
        ("Cnh", 3),
        ("Cnh", 4),
        ("S2n", 2),
        ("S2n", 3),
        ("Dnd", 4),
        ("Dn", 7),
        ("Cnv", 5),
    ] {
        let (name, nuclei) = cluster(family, n);
        let first: Vec<Nucleus> = nuclei.into_iter().filter(|a| a.kind <= 2).collect();
        cases.push((name, first, 1));
    }
    for (name, nuclei, l) in cases {
        let nuclei = moved(&nuclei, &turn, [1.0, 2.0, -3.0], 2);
        let g = group(&nuclei);
        let list: Vec<OrbitalShell> = (0..nuclei.len())
            .flat_map(|atom| (0..=l).map(move |l| OrbitalShell { atom, l }))
            .collect();
        let (n, s) = overlaps(&nuclei, &list);
        let basis = g.adapt(&list).unwrap();
        check(&g, &basis, n, &s, &name);
        for block in &basis.blocks {
            let count = g.count(&list).unwrap()[block.irrep];
            let size = if block.paired { 2 * count } else { count };
            assert_eq!(block.size(), size);
            // A block vector of one adapted function is that function, and is labelled as it is.
            let m = block.size();
            let mut unit = vec![0.0; m];
            unit[m - 1] = 1.0;
            let mut out = vec![0.0; n];
            block.expand(0, n, &unit, &mut out);
            assert_eq!(out, dense(n, &block.first)[m - 1]);
            let label = basis.label(&out, &s);
            assert_eq!(label.content, vec![(block.irrep, 1)]);
        }
    }
}

fn atoms_one() -> Vec<Nucleus> {
    common::atoms(&[(6, [0.3, 0.1, 0.0])])
}

#[test]
fn rows_along_a_subgroup_belong_to_its_irreps() {
    // Square-planar AX4 inside the octahedron, and a bent path of a linear molecule.
    let oh = group(&octahedral(16, 9, 1.56));
    let mut stretched = octahedral(16, 9, 1.56);
    for a in &mut stretched {
        a.position[2] *= 1.1;
    }
    let d4h = group(&stretched);
    assert_eq!(d4h.name, "D4h");
    let list = shells(&octahedral(16, 9, 1.56), Some(16));
    let (n, s) = overlaps(&octahedral(16, 9, 1.56), &list);
    let basis = oh.adapt_along(&list, &d4h).unwrap();
    check(&oh, &basis, n, &s, "Oh along D4h");
    splits(&basis, &d4h, &list, n);
    let linear = bent(6, 8, 1.16, 180.0);
    let c2v = group(&bent(6, 8, 1.16, 150.0));
    let big = find(&linear, TOLERANCE).unwrap().group;
    let list = shells(&linear, None);
    let (n, s) = overlaps(&linear, &list);
    let basis = big.adapt_along(&list, &c2v).unwrap();
    check(&big, &basis, n, &s, "Dinfh along C2v");
    splits(&basis, &c2v, &list, n);
}

fn splits(basis: &AdaptedBasis, small: &PointGroup, list: &[OrbitalShell], n: usize) {
    let own = small.adapt(list).unwrap();
    let unit: Vec<f64> = (0..n * n)
        .map(|k| if k % (n + 1) == 0 { 1.0 } else { 0.0 })
        .collect();
    for block in &basis.blocks {
        for row in 0..block.row_count() {
            let mut first = None;
            for column in dense(n, block.row(row)) {
                let mut weights = vec![0.0; small.irreps.len()];
                own.weights(&column, &column, &mut weights);
                let label = own.label(&column, &unit);
                let irrep = label.content[0].0;
                assert!(weights[irrep] > 1.0 - 1e-10, "{weights:?}");
                assert_eq!(*first.get_or_insert(irrep), irrep);
            }
        }
    }
}
