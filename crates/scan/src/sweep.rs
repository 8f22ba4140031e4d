//! A sweep that has run: energies of every line at every point, and the points
//! that are more symmetric than the path.

use std::collections::BTreeMap;

use ndarray::Array2;
use rayon::prelude::*;

use crate::error::ScanError;
use crate::naming::Name;
use crate::orbitals::Orbitals;
use crate::plan::SweepPlan;
use crate::point_levels::PointLevels;
use crate::solve::{Rows, Workspace};
use crate::special::{SpecialPoint, label_in_own_group};

/// Points per task: long enough (tens of microseconds) to hide the hand-over,
/// fixed so that the same points share lanes for every number of threads.
const CHUNK: usize = 128;

/// A sweep and its plan.
#[derive(Debug)]
pub struct Sweep {
    plan: SweepPlan,
    /// `points × slots`, eV.
    energies: Array2<f64>,
    smallest: Vec<f64>,
    special: BTreeMap<usize, SpecialPoint>,
}

/// One orbital at one geometry.
#[derive(Clone, Debug, PartialEq)]
pub struct Level {
    /// Energy, eV.
    pub energy: f64,
    /// Electrons, 0 to 2.
    pub occupation: f64,
    /// The line that this level is a point of.
    pub line: usize,
    /// Size of the degenerate set in the point's own group.
    pub degeneracy: usize,
    /// Name in the point's own group.
    pub full_name: Name,
}

/// One geometry with all its levels, by rising energy.
#[derive(Clone, Debug, PartialEq)]
pub struct Point {
    /// Coordinate values, degrees or Å.
    pub at: Vec<f64>,
    /// Positions, Å.
    pub positions: Vec<[f64; 3]>,
    /// Schoenflies symbol of the point's own group, plain.
    pub point_group: String,
    /// Σ nᵢεᵢ, eV.
    pub sum: f64,
    /// Smallest eigenvalue of S.
    pub smallest_overlap_eigenvalue: f64,
    /// The levels.
    pub levels: Vec<Level>,
}

impl Sweep {
    /// Runs a plan on the caller's rayon pool; the result does not depend on
    /// the number of threads.
    ///
    /// # Errors
    /// A point that cannot be solved, named by its coordinate values.
    pub fn run(plan: SweepPlan) -> Result<Self, ScanError> {
        let points = plan.points();
        let slots = plan.slots();
        let mut energies = vec![0.0; points * slots];
        let mut smallest = vec![0.0; points];
        let mut flagged = vec![false; points];
        let outcomes: Vec<Result<(), ScanError>> = energies
            .par_chunks_mut(CHUNK * slots)
            .zip(smallest.par_chunks_mut(CHUNK))
            .zip(flagged.par_chunks_mut(CHUNK))
            .enumerate()
            .map_init(
                || Workspace::new(&plan),
                |workspace, (chunk, ((energies, smallest), special))| {
                    let mut rows = Rows {
                        energies,
                        smallest,
                        special,
                    };
                    plan.solve_rows(chunk * CHUNK, &mut rows, workspace)
                },
            )
            .collect();
        outcomes.into_iter().collect::<Result<(), _>>()?;
        let energies = Array2::from_shape_vec((points, slots), energies).map_err(|error| {
            ScanError::Eigen {
                at: "the table".into(),
                cause: error.to_string(),
            }
        })?;
        let flagged: Vec<usize> = (0..points).filter(|&point| flagged[point]).collect();
        let special = flagged
            .into_par_iter()
            .map(|point| Ok((point, label_in_own_group(&plan, point)?)))
            .collect::<Result<Vec<_>, ScanError>>()?
            .into_iter()
            .filter_map(|(point, special)| special.map(|special| (point, special)))
            .collect();
        Ok(Self {
            plan,
            energies,
            smallest,
            special,
        })
    }

    /// The plan that was run.
    pub fn plan(&self) -> &SweepPlan {
        &self.plan
    }

    /// Number of points.
    pub fn points(&self) -> usize {
        self.smallest.len()
    }

    /// Energy of a line at a point, eV.
    pub fn energy(&self, line: usize, point: usize) -> f64 {
        self.energies[[point, self.plan.lines[line].slot]]
    }

    /// Energies of a line at every point, eV.
    pub fn line_energies(&self, line: usize) -> Vec<f64> {
        self.energies.column(self.plan.lines[line].slot).to_vec()
    }

    /// What is special about a point, where its own group is larger than the
    /// path group.
    pub fn special(&self, point: usize) -> Option<&SpecialPoint> {
        self.special.get(&point)
    }

    /// All points whose own group is larger than the path group.
    pub fn special_points(&self) -> impl Iterator<Item = (usize, &SpecialPoint)> {
        self.special
            .iter()
            .map(|(&point, special)| (point, special))
    }

    /// Σ nᵢεᵢ at a point, eV.
    pub fn sum(&self, point: usize) -> f64 {
        self.levels_at(point).sum
    }

    /// Name of a line in the point's own group, and the size of its set there.
    pub fn full_name(&self, line: usize, point: usize) -> (&Name, usize) {
        match self.special.get(&point) {
            Some(special) => (&special.names[line].0, special.names[line].1),
            None => (
                &self.plan.lines[line].name,
                self.plan.lines[line].degeneracy,
            ),
        }
    }

    /// Everything about one point.
    ///
    /// # Errors
    /// None for a sweep that has run; the path is asked for positions again.
    pub fn point(&self, point: usize) -> Result<Point, ScanError> {
        let plan = &self.plan;
        let at = plan.values(point);
        let mut positions = vec![[0.0; 3]; plan.molecule.positions.len()];
        plan.path.positions(&at, &mut positions)?;
        let found = self.levels_at(point);
        let levels = found
            .order
            .iter()
            .map(|&line| {
                let (name, degeneracy) = self.full_name(line, point);
                Level {
                    energy: found.energies[line],
                    occupation: found.occupations[line],
                    line,
                    degeneracy,
                    full_name: name.clone(),
                }
            })
            .collect();
        Ok(Point {
            at,
            positions,
            point_group: self.point_group(point).to_owned(),
            sum: found.sum,
            smallest_overlap_eigenvalue: self.smallest[point],
            levels,
        })
    }

    /// Coefficients of all lines at a point.
    ///
    /// # Errors
    /// As for the run itself.
    pub fn orbitals(&self, point: usize) -> Result<Orbitals, ScanError> {
        self.plan.orbitals(&self.plan.values(point))
    }

    /// Schoenflies symbol of a point's own group, plain.
    pub fn point_group(&self, point: usize) -> &str {
        self.special
            .get(&point)
            .map_or(&self.plan.group.name, |special| &special.group)
    }

    fn levels_at(&self, point: usize) -> PointLevels {
        let mut levels = PointLevels::new(&self.plan);
        let row = self.energies.row(point);
        levels.fill(&self.plan, |slot| row[slot]);
        levels
    }
}
