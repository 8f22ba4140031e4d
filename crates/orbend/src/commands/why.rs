//! `--why LINE[@FROM..TO]`: which lines of a sweep are explained, and between which values.

use orbend_report::{WhyRecord, why_record};
use orbend_scan::{Numbering, Sweep};

use crate::failure::Failure;

/// A line and two values of the coordinate.
pub(crate) struct Asked {
    line: usize,
    from: f64,
    to: f64,
}

/// Reads the options against the lines that there are.
pub(crate) fn asked(sweep: &Sweep, words: &[String]) -> Result<Vec<Asked>, Failure> {
    let plan = sweep.plan();
    let axes = plan.path().axes();
    let [axis] = axes else {
        return match words.first() {
            None => Ok(Vec::new()),
            Some(word) => Err(Failure::request(format!(
                "--why {word}: a grid has no lines to explain"
            ))
            .fix("sweep along one coordinate")),
        };
    };
    let (low, high) = axis.limits();
    let ends = [axis.values.first(), axis.values.last()].map(|end| end.copied().unwrap_or(0.0));
    words
        .iter()
        .map(|word| {
            let (label, range) = match word.split_once('@') {
                Some((label, range)) => (label.trim(), Some(range)),
                None => (word.trim(), None),
            };
            let [from, to] = match range {
                None => ends,
                Some(range) => range
                    .split_once("..")
                    .and_then(|(from, to)| {
                        Some([from.trim().parse().ok()?, to.trim().parse().ok()?])
                    })
                    .ok_or_else(|| {
                        Failure::request(format!("--why {word}: {range} is not a pair of values"))
                            .fix("write a label, or a label and two values: 5a1@92..180")
                    })?,
            };
            if let Some(outside) = [from, to].into_iter().find(|at| !(low..=high).contains(at)) {
                return Err(Failure::request(format!(
                    "--why {word}: {outside} lies outside the sweep, {low}..{high}"
                ))
                .fix("give two values inside the sweep, or widen it"));
            }
            if (from - to).abs() < 1e-9 {
                return Err(Failure::request(format!(
                    "--why {word}: there is no change from a value to itself"
                ))
                .fix("give two different values inside the sweep"));
            }
            let line = find(sweep, label).ok_or_else(|| unknown(sweep, word, label))?;
            Ok(Asked { line, from, to })
        })
        .collect()
}

/// The records, in the order asked for.
pub(crate) fn records(sweep: &Sweep, asked: &[Asked]) -> Result<Vec<WhyRecord>, Failure> {
    asked
        .iter()
        .map(|one| {
            why_record(sweep, one.line, one.from, one.to)
                .map_err(|error| Failure::from_library(error.to_string()))
        })
        .collect()
}

fn find(sweep: &Sweep, label: &str) -> Option<usize> {
    let plan = sweep.plan();
    let frontier = |occupied: bool| {
        let point = sweep.point(0).ok()?;
        let mut levels = point.levels.iter();
        let filled = |electrons: f64| electrons > 1e-6;
        if occupied {
            levels
                .rfind(|level| filled(level.occupation))
                .map(|level| level.line)
        } else {
            levels
                .find(|level| !filled(level.occupation))
                .map(|level| level.line)
        }
    };
    match label.to_ascii_lowercase().as_str() {
        "homo" => return frontier(true),
        "lumo" => return frontier(false),
        _ => {}
    }
    let core = plan.request().numbering == Numbering::Core;
    plan.lines().iter().position(|head| {
        if core {
            head.name.plain == label || head.name.display == label
        } else {
            head.name.valence_plain == label || head.name.valence_display == label
        }
    })
}

fn unknown(sweep: &Sweep, word: &str, label: &str) -> Failure {
    let plan = sweep.plan();
    let core = plan.request().numbering == Numbering::Core;
    let mut known: Vec<&str> = Vec::new();
    for head in plan.lines() {
        let name = if core {
            &head.name.plain
        } else {
            &head.name.valence_plain
        };
        if !known.contains(&name.as_str()) {
            known.push(name);
        }
    }
    Failure::request(format!("--why {word}: no line is called `{label}`")).fix(format!(
        "the lines are {}, or write homo or lumo",
        known.join(", ")
    ))
}
