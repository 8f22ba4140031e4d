//! Smooth curves through computed points that never overshoot them.

/// Monotone piecewise cubic (F. N. Fritsch, R. E. Carlson, SIAM J. Numer. Anal. 17, 238 (1980)):
/// passes through every point and has no extremum between points.
#[derive(Clone, Debug)]
pub(crate) struct Curve {
    xs: Vec<f64>,
    ys: Vec<f64>,
    slopes: Vec<f64>,
}

/// Control points of a cubic Bézier piece.
pub(crate) type Piece = [(f64, f64); 4];

impl Curve {
    /// `xs` strictly increasing or strictly decreasing, one `y` for each.
    pub(crate) fn new(xs: &[f64], ys: &[f64]) -> Self {
        let count = xs.len().min(ys.len());
        let (xs, ys) = (xs[..count].to_vec(), ys[..count].to_vec());
        let secants: Vec<f64> = (1..count)
            .map(|k| (ys[k] - ys[k - 1]) / (xs[k] - xs[k - 1]))
            .collect();
        let mut slopes = vec![0.0; count];
        if let (Some(first), Some(last)) = (secants.first(), secants.last()) {
            slopes[0] = *first;
            slopes[count - 1] = *last;
        }
        for k in 1..count.saturating_sub(1) {
            if secants[k - 1] * secants[k] > 0.0 {
                slopes[k] = 0.5 * (secants[k - 1] + secants[k]);
            }
        }
        for (k, secant) in secants.iter().enumerate() {
            if secant.abs() < 1e-300 {
                slopes[k] = 0.0;
                slopes[k + 1] = 0.0;
                continue;
            }
            let (alpha, beta) = (slopes[k] / secant, slopes[k + 1] / secant);
            let square = alpha * alpha + beta * beta;
            if square > 9.0 {
                let factor = 3.0 / square.sqrt();
                slopes[k] = factor * alpha * secant;
                slopes[k + 1] = factor * beta * secant;
            }
        }
        Self { xs, ys, slopes }
    }

    /// The value at `x`; `None` outside the points.
    pub(crate) fn value(&self, x: f64) -> Option<f64> {
        if let [only] = self.xs.as_slice() {
            return ((x - only).abs() < 1e-12).then(|| self.ys[0]);
        }
        let k = self
            .xs
            .windows(2)
            .position(|pair| (pair[0] <= x && x <= pair[1]) || (pair[1] <= x && x <= pair[0]))?;
        let width = self.xs[k + 1] - self.xs[k];
        let t = (x - self.xs[k]) / width;
        let [(_, a), (_, b), (_, c), (_, d)] = self.piece(k);
        let s = 1.0 - t;
        Some(s * s * s * a + 3.0 * s * s * t * b + 3.0 * s * t * t * c + t * t * t * d)
    }

    fn piece(&self, k: usize) -> Piece {
        let (x0, x1) = (self.xs[k], self.xs[k + 1]);
        let third = (x1 - x0) / 3.0;
        [
            (x0, self.ys[k]),
            (x0 + third, self.ys[k] + third * self.slopes[k]),
            (x1 - third, self.ys[k + 1] - third * self.slopes[k + 1]),
            (x1, self.ys[k + 1]),
        ]
    }

    /// Bézier pieces of the stretch from `from` to `to` (in the direction of the points).
    pub(crate) fn pieces(&self, from: f64, to: f64) -> Vec<Piece> {
        let mut found = Vec::new();
        for k in 0..self.xs.len().saturating_sub(1) {
            let width = self.xs[k + 1] - self.xs[k];
            let start = ((from - self.xs[k]) / width).clamp(0.0, 1.0);
            let end = ((to - self.xs[k]) / width).clamp(0.0, 1.0);
            if end - start > 1e-9 {
                found.push(cut(self.piece(k), start, end));
            }
        }
        found
    }

    /// First and last `x`.
    pub(crate) fn ends(&self) -> Option<(f64, f64)> {
        Some((*self.xs.first()?, *self.xs.last()?))
    }
}

/// The part of a Bézier piece between two parameters (de Casteljau).
fn cut(piece: Piece, start: f64, end: f64) -> Piece {
    let tail = split(piece, start).1;
    let rest = if start < 1.0 {
        (end - start) / (1.0 - start)
    } else {
        1.0
    };
    split(tail, rest).0
}

fn split(p: Piece, t: f64) -> (Piece, Piece) {
    let mix = |a: (f64, f64), b: (f64, f64)| (a.0 + t * (b.0 - a.0), a.1 + t * (b.1 - a.1));
    let (ab, bc, cd) = (mix(p[0], p[1]), mix(p[1], p[2]), mix(p[2], p[3]));
    let (abc, bcd) = (mix(ab, bc), mix(bc, cd));
    let middle = mix(abc, bcd);
    ([p[0], ab, abc, middle], [middle, bcd, cd, p[3]])
}

#[cfg(test)]
mod tests {
    use super::*;

    proptest::proptest! {
        #[test]
        fn passes_through_points_and_never_overshoots(
            ys in proptest::collection::vec(-40.0_f64..40.0, 2..12)
        ) {
            let xs: Vec<f64> = (0..ys.len()).map(|k| 90.0 + 3.0 * k as f64).collect();
            let curve = Curve::new(&xs, &ys);
            for k in 0..ys.len() - 1 {
                proptest::prop_assert!((curve.value(xs[k]).unwrap() - ys[k]).abs() < 1e-9);
                let (low, high) = (ys[k].min(ys[k + 1]), ys[k].max(ys[k + 1]));
                for step in 1..20 {
                    let value = curve.value(xs[k] + 0.15 * f64::from(step)).unwrap();
                    proptest::prop_assert!(value > low - 1e-9 && value < high + 1e-9);
                }
            }
        }
    }

    #[test]
    fn a_straight_line_stays_straight_in_either_direction() {
        let curve = Curve::new(&[180.0, 170.0, 150.0], &[1.0, 2.0, 4.0]);
        assert!((curve.value(163.0).unwrap() - 2.7).abs() < 1e-12);
        assert_eq!(curve.value(181.0), None);
    }

    #[test]
    fn a_stretch_of_a_curve_lies_on_the_curve() {
        let curve = Curve::new(&[0.0, 1.0, 2.0], &[0.0, 3.0, 4.0]);
        let pieces = curve.pieces(0.5, 1.25);
        assert_eq!(pieces.len(), 2);
        let (x, y) = pieces[0][0];
        assert!((x - 0.5).abs() < 1e-12 && (y - curve.value(0.5).unwrap()).abs() < 1e-12);
        let (x, y) = pieces[1][3];
        assert!((x - 1.25).abs() < 1e-12 && (y - curve.value(1.25).unwrap()).abs() < 1e-12);
    }
}
