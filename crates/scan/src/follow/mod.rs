//! Lines followed by their character instead of their energy order.

mod check;

use crate::crossing::{Crossing, MeetingKind};
use crate::error::ScanError;
use crate::plan::SweepPlan;
use crate::sweep::Sweep;

/// An assignment whose squared overlaps all exceed this is the only one that
/// does: the squares of a row or column sum to one at most.
pub const CLEAR_OVERLAP: f64 = 0.5;
/// Two lines of one irrep change places where they exchange at least this share
/// of their character; up to one minus this they keep their places, and between
/// the two nothing is decided.
pub const CLEAR_EXCHANGE: f64 = 0.6;

/// A stretch of the path and what the overlap of orbitals says there.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Evidence {
    /// First value of the path.
    pub from: f64,
    /// Last value of the path.
    pub to: f64,
    /// Squared overlap of the assignment there, 0 to 1.
    pub overlap: f64,
}

/// One orbital character from the first point to the last.
#[derive(Clone, Debug, PartialEq)]
pub struct Followed {
    /// The line (energy order within its irrep) that has it at each point; at
    /// the first point the line of the same number.
    pub lines: Vec<usize>,
    /// Smallest squared overlap of neighbouring orbitals, 0 to 1; `None` where
    /// the symmetry of the path leaves no question and nothing was compared.
    pub overlap: Option<f64>,
    /// Avoided crossings in which it passes to the other line.
    pub exchanges: Vec<Evidence>,
    /// Stretches where it is not clear; the energy order is kept there.
    pub ambiguous: Vec<Evidence>,
}

/// What an avoided crossing means for two sets of lines.
#[derive(Clone, Copy, Debug)]
struct Event {
    at: f64,
    block: usize,
    /// Sets within the irrep, from the lowest.
    positions: (usize, usize),
    between: Evidence,
    passes: bool,
}

impl Event {
    fn of(plan: &SweepPlan, crossing: &Crossing) -> Option<Self> {
        let exchange = crossing.exchange?;
        if crossing.kind != MeetingKind::Avoided || exchange <= 1.0 - CLEAR_EXCHANGE {
            return None;
        }
        let (a, b) = (&plan.lines[crossing.lines.0], &plan.lines[crossing.lines.1]);
        let (from, to) = crossing.exchanged_between?;
        Some(Self {
            at: crossing.at,
            block: a.block,
            positions: (a.position, b.position),
            between: Evidence {
                from,
                to,
                overlap: exchange,
            },
            passes: exchange >= CLEAR_EXCHANGE,
        })
    }

    /// The line on the other side, where `line` is one of the two.
    fn partner(&self, plan: &SweepPlan, line: usize) -> Option<usize> {
        let head = &plan.lines[line];
        if head.block != self.block {
            return None;
        }
        let other = match head.position {
            p if p == self.positions.0 => self.positions.1,
            p if p == self.positions.1 => self.positions.0,
            _ => return None,
        };
        // A set stays together: the same row of it, or in a paired block the
        // same of its places.
        let size = plan.adapted.blocks[head.block].levels_per_set();
        let place = other * size + head.place % size;
        plan.lines.iter().position(|line| {
            line.block == head.block && line.row == head.row && line.place == place
        })
    }
}

impl Sweep {
    /// Follows the character of every line. Between irreps of the path group
    /// nothing can be exchanged, so a character stays in its irrep, also
    /// through points of higher symmetry where irreps join in one set; within
    /// an irrep it passes to the other line at every avoided crossing of
    /// `crossings` (those of [`Sweep::crossings`]) that exchanges more than
    /// [`CLEAR_EXCHANGE`], and where the share is near one half the stretch is
    /// declared ambiguous. Avoided crossings are found on the model itself, so
    /// the result does not depend on the step. Degenerate sets pass as sets.
    ///
    /// With a path group of order 2 or less, the orbitals of neighbouring nodes
    /// of the path are compared too (orthogonalised functions, see Löwdin
    /// 1950) and assigned by the method of Kuhn and Munkres (J. SIAM 5, 32
    /// (1957)); an interval whose assignment is not clear is halved, up to six
    /// times, and then declared ambiguous. Empty for a grid or a single
    /// geometry.
    ///
    /// # Errors
    /// A geometry that cannot be solved.
    pub fn followed(&self, crossings: &[Crossing]) -> Result<Vec<Followed>, ScanError> {
        let plan = self.plan();
        let [axis] = plan.path.axes() else {
            return Ok(Vec::new());
        };
        let values = plan.parameters(&axis.values);
        let rising = values.first() < values.last();
        let behind = |at: f64, value: f64| if rising { at <= value } else { at >= value };
        let events: Vec<Event> = crossings
            .iter()
            .filter_map(|crossing| Event::of(plan, crossing))
            .collect();
        let checks = check::checks(plan, axis, &values, &events)?;
        let pass = |followed: &mut Followed, now: &mut usize, next: &mut usize, value: f64| {
            while let Some(event) = events.get(*next)
                && behind(event.at, value)
            {
                match event.partner(plan, *now) {
                    Some(partner) if event.passes => {
                        followed.exchanges.push(event.between);
                        *now = partner;
                    }
                    Some(_) => followed.ambiguous.push(event.between),
                    None => {}
                }
                *next += 1;
            }
        };
        Ok((0..plan.lines.len())
            .map(|line| {
                let mut followed = Followed {
                    lines: Vec::with_capacity(values.len()),
                    overlap: None,
                    exchanges: Vec::new(),
                    ambiguous: Vec::new(),
                };
                let (mut now, mut next, mut check) = (line, 0, 0);
                for &value in values.iter() {
                    while let Some(interval) = checks.get(check)
                        && behind(interval.to, value)
                    {
                        let least = followed.overlap.unwrap_or(1.0);
                        followed.overlap = Some(least.min(interval.overlap[now]));
                        followed.ambiguous.extend(&interval.ambiguous[now]);
                        pass(&mut followed, &mut now, &mut next, interval.to);
                        check += 1;
                    }
                    pass(&mut followed, &mut now, &mut next, value);
                    followed.lines.push(now);
                }
                followed
            })
            .collect())
    }
}
