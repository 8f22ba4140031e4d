//! Signs and bases of degenerate sets, fixed by rule.

use crate::error::EigenError;

/// Coefficients that differ by less than this, relatively, count as equal in the rules.
pub(crate) const EQUAL: f64 = 1e-9;

/// Makes the first of the largest coefficients (equal within 1e-9 relative) positive, and every
/// zero a positive one.
pub fn fix_sign(vector: &mut [f64]) {
    let largest = vector
        .iter()
        .fold(0.0_f64, |m, x| if x.abs() > m { x.abs() } else { m });
    let limit = largest * (1.0 - EQUAL);
    let first = vector
        .iter()
        .find(|x| x.abs() >= limit)
        .copied()
        .unwrap_or(0.0);
    let sign = if first < 0.0 { -1.0 } else { 1.0 };
    for x in vector {
        *x = *x * sign + 0.0;
    }
}

/// Turns the orthonormal vectors of a degenerate set (rows of `vectors`, n coefficients each) into
/// the basis that the rule picks: the first vector is the normalised projection of the function
/// with the largest share in the set (the first of equals within 1e-9), the next that of the
/// function with the largest share in what is left, and so on (pivoted Gram–Schmidt in the metric
/// of S). Signs then follow [`fix_sign`]. The result depends on the space, not on the basis of it.
///
/// `overlap` is S, n × n, row-major, full.
///
/// # Errors
/// [`EigenError::Size`] when the sizes do not fit together.
pub fn fix_degenerate_set(
    overlap: &[f64],
    vectors: &mut [f64],
    n: usize,
) -> Result<(), EigenError> {
    if overlap.len() != n * n {
        return Err(EigenError::Size {
            matrix: "S",
            expected: n * n,
            found: overlap.len(),
        });
    }
    if n == 0 || !vectors.len().is_multiple_of(n) {
        let found = vectors.len();
        return if found == 0 {
            Ok(())
        } else {
            Err(EigenError::Size {
                matrix: "C",
                expected: n,
                found,
            })
        };
    }
    let set = vectors.len() / n;
    // ⟨function i | vector k⟩ for all i: what is turned together with the vectors.
    let mut shares: Vec<f64> = Vec::with_capacity(set * n);
    for vector in vectors.chunks_exact(n) {
        for row in overlap.chunks_exact(n) {
            shares.push(row.iter().zip(vector).map(|(a, b)| a * b).sum());
        }
    }
    for first in 0..set {
        // The share of function i in what is left of the space is Σₖ ⟨i|k⟩² / ⟨i|i⟩.
        let share = |i: usize| {
            let sum: f64 = shares[first * n..]
                .chunks_exact(n)
                .map(|row| row[i] * row[i])
                .sum();
            sum / overlap[i * n + i]
        };
        let largest = (0..n).map(share).fold(0.0_f64, f64::max);
        let pivot = (0..n)
            .find(|i| share(*i) >= largest * (1.0 - EQUAL))
            .unwrap_or(0);
        // A reflection brings the pivot's projection into the first vector.
        let mut mirror: Vec<f64> = shares[first * n..]
            .chunks_exact(n)
            .map(|row| row[pivot])
            .collect();
        let norm = mirror.iter().map(|x| x * x).sum::<f64>().sqrt();
        mirror[0] += if mirror[0] < 0.0 { -norm } else { norm };
        let square: f64 = mirror.iter().map(|x| x * x).sum();
        if square > 0.0 {
            reflect(&mut vectors[first * n..], &mirror, 2.0 / square, n);
            reflect(&mut shares[first * n..], &mirror, 2.0 / square, n);
        }
    }
    for vector in vectors.chunks_exact_mut(n) {
        fix_sign(vector);
    }
    Ok(())
}

/// rows −= factor · mirror (mirrorᵀ rows).
fn reflect(rows: &mut [f64], mirror: &[f64], factor: f64, n: usize) {
    for column in 0..n {
        let dot: f64 = rows
            .chunks_exact(n)
            .zip(mirror)
            .map(|(row, m)| row[column] * m)
            .sum();
        for (row, m) in rows.chunks_exact_mut(n).zip(mirror) {
            row[column] -= factor * dot * m;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn first_of_equal_coefficients_is_positive() {
        let mut v = [0.1, -0.7 + 1e-12, 0.7, -0.0];
        fix_sign(&mut v);
        assert!(v[1] > 0.0 && v[2] < 0.0 && v[0] < 0.0 && v[3].is_sign_positive());
    }

    #[test]
    fn the_basis_depends_on_the_space_alone() {
        // A plane in three dimensions, S not the unit matrix.
        let overlap = [1.0, 0.3, 0.1, 0.3, 1.0, -0.2, 0.1, -0.2, 1.0];
        let dot = |a: &[f64], b: &[f64]| {
            let mut sum = 0.0;
            for i in 0..3 {
                for j in 0..3 {
                    sum += a[i] * overlap[3 * i + j] * b[j];
                }
            }
            sum
        };
        let mut a = [0.2, 1.0, 0.4];
        let norm = dot(&a, &a).sqrt();
        a.iter_mut().for_each(|x| *x /= norm);
        let mut b = [1.0, -0.3, 0.5];
        let part = dot(&a, &b);
        b.iter_mut().zip(&a).for_each(|(x, y)| *x -= part * y);
        let norm = dot(&b, &b).sqrt();
        b.iter_mut().for_each(|x| *x /= norm);
        let mut expected: Option<Vec<f64>> = None;
        for step in 0..12 {
            let (sine, cosine) = (f64::from(step) * 0.55).sin_cos();
            let mut set: Vec<f64> = (0..3).map(|i| cosine * a[i] + sine * b[i]).collect();
            set.extend((0..3).map(|i| cosine * b[i] - sine * a[i]));
            fix_degenerate_set(&overlap, &mut set, 3).unwrap();
            assert!((dot(&set[..3], &set[..3]) - 1.0).abs() < 1e-14);
            assert!(dot(&set[..3], &set[3..]).abs() < 1e-14);
            let first = expected.get_or_insert_with(|| set.clone());
            for (x, y) in set.iter().zip(first.iter()) {
                assert!((x - y).abs() < 1e-13, "{set:?} {first:?}");
            }
        }
    }
}
