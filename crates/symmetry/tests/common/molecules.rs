//! Geometries (Å) that the checks share; bond lengths need not be exact, symmetry is.

use super::{GOLDEN, atoms, closure, generators, orbit};
use orbend_overlap::{PairKernel, Shell};
use orbend_symmetry::{Nucleus, OrbitalShell};

const BOHR: f64 = 0.529_177_210_903;

/// Bent AB2 in the yz plane, C2 along z; the angle in degrees.
pub fn bent(a: u32, b: u32, length: f64, angle: f64) -> Vec<Nucleus> {
    let half = (angle / 2.0).to_radians();
    let (y, z) = (length * half.sin(), length * half.cos());
    // Exactly linear at 180°.
    let z = if angle > 179.999_999 { 0.0 } else { z };
    atoms(&[(a, [0.0; 3]), (b, [0.0, y, z]), (b, [0.0, -y, z])])
}

/// AX3 with the C3 axis along z and the X atoms `height` below the A atom.
pub fn trigonal(a: u32, x: u32, radius: f64, height: f64) -> Vec<Nucleus> {
    let ops = closure(&generators("Cn", 3).1);
    let mut all = atoms(&[(a, [0.0; 3])]);
    all.extend(orbit(x, [radius, 0.0, -height], &ops));
    all
}

pub fn tetrahedral(a: u32, x: u32, length: f64) -> Vec<Nucleus> {
    let c = length / 3.0_f64.sqrt();
    let mut all = atoms(&[(a, [0.0; 3])]);
    all.extend(orbit(x, [c, c, c], &closure(&generators("T", 1).1)));
    all
}

pub fn octahedral(a: u32, x: u32, length: f64) -> Vec<Nucleus> {
    let mut all = atoms(&[(a, [0.0; 3])]);
    all.extend(orbit(
        x,
        [0.0, 0.0, length],
        &closure(&generators("O", 1).1),
    ));
    all
}

/// Square-planar AX4 with the X atoms on the x and y axes.
pub fn square(a: u32, x: u32, length: f64) -> Vec<Nucleus> {
    let mut all = atoms(&[(a, [0.0; 3])]);
    all.extend(orbit(
        x,
        [length, 0.0, 0.0],
        &closure(&generators("Cn", 4).1),
    ));
    all
}

pub fn line(list: &[(u32, f64)]) -> Vec<Nucleus> {
    list.iter()
        .map(|&(kind, z)| Nucleus {
            kind,
            position: [0.0, 0.0, z],
        })
        .collect()
}

pub fn benzene() -> Vec<Nucleus> {
    let ops = closure(&generators("Cn", 6).1);
    let mut all = orbit(6, [1.397, 0.0, 0.0], &ops);
    all.extend(orbit(1, [2.481, 0.0, 0.0], &ops));
    all
}

/// C2H4 with CC along z; the far CH2 turned by `twist` degrees about z.
pub fn ethylene(twist: f64) -> Vec<Nucleus> {
    let half = (twist / 2.0).to_radians();
    let (s, c) = half.sin_cos();
    let (r, z) = (0.923, 1.232);
    atoms(&[
        (6, [0.0, 0.0, 0.667]),
        (6, [0.0, 0.0, -0.667]),
        (1, [r * s, r * c, z]),
        (1, [-r * s, -r * c, z]),
        (1, [-r * s, r * c, -z]),
        (1, [r * s, -r * c, -z]),
    ])
}

/// H2CO in the yz plane.
pub fn formaldehyde() -> Vec<Nucleus> {
    atoms(&[
        (6, [0.0; 3]),
        (8, [0.0, 0.0, 1.205]),
        (1, [0.0, 0.943, -0.587]),
        (1, [0.0, -0.943, -0.587]),
    ])
}

pub fn allene() -> Vec<Nucleus> {
    let ops = closure(&generators("S2n", 2).1);
    let mut all = line(&[(6, 0.0), (6, 1.308), (6, -1.308)]);
    all.extend(orbit(1, [0.92, 0.0, 1.86], &ops));
    all
}

pub fn ethane() -> Vec<Nucleus> {
    let ops = closure(&generators("S2n", 3).1);
    let mut all = line(&[(6, 0.765), (6, -0.765)]);
    all.extend(orbit(1, [1.02, 0.0, 1.16], &ops));
    all
}

/// X2Y2 with the middle bond along z, turned by `torsion` degrees.
pub fn peroxide(x: u32, y: u32, torsion: f64) -> Vec<Nucleus> {
    let half = (torsion / 2.0).to_radians();
    let (s, c) = half.sin_cos();
    atoms(&[
        (x, [0.0, 0.0, 0.72]),
        (x, [0.0, 0.0, -0.72]),
        (y, [0.95 * c, 0.95 * s, 0.9]),
        (y, [0.95 * c, -0.95 * s, -0.9]),
    ])
}

/// Two C5H5 rings around an iron atom, staggered (D5d) or not (D5h).
pub fn ferrocene(staggered: bool) -> Vec<Nucleus> {
    let ops = closure(&generators(if staggered { "Dnd" } else { "Dnh" }, 5).1);
    let mut all = line(&[(26, 0.0)]);
    // In D5d the twofold axes lie between the atoms of the two rings.
    let turn = if staggered {
        18.0_f64.to_radians()
    } else {
        0.0
    };
    for (kind, radius) in [(6, 1.21), (1, 2.29)] {
        all.extend(orbit(
            kind,
            [radius * turn.cos(), radius * turn.sin(), 1.66],
            &ops,
        ));
    }
    all
}

pub fn c60() -> Vec<Nucleus> {
    // Truncated icosahedron with edges of 1.43 Å.
    let ops = closure(&generators("Ih", 1).1);
    let scale = 1.43 / 2.0;
    orbit(6, [0.0, scale, 3.0 * GOLDEN * scale], &ops)
}

pub fn borane12() -> Vec<Nucleus> {
    let ops = closure(&generators("Ih", 1).1);
    let mut all = orbit(5, [0.0, 0.89, 0.89 * GOLDEN], &ops);
    all.extend(orbit(1, [0.0, 1.52, 1.52 * GOLDEN], &ops));
    all
}

pub fn cubane() -> Vec<Nucleus> {
    let ops = closure(&generators("Oh", 1).1);
    let mut all = orbit(6, [0.785, 0.785, 0.785], &ops);
    all.extend(orbit(1, [1.42, 1.42, 1.42], &ops));
    all
}

/// s shell for hydrogen (kind 1), s and p for all others, d too where asked for.
pub fn shells(nuclei: &[Nucleus], d_on: Option<u32>) -> Vec<OrbitalShell> {
    let mut out = Vec::new();
    for (atom, nucleus) in nuclei.iter().enumerate() {
        out.push(OrbitalShell { atom, l: 0 });
        if nucleus.kind > 1 {
            out.push(OrbitalShell { atom, l: 1 });
        }
        if d_on == Some(nucleus.kind) {
            out.push(OrbitalShell { atom, l: 2 });
        }
    }
    out
}

/// Overlaps of Slater functions on the shells: a matrix with the symmetry of the molecule.
pub fn overlaps(nuclei: &[Nucleus], shells: &[OrbitalShell]) -> (usize, Vec<f64>) {
    let mut first = Vec::new();
    let mut n = 0;
    for shell in shells {
        first.push(n);
        n += 2 * usize::from(shell.l) + 1;
    }
    let mut s = vec![0.0; n * n];
    for f in 0..n {
        s[f * n + f] = 1.0;
    }
    let slater = |shell: &OrbitalShell| {
        let zeta = 1.1 + 0.13 * f64::from(nuclei[shell.atom].kind % 5) + 0.1 * f64::from(shell.l);
        Shell::single(shell.l + 1, shell.l, zeta)
    };
    for (i, a) in shells.iter().enumerate() {
        for (j, b) in shells.iter().enumerate().filter(|(_, b)| b.atom != a.atom) {
            let kernel = PairKernel::new(&[slater(a)], &[slater(b)]).unwrap();
            let (p, q) = (nuclei[a.atom].position, nuclei[b.atom].position);
            let (rows, columns) = (kernel.rows(), kernel.columns());
            let mut out = vec![0.0; rows * columns];
            kernel.block([0, 1, 2].map(|k| (q[k] - p[k]) / BOHR), &mut out);
            for r in 0..rows {
                for c in 0..columns {
                    s[(first[i] + r) * n + first[j] + c] = out[r * columns + c];
                }
            }
        }
    }
    (n, s)
}
