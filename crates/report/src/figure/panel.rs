//! The main panel: gap, lines, electrons, crossings.

use std::fmt::Write;

use crate::document::{CrossingKind, CrossingRecord};
use crate::draw::bundle::Bundle;
use crate::draw::curve::Piece;

use super::canvas::{Canvas, path};
use super::sheet::Sheet;
use super::theme::dashes;
use super::xml::length;

/// Shades between the highest occupied and the lowest empty line. Returns whether it did: not where
/// electrons skip a lower line, or where a line has unknown energies.
pub(crate) fn shade_gap(canvas: &mut Canvas, sheet: &Sheet<'_>) -> bool {
    const SAMPLES: u32 = 120;
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
    let mut samples: Vec<(usize, f64, f64, f64)> = Vec::new();
    for sample in 0..=SAMPLES {
        let x = from + (to - from) * f64::from(sample) / f64::from(SAMPLES);
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
        samples.push((filled, sheet.x(x), sheet.scale.y(lumo), sheet.scale.y(homo)));
    }
    // Where a set becomes degenerate its electrons may share more orbitals at one point: the gap
    // above them has nothing to do with the one beside it.
    let count = |filled: usize| samples.iter().filter(|sample| sample.0 == filled).count();
    let usual = samples
        .iter()
        .map(|sample| sample.0)
        .max_by_key(|filled| (count(*filled), std::cmp::Reverse(*filled)));
    let mut path = String::new();
    for run in samples.chunk_by(|a, b| a.0 == b.0) {
        if Some(run[0].0) == usual && run.len() > 1 {
            for (index, (_, x, lumo, _)) in run.iter().enumerate() {
                let letter = if index == 0 { 'M' } else { 'L' };
                let _ = write!(path, "{letter}{} {}", length(*x), length(*lumo));
            }
            for (_, x, _, homo) in run.iter().rev() {
                let _ = write!(path, "L{} {}", length(*x), length(*homo));
            }
            path.push('Z');
        }
    }
    canvas.area(&path, sheet.colours.gap);
    !path.is_empty()
}

/// Orbitals that hold electrons at the point nearest to `x`.
fn occupied_orbitals(sheet: &Sheet<'_>, x: f64) -> usize {
    let levels = &sheet.document.points[nearest_point(&sheet.xs, x)].levels;
    levels
        .iter()
        .filter(|level| level.occupation.get() > 1e-6)
        .count()
}

pub(crate) fn nearest_point(xs: &[f64], x: f64) -> usize {
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

/// What has been marked.
#[derive(Default)]
pub(crate) struct Marked {
    pub(crate) crossing: bool,
    pub(crate) avoided: bool,
    /// Where on the page.
    pub(crate) places: Vec<(f64, f64)>,
}

/// Marks crossings of drawn lines by kind.
pub(crate) fn mark_crossings(canvas: &mut Canvas, sheet: &Sheet<'_>) -> Marked {
    let mut kinds = Marked::default();
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
                kinds.crossing = true;
                kinds.places.push((x, y));
                canvas.disc((x, y), size, "none", (sheet.colours.ink, thin));
            }
            CrossingKind::Avoided => {
                kinds.avoided = true;
                let ends = (sheet.scale.y(a.max(b)), sheet.scale.y(a.min(b)));
                canvas.avoided(x, ends, 0.8 * size, sheet.colours.ink, thin);
            }
            CrossingKind::Touching => {}
        }
    }
    canvas.xml.close();
    kinds
}
