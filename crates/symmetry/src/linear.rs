//! Linear molecules and single atoms: groups without end, and how they are represented.

use crate::axes::Frame;
use crate::element::{Element, Family};
use crate::error::SymmetryError;
use crate::group::{Class, Irrep, Operation, PointGroup, RawOperation};
use crate::matrix::{
    IDENTITY, Matrix3, Vector3, apply, cross, determinant, dot, negative, normalised,
    perpendicular, product, reflection, rotation_about, trace,
};
use crate::names::Parts;
use crate::nucleus::Centred;

/// Order of the axis of the finite stand-in.
const TURN: u32 = 8;

/// C∞v or D∞h about `axis`, with a plane of the stand-in through `x`. `swap` is the permutation
/// that turns the molecule end for end, where it can.
pub(crate) fn linear_group(
    axis: Vector3,
    x: Vector3,
    centre: Vector3,
    atoms: usize,
    swap: Option<&[usize]>,
) -> Result<PointGroup, SymmetryError> {
    let x = normalised(perpendicular(x, axis));
    let frame = Frame {
        origin: centre,
        x,
        y: cross(axis, x),
        z: axis,
    };
    let unchanged: Vec<usize> = (0..atoms).collect();
    let mut raw = Vec::new();
    let half = std::f64::consts::FRAC_1_SQRT_2;
    let cosines = [1.0, half, 0.0, -half, -1.0, -half, 0.0, half];
    for k in 0..TURN as usize {
        let turn = rotation_about(axis, cosines[k], cosines[(k + 6) % 8]);
        let mirrored = product(&turn, &reflection(frame.y));
        for matrix in [turn, mirrored] {
            raw.push(RawOperation {
                matrix,
                permutation: unchanged.clone(),
            });
            if let Some(swap) = swap {
                raw.push(RawOperation {
                    matrix: negative(&matrix),
                    permutation: swap.to_vec(),
                });
            }
        }
    }
    let identity = raw
        .iter()
        .position(|op| crate::matrix::largest_difference(&op.matrix, &IDENTITY) < 1e-9);
    raw.swap(0, identity.unwrap_or(0));
    let elements: Vec<Element> = raw
        .iter()
        .map(|op| Element::new(&op.matrix, 2 * TURN))
        .collect();
    let family = if swap.is_some() {
        Family::LinearCentred
    } else {
        Family::LinearPolar
    };
    let convention = "z along the molecule".to_owned();
    PointGroup::assemble(raw, &elements, family, TURN, frame, convention)
}

/// The permutation that turns a linear molecule end for end and the deviation of that, Å.
pub(crate) fn end_for_end(atoms: &Centred, axis: Vector3) -> Option<(Vec<usize>, f64)> {
    let along: Vec<f64> = atoms.positions.iter().map(|p| dot(*p, axis)).collect();
    let mut order: Vec<usize> = (0..along.len()).collect();
    order.sort_by(|&i, &j| along[i].total_cmp(&along[j]));
    let mut swap = vec![0; along.len()];
    let mut worst = 0.0_f64;
    for (&i, &j) in order.iter().zip(order.iter().rev()) {
        if atoms.kinds[i] != atoms.kinds[j] {
            return None;
        }
        swap[i] = j;
        worst = worst.max((along[i] + along[j]).abs());
    }
    Some((swap, worst))
}

/// The group of a single atom.
pub(crate) fn atom_group(centre: Vector3) -> PointGroup {
    let operation = |matrix: Matrix3, label: &str| Operation {
        matrix,
        permutation: vec![0],
        label: label.to_owned(),
    };
    let class = |k: usize, label: &str| Class {
        label: label.to_owned(),
        operations: vec![k],
    };
    let irreps = [("s", "g"), ("p", "u"), ("d", "g"), ("f", "u")]
        .iter()
        .enumerate()
        .map(|(l, (letter, parity))| {
            let parts = Parts {
                letter,
                number: 0,
                parity,
                sign: "",
            };
            let dimension = 2 * l + 1;
            let size = dimension as f64;
            Irrep {
                plain: parts.plain(),
                display: parts.display(),
                dimension,
                paired: false,
                characters: vec![size, if *parity == "g" { size } else { -size }],
                parts,
            }
        })
        .collect();
    PointGroup {
        name: Family::Spherical.name(0),
        axes: Frame {
            origin: centre,
            x: IDENTITY[0],
            y: IDENTITY[1],
            z: IDENTITY[2],
        },
        convention: "axes of the input".to_owned(),
        operations: vec![
            operation(IDENTITY, "E"),
            operation(negative(&IDENTITY), "i"),
        ],
        classes: vec![class(0, "E"), class(1, "i")],
        irreps,
        linear: false,
        family: Family::Spherical,
        n: 0,
        class_of: vec![0, 1],
    }
}

/// Character of any orthogonal matrix in an irrep of a linear group with the given axis; `None`
/// if the matrix does not keep the axis.
pub(crate) fn linear_character(parts: &Parts, axis: Vector3, matrix: &Matrix3) -> Option<f64> {
    let along = dot(apply(matrix, axis), axis);
    if along.abs() < 0.99 {
        return None;
    }
    let mut sign = 1.0;
    let mut kept = *matrix;
    if along < 0.0 {
        // Minus the matrix keeps the direction; the inversion gives the sign.
        sign = match parts.parity {
            "g" => 1.0,
            "u" => -1.0,
            _ => return None,
        };
        kept = negative(matrix);
    }
    let proper = determinant(&kept) > 0.0;
    let waves = Parts::LINEAR
        .iter()
        .position(|letter| *letter == parts.letter)?;
    if waves == 0 {
        return Some(if proper || parts.sign == "+" {
            sign
        } else {
            -sign
        });
    }
    if !proper {
        return Some(0.0);
    }
    let cos = (0.5 * (trace(&kept) - 1.0)).clamp(-1.0, 1.0);
    Some(sign * 2.0 * cos_multiple(cos, waves))
}

/// Trace of an orthogonal matrix on the functions of angular momentum `l`:
/// Σ cos mθ over m = −l … l, times (−1)^l if improper.
pub(crate) fn shell_character(l: usize, matrix: &Matrix3) -> f64 {
    let proper = determinant(matrix) > 0.0;
    let rotation = if proper { *matrix } else { negative(matrix) };
    let cos = (0.5 * (trace(&rotation) - 1.0)).clamp(-1.0, 1.0);
    let sum = 1.0 + 2.0 * (1..=l).map(|m| cos_multiple(cos, m)).sum::<f64>();
    if proper || l.is_multiple_of(2) {
        sum
    } else {
        -sum
    }
}

/// cos kθ from cos θ.
fn cos_multiple(cos: f64, k: usize) -> f64 {
    let (mut before, mut current) = (1.0, cos);
    match k {
        0 => 1.0,
        _ => {
            for _ in 1..k {
                (before, current) = (current, 2.0 * cos * current - before);
            }
            current
        }
    }
}

/// The sum rule of real characters: what one character contains of another.
pub(crate) fn multiplicity(irrep: &Irrep, sizes: &[usize], values: &[f64]) -> f64 {
    let order: usize = sizes.iter().sum();
    let norm = if irrep.paired { 2.0 } else { 1.0 };
    let sum: f64 = sizes
        .iter()
        .zip(irrep.characters.iter().zip(values))
        .map(|(&size, (a, b))| size as f64 * a * b)
        .sum();
    sum / (norm * order as f64)
}
