//! The slope ledger as text.

use crate::document::{PairTerm, SweepDocument, WhyRecord};
use crate::draw::ticks::ascii_number;
use crate::draw::wording::value_with_unit;

use super::TextOptions;
use super::table::{Align, Table};

/// Rows of a table beyond these are added up in one.
const MOST_ROWS: usize = 8;
/// Parts smaller than this (eV) are added up in one row.
const SMALLEST_EV: f64 = 0.005;

/// Slopes smaller than this (eV per unit) are none.
const SMALLEST_SLOPE: f64 = 1e-9;

/// The sentence and the table of every line asked about.
pub(super) fn why(out: &mut String, document: &SweepDocument, options: &TextOptions) {
    let unit = document
        .coordinates
        .first()
        .map(|coordinate| coordinate.unit);
    for record in document.why.iter().flatten() {
        let place = |at: f64| unit.map_or_else(String::new, |unit| value_with_unit(at, unit));
        let label = options.label(options.pick(&record.label, &record.valence_label));
        let (from, to) = (place(record.from.get()), place(record.to.get()));
        options.paragraph(
            out,
            &format!("why {label}, {from} to {to}: {}", record.text),
        );
        out.push('\n');
        out.push_str(&table(record, options).render(options.columns()));
        let words: Vec<String> = record
            .slope_terms
            .iter()
            .map(|slope| {
                let largest: Vec<String> = slope
                    .terms
                    .iter()
                    .take(2)
                    .map(|term| format!("{} {}", term.name, signed(term.value.get(), 4)))
                    .collect();
                let slope_words = signed(slope.slope.get(), 5);
                let place = place(slope.at.get());
                if slope.slope.get().abs() < SMALLEST_SLOPE {
                    return format!("at {place} none");
                }
                format!("at {place} {slope_words} ({})", largest.join(", "))
            })
            .collect();
        if !words.is_empty() {
            let per = match unit {
                Some(crate::document::CoordinateUnit::Degree) => "eV/degree",
                Some(crate::document::CoordinateUnit::Angstrom) => "eV/Å",
                _ => "eV per unit",
            };
            options.paragraph(out, &format!("slope in {per}: {}", words.join("; ")));
        }
        out.push('\n');
    }
}

fn table(record: &WhyRecord, options: &TextOptions) -> Table {
    let mut table = Table::new(&[
        ("part of the change", Align::Left),
        ("eV", Align::Right),
        ("overlap population", Align::Left),
    ]);
    let mut rest = 0.0;
    for (place, term) in record.first_order.iter().enumerate() {
        let value = term.value.get();
        if place >= MOST_ROWS || value.abs() < SMALLEST_EV {
            rest += value;
            continue;
        }
        let overlap = format!(
            "{} to {}",
            signed(term.overlap_before.get(), 3),
            signed(term.overlap_after.get(), 3)
        );
        table.row(vec![pair_words(term), signed(value, 3), overlap]);
    }
    if rest.abs() >= 0.0005 {
        table.row(vec!["other pairs".into(), signed(rest, 3), String::new()]);
    }
    let held = format!(
        "------- orbital held: {} eV -------",
        signed(record.first_order_sum.get(), 3)
    );
    table.rule(&held);
    for mixing in &record.mixing {
        if mixing.value.get().abs() >= 0.0005 {
            let label = options.label(options.pick(&mixing.label, &mixing.valence_label));
            let name = format!("mixing with {label} ({})", mixing.mostly);
            table.row(vec![name, signed(mixing.value.get(), 3), String::new()]);
        }
    }
    table.row(vec![
        "sum: change of the level".into(),
        signed(record.change.get(), 3),
        format!(
            "{} % of its character kept",
            ascii_number(100.0 * record.kept.get(), 0)
        ),
    ]);
    table
}

fn pair_words(term: &PairTerm) -> String {
    match term.atoms.as_slice() {
        [[a, b]] => format!("{} (atoms {a}-{b})", term.name),
        [[a, b], rest @ ..] => format!("{} (atoms {a}-{b} and {} like it)", term.name, rest.len()),
        [] => term.name.clone(),
    }
}

fn signed(value: f64, decimals: usize) -> String {
    let text = ascii_number(value, decimals);
    if value >= 0.0 {
        format!("+{text}")
    } else {
        text
    }
}
