//! Turning and shifting one geometry onto another.

use super::motion::{Matrix, transform};
use crate::vector::{Vector, add, scale, subtract};
use nalgebra::{Matrix4, SymmetricEigen};

/// The proper rotation and shift that lay one set of points onto another.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Alignment {
    /// Rotation matrix.
    pub rotation: [[f64; 3]; 3],
    /// Centroid of the moved points, taken off before the rotation (Å).
    pub from: [f64; 3],
    /// Centroid of the target, added after it (Å).
    pub to: [f64; 3],
    /// Root mean square distance after alignment (Å).
    pub deviation: f64,
}

impl Alignment {
    /// The place a point is carried to.
    pub fn apply(&self, point: [f64; 3]) -> [f64; 3] {
        add(
            self.to,
            transform(&self.rotation, subtract(point, self.from)),
        )
    }
}

/// The best alignment of `moved` onto `target` (equally many points, equal
/// weights, proper rotations only) by the quaternion form of least squares:
/// Kabsch, Acta Cryst. A 32, 922 (1976); Horn, J. Opt. Soc. Am. A 4, 629 (1987).
/// `None` when the lists are empty or differ in length.
pub fn align(moved: &[[f64; 3]], target: &[[f64; 3]]) -> Option<Alignment> {
    if moved.is_empty() || moved.len() != target.len() {
        return None;
    }
    let (from, to) = (centroid(moved), centroid(target));
    // m[i][j] = Σ moved_i target_j
    let mut m = [[0.0; 3]; 3];
    let mut size = 0.0;
    for (&a, &b) in moved.iter().zip(target) {
        let (a, b) = (subtract(a, from), subtract(b, to));
        for i in 0..3 {
            for j in 0..3 {
                m[i][j] += a[i] * b[j];
            }
            size += a[i] * a[i] + b[i] * b[i];
        }
    }
    let [[xx, xy, xz], [yx, yy, yz], [zx, zy, zz]] = m;
    let form = Matrix4::new(
        xx + yy + zz,
        yz - zy,
        zx - xz,
        xy - yx,
        yz - zy,
        xx - yy - zz,
        xy + yx,
        zx + xz,
        zx - xz,
        xy + yx,
        yy - xx - zz,
        yz + zy,
        xy - yx,
        zx + xz,
        yz + zy,
        zz - xx - yy,
    );
    let eigen = SymmetricEigen::try_new(form, 1e-15, 1000)?;
    let mut best = 0;
    for k in 1..4 {
        if eigen.eigenvalues[k] > eigen.eigenvalues[best] {
            best = k;
        }
    }
    let q = eigen.eigenvectors.column(best);
    let rotation = rotation_of([q[0], q[1], q[2], q[3]]);
    let alignment = Alignment {
        rotation,
        from,
        to,
        deviation: 0.0,
    };
    let count = moved.len() as f64;
    let mut squares = 0.0;
    for (&a, &b) in moved.iter().zip(target) {
        let off = subtract(alignment.apply(a), b);
        squares += crate::vector::dot(off, off);
    }
    debug_assert!(size >= 0.0);
    Some(Alignment {
        deviation: (squares / count).sqrt(),
        ..alignment
    })
}

fn rotation_of([w, x, y, z]: [f64; 4]) -> Matrix {
    let n = w * w + x * x + y * y + z * z;
    let s = 2.0 / n;
    [
        [
            1.0 - s * (y * y + z * z),
            s * (x * y - w * z),
            s * (x * z + w * y),
        ],
        [
            s * (x * y + w * z),
            1.0 - s * (x * x + z * z),
            s * (y * z - w * x),
        ],
        [
            s * (x * z - w * y),
            s * (y * z + w * x),
            1.0 - s * (x * x + y * y),
        ],
    ]
}

pub(crate) fn centroid(points: &[Vector]) -> Vector {
    let sum = points.iter().fold([0.0; 3], |sum, &point| add(sum, point));
    scale(sum, 1.0 / points.len() as f64)
}
