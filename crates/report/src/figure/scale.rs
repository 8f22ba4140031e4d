//! The energy axis: which energies are shown, and where on the page.

use crate::draw::bundle::Bundle;
use crate::draw::ticks::{Ticks, ticks};

use super::options::{EnergyUnit, FigureError};

/// Part of the energy axis, from `low` to `high` in eV.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Segment {
    pub(crate) low: f64,
    pub(crate) high: f64,
    /// Page heights of `low` and `high`; `bottom > top`.
    pub(crate) bottom: f64,
    pub(crate) top: f64,
}

/// The energy axis: segments from low to high energy, all at one scale.
#[derive(Clone, Debug)]
pub(crate) struct EnergyScale {
    pub(crate) segments: Vec<Segment>,
}

/// An empty stretch is left out when it is longer than this, in eV, and than [`BREAK_SHARE`].
const BREAK_EV: f64 = 8.0;
/// The same as a share of the whole range.
const BREAK_SHARE: f64 = 0.25;
/// Empty lines this far above the highest occupied energy are left out of the automatic range, in eV.
const EMPTY_REACH_EV: f64 = 12.0;

/// The energies that are shown when the user names no window: everything that is ever occupied, and
/// the empty lines that come within [`EMPTY_REACH_EV`] of it (always where the lowest one comes lowest).
pub(crate) fn automatic_window(extents: &[(f64, f64, bool)]) -> Option<(f64, f64)> {
    let lowest = extents.iter().map(|e| e.0).min_by(f64::total_cmp)?;
    let homo = extents
        .iter()
        .filter(|e| e.2)
        .map(|e| e.1)
        .max_by(f64::total_cmp);
    let floor = homo.unwrap_or(lowest);
    let lumo = extents
        .iter()
        .filter(|e| !e.2)
        .map(|e| e.0)
        .min_by(f64::total_cmp)
        .unwrap_or(floor);
    let reach = floor + EMPTY_REACH_EV;
    let highest = extents
        .iter()
        .filter(|e| e.2 || e.0 <= reach)
        .map(|e| e.1.min(reach))
        .max_by(f64::total_cmp)?
        .max(lumo);
    Some((lowest, highest))
}

/// Checks a window given by the user against what there is to draw.
pub(crate) fn check_window(
    window: (f64, f64),
    extents: &[(f64, f64, bool)],
) -> Result<(), FigureError> {
    let (from, to) = window;
    if !(from.is_finite() && to.is_finite() && from < to) {
        return Err(FigureError::ReversedWindow { from, to });
    }
    if extents.iter().any(|e| e.1 >= from && e.0 <= to) {
        return Ok(());
    }
    let lowest = extents
        .iter()
        .map(|e| e.0)
        .min_by(f64::total_cmp)
        .unwrap_or_default();
    let highest = extents
        .iter()
        .map(|e| e.1)
        .max_by(f64::total_cmp)
        .unwrap_or_default();
    Err(FigureError::EmptyWindow {
        from,
        to,
        lowest,
        highest,
    })
}

/// Energy ranges to show: one, or several where wide empty stretches between occupied lines are left
/// out (deep levels far below the rest).
pub(crate) fn ranges(
    window: (f64, f64),
    padded: bool,
    extents: &[(f64, f64, bool)],
) -> Vec<(f64, f64)> {
    let span = (window.1 - window.0).max(1e-3);
    if !padded {
        return vec![window];
    }
    let pad = (0.04 * span).max(0.25);
    let mut inside: Vec<(f64, f64, bool)> = extents
        .iter()
        .copied()
        .filter(|e| e.1 >= window.0 && e.0 <= window.1)
        .collect();
    inside.sort_by(|a, b| a.0.total_cmp(&b.0));
    let mut found = Vec::new();
    let mut start = window.0;
    let mut end = f64::NEG_INFINITY;
    let mut filled = true;
    for (low, high, occupied) in inside {
        let empty = low - end;
        filled = filled && occupied;
        if end.is_finite() && empty > BREAK_EV && empty > BREAK_SHARE * span && filled {
            found.push((start - pad, end + pad));
            start = low;
        }
        if high > end {
            end = high;
        }
    }
    found.push((start - pad, window.1 + pad));
    found
}

impl EnergyScale {
    /// Lays the ranges out between two page heights with `gap` points between them.
    pub(crate) fn new(ranges: &[(f64, f64)], top: f64, bottom: f64, gap: f64) -> Self {
        let total: f64 = ranges.iter().map(|(low, high)| high - low).sum();
        let room = bottom - top - gap * ranges.len().saturating_sub(1) as f64;
        let per_ev = room / total.max(1e-9);
        let mut base = bottom;
        let segments = ranges
            .iter()
            .map(|&(low, high)| {
                let height = (high - low) * per_ev;
                let segment = Segment {
                    low,
                    high,
                    bottom: base,
                    top: base - height,
                };
                base -= height + gap;
                segment
            })
            .collect();
        Self { segments }
    }

    /// Page height of an energy. Beyond the ends the outer segments go on; inside a left-out stretch
    /// the height is interpolated.
    pub(crate) fn y(&self, energy: f64) -> f64 {
        let mut last: Option<&Segment> = None;
        for segment in &self.segments {
            if energy <= segment.high {
                if let Some(below) = last.filter(|_| energy < segment.low) {
                    let t = (energy - below.high) / (segment.low - below.high);
                    return below.top + t * (segment.bottom - below.top);
                }
                return segment.y(energy);
            }
            last = Some(segment);
        }
        last.map_or(0.0, |segment| segment.y(energy))
    }

    /// Whether the energy is on the axis.
    pub(crate) fn shows(&self, energy: f64) -> bool {
        self.segments
            .iter()
            .any(|s| s.low - 1e-9 <= energy && energy <= s.high + 1e-9)
    }

    /// Round numbers for each segment in the axis unit, numbers at least `distance` points apart.
    pub(crate) fn ticks(&self, unit: EnergyUnit, distance: f64) -> Vec<Ticks> {
        let shares = self
            .segments
            .iter()
            .map(|s| (s.bottom - s.top) / (s.high - s.low));
        let per_ev = shares.fold(f64::INFINITY, f64::min);
        let spans = self.segments.iter().map(|s| s.high - s.low);
        let longest = spans.fold(0.0, f64::max);
        let most = ((longest * per_ev / distance).floor() as usize).clamp(2, 9);
        let main = self
            .segments
            .iter()
            .find(|s| (s.high - s.low - longest).abs() < 1e-9)
            .map(|s| ticks(unit.of_ev(s.low), unit.of_ev(s.high), most));
        let step = main
            .as_ref()
            .and_then(|t| Some(t.major.get(1)? - t.major.first()?));
        self.segments
            .iter()
            .map(|s| {
                let (low, high) = (unit.of_ev(s.low), unit.of_ev(s.high));
                let fits = step.map_or(1, |step| ((high - low) / step).floor() as usize);
                (1..=most.min(fits.max(1)) + 1)
                    .rev()
                    .map(|count| ticks(low, high, count))
                    .find(|found| self.apart(found, unit, distance))
                    .unwrap_or(Ticks {
                        major: Vec::new(),
                        minor: Vec::new(),
                        decimals: 0,
                    })
            })
            .collect()
    }

    fn apart(&self, ticks: &Ticks, unit: EnergyUnit, distance: f64) -> bool {
        let heights: Vec<f64> = ticks.major.iter().map(|t| self.y(unit.to_ev(*t))).collect();
        heights
            .windows(2)
            .all(|pair| pair[0] - pair[1] >= distance - 1e-9)
    }
}

impl Segment {
    fn y(&self, energy: f64) -> f64 {
        self.bottom - (energy - self.low) / (self.high - self.low) * (self.bottom - self.top)
    }
}

/// Lowest and highest energy of each bundle, and whether it ever holds electrons.
pub(crate) fn extents(bundles: &[Bundle]) -> Vec<(f64, f64, bool)> {
    bundles
        .iter()
        .filter_map(|bundle| {
            let (low, high) = bundle.extent()?;
            Some((low, high, bundle.ever_occupied()))
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    const DEEP: [(f64, f64, bool); 5] = [
        (-40.2, -39.9, true),
        (-19.0, -17.0, true),
        (-15.0, -11.0, true),
        (-6.0, -2.0, false),
        (20.0, 31.0, false),
    ];

    #[test]
    fn a_wide_empty_stretch_is_left_out_but_never_the_frontier() {
        let window = automatic_window(&DEEP).unwrap();
        assert_eq!(window, (-40.2, -2.0));
        let found = ranges(window, true, &DEEP);
        assert_eq!(found.len(), 2);
        assert!(found[0].1 < -35.0 && found[1].0 < -19.0 && found[1].1 > -2.0);
    }

    #[test]
    fn one_scale_for_all_segments_and_order_kept() {
        let scale = EnergyScale::new(&[(-41.0, -39.0), (-20.0, -10.0)], 10.0, 140.0, 10.0);
        assert!((scale.y(-39.0) - 120.0).abs() < 1e-9);
        assert!((scale.y(-20.0) - 110.0).abs() < 1e-9);
        assert!((scale.y(-10.0) - 10.0).abs() < 1e-9);
        assert!(scale.y(-30.0) < 120.0 && scale.y(-30.0) > 110.0);
        assert!(scale.shows(-40.0) && !scale.shows(-30.0));
    }

    #[test]
    fn windows_without_lines_are_refused() {
        let refused = check_window((40.0, 50.0), &DEEP);
        assert!(matches!(refused, Err(FigureError::EmptyWindow { .. })));
        let refused = check_window((5.0, -5.0), &DEEP);
        assert!(matches!(refused, Err(FigureError::ReversedWindow { .. })));
    }
}
