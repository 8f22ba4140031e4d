//! The sums: each in one form, with the minimum that it finds itself.

use orbend_hamiltonian::{Coupling, HamiltonianPlan, Method, PairRepulsion};

use crate::error::ScanError;
use crate::plan::SweepPlan;

use super::centre::Centre;
use super::charge::Response;
use super::engine::{Curve, Engine, Model};
use super::minimum::read;
use super::motion::Motion;

/// What an argument speaks for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Favour {
    /// Linear or planar.
    Symmetric,
    /// Bent or pyramidal.
    Distorted,
    /// The other symmetric form of a torsion, or the far end of a free range.
    Opposite,
    /// Nothing: no minimum inside the range, no line that responds, or no agreement.
    Silent,
}

impl Favour {
    /// The word along this motion; `none` for silence.
    pub fn word(self, motion: Motion) -> &'static str {
        match self {
            Self::Symmetric => motion.symmetric_word(),
            Self::Distorted => motion.distorted_word(),
            Self::Opposite => motion.opposite_word(),
            Self::Silent => "none",
        }
    }
}

/// A sum of orbital energies as an argument.
#[derive(Clone, Debug)]
pub struct SumArgument {
    /// `polarised-sum`, `polarised-charge-response`, `polarised-weighted`, `sum`,
    /// `charge-response`, `weighted` or `polarised-sum-repulsion`.
    pub name: &'static str,
    /// What it speaks for.
    pub favours: Favour,
    /// Angle of its deepest minimum, degrees.
    pub angle: Option<f64>,
    /// Depth of that minimum below the symmetric form, eV; of a torsion below the next form.
    pub depth: Option<f64>,
    /// Whether it decides, or is only shown.
    pub votes: bool,
    /// Whether the charges came to rest at every point (true without charge response).
    pub at_rest: bool,
    /// Angles of the curve, degrees.
    pub angles: Vec<f64>,
    /// Sums along it, eV; NaN where there is none.
    pub sums: Vec<f64>,
}

/// Positions along the motion, Å, bonds `scale` times as long.
pub(crate) fn geometries(
    plan: &SweepPlan,
    centre: &Centre,
    motion: Motion,
    fine: bool,
) -> Result<Vec<Vec<[f64; 3]>>, ScanError> {
    motion
        .grid(fine)
        .into_iter()
        .map(|distortion| at_distortion(plan, centre, motion, distortion))
        .collect()
}

/// Positions at one distortion, Å.
pub(crate) fn at_distortion(
    plan: &SweepPlan,
    centre: &Centre,
    motion: Motion,
    distortion: f64,
) -> Result<Vec<[f64; 3]>, ScanError> {
    let mut positions = vec![[0.0; 3]; plan.molecule.len()];
    plan.path
        .positions(&[motion.angle(distortion)], &mut positions)?;
    // The unit factor leaves every position as it is; it keeps one way of moving ligands.
    centre.stretch(&vec![1.0; centre.bonds.len()], &mut positions);
    Ok(positions)
}

/// The three sums of one basis: constant, with charge response, weighted.
pub(crate) fn sums(
    plan: &SweepPlan,
    motion: Motion,
    names: [&'static str; 3],
    positions: &[Vec<[f64; 3]>],
) -> Result<Vec<SumArgument>, ScanError> {
    let constant = &plan.hamiltonian;
    let weighted = with_coupling(constant, Coupling::Weighted)?;
    let models = [
        Model {
            hamiltonian: constant,
            response: None,
        },
        Model {
            hamiltonian: constant,
            response: Some(Response::NOMINAL),
        },
        Model {
            hamiltonian: &weighted,
            response: None,
        },
    ];
    let curves = Engine::new(plan).curves(positions, &models);
    Ok(curves
        .into_iter()
        .zip(names)
        .map(|(curve, name)| argument(name, motion, curve))
        .collect())
}

/// The same plan with another form.
pub(crate) fn with_coupling(
    plan: &HamiltonianPlan,
    coupling: Coupling,
) -> Result<HamiltonianPlan, ScanError> {
    let mut other = plan.clone();
    other.set_method(&Method {
        coupling,
        ..*plan.method()
    })?;
    Ok(other)
}

pub(crate) fn argument(name: &'static str, motion: Motion, curve: Curve) -> SumArgument {
    let grid = motion.grid(true);
    let (favours, found) = read(motion, motion.step(true), curve.usable());
    SumArgument {
        name,
        favours,
        angle: found.map(|minimum| motion.angle(minimum.distortion)),
        depth: found.map(|minimum| minimum.depth),
        votes: matches!(name, "polarised-sum" | "polarised-charge-response"),
        at_rest: curve.at_rest,
        angles: grid
            .iter()
            .map(|&distortion| motion.angle(distortion))
            .collect(),
        sums: curve.sums,
    }
}

/// The leading sum with the pair repulsion of the atoms added; shown where asked for.
pub(crate) fn with_repulsion(
    plan: &SweepPlan,
    motion: Motion,
    leading: &SumArgument,
    positions: &[Vec<[f64; 3]>],
) -> SumArgument {
    let repulsion = PairRepulsion::new(&plan.basis);
    let sums = leading.sums.iter().zip(positions);
    let curve = Curve {
        sums: sums
            .map(|(sum, positions)| sum + repulsion.energy(positions))
            .collect(),
        at_rest: true,
    };
    argument("polarised-sum-repulsion", motion, curve)
}
