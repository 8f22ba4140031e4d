//! From a molecule to its verdict.

use orbend_hamiltonian::{Basis, Coupling, Method, ParameterSet};
use orbend_structure::Coordinate;

use crate::error::ScanError;
use crate::plan::SweepPlan;
use crate::request::{Request, Route};

use super::arguments::{Favour, SumArgument, geometries, sums, with_repulsion};
use super::centre::{Centre, ShapeError};
use super::electron_count::electron_count_rule;
use super::ensemble::{Support, ensemble};
use super::flip::{Flip, flips};
use super::frontier::{FrontierArgument, all_hydrogen, frontier};
use super::motion::{Motion, MotionKind};
use super::rule::{Evidence, FLAT_EV, INVERTED_EV, Ruling, Way, weigh};
use super::see_saw::see_saw;
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
    /// A coordinate to judge instead of the one that the molecule's connections suggest.
    pub coordinate: Option<Coordinate>,
    /// Whether to show the leading sum with the pair repulsion of the atoms added.
    pub repulsion: bool,
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
    /// The sums: polarised ones first.
    pub sums: Vec<SumArgument>,
    /// Which of them leads: the first, of a torsion the second.
    pub lead: usize,
    /// The frontier line.
    pub frontier: FrontierArgument,
    /// Whether it has a vote: where its veto was calibrated, in the bend or the pyramid of a centre
    /// with nothing but single atoms around it.
    pub frontier_votes: bool,
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
    /// By how much (eV) the lowest see-saw geometry of four ligands lies below the path, if so.
    pub see_saw: Option<f64>,
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
        Self {
            request,
            centre: None,
            coordinate: None,
            repulsion: false,
            seed: SEED,
            draws: DRAWS,
            flips: true,
        }
    }

    /// Works the verdict out on the caller's rayon pool; the same bytes on any number of threads.
    ///
    /// # Errors
    /// No centre or several, an element without parameters, electrons that do not fit, a motion
    /// that the molecule does not have.
    pub fn run(&self) -> Result<ShapeVerdict, ShapeError> {
        let (mut centre, motion) = match &self.coordinate {
            Some(coordinate) => Centre::along(&self.request.molecule, coordinate),
            None => Centre::find(&self.request.molecule, self.centre)?,
        };
        if motion.kind == MotionKind::Squash {
            centre.pair_up(&self.request.molecule);
        }
        let plan = self.plan(&centre, motion, true)?;
        let positions = geometries(&plan, &centre, motion, true)?;
        let mut sums = sums(
            &plan,
            motion,
            [
                "polarised-sum",
                "polarised-charge-response",
                "polarised-weighted",
            ],
            &positions,
        )?;
        sums.extend(self.minimal_sums(&plan, &centre, motion, &sums)?);
        if self.repulsion {
            sums.push(with_repulsion(&plan, motion, &sums[0], &positions));
        }
        let lead = usize::from(motion.kind == MotionKind::Twist);
        let leading = &sums[lead];
        if !leading.sums[0].is_finite() {
            return Err(ShapeError::NoSymmetricForm {
                word: motion.symmetric_word(),
                formula: plan.molecule.formula(),
            });
        }
        let frontier = frontier(&plan, &centre, motion)?;
        let other = second_values(&self.request.parameters, &plan)?;
        let support = ensemble(&plan, &other, &centre, motion, self.seed, self.draws)?;
        let see_saw = if motion.kind == MotionKind::Squash {
            let lowest = sums[0].sums.iter().copied().filter(|sum| sum.is_finite());
            let lowest = lowest.fold(f64::INFINITY, f64::min);
            see_saw(&plan.request, &centre, motion, lowest)?.filter(|&below| below > FLAT_EV)
        } else {
            None
        };
        let frontier_votes =
            motion.frontier_votes() && plan.molecule.len() == centre.ligands.len() + 1;
        let mut evidence = evidence(&plan, &centre, motion, &sums, &frontier, &support);
        evidence.other_form = see_saw.is_some() || five_pairs(&plan, &centre, motion);
        if !frontier_votes {
            evidence.frontier = Favour::Silent;
        }
        let ruling = weigh(&evidence);
        let flips = if self.flips {
            flips(&plan, &centre, motion, leading.favours)?
        } else {
            Vec::new()
        };
        let hydrogens = centre
            .ligands
            .iter()
            .filter(|&&ligand| plan.molecule.elements[ligand].number() == 1)
            .count();
        let electron_count = if matches!(motion.kind, MotionKind::Bend | MotionKind::Pyramid) {
            electron_count_rule(centre.ligands.len(), hydrogens, plan.electrons().total())
        } else {
            Favour::Silent
        };
        let (angle, angle_range) = angles(&ruling, motion, &support);
        let mut verdict = ShapeVerdict {
            configuration: configuration(&frontier),
            depth: leading.depth,
            lead,
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
            see_saw,
            frontier_votes,
        };
        verdict.because = words::because(&verdict, &evidence);
        verdict.could_be_wrong_because = words::doubts(&verdict, &evidence);
        Ok(verdict)
    }

    fn plan(
        &self,
        centre: &Centre,
        motion: Motion,
        polarised: bool,
    ) -> Result<SweepPlan, ShapeError> {
        let mut request = self.request.clone();
        request.method = Method {
            polarised_hydrogen: polarised,
            ..Method::with_coupling(Coupling::Constant)
        };
        request.coordinates = motion.coordinates(centre)?;
        if motion.kind == MotionKind::Squash {
            return self.squash(request, centre, motion);
        }
        match request.plan() {
            // In a bent start two ligands may count as bonded (Li···Li in Li₂O): the symmetric form
            // with the same bond lengths is as good a start.
            Err(error @ ScanError::Path(_)) => {
                let Some(start) = centre.own_start(&request.molecule, motion) else {
                    return Err(error.into());
                };
                request.molecule.positions = start;
                Ok(request.plan()?)
            }
            other => Ok(other?),
        }
    }

    /// Four ligands: the second pair moves along by symmetry, or in step by its own coordinate.
    fn squash(
        &self,
        mut request: Request,
        centre: &Centre,
        motion: Motion,
    ) -> Result<SweepPlan, ShapeError> {
        if let Some(start) = centre.own_start(&request.molecule, motion) {
            request.molecule.positions = start;
        }
        let both = request.coordinates.clone();
        request.coordinates.truncate(1);
        if let Ok(plan) = request.plan() {
            let moved = plan.path.moved_along();
            let second = both.get(1).map(|pair| &pair.atoms);
            let along = moved.iter().flatten().any(|atoms| {
                second.is_some_and(|pair| {
                    atoms[1] == pair[1] && pair.iter().all(|atom| atoms.contains(atom))
                })
            });
            if along {
                return Ok(plan);
            }
        }
        request.coordinates = both;
        request.route = Route::Together;
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
        let mut minimal: Vec<SumArgument> = if plan
            .molecule
            .elements
            .iter()
            .any(|element| element.number() == 1)
        {
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

impl ShapeVerdict {
    /// The verdict in a word: `bent`, `skew`, `undecided` … Four ligands whose pairs open beyond
    /// 125° on the way to the plane are `flattened-tetrahedral`.
    pub fn word(&self) -> &'static str {
        let flat =
            self.motion.kind == MotionKind::Squash && self.angle.is_some_and(|angle| angle > 125.0);
        match self.ruling.shape {
            Favour::Silent => "undecided",
            Favour::Distorted if flat => "flattened-tetrahedral",
            shape => shape.word(self.motion),
        }
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
                values.variant().name == "A"
                    && values.variants().iter().any(|other| other.name == "B")
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
    motion: Motion,
    sums: &[SumArgument],
    frontier: &FrontierArgument,
    support: &Support,
) -> Evidence {
    let elements = &plan.molecule.elements;
    let element = elements[centre.atom];
    let p_level = |atom: usize| {
        plan.basis
            .shells
            .iter()
            .find(|shell| shell.atom == atom && shell.l == 1)
            .map(|shell| shell.hii_ev)
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
        opposite: support.opposite,
        other_form: false,
        way: match motion.kind {
            MotionKind::Twist => Way::Torsion,
            MotionKind::Free(_) => Way::Free,
            _ => Way::Distortion,
        },
        leading: sums[0].favours,
        response: sums[1].favours,
        frontier: frontier.favours,
        frontier_single: (frontier.electrons - 1.0).abs() < 1e-6,
        light_hydride: all_hydrogen(&plan.molecule, centre) && element.period() <= 2,
        heavy_alkaline_earth: matches!(element.symbol(), "Ca" | "Sr" | "Ba"),
        inverted,
    }
}

/// Four ligands and one lone pair (or one or three electrons) on a centre of the main groups: a
/// see-saw (Gillespie & Nyholm, Q. Rev. Chem. Soc. 11, 339 (1957)). Stated class: the form is off the
/// path, and the sum of level energies puts SF4 into the plane.
fn five_pairs(plan: &SweepPlan, centre: &Centre, motion: Motion) -> bool {
    let elements = &plan.molecule.elements;
    let whole = plan.molecule.len() == centre.ligands.len() + 1;
    if motion.kind != MotionKind::Squash || !whole || elements[centre.atom].is_transition_metal() {
        return false;
    }
    let bound: u32 = centre
        .ligands
        .iter()
        .map(|&ligand| if elements[ligand].number() == 1 { 2 } else { 8 })
        .sum();
    (bound + 1..=bound + 3).contains(&plan.electrons().total())
}

fn angles(ruling: &Ruling, motion: Motion, support: &Support) -> (Option<f64>, Option<[f64; 2]>) {
    match (ruling.shape, support.angles) {
        (Favour::Symmetric, _) => (Some(motion.angle(0.0)), None),
        (Favour::Opposite, _) => (Some(motion.angle(motion.length())), None),
        // Undecided between three forms: no angle.
        (Favour::Silent, _) if motion.kind == MotionKind::Twist => (None, None),
        (_, Some([low, middle, high])) => (Some(middle), Some([low, high])),
        (_, None) => (None, None),
    }
}

fn configuration(frontier: &FrontierArgument) -> String {
    let words: Vec<String> = frontier
        .lines
        .iter()
        .rev()
        .map(|(label, electrons, _)| format!("{label}:{electrons}"))
        .collect();
    words.join(" ")
}
