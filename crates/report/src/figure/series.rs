//! The picture of a series of verdicts: a row per case, the angle across, the leading sum by colour
//! and pattern, the verdict with its range below.

use crate::document::{Case, Curve, ShapeDocument};
use crate::draw::ticks::{ascii_number, degree_ticks, number};
use crate::draw::wording::{charge, coordinate_name, heading_formula};
use crate::lettering::Lettering;

use super::canvas::{Anchor, Canvas};
use super::measure::Measure;
use super::options::{FigureError, FigureOptions};
use super::series_classes::{CLASSES, class_of, paint, patterns};
use super::sweep::open_page;
use super::theme::Colours;
use super::xml::length;

/// Where things stand, in points.
struct Rows<'a> {
    measure: Measure,
    colours: &'static Colours,
    prefix: &'a str,
    left: f64,
    right: f64,
    /// Height of a coloured box.
    thick: f64,
}

/// Rows are the cases (electron counts of fixed atoms, or molecules), columns the angle; the leading
/// sum relative to the symmetric form is shown by colour and pattern, the verdict's angle by a pointer
/// and its 10 to 90 % range by a bar below. Rows without a verdict are cross-hatched.
///
/// # Errors
/// A document without cases; one whose cases have no curves gives empty rows.
pub fn shape_figure(
    document: &ShapeDocument,
    options: &FigureOptions,
) -> Result<String, FigureError> {
    compose(document, options).map(|canvas| canvas.xml.finish())
}

/// The figure with the record of its text.
pub(crate) fn compose(
    document: &ShapeDocument,
    options: &FigureOptions,
) -> Result<Canvas, FigureError> {
    if document.cases.is_empty() {
        return Err(FigureError::Nothing);
    }
    let (measure, colours) = (Measure::of(options.width), Colours::of(options.theme));
    let size = measure.label;
    let names: Vec<Lettering> = document
        .cases
        .iter()
        .map(|case| row_name(document, case))
        .collect();
    let verdicts: Vec<Lettering> = document.cases.iter().map(verdict).collect();
    let widest = |all: &[Lettering]| all.iter().map(|text| text.width(size)).fold(0.0, f64::max);
    let rows = Rows {
        left: measure.pad + widest(&names) + 0.9 * size,
        right: measure.page - measure.pad - widest(&verdicts) - 0.7 * size,
        thick: 1.35 * size,
        prefix: &options.id_prefix,
        measure,
        colours,
    };
    let mut canvas = Canvas::default();
    let mut y = measure.pad + 0.3 * size;
    for (index, case) in document.cases.iter().enumerate() {
        rows.row(&mut canvas, (case, &names[index], &verdicts[index]), y);
        y += rows.thick + 0.75 * size;
        let next = document.cases.get(index + 1);
        if next.is_none_or(|next| scale(next) != scale(case)) {
            y = rows.axis(&mut canvas, case, y) + 0.9 * size;
        }
    }
    let title = match &document.coordinate {
        Some(coordinate) if document.cases.iter().all(|case| case.formula.is_none()) => {
            coordinate_name(coordinate, &document.molecule, "\u{2013}")
        }
        _ => "angle".to_owned(),
    };
    canvas.text(
        (0.5 * (rows.left + rows.right), y + 0.1 * size),
        Anchor::Middle,
        measure.title,
        colours.ink,
        &Lettering::plain(format!("{title} / °")),
    );
    let undecided = document.cases.iter().any(is_undecided);
    let below = rows.key(&mut canvas, y + 1.2 * size, undecided);
    let height = (below + measure.pad).max(measure.least_height);
    Ok(frame(canvas, document, options, (&names, height)))
}

impl Rows<'_> {
    fn x(&self, (from, to): (f64, f64), angle: f64) -> f64 {
        self.left + (angle - from) / (to - from) * (self.right - self.left)
    }

    /// One case.
    fn row(
        &self,
        canvas: &mut Canvas,
        (case, name, verdict): (&Case, &Lettering, &Lettering),
        y: f64,
    ) {
        let size = self.measure.label;
        let base = y + 0.5 * self.thick + 0.34 * size;
        let ink = self.colours.ink;
        canvas.text((self.left - 0.9 * size, base), Anchor::End, size, ink, name);
        canvas.text(
            (self.right + 0.7 * size, base),
            Anchor::Start,
            size,
            ink,
            verdict,
        );
        let (Some(curve), Some(span)) = (case.curves.first(), scale(case)) else {
            return;
        };
        for (from, to, class) in stretches(curve) {
            let (a, b) = (self.x(span, from), self.x(span, to));
            let place = [a.min(b), y, (b - a).abs(), self.thick];
            paint(&mut canvas.xml, place, &CLASSES[class], self.prefix);
        }
        if is_undecided(case) {
            let place = [self.left, y, self.right - self.left, self.thick].map(length);
            canvas.xml.empty(
                "rect",
                &[
                    ("x", &place[0]),
                    ("y", &place[1]),
                    ("width", &place[2]),
                    ("height", &place[3]),
                    ("fill", &format!("url(#{}-undecided)", self.prefix)),
                    ("stroke", ink),
                    ("stroke-width", "0.5"),
                ],
            );
        }
        self.pointer(canvas, case, span, y + self.thick);
    }

    /// The verdict's range as a bar and its angle as a pointer, just below a box.
    fn pointer(&self, canvas: &mut Canvas, case: &Case, span: (f64, f64), y: f64) {
        let (low, high) = (span.0.min(span.1), span.0.max(span.1));
        let stroke = self.measure.stroke;
        let ink = self.colours.ink;
        if let Some([from, to]) = case.angle_range {
            let ends = [from, to].map(|angle| self.x(span, angle.get().clamp(low, high)));
            let bar = y + 1.9 * stroke;
            canvas.line((ends[0], bar), (ends[1], bar), ink, 1.1 * stroke);
        }
        let angle = case.angle.map(|angle| angle.get());
        if let Some(angle) = angle.filter(|angle| low <= *angle && *angle <= high) {
            let (x, half) = (self.x(span, angle), 2.0 * stroke);
            let path = format!(
                "M{} {}L{} {}H{}Z",
                length(x),
                length(y + 0.2 * stroke),
                length(x + half),
                length(y + 0.2 * stroke + 1.7 * half),
                length(x - half)
            );
            canvas.area(&path, ink);
        }
    }

    /// The axis below rows of one scale; returns the height below its numbers.
    fn axis(&self, canvas: &mut Canvas, case: &Case, y: f64) -> f64 {
        let tick = self.measure.tick;
        let Some(span) = scale(case) else {
            return y;
        };
        let thin = 0.45 * self.measure.stroke;
        let ink = self.colours.ink;
        canvas.line((self.left, y), (self.right, y), ink, thin);
        let most = (((self.right - self.left) / (3.4 * tick)).floor() as usize).clamp(2, 7);
        let found = degree_ticks(span.0.min(span.1), span.0.max(span.1), most);
        for value in &found.major {
            let x = self.x(span, *value);
            canvas.line((x, y), (x, y + 0.42 * tick), ink, thin);
            canvas.text(
                (x, y + 1.4 * tick),
                Anchor::Middle,
                tick,
                ink,
                &Lettering::plain(number(*value, found.decimals)),
            );
        }
        y + 1.5 * tick
    }

    /// What colours and marks mean; returns the height below.
    fn key(&self, canvas: &mut Canvas, top: f64, undecided: bool) -> f64 {
        let size = self.measure.key;
        let soft = self.colours.soft;
        let (start, end) = (self.measure.pad, self.measure.page - self.measure.pad);
        let mut base = top + size;
        let write = |canvas: &mut Canvas, at: (f64, f64), words: &str| -> f64 {
            let text = Lettering::plain(words);
            canvas.text(at, Anchor::Start, size, soft, &text);
            text.width(size)
        };
        write(
            canvas,
            (start, base),
            "leading sum from the symmetric form / eV:",
        );
        base += 1.5 * size;
        let mut x = start;
        let hatched = ("undecided", None);
        let classes = CLASSES.iter().map(|class| (class.words, Some(class)));
        for (words, class) in classes.chain(undecided.then_some(hatched)) {
            let width = 2.4 * size + Lettering::plain(words).width(size);
            if x > start && x + width > end {
                x = start;
                base += 1.5 * size;
            }
            let place = [x, base - 0.86 * size, 2.0 * size, 1.05 * size];
            if let Some(class) = class {
                paint(&mut canvas.xml, place, class, self.prefix);
            } else {
                let place = place.map(length);
                canvas.xml.empty(
                    "rect",
                    &[
                        ("x", &place[0]),
                        ("y", &place[1]),
                        ("width", &place[2]),
                        ("height", &place[3]),
                        ("fill", &format!("url(#{}-undecided)", self.prefix)),
                        ("stroke", self.colours.ink),
                        ("stroke-width", "0.5"),
                    ],
                );
            }
            write(canvas, (x + 2.4 * size, base), words);
            x += width + 1.3 * size;
        }
        base += 1.5 * size;
        let words = "pointer: angle of the verdict; bar: 10 to 90 % over perturbed parameters";
        for line in wrapped(words, end - start, size) {
            write(canvas, (start, base), &line);
            base += 1.4 * size;
        }
        base - 0.9 * size
    }
}

/// Words in lines no wider than `width`.
fn wrapped(words: &str, width: f64, size: f64) -> Vec<String> {
    let mut lines = vec![String::new()];
    for word in words.split(' ') {
        let last = lines.len() - 1;
        let longer = format!("{} {word}", lines[last]);
        if lines[last].is_empty() {
            lines[last] = word.to_owned();
        } else if Lettering::plain(longer.as_str()).width(size) <= width {
            lines[last] = longer;
        } else {
            lines.push(word.to_owned());
        }
    }
    lines
}

fn is_undecided(case: &Case) -> bool {
    case.verdict == "undecided"
}

/// First and last angle of a case's curve.
fn scale(case: &Case) -> Option<(f64, f64)> {
    let at = &case.curves.first()?.at;
    let (from, to) = (at.first()?.get(), at.last()?.get());
    ((from - to).abs() > 1e-9).then_some((from, to))
}

/// Stretches of one class: from, to and the class; points reach halfway to their neighbours.
fn stretches(curve: &Curve) -> Vec<(f64, f64, usize)> {
    let zero = curve.energy.first().copied().flatten();
    let zero = zero.map_or(0.0, |energy| energy.get());
    let at: Vec<f64> = curve.at.iter().map(|at| at.get()).collect();
    let mut found: Vec<(f64, f64, usize)> = Vec::new();
    for (place, energy) in curve.energy.iter().enumerate().take(at.len()) {
        let Some(energy) = energy else { continue };
        let from = place
            .checked_sub(1)
            .map_or(at[place], |k| 0.5 * (at[k] + at[place]));
        let to = at
            .get(place + 1)
            .map_or(at[place], |next| 0.5 * (at[place] + next));
        let class = class_of(energy.get() - zero);
        match found.last_mut() {
            Some(last) if last.2 == class && (last.1 - from).abs() < 1e-9 => last.1 = to,
            _ => found.push((from, to, class)),
        }
    }
    found
}

fn row_name(document: &ShapeDocument, case: &Case) -> Lettering {
    let formula = case
        .formula
        .as_deref()
        .unwrap_or_else(|| heading_formula(&document.molecule));
    let mut name = Lettering::formula(formula, &charge(case.charge));
    let spin = match case.unpaired {
        0 | 1 => String::new(),
        more => format!(", {more} unpaired"),
    };
    let words = Lettering::plain(format!(", {} e{spin}", case.electrons));
    name.runs.extend(words.runs);
    name
}

fn verdict(case: &Case) -> Lettering {
    let angle = match (case.angle, case.angle_range) {
        (Some(angle), Some(_)) => format!(" {}°", ascii_number(angle.get(), 0)),
        _ => String::new(),
    };
    Lettering::plain(format!("{}{angle}", case.verdict))
}

fn frame(
    canvas: Canvas,
    document: &ShapeDocument,
    options: &FigureOptions,
    (names, height): (&[Lettering], f64),
) -> Canvas {
    let prefix = &options.id_prefix;
    let colours = Colours::of(options.theme);
    let names: Vec<String> = names.iter().map(Lettering::unicode).collect();
    let mut xml = open_page(options, Measure::of(options.width).page, height);
    let title = format!("Shape verdicts: {}", names.join("; "));
    xml.text("title", &[("id", &format!("{prefix}-title"))], &title);
    let rows: Vec<String> = document
        .cases
        .iter()
        .zip(&names)
        .map(|(case, name)| format!("{name}: {}", verdict(case).unicode()))
        .collect();
    let words = format!(
        "Rows are cases, columns the angle from the symmetric form on. {}",
        rows.join("; ")
    );
    xml.text("desc", &[("id", &format!("{prefix}-desc"))], &words);
    xml.open("defs", &[]);
    patterns(&mut xml, colours, prefix);
    xml.close();
    xml.empty(
        "rect",
        &[
            ("width", "100%"),
            ("height", "100%"),
            ("fill", colours.ground),
        ],
    );
    xml.append(canvas.xml);
    Canvas {
        xml,
        height,
        boxes: canvas.boxes,
        area: None,
        key: Vec::new(),
    }
}
