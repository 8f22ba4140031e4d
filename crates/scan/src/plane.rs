//! Orbitals on a plane: which plane shows most of one, and its values there.

use orbend_hamiltonian::Basis;

use crate::error::ScanError;
use crate::field::OrbitalField;
use crate::sweep::Sweep;

/// A plane through the molecule, in Å. The three directions are orthonormal and right-handed.
#[derive(Clone, Debug, PartialEq)]
pub struct Plane {
    /// The point in the middle of the picture.
    pub origin: [f64; 3],
    /// To the right.
    pub right: [f64; 3],
    /// Upwards.
    pub up: [f64; 3],
    /// What the plane is, in words.
    pub words: &'static str,
}

/// Values of an orbital on a square lattice of a plane.
#[derive(Clone, Debug)]
pub struct PlaneValues {
    /// Points along an edge.
    pub points: usize,
    /// Half the edge, Å.
    pub half: f64,
    /// ψ in bohr^(−3/2), row by row from the top, each from the left.
    pub values: Vec<f64>,
}

impl PlaneValues {
    /// Values of an orbital around the origin of a plane.
    fn new(
        (basis, coefficients, positions): (&Basis, &[f64], &[[f64; 3]]),
        plane: &Plane,
        (half, points): (f64, usize),
    ) -> Self {
        let field = OrbitalField::new(basis, coefficients, positions);
        let step = 2.0 * half / (points.max(2) - 1) as f64;
        let mut values = Vec::with_capacity(points * points);
        for row in 0..points {
            for column in 0..points {
                let (across, upward) = (column as f64 * step - half, half - row as f64 * step);
                let at = core::array::from_fn(|k| {
                    plane.origin[k] + across * plane.right[k] + upward * plane.up[k]
                });
                values.push(field.value(at));
            }
        }
        Self {
            points,
            half,
            values,
        }
    }

    /// Σψ².
    fn content(&self) -> f64 {
        self.values.iter().map(|value| value * value).sum()
    }
}

/// One orbital at one geometry, cut by a plane.
#[derive(Clone, Debug)]
pub struct OrbitalPicture {
    /// The plane.
    pub plane: Plane,
    /// ψ on it.
    pub values: PlaneValues,
    /// The nuclei seen from above: right and up from the origin, Å.
    pub nuclei: Vec<[f64; 2]>,
}

impl Sweep {
    /// The picture of a line at a point, with so many points along an edge. The plane is chosen by
    /// rule: of a flat molecule the plane of the atoms, or 0.5 Å above it for an orbital that
    /// vanishes there; of any other the one of three planes through the middle of the atoms, along
    /// the main axes of their positions, in which ∫ψ² is largest.
    ///
    /// # Errors
    /// As for the run itself.
    pub fn picture(
        &self,
        line: usize,
        point: usize,
        points: usize,
    ) -> Result<OrbitalPicture, ScanError> {
        let orbitals = self.orbitals(point)?;
        let positions = self.point(point)?.positions;
        let row = orbitals.coefficients.row(line).to_vec();
        let last = self.points() - 1;
        let geometries = [0, last / 2, last, point]
            .into_iter()
            .map(|index| Ok(self.point(index)?.positions))
            .collect::<Result<Vec<_>, ScanError>>()?;
        let frame = Frame::of(&geometries);
        let orbital = (self.plan().basis(), row.as_slice(), positions.as_slice());
        let half = frame.reach + 1.5;
        let content = |plane: &Plane| PlaneValues::new(orbital, plane, (half, 22)).content();
        let mut planes = frame.planes();
        let best = if frame.flat {
            usize::from(content(&planes[0]) <= 0.02 * content(&planes[1]))
        } else {
            let mut best = 0;
            for other in [2, 3] {
                if content(&planes[other]) > 1.05 * content(&planes[best]) {
                    best = other;
                }
            }
            best
        };
        let plane = planes.swap_remove(best);
        let nuclei = positions
            .iter()
            .map(|at| {
                let away = core::array::from_fn(|k| at[k] - plane.origin[k]);
                [dot(away, plane.right), dot(away, plane.up)]
            })
            .collect();
        let values = PlaneValues::new(orbital, &plane, (half, points));
        Ok(OrbitalPicture {
            plane,
            values,
            nuclei,
        })
    }
}

/// The main axes of the positions, the longest first.
struct Frame {
    middle: [f64; 3],
    axes: [[f64; 3]; 3],
    flat: bool,
    reach: f64,
}

impl Frame {
    /// The axes of all geometries together, so that pictures along a path do not turn; the middle of
    /// the last one.
    fn of(geometries: &[Vec<[f64; 3]>]) -> Self {
        let mut middle = [0.0; 3];
        let mut away: Vec<[f64; 3]> = Vec::new();
        for positions in geometries {
            let count = positions.len().max(1) as f64;
            middle =
                core::array::from_fn(|k| positions.iter().map(|at| at[k]).sum::<f64>() / count);
            away.extend(
                positions
                    .iter()
                    .map(|at| core::array::from_fn(|k| at[k] - middle[k])),
            );
        }
        let spread = nalgebra::Matrix3::from_fn(|i, j| {
            away.iter().map(|d: &[f64; 3]| d[i] * d[j]).sum::<f64>()
        });
        let found = spread.symmetric_eigen();
        let mut order = [0, 1, 2];
        order.sort_by(|&a, &b| {
            found.eigenvalues[b]
                .total_cmp(&found.eigenvalues[a])
                .then(a.cmp(&b))
        });
        let size = |k: usize| found.eigenvalues[order[k]];
        let axis = |k: usize| -> [f64; 3] {
            upward(core::array::from_fn(|i| found.eigenvectors[(i, order[k])]))
        };
        let (mut right, mut out) = (axis(0), axis(2));
        let equal = 1e-6 * size(0).max(1e-9);
        // Where two axes are equal the first atom off the third one decides.
        if size(1) - size(2) < equal {
            let up = aside(&away, right).unwrap_or_else(|| axis(1));
            out = cross(right, up);
        } else if size(0) - size(1) < equal {
            right = aside(&away, out).unwrap_or(right);
        }
        let up = upward(cross(out, right));
        let out = cross(right, up);
        let reach = away.iter().map(|d| dot(*d, *d).sqrt()).fold(0.0, f64::max);
        let flat = away.iter().all(|d| dot(*d, out).abs() < 0.05);
        Self {
            middle,
            axes: [right, up, out],
            flat,
            reach,
        }
    }

    fn planes(&self) -> Vec<Plane> {
        let [u, v, w] = self.axes;
        let above = core::array::from_fn(|k| self.middle[k] + 0.5 * w[k]);
        let plane = |origin, right, up, words| Plane {
            origin,
            right,
            up,
            words,
        };
        if self.flat {
            return vec![
                plane(self.middle, u, v, "the plane of the atoms"),
                plane(above, u, v, "0.5 Å above the plane of the atoms"),
            ];
        }
        vec![
            plane(
                self.middle,
                u,
                v,
                "the widest plane through the middle of the atoms",
            ),
            plane(above, u, v, "0.5 Å above the widest plane"),
            plane(self.middle, u, w, "a plane on edge, along the longest axis"),
            plane(
                self.middle,
                v,
                w,
                "a plane on edge, across the longest axis",
            ),
        ]
    }
}

/// The direction of the first atom that is off an axis.
fn aside(away: &[[f64; 3]], axis: [f64; 3]) -> Option<[f64; 3]> {
    away.iter().find_map(|&d| {
        let along = dot(d, axis);
        let off: [f64; 3] = core::array::from_fn(|k| d[k] - along * axis[k]);
        let length = dot(off, off).sqrt();
        (length > 0.01).then(|| off.map(|c| c / length))
    })
}

/// The sign that makes the largest component positive.
fn upward(axis: [f64; 3]) -> [f64; 3] {
    let largest = axis
        .iter()
        .copied()
        .fold(0.0_f64, |a, b| if b.abs() > a.abs() + 1e-6 { b } else { a });
    if largest < 0.0 {
        axis.map(|c| -c)
    } else {
        axis
    }
}

fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

fn cross(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    ]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn flat_and_linear_molecules_lie_in_the_picture() {
        for positions in [
            vec![[0.0, 0.0, 0.0], [0.0, 0.9, 0.6], [0.0, -0.9, 0.6]],
            vec![[0.0, 0.0, 0.0], [0.0, 0.0, 1.2], [0.0, 0.0, -1.2]],
        ] {
            let frame = Frame::of(&[positions]);
            assert!(frame.flat);
            for (i, j) in [(0, 1), (0, 2), (1, 2)] {
                assert!(dot(frame.axes[i], frame.axes[j]).abs() < 1e-12);
            }
            assert!((dot(frame.axes[2], frame.axes[2]) - 1.0).abs() < 1e-12);
        }
    }
}
