//! Vectors and 3×3 matrices as plain arrays: rows first, `m[row][column]`.

/// A 3×3 matrix, row by row.
pub type Matrix3 = [[f64; 3]; 3];

/// A vector in space.
pub type Vector3 = [f64; 3];

pub(crate) const IDENTITY: Matrix3 = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];

pub(crate) fn dot(a: Vector3, b: Vector3) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

pub(crate) fn cross(a: Vector3, b: Vector3) -> Vector3 {
    [
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    ]
}

pub(crate) fn norm(a: Vector3) -> f64 {
    dot(a, a).sqrt()
}

pub(crate) fn scaled(a: Vector3, factor: f64) -> Vector3 {
    [a[0] * factor, a[1] * factor, a[2] * factor]
}

pub(crate) fn difference(a: Vector3, b: Vector3) -> Vector3 {
    [a[0] - b[0], a[1] - b[1], a[2] - b[2]]
}

pub(crate) fn sum(a: Vector3, b: Vector3) -> Vector3 {
    [a[0] + b[0], a[1] + b[1], a[2] + b[2]]
}

pub(crate) fn distance(a: Vector3, b: Vector3) -> f64 {
    norm(difference(a, b))
}

/// The unit vector along `a`; zero stays zero.
pub(crate) fn normalised(a: Vector3) -> Vector3 {
    let length = norm(a);
    if length > 0.0 {
        scaled(a, 1.0 / length)
    } else {
        a
    }
}

/// The part of `a` perpendicular to the unit vector `axis`.
pub(crate) fn perpendicular(a: Vector3, axis: Vector3) -> Vector3 {
    difference(a, scaled(axis, dot(a, axis)))
}

/// Some unit vector perpendicular to `axis`, chosen by rule.
pub(crate) fn any_perpendicular(axis: Vector3) -> Vector3 {
    let mut smallest = 0;
    for k in 1..3 {
        if axis[k].abs() < axis[smallest].abs() - 1e-6 {
            smallest = k;
        }
    }
    normalised(perpendicular(IDENTITY[smallest], axis))
}

pub(crate) fn apply(m: &Matrix3, v: Vector3) -> Vector3 {
    [dot(m[0], v), dot(m[1], v), dot(m[2], v)]
}

pub(crate) fn transpose(m: &Matrix3) -> Matrix3 {
    let mut out = [[0.0; 3]; 3];
    for (i, row) in out.iter_mut().enumerate() {
        for (j, x) in row.iter_mut().enumerate() {
            *x = m[j][i];
        }
    }
    out
}

pub(crate) fn product(a: &Matrix3, b: &Matrix3) -> Matrix3 {
    let mut out = [[0.0; 3]; 3];
    for (row, left) in out.iter_mut().zip(a) {
        for (j, x) in row.iter_mut().enumerate() {
            *x = left[0] * b[0][j] + left[1] * b[1][j] + left[2] * b[2][j];
        }
    }
    out
}

pub(crate) fn negative(m: &Matrix3) -> Matrix3 {
    m.map(|row| row.map(|x| -x))
}

pub(crate) fn determinant(m: &Matrix3) -> f64 {
    dot(m[0], cross(m[1], m[2]))
}

pub(crate) fn trace(m: &Matrix3) -> f64 {
    m[0][0] + m[1][1] + m[2][2]
}

/// The largest difference of two elements.
pub(crate) fn largest_difference(a: &Matrix3, b: &Matrix3) -> f64 {
    let mut largest = 0.0_f64;
    for (x, y) in a.iter().flatten().zip(b.iter().flatten()) {
        largest = largest.max((x - y).abs());
    }
    largest
}

/// The rotation by the angle with the given cosine and sine about a unit vector.
pub(crate) fn rotation_about(axis: Vector3, cos: f64, sin: f64) -> Matrix3 {
    let mut out = [[0.0; 3]; 3];
    for i in 0..3 {
        for j in 0..3 {
            out[i][j] = (1.0 - cos) * axis[i] * axis[j];
        }
        out[i][i] += cos;
    }
    out[0][1] -= sin * axis[2];
    out[1][0] += sin * axis[2];
    out[0][2] += sin * axis[1];
    out[2][0] -= sin * axis[1];
    out[1][2] -= sin * axis[0];
    out[2][1] += sin * axis[0];
    out
}

/// The reflection in the plane with the given unit normal.
pub(crate) fn reflection(normal: Vector3) -> Matrix3 {
    let mut out = IDENTITY;
    for i in 0..3 {
        for j in 0..3 {
            out[i][j] -= 2.0 * normal[i] * normal[j];
        }
    }
    out
}

/// The orthogonal factor of a matrix that is nearly orthogonal (Newton's iteration for the polar
/// decomposition: Higham, SIAM J. Sci. Stat. Comput. 7, 1160 (1986)).
pub(crate) fn orthogonal_factor(m: &Matrix3) -> Matrix3 {
    let mut x = *m;
    for _ in 0..30 {
        let d = determinant(&x);
        if d.abs() < 1e-12 {
            break;
        }
        let cofactors = [cross(x[1], x[2]), cross(x[2], x[0]), cross(x[0], x[1])];
        let mut next = [[0.0; 3]; 3];
        for i in 0..3 {
            for j in 0..3 {
                next[i][j] = 0.5 * (x[i][j] + cofactors[i][j] / d);
            }
        }
        let change = largest_difference(&x, &next);
        x = next;
        if change < 1e-15 {
            break;
        }
    }
    x
}

/// The rotation (`proper`) or rotation–reflection that takes `from[i]` closest to `to[i]` in the
/// sense of least squares (Horn, J. Opt. Soc. Am. A 4, 629 (1987)); `None` where the eigenproblem
/// does not converge.
pub(crate) fn best_fit(
    pairs: impl Iterator<Item = (Vector3, Vector3)>,
    proper: bool,
) -> Option<Matrix3> {
    let sign = if proper { 1.0 } else { -1.0 };
    let mut s = [[0.0; 3]; 3];
    for (from, to) in pairs {
        for i in 0..3 {
            for j in 0..3 {
                s[i][j] += sign * from[i] * to[j];
            }
        }
    }
    let rotation = orbend_structure::rotation_of_form(&s)?;
    Some(if proper {
        rotation
    } else {
        negative(&rotation)
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_fit_recovers_a_rotation_and_a_reflection_of_a_planar_set() {
        let points = [[1.0, 0.2, 0.0], [-0.5, 1.0, 0.0], [-0.5, -1.2, 0.0]];
        let turn = rotation_about(normalised([1.0, 2.0, -0.5]), 0.6, 0.8);
        let proper = best_fit(points.iter().map(|p| (*p, apply(&turn, *p))), true).unwrap();
        assert!(largest_difference(&proper, &turn) < 1e-12);
        let mirror = product(&turn, &reflection([0.0, 0.0, 1.0]));
        let improper = best_fit(points.iter().map(|p| (*p, apply(&mirror, *p))), false).unwrap();
        assert!(largest_difference(&improper, &mirror) < 1e-12);
        assert!((determinant(&improper) + 1.0).abs() < 1e-12);
    }

    #[test]
    fn the_orthogonal_factor_of_a_disturbed_rotation_is_orthogonal() {
        let mut m = rotation_about(normalised([0.3, 1.0, 0.2]), 0.0, 1.0);
        m[0][1] += 0.02;
        m[2][2] -= 0.03;
        let q = orthogonal_factor(&m);
        assert!(largest_difference(&product(&q, &transpose(&q)), &IDENTITY) < 1e-14);
        assert!(largest_difference(&q, &m) < 0.05);
    }
}
