//! Spins and configurations worth computing, each with its reason.

use orbend_symmetry::PointGroup;

use crate::error::ScanError;
use crate::filling::Filling;
use crate::sweep::Sweep;

use super::handoff::{Start, StartKind, value_words};
use super::roots::{RootFlip, RootKind, nearest_point};
use super::sets::{LineSet, own_group};
use super::terms::{OpenSet, Term, terms};

/// Below this distance (eV) of the highest filled and the lowest empty level a higher spin may be
/// lower: exchange integrals of valence orbitals are of this size.
pub const SMALL_GAP_EV: f64 = 2.0;

/// One electronic state, or all terms of one configuration.
#[derive(Clone, Debug, PartialEq)]
pub struct State {
    /// Charge of the molecule.
    pub charge: i32,
    /// Unpaired electrons.
    pub unpaired: u32,
    /// Its open and highest filled levels as `--occupy` takes them: `6a1:2 2b1:1`.
    pub configuration: String,
    /// Its terms in the path group; empty where they do not follow from one product.
    pub terms: Vec<Term>,
    /// Its terms at the start geometry's own group, where that is a higher one.
    pub terms_there: Vec<Term>,
    /// The start geometry to begin with, as an index into the hand-off's starts.
    pub start: usize,
    /// Why it is worth computing.
    pub reason: String,
}

/// Electrons per set.
type Occupation = Vec<f64>;

pub(crate) fn states(
    sweep: &Sweep,
    sets: &[LineSet],
    starts: &[Start],
    flips: &[RootFlip],
) -> Result<Vec<State>, ScanError> {
    let unpaired = sweep.plan().electrons().unpaired();
    let point = |start: &Start| start.at.map_or(0, |at| nearest_point(sweep, at));
    let main = starts.first().map_or(0, point);
    let mut list = vec![state(
        sweep,
        sets,
        &occupation(sets, main),
        unpaired,
        0,
        "lowest filling at the first start geometry".to_owned(),
    )];
    for (index, one) in starts.iter().enumerate() {
        if let Filling::ByLine { .. } = sweep.plan().filling {
            break;
        }
        if one.kind == StartKind::HigherSymmetry || one.at.is_none() || index == 0 {
            degenerate(sweep, sets, point(one), index, &mut list)?;
        }
    }
    for flip in flips.iter().filter(|flip| flip.kind == RootKind::Ground) {
        across(sweep, sets, starts, flip, &mut list);
    }
    // The first start geometry counts before the rest of the path.
    let small = |found: &(f64, usize)| found.0 < SMALL_GAP_EV;
    let gap = smallest_gap(sets, main..main + 1)
        .filter(small)
        .or_else(|| smallest_gap(sets, 0..sweep.points()).filter(small));
    if let Some((gap, at)) = gap {
        let place = sweep.plan().path.values(at);
        let place = place.first().map_or_else(
            || "here".to_owned(),
            |&value| format!("at {}", value_words(sweep, value)),
        );
        higher_spin(
            sweep,
            sets,
            at,
            unpaired + 2,
            &format!(
                "highest filled and lowest empty level are {gap:.2} eV apart {place}: a higher spin may be lower"
            ),
            &mut list,
        );
    }
    let mut kept: Vec<State> = Vec::new();
    for one in list {
        match kept
            .iter_mut()
            .find(|k| k.unpaired == one.unpaired && k.configuration == one.configuration)
        {
            Some(same) => {
                if !same.reason.contains(&one.reason) {
                    same.reason = format!("{}; {}", same.reason, one.reason);
                }
                if same.terms_there.is_empty() {
                    same.terms_there = one.terms_there;
                }
            }
            None => kept.push(one),
        }
    }
    Ok(kept)
}

fn occupation(sets: &[LineSet], point: usize) -> Occupation {
    sets.iter().map(|set| set.electrons[point]).collect()
}

fn state(
    sweep: &Sweep,
    sets: &[LineSet],
    occupation: &Occupation,
    unpaired: u32,
    start: usize,
    reason: String,
) -> State {
    let plan = sweep.plan();
    State {
        charge: plan.molecule.charge,
        unpaired,
        configuration: configuration(sets, occupation),
        terms: path_terms(&plan.group, sets, occupation, unpaired),
        terms_there: Vec::new(),
        start,
        reason,
    }
}

/// Open sets and the highest filled one, by rising energy; sets below are filled from below anyway.
fn configuration(sets: &[LineSet], occupation: &Occupation) -> String {
    let mut shown: Vec<usize> = (0..sets.len())
        .filter(|&set| occupation[set] > 1e-6)
        .collect();
    shown.sort_by(|&a, &b| sets[a].mean().total_cmp(&sets[b].mean()).then(a.cmp(&b)));
    let full = |set: &usize| occupation[*set] > sets[*set].capacity() - 1e-6;
    let first_open = shown
        .iter()
        .position(|set| !full(set))
        .unwrap_or(shown.len());
    let from = first_open
        .min(shown.len().saturating_sub(1))
        .saturating_sub(1);
    let words: Vec<String> = shown[from..]
        .iter()
        .map(|&set| {
            let electrons = (occupation[set] * 1e6).round() / 1e6;
            format!("{}:{electrons}", sets[set].name.plain)
        })
        .collect();
    words.join(" ")
}

fn path_terms(
    group: &PointGroup,
    sets: &[LineSet],
    occupation: &Occupation,
    unpaired: u32,
) -> Vec<Term> {
    let mut open = Vec::new();
    for (set, &electrons) in sets.iter().zip(occupation) {
        if electrons < 1e-6 || electrons > set.capacity() - 1e-6 {
            continue;
        }
        if (electrons - electrons.round()).abs() > 1e-6 {
            return Vec::new();
        }
        open.push(OpenSet {
            irrep: set.irrep,
            electrons: electrons.round() as u32,
        });
    }
    terms(group, &open, unpaired)
}

/// States of a partly filled degenerate set at a point, and what becomes of them along the path.
fn degenerate(
    sweep: &Sweep,
    sets: &[LineSet],
    point: usize,
    start: usize,
    list: &mut Vec<State>,
) -> Result<(), ScanError> {
    let unpaired = sweep.plan().electrons().unpaired();
    let now = occupation(sets, point);
    let mut families: Vec<usize> = sets.iter().map(|set| set.family).collect();
    families.dedup();
    families.sort_unstable();
    families.dedup();
    for family in families {
        let members: Vec<usize> = (0..sets.len())
            .filter(|&set| {
                sets[set].family == family
                    && sweep.full_name(sets[set].lines[0], point).0
                        == sweep.full_name(first_line(sets, family), point).0
            })
            .collect();
        let lines: usize = members.iter().map(|&set| sets[set].lines.len()).sum();
        let electrons: f64 = members.iter().map(|&set| now[set]).sum();
        let whole = (electrons - electrons.round()).abs() < 1e-6;
        if lines < 2 || electrons < 1e-6 || electrons > 2.0 * lines as f64 - 1e-6 || !whole {
            continue;
        }
        let (group, _) = own_group(sweep, point)?;
        let (name, _) = sweep.full_name(first_line(sets, family), point);
        let plain = name.plain.trim_start_matches(|c: char| c.is_ascii_digit());
        let irrep = group.irrep(plain);
        let count = electrons.round() as u32;
        let there = |unpaired: u32| {
            irrep.map_or_else(Vec::new, |irrep| {
                let open = [OpenSet {
                    irrep,
                    electrons: count,
                }];
                terms(&group, &open, unpaired)
            })
        };
        let why = format!(
            "{} holds {count} of {} electrons in {}",
            name.plain,
            2 * lines,
            group.name
        );
        if members.len() == 1 {
            // One set in the path group too: spins only.
            let mut one = state(sweep, sets, &now, unpaired, start, why.clone());
            one.terms_there = there(unpaired);
            list.push(one);
        }
        for spread in spreads(&members, sets, count, unpaired) {
            let mut filled = now.clone();
            for (&set, &electrons) in members.iter().zip(&spread) {
                filled[set] = electrons;
            }
            let mut one = state(sweep, sets, &filled, unpaired, start, why.clone());
            one.terms_there = there(unpaired);
            list.push(one);
        }
        let most = count.min(2 * lines as u32 - count);
        for higher in (unpaired + 2..=most).step_by(2) {
            let mut filled = now.clone();
            // One electron each from below, then pairs.
            for &set in &members {
                filled[set] = count as f64 * sets[set].lines.len() as f64 / lines as f64;
            }
            let mut one = state(
                sweep,
                sets,
                &filled,
                higher,
                start,
                format!("{why}: the highest spin comes first (Hund)"),
            );
            one.terms_there = there(higher);
            list.push(one);
        }
    }
    Ok(())
}

fn first_line(sets: &[LineSet], family: usize) -> usize {
    sets.iter()
        .find(|set| set.family == family)
        .map_or(0, |set| set.lines[0])
}

/// Ways to put the electrons of a merged pair of single levels into its two components.
fn spreads(members: &[usize], sets: &[LineSet], count: u32, unpaired: u32) -> Vec<Vec<f64>> {
    let single = members.iter().all(|&set| sets[set].lines.len() == 1);
    if members.len() != 2 || !single {
        return Vec::new();
    }
    match (count, unpaired) {
        (1, _) => vec![vec![1.0, 0.0], vec![0.0, 1.0]],
        (2, 0) => vec![vec![2.0, 0.0], vec![0.0, 2.0]],
        (2, _) => vec![vec![1.0, 1.0]],
        (3, _) => vec![vec![2.0, 1.0], vec![1.0, 2.0]],
        _ => Vec::new(),
    }
}

/// Both configurations of a crossing that changes the ground configuration.
fn across(
    sweep: &Sweep,
    sets: &[LineSet],
    starts: &[Start],
    flip: &RootFlip,
    list: &mut Vec<State>,
) {
    let unpaired = sweep.plan().electrons().unpaired();
    let at = starts
        .iter()
        .position(|start| start.at.is_some_and(|at| (at - flip.at).abs() < 1e-6))
        .unwrap_or(0);
    let values: Vec<f64> = (0..sweep.points())
        .filter_map(|point| sweep.plan().path.values(point).first().copied())
        .collect();
    let before = values.iter().enumerate().filter(|(_, v)| **v < flip.at);
    let after = values.iter().enumerate().filter(|(_, v)| **v > flip.at);
    let before = before.max_by(|a, b| a.1.total_cmp(b.1)).map(|(p, _)| p);
    let after = after.min_by(|a, b| a.1.total_cmp(b.1)).map(|(p, _)| p);
    let name = |line: usize| &sweep.plan().lines[line].name.plain;
    for (side, point) in [("below", before), ("above", after)] {
        let Some(point) = point else { continue };
        list.push(state(
            sweep,
            sets,
            &occupation(sets, point),
            unpaired,
            at,
            format!(
                "the lowest one {side} {}, where {} and {} cross",
                value_words(sweep, flip.at),
                name(flip.lines.0),
                name(flip.lines.1)
            ),
        ));
    }
}

/// The smallest distance of filled and empty levels at some points, and the point.
fn smallest_gap(sets: &[LineSet], points: std::ops::Range<usize>) -> Option<(f64, usize)> {
    points
        .filter_map(|point| {
            let energies = |filled: bool| {
                sets.iter()
                    .filter(move |set| {
                        if filled {
                            set.electrons[point] > 1e-6
                        } else {
                            set.electrons[point] < set.capacity() - 1e-6
                        }
                    })
                    .map(move |set| set.energies[point])
            };
            let open = sets.iter().any(|set| {
                let e = set.electrons[point];
                e > 1e-6 && e < set.capacity() - 1e-6
            });
            // An open level is its own gap; the next empty one counts then.
            let highest = energies(true).max_by(f64::total_cmp)?;
            let lowest = if open {
                sets.iter()
                    .filter(|set| set.electrons[point] < 1e-6)
                    .map(|set| set.energies[point])
                    .min_by(f64::total_cmp)?
            } else {
                energies(false).min_by(f64::total_cmp)?
            };
            Some((lowest - highest, point))
        })
        .min_by(|a, b| a.0.total_cmp(&b.0).then(a.1.cmp(&b.1)))
}

/// The lowest filling with more unpaired electrons at a point.
fn higher_spin(
    sweep: &Sweep,
    sets: &[LineSet],
    point: usize,
    unpaired: u32,
    reason: &str,
    list: &mut Vec<State>,
) {
    let plan = sweep.plan();
    let total = plan.electrons().total();
    let orbitals = plan.lines.len() as u32;
    if unpaired > total.min(2 * orbitals - total) {
        return;
    }
    let mut order: Vec<usize> = (0..sets.len()).collect();
    order.sort_by(|&a, &b| {
        sets[a].energies[point]
            .total_cmp(&sets[b].energies[point])
            .then(a.cmp(&b))
    });
    let mut filled = vec![0.0; sets.len()];
    for spin in [(total + unpaired) / 2, (total - unpaired) / 2] {
        let mut left = f64::from(spin);
        for &set in &order {
            let share = left.min(sets[set].lines.len() as f64);
            filled[set] += share;
            left -= share;
        }
    }
    list.push(state(sweep, sets, &filled, unpaired, 0, reason.to_owned()));
}
