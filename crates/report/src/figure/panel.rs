//! The main panel: gap, lines, electrons, crossings.

use std::fmt::Write;

use crate::document::{CrossingKind, CrossingRecord};
use crate::draw::bundle::Bundle;
use crate::draw::curve::Piece;

use super::canvas::{Canvas, path};
use super::options::{ElectronMarks, FigureError};
use super::sheet::Sheet;
use super::theme::dashes;
use super::xml::length;

/// Shades between the highest occupied and the lowest empty line. Returns whether it did: not where
/// electrons skip a lower line, or where a line has unknown energies.
pub(crate) fn shade_gap(canvas: &mut Canvas, sheet: &Sheet<'_>) -> bool {
    const SAMPLES: usize = 120;
    let aufbau = sheet.document.points.iter().all(|point| {
        let order = point
            .levels
            .iter()
            .map(|level| level.occupation.get() > 1e-6);
        order.is_sorted_by(|a, b| a >= b)
    });
    let complete = sheet
        .all
        .iter()
        .all(|bundle| bundle.energies.iter().all(Option::is_some));
    if !(aufbau && complete) {
        return false;
    }
    let (from, to) = sheet.span();
    let mut upper = String::new();
    let mut lower: Vec<String> = Vec::new();
    for sample in 0..=SAMPLES {
        let x = from + (to - from) * sample as f64 / SAMPLES as f64;
        let filled = occupied_orbitals(sheet, x);
        let mut energies: Vec<f64> = Vec::new();
        for bundle in &sheet.all {
            energies.extend(
                bundle
                    .value(x)
                    .into_iter()
                    .flat_map(|e| vec![e; bundle.multiplicity]),
            );
        }
        energies.sort_by(f64::total_cmp);
        let Some((homo, lumo)) = filled
            .checked_sub(1)
            .and_then(|last| Some((*energies.get(last)?, *energies.get(filled)?)))
        else {
            return false;
        };
        let x = length(sheet.x(x));
        let _ = write!(
            upper,
            "{}{x} {}",
            if sample == 0 { "M" } else { "L" },
            length(sheet.scale.y(lumo))
        );
        lower.push(format!("L{x} {}", length(sheet.scale.y(homo))));
    }
    upper.extend(lower.into_iter().rev());
    upper.push('Z');
    canvas.area(&upper, sheet.colours.gap);
    true
}

/// Orbitals that hold electrons at the point nearest to `x`.
fn occupied_orbitals(sheet: &Sheet<'_>, x: f64) -> usize {
    let levels = &sheet.document.points[nearest_point(&sheet.xs, x)].levels;
    levels
        .iter()
        .filter(|level| level.occupation.get() > 1e-6)
        .count()
}

fn nearest_point(xs: &[f64], x: f64) -> usize {
    let distance = |k: &usize| (xs[*k] - x).abs();
    (0..xs.len())
        .min_by(|a, b| distance(a).total_cmp(&distance(b)))
        .unwrap_or_default()
}

/// Draws one line: wide where it holds electrons, thin where it is empty.
pub(crate) fn draw_line(canvas: &mut Canvas, sheet: &Sheet<'_>, bundle: &Bundle) {
    let ids: Vec<String> = bundle.ids.iter().map(u32::to_string).collect();
    canvas
        .xml
        .open("g", &[("class", "line"), ("data-line", &ids.join(" "))]);
    canvas.xml.text(
        "title",
        &[],
        &format!("{}: {} to {}", bundle.label, bundle.start, bundle.end),
    );
    let colour = sheet.colour(bundle);
    for (from, to, electrons) in stretches(sheet, bundle) {
        let width = sheet.measure.line_width(electrons);
        let dashes = dashes(sheet.place(bundle), sheet.measure.stroke);
        let pieces: Vec<Vec<Piece>> = bundle
            .curves
            .iter()
            .map(|curve| curve.pieces(from, to))
            .collect();
        for offset in sheet.offsets(bundle) {
            for run in pieces.iter().filter(|run| !run.is_empty()) {
                canvas.stroke(&path(&sheet.on_page(run, offset)), colour, width, &dashes);
            }
        }
    }
    canvas.xml.close();
}

/// Stretches of equal occupation; it changes at a crossing where there is one between the two
/// points, else halfway.
fn stretches(sheet: &Sheet<'_>, bundle: &Bundle) -> Vec<(f64, f64, f64)> {
    let kind = |electrons: f64| sheet.measure.line_width(electrons);
    let mut found = Vec::new();
    let mut start = sheet.xs[0];
    for k in 1..sheet.xs.len() {
        let (before, after) = (bundle.occupations[k - 1], bundle.occupations[k]);
        if (kind(before) - kind(after)).abs() > 1e-9 {
            let place = change_between(sheet, bundle, sheet.xs[k - 1], sheet.xs[k]);
            found.push((start, place, before));
            start = place;
        }
    }
    let last = bundle.occupations.last().copied().unwrap_or_default();
    found.push((start, sheet.span().1, last));
    found
}

fn change_between(sheet: &Sheet<'_>, bundle: &Bundle, from: f64, to: f64) -> f64 {
    let (low, high) = (from.min(to), from.max(to));
    crossings(sheet)
        .filter(|crossing| crossing.kind == CrossingKind::Crossing)
        .filter(|crossing| crossing.lines.iter().any(|id| bundle.ids.contains(id)))
        .map(|crossing| crossing.at.get())
        .find(|at| low < *at && *at < high)
        .unwrap_or(0.5 * (from + to))
}

fn crossings<'a>(sheet: &Sheet<'a>) -> impl Iterator<Item = &'a CrossingRecord> {
    sheet.document.crossings.iter().flatten()
}

/// Draws electrons on the occupied lines. Returns the coordinate where they stand.
pub(crate) fn draw_electrons(
    canvas: &mut Canvas,
    sheet: &Sheet<'_>,
) -> Result<Option<f64>, FigureError> {
    let (from, to) = sheet.span();
    let point = match sheet.options.electrons {
        ElectronMarks::None => return Ok(None),
        ElectronMarks::At(at) => {
            if !(from.min(to) - 1e-9 <= at && at <= from.max(to) + 1e-9) {
                return Err(FigureError::ElectronsOutside { at, from, to });
            }
            nearest_point(&sheet.xs, at)
        }
        ElectronMarks::Clear => clearest_point(sheet),
    };
    let mut any = false;
    let radius = 1.15 * sheet.measure.stroke;
    canvas.xml.open("g", &[("class", "electrons")]);
    for bundle in sheet.lines() {
        let electrons = bundle.occupations[point];
        let Some(energy) = bundle.energies[point].filter(|energy| sheet.scale.shows(*energy))
        else {
            continue;
        };
        if electrons <= 1e-6 {
            continue;
        }
        any = true;
        let (x, y) = (sheet.x(sheet.xs[point]), sheet.scale.y(energy));
        let middle = 0.5 * (bundle.multiplicity as f64 - 1.0);
        for (k, offset) in sheet.offsets(bundle).into_iter().enumerate() {
            let aside = (k as f64 - middle) * 6.4 * radius;
            let colour = sheet.colour(bundle);
            canvas.electrons(
                (x + aside, y + offset),
                electrons,
                radius,
                colour,
                sheet.colours.ground,
            );
        }
    }
    canvas.xml.close();
    Ok(any.then_some(sheet.xs[point]))
}

/// The inner point at which the occupied lines are farthest apart on the page.
fn clearest_point(sheet: &Sheet<'_>) -> usize {
    let count = sheet.xs.len();
    let margin = (count / 10).max(usize::from(count > 2));
    let clearance = |k: usize| -> f64 {
        let mut heights: Vec<f64> = sheet
            .lines()
            .filter(|bundle| bundle.occupations[k] > 1e-6)
            .filter_map(|bundle| bundle.energies[k])
            .map(|energy| sheet.scale.y(energy))
            .collect();
        heights.sort_by(f64::total_cmp);
        heights
            .windows(2)
            .map(|pair| pair[1] - pair[0])
            .fold(f64::INFINITY, f64::min)
    };
    let mut best = margin.min(count - 1);
    for k in margin..count - margin {
        if clearance(k) > clearance(best) + 1e-6 {
            best = k;
        }
    }
    best
}

/// Marks crossings of drawn lines by kind. Returns which kinds there were: crossing, avoided.
pub(crate) fn mark_crossings(canvas: &mut Canvas, sheet: &Sheet<'_>) -> (bool, bool) {
    let mut kinds = (false, false);
    let mut marked: Vec<(f64, f64)> = Vec::new();
    canvas.xml.open("g", &[("class", "crossings")]);
    for crossing in crossings(sheet) {
        let at = crossing.at.get();
        let point = nearest_point(&sheet.xs, at);
        let pair: Vec<&Bundle> = crossing
            .lines
            .iter()
            .filter_map(|id| sheet.lines().find(|bundle| bundle.holds(*id, point)))
            .collect();
        let &[first, second] = pair.as_slice() else {
            continue;
        };
        let (Some(a), Some(b)) = (first.value(at), second.value(at)) else {
            continue;
        };
        if !(sheet.scale.shows(a) && sheet.scale.shows(b)) {
            continue;
        }
        let x = sheet.x(at);
        let energy = crossing.energy.map_or(0.5 * (a + b), |energy| energy.get());
        let y = sheet.scale.y(energy);
        // Members of a degenerate set cross at one place: one mark.
        if marked
            .iter()
            .any(|(mx, my)| (mx - x).abs() < 0.5 && (my - y).abs() < 0.5)
        {
            continue;
        }
        marked.push((x, y));
        let size = 1.9 * sheet.measure.stroke;
        // Lines that meet at an end have one label there, which says it.
        if x - sheet.left < size || sheet.right - x < size {
            continue;
        }
        let thin = 0.5 * sheet.measure.stroke;
        match crossing.kind {
            CrossingKind::Crossing => {
                kinds.0 = true;
                canvas.disc((x, y), size, "none", (sheet.colours.ink, thin));
            }
            CrossingKind::Avoided => {
                kinds.1 = true;
                let ends = (sheet.scale.y(a.max(b)), sheet.scale.y(a.min(b)));
                canvas.avoided(x, ends, 0.8 * size, sheet.colours.ink, thin);
            }
            CrossingKind::Touching => {}
        }
    }
    canvas.xml.close();
    kinds
}
