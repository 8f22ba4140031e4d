//! One rigid motion: how a bend, stretch, twist or pyramid sets its value on a
//! given geometry. A motion is applied in two steps: [`Motion::frame`] measures
//! the geometry, [`Motion::apply`] turns or shifts the fragments. Neither allocates.

use crate::measure::IN_LINE;
use crate::units::DEGREE_IN_RADIANS;
use crate::vector::{
    Vector, add, cross, distance, dot, norm, perpendicular, scale, subtract, unit,
};

pub(crate) type Matrix = [[f64; 3]; 3];

/// A fragment and the share of the change that it takes.
#[derive(Clone, Debug)]
pub(crate) struct Arm {
    pub(crate) atoms: Vec<usize>,
    pub(crate) share: f64,
}

/// What moves for one set of defining atoms.
#[derive(Clone, Debug)]
pub(crate) enum Motion {
    /// Arms `a` and `c` turn about atom `b` in their common plane; from a
    /// straight start both move towards `lift`.
    Bend {
        atoms: [usize; 3],
        a: Arm,
        c: Arm,
        lift: Vector,
    },
    /// Arms `i` and `j` shift along the line through the two atoms.
    Stretch { atoms: [usize; 2], i: Arm, j: Arm },
    /// Arms `b` and `c` turn about the middle bond; `sign` is −1 for a partner
    /// that is a mirror image. The start torsion is taken nearest to `near`.
    Twist {
        atoms: [usize; 4],
        b: Arm,
        c: Arm,
        sign: f64,
        near: f64,
    },
    /// Three ligands turn about the centre to equal angles; when `anchor` is
    /// set, that ligand keeps its direction.
    Pyramid {
        centre: usize,
        ligands: [usize; 3],
        fragments: [Vec<usize>; 3],
        anchor: Option<usize>,
    },
}

/// The measured geometry that a motion acts on.
#[derive(Clone, Copy, Debug)]
pub(crate) enum Frame {
    Bend {
        centre: Vector,
        normal: Vector,
        angle: f64,
        straighten: Option<(Matrix, Matrix)>,
    },
    Stretch {
        axis: Vector,
        length: f64,
    },
    Twist {
        origin: Vector,
        axis: Vector,
        angle: f64,
    },
    Pyramid {
        centre: Vector,
        directions: [Vector; 3],
        normal: Vector,
        azimuths: [Vector; 3],
    },
}

/// Three atoms that are in line where they must not be.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct InLine(pub(crate) [usize; 3]);

impl Motion {
    /// Measures `positions`.
    pub(crate) fn frame(&self, positions: &[[f64; 3]]) -> Result<Frame, InLine> {
        match self {
            Self::Bend {
                atoms: [a, b, c],
                a: arm_a,
                c: arm_c,
                lift,
            } => {
                let centre = positions[*b];
                let undefined = InLine([*a, *b, *c]);
                let u = unit(subtract(positions[*a], centre)).ok_or(undefined)?;
                let v = unit(subtract(positions[*c], centre)).ok_or(undefined)?;
                Ok(bend_frame(centre, u, v, [arm_a.share, arm_c.share], *lift))
            }
            Self::Stretch { atoms: [i, j], .. } => {
                let line = subtract(positions[*j], positions[*i]);
                let axis = unit(line).ok_or(InLine([*i, *j, *j]))?;
                let length = norm(line);
                Ok(Frame::Stretch { axis, length })
            }
            Self::Twist {
                atoms: [a, b, c, d],
                near,
                sign,
                ..
            } => {
                let p = |atom: usize| positions[atom];
                let axis = unit(subtract(p(*c), p(*b))).ok_or(InLine([*a, *b, *c]))?;
                let first = perpendicular(subtract(p(*a), p(*b)), axis);
                let last = perpendicular(subtract(p(*d), p(*c)), axis);
                if norm(first) < IN_LINE * distance(p(*a), p(*b)) {
                    return Err(InLine([*a, *b, *c]));
                }
                if norm(last) < IN_LINE * distance(p(*d), p(*c)) {
                    return Err(InLine([*b, *c, *d]));
                }
                let angle = libm::atan2(dot(axis, cross(first, last)), dot(first, last))
                    / DEGREE_IN_RADIANS;
                let turns = ((sign * near - angle) / 360.0).round();
                Ok(Frame::Twist {
                    origin: p(*b),
                    axis,
                    angle: angle + 360.0 * turns,
                })
            }
            Self::Pyramid {
                centre, ligands, ..
            } => pyramid_frame(*centre, *ligands, positions),
        }
    }

    /// Sets the value on `positions`, the geometry that `frame` was measured on.
    pub(crate) fn apply(&self, frame: &Frame, value: f64, positions: &mut [[f64; 3]]) {
        match (self, frame) {
            (
                Self::Bend { a, c, .. },
                Frame::Bend {
                    centre,
                    normal,
                    angle,
                    straighten,
                },
            ) => {
                let change = value - angle;
                // Two half turns share sine and cosine.
                let halves = (a.share - c.share).abs() < 1e-15;
                let of_c = libm::sincos(c.share * change * DEGREE_IN_RADIANS);
                let of_a = if halves {
                    of_c
                } else {
                    libm::sincos(a.share * change * DEGREE_IN_RADIANS)
                };
                for (arm, (sine, cosine), first) in [(a, (-of_a.0, of_a.1), true), (c, of_c, false)]
                {
                    if arm.atoms.is_empty() {
                        continue;
                    }
                    let mut matrix = rotation_from(*normal, sine, cosine);
                    if let Some((of_a, of_c)) = straighten {
                        matrix = multiply(&matrix, if first { of_a } else { of_c });
                    }
                    turn_about(*centre, &matrix, &arm.atoms, positions);
                }
            }
            (Self::Stretch { i, j, .. }, Frame::Stretch { axis, length }) => {
                let change = value - length;
                for (arm, sign) in [(i, -1.0), (j, 1.0)] {
                    let shift = scale(*axis, sign * arm.share * change);
                    for &atom in &arm.atoms {
                        positions[atom] = add(positions[atom], shift);
                    }
                }
            }
            (
                Self::Twist { b, c, sign, .. },
                Frame::Twist {
                    origin,
                    axis,
                    angle,
                },
            ) => {
                let change = sign * value - angle;
                for (arm, side) in [(b, -1.0), (c, 1.0)] {
                    if !arm.atoms.is_empty() {
                        let matrix = rotation(*axis, side * arm.share * change);
                        turn_about(*origin, &matrix, &arm.atoms, positions);
                    }
                }
            }
            (
                Self::Pyramid {
                    fragments, anchor, ..
                },
                Frame::Pyramid {
                    centre,
                    directions,
                    normal,
                    azimuths,
                },
            ) => {
                let targets = pyramid_directions(*normal, azimuths, value);
                let back = anchor.map(|k| carry(targets[k], directions[k]));
                for (k, atoms) in fragments.iter().enumerate() {
                    if *anchor == Some(k) {
                        continue;
                    }
                    if let (&[ligand], None) = (&atoms[..], &back) {
                        let length = distance(positions[ligand], *centre);
                        positions[ligand] = add(*centre, scale(targets[k], length));
                        continue;
                    }
                    let mut matrix = carry(directions[k], targets[k]);
                    if let Some(back) = &back {
                        matrix = multiply(back, &matrix);
                    }
                    turn_about(*centre, &matrix, atoms, positions);
                }
            }
            _ => {} // a frame always comes from its own motion
        }
    }

    /// Every atom that moves, with repeats.
    pub(crate) fn moving(&self) -> Vec<usize> {
        match self {
            Self::Bend { a, c, .. } => [&a.atoms[..], &c.atoms].concat(),
            Self::Stretch { i, j, .. } => [&i.atoms[..], &j.atoms].concat(),
            Self::Twist { b, c, .. } => [&b.atoms[..], &c.atoms].concat(),
            Self::Pyramid {
                fragments, anchor, ..
            } => {
                let parts = fragments.iter().enumerate();
                let moved = parts.filter(|(k, _)| *anchor != Some(*k));
                moved.flat_map(|(_, atoms)| atoms.clone()).collect()
            }
        }
    }

    /// The atoms that define the value, as [`crate::measure`] takes them.
    pub(crate) fn measured_atoms(&self) -> Vec<usize> {
        match self {
            Self::Bend { atoms, .. } => atoms.to_vec(),
            Self::Stretch { atoms, .. } => atoms.to_vec(),
            Self::Twist { atoms, .. } => atoms.to_vec(),
            Self::Pyramid {
                centre, ligands, ..
            } => [&[*centre][..], ligands].concat(),
        }
    }

    /// Sign of the partner's value relative to the coordinate's.
    pub(crate) fn sign(&self) -> f64 {
        match self {
            Self::Twist { sign, .. } => *sign,
            _ => 1.0,
        }
    }
}

fn bend_frame(centre: Vector, u: Vector, v: Vector, shares: [f64; 2], lift: Vector) -> Frame {
    let (normal, cosine) = (cross(u, v), dot(u, v));
    let sine = norm(normal);
    if sine >= IN_LINE {
        return Frame::Bend {
            centre,
            normal: scale(normal, 1.0 / sine),
            angle: libm::atan2(sine, cosine) / DEGREE_IN_RADIANS,
            straighten: None,
        };
    }
    // Straight (or folded) start: make it exactly so, then bend towards `lift`.
    let side = if cosine < 0.0 { -1.0 } else { 1.0 };
    let line = add(scale(u, shares[1]), scale(v, side * shares[0]));
    let line = unit(line).unwrap_or(u);
    let lift = across(line, lift);
    Frame::Bend {
        centre,
        normal: cross(line, lift),
        angle: if side < 0.0 { 180.0 } else { 0.0 },
        straighten: Some((carry(u, line), carry(v, scale(line, side)))),
    }
}

/// The unit vector perpendicular to `line` nearest to `wish`; when that is
/// along the line, the Cartesian axis that the line is least along.
pub(crate) fn across(line: Vector, wish: Vector) -> Vector {
    let part = perpendicular(wish, line);
    if norm(part) > 0.1 * norm(wish)
        && let Some(direction) = unit(part)
    {
        return direction;
    }
    let mut least = 0;
    for k in 1..3 {
        // The margin keeps the choice stable against rounding.
        if line[k].abs() < line[least].abs() - 1e-6 {
            least = k;
        }
    }
    let mut axis = [0.0; 3];
    axis[least] = 1.0;
    unit(perpendicular(axis, line)).unwrap_or(axis)
}

fn pyramid_frame(
    centre: usize,
    ligands: [usize; 3],
    positions: &[[f64; 3]],
) -> Result<Frame, InLine> {
    let origin = positions[centre];
    let mut directions = [[0.0; 3]; 3];
    for (direction, ligand) in directions.iter_mut().zip(ligands) {
        *direction = unit(subtract(positions[ligand], origin)).ok_or(InLine(ligands))?;
    }
    // The normal of the plane through the three tips makes equal angles with
    // all three directions: the threefold axis wherever there is one.
    let [u, v, w] = directions;
    let normal = unit(cross(subtract(v, u), subtract(w, u))).ok_or(InLine(ligands))?;
    // It points to the ligands; for a planar start it stays on the side from
    // which the ligands, in their order, run anticlockwise.
    let height = dot(normal, u) + dot(normal, v) + dot(normal, w);
    let normal = if height < -3e-6 {
        scale(normal, -1.0)
    } else {
        normal
    };
    // Azimuths 120° apart, turned so that the ligands move as little as possible.
    let first = unit(perpendicular(u, normal)).ok_or(InLine(ligands))?;
    let side = cross(normal, first);
    let mut handed = 1.0;
    if dot(side, v) < dot(side, w) {
        handed = -1.0;
    }
    let (cosine, sine) = (-0.5, handed * 0.75_f64.sqrt());
    let third = [(1.0, 0.0), (cosine, sine), (cosine, -sine)];
    // Mean of the three directions, each turned back onto the first.
    let (mut x, mut y) = (0.0, 0.0);
    for (direction, (c, s)) in directions.iter().zip(third) {
        let flat = unit(perpendicular(*direction, normal)).ok_or(InLine(ligands))?;
        let (a, b) = (dot(flat, first), dot(flat, side));
        x += a * c + b * s;
        y += b * c - a * s;
    }
    let length = (x * x + y * y).sqrt();
    let (x, y) = (x / length, y / length);
    let azimuths = third.map(|(c, s)| add(scale(first, x * c - y * s), scale(side, x * s + y * c)));
    Ok(Frame::Pyramid {
        centre: origin,
        directions,
        normal,
        azimuths,
    })
}

/// Three unit vectors with the common angle `degrees` (0 … 120):
/// sin θ = (2/√3) sin(α/2) from the axis, cos θ in the product form that is
/// exact at 120°.
fn pyramid_directions(normal: Vector, azimuths: &[Vector; 3], degrees: f64) -> [Vector; 3] {
    let half = 0.5 * degrees * DEGREE_IN_RADIANS;
    let sine = (libm::sin(half) * (4.0_f64 / 3.0).sqrt()).min(1.0);
    let rest = (60.0 - 0.5 * degrees) * DEGREE_IN_RADIANS;
    let more = (60.0 + 0.5 * degrees) * DEGREE_IN_RADIANS;
    let product = 4.0 / 3.0 * libm::sin(rest) * libm::sin(more);
    let cosine = product.max(0.0).sqrt();
    azimuths.map(|azimuth| add(scale(azimuth, sine), scale(normal, cosine)))
}

/// Rotation by `degrees` about a unit axis (Rodrigues' formula).
pub(crate) fn rotation(axis: Vector, degrees: f64) -> Matrix {
    let (sine, cosine) = libm::sincos(degrees * DEGREE_IN_RADIANS);
    rotation_from(axis, sine, cosine)
}

fn rotation_from(axis: Vector, sine: f64, cosine: f64) -> Matrix {
    let rest = 1.0 - cosine;
    let [x, y, z] = axis;
    [
        [
            cosine + rest * x * x,
            rest * x * y - sine * z,
            rest * x * z + sine * y,
        ],
        [
            rest * x * y + sine * z,
            cosine + rest * y * y,
            rest * y * z - sine * x,
        ],
        [
            rest * x * z - sine * y,
            rest * y * z + sine * x,
            cosine + rest * z * z,
        ],
    ]
}

/// The smallest rotation that carries one unit vector onto another.
pub(crate) fn carry(from: Vector, to: Vector) -> Matrix {
    let turn = cross(from, to);
    let sine = norm(turn);
    let cosine = dot(from, to);
    match unit(turn) {
        Some(axis) => rotation_from(axis, sine, cosine),
        None if cosine < 0.0 => rotation_from(across(from, [0.0; 3]), 0.0, -1.0),
        None => rotation_from([0.0, 0.0, 1.0], 0.0, 1.0),
    }
}

pub(crate) fn multiply(a: &Matrix, b: &Matrix) -> Matrix {
    let mut product = [[0.0; 3]; 3];
    for (row, of_a) in product.iter_mut().zip(a) {
        for (k, entry) in row.iter_mut().enumerate() {
            *entry = of_a[0] * b[0][k] + of_a[1] * b[1][k] + of_a[2] * b[2][k];
        }
    }
    product
}

pub(crate) fn transform(matrix: &Matrix, v: Vector) -> Vector {
    [dot(matrix[0], v), dot(matrix[1], v), dot(matrix[2], v)]
}

fn turn_about(centre: Vector, matrix: &Matrix, atoms: &[usize], positions: &mut [[f64; 3]]) {
    for &atom in atoms {
        let arm = subtract(positions[atom], centre);
        positions[atom] = add(centre, transform(matrix, arm));
    }
}
