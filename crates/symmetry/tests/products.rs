//! Products of irreps and vibrations against published tables.
#![allow(missing_docs, clippy::unwrap_used, clippy::panic)]

mod common;

use common::molecules::*;
use common::{atoms, every_group, group};
use orbend_symmetry::PointGroup;

fn squares(g: &PointGroup, irrep: &str) -> (String, String) {
    let k = g.irrep(irrep).unwrap();
    (
        g.content(&g.symmetric_square(k)),
        g.content(&g.antisymmetric_square(k)),
    )
}

/// Jahn & Teller, Proc. R. Soc. A 161, 220 (1937), and Herzberg, Electronic Spectra of Polyatomic
/// Molecules (1966), table 57 (both from memory).
#[test]
fn squares_of_degenerate_irreps() {
    let cases = [
        (group(&trigonal(7, 1, 0.9, 0.3)), "e", "a1 + e", "a2"),
        (group(&trigonal(6, 1, 1.08, 0.0)), "e'", "a1' + e'", "a2'"),
        (group(&trigonal(6, 1, 1.08, 0.0)), "e''", "a1' + e'", "a2'"),
        (group(&tetrahedral(6, 1, 1.09)), "t2", "a1 + e + t2", "t1"),
        (group(&tetrahedral(6, 1, 1.09)), "e", "a1 + e", "a2"),
        (group(&octahedral(29, 17, 2.3)), "eg", "a1g + eg", "a2g"),
        (
            group(&octahedral(29, 17, 2.3)),
            "t2g",
            "a1g + eg + t2g",
            "t1g",
        ),
        (
            group(&octahedral(29, 17, 2.3)),
            "t1u",
            "a1g + eg + t2g",
            "t1g",
        ),
        (group(&square(54, 9, 1.94)), "eg", "a1g + b1g + b2g", "a2g"),
        (group(&benzene()), "e1g", "a1g + e2g", "a2g"),
        (group(&allene()), "e", "a1 + b1 + b2", "a2"),
        (group(&c60()), "hg", "ag + gg + 2hg", "t1g + t2g + gg"),
        (group(&c60()), "t1u", "ag + hg", "t1g"),
        (
            group(&bent(6, 8, 1.16, 180.0)),
            "pi_u",
            "sigma_g+ + delta_g",
            "sigma_g-",
        ),
    ];
    for (g, irrep, symmetric, antisymmetric) in cases {
        let found = squares(&g, irrep);
        assert_eq!(found.0, symmetric, "{} [{irrep}²]", g.name);
        assert_eq!(found.1, antisymmetric, "{} {{{irrep}²}}", g.name);
    }
}

/// In every group: the parts of a square make up the product, and their sizes are d(d±1)/2.
#[test]
fn squares_in_every_group() {
    for (name, nuclei) in every_group() {
        let g = group(&nuclei);
        assert_eq!(g.name, name);
        let size = |counts: &[usize]| -> usize {
            counts
                .iter()
                .zip(&g.irreps)
                .map(|(n, irrep)| n * irrep.dimension)
                .sum()
        };
        for (k, irrep) in g.irreps.iter().enumerate() {
            let (plus, minus) = (g.symmetric_square(k), g.antisymmetric_square(k));
            let both: Vec<usize> = plus.iter().zip(&minus).map(|(a, b)| a + b).collect();
            assert_eq!(both, g.product(k, k), "{name} {}", irrep.plain);
            let d = irrep.dimension;
            assert_eq!(size(&plus), d * (d + 1) / 2, "{name} {}", irrep.plain);
            assert_eq!(size(&minus), d * (d - 1) / 2, "{name} {}", irrep.plain);
            assert!(plus[g.totally_symmetric()] >= 1, "{name} {}", irrep.plain);
        }
    }
}

/// Wilson, Decius & Cross, Molecular Vibrations (1955), and Herzberg, Infrared and Raman Spectra
/// (1945) (both from memory).
#[test]
fn vibrations_of_known_molecules() {
    let cases = [
        (bent(8, 1, 0.96, 104.0), "2a1 + b2"),
        (bent(6, 8, 1.16, 180.0), "sigma_g+ + sigma_u+ + pi_u"),
        (trigonal(7, 1, 0.9, 0.3), "2a1 + 2e"),
        (trigonal(6, 1, 1.08, 0.0), "a1' + 2e' + a2''"),
        (tetrahedral(6, 1, 1.09), "a1 + e + 2t2"),
        (octahedral(16, 9, 1.56), "a1g + eg + t2g + 2t1u + t2u"),
        (
            benzene(),
            "2a1g + a2g + 2b2g + e1g + 4e2g + a2u + 2b1u + 2b2u + 3e1u + 2e2u",
        ),
        (atoms(&[(1, [0.0; 3]), (1, [0.0, 0.0, 0.74])]), "sigma_g+"),
    ];
    for (nuclei, expected) in cases {
        let g = group(&nuclei);
        let counts = g.vibrations();
        assert_eq!(g.content(&counts), expected, "{}", g.name);
        let positions: Vec<[f64; 3]> = nuclei.iter().map(|n| n.position).collect();
        for set in g.vibrational_displacements(&positions).unwrap() {
            assert_eq!(set.displacements.len(), counts[set.irrep], "{}", g.name);
            for d in &set.displacements {
                let length: f64 = d.iter().flatten().map(|x| x * x).sum();
                assert!((length - 1.0).abs() < 1e-10);
                for axis in 0..3 {
                    let drift: f64 = d.iter().map(|v| v[axis]).sum();
                    assert!(drift.abs() < 1e-9, "{}: {drift}", g.name);
                }
            }
        }
    }
}
