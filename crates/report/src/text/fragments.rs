//! Fragments as text.

use crate::document::FragmentsRecord;
use crate::draw::ticks::ascii_number;
use crate::draw::wording::charge;

use super::table::{Align, Table};
use super::{TextOptions, electrons};

/// Pairs told.
const MOST_PAIRS: usize = 4;
/// Shares below this are left out.
const LEAST_SHARE: f64 = 0.05;

/// What the fragments are, how the levels are made of their orbitals, and what drives them together.
pub(super) fn fragments(out: &mut String, record: &FragmentsRecord, options: &TextOptions) {
    heads(out, record, options);
    out.push('\n');
    out.push_str(&levels(record, options).render(options.columns()));
    out.push('\n');
    let frontier = frontier(record, options);
    if !frontier.is_empty() {
        options.paragraph(out, &format!("electrons in fragment orbitals: {frontier}"));
    }
    for pair in record.pairs.iter().take(MOST_PAIRS) {
        if pair.energy.get() > -0.005 {
            break;
        }
        let [a, b] = pair
            .orbitals
            .map(|index| name(record, index as usize, options));
        options.paragraph(
            out,
            &format!(
                "{a} with {b}: {} eV for the two alone, overlap {}, overlap population {}",
                ascii_number(pair.energy.get(), 2),
                ascii_number(pair.overlap.get(), 3),
                ascii_number(pair.population.get(), 3)
            ),
        );
    }
}

fn heads(out: &mut String, record: &FragmentsRecord, options: &TextOptions) {
    for fragment in &record.fragments {
        let atoms: Vec<String> = fragment.atoms.iter().map(u32::to_string).collect();
        let charge = match fragment.charge {
            0 => String::new(),
            other => format!(" {}", charge(other)),
        };
        options.paragraph(
            out,
            &format!(
                "fragment {}: {}{charge} (atoms {}), {}",
                fragment.name,
                fragment.formula,
                atoms.join(", "),
                fragment.point_group
            ),
        );
    }
}

fn name(record: &FragmentsRecord, index: usize, options: &TextOptions) -> String {
    let orbital = &record.orbitals[index];
    let fragment = &record.fragments[orbital.fragment as usize].name;
    let label = options.pick(&orbital.label, &orbital.valence_label);
    format!("{fragment} {}", options.label(label))
}

fn levels(record: &FragmentsRecord, options: &TextOptions) -> Table {
    let mut table = Table::new(&[
        ("level", Align::Left),
        ("energy/eV", Align::Right),
        ("electrons", Align::Right),
        ("made of fragment orbitals", Align::Left),
    ]);
    for level in record.levels.iter().rev() {
        let mut shares: Vec<(usize, f64)> = level
            .shares
            .iter()
            .map(|share| share.get())
            .enumerate()
            .filter(|(_, share)| share.abs() >= LEAST_SHARE)
            .collect();
        shares.sort_by(|a, b| b.1.total_cmp(&a.1).then(a.0.cmp(&b.0)));
        let words: Vec<String> = shares
            .iter()
            .take(3)
            .map(|(index, share)| {
                let percent = ascii_number(100.0 * share, 0);
                format!("{} {percent} %", name(record, *index, options))
            })
            .collect();
        table.row(vec![
            options.label(options.pick(&level.label, &level.valence_label)),
            ascii_number(level.energy.get(), 3),
            electrons(level.electrons.get()),
            words.join(", "),
        ]);
    }
    table
}

/// Orbitals whose electrons change by more than a twentieth: `A 2e1 1.62 (alone 1)`.
fn frontier(record: &FragmentsRecord, options: &TextOptions) -> String {
    let words: Vec<String> = record
        .orbitals
        .iter()
        .enumerate()
        .filter(|(_, orbital)| {
            (orbital.population.get() - orbital.electrons.get()).abs() > LEAST_SHARE
        })
        .map(|(index, orbital)| {
            format!(
                "{} {} (alone {})",
                name(record, index, options),
                ascii_number(orbital.population.get(), 2),
                electrons(orbital.electrons.get())
            )
        })
        .collect();
    words.join(", ")
}

/// What becomes of the fragments along a path: the electrons of the orbitals that change, and the pairs
/// that gain most at both ends.
#[must_use]
pub fn sweep_fragments_text(records: &[FragmentsRecord], options: &TextOptions) -> String {
    let mut out = String::new();
    let (Some(first), Some(last)) = (records.first(), records.last()) else {
        return out;
    };
    heads(&mut out, first, options);
    let mut table = Table::new(&[
        ("fragment orbital", Align::Left),
        ("alone", Align::Right),
        ("start", Align::Right),
        ("end", Align::Right),
        ("change", Align::Right),
    ]);
    for (index, (one, other)) in first.orbitals.iter().zip(&last.orbitals).enumerate().rev() {
        let (from, to) = (one.population.get(), other.population.get());
        if (from - to).abs() > LEAST_SHARE || (from - one.electrons.get()).abs() > LEAST_SHARE {
            table.row(vec![
                name(first, index, options),
                electrons(one.electrons.get()),
                ascii_number(from, 3),
                ascii_number(to, 3),
                ascii_number(to - from, 3),
            ]);
        }
    }
    out.push('\n');
    out.push_str(&table.render(options.columns()));
    out.push('\n');
    for (record, place) in [(first, "start"), (last, "end")] {
        if let Some(words) = record.pairs.first().and_then(|_| drivers(record, options)) {
            options.paragraph(&mut out, &format!("{place}: {words}"));
        }
    }
    out
}

/// The two pairs that gain most, in words.
fn drivers(record: &FragmentsRecord, options: &TextOptions) -> Option<String> {
    let words: Vec<String> = record
        .pairs
        .iter()
        .take(2)
        .filter(|pair| pair.energy.get() < -0.005)
        .map(|pair| {
            let [a, b] = pair
                .orbitals
                .map(|index| name(record, index as usize, options));
            format!("{a} with {b} {} eV", ascii_number(pair.energy.get(), 2))
        })
        .collect();
    (!words.is_empty()).then(|| words.join(", "))
}
