//! What decides and what could be wrong, in words with the numbers behind them.

use super::arguments::Favour;
use super::rule::{Doubt, Evidence, FLAT_EV, INVERTED_EV};
use super::verdict::ShapeVerdict;

/// What decides.
pub(crate) fn because(verdict: &ShapeVerdict, evidence: &Evidence) -> Vec<String> {
    let motion = verdict.motion;
    let (distorted, symmetric) = evidence.shares;
    let mut out = vec![format!(
        "of {} curves with perturbed parameters {} are {}, {} {}",
        verdict.support.curves,
        percent(distorted),
        motion.distorted_word(),
        percent(symmetric),
        motion.symmetric_word()
    )];
    let leading = &verdict.sums[0];
    out.push(match (leading.favours, leading.angle, leading.depth) {
        (Favour::Distorted, Some(angle), Some(depth)) => format!(
            "the sum with polarised hydrogen has its minimum at {angle:.0}°, {depth:.2} eV below the {} form",
            motion.symmetric_word()
        ),
        (Favour::Symmetric, ..) => {
            format!("the sum with polarised hydrogen has its minimum at the {} form", motion.symmetric_word())
        }
        _ => "the sum with polarised hydrogen falls to the end of the range without a minimum".to_owned(),
    });
    let frontier = &verdict.frontier;
    let reference = motion.angle(motion.reference());
    if frontier.line.is_some() {
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
        out.push(format!("no occupied line changes by more than 0.3 eV down to {reference:.0}°"));
    }
    out.extend(verdict.ruling.doubt.map(|doubt| undecided(doubt).to_owned()));
    out
}

fn undecided(doubt: Doubt) -> &'static str {
    match doubt {
        Doubt::MissingShell => {
            "undecided: the (n-1)d shell that bends dihalides of Ca, Sr and Ba is not in the basis"
        }
        Doubt::FrontierAgainstSum => "undecided: the frontier line speaks against the sums",
        Doubt::Split => {
            "undecided: less than two thirds of the perturbed curves agree and no second argument settles it"
        }
    }
}

/// What could be wrong.
pub(crate) fn doubts(verdict: &ShapeVerdict, evidence: &Evidence) -> Vec<String> {
    let motion = verdict.motion;
    let shape = verdict.ruling.shape;
    let mut out = vec!["the sum of orbital energies carries no electron repulsion".to_owned()];
    let reference =
        if shape == Favour::Silent { verdict.ruling.majority } else { shape };
    if evidence.frontier != Favour::Silent && evidence.frontier != reference {
        let class = if evidence.light_hydride && evidence.frontier_single {
            "; in a first-row radical AH3 a single electron in that line does not decide"
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
    let leading = &verdict.sums[0];
    if let Some(depth) = leading.depth.filter(|&depth| depth > 1e-3 && depth < 4.0 * FLAT_EV) {
        let small = if depth < FLAT_EV { "below" } else { "little above" };
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
        out.push(format!("forms disagree: {} not for {}", opposed.join(", "), reference.word(motion)));
    }
    let (constant, weighted) = verdict.support.by_form;
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
    if second_order_jahn_teller(verdict) {
        out.push(
            "seven-electron AH3 of a heavier centre: a low-lying antibonding line mixes in on \
             pyramidalisation (second-order Jahn-Teller), which the sum tends to miss"
                .to_owned(),
        );
    }
    let restless: Vec<&str> =
        verdict.sums.iter().filter(|sum| !sum.at_rest).map(|sum| sum.name).collect();
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
        out.push("the method knows no multiplets: the order of spin states is not claimed".to_owned());
    }
    out
}

fn second_order_jahn_teller(verdict: &ShapeVerdict) -> bool {
    let plan = &verdict.plan;
    verdict.centre.ligands.len() == 3
        && verdict.centre.ligands.iter().all(|&ligand| plan.molecule.elements[ligand].number() == 1)
        && plan.electrons().total() == 7
        && plan.molecule.elements[verdict.centre.atom].period() >= 3
}

fn percent(share: f64) -> String {
    format!("{:.0} %", 100.0 * share)
}
