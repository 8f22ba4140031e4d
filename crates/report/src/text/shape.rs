//! Shape verdicts as text.

use crate::document::{Argument, Case, CoordinateRecord, CoordinateUnit, Number, ShapeDocument};
use crate::draw::ticks::ascii_number;
use crate::draw::wording::{charge, coordinate_name, heading_formula};

use super::table::{Align, Table};
use super::{TextOptions, warnings};

/// Verdicts with their arguments and doubts; a series starts with a table. Every line fits the
/// width.
#[must_use]
pub fn shape_text(document: &ShapeDocument, options: &TextOptions) -> String {
    let mut out = String::new();
    let several = document.cases.len() > 1;
    if several {
        options.paragraph(&mut out, &series_name(document));
        out.push('\n');
        out.push_str(&series_table(document, options).render(options.columns()));
        out.push('\n');
    }
    for case in &document.cases {
        if several {
            brief(&mut out, document, case, options);
        } else {
            full(&mut out, document, case, options);
        }
    }
    if let Some(ensemble) = &document.ensemble {
        options.paragraph(
            &mut out,
            &format!(
                "support: share of {} curves with perturbed parameters that agree (seed {}); parameters \"{}\"",
                ensemble.members, ensemble.seed, document.method.parameter_set
            ),
        );
    }
    for tie in &document.ties {
        let counts: Vec<String> = tie.iter().map(u32::to_string).collect();
        options.paragraph(
            &mut out,
            &format!(
                "tie: {} electrons give the same curve in the minimal basis",
                counts.join(", ")
            ),
        );
    }
    for bond in bonds(document) {
        options.paragraph(&mut out, &bond);
    }
    warnings(&mut out, options, &document.warnings);
    out
}

/// Fixed atoms with several electron counts, or a series over different atoms.
fn series_name(document: &ShapeDocument) -> String {
    let different = document.cases.iter().any(|case| case.formula.is_some());
    if different {
        "shapes of different molecules, each with its own atoms and bond lengths".to_owned()
    } else {
        let coordinate = document
            .coordinate
            .as_ref()
            .map(|coordinate| format!(", {}", angle_name(document, coordinate)))
            .unwrap_or_default();
        format!(
            "{}: electron counts of the same atoms at fixed bond lengths{coordinate}",
            heading_formula(&document.molecule)
        )
    }
}

fn angle_name(document: &ShapeDocument, coordinate: &CoordinateRecord) -> String {
    coordinate_name(coordinate, &document.molecule, "-")
}

fn name(document: &ShapeDocument, case: &Case) -> String {
    let formula = case
        .formula
        .as_deref()
        .unwrap_or_else(|| heading_formula(&document.molecule));
    // A space keeps the charge apart from the last number of the formula: NO2 2+.
    let space = if case.charge.abs() > 1 { " " } else { "" };
    format!("{formula}{space}{}", charge(case.charge))
}

/// Decimals of a value of the case's coordinate: whole degrees, or hundredths of an Å.
fn decimals(document: &ShapeDocument, case: &Case) -> usize {
    let coordinate = case.coordinate.as_ref().or(document.coordinate.as_ref());
    let length = coordinate.is_some_and(|one| one.unit == CoordinateUnit::Angstrom);
    if length { 2 } else { 0 }
}

fn value(document: &ShapeDocument, case: &Case, value: Option<Number>) -> String {
    let decimals = decimals(document, case);
    value.map_or_else(
        || "-".to_owned(),
        |value| ascii_number(value.get(), decimals),
    )
}

fn angle_words(document: &ShapeDocument, case: &Case) -> String {
    let text = |number: Number| value(document, case, Some(number));
    match (case.angle, case.angle_range) {
        (Some(angle), Some([low, high])) => {
            format!("{} ({} to {})", text(angle), text(low), text(high))
        }
        (angle, _) => value(document, case, angle),
    }
}

fn series_table(document: &ShapeDocument, options: &TextOptions) -> Table {
    let mut table = Table::new(&[
        ("molecule", Align::Left),
        ("el.", Align::Right),
        ("unp.", Align::Right),
        ("verdict", Align::Left),
        ("angle", Align::Left),
        ("depth/eV", Align::Right),
        ("support", Align::Right),
        ("confident", Align::Left),
    ]);
    for case in &document.cases {
        table.row(vec![
            options.words(&name(document, case)),
            case.electrons.to_string(),
            case.unpaired.to_string(),
            case.verdict.clone(),
            angle_words(document, case),
            case.depth
                .map_or_else(|| "-".to_owned(), |depth| ascii_number(depth.get(), 2)),
            case.support
                .map_or_else(String::new, |support| ascii_number(support.get(), 2)),
            if case.confident { "yes" } else { "no" }.to_owned(),
        ]);
    }
    table
}

fn headline(document: &ShapeDocument, case: &Case) -> String {
    let unit = if decimals(document, case) > 0 {
        " Å"
    } else {
        "°"
    };
    let angle = match (case.verdict.as_str(), case.angle, case.angle_range) {
        (_, Some(angle), Some([low, high])) => format!(
            ", {}{unit} ({} to {}{unit})",
            value(document, case, Some(angle)),
            value(document, case, Some(low)),
            value(document, case, Some(high))
        ),
        _ => String::new(),
    };
    let sure = match (case.verdict.as_str(), case.confident) {
        ("undecided", _) => "",
        (_, true) => ", confident",
        (_, false) => ", not confident",
    };
    let support = case.support.map_or_else(String::new, |support| {
        format!(", support {}", ascii_number(support.get(), 2))
    });
    format!(
        "{} ({} valence electrons, {} unpaired): {}{angle}{sure}{support}",
        name(document, case),
        case.electrons,
        case.unpaired,
        case.verdict
    )
}

fn full(out: &mut String, document: &ShapeDocument, case: &Case, options: &TextOptions) {
    options.paragraph(out, &headline(document, case));
    if let Some(coordinate) = case.coordinate.as_ref().or(document.coordinate.as_ref()) {
        options.paragraph(
            out,
            &format!(
                "along the {}; bond lengths stay",
                angle_name(document, coordinate)
            ),
        );
    }
    options.paragraph(out, &format!("levels {}", case.configuration));
    out.push('\n');
    let mut table = Table::new(&[
        ("argument", Align::Left),
        ("favours", Align::Left),
        ("angle", Align::Right),
        ("depth/eV", Align::Right),
        ("line", Align::Left),
        ("shift/eV", Align::Right),
        ("", Align::Left),
    ]);
    for argument in &case.arguments {
        table.row(vec![
            argument.name.clone(),
            argument.favours.clone(),
            value(document, case, argument.angle),
            argument
                .depth
                .map_or_else(String::new, |depth| ascii_number(depth.get(), 2)),
            argument
                .line
                .as_deref()
                .map_or_else(String::new, |line| options.label(line)),
            argument
                .change
                .map_or_else(String::new, |change| ascii_number(change.get(), 2)),
            remark(argument).to_owned(),
        ]);
    }
    out.push_str(&table.render(options.columns()));
    out.push('\n');
    for reason in &case.because {
        options.paragraph(out, &format!("because {reason}"));
    }
    for doubt in &case.could_be_wrong_because {
        options.paragraph(out, &format!("could be wrong: {doubt}"));
    }
    for flip in &case.would_flip {
        let change = flip.change.map_or_else(String::new, |change| {
            let unit = if flip.unit == "percent" {
                "%"
            } else {
                &flip.unit
            };
            let spread = flip.published_spread.map_or_else(String::new, |spread| {
                format!(" (spread {} {unit})", ascii_number(spread.get(), 1))
            });
            let sign = if change.get() > 0.0 { "+" } else { "" };
            format!(" {sign}{} {unit}{spread}", ascii_number(change.get(), 2))
        });
        options.paragraph(
            out,
            &format!(
                "the leading sum would become {} with {}{change}",
                flip.to, flip.what
            ),
        );
    }
    if case.would_flip.is_empty() {
        options.paragraph(
            out,
            "no single change of a value by up to 30 % turns the leading sum round",
        );
    }
}

fn remark(argument: &Argument) -> &'static str {
    match argument.note.as_deref() {
        Some(note) if note.starts_with("votes") => "votes",
        Some(note) if note.starts_with("silent") => "silent",
        Some(note) if note.starts_with("reference") => "shown",
        _ => "",
    }
}

/// The lines of a series: the frontier or what leaves it open, and doubts beyond the general one.
fn brief(out: &mut String, document: &ShapeDocument, case: &Case, options: &TextOptions) {
    let mut words: Vec<&str> = case.because.iter().skip(2).map(String::as_str).collect();
    words.extend(
        case.could_be_wrong_because
            .iter()
            .skip(1)
            .map(String::as_str),
    );
    let spin = if case.unpaired > 1 {
        format!(", {} unpaired", case.unpaired)
    } else {
        String::new()
    };
    options.paragraph(
        out,
        &format!("{}{spin}: {}", name(document, case), words.join("; ")),
    );
}

fn bonds(document: &ShapeDocument) -> Vec<String> {
    let geometry = &document.molecule.geometry;
    if document.cases.iter().any(|case| case.formula.is_some()) {
        return Vec::new();
    }
    let mut lines: Vec<String> = Vec::new();
    for bond in &geometry.bonds {
        let [a, b] = &bond.elements;
        let line = format!(
            "{a}-{b} {} Å ({})",
            ascii_number(bond.length.get(), 4),
            bond.source
        );
        if !lines.contains(&line) {
            lines.push(line);
        }
    }
    lines
}
