//! Where roots of a costly calculation would change their order along the path.

use crate::crossing::{Crossing, MeetingKind};
use crate::error::ScanError;
use crate::sweep::Sweep;

use super::sets::LineSet;

/// Whose order changes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum RootKind {
    /// The ground configuration itself.
    Ground,
    /// States of the ion with one electron less, by the level that it leaves.
    Ionised,
    /// States with one electron more, and excited states, by the level that it enters.
    Attached,
    /// No change of order, but a filled and an empty level of one irrep exchange character: the
    /// ground state changes its nature where both configurations weigh about the same.
    Mixed,
}

/// A change of order.
#[derive(Clone, Debug, PartialEq)]
pub struct RootFlip {
    /// Whose.
    pub kind: RootKind,
    /// Coordinate value.
    pub at: f64,
    /// The two lines, the lower one before the meeting first.
    pub lines: (usize, usize),
    /// Energy of the meeting, eV.
    pub energy: f64,
    /// Place of the upper of the two states before the meeting: 2 for the second lowest.
    pub upper: usize,
    /// Smallest distance of an avoided crossing, eV.
    pub gap: Option<f64>,
}

/// Among how many lowest states of an ion a change of order is told.
const LOWEST_STATES: usize = 3;

/// Changes of order that follow from the crossings of lines, in the order of the path.
pub(crate) fn root_flips(
    sweep: &Sweep,
    sets: &[LineSet],
    crossings: &[Crossing],
) -> Result<Vec<RootFlip>, ScanError> {
    let mut flips = Vec::new();
    for crossing in crossings {
        let set_of = |line: usize| sets.iter().position(|set| set.lines.contains(&line));
        let (Some(a), Some(b)) = (set_of(crossing.lines.0), set_of(crossing.lines.1)) else {
            continue;
        };
        let flip = |kind, upper| RootFlip {
            kind,
            at: crossing.at,
            lines: crossing.lines,
            energy: crossing.energy,
            upper,
            gap: crossing.gap,
        };
        let point = nearest_point(sweep, crossing.at);
        let holds = |set: usize| sets[set].electrons[point] > 1e-6;
        let others = |filled: bool| {
            (0..sets.len()).filter(move |&set| {
                set != a
                    && set != b
                    && (sets[set].electrons[point] > 1e-6) == filled
                    && sets[set].family != sets[a].family
                    && sets[set].family != sets[b].family
            })
        };
        match crossing.kind {
            MeetingKind::Crossing if crossing.changes_configuration => {
                flips.push(flip(RootKind::Ground, 2));
            }
            MeetingKind::Crossing if holds(a) && holds(b) => {
                let above = others(true)
                    .filter(|&set| sets[set].energies[point] > crossing.energy)
                    .count();
                if above + 2 <= LOWEST_STATES {
                    flips.push(flip(RootKind::Ionised, above + 2));
                }
            }
            MeetingKind::Crossing if !holds(a) && !holds(b) => {
                let below = others(false)
                    .filter(|&set| sets[set].energies[point] < crossing.energy)
                    .count();
                if below + 2 <= LOWEST_STATES {
                    flips.push(flip(RootKind::Attached, below + 2));
                }
            }
            MeetingKind::Avoided if holds(a) != holds(b) => flips.push(flip(RootKind::Mixed, 2)),
            _ => {}
        }
    }
    Ok(flips)
}

/// The point of the sweep next to a value.
pub(crate) fn nearest_point(sweep: &Sweep, at: f64) -> usize {
    let away = |point: usize| {
        let value = sweep.plan().path.values(point);
        value.first().map_or(0.0, |value| (value - at).abs())
    };
    (0..sweep.points())
        .min_by(|&a, &b| away(a).total_cmp(&away(b)).then(a.cmp(&b)))
        .unwrap_or(0)
}
