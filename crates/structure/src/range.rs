//! The values a coordinate runs through: from, to, step.

use thiserror::Error;

/// More points than this in one range or one grid are refused.
pub const LARGEST_POINT_COUNT: usize = 10_000_000;

/// Values from `from` to `to` in equal steps, both ends included.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Range {
    /// First value.
    pub from: f64,
    /// Last value; may be smaller than the first.
    pub to: f64,
    /// Distance between neighbouring values, positive.
    pub step: f64,
}

/// A range that holds no sensible list of values.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum RangeError {
    /// A bound or the step is NaN or infinite.
    #[error("{value} is not a finite number; give finite bounds and a finite step")]
    NotFinite {
        /// The value.
        value: f64,
    },
    /// Both ends are equal.
    #[error("the range from {from} to {from} is empty; give two different ends")]
    Empty {
        /// The value of both ends.
        from: f64,
    },
    /// The step is zero or negative.
    #[error(
        "the step is {step}; give a positive step (a range runs downwards when its first value is the larger one)"
    )]
    Step {
        /// The step.
        step: f64,
    },
    /// The step does not hit the end.
    #[error(
        "steps of {step} from {from} reach {below} and then {above}, never {to}; end at {below} or {above}, or use the step {fitting}"
    )]
    NotReaching {
        /// First value.
        from: f64,
        /// The end asked for.
        to: f64,
        /// The step asked for.
        step: f64,
        /// Last value before the end.
        below: f64,
        /// First value beyond the end.
        above: f64,
        /// A step near the one asked for that hits the end.
        fitting: f64,
    },
    /// Too many points.
    #[error(
        "the range holds {points:.3e} points; at most 10 million are computed, so enlarge the step"
    )]
    TooMany {
        /// Number of points.
        points: f64,
    },
}

impl Range {
    /// The range `from..to:step`, checked.
    ///
    /// # Errors
    /// Bounds that are not finite, equal ends, a step that is zero, negative or
    /// does not reach the end (within 1e-9 of a step or of a unit), more than
    /// 10 million points.
    pub fn new(from: f64, to: f64, step: f64) -> Result<Self, RangeError> {
        let range = Self { from, to, step };
        range.check()?;
        Ok(range)
    }

    /// The range of `points` equally spaced values (at least 2).
    ///
    /// # Errors
    /// As [`Range::new`].
    pub fn with_points(from: f64, to: f64, points: usize) -> Result<Self, RangeError> {
        let intervals = points.saturating_sub(1).max(1) as f64;
        Self::new(from, to, (to - from).abs() / intervals)
    }

    /// Checks what [`Range::new`] checks.
    ///
    /// # Errors
    /// As [`Range::new`].
    pub fn check(&self) -> Result<(), RangeError> {
        let Self { from, to, step } = *self;
        if let Some(value) = [from, to, step].into_iter().find(|x| !x.is_finite()) {
            return Err(RangeError::NotFinite { value });
        }
        if step <= 0.0 && (to - from).abs() > 0.0 {
            return Err(RangeError::Step { step });
        }
        if (to - from).abs() <= 1e-9 {
            return Err(RangeError::Empty { from });
        }
        let intervals = (to - from).abs() / step;
        if intervals + 1.0 > LARGEST_POINT_COUNT as f64 {
            return Err(RangeError::TooMany {
                points: intervals + 1.0,
            });
        }
        let whole = intervals.round().max(1.0);
        if (intervals - whole).abs() * step.max(1.0) > 1e-9 {
            let at = |count: f64| round_for_people(from + count * step * (to - from).signum());
            return Err(RangeError::NotReaching {
                from,
                to,
                step,
                below: at(intervals.floor()),
                above: at(intervals.floor() + 1.0),
                fitting: round_for_people((to - from).abs() / whole),
            });
        }
        Ok(())
    }

    /// Number of values, at least 2.
    #[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss)] // checked: 1 … 10⁷
    pub fn points(&self) -> usize {
        ((self.to - self.from).abs() / self.step).round().max(1.0) as usize + 1
    }

    /// Value number `index` (0-based): `from + index·step`, the last one
    /// exactly `to`.
    pub fn value(&self, index: usize) -> f64 {
        if index + 1 >= self.points() {
            return self.to;
        }
        self.from + index as f64 * (self.step * (self.to - self.from).signum())
    }

    /// All values in order.
    pub fn values(&self) -> Vec<f64> {
        (0..self.points()).map(|index| self.value(index)).collect()
    }

    /// The smaller end.
    pub fn low(&self) -> f64 {
        self.from.min(self.to)
    }

    /// The larger end.
    pub fn high(&self) -> f64 {
        self.from.max(self.to)
    }
}

impl std::fmt::Display for Range {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "{}..{}:{}", self.from, self.to, self.step)
    }
}

fn round_for_people(x: f64) -> f64 {
    (x * 1e6).round() / 1e6
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn values_hit_both_ends() {
        let range = Range::new(0.8, 1.6, 0.05).unwrap();
        let values = range.values();
        assert_eq!(values.len(), 17);
        assert!((values[3] - (0.8 + 3.0 * 0.05)).abs() < 1e-300);
        assert!((values[16] - 1.6).abs() < 1e-300);
        let down = Range::new(180.0, 90.0, 45.0).unwrap();
        assert_eq!(down.values(), [180.0, 135.0, 90.0]);
        assert_eq!(Range::with_points(0.0, 1.0, 41).unwrap().points(), 41);
        assert_eq!(down.to_string(), "180..90:45");
    }

    #[test]
    fn refusals() {
        assert!(matches!(
            Range::new(1.0, 1.0, 0.1),
            Err(RangeError::Empty { .. })
        ));
        assert!(matches!(
            Range::new(1.0, 2.0, 0.0),
            Err(RangeError::Step { .. })
        ));
        assert!(matches!(
            Range::new(1.0, 2.0, -1.0),
            Err(RangeError::Step { .. })
        ));
        assert!(matches!(
            Range::new(1.0, f64::INFINITY, 1.0),
            Err(RangeError::NotFinite { .. })
        ));
        assert!(matches!(
            Range::new(0.0, f64::NAN, 1.0),
            Err(RangeError::NotFinite { .. })
        ));
        assert!(matches!(
            Range::new(0.0, 180.0, 1e-6),
            Err(RangeError::TooMany { .. })
        ));
        let error = Range::new(90.0, 180.0, 7.0).unwrap_err().to_string();
        assert!(error.contains("reach 174 and then 181"), "{error}");
        assert!(error.contains("the step 6.923077"), "{error}");
        assert!(Range::new(90.0, 180.0, 200.0).is_err());
    }
}
