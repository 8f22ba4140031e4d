//! Coordinates applied one after the other to the start geometry.

use super::Axis;
use super::motion::{Frame, Motion};
use super::partners::Motions;
use crate::coordinate::{Coordinate, CoordinateKind};
use crate::measure::{angle_degrees, torsion_degrees};
use crate::molecule::Molecule;
use crate::vector::distance;

/// Values must be reached to this (degree or Å) before the rounds end.
const REACHED: f64 = 2e-11;
/// Rounds over coordinates that disturb one another.
const ROUNDS: usize = 80;

/// Where and why positions could not be set.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Stop {
    pub(crate) coordinate: usize,
    pub(crate) reason: Reason,
}

#[derive(Clone, Copy, Debug)]
pub(crate) enum Reason {
    InLine([usize; 3]),
    Missed { reached: f64, wanted: f64 },
}

/// The motions of all coordinates on one start geometry.
#[derive(Clone, Debug)]
pub(crate) struct Sequence {
    base: Vec<[f64; 3]>,
    /// Frames of the first coordinate, which always acts on `base`.
    first: Vec<Frame>,
    steps: Vec<Step>,
    /// Values of all coordinates at the points of the only axis, where they
    /// move in step; `None` where each coordinate has an axis.
    rows: Option<Vec<Vec<f64>>>,
    /// Whether the coordinates disturb one another.
    rounds: bool,
}

#[derive(Clone, Debug)]
struct Step {
    kind: CoordinateKind,
    motions: Vec<Motion>,
    measured: Vec<Vec<usize>>,
    partners: Vec<Vec<usize>>,
}

impl Sequence {
    pub(crate) fn new(
        molecule: &Molecule,
        coordinates: &[Coordinate],
        motions: Vec<Motions>,
        rows: Option<Vec<Vec<f64>>>,
    ) -> Result<Self, Stop> {
        let steps: Vec<Step> = coordinates
            .iter()
            .zip(motions)
            .map(|(coordinate, found)| Step {
                kind: coordinate.kind,
                measured: found.list.iter().map(Motion::measured_atoms).collect(),
                motions: found.list,
                partners: found.partners,
            })
            .collect();
        let frames = |step: &Step| -> Result<Vec<Frame>, Stop> {
            let frames = step
                .motions
                .iter()
                .map(|motion| motion.frame(&molecule.positions));
            frames.collect::<Result<_, _>>().map_err(|line| Stop {
                coordinate: 0,
                reason: Reason::InLine(line.0),
            })
        };
        let first = steps.first().map_or(Ok(Vec::new()), frames)?;
        Ok(Self {
            base: molecule.positions.clone(),
            first,
            steps,
            rows,
            rounds: false,
        })
    }

    pub(crate) fn partners(&self) -> Vec<Vec<Vec<usize>>> {
        self.steps
            .iter()
            .map(|step| step.partners.clone())
            .collect()
    }

    /// Greatest distance (Å) that an atom moves per unit of coordinate `index`,
    /// for the arm lengths at `positions`, from above.
    pub(crate) fn speed(&self, index: usize, positions: &[[f64; 3]]) -> f64 {
        let step = &self.steps[index];
        if step.kind == CoordinateKind::Stretch {
            return 1.0;
        }
        let mut reach: f64 = 0.0;
        for motion in &step.motions {
            let pivot = positions[match motion {
                Motion::Bend { atoms, .. } => atoms[1],
                Motion::Twist { atoms, .. } => atoms[1],
                Motion::Stretch { atoms, .. } => atoms[0],
                Motion::Pyramid { centre, .. } => *centre,
            }];
            for atom in motion.moving() {
                reach = reach.max(distance(pivot, positions[atom]));
            }
        }
        reach * crate::units::DEGREE_IN_RADIANS
    }

    /// Value of the first coordinate, and its derivative with respect to the parameter.
    pub(crate) fn rate(&self, axes: &[Axis], value: f64) -> (f64, f64) {
        let Some(rows) = &self.rows else {
            return (value, 1.0);
        };
        let row = Row::find(&axes[0].values, rows, value);
        let width = self
            .piece(axes, value)
            .map_or(1.0, |(low, high)| high - low);
        (row.value(0), (row.high[0] - row.low[0]) / width)
    }

    /// The ends of the piece of a table's path that holds a value of its parameter.
    pub(crate) fn piece(&self, axes: &[Axis], value: f64) -> Option<(f64, f64)> {
        self.rows.as_ref()?;
        let parameters = &axes[0].values;
        let (index, _) = segment(parameters, value);
        Some((parameters[index], parameters[index + 1]))
    }

    /// Derivatives of the positions with respect to the only coordinate; false where they are
    /// infinite.
    pub(crate) fn speeds(&self, value: f64, out: &mut [[f64; 3]]) -> bool {
        let mut positions = self.base.clone();
        out.fill([0.0; 3]);
        self.steps[0]
            .motions
            .iter()
            .zip(&self.first)
            .all(|(motion, frame)| motion.apply_with_speeds(frame, value, &mut positions, out))
    }

    /// Number of coordinates.
    pub(crate) fn len(&self) -> usize {
        self.steps.len()
    }

    pub(crate) fn let_them_settle(&mut self) {
        self.rounds = true;
    }

    pub(crate) fn positions(
        &self,
        axes: &[Axis],
        values: &[f64],
        out: &mut [[f64; 3]],
    ) -> Result<(), Stop> {
        out.copy_from_slice(&self.base);
        let row = self
            .rows
            .as_ref()
            .map(|rows| Row::find(&axes[0].values, rows, values[0]));
        let value = |index: usize| match &row {
            Some(row) => row.value(index),
            None => values[index],
        };
        for (motion, frame) in self.steps[0].motions.iter().zip(&self.first) {
            motion.apply(frame, value(0), out);
        }
        for index in 1..self.steps.len() {
            self.set(index, value(index), out)?;
        }
        if !self.rounds {
            return Ok(());
        }
        let mut missed = self.missed(&value, out);
        for _ in 0..ROUNDS {
            if missed.is_none() {
                return Ok(());
            }
            for index in 0..self.steps.len() {
                self.set(index, value(index), out)?;
            }
            missed = self.missed(&value, out);
        }
        missed.map_or(Ok(()), Err)
    }

    /// The first coordinate that does not have its value at these positions.
    pub(crate) fn check_reached(
        &self,
        axes: &[Axis],
        values: &[f64],
        out: &[[f64; 3]],
    ) -> Option<Stop> {
        let row = self
            .rows
            .as_ref()
            .map(|rows| Row::find(&axes[0].values, rows, values[0]));
        let value = |index: usize| match &row {
            Some(row) => row.value(index),
            None => values[index],
        };
        self.missed(&value, out)
    }

    fn set(&self, index: usize, value: f64, out: &mut [[f64; 3]]) -> Result<(), Stop> {
        for motion in &self.steps[index].motions {
            let frame = motion.frame(out).map_err(|line| Stop {
                coordinate: index,
                reason: Reason::InLine(line.0),
            })?;
            motion.apply(&frame, value, out);
        }
        Ok(())
    }

    fn missed(&self, value: &dyn Fn(usize) -> f64, out: &[[f64; 3]]) -> Option<Stop> {
        for (coordinate, step) in self.steps.iter().enumerate() {
            for (motion, atoms) in step.motions.iter().zip(&step.measured) {
                let wanted = motion.sign() * value(coordinate);
                let reached = worst_value(step.kind, atoms, wanted, out);
                let off = match reached {
                    Some(reached) => deviation(step.kind, reached, wanted),
                    None => f64::INFINITY,
                };
                if off > REACHED {
                    return Some(Stop {
                        coordinate,
                        reason: Reason::Missed {
                            reached: reached.unwrap_or(f64::NAN),
                            wanted,
                        },
                    });
                }
            }
        }
        None
    }
}

/// Difference of two values; torsions are compared modulo 360°.
fn deviation(kind: CoordinateKind, reached: f64, wanted: f64) -> f64 {
    let difference = reached - wanted;
    if kind == CoordinateKind::Twist {
        (difference - 360.0 * (difference / 360.0).round()).abs()
    } else {
        difference.abs()
    }
}

/// The measured value; of the three angles of a pyramid the one farthest off.
fn worst_value(kind: CoordinateKind, atoms: &[usize], wanted: f64, at: &[[f64; 3]]) -> Option<f64> {
    let p = |index: usize| at[atoms[index]];
    match kind {
        CoordinateKind::Stretch => Some(distance(p(0), p(1))),
        CoordinateKind::Bend => angle_degrees(p(0), p(1), p(2)),
        CoordinateKind::Twist => torsion_degrees(p(0), p(1), p(2), p(3)),
        CoordinateKind::Pyramid => {
            let mut worst = angle_degrees(p(1), p(0), p(2))?;
            for other in [
                angle_degrees(p(2), p(0), p(3))?,
                angle_degrees(p(3), p(0), p(1))?,
            ] {
                if (other - wanted).abs() > (worst - wanted).abs() {
                    worst = other;
                }
            }
            Some(worst)
        }
    }
}

/// Two neighbouring rows of a table and the place between them.
struct Row<'a> {
    low: &'a [f64],
    high: &'a [f64],
    fraction: f64,
}

impl<'a> Row<'a> {
    fn find(parameters: &[f64], rows: &'a [Vec<f64>], value: f64) -> Self {
        let (index, fraction) = segment(parameters, value);
        Self {
            low: &rows[index],
            high: &rows[index + 1],
            fraction,
        }
    }

    /// Exact at both rows.
    fn value(&self, column: usize) -> f64 {
        between(self.low[column], self.high[column], self.fraction)
    }
}

/// `low` at 0 and `high` at 1, exactly.
pub(crate) fn between(low: f64, high: f64, fraction: f64) -> f64 {
    if fraction >= 1.0 {
        return high;
    }
    low + (high - low) * fraction
}

/// The interval of a rising or falling list (two values or more) that holds
/// `value`, and the place in it from 0 to 1.
pub(crate) fn segment(parameters: &[f64], value: f64) -> (usize, f64) {
    let rising = parameters[0] < parameters[parameters.len() - 1];
    let before = |x: f64| if rising { x < value } else { x > value };
    let index = parameters.partition_point(|&x| before(x));
    let index = index.clamp(1, parameters.len() - 1) - 1;
    let (low, high) = (parameters[index], parameters[index + 1]);
    (index, ((value - low) / (high - low)).clamp(0.0, 1.0))
}
