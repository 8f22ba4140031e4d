//! What decides and what could be wrong, in words with the numbers behind them.

use super::arguments::Favour;
use super::motion::{Motion, MotionKind};
use super::rule::{Doubt, Evidence, FLAT_EV, INVERTED_EV, Way};
use super::verdict::ShapeVerdict;

/// What decides.
pub(crate) fn because(verdict: &ShapeVerdict, evidence: &Evidence) -> Vec<String> {
    let motion = verdict.motion;
    let (distorted, symmetric) = evidence.shares;
    let mut shares = vec![
        format!("{} are {}", percent(distorted), motion.distorted_word()),
        format!("{} {}", percent(symmetric), motion.symmetric_word()),
    ];
    if evidence.way != Way::Distortion {
        shares.push(format!(
            "{} {}",
            percent(evidence.opposite),
            motion.opposite_word()
        ));
    }
    let mut out = vec![format!(
        "of {} curves with perturbed parameters {}",
        verdict.support.curves,
        shares.join(", ")
    )];
    let leading = &verdict.sums[verdict.lead];
    let name = if verdict.lead == 0 {
        "the sum with polarised hydrogen"
    } else {
        "the sum with polarised hydrogen and charge response"
    };
    let below = if motion.one_sided() {
        format!("the {} form", motion.symmetric_word())
    } else if evidence.way == Way::Torsion {
        "the next form".to_owned()
    } else {
        "the start".to_owned()
    };
    out.push(match (leading.favours, leading.angle, leading.depth) {
        (Favour::Distorted, Some(angle), Some(depth)) => {
            format!(
                "{name} has its minimum at {}, {depth:.2} eV below {below}",
                place(motion, angle)
            )
        }
        (form @ (Favour::Symmetric | Favour::Opposite), _, Some(depth)) if !motion.one_sided() => {
            format!(
                "{name} is lowest at the {} form, {depth:.2} eV below {below}",
                form.word(motion)
            )
        }
        (Favour::Symmetric, ..) => {
            format!(
                "{name} has its minimum at the {} form",
                motion.symmetric_word()
            )
        }
        (_, _, Some(_)) => format!("{name} gives two forms within {FLAT_EV} eV"),
        _ => format!("{name} falls to the end of the range without a minimum"),
    });
    let frontier = &verdict.frontier;
    let reference = motion.angle(motion.reference());
    if !verdict.frontier_votes {
        // Shown as an argument; it decides nothing here.
    } else if frontier.line.is_some() {
        out.push(format!(
            "the frontier line {} ({} electron{}) {} by {:.2} eV from the {} form to {reference:.0}°",
            frontier.label,
            frontier.electrons,
            if (frontier.electrons - 1.0).abs() < 1e-6 { "" } else { "s" },
            if frontier.change < 0.0 { "falls" } else { "rises" },
            frontier.change.abs(),
            motion.symmetric_word()
        ));
    } else {
        out.push(format!(
            "no occupied line changes by more than 0.3 eV down to {reference:.0}°"
        ));
    }
    out.extend(
        verdict
            .ruling
            .doubt
            .map(|doubt| undecided(doubt).to_owned()),
    );
    out
}

fn undecided(doubt: Doubt) -> &'static str {
    match doubt {
        Doubt::MissingShell => {
            "undecided: the (n-1)d shell that bends dihalides of Ca, Sr and Ba is not in the basis"
        }
        Doubt::FrontierAgainstSum => "undecided: the frontier line speaks against the sums",
        Doubt::Split => {
            "undecided: too few of the perturbed curves agree and no second argument settles it"
        }
        Doubt::OtherForm => {
            "undecided: a see-saw (one pair of ligands in line, one lone pair) is neither of the two forms"
        }
        Doubt::MajorityAgainstLeading => {
            "undecided: most perturbed curves are against the leading sum, and no line speaks for them"
        }
    }
}

/// What could be wrong.
pub(crate) fn doubts(verdict: &ShapeVerdict, evidence: &Evidence) -> Vec<String> {
    let motion = verdict.motion;
    let shape = verdict.ruling.shape;
    let mut out = vec!["the sum of orbital energies carries no electron repulsion".to_owned()];
    let reference = if shape == Favour::Silent {
        verdict.ruling.majority
    } else {
        shape
    };
    if evidence.frontier != Favour::Silent && evidence.frontier != reference {
        let exempt = evidence.light_hydride
            && evidence.frontier_single
            && evidence.frontier == Favour::Distorted;
        let class = if exempt {
            "; in a first-row hydride radical a single electron in that line does not decide"
        } else {
            ""
        };
        out.push(format!(
            "the frontier line {} speaks for {}, the sums for {}{class}",
            verdict.frontier.label,
            evidence.frontier.word(motion),
            reference.word(motion)
        ));
    }
    let leading = &verdict.sums[verdict.lead];
    if let Some(depth) = leading
        .depth
        .filter(|&depth| motion.one_sided() && depth > 1e-3 && depth < 4.0 * FLAT_EV)
    {
        let small = if depth < FLAT_EV {
            "below"
        } else {
            "little above"
        };
        out.push(format!(
            "flat (quasilinear or nearly planar): the minimum is {depth:.3} eV deep, {small} kT at 298 K (0.026 eV)"
        ));
    }
    let opposed: Vec<&str> = verdict
        .sums
        .iter()
        .filter(|sum| sum.favours != reference)
        .map(|sum| sum.name)
        .collect();
    if !opposed.is_empty() {
        out.push(format!(
            "forms disagree: {} not for {}",
            opposed.join(", "),
            reference.word(motion)
        ));
    }
    let (constant, weighted) = verdict.support.by_form;
    match motion.kind {
        MotionKind::Squash => out.push(
            verdict.see_saw.map_or_else(
                || "only the path between tetrahedral and square-planar is judged".to_owned(),
                |below| {
                    format!(
                        "the see-saw form (one pair in line) lies {below:.2} eV lower than anything on the \
                         path between tetrahedral and square-planar"
                    )
                },
            ),
        ),
        MotionKind::Twist => out.push(
            "bond angles stay during the turn; barriers of a few hundredths of an eV are beyond the method"
                .to_owned(),
        ),
        MotionKind::Ends => out.push("only trans bending is looked at, not cis".to_owned()),
        MotionKind::Free(orbend_structure::CoordinateKind::Stretch) => {
            out.push("the sum of level energies gives no bond lengths".to_owned());
        }
        _ => {}
    }
    if !motion.frontier_votes() {
        out.push(
            "the score on species of known shape covers bends and pyramids, not this motion"
                .to_owned(),
        );
    }
    if verdict.support.restless > 0.1 {
        out.push(format!(
            "in {} of the perturbed curves with charge response the charges do not come to rest everywhere",
            percent(verdict.support.restless)
        ));
    }
    if (constant - weighted).abs() > 0.25 {
        out.push(format!(
            "the two coupling forms differ: {} of the constant and {} of the weighted curves are {}",
            percent(constant),
            percent(weighted),
            motion.distorted_word()
        ));
    }
    if evidence.heavy_alkaline_earth {
        out.push(
            "heavy alkaline earth: its empty (n-1)d shell and the polarisable core, which bend the \
             dihalides, are not in the basis"
                .to_owned(),
        );
    }
    if evidence.inverted {
        out.push(format!(
            "inverted polarity: the p level of a ligand lies more than {INVERTED_EV} eV above that of the centre"
        ));
    }
    if let Some((pair, difference)) = most_ionic(verdict).filter(|one| one.1 > IONIC) {
        out.push(format!(
            "strongly ionic bond {pair} (electronegativities differ by {difference:.1}): shallow curves \
             that hang on the charge response"
        ));
    }
    if second_order_jahn_teller(verdict) {
        out.push(
            "seven-electron AH3 of a heavier centre: a low-lying antibonding line mixes in on \
             pyramidalisation (second-order Jahn-Teller), which the sum tends to miss"
                .to_owned(),
        );
    }
    let restless: Vec<&str> = verdict
        .sums
        .iter()
        .filter(|sum| !sum.at_rest)
        .map(|sum| sum.name)
        .collect();
    if !restless.is_empty() {
        out.push(format!(
            "the charges do not come to rest everywhere in {}: its curve may jump where levels cross",
            restless.join(", ")
        ));
    }
    if verdict.electron_count != Favour::Silent && verdict.electron_count != reference {
        out.push(format!(
            "the electron-count rule (Walsh 1953) says {} for {} electrons",
            verdict.electron_count.word(motion),
            verdict.plan.electrons().total()
        ));
    }
    if verdict.plan.electrons().unpaired() > 0 {
        out.push(
            "the method knows no multiplets: the order of spin states is not claimed".to_owned(),
        );
    }
    out
}

/// Difference of electronegativities (Pauling) from which on a bond is called strongly ionic.
const IONIC: f64 = 2.3;

/// The bond of the centre with the largest difference of electronegativities.
fn most_ionic(verdict: &ShapeVerdict) -> Option<(String, f64)> {
    let elements = &verdict.plan.molecule().elements;
    let centre = elements[verdict.centre.atom];
    let own = centre.electronegativity()?;
    verdict
        .centre
        .ligands
        .iter()
        .filter_map(|&ligand| {
            let element = elements[ligand];
            let difference = (element.electronegativity()? - own).abs();
            Some((
                format!("{}-{}", centre.symbol(), element.symbol()),
                difference,
            ))
        })
        .max_by(|a, b| a.1.total_cmp(&b.1))
}

fn second_order_jahn_teller(verdict: &ShapeVerdict) -> bool {
    let plan = &verdict.plan;
    verdict.centre.ligands.len() == 3
        && verdict
            .centre
            .ligands
            .iter()
            .all(|&ligand| plan.molecule.elements[ligand].number() == 1)
        && plan.electrons().total() == 7
        && plan.molecule.elements[verdict.centre.atom].period() >= 3
}

/// A value of the coordinate with its unit.
fn place(motion: Motion, value: f64) -> String {
    if motion.kind == MotionKind::Free(orbend_structure::CoordinateKind::Stretch) {
        format!("{value:.2} Å")
    } else {
        format!("{value:.0}°")
    }
}

fn percent(share: f64) -> String {
    format!("{:.0} %", 100.0 * share)
}
