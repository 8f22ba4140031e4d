//! The verdict over perturbed parameters.

use orbend_hamiltonian::{Basis, Coupling, HamiltonianPlan, Method};
use orbend_structure::Element;
use rayon::prelude::*;

use crate::error::ScanError;
use crate::plan::SweepPlan;

use super::arguments::{Favour, geometries, with_coupling};
use super::centre::{Bond, Centre, distance};
use super::charge::Response;
use super::engine::{Engine, Model};
use super::minimum::read;
use super::motion::{Motion, MotionKind};
use super::random::SplitMix64;

/// Relative standard deviation of Hᵢᵢ and of ζ: published values of one shell differ by about that.
pub(crate) const SPREAD: f64 = 0.05;
/// Range of K: 1.75 as usual; published calculations use 1.65 to 1.85 and beyond.
pub(crate) const K_RANGE: (f64, f64) = (1.65, 1.85);
/// Largest relative change of a bond length.
pub(crate) const LENGTH: f64 = 0.02;

/// What the perturbed curves say.
#[derive(Clone, Debug, PartialEq)]
pub struct Support {
    /// Share of all curves with a minimum away from the symmetric form.
    pub distorted: f64,
    /// Share of all curves whose minimum is the symmetric form, or shallow.
    pub symmetric: f64,
    /// Share of all curves that end lowest in the other symmetric form of a torsion.
    pub opposite: f64,
    /// Share of the curves with charge response whose charges had not come to rest.
    pub restless: f64,
    /// Number of curves.
    pub curves: usize,
    /// Shares of distorted curves in the constant and in the weighted form.
    pub by_form: (f64, f64),
    /// 10 %, median and 90 % of the angle over the distorted curves, degrees.
    pub angles: Option<[f64; 3]>,
}

impl Support {
    /// What is varied and by how much.
    pub fn spreads(motion: Motion) -> Vec<String> {
        let forms = if motion.kind == MotionKind::Twist {
            "each draw in both forms, constant and weighted, with charge response of 1 eV"
        } else {
            "each draw in both forms, constant and weighted, with and without charge response of 1 eV"
        };
        vec![
            "every Hii and every zeta: normal, 5 % (clipped at 2.5 standard deviations); published \
             values of one shell differ by about that; the 2p shell of hydrogen stays"
                .to_owned(),
            "K: uniform 1.65 to 1.85".to_owned(),
            "bond lengths: uniform, 2 %, equal bonds together".to_owned(),
            "odd draws take the second published values where the set has two (P, S, Cl, Se, Te)".to_owned(),
            forms.to_owned(),
        ]
    }
}

/// One draw of parameters, common to all forms.
struct Draw {
    basis: Basis,
    k: f64,
    scale: Vec<f64>,
}

/// Runs the draws on the caller's rayon pool; `other` is the basis of the second published values.
pub(crate) fn ensemble(
    plan: &SweepPlan,
    other: &Basis,
    centre: &Centre,
    motion: Motion,
    seed: u64,
    draws: usize,
) -> Result<Support, ScanError> {
    let start = geometries(plan, centre, motion, false)?;
    let step = motion.step(false);
    let bonds = bond_classes(plan, centre, &start[0]);
    let members = (0..draws)
        .into_par_iter()
        .map_init(
            || Engine::new(plan),
            |engine, draw| {
                let from = if draw % 2 == 0 { &plan.basis } else { other };
                let draw = perturb(plan, from, &bonds, seed, draw as u64);
                let mut moved = start.clone();
                for positions in &mut moved {
                    centre.stretch(&draw.scale, positions);
                }
                let method = Method {
                    k: draw.k,
                    ..*plan.hamiltonian.method()
                };
                let constant = HamiltonianPlan::new(&draw.basis, &method)?;
                let weighted = with_coupling(&constant, Coupling::Weighted)?;
                let model = |hamiltonian, response| Model {
                    hamiltonian,
                    response,
                };
                let response = Some(Response::ENSEMBLE);
                let models = [
                    model(&constant, None),
                    model(&constant, response),
                    model(&weighted, None),
                    model(&weighted, response),
                ];
                // A torsion hangs on the charges: without response the sum does not know them.
                let charged: Vec<Model<'_>> = models
                    .into_iter()
                    .filter(|model| motion.kind != MotionKind::Twist || model.response.is_some())
                    .collect();
                let curves = engine.curves(&moved, &charged);
                Ok(curves
                    .iter()
                    .map(|curve| {
                        let (favours, found) = read(motion, step, curve.usable());
                        Member {
                            favours,
                            distortion: found.map_or(0.0, |minimum| minimum.distortion),
                            at_rest: curve.at_rest,
                        }
                    })
                    .collect::<Vec<_>>())
            },
        )
        .collect::<Result<Vec<_>, ScanError>>()?;
    Ok(summary(&members, motion))
}

/// What one perturbed curve says.
struct Member {
    favours: Favour,
    distortion: f64,
    at_rest: bool,
}

fn summary(members: &[Vec<Member>], motion: Motion) -> Support {
    let each = members.first().map_or(0, Vec::len);
    let count = |wanted, forms: std::ops::Range<usize>| {
        members
            .iter()
            .flat_map(|member| &member[forms.clone()])
            .filter(|curve| curve.favours == wanted)
            .count() as f64
    };
    let curves = members.iter().map(Vec::len).sum::<usize>();
    let total = curves.max(1) as f64;
    let charged = if motion.kind == MotionKind::Twist {
        total
    } else {
        0.5 * total
    };
    let restless = members
        .iter()
        .flatten()
        .filter(|curve| !curve.at_rest)
        .count() as f64;
    let mut angles: Vec<f64> = members
        .iter()
        .flatten()
        .filter(|curve| curve.favours == Favour::Distorted)
        .map(|curve| motion.angle(curve.distortion))
        .collect();
    angles.sort_by(f64::total_cmp);
    Support {
        distorted: count(Favour::Distorted, 0..each) / total,
        symmetric: count(Favour::Symmetric, 0..each) / total,
        opposite: count(Favour::Opposite, 0..each) / total,
        restless: restless / charged,
        curves,
        by_form: (
            2.0 * count(Favour::Distorted, 0..each / 2) / total,
            2.0 * count(Favour::Distorted, each / 2..each) / total,
        ),
        angles: (!angles.is_empty()).then(|| [0.1, 0.5, 0.9].map(|share| quantile(&angles, share))),
    }
}

/// Linear interpolation between ordered values.
fn quantile(ordered: &[f64], share: f64) -> f64 {
    let place = share * (ordered.len() - 1) as f64;
    let low = place as usize;
    let high = (low + 1).min(ordered.len() - 1);
    ordered[low] + (place - low as f64) * (ordered[high] - ordered[low])
}

/// Class of each bond: equal elements and length (1e-6 Å) share one.
fn bond_classes(plan: &SweepPlan, centre: &Centre, positions: &[[f64; 3]]) -> Vec<usize> {
    let elements = &plan.molecule.elements;
    let key = |bond: &Bond| {
        let length = distance(positions, bond.root, bond.end);
        let length = (length * 1e6).round() as i64;
        (elements[bond.root], elements[bond.end], length)
    };
    let each: Vec<(Element, Element, i64)> = centre.bonds.iter().map(key).collect();
    let mut keys = each.clone();
    keys.sort();
    keys.dedup();
    each.iter()
        .map(|key| keys.iter().position(|other| other == key).unwrap_or(0))
        .collect()
}

fn perturb(plan: &SweepPlan, from: &Basis, bonds: &[usize], seed: u64, draw: u64) -> Draw {
    let mut random = SplitMix64::stream(seed, draw);
    let mut elements = plan.molecule.elements.clone();
    elements.sort();
    elements.dedup();
    let mut basis = from.clone();
    for element in elements {
        let of_element: Vec<usize> = (0..basis.shells.len())
            .filter(|&shell| basis.atoms[basis.shells[shell].atom].element == element)
            .collect();
        let mut names: Vec<(u8, u8)> = of_element
            .iter()
            .map(|&shell| (basis.shells[shell].n, basis.shells[shell].l))
            .collect();
        names.sort_unstable();
        names.dedup();
        for (n, l) in names {
            if element.number() == 1 && l == 1 {
                continue;
            }
            let energy = 1.0 + SPREAD * random.normal();
            let exponent = 1.0 + SPREAD * random.normal();
            for &shell in &of_element {
                let values = &mut basis.shells[shell];
                if (values.n, values.l) != (n, l) {
                    continue;
                }
                values.hii_ev *= energy;
                // A common factor of the exponents keeps the norm.
                values.terms.iter_mut().for_each(|term| term.0 *= exponent);
                let functions = values.first..values.first + 2 * usize::from(l) + 1;
                basis.functions[functions]
                    .iter_mut()
                    .for_each(|function| function.hii_ev *= energy);
            }
        }
    }
    let k = random.uniform(K_RANGE.0, K_RANGE.1);
    let classes = bonds.iter().max().map_or(0, |class| class + 1);
    let factors: Vec<f64> = (0..classes)
        .map(|_| random.uniform(1.0 - LENGTH, 1.0 + LENGTH))
        .collect();
    Draw {
        basis,
        k,
        scale: bonds.iter().map(|&class| factors[class]).collect(),
    }
}
