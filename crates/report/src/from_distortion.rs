//! From distortions to their record.

use orbend_scan::reasons::{Distortions, Hint, HintOrder};

use crate::document::{DistortionsRecord, HintRecord, NotFinite, Number, TrialRecord};

/// The record of one geometry's distortions; `start` is its place among the start geometries of a
/// plan.
///
/// # Errors
/// A value that is not finite.
pub fn distortions_record(
    distortions: &Distortions,
    start: Option<usize>,
) -> Result<DistortionsRecord, NotFinite> {
    Ok(DistortionsRecord {
        start: start.map(|start| start as u32),
        group: distortions.group.clone(),
        vibrations: distortions.vibrations.clone(),
        hints: distortions
            .hints
            .iter()
            .map(hint)
            .collect::<Result<_, _>>()?,
    })
}

fn hint(hint: &Hint) -> Result<HintRecord, NotFinite> {
    let numbers = |list: &[f64]| -> Result<Vec<Number>, NotFinite> {
        list.iter().map(|&x| Number::new(x)).collect()
    };
    Ok(HintRecord {
        order: match hint.order {
            HintOrder::First => "first",
            HintOrder::LinearSplitting => "linear-splitting",
            HintOrder::Second => "second",
        }
        .to_owned(),
        irrep: hint.irrep.clone(),
        display: hint.irrep_display.clone(),
        labels: hint.levels.iter().map(|name| name.plain.clone()).collect(),
        electrons: Number::new(hint.electrons)?,
        coupling: Number::new(hint.coupling)?,
        gap: hint.gap.map(Number::new).transpose()?,
        strength: hint.strength.map(Number::new).transpose()?,
        keeps_lengths: hint.keeps_lengths,
        displacement: hint
            .displacement
            .iter()
            .map(|&d| Number::triple(d))
            .collect::<Result<_, _>>()?,
        trial: TrialRecord {
            name: hint.trial.name.clone(),
            amplitudes: numbers(&hint.trial.amplitudes)?,
            changes: numbers(&hint.trial.changes)?,
            falls: hint.trial.falls,
            group: hint.trial.group.clone(),
        },
    })
}
