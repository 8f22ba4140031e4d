//! A path through given geometries.

use super::align::align;
use super::error::PathError;
use super::sequence::{between, segment};
use super::{Axis, is_monotonic};
use crate::molecule::{Molecule, SMALLEST_DISTANCE};
use crate::vector::{Vector, add, distance, dot, norm, scale, subtract};

/// The parameter along given frames.
#[derive(Clone, Debug, PartialEq)]
pub enum FrameValues {
    /// The number of the frame, counted from 1.
    Number,
    /// A value for each frame, strictly rising or falling.
    Given {
        /// What it is.
        name: String,
        /// Its unit, `"1"` for a bare number.
        unit: String,
        /// One value per frame.
        values: Vec<f64>,
    },
}

#[derive(Clone, Debug)]
pub(crate) struct FramePath {
    values: Vec<f64>,
    frames: Vec<Vec<Vector>>,
    /// Cubic curves through the frames instead of straight lines.
    smooth: bool,
}

impl FramePath {
    pub(crate) fn new(
        frames: &[Molecule],
        values: &FrameValues,
    ) -> Result<(Self, Axis), PathError> {
        let refused = |frame: usize, cause: String, fix: &str| PathError::Frame {
            frame,
            cause,
            fix: fix.into(),
        };
        let [first, _, ..] = frames else {
            let cause = format!("a path needs at least two geometries, not {}", frames.len());
            return Err(refused(frames.len(), cause, "give more frames"));
        };
        let axis = match values {
            FrameValues::Number => Axis {
                name: "frame".into(),
                unit: "1".into(),
                values: (1..=frames.len()).map(|i| i as f64).collect(),
            },
            FrameValues::Given { name, unit, values } => Axis {
                name: name.clone(),
                unit: unit.clone(),
                values: values.clone(),
            },
        };
        if axis.values.len() != frames.len() {
            return Err(PathError::Shape {
                what: "frame values",
                given: axis.values.len(),
                needed: frames.len(),
            });
        }
        if !is_monotonic(&axis.values) || axis.values.iter().any(|x| !x.is_finite()) {
            let wrong = axis
                .values
                .windows(3)
                .position(|w| !is_monotonic(w))
                .unwrap_or(0)
                + 2;
            let cause = format!("the values of {} neither rise nor fall strictly", axis.name);
            return Err(refused(wrong, cause, "sort the frames or number them"));
        }
        let mut aligned: Vec<Vec<Vector>> = Vec::with_capacity(frames.len());
        for (index, frame) in frames.iter().enumerate() {
            frame.check()?;
            if frame.elements != first.elements {
                let cause = match (0..frame.len().min(first.len()))
                    .find(|&atom| frame.elements[atom] != first.elements[atom])
                {
                    Some(atom) => format!(
                        "atom {} is {}, but {} in the first frame",
                        atom + 1,
                        frame.elements[atom],
                        first.elements[atom]
                    ),
                    None => format!(
                        "{} atoms, but {} in the first frame",
                        frame.len(),
                        first.len()
                    ),
                };
                let fix = "all frames need the same atoms in the same order";
                return Err(refused(index + 1, cause, fix));
            }
            if frame.charge != first.charge {
                let cause = format!(
                    "charge {:+}, but {:+} in the first frame",
                    frame.charge, first.charge
                );
                return Err(refused(index + 1, cause, "give all frames the same charge"));
            }
            let placed = match aligned.last() {
                None => frame.positions.clone(),
                Some(previous) => laid_onto(&frame.positions, previous),
            };
            if let Some(previous) = aligned.last() {
                check_between(first, &axis, index, previous, &placed)?;
            }
            aligned.push(placed);
        }
        let path = Self {
            values: axis.values.clone(),
            frames: aligned,
            smooth: false,
        };
        Ok((path, axis))
    }

    /// Straight lines between frames that need no alignment.
    pub(crate) fn straight(values: Vec<f64>, frames: Vec<Vec<Vector>>) -> Self {
        Self {
            values,
            frames,
            smooth: false,
        }
    }

    /// A smooth curve through the frames.
    pub(crate) fn smooth(values: Vec<f64>, frames: Vec<Vec<Vector>>) -> Self {
        Self {
            values,
            frames,
            smooth: true,
        }
    }

    /// The derivative of the positions; at a frame that of the piece before it.
    pub(crate) fn speeds(&self, value: f64, out: &mut [[f64; 3]]) {
        let (index, t) = segment(&self.values, value);
        let width = self.values[index + 1] - self.values[index];
        let (low, high) = (&self.frames[index], &self.frames[index + 1]);
        let [first, last] = self.slopes(index);
        for (atom, speed) in out.iter_mut().enumerate() {
            for k in 0..3 {
                let (p, q) = (low[atom][k], high[atom][k]);
                speed[k] = if self.smooth {
                    let (a, b) = (first(atom, k), last(atom, k));
                    6.0 * t * (1.0 - t) * (q - p)
                        + (1.0 - t) * (1.0 - 3.0 * t) * a
                        + t * (3.0 * t - 2.0) * b
                } else {
                    q - p
                } / width;
            }
        }
    }

    pub(crate) fn positions(&self, value: f64, out: &mut [[f64; 3]]) {
        let (index, fraction) = segment(&self.values, value);
        let (low, high) = (&self.frames[index], &self.frames[index + 1]);
        let inside = fraction > 0.0 && fraction < 1.0;
        if !(self.smooth && inside) {
            for ((place, a), b) in out.iter_mut().zip(low).zip(high) {
                for k in 0..3 {
                    place[k] = between(a[k], b[k], fraction);
                }
            }
            return;
        }
        let [first, last] = self.slopes(index);
        let t = fraction;
        let (a0, a1) = (
            (1.0 + 2.0 * t) * (1.0 - t) * (1.0 - t),
            t * (1.0 - t) * (1.0 - t),
        );
        let (b0, b1) = (t * t * (3.0 - 2.0 * t), t * t * (t - 1.0));
        for (atom, place) in out.iter_mut().enumerate() {
            for k in 0..3 {
                let (p, q) = (low[atom][k], high[atom][k]);
                place[k] = a0 * p + a1 * first(atom, k) + b0 * q + b1 * last(atom, k);
            }
        }
    }
}

impl FramePath {
    /// Slopes of the cubic Hermite curve at both ends of piece `index`, by atom and axis, for a
    /// piece of width 1: central differences, one-sided at the ends of the path.
    fn slopes(&self, index: usize) -> [Box<dyn Fn(usize, usize) -> f64 + '_>; 2] {
        let (low, high) = (&self.frames[index], &self.frames[index + 1]);
        let width = self.values[index + 1] - self.values[index];
        let slope = |k: usize| width / (self.values[k + 1] - self.values[k - 1]);
        let straight = move |atom: usize, k: usize| high[atom][k] - low[atom][k];
        let first: Box<dyn Fn(usize, usize) -> f64> = match index.checked_sub(1) {
            Some(before) => {
                let (left, frame) = (slope(index), &self.frames[before]);
                Box::new(move |atom, k| left * (high[atom][k] - frame[atom][k]))
            }
            None => Box::new(straight),
        };
        let last: Box<dyn Fn(usize, usize) -> f64> = match self.frames.get(index + 2) {
            Some(frame) => {
                let right = slope(index + 1);
                Box::new(move |atom, k| right * (frame[atom][k] - low[atom][k]))
            }
            None => Box::new(straight),
        };
        [first, last]
    }
}

/// The frame turned onto the one before; left untouched where turning would
/// gain nothing, so that aligned input keeps its digits.
fn laid_onto(moved: &[Vector], target: &[Vector]) -> Vec<Vector> {
    let Some(alignment) = align(moved, target) else {
        return moved.to_vec();
    };
    let squares: f64 = moved
        .iter()
        .zip(target)
        .map(|(&a, &b)| distance(a, b) * distance(a, b))
        .sum();
    let before = (squares / moved.len() as f64).sqrt();
    if before - alignment.deviation < 1e-9 {
        return moved.to_vec();
    }
    moved.iter().map(|&point| alignment.apply(point)).collect()
}

/// Nearest approach of every pair on the straight lines between two frames.
pub(crate) fn check_between(
    molecule: &Molecule,
    axis: &Axis,
    index: usize,
    from: &[Vector],
    to: &[Vector],
) -> Result<(), PathError> {
    for second in 0..from.len() {
        for first in 0..second {
            let start = subtract(from[second], from[first]);
            let change = subtract(subtract(to[second], to[first]), start);
            let length = dot(change, change);
            let fraction = if length > 1e-18 {
                (-dot(start, change) / length).clamp(0.0, 1.0)
            } else {
                0.0
            };
            let apart = norm(add(start, scale(change, fraction)));
            if apart < SMALLEST_DISTANCE {
                let at = between(axis.values[index - 1], axis.values[index], fraction);
                return Err(PathError::Clash {
                    first: molecule.atom_name(first),
                    second: molecule.atom_name(second),
                    distance: apart,
                    at: format!("{} = {at:.3}", axis.name),
                });
            }
        }
    }
    Ok(())
}
