//! The picture of a series of verdicts: a row per case, the coordinate across, energy by colour and
//! pattern.

use crate::document::{Case, ShapeDocument};
use crate::draw::ticks::ascii_number;
use crate::draw::wording::{charge, coordinate_name, heading_formula};

use super::measure::Measure;
use super::options::{FigureError, FigureOptions};
use super::sweep::open_page;
use super::theme::Colours;
use super::xml::length;

/// Classes of the energy relative to the symmetric form, eV: upper bound, colour (as in a map,
/// from the darkest valley to the lightest hill), pattern and words.
const CLASSES: [(f64, &str, &str, &str); 5] = [
    (-1.0, "#1f4b99", "dense", "below -1 eV"),
    (-0.3, "#5b86c9", "lines", "-1 to -0.3"),
    (-0.025, "#a9c4ea", "sparse", "-0.3 to -0.025"),
    (0.025, "#eef1f4", "", "flat, within 0.025"),
    (f64::INFINITY, "#f2c9a8", "dots", "above 0.025"),
];

/// Rows are the cases (electron counts of fixed atoms, or molecules), columns the angle; the leading
/// sum relative to the symmetric form is shown by colour and pattern, rows without a verdict are
/// hatched at their ends.
///
/// # Errors
/// None at present: documents without curves give empty rows.
pub fn shape_figure(
    document: &ShapeDocument,
    options: &FigureOptions,
) -> Result<String, FigureError> {
    let colours = Colours::of(options.theme);
    let measure = Measure::of(options.width);
    let page = measure.page;
    let size = measure.label;
    let line = 1.25 * size;
    let names: Vec<String> = document
        .cases
        .iter()
        .map(|case| row_name(document, case))
        .collect();
    let widest = names
        .iter()
        .map(|name| name.chars().count())
        .max()
        .unwrap_or(0) as f64;
    let left = (0.56 * widest + 1.2) * size;
    let right = 9.5 * size;
    let top = 2.6 * line;
    let row = 2.3 * line;
    let rows = document.cases.len() as f64;
    let height = top + rows * row + 3.2 * line + line * (CLASSES.len() as f64 + 1.5);
    let prefix = &options.id_prefix;
    let mut xml = open_page(options, page, height);
    let title = format!("Shape verdicts: {}", names.join(", "));
    xml.text("title", &[("id", &format!("{prefix}-title"))], &title);
    xml.text(
        "desc",
        &[("id", &format!("{prefix}-desc"))],
        &description(document, &names),
    );
    xml.open("defs", &[]);
    for (name, gap) in [
        ("dense", 1.6),
        ("lines", 2.8),
        ("sparse", 4.6),
        ("undecided", 3.2),
    ] {
        let (gap_text, colour) = (
            length(gap),
            if name == "undecided" {
                colours.ink
            } else {
                colours.ground
            },
        );
        xml.open(
            "pattern",
            &[
                ("id", &format!("{prefix}-{name}")),
                ("width", &gap_text),
                ("height", &gap_text),
                ("patternUnits", "userSpaceOnUse"),
                (
                    "patternTransform",
                    if name == "undecided" {
                        "rotate(135)"
                    } else {
                        "rotate(45)"
                    },
                ),
            ],
        );
        xml.empty(
            "line",
            &[
                ("x1", "0"),
                ("y1", "0"),
                ("x2", "0"),
                ("y2", &gap_text),
                ("stroke", colour),
                ("stroke-width", "0.7"),
            ],
        );
        xml.close();
    }
    xml.open(
        "pattern",
        &[
            ("id", &format!("{prefix}-dots")),
            ("width", "4"),
            ("height", "4"),
            ("patternUnits", "userSpaceOnUse"),
        ],
    );
    xml.empty(
        "circle",
        &[("cx", "2"), ("cy", "2"), ("r", "0.6"), ("fill", "#7a4a20")],
    );
    xml.close();
    xml.close();
    xml.empty(
        "rect",
        &[
            ("width", "100%"),
            ("height", "100%"),
            ("fill", colours.ground),
        ],
    );
    let font = length(size);
    let write = |xml: &mut super::xml::Writer, x: f64, y: f64, anchor: &str, text: &str| {
        xml.text(
            "text",
            &[
                ("x", &length(x)),
                ("y", &length(y)),
                ("text-anchor", anchor),
                ("font-size", &font),
                ("fill", colours.ink),
            ],
            text,
        );
    };
    let width = page - left - right;
    let axis = document.coordinate.as_ref().map_or_else(
        || "angle".to_owned(),
        |c| coordinate_name(c, &document.molecule, "\u{2013}"),
    );
    let axis = if document.cases.iter().any(|case| case.formula.is_some()) {
        "angle".to_owned()
    } else {
        axis
    };
    write(
        &mut xml,
        left + 0.5 * width,
        line,
        "middle",
        &format!("{axis}, from the symmetric form"),
    );
    for (index, (case, name)) in document.cases.iter().zip(&names).enumerate() {
        let y = top + row * index as f64;
        write(&mut xml, left - 0.5 * size, y + 0.41 * row, "end", name);
        let box_height = length(0.56 * row);
        if let Some(curve) = case.curves.first() {
            let zero = curve
                .energy
                .first()
                .copied()
                .flatten()
                .map_or(0.0, |e| e.get());
            let cell = width / curve.at.len().max(1) as f64;
            for (place, energy) in curve.energy.iter().enumerate() {
                let Some(energy) = energy else { continue };
                let class = CLASSES
                    .iter()
                    .find(|class| energy.get() - zero <= class.0)
                    .unwrap_or(&CLASSES[CLASSES.len() - 1]);
                let (x, w) = (length(left + cell * place as f64), length(cell + 0.05));
                paint(&mut xml, [&x, &length(y), &w, &box_height], class, prefix);
            }
            for (place, angle) in curve.at.iter().enumerate() {
                let last = place + 1 == curve.at.len();
                if place == 0 || last || place == curve.at.len() / 2 {
                    let x = left + cell * (place as f64 + 0.5);
                    write(
                        &mut xml,
                        x,
                        y + 0.56 * row + 0.72 * line,
                        "middle",
                        &ascii_number(angle.get(), 0),
                    );
                }
            }
        }
        if case.verdict == "undecided" {
            xml.empty(
                "rect",
                &[
                    ("x", &length(left)),
                    ("y", &length(y)),
                    ("width", &length(width)),
                    ("height", &box_height),
                    ("fill", &format!("url(#{prefix}-undecided)")),
                    ("stroke", colours.ink),
                ],
            );
        }
        let angle = match (case.angle, case.angle_range) {
            (Some(angle), Some(_)) => format!(" {}°", ascii_number(angle.get(), 0)),
            _ => String::new(),
        };
        write(
            &mut xml,
            left + width + 0.5 * size,
            y + 0.41 * row,
            "start",
            &format!("{}{angle}", case.verdict),
        );
    }
    let mut y = top + rows * row + 1.6 * line;
    write(
        &mut xml,
        left,
        y,
        "start",
        "sum from the symmetric form, eV",
    );
    for class in &CLASSES {
        y += line;
        let (x, top, side) = (length(left), length(y - 0.8 * size), length(size));
        paint(
            &mut xml,
            [&x, &top, &length(2.0 * size), &side],
            class,
            prefix,
        );
        write(&mut xml, left + 2.6 * size, y, "start", class.3);
    }
    y += line;
    write(&mut xml, left, y, "start", "cross-hatched: undecided");
    Ok(xml.finish())
}

fn paint(
    xml: &mut super::xml::Writer,
    [x, y, width, height]: [&str; 4],
    class: &(f64, &str, &str, &str),
    prefix: &str,
) {
    xml.empty(
        "rect",
        &[
            ("x", x),
            ("y", y),
            ("width", width),
            ("height", height),
            ("fill", class.1),
        ],
    );
    if !class.2.is_empty() {
        let fill = format!("url(#{prefix}-{})", class.2);
        xml.empty(
            "rect",
            &[
                ("x", x),
                ("y", y),
                ("width", width),
                ("height", height),
                ("fill", &fill),
            ],
        );
    }
}

fn row_name(document: &ShapeDocument, case: &Case) -> String {
    let formula = case
        .formula
        .as_deref()
        .unwrap_or_else(|| heading_formula(&document.molecule));
    let spin = if case.unpaired > 1 {
        format!(", {} unpaired", case.unpaired)
    } else {
        String::new()
    };
    let space = if case.charge.abs() > 1 { " " } else { "" };
    format!(
        "{formula}{space}{}, {} e{spin}",
        charge(case.charge),
        case.electrons
    )
}

fn description(document: &ShapeDocument, names: &[String]) -> String {
    let rows: Vec<String> = document
        .cases
        .iter()
        .zip(names)
        .map(|(case, name)| format!("{name}: {}", case.verdict))
        .collect();
    format!(
        "Rows are cases, columns the angle from the symmetric form on. {}",
        rows.join("; ")
    )
}
