//! Molecules and groups that the checks share.
// Each check uses a part of this module.
#![allow(
    dead_code,
    missing_docs,
    unreachable_pub,
    clippy::unwrap_used,
    clippy::panic
)]

pub mod molecules;

use orbend_symmetry::{Nucleus, PointGroup, find};

pub type Matrix3 = [[f64; 3]; 3];

pub const TOLERANCE: f64 = 1e-3;

pub fn group(nuclei: &[Nucleus]) -> PointGroup {
    find(nuclei, TOLERANCE).unwrap().group
}

pub fn atoms(list: &[(u32, [f64; 3])]) -> Vec<Nucleus> {
    list.iter()
        .map(|&(kind, position)| Nucleus { kind, position })
        .collect()
}

pub fn apply(m: &Matrix3, v: [f64; 3]) -> [f64; 3] {
    [0, 1, 2].map(|i| m[i][0] * v[0] + m[i][1] * v[1] + m[i][2] * v[2])
}

pub fn product(a: &Matrix3, b: &Matrix3) -> Matrix3 {
    let mut out = [[0.0; 3]; 3];
    for (i, row) in out.iter_mut().enumerate() {
        for (j, x) in row.iter_mut().enumerate() {
            *x = (0..3).map(|k| a[i][k] * b[k][j]).sum();
        }
    }
    out
}

/// Turn by `turns` of a full turn about an axis (any length).
pub fn rotation(axis: [f64; 3], turns: f64) -> Matrix3 {
    let length = (axis[0] * axis[0] + axis[1] * axis[1] + axis[2] * axis[2]).sqrt();
    let [x, y, z] = axis.map(|a| a / length);
    let (s, c) = (2.0 * std::f64::consts::PI * turns).sin_cos();
    let d = 1.0 - c;
    [
        [c + d * x * x, d * x * y - s * z, d * x * z + s * y],
        [d * y * x + s * z, c + d * y * y, d * y * z - s * x],
        [d * z * x - s * y, d * z * y + s * x, c + d * z * z],
    ]
}

pub fn mirror(normal: [f64; 3]) -> Matrix3 {
    rotation(normal, 0.5).map(|row| row.map(|x| -x))
}

pub const INVERSION: Matrix3 = [[-1.0, 0.0, 0.0], [0.0, -1.0, 0.0], [0.0, 0.0, -1.0]];
pub const GOLDEN: f64 = 1.618_033_988_749_895;

pub fn closure(generators: &[Matrix3]) -> Vec<Matrix3> {
    let mut all = vec![[[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]]];
    let mut next = 0;
    while next < all.len() {
        for g in generators {
            let new = product(&all[next], g);
            let known = all.iter().any(|m: &Matrix3| {
                m.iter()
                    .flatten()
                    .zip(new.iter().flatten())
                    .all(|(a, b)| (a - b).abs() < 1e-6)
            });
            if !known {
                all.push(new);
            }
        }
        next += 1;
    }
    all
}

/// The points that a group makes of one point, without repeats.
pub fn orbit(kind: u32, point: [f64; 3], group: &[Matrix3]) -> Vec<Nucleus> {
    let mut out: Vec<Nucleus> = Vec::new();
    for m in group {
        let position = apply(m, point);
        let known = out.iter().any(|n| {
            (0..3)
                .map(|k| (n.position[k] - position[k]).powi(2))
                .sum::<f64>()
                < 1e-8
        });
        if !known {
            out.push(Nucleus { kind, position });
        }
    }
    out
}

/// Generators of every family of finite groups, by plain name; `n` is the order of the axis.
pub fn generators(family: &str, n: u32) -> (String, Vec<Matrix3>) {
    let z = [0.0, 0.0, 1.0];
    let x = [1.0, 0.0, 0.0];
    let turn = 1.0 / f64::from(n.max(1));
    let cn = rotation(z, turn);
    let sh = mirror(z);
    let half = product(&rotation(z, turn / 2.0), &sh);
    let c3 = rotation([1.0, 1.0, 1.0], 1.0 / 3.0);
    let c5 = rotation([0.0, 1.0, GOLDEN], 0.2);
    let c2z = rotation(z, 0.5);
    let (name, list) = match family {
        "C1" => ("C1".to_owned(), vec![]),
        "Cs" => ("Cs".to_owned(), vec![sh]),
        "Ci" => ("Ci".to_owned(), vec![INVERSION]),
        "Cn" => (format!("C{n}"), vec![cn]),
        "S2n" => (format!("S{}", 2 * n), vec![half]),
        "Cnv" => (format!("C{n}v"), vec![cn, mirror(x)]),
        "Cnh" => (format!("C{n}h"), vec![cn, sh]),
        "Dn" => (format!("D{n}"), vec![cn, rotation(x, 0.5)]),
        "Dnh" => (format!("D{n}h"), vec![cn, rotation(x, 0.5), sh]),
        "Dnd" => (format!("D{n}d"), vec![half, rotation(x, 0.5)]),
        "T" => ("T".to_owned(), vec![c3, c2z]),
        "Td" => ("Td".to_owned(), vec![c3, c2z, mirror([1.0, 1.0, 0.0])]),
        "Th" => ("Th".to_owned(), vec![c3, c2z, INVERSION]),
        "O" => ("O".to_owned(), vec![c3, rotation(z, 0.25)]),
        "Oh" => ("Oh".to_owned(), vec![c3, rotation(z, 0.25), INVERSION]),
        "I" => ("I".to_owned(), vec![c3, c5]),
        "Ih" => ("Ih".to_owned(), vec![c3, c5, INVERSION]),
        _ => panic!("unknown family {family}"),
    };
    (name, list)
}

/// A cluster with exactly the wanted finite group: orbits of points without symmetry.
pub fn cluster(family: &str, n: u32) -> (String, Vec<Nucleus>) {
    let (name, list) = generators(family, n);
    let ops = closure(&list);
    let mut all = orbit(1, [3.9, 0.83, 1.27], &ops);
    all.extend(orbit(2, [2.1, 2.9, -3.1], &ops));
    all.extend(orbit(3, [0.7, -1.9, 2.3], &ops));
    all.extend(orbit(4, [-1.1, 1.3, 3.4], &ops));
    (name, all)
}

/// Every family with every order of axis up to 12.
pub fn every_group() -> Vec<(String, Vec<Nucleus>)> {
    let mut out: Vec<(String, Vec<Nucleus>)> =
        ["C1", "Cs", "Ci", "T", "Td", "Th", "O", "Oh", "I", "Ih"]
            .iter()
            .map(|family| cluster(family, 1))
            .collect();
    for n in 2..=12 {
        for family in ["Cn", "S2n", "Cnv", "Cnh", "Dn", "Dnd", "Dnh"] {
            out.push(cluster(family, n));
        }
    }
    out
}

/// The same molecule turned, shifted and with its atoms in another order.
pub fn moved(nuclei: &[Nucleus], turn: &Matrix3, shift: [f64; 3], step: usize) -> Vec<Nucleus> {
    let count = nuclei.len();
    (0..count)
        .map(|k| {
            let n = nuclei[if count.is_multiple_of(step) {
                k
            } else {
                (k * step + 1) % count
            }];
            let p = apply(turn, n.position);
            Nucleus {
                kind: n.kind,
                position: [0, 1, 2].map(|i| p[i] + shift[i]),
            }
        })
        .collect()
}
