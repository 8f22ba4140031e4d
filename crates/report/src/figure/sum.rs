//! The second panel: the sum of the level energies, relative to its lowest value.

use crate::draw::bundle::curves;
use crate::draw::wording::{lowest_sum, value_with_unit};
use crate::lettering::Lettering;

use super::axes::energy_axis;
use super::canvas::{ASCENT, Anchor, Canvas, path};
use super::measure::Measure;
use super::scale::EnergyScale;
use super::sheet::Sheet;
use super::theme::Colours;
use super::xml::length;

/// Whether there is a curve to draw.
pub(crate) fn has_curve(sheet: &Sheet<'_>) -> bool {
    let known = sheet
        .document
        .points
        .iter()
        .filter(|point| point.sum.is_some())
        .count();
    sheet.options.sum_panel && known > 1
}

/// Draws the panel between two page heights, the lowest place marked through both panels.
pub(crate) fn draw(canvas: &mut Canvas, sheet: &Sheet<'_>, top: f64, bottom: f64) {
    let (measure, colours) = (&sheet.measure, sheet.colours);
    let lowest = lowest_sum(sheet.document);
    let sums: Vec<Option<f64>> = sheet
        .document
        .points
        .iter()
        .map(|point| point.sum.map(|sum| sum.get()))
        .collect();
    let least = sums.iter().flatten().copied().fold(f64::INFINITY, f64::min);
    let zero = lowest.map_or(least, |found| found.1.min(least));
    let relative: Vec<Option<f64>> = sums.iter().map(|sum| sum.map(|sum| sum - zero)).collect();
    let highest = relative
        .iter()
        .flatten()
        .copied()
        .fold(0.0, f64::max)
        .max(1e-3);
    let scale = EnergyScale::new(&[(-0.14 * highest, 1.08 * highest)], top, bottom, 0.0);
    let unit = sheet.options.energy_unit;
    let ticks = scale.ticks(unit, 1.9 * measure.tick);
    let title = format!("Δ sum / {}", unit.symbol());
    canvas.xml.open("g", &[("class", "sum")]);
    energy_axis(
        canvas,
        (measure, colours),
        (&scale, &ticks),
        unit,
        sheet.axis,
        &title,
    );
    if let Some(support) = &sheet.options.support {
        let (from, to) = sheet.span();
        let (low, high) = (from.min(to), from.max(to));
        let inside = |angle: f64| low - 1e-9 <= angle && angle <= high + 1e-9;
        let ends = support
            .range
            .filter(|range| range.1 >= low && range.0 <= high)
            .map(|range| [range.0.max(low), range.1.min(high)].map(|x| sheet.x(x)));
        let angle = support
            .angle
            .filter(|angle| inside(*angle))
            .map(|x| sheet.x(x));
        if let Some(ends) = ends.or(angle.map(|x| [x, x])) {
            let across = (ends[0].min(ends[1]), ends[0].max(ends[1]));
            band(canvas, measure, colours, (across, angle), (top, bottom));
        }
    }
    for curve in curves(&sheet.xs, &relative) {
        let Some((from, to)) = curve.ends() else {
            continue;
        };
        let pieces: Vec<_> = curve
            .pieces(from, to)
            .iter()
            .map(|piece| piece.map(|(x, energy)| (sheet.x(x), scale.y(energy))))
            .collect();
        canvas.stroke(&path(&pieces), colours.ink, 0.9 * measure.stroke, &[]);
    }
    if let Some((at, sum, _)) = lowest {
        let place = (sheet.x(at), scale.y(sum - zero));
        canvas.disc(
            place,
            1.4 * measure.stroke,
            colours.ink,
            (colours.ground, 0.5 * measure.stroke),
        );
        let height = |x: f64| {
            let found = curves(&sheet.xs, &relative)
                .iter()
                .find_map(|curve| curve.value(x));
            found.map(|energy| scale.y(energy))
        };
        mark(canvas, sheet, at, place, top, &height);
    }
    canvas.xml.close();
}

/// Writes the place of the lowest sum above the curve, clear of it where the panel has room.
fn mark(
    canvas: &mut Canvas,
    sheet: &Sheet<'_>,
    at: f64,
    (x, y): (f64, f64),
    top: f64,
    height: &impl Fn(f64) -> Option<f64>,
) {
    let Some(coordinate) = sheet.document.coordinates.first() else {
        return;
    };
    let size = sheet.measure.tick;
    let text = Lettering::plain(value_with_unit(at, coordinate.unit));
    let half = 0.5 * text.width(size);
    let middle = x.clamp(sheet.left + half + 2.0, sheet.right - half - 2.0);
    let (from, to) = sheet.span();
    let highest = (0..=8)
        .map(|k| middle + (f64::from(k) / 4.0 - 1.0) * (half + 0.3 * size))
        .map(|x| from + (x - sheet.left) / (sheet.right - sheet.left) * (to - from))
        .filter_map(height)
        .fold(y, f64::min);
    let base = (highest.min(y - 0.4 * size) - 0.4 * size).max(top + ASCENT * size);
    let colours = sheet.colours;
    let halo = length(0.3 * size);
    let more = [
        ("paint-order", "stroke"),
        ("stroke", colours.ground),
        ("stroke-width", &halo),
        ("stroke-linejoin", "round"),
    ];
    canvas.styled_text(
        (middle, base),
        Anchor::Middle,
        size,
        colours.ink,
        &text,
        &more,
    );
}

/// The range of a verdict's angle as a shaded band, and the angle as a pointer on its foot.
pub(crate) fn band(
    canvas: &mut Canvas,
    measure: &Measure,
    colours: &Colours,
    ((left, right), angle): ((f64, f64), Option<f64>),
    (top, bottom): (f64, f64),
) {
    if right - left > 0.1 {
        let path = format!(
            "M{} {}H{}V{}H{0}Z",
            length(left),
            length(top),
            length(right),
            length(bottom)
        );
        canvas.area(&path, colours.band);
    }
    if let Some(x) = angle {
        let (half, height) = (1.6 * measure.stroke, 2.6 * measure.stroke);
        let path = format!(
            "M{} {}L{} {}H{}Z",
            length(x),
            length(bottom - height),
            length(x + half),
            length(bottom),
            length(x - half)
        );
        canvas.area(&path, colours.ink);
    }
}

/// A dotted line through the main panel where the sum is lowest inside the range.
pub(crate) fn guide(canvas: &mut Canvas, sheet: &Sheet<'_>, bottom: f64) {
    if let Some((at, _, true)) = lowest_sum(sheet.document) {
        let x = length(sheet.x(at));
        let path = format!("M{x} {}V{}", length(sheet.top), length(bottom));
        let dot = sheet.measure.stroke;
        canvas.stroke(
            &path,
            sheet.colours.soft,
            0.4 * dot,
            &[0.8 * dot, 1.6 * dot],
        );
    }
}
