//! A hand-off as text for a terminal and as one Markdown page.

use crate::document::{ActiveSpace, CoordinateUnit, IrrepCount, PlanDocument, StateRecord};
use crate::draw::ticks::ascii_number;
use crate::draw::wording::{
    bracketed_charge, charge, coordinate_name, heading_formula, value_with_unit,
};

use super::distortion::distortion_words;
use super::table::{Align, Table};
use super::{TextOptions, heading, warnings};

/// A part of the page.
enum Block {
    Heading(String),
    Words(String),
    Item(String),
    Table(Vec<(&'static str, Align)>, Vec<Vec<String>>),
}

/// The hand-off in words; every line fits the width.
#[must_use]
pub fn plan_text(document: &PlanDocument, options: &TextOptions) -> String {
    let mut out = String::new();
    heading(&mut out, options, &document.molecule, &document.method);
    for block in blocks(document, options, false) {
        match block {
            Block::Heading(words) => {
                out.push('\n');
                options.paragraph(&mut out, &words);
                out.push_str(&"-".repeat(words.chars().count().min(options.columns())));
                out.push('\n');
            }
            Block::Words(words) | Block::Item(words) => options.paragraph(&mut out, &words),
            Block::Table(header, rows) => {
                let mut table = Table::new(&header);
                rows.into_iter().for_each(|row| table.row(row));
                out.push_str(&table.render(options.columns()));
            }
        }
    }
    if !document.warnings.is_empty() {
        out.push('\n');
    }
    warnings(&mut out, options, &document.warnings);
    out
}

/// The hand-off as one Markdown page (CommonMark with tables) for a notebook.
#[must_use]
pub fn plan_markdown(document: &PlanDocument, options: &TextOptions) -> String {
    let molecule = &document.molecule;
    let mut out = format!(
        "# {}{}: what to compute next\n\n{} valence electrons, {} unpaired; extended Hückel, {} \
         coupling, K = {}, parameters \"{}\" ({}); {} {}\n",
        heading_formula(molecule),
        bracketed_charge(molecule.charge),
        molecule.valence_electrons,
        molecule.unpaired,
        document.method.coupling,
        ascii_number(document.method.k.get(), 2),
        document.method.parameter_set,
        document.method.fingerprint,
        document.program.name,
        document.program.version,
    );
    let mut in_list = false;
    for block in blocks(document, options, true) {
        let item = matches!(block, Block::Item(_));
        if !(item && in_list) {
            out.push('\n');
        }
        in_list = item;
        match block {
            Block::Heading(words) => out.push_str(&format!("## {words}\n")),
            Block::Words(words) => out.push_str(&format!("{words}\n")),
            Block::Item(words) => out.push_str(&format!("- {words}\n")),
            Block::Table(header, rows) => {
                let line = |cells: Vec<String>| format!("| {} |\n", cells.join(" | "));
                out.push_str(&line(header.iter().map(|(n, _)| (*n).to_owned()).collect()));
                let rules = header.iter().map(|(_, align)| match align {
                    Align::Left => "---".to_owned(),
                    Align::Right => "--:".to_owned(),
                });
                out.push_str(&line(rules.collect()));
                for row in rows {
                    out.push_str(&line(row));
                }
            }
        }
    }
    if !document.warnings.is_empty() {
        out.push('\n');
    }
    for warning in &document.warnings {
        out.push_str(&format!("> {}\n", warning.text));
    }
    out
}

fn blocks(document: &PlanDocument, options: &TextOptions, both_ends: bool) -> Vec<Block> {
    let mut blocks = Vec::new();
    path(document, &mut blocks);
    starts(document, &mut blocks);
    states(document, options, &mut blocks);
    flips(document, &mut blocks);
    distortions(document, options, &mut blocks);
    spaces(document, options, both_ends, &mut blocks);
    blocks.push(Block::Heading("Caution".to_owned()));
    blocks.push(Block::Words(
        "The method knows no electron repulsion between states: it orders levels, not multiplets, and \
         its bond lengths are those that went in. It says which calculation to run and what to look at \
         there; it does not replace it."
            .to_owned(),
    ));
    blocks
}

fn unit(document: &PlanDocument) -> Option<CoordinateUnit> {
    document.coordinates.first().map(|one| one.unit)
}

fn value(document: &PlanDocument, at: f64) -> String {
    unit(document).map_or_else(|| ascii_number(at, 2), |unit| value_with_unit(at, unit))
}

fn path(document: &PlanDocument, blocks: &mut Vec<Block>) {
    let symmetry = &document.symmetry;
    let group = format!("{}; {}", symmetry.path_group, symmetry.axes);
    let words = match document.coordinates.first() {
        Some(one) => {
            let ends = match (one.from, one.to) {
                (Some(from), Some(to)) => format!(
                    " from {} to {}",
                    value_with_unit(from.get(), one.unit),
                    value_with_unit(to.get(), one.unit)
                ),
                _ => String::new(),
            };
            let name = coordinate_name(one, &document.molecule, "-");
            format!("path: {name}{ends}; path group {group}")
        }
        None => format!("one geometry, no path; point group {group}"),
    };
    blocks.push(Block::Words(words));
}

fn starts(document: &PlanDocument, blocks: &mut Vec<Block>) {
    blocks.push(Block::Heading("Start geometries".to_owned()));
    for (number, start) in (1..).zip(&document.starts) {
        let at = start
            .at
            .first()
            .map_or_else(|| "as given".to_owned(), |at| value(document, at.get()));
        blocks.push(Block::Item(format!(
            "geometry {number}: {at}, {}: {}",
            start.point_group, start.reason
        )));
    }
}

fn multiplicity(unpaired: u32) -> String {
    match unpaired {
        0 => "singlet".to_owned(),
        1 => "doublet".to_owned(),
        2 => "triplet".to_owned(),
        3 => "quartet".to_owned(),
        4 => "quintet".to_owned(),
        5 => "sextet".to_owned(),
        more => format!("{more} unpaired"),
    }
}

fn state_words(state: &StateRecord, options: &TextOptions) -> String {
    let (terms, own) = if options.unicode {
        (&state.display_terms, &state.display_own_terms)
    } else {
        (&state.terms, &state.own_terms)
    };
    let mut names = Vec::new();
    if !terms.is_empty() {
        names.push(terms.join(", "));
    }
    if !own.is_empty() && own != terms {
        names.push(format!("from {}", own.join(", ")));
    }
    if names.is_empty() {
        names.push(multiplicity(state.unpaired));
    }
    format!(
        "{}, charge {}, {} unpaired, {}; start from geometry {}: {}",
        names.join(" "),
        if state.charge == 0 {
            "0".to_owned()
        } else {
            format!("{:+}", state.charge)
        },
        state.unpaired,
        state.configuration,
        state.start + 1,
        state.reason
    )
}

fn states(document: &PlanDocument, options: &TextOptions, blocks: &mut Vec<Block>) {
    blocks.push(Block::Heading("States and charges".to_owned()));
    for state in &document.states {
        blocks.push(Block::Item(state_words(state, options)));
    }
    for other in &document.charges {
        let angle = other
            .angle
            .filter(|_| other.verdict != "undecided")
            .map_or_else(String::new, |angle| {
                format!(", {}°", ascii_number(angle.get(), 0))
            });
        blocks.push(Block::Item(format!(
            "{} {} ({} unpaired): {}{angle}, support {}; {}",
            heading_formula(&document.molecule),
            if other.charge == 0 {
                "neutral".to_owned()
            } else {
                charge(other.charge)
            },
            other.unpaired,
            other.verdict,
            ascii_number(other.support.get(), 2),
            other.reason
        )));
    }
}

fn flips(document: &PlanDocument, blocks: &mut Vec<Block>) {
    if document.coordinates.is_empty() {
        return;
    }
    blocks.push(Block::Heading(
        "Where roots change places along the path".to_owned(),
    ));
    if document.root_flips.is_empty() {
        blocks.push(Block::Words(
            "no crossing among the frontier lines: roots keep their order".to_owned(),
        ));
    }
    for flip in &document.root_flips {
        let gap = flip.gap.map_or_else(String::new, |gap| {
            format!(" (gap {} eV)", ascii_number(gap.get(), 2))
        });
        blocks.push(Block::Item(format!(
            "{}{gap}: {}",
            value(document, flip.at.get()),
            flip.text
        )));
    }
}

fn distortions(document: &PlanDocument, options: &TextOptions, blocks: &mut Vec<Block>) {
    if document.distortions.is_empty() {
        return;
    }
    blocks.push(Block::Heading("What distorts".to_owned()));
    for record in &document.distortions {
        for words in distortion_words(record, options) {
            let place = record
                .start
                .map_or_else(String::new, |start| format!("geometry {}: ", start + 1));
            blocks.push(Block::Item(format!("{place}{words}")));
        }
    }
}

fn counts(list: &[IrrepCount]) -> String {
    list.iter()
        .map(|one| format!("{} {}", one.irrep, one.orbitals))
        .collect::<Vec<_>>()
        .join(", ")
}

fn functions(space: &ActiveSpace) -> String {
    let number = space.state_functions.get();
    if number < 1e7 {
        format!("{number:.0} configuration state functions")
    } else {
        format!("{number:.1e} configuration state functions")
    }
}

fn spaces(
    document: &PlanDocument,
    options: &TextOptions,
    both_ends: bool,
    blocks: &mut Vec<Block>,
) {
    blocks.push(Block::Heading("Active space".to_owned()));
    for space in &document.active_spaces {
        let what = match space.kind.as_str() {
            "least" => "least (what cannot be left out)",
            "full-valence" => "full valence",
            _ => "proposed",
        };
        blocks.push(Block::Item(format!(
            "{what}: {} electrons in {} orbitals, {}",
            space.electrons,
            space.orbitals,
            functions(space)
        )));
    }
    for space in document
        .active_spaces
        .iter()
        .filter(|space| space.kind != "full-valence")
    {
        blocks.push(Block::Heading(format!(
            "{}: {} electrons in {} orbitals",
            if space.kind == "least" {
                "Least space"
            } else {
                "Proposed space"
            },
            space.electrons,
            space.orbitals
        )));
        blocks.push(space_table(document, space, options, both_ends));
        blocks.push(Block::Words(format!(
            "irrep counts in {}: doubly occupied outside, core included: {}; active: {}",
            document.symmetry.path_group,
            counts(&space.inactive_counts),
            counts(&space.active_counts)
        )));
        validity(document, space, blocks);
    }
}

fn space_table(
    document: &PlanDocument,
    space: &ActiveSpace,
    options: &TextOptions,
    both_ends: bool,
) -> Block {
    let moving = !document.coordinates.is_empty();
    let mut header = vec![
        ("orbital", Align::Left),
        ("electrons", Align::Left),
        ("character", Align::Left),
    ];
    if moving {
        header.insert(1, ("at the ends", Align::Left));
        header[3].0 = if both_ends {
            "character at the first and at the last point"
        } else {
            "character at the first point"
        };
    }
    let short = |value: f64| crate::draw::ticks::short(value, 2);
    let rows = space
        .lines
        .iter()
        .rev()
        .map(|line| {
            let [first, last] = &line.end_labels;
            let electrons = line.electrons.map(|e| short(e.get()));
            let same = |a: &str, b: &str| {
                if a == b {
                    a.to_owned()
                } else {
                    format!("{a} to {b}")
                }
            };
            let mut row = vec![
                options.label(options.pick(&line.label, &line.valence_label)),
                same(&electrons[0], &electrons[1]),
                if both_ends {
                    same(&line.character[0], &line.character[1])
                } else {
                    line.character[0].clone()
                },
            ];
            if moving {
                row.insert(1, same(&options.label(first), &options.label(last)));
            }
            row
        })
        .collect();
    Block::Table(header, rows)
}

fn validity(document: &PlanDocument, space: &ActiveSpace, blocks: &mut Vec<Block>) {
    if document.coordinates.is_empty() {
        return;
    }
    let apart = space.separation.map_or_else(String::new, |gap| {
        if gap.get() > 0.0 {
            format!(
                "; the filled levels outside stay at least {} eV below it",
                ascii_number(gap.get(), 2)
            )
        } else {
            String::new()
        }
    });
    let mut words = if space.stops.is_empty() {
        format!("the same set of orbitals along the whole path{apart}")
    } else {
        let list: Vec<String> = space
            .stops
            .iter()
            .map(|stop| {
                format!(
                    "{}, where {} and {} (outside) exchange {} % of their character, gap {} eV",
                    value(document, stop.at.get()),
                    stop.active,
                    stop.outside,
                    ascii_number(100.0 * stop.exchange.get(), 0),
                    ascii_number(stop.gap.get(), 2)
                )
            })
            .collect();
        format!("stops being the same set at {}{apart}", list.join("; at "))
    };
    if let Some([from, to]) = space.order_changes {
        words.push_str(&format!(
            "; between {} and {} a filled level outside lies above an active one: choose orbitals by irrep, not by order",
            value(document, from.get()),
            value(document, to.get())
        ));
    }
    blocks.push(Block::Words(words));
}
