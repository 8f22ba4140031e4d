//! A plan per sweep: path, path group and axes, basis and pair list,
//! symmetry-adapted combinations and names, all fixed once.

use orbend_hamiltonian::{Basis, HamiltonianPlan};
use orbend_structure::{Element, FrameValues, Molecule, PathPlan};
use orbend_symmetry::{
    AdaptedBasis, GroupScreen, NearMiss, Nucleus, OrbitalShell, PointGroup, path_group, symmetrize,
};

use crate::error::ScanError;
use crate::filling::{Electrons, Filling};
use crate::line::{LineHead, line_heads};
use crate::naming::Name;
use crate::request::{Numbering, Request, Route};
use crate::solve::Workspace;

/// Atoms farther than this (Å) from their symmetric places are moved onto them
/// before anything is computed, and the document says by how much.
const EXACT_ANGSTROM: f64 = 1e-9;

/// Geometries looked at to find the path group.
const SAMPLES: usize = 64;

/// Something that a reader of the result should know.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Notice {
    /// A short plain name for scripts.
    pub code: &'static str,
    /// The sentence for people.
    pub text: String,
}

/// Everything about a sweep that does not change from point to point.
#[derive(Debug)]
pub struct SweepPlan {
    pub(crate) request: Request,
    pub(crate) molecule: Molecule,
    pub(crate) path: PathPlan,
    /// The points of the path that are run; all without it.
    pub(crate) kept: Option<Vec<usize>>,
    pub(crate) basis: Basis,
    pub(crate) hamiltonian: HamiltonianPlan,
    /// Those of `read` whose displacement changes along the path; the blocks of
    /// the others are computed once, at `reference`.
    pub(crate) moving: Vec<usize>,
    /// Pairs of atoms that the blocks of the irreps read; symmetry tells the others.
    pub(crate) read: Vec<usize>,
    /// A geometry of the path, Å.
    pub(crate) reference: Vec<[f64; 3]>,
    pub(crate) near_misses: Vec<NearMiss>,
    pub(crate) group: PointGroup,
    pub(crate) adapted: AdaptedBasis,
    pub(crate) core_counts: Vec<usize>,
    pub(crate) shells: Vec<OrbitalShell>,
    pub(crate) core_shells: Vec<OrbitalShell>,
    pub(crate) lines: Vec<LineHead>,
    pub(crate) filling: Filling,
    pub(crate) screen: GroupScreen,
    pub(crate) notices: Vec<Notice>,
}

impl SweepPlan {
    /// Checks the request and lays everything out.
    ///
    /// # Errors
    /// A coordinate that is not defined, an element without parameters,
    /// electrons that do not fit, a geometry without a usable overlap matrix.
    pub fn new(request: &Request) -> Result<Self, ScanError> {
        let mut notices = Vec::new();
        let basis = Basis::new(
            &request.molecule.elements,
            &request.parameters,
            &request.method,
        )?;
        let electrons = Electrons::new(
            basis.valence_electrons,
            request.molecule.charge,
            request.molecule.unpaired,
            basis.functions.len(),
        )?;
        let hamiltonian = HamiltonianPlan::new(&basis, &request.method)?;

        let mut molecule = request.molecule.clone();
        let tolerance = request.tolerance.0;
        let start =
            orbend_symmetry::find(&nuclei(&molecule.elements, &molecule.positions), tolerance)?;
        if start.deviation_angstrom > EXACT_ANGSTROM {
            let (places, moved) = symmetrize(
                &nuclei(&molecule.elements, &molecule.positions),
                &start.group,
            );
            molecule.positions = places.iter().map(|nucleus| nucleus.position).collect();
            notices.push(Notice {
                code: "moved-onto-symmetry",
                text: format!(
                    "atoms were moved by up to {moved:.1e} Å onto {}; a smaller --tolerance keeps them where they are",
                    start.group.name
                ),
            });
        }
        let permutations: Vec<Vec<usize>> = start
            .group
            .operations
            .iter()
            .map(|operation| operation.permutation.clone())
            .collect();
        let mut path =
            request
                .route
                .path(&molecule, &request.coordinates, &permutations, tolerance)?;
        if matches!(request.route, Route::Frames { .. }) {
            let (moved, notice) = frames_onto_group(&path, &molecule, tolerance)?;
            path = moved;
            molecule.positions.clone_from(&path.start().positions);
            notices.extend(notice);
        }

        let samples = sample_geometries(&path, molecule.positions.len())?;
        let mut moving = hamiltonian.moving_pairs(samples.iter().map(Vec::as_slice));
        let reference = samples[0].clone();
        let kinds = kinds(&molecule.elements);
        let kept = path_group(&kinds, &samples, tolerance)?;
        let screen = GroupScreen::new(
            &nuclei(&molecule.elements, &samples[kept.axes_from]),
            tolerance,
        )?;
        let group = kept.group;

        let shells = basis
            .shells
            .iter()
            .map(|shell| OrbitalShell {
                atom: shell.atom,
                l: shell.l,
            })
            .collect::<Vec<_>>();
        let core_shells = basis
            .core_shells
            .iter()
            .map(|&(atom, _, l)| OrbitalShell { atom, l })
            .collect::<Vec<_>>();
        let adapted = group.adapt(&shells)?;
        let core_counts = group.count(&core_shells)?;
        let read = pairs_read(&basis, &hamiltonian, &adapted);
        moving.retain(|pair| read.binary_search(pair).is_ok());

        let mut plan = Self {
            request: request.clone(),
            molecule,
            path,
            kept: None,
            basis,
            hamiltonian,
            moving,
            read,
            reference,
            near_misses: start.near_misses,
            group,
            adapted,
            core_counts,
            shells,
            core_shells,
            lines: Vec::new(),
            filling: Filling::Aufbau(electrons.clone()),
            screen,
            notices,
        };
        let first = plan.slot_energies(&plan.path.values(0), &mut Workspace::new(&plan))?;
        plan.lines = line_heads(&plan.group, &plan.adapted, &plan.core_counts, &first);
        if let Some(configuration) = &plan.request.configuration {
            let labels: Vec<String> = plan
                .lines
                .iter()
                .map(|line| match plan.request.numbering {
                    Numbering::Core => line.name.plain.clone(),
                    Numbering::Valence => line.name.valence_plain.clone(),
                })
                .collect();
            let order: Vec<usize> = (0..plan.lines.len()).collect();
            let occupations = configuration.occupations(&electrons, &labels, &order)?;
            plan.filling = Filling::ByLine {
                electrons,
                occupations,
            };
        }
        Ok(plan)
    }

    /// Points of the sweep.
    pub fn points(&self) -> usize {
        self.kept.as_ref().map_or(self.path.points(), Vec::len)
    }

    /// The same plan for some of its points alone, in rising order; names and
    /// lines stay those of the whole. Numbers beyond the last point are left out.
    #[must_use]
    pub fn only(mut self, mut points: Vec<usize>) -> Self {
        let count = self.points();
        points.retain(|&point| point < count);
        points.sort_unstable();
        points.dedup();
        let places = points.iter().map(|&point| self.place_on_path(point));
        self.kept = Some(places.collect());
        self
    }

    /// Coordinate values of a point, degrees or Å.
    pub fn values(&self, point: usize) -> Vec<f64> {
        self.path.values(self.place_on_path(point))
    }

    /// Number of a point among all points of the path.
    fn place_on_path(&self, point: usize) -> usize {
        match &self.kept {
            Some(kept) => kept.get(point).copied().unwrap_or(point),
            None => point,
        }
    }

    /// Parameter values of a point, written to `out` without allocation.
    pub(crate) fn values_of<'a>(&self, point: usize, out: &'a mut [f64; 8]) -> &'a [f64] {
        let axes = self.path.axes();
        let mut rest = self.place_on_path(point);
        for (value, axis) in out[..axes.len()].iter_mut().zip(axes).rev() {
            *value = axis.values[rest % axis.values.len()];
            rest /= axis.values.len();
        }
        &out[..axes.len()]
    }

    /// Parameter values of all points of a path with one parameter.
    pub(crate) fn parameters(&self, values: &[f64]) -> Vec<f64> {
        match &self.kept {
            Some(kept) => kept.iter().map(|&point| values[point]).collect(),
            None => values.to_vec(),
        }
    }

    /// The molecule whose atoms move, on its symmetric places.
    pub fn molecule(&self) -> &Molecule {
        &self.molecule
    }

    /// The group that every point keeps, with its axes.
    pub fn path_group(&self) -> &PointGroup {
        &self.group
    }

    /// The lines, by rising energy at the first point.
    pub fn lines(&self) -> &[LineHead] {
        &self.lines
    }

    /// The basis functions.
    pub fn basis(&self) -> &Basis {
        &self.basis
    }

    /// The path along which the atoms move.
    pub fn path(&self) -> &PathPlan {
        &self.path
    }

    /// The request as it was understood.
    pub fn request(&self) -> &Request {
        &self.request
    }

    /// The electrons that are handed out.
    pub fn electrons(&self) -> &Electrons {
        self.filling.electrons()
    }

    /// Core orbitals that labels count but the basis does not hold.
    pub fn core_orbitals(&self) -> u32 {
        self.basis.core_orbitals() as u32
    }

    /// Bigger groups that the start geometry misses narrowly.
    pub fn near_misses(&self) -> &[NearMiss] {
        &self.near_misses
    }

    /// Name of a line in the path group under the other usual choice of axes.
    pub fn other_axes_name(&self, line: usize) -> Name {
        let head = &self.lines[line];
        let plain = self.group.other_axes(&self.group.irreps[head.irrep].plain);
        let irrep = self.group.irrep(&plain).unwrap_or(head.irrep);
        head.name
            .renamed(&self.group.irreps[head.irrep], &self.group.irreps[irrep])
    }

    /// What a reader should know about how the request was understood.
    pub fn notices(&self) -> &[Notice] {
        &self.notices
    }
}

/// The nuclei as symmetry sees them.
pub(crate) fn nuclei(elements: &[Element], positions: &[[f64; 3]]) -> Vec<Nucleus> {
    elements
        .iter()
        .zip(positions)
        .map(|(element, &position)| Nucleus {
            kind: u32::from(element.number()),
            position,
        })
        .collect()
}

/// The nuclei as numbers that tell them apart.
pub(crate) fn kinds(elements: &[Element]) -> Vec<u32> {
    elements
        .iter()
        .map(|element| u32::from(element.number()))
        .collect()
}

/// The pairs of different atoms whose elements the blocks read, in order.
fn pairs_read(basis: &Basis, hamiltonian: &HamiltonianPlan, adapted: &AdaptedBasis) -> Vec<usize> {
    let atoms = basis.atoms.len();
    let mut wanted = vec![false; atoms * atoms];
    for (row, column) in adapted.blocks.iter().flat_map(|block| block.reads()) {
        let (a, b) = (basis.functions[row].atom, basis.functions[column].atom);
        wanted[a.min(b) * atoms + a.max(b)] = true;
    }
    let pairs = hamiltonian.pairs().iter().enumerate();
    pairs
        .filter(|(_, pair)| wanted[pair.a * atoms + pair.b])
        .map(|(index, _)| index)
        .collect()
}

/// Given geometries moved onto the group that all of them keep, with a notice
/// where that moved an atom noticeably.
fn frames_onto_group(
    path: &PathPlan,
    molecule: &Molecule,
    tolerance: f64,
) -> Result<(PathPlan, Option<Notice>), ScanError> {
    let kinds = kinds(&molecule.elements);
    let all = (0..path.points())
        .map(|point| Ok(path.molecule(&path.values(point))?))
        .collect::<Result<Vec<Molecule>, ScanError>>()?;
    let places: Vec<Vec<[f64; 3]>> = all.iter().map(|frame| frame.positions.clone()).collect();
    let group = path_group(&kinds, &places, tolerance)?.group;
    let mut worst = 0.0_f64;
    let frames: Vec<Molecule> = all
        .into_iter()
        .map(|mut frame| {
            let (places, moved) = symmetrize(&nuclei(&frame.elements, &frame.positions), &group);
            frame.positions = places.iter().map(|nucleus| nucleus.position).collect();
            worst = worst.max(moved);
            frame
        })
        .collect();
    let Some(axis) = path.axes().first() else {
        return Ok((path.clone(), None));
    };
    let values = FrameValues::Given {
        name: axis.name.clone(),
        unit: axis.unit.clone(),
        values: axis.values.clone(),
    };
    let notice = (worst > EXACT_ANGSTROM).then(|| Notice {
        code: "frames-moved-onto-symmetry",
        text: format!(
            "atoms of the given geometries were moved by up to {worst:.1e} Å onto {}; a smaller --tolerance keeps them where they are",
            group.name
        ),
    });
    Ok((PathPlan::frames(&frames, &values)?, notice))
}

/// Both ends and points between them, evenly spread.
fn sample_geometries(path: &PathPlan, atoms: usize) -> Result<Vec<Vec<[f64; 3]>>, ScanError> {
    let points = path.points();
    let count = points.min(SAMPLES);
    let mut samples = Vec::with_capacity(count);
    for sample in 0..count {
        let point = if count == 1 {
            0
        } else {
            sample * (points - 1) / (count - 1)
        };
        let mut positions = vec![[0.0; 3]; atoms];
        path.positions(&path.values(point), &mut positions)?;
        samples.push(positions);
    }
    Ok(samples)
}

#[cfg(test)]
mod tests {
    use orbend_structure::{Formula, ideal_geometry};

    use super::*;

    #[test]
    fn what_symmetry_says_twice_is_read_once() {
        // Pairs of atoms in all, and the most that may be read.
        for (formula, all, read) in [("H2S", 3, 2), ("PF3", 6, 5)] {
            let formula = Formula::parse(formula).unwrap();
            let molecule = ideal_geometry(&formula, None, &[]).unwrap().molecule;
            let plan = Request::new(molecule).plan().unwrap();
            assert_eq!(plan.hamiltonian.pairs().len(), all);
            assert!(plan.read.len() <= read, "{:?}", plan.read);
        }
    }
}
