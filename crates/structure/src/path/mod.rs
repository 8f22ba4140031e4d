//! Paths: every geometry between two ends, from a few numbers.

mod align;
mod check;
mod error;
mod frames;
mod matching;
mod motion;
mod partners;
mod sequence;
mod speed;
#[cfg(test)]
mod tests;
mod toward;
#[cfg(test)]
mod toward_tests;

pub use align::{Alignment, align, rotation_of_form};
pub use error::PathError;
pub use frames::FrameValues;
pub use toward::TowardReport;

use crate::bonds::BondGraph;
use crate::coordinate::Coordinate;
use crate::molecule::Molecule;
use crate::range::LARGEST_POINT_COUNT;
use frames::FramePath;
use partners::Setting;
use sequence::Sequence;

/// One independent parameter of a path and its values.
#[derive(Clone, Debug, PartialEq)]
pub struct Axis {
    /// What it is: `"bend 2-1-3"`, `"frame"`, `"path"`.
    pub name: String,
    /// Unit of the values: `"degree"`, `"angstrom"`, or `"1"` for a bare number.
    pub unit: String,
    /// The values of the points, rising or falling.
    pub values: Vec<f64>,
}

impl Axis {
    fn of(coordinate: &Coordinate) -> Self {
        Self {
            name: coordinate.name(),
            unit: coordinate.kind.unit().to_string(),
            values: coordinate.range.values(),
        }
    }

    /// The smallest and the largest value.
    pub fn limits(&self) -> (f64, f64) {
        let first = self.values.first().copied().unwrap_or(0.0);
        let last = self.values.last().copied().unwrap_or(0.0);
        (first.min(last), first.max(last))
    }
}

/// A path: all that does not change along it is worked out once, so that a
/// geometry costs no allocation.
///
/// Motions keep the symmetry elements of the start fixed in space: where an
/// operation exchanges the two arms of a bend, the two ends of a stretch or of
/// a twist, both move by half.
#[derive(Clone, Debug)]
pub struct PathPlan {
    start: Molecule,
    axes: Vec<Axis>,
    coordinates: Vec<Coordinate>,
    shape: Shape,
    described: String,
}

#[derive(Clone, Debug)]
enum Shape {
    Fixed,
    Internal(Sequence),
    Frames(FramePath),
}

impl PathPlan {
    /// A path along one coordinate, or a grid over several: the first one is
    /// the slowest, each acts on the geometry that those before it have set,
    /// and all values are reached at once.
    ///
    /// `equivalences` are the atom permutations of the symmetry operations of
    /// `molecule` (`p[i]` is the atom that atom i is carried to; the identity
    /// may be missing): partners that are equivalent by them move along.
    ///
    /// # Errors
    /// A coordinate that is undefined anywhere on the grid, a ring bond, atoms
    /// that are not bonded or do not exist, two atoms closer than 0.2 Å
    /// anywhere on the path, coordinates that cannot have their values at
    /// once, more than 10 million points.
    pub fn new(
        molecule: &Molecule,
        coordinates: &[Coordinate],
        equivalences: &[Vec<usize>],
    ) -> Result<Self, PathError> {
        let axes = coordinates.iter().map(Axis::of).collect();
        let mut plan = Self::internal(molecule, coordinates, equivalences, axes, None)?;
        check::check(&mut plan)?;
        Ok(plan)
    }

    /// A single geometry: one point, no axis.
    ///
    /// # Errors
    /// A geometry that is not usable.
    pub fn fixed(molecule: &Molecule) -> Result<Self, PathError> {
        molecule.check()?;
        Ok(Self {
            start: molecule.clone(),
            axes: Vec::new(),
            coordinates: Vec::new(),
            shape: Shape::Fixed,
            described: String::new(),
        })
    }

    /// A path along which several coordinates move in step: its parameter is
    /// the value of the first one, and the others take their values in
    /// proportion. All must have the same number of points.
    ///
    /// # Errors
    /// As [`PathPlan::new`]; different numbers of points.
    pub fn together(
        molecule: &Molecule,
        coordinates: &[Coordinate],
        equivalences: &[Vec<usize>],
    ) -> Result<Self, PathError> {
        let Some(first) = coordinates.first() else {
            return Err(PathError::NoCoordinate);
        };
        for other in coordinates {
            if other.range.points() != first.range.points() {
                return Err(PathError::PointCounts {
                    coordinate: other.name(),
                    points: other.range.points(),
                    other: first.name(),
                    other_points: first.range.points(),
                });
            }
        }
        let rows: Vec<Vec<f64>> = (0..first.range.points())
            .map(|i| coordinates.iter().map(|c| c.range.value(i)).collect())
            .collect();
        let axes = vec![Axis::of(first)];
        let mut plan = Self::internal(molecule, coordinates, equivalences, axes, Some(rows))?;
        check::check(&mut plan)?;
        Ok(plan)
    }

    /// A path through a table of values, one row per point and one column per
    /// coordinate (whose own ranges are ignored); straight lines between the
    /// rows. The parameter is the first coordinate where its column rises or
    /// falls strictly, otherwise the number of the row from 1.
    ///
    /// # Errors
    /// As [`PathPlan::new`]; fewer than two rows, a row of another length, a
    /// value that its coordinate cannot have.
    pub fn following(
        molecule: &Molecule,
        coordinates: &[Coordinate],
        rows: &[Vec<f64>],
        equivalences: &[Vec<usize>],
    ) -> Result<Self, PathError> {
        let Some(first) = coordinates.first() else {
            return Err(PathError::NoCoordinate);
        };
        let refused = |frame: usize, cause: String, fix: &str| PathError::Frame {
            frame,
            cause,
            fix: fix.into(),
        };
        if rows.len() < 2 {
            let cause = format!("the table has {} rows", rows.len());
            return Err(refused(rows.len(), cause, "give at least two"));
        }
        for (index, row) in rows.iter().enumerate() {
            if row.len() != coordinates.len() {
                let cause = format!("the row has {} values", row.len());
                let fix = format!("give one for each of the {} coordinates", coordinates.len());
                return Err(refused(index + 1, cause, &fix));
            }
            for (coordinate, &value) in coordinates.iter().zip(row) {
                crate::coordinate::check_value(coordinate.kind, value).map_err(
                    |(cause, fix)| {
                        refused(index + 1, format!("{}: {cause}", coordinate.name()), &fix)
                    },
                )?;
            }
        }
        let column: Vec<f64> = rows.iter().map(|row| row[0]).collect();
        let axis = if is_monotonic(&column) {
            Axis {
                name: first.name(),
                unit: first.kind.unit().to_string(),
                values: column,
            }
        } else {
            Axis {
                name: "row".into(),
                unit: "1".into(),
                values: (1..=rows.len()).map(|i| i as f64).collect(),
            }
        };
        let rows = Some(rows.to_vec());
        let mut plan = Self::internal(molecule, coordinates, equivalences, vec![axis], rows)?;
        check::check(&mut plan)?;
        Ok(plan)
    }

    /// A path through given geometries, each turned and shifted onto the one
    /// before it; straight lines between them. The given geometries are
    /// points of the path.
    ///
    /// # Errors
    /// Fewer than two frames, other atoms or charge in a frame, values that
    /// neither rise nor fall, two atoms closer than 0.2 Å between two frames.
    pub fn frames(frames: &[Molecule], values: &FrameValues) -> Result<Self, PathError> {
        let (path, axis) = FramePath::new(frames, values)?;
        let described = format!(
            "{} given geometries, straight lines between them",
            frames.len()
        );
        Ok(Self::through(frames[0].clone(), axis, path, described))
    }

    fn through(start: Molecule, axis: Axis, path: FramePath, described: String) -> Self {
        Self {
            start,
            axes: vec![axis],
            coordinates: Vec::new(),
            shape: Shape::Frames(path),
            described,
        }
    }

    fn internal(
        molecule: &Molecule,
        coordinates: &[Coordinate],
        equivalences: &[Vec<usize>],
        axes: Vec<Axis>,
        rows: Option<Vec<Vec<f64>>>,
    ) -> Result<Self, PathError> {
        molecule.check()?;
        if coordinates.is_empty() {
            return Err(PathError::NoCoordinate);
        }
        let points: f64 = axes.iter().map(|axis| axis.values.len() as f64).product();
        if points > LARGEST_POINT_COUNT as f64 {
            return Err(PathError::TooManyPoints { points });
        }
        check_permutations(molecule, equivalences)?;
        let graph = BondGraph::new(molecule);
        let setting = Setting {
            molecule,
            graph: &graph,
            permutations: equivalences,
        };
        let mut motions = Vec::new();
        for coordinate in coordinates {
            // The fields are public: check what the constructor checks.
            let checked = Coordinate::new(
                coordinate.kind,
                coordinate.atoms.clone(),
                coordinate.range,
                coordinate.alone,
            )?;
            motions.push(setting.motions(&checked)?);
        }
        let lines: Vec<&str> = motions.iter().map(|m| m.described.as_str()).collect();
        let described = lines.join("\n");
        let sequence = Sequence::new(molecule, coordinates, motions, rows)
            .map_err(|stop| name_stop(&stop, molecule, coordinates, "the start geometry".into()))?;
        Ok(Self {
            start: molecule.clone(),
            axes,
            coordinates: coordinates.to_vec(),
            shape: Shape::Internal(sequence),
            described,
        })
    }

    /// The geometry the path was planned on (the first frame of given frames).
    pub fn start(&self) -> &Molecule {
        &self.start
    }

    /// The independent parameters, the slowest first.
    pub fn axes(&self) -> &[Axis] {
        &self.axes
    }

    /// The coordinates, as given; empty for a path through frames.
    pub fn coordinates(&self) -> &[Coordinate] {
        &self.coordinates
    }

    /// Number of points: the product over the axes.
    pub fn points(&self) -> usize {
        self.axes.iter().map(|axis| axis.values.len()).product()
    }

    /// Parameter values of point `point` (0-based), one per axis.
    pub fn values(&self, point: usize) -> Vec<f64> {
        let mut values = vec![0.0; self.axes.len()];
        let mut rest = point.min(self.points().saturating_sub(1));
        for (value, axis) in values.iter_mut().zip(&self.axes).rev() {
            *value = axis.values[rest % axis.values.len()];
            rest /= axis.values.len();
        }
        values
    }

    /// For each coordinate, the defining atoms (from 0) of the equivalent
    /// partners that move along.
    pub fn moved_along(&self) -> Vec<Vec<Vec<usize>>> {
        match &self.shape {
            Shape::Internal(sequence) => sequence.partners(),
            Shape::Fixed | Shape::Frames(_) => Vec::new(),
        }
    }

    /// What moves and what stays, one line per coordinate.
    pub fn describe(&self) -> &str {
        &self.described
    }

    /// The positions (Å) at any parameter values inside the path, one per
    /// axis. Does not allocate. The coordinates have their values to 1e-10
    /// (degree or Å); at the start of given frames the frame itself comes out.
    ///
    /// # Errors
    /// Values outside the axes, lists of the wrong length, a coordinate that
    /// is undefined there.
    pub fn positions(&self, values: &[f64], out: &mut [[f64; 3]]) -> Result<(), PathError> {
        if values.len() != self.axes.len() || out.len() != self.start.len() {
            return Err(self.wrong_shape(values.len(), out.len()));
        }
        for (&value, axis) in values.iter().zip(&self.axes) {
            let (low, high) = axis.limits();
            // 1e-9 lets a value through that was computed with rounding.
            if !(value >= low - 1e-9 && value <= high + 1e-9) {
                return Err(PathError::Outside {
                    axis: axis.name.clone(),
                    value,
                    from: low,
                    to: high,
                });
            }
        }
        match &self.shape {
            Shape::Internal(sequence) => sequence
                .positions(&self.axes, values, out)
                .map_err(|stop| self.name_stop(&stop, values)),
            Shape::Frames(path) => {
                path.positions(values[0], out);
                Ok(())
            }
            Shape::Fixed => {
                out.copy_from_slice(&self.start.positions);
                Ok(())
            }
        }
    }

    /// The molecule at these parameter values.
    ///
    /// # Errors
    /// As [`PathPlan::positions`].
    pub fn molecule(&self, values: &[f64]) -> Result<Molecule, PathError> {
        let mut molecule = self.start.clone();
        self.positions(values, &mut molecule.positions)?;
        Ok(molecule)
    }

    /// `"bend 2-1-3 = 104 degree"` for these values.
    pub fn place(&self, values: &[f64]) -> String {
        let words: Vec<String> = self
            .axes
            .iter()
            .zip(values)
            .map(|(axis, value)| {
                let unit = if axis.unit == "1" {
                    ""
                } else {
                    axis.unit.as_str()
                };
                let rounded = (value * 1e6).round() / 1e6;
                format!("{} = {rounded} {unit}", axis.name)
                    .trim_end()
                    .to_string()
            })
            .collect();
        words.join(", ")
    }

    fn wrong_shape(&self, values: usize, positions: usize) -> PathError {
        if values == self.axes.len() {
            PathError::Shape {
                what: "positions",
                given: positions,
                needed: self.start.len(),
            }
        } else {
            PathError::Shape {
                what: "values",
                given: values,
                needed: self.axes.len(),
            }
        }
    }

    fn name_stop(&self, stop: &sequence::Stop, values: &[f64]) -> PathError {
        name_stop(stop, &self.start, &self.coordinates, self.place(values))
    }
}

fn name_stop(
    stop: &sequence::Stop,
    molecule: &Molecule,
    coordinates: &[Coordinate],
    at: String,
) -> PathError {
    let coordinate = coordinates[stop.coordinate].name();
    match stop.reason {
        sequence::Reason::InLine([a, b, c]) => PathError::InLine {
            coordinate,
            at,
            first: molecule.atom_name(a),
            second: molecule.atom_name(b),
            third: molecule.atom_name(c),
        },
        sequence::Reason::Missed { reached, wanted } => PathError::NotIndependent {
            coordinate,
            value: reached,
            wanted,
            at,
        },
    }
}

/// Whether values rise or fall strictly.
fn is_monotonic(values: &[f64]) -> bool {
    values.windows(2).all(|w| w[0] < w[1]) || values.windows(2).all(|w| w[0] > w[1])
}

fn check_permutations(molecule: &Molecule, permutations: &[Vec<usize>]) -> Result<(), PathError> {
    let atoms = molecule.len();
    for (index, permutation) in permutations.iter().enumerate() {
        let mut seen = vec![false; atoms];
        let mut fits = permutation.len() == atoms;
        for (atom, &image) in permutation.iter().enumerate() {
            fits = fits
                && image < atoms
                && !seen[image]
                && molecule.elements[image] == molecule.elements[atom];
            if fits {
                seen[image] = true;
            }
        }
        if !fits {
            return Err(PathError::NotAPermutation {
                index: index + 1,
                atoms,
            });
        }
    }
    Ok(())
}
