//! Descent against the standard correlation tables (Herzberg, *Electronic Spectra of Polyatomic
//! Molecules* (1966), tables 58–60; Altmann & Herzig, *Point-Group Theory Tables* (1994)).
#![allow(missing_docs, clippy::unwrap_used, clippy::panic)]

mod common;

use common::molecules::*;
use common::{atoms, group};
use orbend_symmetry::{Descent, Nucleus, PointGroup};

fn check(big: &PointGroup, small: &PointGroup, table: &str) {
    let descent = Descent::between(big, small).unwrap();
    for entry in table.split(';') {
        let (from, to) = entry.split_once("->").unwrap();
        let k = big
            .irrep(from.trim())
            .unwrap_or_else(|| panic!("{from} not in {}", big.name));
        let mut counts = vec![0; small.irreps.len()];
        for &(j, count) in &descent.content[k] {
            counts[j] = count;
        }
        assert_eq!(
            small.content(&counts).replace(' ', ""),
            to.trim(),
            "{} to {}: {from}",
            big.name,
            small.name
        );
    }
}

fn named(nuclei: &[Nucleus], name: &str) -> PointGroup {
    let g = group(nuclei);
    assert_eq!(g.name, name);
    g
}

#[test]
fn linear_molecules() {
    let big = named(&bent(8, 1, 1.0, 180.0), "Dinfh");
    check(
        &big,
        &named(&bent(8, 1, 1.0, 150.0), "C2v"),
        "sigma_g+->a1; sigma_g-->b1; sigma_u+->b2; sigma_u-->a2; pi_g->a2+b2; pi_u->a1+b1; \
         delta_g->a1+b1; delta_u->a2+b2",
    );
    let trans = atoms(&[
        (6, [0.0, 0.0, 0.6]),
        (6, [0.0, 0.0, -0.6]),
        (1, [0.0, 0.3, 1.6]),
        (1, [0.0, -0.3, -1.6]),
    ]);
    let straight = line(&[(6, 0.6), (6, -0.6), (1, 1.6), (1, -1.6)]);
    check(
        &named(&straight, "Dinfh"),
        &named(&trans, "C2h"),
        "sigma_g+->ag; sigma_g-->bg; sigma_u+->bu; sigma_u-->au; pi_g->ag+bg; pi_u->au+bu; \
         delta_g->ag+bg; delta_u->au+bu",
    );
    check(
        &named(&straight, "Dinfh"),
        &named(&ethylene(0.0), "D2h"),
        "sigma_g+->ag; sigma_g-->b1g; sigma_u+->b1u; sigma_u-->au; pi_g->b2g+b3g; pi_u->b2u+b3u; \
         delta_g->ag+b1g; delta_u->au+b1u",
    );
    let hcn = named(&line(&[(1, -1.06), (6, 0.0), (7, 1.15)]), "Cinfv");
    let bent_hcn = atoms(&[(1, [0.4, 0.3, -1.0]), (6, [0.0; 3]), (7, [0.0, 0.0, 1.15])]);
    check(
        &hcn,
        &named(&bent_hcn, "Cs"),
        "sigma+->a'; sigma-->a''; pi->a'+a''; delta->a'+a''; phi->a'+a''",
    );
}

#[test]
fn trigonal_molecules() {
    let d3h = named(&trigonal(5, 9, 1.3, 0.0), "D3h");
    check(
        &d3h,
        &named(&trigonal(7, 9, 1.2, 0.4), "C3v"),
        "a1'->a1; a2'->a2; e'->e; a1''->a2; a2''->a1; e''->e",
    );
    let mut pulled = trigonal(5, 9, 1.3, 0.0);
    pulled[1].position[0] *= 1.1;
    check(
        &d3h,
        &named(&pulled, "C2v"),
        "a1'->a1; a2'->b2; e'->a1+b2; a1''->a2; a2''->b1; e''->a2+b1",
    );
    let mut skew = trigonal(5, 9, 1.3, 0.0);
    skew[1].position[0] *= 1.1;
    skew[2].position[0] *= 1.2;
    check(
        &d3h,
        &named(&skew, "Cs"),
        "a1'->a'; a2'->a'; e'->2a'; a1''->a''; a2''->a''; e''->2a''",
    );
    let d3 = named(&propeller(), "D3");
    check(
        &d3h,
        &d3,
        "a1'->a1; a2'->a2; e'->e; a1''->a1; a2''->a2; e''->e",
    );
}

/// Three pairs of atoms turned like a propeller, the first ones on the D3h molecule's axes.
fn propeller() -> Vec<Nucleus> {
    let ops = common::closure(&common::generators("Dn", 3).1);
    let mut all = trigonal(5, 9, 1.3, 0.0);
    all.extend(common::orbit(1, [2.0, 0.4, 0.5], &ops));
    all
}

#[test]
fn tetrahedral_molecules() {
    let x = 1.0;
    let td = named(&tetrahedral(6, 9, x), "Td");
    let mut c3v = tetrahedral(6, 9, x);
    c3v[1].position = c3v[1].position.map(|p| 1.1 * p);
    check(
        &td,
        &named(&c3v, "C3v"),
        "a1->a1; a2->a2; e->e; t1->a2+e; t2->a1+e",
    );
    let mut d2d = tetrahedral(6, 9, x);
    for a in &mut d2d {
        a.position[2] *= 0.8;
    }
    check(
        &td,
        &named(&d2d, "D2d"),
        "a1->a1; a2->b1; e->a1+b1; t1->a2+e; t2->b2+e",
    );
    let mut c2v = tetrahedral(6, 9, x);
    for a in c2v.iter_mut().filter(|a| a.position[2] > 0.1) {
        a.position = a.position.map(|p| 1.1 * p);
    }
    check(
        &td,
        &named(&c2v, "C2v"),
        "a1->a1; a2->a2; e->a1+a2; t1->a2+b1+b2; t2->a1+b1+b2",
    );
    let ops = common::closure(&common::generators("Dn", 2).1);
    let mut d2 = atoms(&[(6, [0.0; 3])]);
    d2.extend(common::orbit(9, [0.5, 0.58, 0.66], &ops));
    check(
        &td,
        &named(&d2, "D2"),
        "a1->a; a2->a; e->2a; t1->b1+b2+b3; t2->b1+b2+b3",
    );
}

#[test]
fn octahedral_molecules() {
    let oh = named(&octahedral(16, 9, 1.5), "Oh");
    let mut d4h = octahedral(16, 9, 1.5);
    for a in &mut d4h {
        a.position[2] *= 1.1;
    }
    check(
        &oh,
        &named(&d4h, "D4h"),
        "a1g->a1g; a2g->b1g; eg->a1g+b1g; t1g->a2g+eg; t2g->b2g+eg; \
         a1u->a1u; a2u->b1u; eu->a1u+b1u; t1u->a2u+eu; t2u->b2u+eu",
    );
    let mut d3d = octahedral(16, 9, 1.5);
    for a in &mut d3d {
        let sum = 0.05 * (a.position[0] + a.position[1] + a.position[2]);
        a.position = a.position.map(|p| p + sum);
    }
    check(
        &oh,
        &named(&d3d, "D3d"),
        "a1g->a1g; a2g->a2g; eg->eg; t1g->a2g+eg; t2g->a1g+eg; \
         a1u->a1u; a2u->a2u; eu->eu; t1u->a2u+eu; t2u->a1u+eu",
    );
    check(
        &oh,
        &named(&tetrahedral(6, 9, 1.5), "Td"),
        "a1g->a1; a2g->a2; eg->e; t1g->t1; t2g->t2; a1u->a2; a2u->a1; eu->e; t1u->t2; t2u->t1",
    );
    let mut c4v = octahedral(16, 9, 1.5);
    for a in c4v.iter_mut().filter(|a| a.position[2] > 0.1) {
        a.position[2] += 0.2;
    }
    let c4v = named(&c4v, "C4v");
    check(
        &oh,
        &c4v,
        "a1g->a1; a2g->b1; eg->a1+b1; t1g->a2+e; t2g->b2+e; \
         a1u->a2; a2u->b2; eu->a2+b2; t1u->a1+e; t2u->b1+e",
    );
    let d4h = named(&square(78, 17, 2.3), "D4h");
    check(
        &d4h,
        &c4v,
        "a1g->a1; a2g->a2; b1g->b1; b2g->b2; eg->e; a1u->a2; a2u->a1; b1u->b2; b2u->b1; eu->e",
    );
    // Ligands alternately up and down: the twofold axes between them are kept.
    let mut d2d = square(78, 17, 2.3);
    for a in &mut d2d[1..] {
        let along_x = a.position[0].abs() > 0.1;
        a.position[2] = if along_x { 0.6 } else { -0.6 };
    }
    check(
        &d4h,
        &named(&d2d, "D2d"),
        "a1g->a1; a2g->a2; b1g->b2; b2g->b1; eg->e; a1u->b1; a2u->b2; b1u->a2; b2u->a1; eu->e",
    );
}

#[test]
fn twisted_ethylene() {
    let d2h = named(&ethylene(0.0), "D2h");
    let d2 = named(&ethylene(30.0), "D2");
    check(
        &d2h,
        &d2,
        "ag->a; au->a; b1g->b1; b1u->b1; b2g->b2; b2u->b2; b3g->b3; b3u->b3",
    );
    check(
        &named(&ethylene(90.0), "D2d"),
        &d2,
        "a1->a; b1->a; a2->b1; b2->b1; e->b2+b3",
    );
}
