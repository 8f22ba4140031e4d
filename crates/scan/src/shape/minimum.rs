//! The minimum of a curve, found between its points.

/// Points on which the spline is read.
const READINGS: usize = 401;

/// The deepest minimum inside a curve.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Minimum {
    /// Distortion, degrees.
    pub(crate) distortion: f64,
    /// Depth below the symmetric form, eV; 0 at the symmetric form itself.
    pub(crate) depth: f64,
}

/// The deepest minimum inside the range of an even curve E(−x) = E(x) given from x = 0 on in equal
/// steps; `None` for a curve that runs down to its end, or has fewer than four points.
///
/// The curve is a cubic spline with slope 0 at x = 0 (that of the mirrored points) and no knot at
/// the last but one point (de Boor, A Practical Guide to Splines, 1978, chapter IV).
pub(crate) fn minimum(step: f64, energies: &[f64]) -> Option<Minimum> {
    let n = energies.len();
    if n < 4 {
        return None;
    }
    let second = second_derivatives(step, energies);
    let length = step * (n - 1) as f64;
    let read = |index: usize| {
        let x = length * index as f64 / (READINGS - 1) as f64;
        let left = ((x / step) as usize).min(n - 2);
        let b = x / step - left as f64;
        let a = 1.0 - b;
        let bow = (a * a * a - a) * second[left] + (b * b * b - b) * second[left + 1];
        a * energies[left] + b * energies[left + 1] + bow * step * step / 6.0
    };
    let values: Vec<f64> = (0..READINGS).map(read).collect();
    let lowest = (0..READINGS - 1)
        .filter(|&i| values[i] <= values[i + 1] && (i == 0 || values[i] <= values[i - 1]))
        .min_by(|&i, &j| values[i].total_cmp(&values[j]))?;
    Some(Minimum {
        distortion: length * lowest as f64 / (READINGS - 1) as f64,
        depth: values[0] - values[lowest],
    })
}

fn second_derivatives(step: f64, y: &[f64]) -> Vec<f64> {
    let n = y.len();
    let bend = |i: usize| 6.0 * (y[i - 1] - 2.0 * y[i] + y[i + 1]) / (step * step);
    let mut m = vec![0.0; n];
    // Without a knot at n−2 the three last values are in line: 6 m = right-hand side there.
    m[n - 2] = bend(n - 2) / 6.0;
    // Rows 0 … n−3 by elimination from above: diagonal 2, 4, 4 …
    let (mut diagonal, mut right) = (vec![2.0; n - 2], vec![0.0; n - 2]);
    right[0] = 6.0 * (y[1] - y[0]) / (step * step);
    for i in 1..n - 2 {
        let factor = 1.0 / diagonal[i - 1];
        diagonal[i] = 4.0 - factor;
        right[i] = bend(i) - factor * right[i - 1];
    }
    for i in (0..n - 2).rev() {
        m[i] = (right[i] - m[i + 1]) / diagonal[i];
    }
    m[n - 1] = 2.0 * m[n - 2] - m[n - 3];
    m
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_double_well_between_the_points() {
        // x⁴ − 2a²x² has its minimum −a⁴ at a.
        let a: f64 = 33.0;
        let curve: Vec<f64> = (0..12)
            .map(|i| {
                let x = 10.0 * f64::from(i);
                (x.powi(4) - 2.0 * a * a * x * x) / a.powi(4)
            })
            .collect();
        let found = minimum(10.0, &curve).unwrap();
        assert!((found.distortion - a).abs() < 1.0, "{found:?}");
        assert!((found.depth - 1.0).abs() < 0.02, "{found:?}");
    }

    #[test]
    fn the_symmetric_point_and_no_minimum() {
        let up: Vec<f64> = (0..12).map(|i| f64::from(i * i)).collect();
        assert_eq!(minimum(5.0, &up), Some(Minimum { distortion: 0.0, depth: 0.0 }));
        let down: Vec<f64> = up.iter().map(|x| -x).collect();
        assert_eq!(minimum(5.0, &down), None);
        assert_eq!(minimum(5.0, &up[..3]), None);
    }
}
