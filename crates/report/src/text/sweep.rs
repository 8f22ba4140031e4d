//! A sweep as text: lines, drawing, crossings and the sum in words.

use crate::document::{CrossingKind, SweepDocument};
use crate::draw::bundle::{Bundle, bundles};
use crate::draw::ticks::ascii_number;
use crate::draw::wording::{coordinate_name, exact_value, lowest_sum, value_with_unit};
use crate::figure::{Follow, Numbering};

use super::table::{Align, Table};
use super::{TextOptions, diagram, electrons, heading, warnings, why};

/// A sweep as a table of its lines (highest first), a drawing, its crossings in words and the
/// lowest sum. Of a grid, the sums alone. Every line fits the width.
#[must_use]
pub fn sweep_text(document: &SweepDocument, options: &TextOptions) -> String {
    let mut out = String::new();
    heading(&mut out, options, &document.molecule, &document.method);
    coordinates(&mut out, document, options);
    let symmetry = &document.symmetry;
    options.paragraph(
        &mut out,
        &format!("path group {}; {}", symmetry.path_group, symmetry.axes),
    );
    out.push('\n');
    if document.is_grid() {
        grid(&mut out, document, options);
    } else {
        let all = bundles(
            document,
            options.numbering == Numbering::Core,
            Follow::Energy,
        );
        out.push_str(&line_table(document, &all, options).render(options.columns()));
        out.push('\n');
        if options.drawing {
            out.push_str(&diagram::draw(document, &all, options));
            out.push('\n');
        }
        crossings(&mut out, document, &all, options);
        sum(&mut out, document, options);
        why::why(&mut out, document, options);
    }
    warnings(&mut out, options, &document.warnings);
    out
}

fn coordinates(out: &mut String, document: &SweepDocument, options: &TextOptions) {
    for (index, coordinate) in document.coordinates.iter().enumerate() {
        let at = |point: Option<&crate::document::Point>| {
            let value = point.and_then(|point| point.at.get(index));
            value
                .map(|at| value_with_unit(at.get(), coordinate.unit))
                .unwrap_or_default()
        };
        let atoms: Vec<String> = coordinate.atoms.iter().map(u32::to_string).collect();
        let atoms = if atoms.is_empty() {
            String::new()
        } else {
            format!(" ({})", atoms.join("-"))
        };
        let name = coordinate_name(coordinate, &document.molecule, "-");
        let (from, to) = (at(document.points.first()), at(document.points.last()));
        let count = if document.is_grid() {
            String::new()
        } else {
            format!(", {}", points(document, options))
        };
        options.paragraph(out, &format!("{name}{atoms} from {from} to {to}{count}"));
        if !coordinate.text.is_empty() {
            options.paragraph(out, &coordinate.text);
        }
    }
}

/// Points of the sweep, and how many of them the document holds.
fn points(document: &SweepDocument, options: &TextOptions) -> String {
    let held = document.points.len();
    match options.points {
        Some(all) if all != held => format!("{all} points ({held} of them drawn here)"),
        _ => format!("{held} points"),
    }
}

fn line_table(document: &SweepDocument, all: &[Bundle], options: &TextOptions) -> Table {
    let group = |point: Option<&crate::document::Point>| {
        point
            .map(|point| point.point_group.clone())
            .unwrap_or_default()
    };
    let start = format!("in {}", group(document.points.first()));
    let end = format!("in {}", group(document.points.last()));
    let mut table = Table::new(&[
        ("line", Align::Left),
        (start.as_str(), Align::Left),
        (end.as_str(), Align::Left),
        ("start/eV", Align::Right),
        ("end/eV", Align::Right),
        ("change", Align::Right),
        ("electrons", Align::Right),
    ]);
    let first = |bundle: &Bundle| bundle.energies.first().copied().flatten();
    let mut order: Vec<&Bundle> = all.iter().collect();
    order.sort_by(|a, b| {
        let energy = |bundle: &Bundle| first(bundle).unwrap_or(f64::NEG_INFINITY);
        energy(b).total_cmp(&energy(a))
    });
    for bundle in order {
        let last = bundle.energies.last().copied().flatten();
        let number =
            |value: Option<f64>| value.map_or_else(|| "-".to_owned(), |v| ascii_number(v, 3));
        let change = first(bundle).zip(last).map(|(from, to)| to - from);
        let sign = if change.is_some_and(|change| change >= 0.0005) {
            "+"
        } else {
            ""
        };
        let held = |place: Option<&f64>| {
            electrons(place.copied().unwrap_or_default() * bundle.multiplicity as f64)
        };
        let (before, after) = (
            held(bundle.occupations.first()),
            held(bundle.occupations.last()),
        );
        let filling = if before == after {
            before
        } else {
            format!("{before} to {after}")
        };
        table.row(vec![
            options.label(&bundle.label),
            options.label(&bundle.start),
            options.label(&bundle.end),
            number(first(bundle)),
            number(last),
            format!("{sign}{}", number(change)),
            filling,
        ]);
    }
    table
}

fn crossings(out: &mut String, document: &SweepDocument, all: &[Bundle], options: &TextOptions) {
    let Some(coordinate) = document.coordinates.first() else {
        return;
    };
    let name = |id: u32, plain: &str| {
        let bundle = all.iter().find(|bundle| bundle.ids.contains(&id));
        options.label(bundle.map_or(plain, |bundle| bundle.label.as_str()))
    };
    let mut said: Vec<String> = Vec::new();
    for crossing in document.crossings.iter().flatten() {
        let (a, b) = (
            name(crossing.lines[0], &crossing.labels[0]),
            name(crossing.lines[1], &crossing.labels[1]),
        );
        let at = exact_value(crossing.at.get(), coordinate.unit);
        let text = match crossing.kind {
            CrossingKind::Crossing => {
                let energy = crossing
                    .energy
                    .map(|e| format!(" ({} eV)", ascii_number(e.get(), 2)));
                let marked = if crossing.changes_configuration {
                    ": HOMO and LUMO trade places, the ground configuration changes"
                } else {
                    ""
                };
                format!(
                    "{a} and {b} cross at {at}{}{marked}",
                    energy.unwrap_or_default()
                )
            }
            CrossingKind::Avoided => {
                let gap = crossing
                    .gap
                    .map(|gap| format!(" (gap {} eV)", ascii_number(gap.get(), 2)));
                let exchanged = crossing.exchange.map(|share| {
                    format!(
                        ", {} % of their character exchanged",
                        ascii_number(100.0 * share.get(), 0)
                    )
                });
                let (gap, exchanged) = (gap.unwrap_or_default(), exchanged.unwrap_or_default());
                format!("{a} and {b} avoid each other at {at}{gap}{exchanged}")
            }
            CrossingKind::Touching => format!("{a} and {b} become one set at {at}"),
        };
        // The members of a degenerate set do the same thing once.
        if !said.contains(&text) {
            said.push(text);
        }
    }
    if said.is_empty() {
        out.push_str("no lines cross\n");
    }
    for text in said {
        options.paragraph(out, &text);
    }
}

fn sum(out: &mut String, document: &SweepDocument, options: &TextOptions) {
    let Some(coordinate) = document.coordinates.first() else {
        return;
    };
    let Some((at, lowest, inside)) = lowest_sum(document) else {
        if document.points.iter().any(|point| point.sum.is_some()) {
            out.push_str("sum of energies: flat within 1e-6 eV\n");
        }
        return;
    };
    let above = |point: Option<&crate::document::Point>| {
        let sum = point
            .and_then(|point| point.sum)
            .map(|sum| sum.get() - lowest);
        sum.map_or_else(|| "-".to_owned(), |sum| ascii_number(sum, 3))
    };
    let end = if inside { "" } else { " (an end of the range)" };
    options.paragraph(
        out,
        &format!(
            "sum of energies lowest at {}{end}: {} eV; the start lies {} eV above, the end {} eV",
            value_with_unit(at, coordinate.unit),
            ascii_number(lowest, 4),
            above(document.points.first()),
            above(document.points.last())
        ),
    );
}

fn grid(out: &mut String, document: &SweepDocument, options: &TextOptions) {
    let known = || {
        document
            .points
            .iter()
            .filter_map(|point| Some((point, point.sum?.get())))
    };
    let place = |found: Option<(&crate::document::Point, f64)>| {
        found.map(|(point, sum)| {
            let values: Vec<String> = point
                .at
                .iter()
                .zip(&document.coordinates)
                .map(|(at, coordinate)| value_with_unit(at.get(), coordinate.unit))
                .collect();
            format!("{} eV at {}", ascii_number(sum, 4), values.join(", "))
        })
    };
    options.paragraph(out, &format!("grid of {}", points(document, options)));
    if let Some(words) = place(known().min_by(|a, b| a.1.total_cmp(&b.1))) {
        options.paragraph(out, &format!("sum of energies lowest: {words}"));
    }
    if let Some(words) = place(known().max_by(|a, b| a.1.total_cmp(&b.1))) {
        options.paragraph(out, &format!("sum of energies highest: {words}"));
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::synthetic;
    use crate::text::table::length;

    #[test]
    fn fits_the_width_and_says_what_crosses() {
        for document in [
            synthetic::hydrogen_sulfide(),
            synthetic::silicon_difluoride(),
            synthetic::boron_trifluoride(),
        ] {
            for width in [60, 80, 120] {
                let options = TextOptions {
                    width,
                    ..TextOptions::default()
                };
                let text = sweep_text(&document, &options);
                assert!(text.lines().all(|line| length(line) <= width), "{text}");
            }
            let plain = TextOptions {
                unicode: false,
                ..TextOptions::default()
            };
            assert!(sweep_text(&document, &plain).is_ascii());
        }
        let text = sweep_text(&synthetic::silicon_difluoride(), &TextOptions::default());
        assert!(text.contains("6a₁ and 4b₂ cross at 155."), "{text}");
        assert!(text.contains("sum of energies lowest at"));
    }

    #[test]
    fn random_sweeps_fit_too() {
        for seed in 0..60 {
            let text = sweep_text(&synthetic::random(seed), &TextOptions::default());
            assert!(text.lines().all(|line| length(line) <= 80), "{text}");
        }
    }

    /// With ORBEND_FIGURES=DIRECTORY the texts are written there, to be read.
    #[test]
    fn texts_to_look_at() {
        let Ok(directory) = std::env::var("ORBEND_FIGURES") else {
            return;
        };
        let plain = TextOptions {
            unicode: false,
            ..TextOptions::default()
        };
        for (name, document) in [
            ("h2s", synthetic::hydrogen_sulfide()),
            ("sif2", synthetic::silicon_difluoride()),
            ("bf3", synthetic::boron_trifluoride()),
        ] {
            let text = sweep_text(&document, &TextOptions::default());
            std::fs::write(format!("{directory}/{name}.txt"), text).unwrap();
            std::fs::write(
                format!("{directory}/{name}-ascii.txt"),
                sweep_text(&document, &plain),
            )
            .unwrap();
        }
    }
}
