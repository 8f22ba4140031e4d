//! The page's text.

use std::fmt::Write;

use crate::document::SweepDocument;
use crate::draw::bundle::bundles;
use crate::draw::ticks::number;
use crate::draw::wording::{charge, coordinate_name, heading_formula, value_with_unit};
use crate::figure::theme::Colours;
use crate::figure::xml::escape;
use crate::figure::{FigureOptions, Follow, Numbering, Theme};
use crate::lettering::{Lettering, Shift};

/// What a page is put together from.
pub(crate) struct Parts<'a> {
    pub(crate) document: &'a SweepDocument,
    pub(crate) options: &'a FigureOptions,
    pub(crate) policy: &'a str,
    pub(crate) style: &'a str,
    pub(crate) script: &'a str,
    pub(crate) figure: &'a str,
    pub(crate) narrow: &'a str,
    pub(crate) json: &'a str,
}

const TEMPLATE: &str = include_str!("page.html");

/// Fills the template: `{{name}}` stands for a part. Parts are not looked into again.
pub(crate) fn page(parts: &Parts<'_>) -> String {
    let document = parts.document;
    let mut page = String::with_capacity(parts.json.len() + parts.figure.len() + 64_000);
    let mut rest = TEMPLATE;
    while let Some((before, after)) = rest.split_once("{{") {
        page.push_str(before);
        let Some((name, behind)) = after.split_once("}}") else {
            break;
        };
        match name {
            "policy" => page.push_str(parts.policy),
            "title" => page.push_str(&escape(&plain_title(document))),
            "heading" => page.push_str(&heading(document)),
            "path" => page.push_str(&escape(&path(document))),
            "method" => page.push_str(&escape(&method(document))),
            "warnings" => page.push_str(&warnings(document)),
            "lines" => page.push_str(&line_table(document, parts.options)),
            "style" => page.push_str(parts.style),
            "script" => page.push_str(parts.script),
            "figure" => page.push_str(parts.figure),
            "narrow" => page.push_str(parts.narrow),
            "data" => page.push_str(parts.json),
            _ => {}
        }
        rest = behind;
    }
    page.push_str(rest);
    page
}

/// The figure's light colours and what stands for them on a dark ground.
pub(crate) fn dark_figure() -> String {
    let (light, dark) = (Colours::of(Theme::Light), Colours::of(Theme::Dark));
    let mut rules = String::new();
    let mut rule = |from: &str, to: &str| {
        for property in ["fill", "stroke"] {
            let _ = writeln!(
                rules,
                "[data-theme=dark] :is(#figure,#ladder) [{property}=\"{from}\"]{{{property}:{to}}}"
            );
        }
    };
    let named = |c: &'static Colours| [c.ground, c.ink, c.soft, c.faint, c.gap];
    for (from, to) in named(light)
        .iter()
        .zip(named(dark))
        .chain(light.irreps.iter().zip(dark.irreps.iter().copied()))
    {
        rule(from, to);
    }
    rules
}

fn plain_title(document: &SweepDocument) -> String {
    let molecule = &document.molecule;
    format!(
        "{}{}: levels and orbitals",
        heading_formula(molecule),
        charge(molecule.charge)
    )
}

fn heading(document: &SweepDocument) -> String {
    let molecule = &document.molecule;
    html(&Lettering::formula(
        heading_formula(molecule),
        &charge(molecule.charge),
    ))
}

/// Text with its subscripts and superscripts.
fn html(lettering: &Lettering) -> String {
    let mut text = String::new();
    for run in &lettering.runs {
        let content = escape(&run.text);
        match run.shift {
            Shift::None => text.push_str(&content),
            Shift::Super if run.is_prime() => text.push_str(&content),
            Shift::Sub => {
                let _ = write!(text, "<sub>{content}</sub>");
            }
            Shift::Super => {
                let _ = write!(text, "<sup>{content}</sup>");
            }
        }
    }
    text
}

fn path(document: &SweepDocument) -> String {
    let Some(coordinate) = document.coordinates.first() else {
        return String::new();
    };
    let name = coordinate_name(coordinate, &document.molecule, "–");
    let ends: Vec<String> = [document.points.first(), document.points.last()]
        .into_iter()
        .flatten()
        .filter_map(|point| point.at.first())
        .map(|at| value_with_unit(at.get(), coordinate.unit))
        .collect();
    let mut text = format!(
        "{name}, {} in {} points",
        ends.join(" to "),
        document.points.len()
    );
    if !coordinate.text.is_empty() {
        let _ = write!(text, ". {}", coordinate.text.trim_end_matches('.'));
    }
    text.push('.');
    text
}

fn method(document: &SweepDocument) -> String {
    let (molecule, method) = (&document.molecule, &document.method);
    format!(
        "{} valence electrons, {} unpaired; path group {} ({}); parameter set {}, {} coupling, K = {}. \
         {} {}.",
        molecule.valence_electrons,
        molecule.unpaired,
        document.symmetry.path_group,
        document.symmetry.axes,
        method.parameter_set,
        method.coupling,
        method.k.get(),
        document.program.name,
        document.program.version,
    )
}

fn warnings(document: &SweepDocument) -> String {
    if document.warnings.is_empty() {
        return String::new();
    }
    let items: String = document
        .warnings
        .iter()
        .map(|warning| format!("<li>{}</li>", escape(&warning.text)))
        .collect();
    format!("<ul class=\"warnings\" aria-label=\"Remarks\">{items}</ul>")
}

/// Every line with its names and energies at both ends: what stands without script.
fn line_table(document: &SweepDocument, options: &FigureOptions) -> String {
    let energy =
        |energy: Option<f64>| energy.map_or_else(|| "–".to_owned(), |energy| number(energy, 3));
    let mut rows = String::new();
    for bundle in bundles(
        document,
        options.numbering == Numbering::Core,
        Follow::Energy,
    )
    .iter()
    .rev()
    {
        let held = |electrons: Option<&f64>| {
            electrons
                .map(|e| (e * bundle.multiplicity as f64).to_string())
                .unwrap_or_default()
        };
        let _ = writeln!(
            rows,
            "<tr><th scope=\"row\">{}</th><td>{}</td><td class=\"n\">{}</td><td class=\"n\">{}</td>\
             <td>{}</td><td class=\"n\">{}</td><td class=\"n\">{}</td></tr>",
            html(&Lettering::level(&bundle.label)),
            html(&Lettering::level(&bundle.start)),
            energy(bundle.energies.first().copied().flatten()),
            held(bundle.occupations.first()),
            html(&Lettering::level(&bundle.end)),
            energy(bundle.energies.last().copied().flatten()),
            held(bundle.occupations.last()),
        );
    }
    rows
}
