//! Crossings of lines: between the points of a sweep, on the model itself.

mod model;
mod search;
mod table;

pub use model::{BATCH, LevelModel};
pub use search::{Meeting, MeetingKind, meetings};
pub use table::AVOIDED_GAP_EV;

use crate::character::{Character, share};
use crate::error::ScanError;
use crate::filling::Filling;
use crate::plan::SweepPlan;
use crate::solve::Workspace;
use crate::sweep::Sweep;

/// Minima of a gap count as avoided crossings when the two lines exchange at
/// least this share of their character.
pub const SMALLEST_EXCHANGE: f64 = 0.1;

/// A meeting of two lines of a sweep.
#[derive(Clone, Debug, PartialEq)]
pub struct Crossing {
    /// How they meet.
    pub kind: MeetingKind,
    /// The two lines (the first of each degenerate set), the one that is lower
    /// before the meeting first.
    pub lines: (usize, usize),
    /// Where, in the unit of the path.
    pub at: f64,
    /// Energy, eV.
    pub energy: f64,
    /// Smallest distance of an avoided crossing, eV.
    pub gap: Option<f64>,
    /// Share of character that lines of an avoided crossing exchange, 0 to 1:
    /// squared overlap of one before with the other after, where the gap is
    /// three times as large as at its minimum (or as near to that as the path
    /// goes). Two straight levels exchange 8/9 there.
    pub exchange: Option<f64>,
    /// The two places between which the exchange was measured.
    pub exchanged_between: Option<(f64, f64)>,
    /// Whether the ground configuration is another one behind it.
    pub changes_configuration: bool,
}

/// The path of a plan with one parameter as a family of levels.
struct PathModel<'a> {
    plan: &'a SweepPlan,
    classes: Vec<usize>,
    /// Slot of each column: in a paired block every other one.
    slots: Vec<usize>,
}

impl<'a> PathModel<'a> {
    fn new(plan: &'a SweepPlan) -> Self {
        let (mut classes, mut slots, mut slot) = (Vec::new(), Vec::new(), 0);
        for block in &plan.adapted.blocks {
            let step = if block.paired { block.dimension } else { 1 };
            for place in (0..block.size()).step_by(step.max(1)) {
                classes.push(block.irrep);
                slots.push(slot + place);
            }
            slot += block.size();
        }
        Self {
            plan,
            classes,
            slots,
        }
    }
}

impl LevelModel for PathModel<'_> {
    type Error = ScanError;
    type Room = Workspace;

    fn room(&self) -> Workspace {
        Workspace::new(self.plan)
    }

    fn classes(&self) -> &[usize] {
        &self.classes
    }

    fn energies(&self, room: &mut Workspace, at: &[f64], out: &mut [f64]) -> Result<(), ScanError> {
        let slots = self.plan.slots();
        let mut all = vec![0.0; at.len() * slots];
        self.plan.batch_energies(at, room, &mut all)?;
        for (row, all) in out
            .chunks_exact_mut(self.slots.len())
            .zip(all.chunks_exact(slots))
        {
            for (target, &slot) in row.iter_mut().zip(&self.slots) {
                *target = all[slot];
            }
        }
        Ok(())
    }
}

/// Spacing of the nodes between which crossings are looked for, in the unit of
/// the path: 0.5°, 0.01 Å, or 1/200 of a path without unit.
pub fn resolution(unit: &str, length: f64) -> f64 {
    match unit {
        "degree" => 0.5,
        "angstrom" => 0.01,
        _ => length.abs() / 200.0,
    }
}

/// The values of the points and values evenly between them, at most `spacing` apart.
pub(crate) fn nodes(values: &[f64], spacing: f64) -> Vec<f64> {
    let mut nodes = Vec::new();
    for pair in values.windows(2) {
        let pieces = ((pair[1] - pair[0]).abs() / spacing - 1e-9).ceil().max(1.0) as usize;
        for piece in 0..pieces {
            nodes.push(pair[0] + (pair[1] - pair[0]) * piece as f64 / pieces as f64);
        }
    }
    nodes.extend(values.last());
    nodes
}

impl Sweep {
    /// Crossings, touchings and avoided crossings in the order of the path;
    /// empty for a grid or a single geometry. They do not depend on the step
    /// of the sweep as long as it is not finer than [`resolution`].
    ///
    /// # Errors
    /// A geometry between the points that cannot be solved.
    pub fn crossings(&self) -> Result<Vec<Crossing>, ScanError> {
        let plan = self.plan();
        let [axis] = plan.path.axes() else {
            return Ok(Vec::new());
        };
        let (low, high) = axis.limits();
        let spacing = resolution(&axis.unit, high - low);
        let nodes = nodes(&plan.parameters(&axis.values), spacing);
        let model = PathModel::new(plan);
        let found = meetings(&model, &nodes)?;
        let mut room = model.room();
        let mut crossings = Vec::with_capacity(found.len());
        for meeting in found {
            let (a, b) = meeting.columns;
            let line = |column: usize| {
                plan.lines
                    .iter()
                    .position(|line| line.slot == model.slots[column])
                    .unwrap_or(0)
            };
            let mut crossing = Crossing {
                kind: meeting.kind,
                lines: (line(a), line(b)),
                at: meeting.at,
                energy: meeting.energy,
                gap: None,
                exchange: None,
                exchanged_between: None,
                changes_configuration: false,
            };
            match meeting.kind {
                MeetingKind::Avoided => {
                    let (exchange, between) = exchange(
                        &model,
                        &mut room,
                        &meeting,
                        crossing.lines,
                        (low, high),
                        spacing,
                    )?;
                    if exchange < SMALLEST_EXCHANGE {
                        continue;
                    }
                    crossing.gap = Some(meeting.gap);
                    crossing.exchange = Some(exchange);
                    crossing.exchanged_between =
                        Some(if axis.values.first() <= axis.values.last() {
                            between
                        } else {
                            (between.1, between.0)
                        });
                }
                MeetingKind::Crossing => {
                    crossing.changes_configuration =
                        changes_configuration(&model, &mut room, &meeting, crossing.lines)?;
                }
                MeetingKind::Touching => {}
            }
            crossings.push(crossing);
        }
        Ok(crossings)
    }
}

/// Character exchanged on both sides of a minimum of the gap, and those two
/// places, the lower first.
fn exchange(
    model: &PathModel<'_>,
    room: &mut Workspace,
    meeting: &Meeting,
    lines: (usize, usize),
    limits: (f64, f64),
    spacing: f64,
) -> Result<(f64, (f64, f64)), ScanError> {
    let (a, b) = meeting.columns;
    let columns = model.classes.len();
    let mut side = |direction: f64| -> Result<f64, ScanError> {
        let mut out = vec![0.0; columns];
        let (mut reached, mut step, mut last) = (meeting.at, spacing / 16.0, meeting.gap);
        loop {
            let next = (meeting.at + direction * step).clamp(limits.0, limits.1);
            model.energies(room, &[next], &mut out)?;
            let gap = out[b] - out[a];
            if gap < last {
                return Ok(reached);
            }
            reached = next;
            last = gap;
            if gap >= 3.0 * meeting.gap || next <= limits.0 || next >= limits.1 {
                return Ok(reached);
            }
            step *= 1.5;
        }
    };
    let (before, after) = (side(-1.0)?, side(1.0)?);
    let first = Character::new(model.plan, &[before])?;
    let last = Character::new(model.plan, &[after])?;
    let exchanged = share(first.of(lines.0), last.of(lines.1));
    Ok((exchanged, (before, after)))
}

/// Whether electrons move from the one set to the other.
fn changes_configuration(
    model: &PathModel<'_>,
    room: &mut Workspace,
    meeting: &Meeting,
    lines: (usize, usize),
) -> Result<bool, ScanError> {
    let plan = model.plan;
    let Filling::Aufbau(electrons) = &plan.filling else {
        return Ok(false);
    };
    let mut out = vec![0.0; model.classes.len()];
    model.energies(room, &[meeting.at], &mut out)?;
    let size = |column: usize| plan.group.irreps[model.classes[column]].dimension;
    let below: usize = (0..out.len())
        .filter(|&column| column != meeting.columns.0 && column != meeting.columns.1)
        .filter(|&column| out[column] < meeting.energy)
        .map(size)
        .sum();
    let both = plan.lines[lines.0].degeneracy + plan.lines[lines.1].degeneracy;
    let (total, unpaired) = (electrons.total() as usize, electrons.unpaired() as usize);
    let cut = |filled: usize| below < filled && filled < below + both;
    Ok(cut((total + unpaired) / 2) || cut((total - unpaired) / 2))
}
