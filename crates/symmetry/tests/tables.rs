//! Generated character tables against published ones (Herzberg, *Electronic Spectra of Polyatomic
//! Molecules* (1966), tables 50–57; Altmann & Herzig, *Point-Group Theory Tables* (1994)).
#![allow(missing_docs, clippy::unwrap_used, clippy::panic)]

mod common;

use common::molecules::*;
use common::{GOLDEN, cluster, group};
use orbend_symmetry::PointGroup;

/// `header` lists the labels of operations, one per class; every row is "irrep characters".
fn check(g: &PointGroup, header: &str, rows: &str) {
    let columns: Vec<usize> = header
        .split_whitespace()
        .map(|label| {
            g.classes
                .iter()
                .position(|class| class.label == label)
                .unwrap_or_else(|| panic!("{}: no class {label}", g.name))
        })
        .collect();
    assert_eq!(columns.len(), g.classes.len(), "{}", g.name);
    let rows: Vec<&str> = rows.split(';').map(str::trim).collect();
    assert_eq!(rows.len(), g.irreps.len(), "{}", g.name);
    for row in rows {
        let (name, values) = row.split_once(' ').unwrap();
        let irrep = &g.irreps[g
            .irrep(name)
            .unwrap_or_else(|| panic!("{}: {name}", g.name))];
        let values: Vec<f64> = values
            .split_whitespace()
            .map(|x| match x {
                "t" => GOLDEN,
                "-t" => -GOLDEN,
                "u" => 1.0 - GOLDEN,
                "-u" => GOLDEN - 1.0,
                "r" => std::f64::consts::SQRT_2,
                "-r" => -std::f64::consts::SQRT_2,
                x => x.parse().unwrap(),
            })
            .collect();
        for (&class, value) in columns.iter().zip(values) {
            assert!(
                (irrep.characters[class] - value).abs() < 1e-12,
                "{} {name} at {}: {} for {value}",
                g.name,
                g.classes[class].label,
                irrep.characters[class]
            );
        }
    }
}

#[test]
fn axial_groups() {
    check(
        &group(&bent(8, 1, 0.96, 104.0)),
        "E C2(z) sigma(xz) sigma(yz)",
        "a1 1 1 1 1; a2 1 1 -1 -1; b1 1 -1 1 -1; b2 1 -1 -1 1",
    );
    check(
        &group(&trigonal(7, 1, 0.94, 0.38)),
        "E 2C3 3sigma_v",
        "a1 1 1 1; a2 1 1 -1; e 2 -1 0",
    );
    check(
        &group(&trigonal(5, 9, 1.3, 0.0)),
        "E 2C3 3C2' sigma_h 2S3 3sigma_v",
        "a1' 1 1 1 1 1 1; a2' 1 1 -1 1 1 -1; e' 2 -1 0 2 -1 0; \
         a1'' 1 1 1 -1 -1 -1; a2'' 1 1 -1 -1 -1 1; e'' 2 -1 0 -2 1 0",
    );
    check(
        &group(&ethylene(0.0)),
        "E C2(z) C2(y) C2(x) i sigma(xy) sigma(xz) sigma(yz)",
        "ag 1 1 1 1 1 1 1 1; b1g 1 1 -1 -1 1 1 -1 -1; b2g 1 -1 1 -1 1 -1 1 -1; \
         b3g 1 -1 -1 1 1 -1 -1 1; au 1 1 1 1 -1 -1 -1 -1; b1u 1 1 -1 -1 -1 -1 1 1; \
         b2u 1 -1 1 -1 -1 1 -1 1; b3u 1 -1 -1 1 -1 1 1 -1",
    );
    check(
        &group(&square(78, 17, 2.3)),
        "E 2C4 C2(z) 2C2' 2C2'' i 2S4 sigma_h 2sigma_v 2sigma_d",
        "a1g 1 1 1 1 1 1 1 1 1 1; a2g 1 1 1 -1 -1 1 1 1 -1 -1; b1g 1 -1 1 1 -1 1 -1 1 1 -1; \
         b2g 1 -1 1 -1 1 1 -1 1 -1 1; eg 2 0 -2 0 0 2 0 -2 0 0; a1u 1 1 1 1 1 -1 -1 -1 -1 -1; \
         a2u 1 1 1 -1 -1 -1 -1 -1 1 1; b1u 1 -1 1 1 -1 -1 1 -1 -1 1; \
         b2u 1 -1 1 -1 1 -1 1 -1 1 -1; eu 2 0 -2 0 0 -2 0 2 0 0",
    );
    // In D6h the plane xz through C2' is sigma_v here; b1g is then even under C2' and i.
    check(
        &group(&benzene()),
        "E 2C6 2C3 C2(z) 3C2' 3C2'' i 2S3 2S6 sigma_h 3sigma_d 3sigma_v",
        "a1g 1 1 1 1 1 1 1 1 1 1 1 1; a2g 1 1 1 1 -1 -1 1 1 1 1 -1 -1; \
         b1g 1 -1 1 -1 1 -1 1 -1 1 -1 1 -1; b2g 1 -1 1 -1 -1 1 1 -1 1 -1 -1 1; \
         e1g 2 1 -1 -2 0 0 2 1 -1 -2 0 0; e2g 2 -1 -1 2 0 0 2 -1 -1 2 0 0; \
         a1u 1 1 1 1 1 1 -1 -1 -1 -1 -1 -1; a2u 1 1 1 1 -1 -1 -1 -1 -1 -1 1 1; \
         b1u 1 -1 1 -1 1 -1 -1 1 -1 1 -1 1; b2u 1 -1 1 -1 -1 1 -1 1 -1 1 1 -1; \
         e1u 2 1 -1 -2 0 0 -2 -1 1 2 0 0; e2u 2 -1 -1 2 0 0 -2 1 1 -2 0 0",
    );
    check(
        &group(&allene()),
        "E 2S4 C2(z) 2C2' 2sigma_d",
        "a1 1 1 1 1 1; a2 1 1 1 -1 -1; b1 1 -1 1 1 -1; b2 1 -1 1 -1 1; e 2 0 -2 0 0",
    );
    check(
        &group(&ethane()),
        "E 2C3 3C2' i 2S6 3sigma_d",
        "a1g 1 1 1 1 1 1; a2g 1 1 -1 1 1 -1; eg 2 -1 0 2 -1 0; \
         a1u 1 1 1 -1 -1 -1; a2u 1 1 -1 -1 -1 1; eu 2 -1 0 -2 1 0",
    );
    check(
        &group(&cluster("Dnd", 4).1),
        "E 2S8 2C4 2S8^3 C2(z) 4C2' 4sigma_d",
        "a1 1 1 1 1 1 1 1; a2 1 1 1 1 1 -1 -1; b1 1 -1 1 -1 1 1 -1; b2 1 -1 1 -1 1 -1 1; \
         e1 2 r 0 -r -2 0 0; e2 2 0 -2 0 2 0 0; e3 2 -r 0 r -2 0 0",
    );
    check(
        &group(&cluster("S2n", 2).1),
        "E S4 C2(z) S4^3",
        "a 1 1 1 1; b 1 -1 1 -1; e 2 0 -2 0",
    );
}

#[test]
fn cubic_and_icosahedral_groups() {
    check(
        &group(&tetrahedral(6, 1, 1.09)),
        "E 8C3 3C2 6S4 6sigma_d",
        "a1 1 1 1 1 1; a2 1 1 1 -1 -1; e 2 -1 2 0 0; t1 3 0 -1 1 -1; t2 3 0 -1 -1 1",
    );
    check(
        &group(&octahedral(16, 9, 1.5)),
        "E 8C3 6C2' 6C4 3C2 i 6S4 8S6 3sigma_h 6sigma_d",
        "a1g 1 1 1 1 1 1 1 1 1 1; a2g 1 1 -1 -1 1 1 -1 1 1 -1; eg 2 -1 0 0 2 2 0 -1 2 0; \
         t1g 3 0 -1 1 -1 3 1 0 -1 -1; t2g 3 0 1 -1 -1 3 -1 0 -1 1; \
         a1u 1 1 1 1 1 -1 -1 -1 -1 -1; a2u 1 1 -1 -1 1 -1 1 -1 -1 1; eu 2 -1 0 0 2 -2 0 1 -2 0; \
         t1u 3 0 -1 1 -1 -3 -1 0 1 1; t2u 3 0 1 -1 -1 -3 1 0 1 -1",
    );
    check(
        &group(&borane12()),
        "E 12C5 12C5^2 20C3 15C2 i 12S10 12S10^3 20S6 15sigma",
        "ag 1 1 1 1 1 1 1 1 1 1; t1g 3 t u 0 -1 3 u t 0 -1; t2g 3 u t 0 -1 3 t u 0 -1; \
         gg 4 -1 -1 1 0 4 -1 -1 1 0; hg 5 0 0 -1 1 5 0 0 -1 1; \
         au 1 1 1 1 1 -1 -1 -1 -1 -1; t1u 3 t u 0 -1 -3 -u -t 0 1; t2u 3 u t 0 -1 -3 -t -u 0 1; \
         gu 4 -1 -1 1 0 -4 1 1 -1 0; hu 5 0 0 -1 1 -5 0 0 1 -1",
    );
}

/// C∞v and D∞h: 2 cos mφ for turns, ± under planes, ± under the inversion.
#[test]
fn linear_groups() {
    let dinfh = group(&bent(6, 8, 1.16, 180.0));
    let axis = [0.0, 1.0, 0.0];
    let turn = common::rotation(axis, 0.1234);
    let angle = 2.0 * std::f64::consts::PI * 0.1234;
    let plane = common::mirror([0.6, 0.0, 0.8]);
    let across = common::rotation([0.6, 0.0, 0.8], 0.5);
    for (letter, m) in [("sigma", 0.0), ("pi", 1.0), ("delta", 2.0), ("phi", 3.0)] {
        for (parity, sign) in [("g", 1.0), ("u", -1.0)] {
            let signs: &[(&str, f64)] = if m == 0.0 {
                &[("+", 1.0), ("-", -1.0)]
            } else {
                &[("", 0.0)]
            };
            for (suffix, even) in signs {
                let name = format!("{letter}_{parity}{suffix}");
                let k = dinfh.irrep(&name).unwrap();
                let at = |matrix| dinfh.character(k, matrix).unwrap();
                let whole = if m == 0.0 { 1.0 } else { 2.0 };
                assert!(
                    (at(&turn) - whole * (m * angle).cos()).abs() < 1e-12,
                    "{name}"
                );
                assert!(
                    (at(&common::INVERSION) - sign * whole).abs() < 1e-12,
                    "{name}"
                );
                assert!((at(&plane) - even).abs() < 1e-12, "{name}");
                // A twofold axis across is the inversion times a plane.
                assert!((at(&across) - sign * even).abs() < 1e-12, "{name}");
            }
        }
    }
    assert_eq!(dinfh.irreps.len(), 10);
    assert_eq!(
        dinfh.irreps[dinfh.irrep("sigma_g+").unwrap()].level_display(2),
        "2σg⁺"
    );
    assert_eq!(dinfh.irreps[dinfh.irrep("pi_u").unwrap()].level(1), "1pi_u");
    let d3h = group(&trigonal(5, 9, 1.3, 0.0));
    assert_eq!(
        d3h.irreps[d3h.irrep("a1'").unwrap()].level_display(3),
        "3a₁′"
    );
    assert_eq!(
        dinfh.character(0, &common::rotation([1.0, 1.0, 0.0], 0.1)),
        None
    );
}
