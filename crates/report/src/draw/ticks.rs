//! Round numbers for axes.

/// Round values on an axis.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Ticks {
    /// Values with a number.
    pub(crate) major: Vec<f64>,
    /// Values with a mark only.
    pub(crate) minor: Vec<f64>,
    /// Digits after the decimal point.
    pub(crate) decimals: usize,
}

/// Steps in degrees that divide a turn as a chemist would, with the small step between.
const DEGREE_STEPS: [(f64, f64); 12] = [
    (0.5, 0.1),
    (1.0, 0.5),
    (2.0, 1.0),
    (5.0, 1.0),
    (10.0, 5.0),
    (15.0, 5.0),
    (30.0, 10.0),
    (45.0, 15.0),
    (60.0, 30.0),
    (90.0, 30.0),
    (180.0, 90.0),
    (360.0, 180.0),
];

/// Ticks on an angle axis, at most `most` of them.
pub(crate) fn degree_ticks(from: f64, to: f64, most: usize) -> Ticks {
    let (low, high) = (from.min(to), from.max(to));
    if high - low < 1.0 {
        return ticks(from, to, most);
    }
    let (step, small) = DEGREE_STEPS
        .into_iter()
        .find(|(step, _)| count(low, high, *step) <= most)
        .unwrap_or((720.0, 360.0));
    build(low, high, step, small, usize::from(step < 1.0))
}

/// Ticks on any other axis, at most `most` of them (at least one where the range holds a round number).
pub(crate) fn ticks(from: f64, to: f64, most: usize) -> Ticks {
    let (low, high) = (from.min(to), from.max(to));
    let least = (high - low) / most.max(1) as f64;
    let mut power = 1.0;
    let mut decimals = 0;
    while power * 10.0 <= least {
        power *= 10.0;
    }
    // Stops at 1e-9: no axis of this project is finer, and an empty range must end too.
    while power > least && decimals < 9 {
        decimals += 1;
        power = 1.0 / ten_to_the(decimals);
    }
    for (factor, fifth) in [(1.0, 0.5), (2.0, 1.0), (5.0, 1.0), (10.0, 5.0)] {
        let step = factor * power;
        if count(low, high, step) <= most {
            let digits = if factor > 5.0 {
                decimals.saturating_sub(1)
            } else {
                decimals
            };
            return build(low, high, step, fifth * power, digits);
        }
    }
    build(low, high, 20.0 * power, 10.0 * power, decimals)
}

fn ten_to_the(exponent: usize) -> f64 {
    let mut power = 1.0;
    for _ in 0..exponent {
        power *= 10.0;
    }
    power
}

fn first_multiple(low: f64, step: f64) -> f64 {
    (low / step - 1e-9).ceil()
}

fn last_multiple(high: f64, step: f64) -> f64 {
    (high / step + 1e-9).floor()
}

fn count(low: f64, high: f64, step: f64) -> usize {
    let number = last_multiple(high, step) - first_multiple(low, step) + 1.0;
    number.clamp(0.0, 1e6) as usize
}

fn build(low: f64, high: f64, step: f64, small: f64, decimals: usize) -> Ticks {
    let multiples = |step: f64| -> Vec<f64> {
        let first = first_multiple(low, step);
        (0..count(low, high, step).min(200))
            .map(|k| (first + k as f64) * step)
            .collect()
    };
    let major = multiples(step);
    let minor = multiples(small)
        .into_iter()
        .filter(|value| !major.iter().any(|tick| (tick - value).abs() < 0.1 * small))
        .collect();
    Ticks {
        major,
        minor,
        decimals,
    }
}

/// A number with so many decimals and a true minus sign; never "−0".
pub(crate) fn number(value: f64, decimals: usize) -> String {
    let plain = ascii_number(value, decimals);
    plain.replace('-', "\u{2212}")
}

/// The same with a hyphen-minus, as for terminals and scripts.
pub(crate) fn ascii_number(value: f64, decimals: usize) -> String {
    let text = format!("{value:.decimals$}");
    match text.strip_prefix('-') {
        Some(rest) if rest.chars().all(|c| c == '0' || c == '.') => rest.to_owned(),
        _ => text,
    }
}

/// A coordinate as short as two or three decimals allow (`104`, `92.5`, `1.59`).
pub(crate) fn short(value: f64, decimals: usize) -> String {
    let text = ascii_number(value, decimals);
    if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn angles_get_the_numbers_a_chemist_expects() {
        assert_eq!(
            degree_ticks(90.0, 180.0, 6).major,
            [90.0, 120.0, 150.0, 180.0].to_vec()
        );
        assert_eq!(
            degree_ticks(60.0, 180.0, 6).major,
            [60.0, 90.0, 120.0, 150.0, 180.0].to_vec()
        );
        assert_eq!(
            degree_ticks(0.0, 90.0, 6).major,
            [0.0, 30.0, 60.0, 90.0].to_vec()
        );
    }

    #[test]
    fn other_axes_get_ones_twos_and_fives() {
        let lengths = ticks(0.8, 1.6, 5);
        assert_eq!(lengths.decimals, 1);
        assert_eq!(lengths.major.len(), 5);
        assert_eq!(
            ticks(-22.0, 5.0, 7).major,
            [-20.0, -15.0, -10.0, -5.0, 0.0, 5.0].to_vec()
        );
        assert_eq!(ticks(0.0, 0.035, 4).decimals, 2);
        assert_eq!(ticks(3.0, 3.0, 4).major, [3.0].to_vec());
    }

    #[test]
    fn zero_has_no_sign() {
        assert_eq!(number(-0.001, 1), "0.0");
        assert_eq!(number(-12.34, 1), "\u{2212}12.3");
        assert_eq!(short(104.0, 1), "104");
        assert_eq!(short(1.590, 3), "1.59");
    }

    proptest::proptest! {
        #[test]
        fn never_too_many_and_always_inside(low in -100.0_f64..100.0, span in 0.001_f64..200.0, most in 2_usize..9) {
            for found in [ticks(low, low + span, most), degree_ticks(low, low + span, most)] {
                proptest::prop_assert!(found.major.len() <= most);
                proptest::prop_assert!(found.major.iter().all(|t| *t > low - 1e-6 && *t < low + span + 1e-6));
            }
        }
    }
}
