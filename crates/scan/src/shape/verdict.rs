//! From a molecule to its verdict.

use orbend_hamiltonian::{Basis, Coupling, Method, ParameterSet};

use crate::plan::SweepPlan;
use crate::request::Request;

use super::arguments::{Favour, SumArgument, geometries, sums};
use super::centre::{Centre, ShapeError};
use super::electron_count::electron_count_rule;
use super::ensemble::{Support, ensemble};
use super::flip::{Flip, flips};
use super::frontier::{FrontierArgument, all_hydrogen, frontier};
use super::motion::Motion;
use super::rule::{Evidence, INVERTED_EV, Ruling, weigh};
use super::words;

/// Seed of the ensemble unless another one is asked for.
const SEED: u64 = 1;
/// Draws of the ensemble: 128 curves.
const DRAWS: usize = 32;

/// What a verdict is asked for.
#[derive(Clone, Debug)]
pub struct ShapeRequest {
    /// Molecule, parameters, configuration; coordinates and method are the verdict's own (both
    /// forms, K = 1.75, hydrogen with and without 2p).
    pub request: Request,
    /// The centre, from 0; found where there is only one.
    pub centre: Option<usize>,
    /// Seed of the ensemble.
    pub seed: u64,
    /// Draws of the ensemble, four curves each.
    pub draws: usize,
    /// Whether to look for what would flip the leading argument.
    pub flips: bool,
}

/// A verdict with everything behind it.
#[derive(Debug)]
pub struct ShapeVerdict {
    /// The plan of the polarised sum: molecule, path, lines, electrons, parameters.
    pub plan: SweepPlan,
    /// The centre and its ligands.
    pub centre: Centre,
    /// The motion.
    pub motion: Motion,
    /// Shape, support, confidence and why it may be undecided.
    pub ruling: Ruling,
    /// The sums, leading one first.
    pub sums: Vec<SumArgument>,
    /// The frontier line.
    pub frontier: FrontierArgument,
    /// The electron-count rule, for reference.
    pub electron_count: Favour,
    /// The ensemble's result.
    pub support: Support,
    /// Seed of the ensemble.
    pub seed: u64,
    /// Angle of the verdict, degrees: the ensemble's median, or that of the symmetric form.
    pub angle: Option<f64>,
    /// 10 to 90 % of the angle over the distorted curves, degrees.
    pub angle_range: Option<[f64; 2]>,
    /// Depth of the leading sum's minimum, eV.
    pub depth: Option<f64>,
    /// Occupied levels close to the symmetric form, as in `2a1:2 1b2:2`.
    pub configuration: String,
    /// What decides, in words.
    pub because: Vec<String>,
    /// What could be wrong, in words.
    pub could_be_wrong_because: Vec<String>,
    /// Smallest single changes that turn the leading sum round; empty if not asked for.
    pub flips: Vec<Flip>,
}

impl ShapeRequest {
    /// A verdict with the usual ensemble, what would flip it included.
    pub fn new(request: Request) -> Self {
        Self { request, centre: None, seed: SEED, draws: DRAWS, flips: true }
    }

    /// Works the verdict out on the caller's rayon pool; the same bytes on any number of threads.
    ///
    /// # Errors
    /// No centre or several, an element without parameters, electrons that do not fit, a motion
    /// that the molecule does not have.
    pub fn run(&self) -> Result<ShapeVerdict, ShapeError> {
        let centre = Centre::find(&self.request.molecule, self.centre)?;
        let motion = centre.motion();
        let plan = self.plan(&centre, motion, true)?;
        let positions = geometries(&plan, &centre, motion, true)?;
        let mut sums = sums(
            &plan,
            motion,
            ["polarised-sum", "polarised-charge-response", "polarised-weighted"],
            &positions,
        )?;
        sums.extend(self.minimal_sums(&plan, &centre, motion, &sums)?);
        let leading = &sums[0];
        if !leading.sums[0].is_finite() {
            return Err(ShapeError::NoSymmetricForm {
                word: motion.symmetric_word(),
                formula: plan.molecule.formula(),
            });
        }
        let frontier = frontier(&plan, &centre, motion)?;
        let other = second_values(&self.request.parameters, &plan)?;
        let support = ensemble(&plan, &other, &centre, motion, self.seed, self.draws)?;
        let evidence = evidence(&plan, &centre, &sums, &frontier, &support);
        let ruling = weigh(&evidence);
        let flips = if self.flips {
            flips(&plan, &centre, motion, leading.favours)?
        } else {
            Vec::new()
        };
        let hydrogens =
            centre.ligands.iter().filter(|&&ligand| plan.molecule.elements[ligand].number() == 1).count();
        let electron_count =
            electron_count_rule(centre.ligands.len(), hydrogens, plan.electrons().total());
        let (angle, angle_range) = angles(&ruling, motion, &support);
        let mut verdict = ShapeVerdict {
            configuration: configuration(&frontier),
            depth: leading.depth,
            plan,
            centre,
            motion,
            ruling,
            sums,
            frontier,
            electron_count,
            support,
            seed: self.seed,
            angle,
            angle_range,
            because: Vec::new(),
            could_be_wrong_because: Vec::new(),
            flips,
        };
        verdict.because = words::because(&verdict, &evidence);
        verdict.could_be_wrong_because = words::doubts(&verdict, &evidence);
        Ok(verdict)
    }

    fn plan(&self, centre: &Centre, motion: Motion, polarised: bool) -> Result<SweepPlan, ShapeError> {
        let mut request = self.request.clone();
        request.method =
            Method { polarised_hydrogen: polarised, ..Method::with_coupling(Coupling::Constant) };
        request.coordinates = vec![motion.coordinate(centre)?];
        Ok(request.plan()?)
    }

    /// The sums in the minimal basis; without hydrogen they are the polarised ones.
    fn minimal_sums(
        &self,
        plan: &SweepPlan,
        centre: &Centre,
        motion: Motion,
        polarised: &[SumArgument],
    ) -> Result<Vec<SumArgument>, ShapeError> {
        let names = ["sum", "charge-response", "weighted"];
        let mut minimal: Vec<SumArgument> =
            if plan.molecule.elements.iter().any(|element| element.number() == 1) {
                let plan = self.plan(centre, motion, false)?;
                let positions = geometries(&plan, centre, motion, true)?;
                sums(&plan, motion, names, &positions)?
            } else {
                polarised.to_vec()
            };
        for (argument, name) in minimal.iter_mut().zip(names) {
            argument.name = name;
            argument.votes = false;
        }
        Ok(minimal)
    }
}

/// The basis of the second published values, where the set has two for an element of the main
/// groups.
fn second_values(set: &ParameterSet, plan: &SweepPlan) -> Result<Basis, ShapeError> {
    let mut elements = plan.molecule.elements.clone();
    elements.sort();
    elements.dedup();
    let choices: Vec<String> = elements
        .into_iter()
        .filter(|element| !element.is_transition_metal())
        .filter(|&element| {
            set.element(element).is_some_and(|values| {
                values.variant().name == "A" && values.variants().iter().any(|other| other.name == "B")
            })
        })
        .map(|element| format!("{}:B", element.symbol()))
        .collect();
    let other = set.choose(&choices).unwrap_or_else(|_| set.clone());
    Basis::new(&plan.molecule.elements, &other, plan.hamiltonian.method())
        .map_err(|error| ShapeError::Scan(error.into()))
}

fn evidence(
    plan: &SweepPlan,
    centre: &Centre,
    sums: &[SumArgument],
    frontier: &FrontierArgument,
    support: &Support,
) -> Evidence {
    let elements = &plan.molecule.elements;
    let element = elements[centre.atom];
    let p_level = |atom: usize| {
        plan.basis.shells.iter().find(|shell| shell.atom == atom && shell.l == 1).map(|shell| shell.hii_ev)
    };
    let inverted = element.number() != 1
        && centre.ligands.iter().any(|&ligand| {
            elements[ligand].number() != 1
                && matches!(
                    (p_level(ligand), p_level(centre.atom)),
                    (Some(outer), Some(inner)) if outer > inner + INVERTED_EV
                )
        });
    Evidence {
        shares: (support.distorted, support.symmetric),
        leading: sums[0].favours,
        response: sums[1].favours,
        frontier: frontier.favours,
        frontier_single: (frontier.electrons - 1.0).abs() < 1e-6,
        light_hydride: all_hydrogen(&plan.molecule, centre) && element.period() <= 2,
        heavy_alkaline_earth: matches!(element.symbol(), "Ca" | "Sr" | "Ba"),
        inverted,
    }
}

fn angles(ruling: &Ruling, motion: Motion, support: &Support) -> (Option<f64>, Option<[f64; 2]>) {
    match (ruling.shape, support.angles) {
        (Favour::Symmetric, _) => (Some(motion.angle(0.0)), None),
        (_, Some([low, middle, high])) => (Some(middle), Some([low, high])),
        (_, None) => (None, None),
    }
}

fn configuration(frontier: &FrontierArgument) -> String {
    let words: Vec<String> =
        frontier.lines.iter().rev().map(|(label, electrons, _)| format!("{label}:{electrons}")).collect();
    words.join(" ")
}
