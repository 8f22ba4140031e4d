//! Meetings of levels along a path, refined on the model itself.

use rayon::prelude::*;

use super::model::{BATCH, LevelModel};
use super::table::{AVOIDED_GAP_EV, Table, ZERO_EV};

/// A gap (eV) whose smallest value is below this is a touching.
const TOUCHING_EV: f64 = 1e-7;
/// Rounds of a root search: each makes the bracket eight times smaller.
const ROOT_ROUNDS: usize = 10;
/// Rounds of a minimum search: each makes the bracket four times smaller.
const MINIMUM_ROUNDS: usize = 14;

/// How two levels meet.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum MeetingKind {
    /// Levels of different classes change their order.
    Crossing,
    /// The gap of two neighbours of one class has a minimum.
    Avoided,
    /// Levels of different classes come together without changing their order.
    Touching,
}

/// Two levels that meet.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Meeting {
    /// How they meet.
    pub kind: MeetingKind,
    /// The two columns; the one that is lower before the meeting comes first.
    pub columns: (usize, usize),
    /// Where, in the unit of the path.
    pub at: f64,
    /// Energy, eV: of both at a crossing, the mean at an avoided one.
    pub energy: f64,
    /// Smallest distance, eV; 0 where they cross or touch.
    pub gap: f64,
}

/// All crossings, touchings, and minima of gaps below [`AVOIDED_GAP_EV`], in
/// the order of the path.
///
/// `nodes` are arguments in path order, both ends included. Guarantee: two
/// crossings of one pair are both found when a node lies between them; closer
/// ones when the slope of their gap is at most twice the steepest secant of
/// the neighbouring intervals, down to 1/64 of an interval. Positions are
/// accurate to 1e-9 of an interval or the rounding of the energies over the
/// slope, whichever is larger.
///
/// # Errors
/// A point that cannot be solved.
pub fn meetings<M: LevelModel>(model: &M, nodes: &[f64]) -> Result<Vec<Meeting>, M::Error> {
    let classes = model.classes();
    if nodes.len() < 2 || classes.len() < 2 {
        return Ok(Vec::new());
    }
    let table = Table::new(model, nodes)?;
    let mut tasks = Vec::new();
    for i in 0..classes.len() {
        for j in i + 1..classes.len() {
            if classes[i] != classes[j] {
                different(&table, (i, j), &mut tasks);
            } else if j == i + 1 {
                minima(&table, (i, j), AVOIDED_GAP_EV, MeetingKind::Avoided, &mut tasks);
            }
        }
    }
    let found: Vec<Result<Option<Meeting>, M::Error>> = tasks
        .par_iter()
        .map_init(|| model.room(), |room, task| task.refine(model, room))
        .collect();
    let mut meetings = Vec::new();
    for meeting in found {
        meetings.extend(meeting?);
    }
    let rising = nodes[0] < nodes[nodes.len() - 1];
    meetings.sort_by(|a, b| {
        let order = a.at.total_cmp(&b.at);
        let order = if rising { order } else { order.reverse() };
        order.then(a.columns.cmp(&b.columns))
    });
    Ok(meetings)
}

/// A meeting that is not placed exactly yet.
struct Task {
    kind: MeetingKind,
    pair: (usize, usize),
    from: f64,
    to: f64,
    /// Sign of the gap before.
    sign: f64,
    /// Whether `from` is the place itself.
    placed: bool,
}

/// Sign changes, touchings at nodes and touchings between them.
fn different(table: &Table, pair: (usize, usize), tasks: &mut Vec<Task>) {
    let sign = |gap: f64| if gap.abs() < ZERO_EV { 0.0 } else { gap.signum() };
    let mut before: Option<(usize, f64)> = None;
    let last = table.at.len() - 1;
    for node in 0..=last {
        let here = sign(table.gap(node, pair));
        if here == 0.0 {
            continue;
        }
        let place = |place: usize, kind, sign| {
            let at = table.at[place];
            Task { kind, pair, from: at, to: at, sign, placed: true }
        };
        match before {
            None if node > 0 => tasks.push(place(0, MeetingKind::Touching, here)),
            Some((from, was)) if node > from + 1 => {
                let kind = if was == here { MeetingKind::Touching } else { MeetingKind::Crossing };
                tasks.push(place((from + node) / 2, kind, was));
            }
            Some((from, was)) if was != here => tasks.push(Task {
                kind: MeetingKind::Crossing,
                pair,
                from: table.at[from],
                to: table.at[node],
                sign: was,
                placed: false,
            }),
            _ => {}
        }
        before = Some((node, here));
    }
    if let Some((from, was)) = before
        && from < last
    {
        let at = table.at[last];
        tasks.push(Task { kind: MeetingKind::Touching, pair, from: at, to: at, sign: was, placed: true });
    }
    minima(table, pair, 1e-2, MeetingKind::Touching, tasks);
}

/// Inner minima of the absolute gap that stay on one side.
fn minima(table: &Table, pair: (usize, usize), bound: f64, kind: MeetingKind, tasks: &mut Vec<Task>) {
    for node in 1..table.at.len() - 1 {
        let gaps = [node - 1, node, node + 1].map(|k| table.gap(k, pair));
        let [a, b, c] = gaps.map(f64::abs);
        let one_side = gaps[0] * gaps[1] > 0.0 && gaps[1] * gaps[2] > 0.0;
        // The value between nodes can be lower than at the node itself.
        let lowest = b - (a - b).max(c - b);
        let clear = kind == MeetingKind::Avoided || b > ZERO_EV;
        if one_side && clear && b < a && b <= c && lowest < bound {
            tasks.push(Task {
                kind,
                pair,
                from: table.at[node - 1],
                to: table.at[node + 1],
                sign: gaps[1].signum(),
                placed: false,
            });
        }
    }
}

impl Task {
    fn refine<M: LevelModel>(&self, model: &M, room: &mut M::Room) -> Result<Option<Meeting>, M::Error> {
        let columns = model.classes().len();
        let mut solve = |at: &[f64]| -> Result<Vec<(f64, f64)>, M::Error> {
            let mut out = vec![0.0; at.len() * columns];
            model.energies(room, at, &mut out)?;
            let of = |row: &[f64]| {
                let (a, b) = (row[self.pair.0], row[self.pair.1]);
                (self.sign * (b - a), 0.5 * (a + b))
            };
            Ok(out.chunks_exact(columns).map(of).collect())
        };
        let at = if self.placed {
            self.from
        } else if self.kind == MeetingKind::Crossing {
            root(self.from, self.to, &mut solve)?
        } else {
            minimum(self.from, self.to, &mut solve)?
        };
        let (gap, energy) = solve(&[at])?[0];
        let kept = match self.kind {
            MeetingKind::Crossing => true,
            MeetingKind::Avoided => gap < AVOIDED_GAP_EV,
            MeetingKind::Touching => gap.abs() < TOUCHING_EV,
        };
        let columns = if self.sign < 0.0 { (self.pair.1, self.pair.0) } else { self.pair };
        let gap = if self.kind == MeetingKind::Avoided { gap } else { 0.0 };
        Ok(kept.then_some(Meeting { kind: self.kind, columns, at, energy, gap }))
    }
}

/// Arguments inside an interval and what is there.
fn inside(from: f64, to: f64) -> [f64; BATCH - 1] {
    std::array::from_fn(|k| from + (to - from) * (k + 1) as f64 / BATCH as f64)
}

/// The zero of a value that is positive at `from` and negative at `to`.
fn root<E>(
    mut from: f64,
    mut to: f64,
    solve: &mut impl FnMut(&[f64]) -> Result<Vec<(f64, f64)>, E>,
) -> Result<f64, E> {
    for _ in 0..ROOT_ROUNDS {
        let at = inside(from, to);
        let values = solve(&at)?;
        let place = values.iter().position(|value| value.0 <= 0.0).unwrap_or(at.len());
        let low = if place == 0 { from } else { at[place - 1] };
        to = if place == at.len() { to } else { at[place] };
        from = low;
    }
    let ends = solve(&[from, to])?;
    let fall = ends[0].0 - ends[1].0;
    let share = if fall > 0.0 { (ends[0].0 / fall).clamp(0.0, 1.0) } else { 0.5 };
    Ok(from + (to - from) * share)
}

/// The place of the smallest value in an interval with one minimum.
fn minimum<E>(
    mut from: f64,
    mut to: f64,
    solve: &mut impl FnMut(&[f64]) -> Result<Vec<(f64, f64)>, E>,
) -> Result<f64, E> {
    for _ in 0..MINIMUM_ROUNDS {
        let at = inside(from, to);
        let values = solve(&at)?;
        let mut best = 0;
        for k in 1..at.len() {
            if values[k].0.abs() < values[best].0.abs() {
                best = k;
            }
        }
        let low = if best == 0 { from } else { at[best - 1] };
        to = if best + 1 == at.len() { to } else { at[best + 1] };
        from = low;
    }
    Ok(0.5 * (from + to))
}
