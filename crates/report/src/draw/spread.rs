//! Placing labels along one direction without overlap.

/// Positions closest to `targets` in the least-squares sense that keep their order, lie at least
/// `distance` apart and within `low..=high`; exact, by pooling adjacent violators (M. Ayer et al.,
/// Ann. Math. Statist. 26, 641 (1955)). `targets` ascend. Where the labels cannot fit they start at
/// `low` and run beyond `high`: see [`room`].
pub(crate) fn spread(targets: &[f64], distance: f64, low: f64, high: f64) -> Vec<f64> {
    spread_apart(targets, |_| distance, low, high)
}

/// The same with a distance of its own between each position and the next: `distance(k)` between
/// those of places k and k + 1.
pub(crate) fn spread_apart(
    targets: &[f64],
    distance: impl Fn(usize) -> f64,
    low: f64,
    high: f64,
) -> Vec<f64> {
    let mut offsets = vec![0.0];
    for k in 1..targets.len() {
        offsets.push(offsets[k - 1] + distance(k - 1));
    }
    // Subtracting the least offsets turns "distance apart" into "not decreasing".
    let mut pools: Vec<(f64, usize)> = Vec::new();
    for (target, offset) in targets.iter().zip(&offsets) {
        let mut pool = (target - offset, 1);
        while let Some(&(sum, count)) = pools.last() {
            if sum / count as f64 <= pool.0 / pool.1 as f64 {
                break;
            }
            pool = (pool.0 + sum, pool.1 + count);
            pools.pop();
        }
        pools.push(pool);
    }
    let top = high - offsets[offsets.len() - 1];
    let mut placed = Vec::with_capacity(targets.len());
    for (sum, count) in pools {
        let level = (sum / count as f64).min(top).max(low);
        for _ in 0..count {
            placed.push(level + offsets[placed.len()]);
        }
    }
    placed
}

/// The room that so many labels need from the first to the last.
pub(crate) fn room(count: usize, distance: f64) -> f64 {
    count.saturating_sub(1) as f64 * distance
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn labels_that_fit_stay_where_they_are() {
        assert_eq!(
            spread(&[1.0, 5.0, 9.0], 2.0, 0.0, 10.0),
            vec![1.0, 5.0, 9.0]
        );
    }

    #[test]
    fn a_crowd_spreads_about_its_centre() {
        let placed = spread(&[5.0, 5.0, 5.0], 2.0, 0.0, 10.0);
        assert_eq!(placed, vec![3.0, 5.0, 7.0]);
        assert_eq!(spread(&[0.0, 0.1], 2.0, 0.0, 10.0), vec![0.0, 2.0]);
    }

    #[test]
    fn tall_ones_keep_a_larger_distance() {
        let placed = spread_apart(&[5.0, 5.0, 5.0], |k| [4.0, 1.0][k], 0.0, 10.0);
        assert_eq!(placed, vec![2.0, 6.0, 7.0]);
        assert_eq!(spread_apart(&[], |_| 1.0, 0.0, 1.0), Vec::<f64>::new());
    }

    proptest::proptest! {
        #[test]
        fn apart_in_order_and_inside(mut targets in proptest::collection::vec(0.0_f64..100.0, 1..12)) {
            targets.sort_by(f64::total_cmp);
            let placed = spread(&targets, 8.0, 0.0, 100.0);
            proptest::prop_assert!(placed.windows(2).all(|pair| pair[1] - pair[0] > 8.0 - 1e-9));
            proptest::prop_assert!(placed[0] >= 0.0 && placed[placed.len() - 1] <= 100.0 + 1e-9);
        }
    }
}
