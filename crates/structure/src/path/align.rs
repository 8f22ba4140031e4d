//! Turning and shifting one geometry onto another.

use super::motion::transform;
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
    for (&a, &b) in moved.iter().zip(target) {
        let (a, b) = (subtract(a, from), subtract(b, to));
        for i in 0..3 {
            for j in 0..3 {
                m[i][j] += a[i] * b[j];
            }
        }
    }
    let rotation = rotation_of_form(&m)?;
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
    Some(Alignment {
        deviation: (squares / count).sqrt(),
        ..alignment
    })
}

/// The proper rotation R for which Σ R a·b is largest, from m = Σ a bᵀ (rows a): the eigenvector of
/// the largest eigenvalue of the quaternion form (Horn, J. Opt. Soc. Am. A 4, 629 (1987)). `None`
/// where the eigenproblem does not converge.
pub fn rotation_of_form(m: &[[f64; 3]; 3]) -> Option<[[f64; 3]; 3]> {
    let [[xx, xy, xz], [yx, yy, yz], [zx, zy, zz]] = *m;
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
    let length = q.norm();
    let (w, x, y, z) = (q[0] / length, q[1] / length, q[2] / length, q[3] / length);
    Some([
        [
            w * w + x * x - y * y - z * z,
            2.0 * (x * y - w * z),
            2.0 * (x * z + w * y),
        ],
        [
            2.0 * (x * y + w * z),
            w * w - x * x + y * y - z * z,
            2.0 * (y * z - w * x),
        ],
        [
            2.0 * (x * z - w * y),
            2.0 * (y * z + w * x),
            w * w - x * x - y * y + z * z,
        ],
    ])
}

pub(crate) fn centroid(points: &[Vector]) -> Vector {
    let sum = points.iter().fold([0.0; 3], |sum, &point| add(sum, point));
    scale(sum, 1.0 / points.len() as f64)
}
