//! Labels at both ends of the lines.

use crate::draw::bundle::Bundle;
use crate::draw::spread::spread_apart;
use crate::lettering::Lettering;

use super::canvas::{ASCENT, Anchor, Canvas, DESCENT};
use super::gallery::Gallery;
use super::sheet::Sheet;

/// Which end of the lines.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Side {
    Left,
    Right,
}

/// One label: the lines that share it at this end.
pub(crate) struct EndLabel {
    energy: f64,
    name: String,
    pub(crate) lettering: Lettering,
    irrep: Option<String>,
    /// Place of the first line in the sheet's list.
    line: usize,
    /// The `id`s of all lines that share the label.
    pub(crate) lines: Vec<u32>,
}

/// Lines with equal labels that lie this close at an end, in eV, are one degenerate set there.
const SAME_EV: f64 = 0.02;

/// The labels of one end, lowest energy first. A line that leaves the energy window at this end has
/// its label at the other end; one that leaves it at both has it on the left with an arrow.
pub(crate) fn end_labels(sheet: &Sheet<'_>, side: Side) -> Vec<EndLabel> {
    let (low, high) = window(sheet);
    let mut labels: Vec<EndLabel> = Vec::new();
    for &line in &sheet.drawn {
        let bundle = &sheet.all[line];
        let ids = match side {
            Side::Left => &bundle.ids,
            Side::Right => &bundle.end_ids,
        };
        let here = end_energy(bundle, side);
        let visible = |energy: Option<f64>| energy.is_some_and(|e| low <= e && e <= high);
        let other = end_energy(
            bundle,
            if side == Side::Left {
                Side::Right
            } else {
                Side::Left
            },
        );
        let Some(mut energy) = here else { continue };
        let mut name = if side == Side::Left {
            bundle.start.clone()
        } else {
            bundle.end.clone()
        };
        let mut lettering = Lettering::level(&name);
        if !visible(here) {
            if visible(other) || side == Side::Right {
                continue;
            }
            let arrow = if energy > high { " ↑" } else { " ↓" };
            lettering.runs.extend(Lettering::plain(arrow).runs);
            name.push_str(arrow);
            energy = energy.clamp(low, high);
        }
        let kin = labels
            .iter_mut()
            .find(|label| label.name == name && (label.energy - energy).abs() < SAME_EV);
        match kin {
            Some(label) => {
                if label.irrep.as_ref() != Some(&bundle.irrep) {
                    label.irrep = None;
                }
                label.lines.extend(ids);
            }
            None => labels.push(EndLabel {
                energy,
                name,
                lettering,
                irrep: Some(bundle.irrep.clone()),
                line,
                lines: ids.clone(),
            }),
        }
    }
    labels.sort_by(|a, b| a.energy.total_cmp(&b.energy).then(a.line.cmp(&b.line)));
    labels
}

/// Lowest and highest energy on the axis.
pub(crate) fn window(sheet: &Sheet<'_>) -> (f64, f64) {
    let low = sheet.ranges.first().map_or(0.0, |range| range.0);
    let high = sheet.ranges.last().map_or(0.0, |range| range.1);
    (low, high)
}

fn end_energy(bundle: &Bundle, side: Side) -> Option<f64> {
    match side {
        Side::Left => bundle.energies.first().copied().flatten(),
        Side::Right => bundle.energies.last().copied().flatten(),
    }
}

/// Width of the widest label.
pub(crate) fn widest(labels: &[EndLabel], size: f64) -> f64 {
    labels
        .iter()
        .map(|label| label.lettering.width(size))
        .fold(0.0, f64::max)
}

/// Height of each label with its pictures, lowest energy first.
pub(crate) fn heights(
    sheet: &Sheet<'_>,
    labels: &[EndLabel],
    side: Side,
    gallery: Option<&Gallery>,
) -> Vec<f64> {
    let least = sheet.measure.label_distance();
    (0..labels.len())
        .map(|label| gallery.map_or(least, |all| all.height(sheet, side, label).max(least)))
        .collect()
}

/// Draws the labels of one end, each beside its line; where they would collide they make way and a
/// thin line leads to them.
pub(crate) fn draw(
    canvas: &mut Canvas,
    sheet: &Sheet<'_>,
    labels: &[EndLabel],
    side: Side,
    gallery: Option<&Gallery>,
) {
    let size = sheet.measure.label;
    let widest = widest(labels, size);
    let targets: Vec<f64> = labels
        .iter()
        .rev()
        .map(|label| sheet.scale.y(label.energy))
        .collect();
    let mut heights = heights(sheet, labels, side, gallery);
    heights.reverse();
    // Centres of the text, not base lines, stand at the energies.
    let half = |height: Option<&f64>| {
        let row = (ASCENT + DESCENT) * size;
        0.5 * height.map_or(row, |height| {
            if gallery.is_some() {
                height.max(row)
            } else {
                row
            }
        })
    };
    let places = spread_apart(
        &targets,
        |k| 0.5 * (heights[k] + heights[k + 1]),
        sheet.top + half(heights.first()),
        sheet.bottom - half(heights.last()),
    );
    canvas.xml.open(
        "g",
        &[("class", if side == Side::Left { "start" } else { "end" })],
    );
    let (edge, sign, anchor) = match side {
        Side::Left => (sheet.left, -1.0, Anchor::End),
        Side::Right => (sheet.right, 1.0, Anchor::Start),
    };
    let leader = sheet.measure.leader();
    for (index, ((label, target), place)) in
        labels.iter().rev().zip(&targets).zip(&places).enumerate()
    {
        let (near, far) = (edge + sign * 0.2 * leader, edge + sign * 0.82 * leader);
        let end = if (target - place).abs() > 0.08 * size {
            *place
        } else {
            *target
        };
        canvas.line(
            (near, *target),
            (far, end),
            sheet.colours.soft,
            0.3 * sheet.measure.stroke,
        );
        let colour = if label.irrep.is_some() {
            sheet.colour(&sheet.all[label.line])
        } else {
            sheet.colours.ink
        };
        canvas.text(
            (edge + sign * leader, place + 0.34 * size),
            anchor,
            size,
            colour,
            &label.lettering,
        );
        if let Some(gallery) = gallery {
            gallery.draw(
                canvas,
                sheet,
                (side, labels.len() - 1 - index),
                (edge + sign * (leader + widest), *place),
                colour,
            );
        }
    }
    canvas.xml.close();
}
