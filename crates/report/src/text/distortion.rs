//! Distortions in words.

use crate::document::{DistortionsRecord, HintRecord};
use crate::draw::ticks::ascii_number;
use crate::lettering::Lettering;

use super::TextOptions;

/// Vibrations told along which the sum does not fall; the document has all of them.
const MOST_TRIED: usize = 3;

/// One sentence per vibration that was tried; those along which the sum falls first.
pub(super) fn distortion_words(record: &DistortionsRecord, options: &TextOptions) -> Vec<String> {
    let mut words = Vec::new();
    let falls = record.hints.iter().filter(|hint| hint.trial.falls).count();
    if falls == 0 {
        words.push(format!(
            "{}: no distortion expected (vibrations {})",
            record.group, record.vibrations
        ));
    }
    for hint in record.hints.iter().filter(|hint| hint.trial.falls) {
        words.push(hint_words(record, hint, options));
    }
    let rest = record.hints.iter().filter(|hint| !hint.trial.falls);
    for hint in rest.take(MOST_TRIED) {
        words.push(hint_words(record, hint, options));
    }
    words
}

fn hint_words(record: &DistortionsRecord, hint: &HintRecord, options: &TextOptions) -> String {
    let label = |place: usize| {
        hint.labels
            .get(place)
            .map_or_else(String::new, |label| options.label(label))
    };
    let irrep = if options.unicode {
        Lettering::level(&hint.irrep).unicode()
    } else {
        hint.irrep.clone()
    };
    let electrons = super::electrons(hint.electrons.get());
    let noun = if electrons == "1" {
        "electron"
    } else {
        "electrons"
    };
    let coupling = ascii_number(hint.coupling.get(), 2);
    let cause = match (hint.order.as_str(), hint.gap, hint.strength) {
        ("first", ..) => format!(
            "first order: {} holds {electrons} {noun} and splits along {irrep}, slope {coupling} eV/Å",
            label(0)
        ),
        ("linear-splitting", ..) => format!(
            "linear: {} holds {electrons} {noun} and splits on bending ({irrep}) in second order",
            label(0)
        ),
        (_, Some(gap), Some(strength)) => format!(
            "second order: {} and {} mix along {irrep}, coupling {coupling} eV/Å, gap {} eV, \
             coupling²/gap {} eV/Å²",
            label(0),
            label(1),
            ascii_number(gap.get(), 2),
            ascii_number(strength.get(), 2)
        ),
        _ => format!("{irrep}: {}", label(0)),
    };
    let trial = &hint.trial;
    let lowest = trial
        .changes
        .iter()
        .zip(&trial.amplitudes)
        .min_by(|a, b| a.0.get().total_cmp(&b.0.get()));
    let outcome = match lowest {
        Some((change, at)) if trial.falls => {
            let end = trial.amplitudes.last() == Some(at);
            format!(
                "the {} falls by {} eV{} {} Å, towards {}",
                trial.name.replace('-', " "),
                ascii_number(-change.get(), 2),
                if end {
                    " at least, up to"
                } else {
                    ", lowest at"
                },
                ascii_number(at.get(), 2),
                trial.group
            )
        }
        _ => format!(
            "the {} does not fall: {} stays",
            trial.name.replace('-', " "),
            record.group
        ),
    };
    format!("{cause}; {outcome}")
}
