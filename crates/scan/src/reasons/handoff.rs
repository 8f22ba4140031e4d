//! What to compute next, drawn from a sweep and from verdicts.

use orbend_structure::{Coordinate, CoordinateKind, Molecule, Range};

use crate::error::ScanError;
use crate::shape::{Centre, Favour, Motion, MotionKind, ShapeVerdict};
use crate::sweep::Sweep;

use super::makeup::{Makeup, makeups};
use super::roots::{RootFlip, RootKind, nearest_point, root_flips};
use super::sets::{LineSet, line_sets};
use super::space::{ActiveSpace, spaces};
use super::states::{State, states};

/// Where a start geometry comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum StartKind {
    /// The angle of the shape verdict.
    Verdict,
    /// The lowest sum along the path.
    LowestSum,
    /// The geometry that was given.
    Given,
    /// A point of higher symmetry.
    HigherSymmetry,
    /// Where the ground configuration changes.
    Flip,
}

/// A geometry to start from.
#[derive(Clone, Debug, PartialEq)]
pub struct Start {
    /// Where it comes from.
    pub kind: StartKind,
    /// Coordinate value; none for the given geometry of a molecule without a path.
    pub at: Option<f64>,
    /// Its own group, plain.
    pub point_group: String,
    /// The atoms with charge and unpaired electrons; the title names it.
    pub molecule: Molecule,
    /// Why, in words.
    pub reason: String,
}

/// Another charge of the same atoms and what the verdict says about it.
#[derive(Clone, Debug, PartialEq)]
pub struct OtherCharge {
    /// The charge.
    pub charge: i32,
    /// Unpaired electrons.
    pub unpaired: u32,
    /// `bent`, `linear`, `planar`, `pyramidal` or `undecided`.
    pub verdict: String,
    /// Angle, degrees.
    pub angle: Option<f64>,
    /// Support of the verdict, 0 to 1.
    pub support: f64,
    /// Whether the shape is another one than that of the charge asked for.
    pub differs: bool,
    /// Why it is worth computing, or why not, in words.
    pub reason: String,
}

/// The hand-off to a costly calculation.
#[derive(Clone, Debug)]
pub struct HandOff {
    /// Start geometries, the one to begin with first.
    pub starts: Vec<Start>,
    /// Charges, spins and configurations worth computing, with reasons.
    pub states: Vec<State>,
    /// Further charges.
    pub charges: Vec<OtherCharge>,
    /// Where the order of states changes.
    pub flips: Vec<RootFlip>,
    /// Active spaces: the least, the proposed and the full valence one.
    pub spaces: Vec<ActiveSpace>,
    /// What every line is made of at the first and at the last point.
    pub makeups: [Vec<Makeup>; 2],
    /// Whether the path is the motion of the verdicts.
    pub verdict_path: bool,
}

/// Angles that differ by less than this (degrees) are one shape.
const SAME_ANGLE: f64 = 10.0;

impl HandOff {
    /// From a sweep along one coordinate (or of a single geometry); `verdicts` are of the same
    /// atoms, that of the sweep's own charge first, and may be empty.
    ///
    /// # Errors
    /// A geometry of the path that cannot be solved.
    pub fn new(sweep: &Sweep, verdicts: &[ShapeVerdict]) -> Result<Self, ScanError> {
        let sets = line_sets(sweep)?;
        let crossings = sweep.crossings()?;
        let flips = root_flips(sweep, &sets, &crossings)?;
        let starts = starts(sweep, &sets, verdicts.first(), &flips)?;
        let states = states(sweep, &sets, &starts, &flips)?;
        let spaces = spaces(sweep, &sets, &crossings)?;
        let charges = verdicts.split_first().map_or_else(Vec::new, |(own, rest)| {
            rest.iter().map(|other| other_charge(own, other)).collect()
        });
        Ok(Self {
            starts,
            states,
            charges,
            flips,
            spaces,
            makeups: [
                makeups(sweep, 0)?,
                makeups(sweep, sweep.points().saturating_sub(1))?,
            ],
            verdict_path: verdicts
                .first()
                .is_some_and(|verdict| same_motion(sweep, verdict)),
        })
    }

    /// One molecule per calculation to start, with charge and unpaired electrons: the start
    /// geometries, further spins at theirs, further charges of another shape at their own angle.
    ///
    /// # Errors
    /// A value outside the path.
    pub fn geometries(&self, sweep: &Sweep) -> Result<Vec<Molecule>, ScanError> {
        let mut all: Vec<Molecule> = self
            .starts
            .iter()
            .map(|start| start.molecule.clone())
            .collect();
        for state in &self.states {
            let mut molecule = self.starts[state.start].molecule.clone();
            molecule.unpaired = Some(state.unpaired);
            let known = |other: &Molecule| {
                other.unpaired == molecule.unpaired && other.positions == molecule.positions
            };
            if !all.iter().any(known) {
                all.push(molecule);
            }
        }
        let limits = sweep.plan().path.axes().first().map(|axis| axis.limits());
        for charge in self.charges.iter().filter(|charge| charge.differs) {
            let (Some(angle), Some((low, high))) = (charge.angle, limits) else {
                continue;
            };
            if angle < low || angle > high || !self.verdict_path {
                continue;
            }
            let mut molecule = sweep.plan().path.molecule(&[angle])?;
            molecule.charge = charge.charge;
            molecule.unpaired = Some(charge.unpaired);
            molecule.title = format!(
                "{} charge {:+} {}",
                sweep.plan().molecule.title,
                charge.charge,
                charge.verdict
            );
            all.push(molecule);
        }
        Ok(all)
    }
}

/// The coordinate along which the motion of a verdict is drawn as a diagram: the angle from 80° to
/// 180° in steps of 2°, or the pyramid from 90° to 120° in steps of 1°; none for other motions.
pub fn usual_path(centre: &Centre, motion: Motion) -> Option<Coordinate> {
    let (kind, atoms, from, to, step) = match (motion.kind, centre.ligands.as_slice()) {
        (MotionKind::Bend, [first, second, ..]) => (
            CoordinateKind::Bend,
            vec![*first, centre.atom, *second],
            80.0,
            180.0,
            2.0,
        ),
        (MotionKind::Pyramid, _) => (CoordinateKind::Pyramid, vec![centre.atom], 90.0, 120.0, 1.0),
        _ => return None,
    };
    Coordinate::new(kind, atoms, Range { from, to, step }, false).ok()
}

/// `104°` or `1.5 Å`, for words.
pub(crate) fn value_words(sweep: &Sweep, at: f64) -> String {
    let rounded = (at * 10.0).round() / 10.0;
    match sweep
        .plan()
        .path
        .axes()
        .first()
        .map(|axis| axis.unit.as_str())
    {
        Some("degree") => format!("{rounded}°"),
        Some("angstrom") => format!("{} Å", (at * 1000.0).round() / 1000.0),
        _ => format!("{}", (at * 1000.0).round() / 1000.0),
    }
}

/// Whether the path is the motion that the verdict is about.
fn same_motion(sweep: &Sweep, verdict: &ShapeVerdict) -> bool {
    let [coordinate] = sweep.plan().path.coordinates() else {
        return false;
    };
    match (coordinate.kind, verdict.motion.kind) {
        (CoordinateKind::Bend, MotionKind::Bend) => coordinate.atoms[1] == verdict.centre.atom,
        (CoordinateKind::Pyramid, MotionKind::Pyramid) => {
            coordinate.atoms[0] == verdict.centre.atom
        }
        _ => false,
    }
}

fn starts(
    sweep: &Sweep,
    sets: &[LineSet],
    verdict: Option<&ShapeVerdict>,
    flips: &[RootFlip],
) -> Result<Vec<Start>, ScanError> {
    let plan = sweep.plan();
    let Some(axis) = plan.path.axes().first() else {
        return Ok(vec![start(
            sweep,
            StartKind::Given,
            None,
            "the geometry as given".to_owned(),
        )?]);
    };
    let (low, high) = axis.limits();
    let mut found: Vec<Start> = Vec::new();
    let own = verdict.filter(|verdict| same_motion(sweep, verdict));
    let told = own.and_then(|verdict| {
        let angle = verdict
            .angle
            .filter(|_| verdict.ruling.shape != Favour::Silent)?;
        (angle >= low - 1e-9 && angle <= high + 1e-9).then_some((verdict, angle))
    });
    if let Some((verdict, angle)) = told {
        let word = verdict.ruling.shape.word(verdict.motion);
        let range = verdict.angle_range.map_or_else(String::new, |[from, to]| {
            format!(", {from:.0} to {to:.0}° over the perturbed curves")
        });
        found.push(start(
            sweep,
            StartKind::Verdict,
            Some(angle.clamp(low, high)),
            format!(
                "the shape verdict: {word} at {angle:.0}°{range}; support {:.2}",
                verdict.ruling.support
            ),
        )?);
    } else {
        let lowest = (0..sweep.points())
            .min_by(|&a, &b| sweep.sum(a).total_cmp(&sweep.sum(b)).then(a.cmp(&b)))
            .unwrap_or(0);
        let value = axis.values[lowest];
        let end = lowest == 0 || lowest + 1 == sweep.points();
        let reason = if end && axis.unit == "angstrom" {
            "the sum is lowest at this end of the path; a sum without repulsion between cores says \
             nothing about lengths"
                .to_owned()
        } else if end {
            "the sum is lowest at this end of the path".to_owned()
        } else {
            "the sum is lowest here".to_owned()
        };
        found.push(start(sweep, StartKind::LowestSum, Some(value), reason)?);
    }
    for (point, special) in sweep.special_points() {
        let merged: Vec<String> = families_at(sweep, sets, point);
        let reason = if merged.is_empty() {
            "the higher symmetry of the path".to_owned()
        } else {
            format!("the higher symmetry of the path; {}", merged.join("; "))
        };
        let mut one = start(
            sweep,
            StartKind::HigherSymmetry,
            Some(axis.values[point]),
            reason,
        )?;
        one.point_group.clone_from(&special.group);
        found.push(one);
    }
    for flip in flips.iter().filter(|flip| flip.kind == RootKind::Ground) {
        let name = |line: usize| &plan.lines[line].name.plain;
        found.push(start(
            sweep,
            StartKind::Flip,
            Some(flip.at),
            format!(
                "{} and {} cross: two configurations have one energy, average both states here",
                name(flip.lines.0),
                name(flip.lines.1)
            ),
        )?);
    }
    let mut kept: Vec<Start> = Vec::new();
    let width = (high - low).abs();
    for one in found {
        let near = |other: &&mut Start| match (one.at, other.at) {
            (Some(a), Some(b)) => (a - b).abs() < 1e-3 * width.max(1e-9),
            _ => false,
        };
        match kept.iter_mut().find(near) {
            Some(other) => other.reason = format!("{}; {}", other.reason, one.reason),
            None => kept.push(one),
        }
    }
    for one in &mut kept {
        let at = one
            .at
            .map_or_else(String::new, |at| format!(" at {}", value_words(sweep, at)));
        one.molecule.title = format!("{}{at} {}", plan.molecule.title, one.point_group)
            .trim()
            .to_owned();
    }
    Ok(kept)
}

/// `6a1 and 2b1 are 2pi_u`, for sets that become one.
fn families_at(sweep: &Sweep, sets: &[LineSet], point: usize) -> Vec<String> {
    let mut words = Vec::new();
    for (index, set) in sets.iter().enumerate() {
        let partners: Vec<&LineSet> = sets[index..]
            .iter()
            .filter(|other| other.family == set.family)
            .collect();
        let first = sets[..index].iter().all(|other| other.family != set.family);
        let near_frontier = partners.iter().any(|set| {
            let e = set.electrons[point];
            e > 1e-6 && e < set.capacity() - 1e-6
        });
        if first && partners.len() > 1 && near_frontier {
            let names: Vec<&str> = partners.iter().map(|set| set.name.plain.as_str()).collect();
            let (name, _) = sweep.full_name(set.lines[0], point);
            words.push(format!(
                "{} are one set, {}",
                names.join(" and "),
                name.plain
            ));
        }
    }
    words
}

fn start(
    sweep: &Sweep,
    kind: StartKind,
    at: Option<f64>,
    reason: String,
) -> Result<Start, ScanError> {
    let plan = sweep.plan();
    let values: Vec<f64> = at.into_iter().collect();
    let mut molecule = plan.path.molecule(&values)?;
    molecule.charge = plan.molecule.charge;
    molecule.unpaired = Some(plan.electrons().unpaired());
    let point_group = match at {
        Some(at) => {
            let point = nearest_point(sweep, at);
            let there = plan.path.values(point);
            if there.first().is_some_and(|value| (value - at).abs() < 1e-9) {
                sweep.point_group(point).to_owned()
            } else {
                plan.group.name.clone()
            }
        }
        None => sweep.point_group(0).to_owned(),
    };
    Ok(Start {
        kind,
        at,
        point_group,
        molecule,
        reason,
    })
}

fn other_charge(own: &ShapeVerdict, other: &ShapeVerdict) -> OtherCharge {
    let word = |verdict: &ShapeVerdict| match verdict.ruling.shape {
        Favour::Silent => "undecided",
        shape => shape.word(verdict.motion),
    };
    let (before, after) = (word(own), word(other));
    let charge = other.plan.molecule().charge;
    let angle = other.angle;
    let change = own.angle.zip(angle).map(|(a, b)| b - a);
    let differs = before != after || change.is_some_and(|change| change.abs() > SAME_ANGLE);
    let (verb, preposition) = if charge > own.plan.molecule().charge {
        ("leaves", &own.frontier)
    } else {
        ("enters", &other.frontier)
    };
    let line = match &preposition.line {
        Some(_) => format!(
            "; {} {} by {:.1} eV on distortion",
            preposition.label,
            if preposition.change < 0.0 {
                "falls"
            } else {
                "rises"
            },
            preposition.change.abs()
        ),
        None => String::new(),
    };
    let reason = if before != after {
        format!("one electron {verb}: {before} becomes {after}{line}")
    } else if let Some(change) = change.filter(|_| differs) {
        let (verb, size) = (if change > 0.0 { "opens" } else { "closes" }, change.abs());
        format!("the angle {verb} by {size:.0}°{line}")
    } else {
        format!("the same shape ({after}); worth computing for its energy only")
    };
    OtherCharge {
        charge,
        unpaired: other.plan.electrons().unpaired(),
        verdict: after.to_owned(),
        angle,
        support: other.ruling.support,
        differs,
        reason,
    }
}
