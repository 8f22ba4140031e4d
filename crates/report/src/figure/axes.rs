//! Axes with units.

use crate::draw::bundle::in_degrees;
use crate::draw::ticks::{Ticks, degree_ticks, number, ticks};
use crate::draw::wording::{coordinate_name, unit_symbol};
use crate::lettering::Lettering;

use super::canvas::{Anchor, Canvas};
use super::measure::Measure;
use super::options::EnergyUnit;
use super::scale::EnergyScale;
use super::sheet::Sheet;
use super::theme::Colours;
use super::xml::length;

/// Length of a tick in font sizes of its number.
const TICK: f64 = 0.42;

/// Width of the widest number beside the energy axis.
pub(crate) fn tick_width(scale_ticks: &[Ticks], size: f64) -> f64 {
    scale_ticks
        .iter()
        .flat_map(|t| t.major.iter().map(|value| number(*value, t.decimals)))
        .map(|text| Lettering::plain(text).width(size))
        .fold(0.0, f64::max)
}

/// Room left of the energy axis for its title and a number of this width.
pub(crate) fn room(measure: &Measure, numbers: f64) -> f64 {
    measure.pad + 1.35 * measure.title + numbers + (TICK + 0.3) * measure.tick
}

/// An energy axis at `x` with its title; breaks are marked by a pair of short strokes.
pub(crate) fn energy_axis(
    canvas: &mut Canvas,
    (measure, colours): (&Measure, &Colours),
    (scale, scale_ticks): (&EnergyScale, &[Ticks]),
    unit: EnergyUnit,
    x: f64,
    title: &str,
) {
    let thin = 0.45 * measure.stroke;
    let tick = TICK * measure.tick;
    canvas.xml.open("g", &[("class", "energy-axis")]);
    for (segment, found) in scale.segments.iter().zip(scale_ticks) {
        canvas.line((x, segment.top), (x, segment.bottom), colours.ink, thin);
        for value in &found.minor {
            let y = scale.y(unit.to_ev(*value));
            canvas.line((x - 0.5 * tick, y), (x, y), colours.ink, 0.8 * thin);
        }
        for value in &found.major {
            let y = scale.y(unit.to_ev(*value));
            canvas.line((x - tick, y), (x, y), colours.ink, thin);
            canvas.text(
                (x - tick - 0.25 * measure.tick, y + 0.35 * measure.tick),
                Anchor::End,
                measure.tick,
                colours.ink,
                &Lettering::plain(number(*value, found.decimals)),
            );
        }
    }
    for pair in scale.segments.windows(2) {
        for y in [pair[0].top, pair[1].bottom] {
            let half = 0.4 * measure.tick;
            canvas.line(
                (x - half, y + 0.5 * half),
                (x + half, y - 0.5 * half),
                colours.ink,
                thin,
            );
        }
    }
    let top = scale.segments.last().map_or(0.0, |segment| segment.top);
    let bottom = scale.segments.first().map_or(0.0, |segment| segment.bottom);
    let base = measure.pad + 0.9 * measure.title;
    canvas.upward_text(
        (base, 0.5 * (top + bottom)),
        measure.title,
        colours.ink,
        title,
    );
    canvas.xml.close();
}

/// The coordinate axis below the panels. Returns the page height below its title.
pub(crate) fn coordinate_axis(canvas: &mut Canvas, sheet: &Sheet<'_>, y: f64) -> f64 {
    let (measure, colours) = (&sheet.measure, sheet.colours);
    let (from, to) = sheet.span();
    let widest = 3.2 * measure.tick;
    let most = (((sheet.right - sheet.left) / widest).floor() as usize).clamp(2, 7);
    let found = if in_degrees(sheet.document) {
        degree_ticks(from, to, most)
    } else {
        ticks(from, to, most)
    };
    let thin = 0.45 * measure.stroke;
    let tick = TICK * measure.tick;
    canvas.xml.open("g", &[("class", "coordinate-axis")]);
    canvas.line((sheet.left, y), (sheet.right, y), colours.ink, thin);
    for value in &found.minor {
        let x = sheet.x(*value);
        canvas.line((x, y), (x, y + 0.5 * tick), colours.ink, 0.8 * thin);
    }
    for value in &found.major {
        let x = sheet.x(*value);
        canvas.line((x, y), (x, y + tick), colours.ink, thin);
        let text = Lettering::plain(number(*value, found.decimals));
        canvas.text(
            (x, y + tick + 0.95 * measure.tick),
            Anchor::Middle,
            measure.tick,
            colours.ink,
            &text,
        );
    }
    let base = y + tick + 1.35 * measure.tick + 0.95 * measure.title;
    if let Some(coordinate) = sheet.document.coordinates.first() {
        let name = coordinate_name(coordinate, &sheet.document.molecule, "–");
        let unit = unit_symbol(coordinate.unit);
        let title = if unit.is_empty() {
            name
        } else {
            format!("{name} / {unit}")
        };
        let middle = 0.5 * (sheet.left + sheet.right);
        canvas.text(
            (middle, base),
            Anchor::Middle,
            measure.title,
            colours.ink,
            &Lettering::plain(title),
        );
    }
    canvas.xml.close();
    base + 0.4 * measure.title
}

/// Light upright lines where the curves begin and end.
pub(crate) fn poles(canvas: &mut Canvas, sheet: &Sheet<'_>, ranges: &[(f64, f64)]) {
    let path: String = ranges
        .iter()
        .flat_map(|(top, bottom)| {
            [sheet.left, sheet.right]
                .map(|x| format!("M{} {}V{}", length(x), length(*top), length(*bottom)))
        })
        .collect();
    canvas.stroke(&path, sheet.colours.faint, 0.45 * sheet.measure.stroke, &[]);
}
