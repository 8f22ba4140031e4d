//! The minimum of a curve, found between its points.

use super::arguments::Favour;
use super::motion::{Beyond, Motion};
use super::rule::FLAT_EV;

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

/// What a curve says: the form that it favours and its deepest minimum.
///
/// Even about the first point only: a minimum away from it that is deeper than [`FLAT_EV`] speaks
/// for the distorted form, any other minimum for the first one, and a curve that runs down to its
/// end for nothing; the depth is relative to the first form. Even about both ends: the deepest of
/// the two forms and the skew minimum, by more than [`FLAT_EV`] below the next one, which the depth
/// is relative to. Open: where the lowest value lies, relative to the first point.
pub(crate) fn read(motion: Motion, step: f64, energies: &[f64]) -> (Favour, Option<Minimum>) {
    match motion.beyond() {
        Beyond::Start => {
            let found = minimum(step, energies);
            let favours = match found {
                None => Favour::Silent,
                Some(found) if found.depth > FLAT_EV => Favour::Distorted,
                Some(_) => Favour::Symmetric,
            };
            (favours, found)
        }
        Beyond::Both => {
            // Mirrored, so that the spline is flat at both ends.
            let mut whole = energies.to_vec();
            whole.extend(energies.iter().rev().skip(1));
            let (Some(&first), Some(&last), Some(found)) =
                (energies.first(), energies.last(), minimum(step, &whole))
            else {
                return (Favour::Silent, None);
            };
            let length = step * (energies.len() - 1) as f64;
            let lower = first.min(last);
            let skew = lower - (first - found.depth);
            if skew > FLAT_EV {
                let distortion = found.distortion.min(2.0 * length - found.distortion);
                return (
                    Favour::Distorted,
                    Some(Minimum {
                        distortion,
                        depth: skew,
                    }),
                );
            }
            let depth = (first - last).abs();
            let (favours, distortion) = if first < last {
                (Favour::Symmetric, 0.0)
            } else {
                (Favour::Opposite, length)
            };
            let favours = if depth > FLAT_EV {
                favours
            } else {
                Favour::Silent
            };
            (favours, Some(Minimum { distortion, depth }))
        }
        Beyond::Open => {
            if energies.len() < 4 {
                return (Favour::Silent, None);
            }
            let values = spline(step, energies, false);
            let lowest = (0..READINGS).min_by(|&i, &j| values[i].total_cmp(&values[j]));
            let Some(lowest) = lowest else {
                return (Favour::Silent, None);
            };
            let favours = match lowest {
                0 => Favour::Symmetric,
                _ if lowest == READINGS - 1 => Favour::Opposite,
                _ => Favour::Distorted,
            };
            let length = step * (energies.len() - 1) as f64;
            let distortion = length * lowest as f64 / (READINGS - 1) as f64;
            let depth = values[0] - values[lowest];
            (favours, Some(Minimum { distortion, depth }))
        }
    }
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
    let values = spline(step, energies, true);
    let lowest = (0..READINGS - 1)
        .filter(|&i| values[i] <= values[i + 1] && (i == 0 || values[i] <= values[i - 1]))
        .min_by(|&i, &j| values[i].total_cmp(&values[j]))?;
    Some(Minimum {
        distortion: step * (n - 1) as f64 * lowest as f64 / (READINGS - 1) as f64,
        depth: values[0] - values[lowest],
    })
}

fn spline(step: f64, energies: &[f64], even: bool) -> Vec<f64> {
    let n = energies.len();
    let second = second_derivatives(step, energies, even);
    let length = step * (n - 1) as f64;
    let read = |index: usize| {
        let x = length * index as f64 / (READINGS - 1) as f64;
        let left = ((x / step) as usize).min(n - 2);
        let b = x / step - left as f64;
        let a = 1.0 - b;
        let bow = (a * a * a - a) * second[left] + (b * b * b - b) * second[left + 1];
        a * energies[left] + b * energies[left + 1] + bow * step * step / 6.0
    };
    (0..READINGS).map(read).collect()
}

/// `even`: slope 0 at the first point; otherwise the curve starts as a parabola.
fn second_derivatives(step: f64, y: &[f64], even: bool) -> Vec<f64> {
    let n = y.len();
    let bend = |i: usize| 6.0 * (y[i - 1] - 2.0 * y[i] + y[i + 1]) / (step * step);
    let mut m = vec![0.0; n];
    // Without a knot at n−2 the three last values are in line: 6 m = right-hand side there.
    m[n - 2] = bend(n - 2) / 6.0;
    // Rows 0 … n−3 by elimination from above: diagonal 2 (or 1), 4, 4 …
    let (mut diagonal, mut right) = (vec![2.0; n - 2], vec![0.0; n - 2]);
    let upper = if even { 1.0 } else { -1.0 };
    if even {
        right[0] = 6.0 * (y[1] - y[0]) / (step * step);
    } else {
        diagonal[0] = 1.0;
    }
    for i in 1..n - 2 {
        let factor = 1.0 / diagonal[i - 1];
        let above = if i == 1 { upper } else { 1.0 };
        diagonal[i] = 4.0 - factor * above;
        right[i] = bend(i) - factor * right[i - 1];
    }
    for i in (0..n - 2).rev() {
        let above = if i == 0 { upper } else { 1.0 };
        m[i] = (right[i] - above * m[i + 1]) / diagonal[i];
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
        assert_eq!(
            minimum(5.0, &up),
            Some(Minimum {
                distortion: 0.0,
                depth: 0.0
            })
        );
        let down: Vec<f64> = up.iter().map(|x| -x).collect();
        assert_eq!(minimum(5.0, &down), None);
        assert_eq!(minimum(5.0, &up[..3]), None);
    }

    /// cos φ and cos 2φ between two symmetric ends, and a parabola on an open range.
    #[test]
    fn two_ends_and_open_ends() {
        let motion = Motion::twist(180.0);
        let step = motion.step(false);
        let curve = |once: f64, twice: f64| -> Vec<f64> {
            let at = |x: f64| once * x.to_radians().cos() + twice * (2.0 * x).to_radians().cos();
            motion.grid(false).into_iter().map(at).collect()
        };
        // Minimum of a cos φ + b cos 2φ at cos φ = −a/4b.
        let (favours, found) = read(motion, step, &curve(0.2, 1.0));
        let angle = libm::acos(-0.05).to_degrees();
        assert_eq!(favours, Favour::Distorted);
        assert!((found.unwrap().distortion - angle).abs() < 1.0, "{found:?}");
        assert_eq!(read(motion, step, &curve(0.3, 0.0)).0, Favour::Opposite);
        assert_eq!(read(motion, step, &curve(-0.3, 0.0)).0, Favour::Symmetric);
        assert_eq!(read(motion, step, &curve(0.01, 0.0)).0, Favour::Silent);
        let coordinate = orbend_structure::Coordinate::parse(
            orbend_structure::CoordinateKind::Stretch,
            "1-2=1..2:0.1",
        )
        .unwrap();
        let open = Motion::given(&coordinate, false, None);
        let well: Vec<f64> = open
            .grid(true)
            .iter()
            .map(|x| (x - 0.37) * (x - 0.37))
            .collect();
        let (favours, found) = read(open, open.step(true), &well);
        assert_eq!(favours, Favour::Distorted);
        assert!(
            (found.unwrap().distortion - 0.37).abs() < 0.005,
            "{found:?}"
        );
    }
}
