//! The slope ledger of a sweep's lines, as records.

use orbend_scan::reasons::TermGroup;
use orbend_scan::{ScanError, Sweep, SweepPlan};

use crate::document::{MixingTerm, Number, PairTerm, SlopeRecord, WhyRecord};
use crate::from_scan::FromScanError;

/// Why a line of a sweep along one coordinate changes between two values of it.
///
/// # Errors
/// Values outside the path, a geometry that cannot be solved, a line whose change cannot be split.
pub fn why_record(
    sweep: &Sweep,
    line: usize,
    from: f64,
    to: f64,
) -> Result<WhyRecord, FromScanError> {
    let plan = sweep.plan();
    let change = plan.change(line, from, to)?;
    let mut slopes = Vec::with_capacity(sweep.points());
    for point in 0..sweep.points() {
        let values = plan.path().values(point);
        slopes.push(finite(plan.slopes(&values, 0))?.map(|all| all[line]));
    }
    let mut slope_terms = Vec::new();
    for at in [from, to] {
        if let Some(slope) = finite(plan.slope(line, &[at], 0))? {
            slope_terms.push(SlopeRecord {
                at: Number::new(at)?,
                slope: Number::new(slope.value_ev)?,
                terms: pair_terms(plan, &plan.grouped(&slope.terms))?,
            });
        }
    }
    let orbitals = plan.orbitals(&[from])?;
    let mixing = change
        .mixing
        .iter()
        .map(|mixing| {
            let name = &plan.lines()[mixing.line].name;
            Ok(MixingTerm {
                line: mixing.line as u32,
                label: name.plain.clone(),
                valence_label: name.valence_plain.clone(),
                mostly: plan.mostly(&orbitals, mixing.line),
                value: Number::new(mixing.value_ev)?,
            })
        })
        .collect::<Result<_, FromScanError>>()?;
    let name = &plan.lines()[line].name;
    Ok(WhyRecord {
        line: plan.set_of(line).first().copied().unwrap_or(line) as u32,
        label: name.plain.clone(),
        valence_label: name.valence_plain.clone(),
        from: Number::new(from)?,
        to: Number::new(to)?,
        energies: [
            Number::new(change.energies_ev[0])?,
            Number::new(change.energies_ev[1])?,
        ],
        change: Number::new(change.difference_ev())?,
        first_order_sum: Number::new(change.first_order_ev())?,
        first_order: pair_terms(plan, &plan.grouped(&change.first_order))?,
        mixing,
        kept: Number::new(change.kept)?,
        slopes: slopes
            .into_iter()
            .map(|slope| slope.map(Number::new).transpose())
            .collect::<Result<_, _>>()?,
        slope_terms,
        text: plan.change_in_words(line, &change)?,
    })
}

/// Nothing where the positions have no finite derivative.
fn finite<T>(result: Result<T, ScanError>) -> Result<Option<T>, ScanError> {
    match result {
        Err(ScanError::Path(orbend_structure::PathError::NoSpeed { .. })) => Ok(None),
        other => other.map(Some),
    }
}

fn pair_terms(plan: &SweepPlan, groups: &[TermGroup]) -> Result<Vec<PairTerm>, FromScanError> {
    groups
        .iter()
        .filter(|group| group.value_ev.abs() > 1e-12 || group.overlap[0].abs() > 1e-9)
        .map(|group| {
            Ok(PairTerm {
                atoms: group
                    .atoms
                    .iter()
                    .map(|pair| pair.map(|atom| atom as u32 + 1))
                    .collect(),
                shells: group.shells.map(|shell| plan.shell(shell)),
                name: group.name.clone(),
                value: Number::new(group.value_ev)?,
                overlap_before: Number::new(group.overlap[0])?,
                overlap_after: Number::new(group.overlap[1])?,
            })
        })
        .collect()
}
