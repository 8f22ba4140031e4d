//! Electrons on the occupied lines.

use crate::draw::bundle::Bundle;

use super::canvas::Canvas;
use super::options::{ElectronMarks, FigureError};
use super::panel::nearest_point;
use super::sheet::Sheet;

/// Marks of one line: a row of electrons for each orbital of its set.
struct Marks<'a> {
    bundle: &'a Bundle,
    electrons: f64,
    height: f64,
}

/// Draws electrons on the occupied lines, those of crowded lines side by side and clear of the marks
/// of crossings. Returns the coordinate whose occupation they show.
pub(crate) fn draw(
    canvas: &mut Canvas,
    sheet: &Sheet<'_>,
    crossings: &[(f64, f64)],
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
    let mut marks: Vec<Marks<'_>> = sheet
        .lines()
        .filter(|bundle| bundle.occupations[point] > 1e-6)
        .filter_map(|bundle| {
            let energy = bundle.energies[point].filter(|energy| sheet.scale.shows(*energy))?;
            Some(Marks {
                bundle,
                electrons: bundle.occupations[point],
                height: sheet.scale.y(energy),
            })
        })
        .collect();
    marks.sort_by(|a, b| a.height.total_cmp(&b.height));
    let radius = 1.15 * sheet.measure.stroke;
    let here = sheet.x(sheet.xs[point]);
    let mut taken: Vec<(f64, f64)> = crossings.to_vec();
    canvas.xml.open("g", &[("class", "electrons")]);
    for line in &marks {
        let places = free_places(sheet, line, here, radius, &taken);
        for &place in &places {
            let colour = sheet.colour(line.bundle);
            let ground = sheet.colours.ground;
            canvas.electrons(place, line.electrons, radius, colour, ground);
        }
        taken.extend(places);
    }
    canvas.xml.close();
    Ok((!marks.is_empty()).then_some(sheet.xs[point]))
}

/// Where the rows of a line's electrons stand: as near to the chosen coordinate as others leave room.
fn free_places(
    sheet: &Sheet<'_>,
    line: &Marks<'_>,
    here: f64,
    radius: f64,
    taken: &[(f64, f64)],
) -> Vec<(f64, f64)> {
    const STEPS: [f64; 9] = [0.0, 1.0, -1.0, 2.0, -2.0, 3.0, -3.0, 4.0, -4.0];
    let width = 5.8 * radius;
    let offsets = sheet.offsets(line.bundle);
    let middle = 0.5 * (offsets.len() as f64 - 1.0);
    let (from, to) = sheet.span();
    let at = |shift: f64| -> Option<Vec<(f64, f64)>> {
        offsets
            .iter()
            .enumerate()
            .map(|(k, offset)| {
                let x = here + (shift + k as f64 - middle) * width;
                let inside = sheet.left + radius <= x && x <= sheet.right - radius;
                let share = (x - sheet.left) / (sheet.right - sheet.left);
                let energy = line.bundle.value(from + share * (to - from));
                let energy = energy.filter(|energy| inside && sheet.scale.shows(*energy))?;
                Some((x, sheet.scale.y(energy) + offset))
            })
            .collect()
    };
    let free = |places: &Vec<(f64, f64)>| {
        places.iter().all(|(x, y)| {
            taken
                .iter()
                .all(|(a, b)| (x - a).abs() > 0.95 * width || (y - b).abs() > 2.4 * radius)
        })
    };
    STEPS
        .iter()
        .filter_map(|step| at(*step))
        .find(free)
        .or_else(|| at(0.0))
        .unwrap_or_else(|| vec![(here, line.height)])
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
