//! The correlation diagram in characters: braille dots, or plain ASCII.

use crate::document::SweepDocument;
use crate::draw::bundle::{Bundle, abscissae};
use crate::draw::spread::spread;
use crate::draw::ticks::{number, short};
use crate::draw::wording::value_with_unit;
use crate::figure::EnergyUnit;
use crate::figure::scale::{EnergyScale, automatic_window, extents, ranges};

use super::TextOptions;
use super::table::length;

/// Rows of the drawing; more where the labels need them.
const ROWS: usize = 20;
/// Dots in a character cell, across and down.
const ACROSS: usize = 2;
const DOWN: usize = 4;

struct Labels {
    texts: Vec<String>,
    rows: Vec<usize>,
    width: usize,
}

/// The diagram: energies in eV on the left, labels at both ends, occupied lines drawn through, empty
/// ones dotted. Empty where there is nothing to draw.
pub(crate) fn draw(document: &SweepDocument, all: &[Bundle], options: &TextOptions) -> String {
    let xs = abscissae(document);
    let extents = extents(all);
    let (Some(window), true) = (automatic_window(&extents), xs.len() > 1) else {
        return String::new();
    };
    let shown: Vec<&Bundle> = all
        .iter()
        .filter(|b| {
            b.extent()
                .is_some_and(|(low, high)| high >= window.0 && low <= window.1)
        })
        .collect();
    let rows = ROWS.max(shown.len() + 2);
    let parts = ranges(window, true, &extents);
    let scale = EnergyScale::new(&parts, 0.0, (rows * DOWN) as f64, DOWN as f64);
    let starts = labels(&shown, &scale, window, rows, options, true);
    let ends = labels(&shown, &scale, window, rows, options, false);
    let axis = axis_numbers(&scale, rows);
    let axis_width = axis
        .iter()
        .map(|text| length(text))
        .max()
        .unwrap_or_default();
    let taken = axis_width + 2 + starts.width + 1 + 1 + ends.width;
    let columns = options.columns().saturating_sub(taken).clamp(20, 90);

    let mut cells = if options.unicode {
        braille(&shown, &scale, &xs, columns, rows)
    } else {
        ascii(&shown, &scale, &xs, columns, rows)
    };
    let bar = if options.unicode { '│' } else { '|' };
    let mut out = format!("{:>axis_width$}\n", "eV");
    for (row, cell_row) in cells.iter_mut().enumerate() {
        let line: String = cell_row.iter().collect();
        let bar = if left_out(&scale, row) { '~' } else { bar };
        let text = format!(
            "{:>axis_width$} {bar}{:>left$} {line} {}",
            axis[row],
            at_row(&starts, row),
            at_row(&ends, row),
            left = starts.width,
        );
        out.push_str(text.trim_end());
        out.push('\n');
    }
    if let (Some(coordinate), Some(first), Some(last)) =
        (document.coordinates.first(), xs.first(), xs.last())
    {
        let from = options.words(&value_with_unit(*first, coordinate.unit));
        let to = options.words(&value_with_unit(*last, coordinate.unit));
        let indent = axis_width + 2 + starts.width + 1;
        let space = columns.saturating_sub(length(&from) + length(&to));
        out.push_str(&format!(
            "{}{from}{}{to}\n",
            " ".repeat(indent),
            " ".repeat(space)
        ));
    }
    out
}

/// Whether a stretch of the axis is left out at this row.
fn left_out(scale: &EnergyScale, row: usize) -> bool {
    let middle = (row as f64 + 0.5) * DOWN as f64;
    scale
        .segments
        .windows(2)
        .any(|pair| pair[1].bottom <= middle && middle <= pair[0].top + 0.5 * DOWN as f64)
}

fn at_row(labels: &Labels, row: usize) -> &str {
    let place = labels.rows.iter().position(|other| *other == row);
    place.map_or("", |place| labels.texts[place].as_str())
}

fn labels(
    shown: &[&Bundle],
    scale: &EnergyScale,
    window: (f64, f64),
    rows: usize,
    options: &TextOptions,
    start: bool,
) -> Labels {
    let mut found: Vec<(f64, String)> = Vec::new();
    for bundle in shown {
        let energy = if start {
            bundle.energies.first()
        } else {
            bundle.energies.last()
        };
        let Some(energy) = energy.copied().flatten() else {
            continue;
        };
        if energy > window.1 + 1e-9 {
            continue;
        }
        let text = options.label(if start { &bundle.start } else { &bundle.end });
        if !found
            .iter()
            .any(|(other, name)| *name == text && (other - energy).abs() < 0.02)
        {
            found.push((energy, text));
        }
    }
    found.sort_by(|a, b| b.0.total_cmp(&a.0));
    let targets: Vec<f64> = found
        .iter()
        .map(|(e, _)| scale.y(*e) / DOWN as f64 - 0.5)
        .collect();
    let placed = spread(&targets, 1.0, 0.0, (rows - 1) as f64);
    Labels {
        rows: placed
            .iter()
            .map(|row| (row + 0.5).floor().max(0.0) as usize)
            .collect(),
        width: found
            .iter()
            .map(|(_, text)| length(text))
            .max()
            .unwrap_or_default(),
        texts: found.into_iter().map(|(_, text)| text).collect(),
    }
}

/// A number on every row that holds a round energy.
fn axis_numbers(scale: &EnergyScale, rows: usize) -> Vec<String> {
    let mut axis = vec![String::new(); rows];
    for ticks in scale.ticks(EnergyUnit::ElectronVolt, 2.0 * DOWN as f64) {
        for value in &ticks.major {
            let row = (scale.y(*value) / DOWN as f64).floor().max(0.0) as usize;
            let text = number(*value, ticks.decimals).replace('\u{2212}', "-");
            axis[row.min(rows - 1)] = if text.contains('.') {
                text
            } else {
                short(*value, 0)
            };
        }
    }
    axis
}

/// Heights of a line in dots at every dot column; `None` off the drawing.
fn trace(
    bundle: &Bundle,
    scale: &EnergyScale,
    xs: &[f64],
    dots: usize,
    rows: usize,
) -> Vec<Option<(usize, bool)>> {
    let (from, to) = (xs[0], xs[xs.len() - 1]);
    (0..dots)
        .map(|dot| {
            let t = dot as f64 / (dots - 1) as f64;
            let x = from + t * (to - from);
            let y = scale.y(bundle.value(x)?);
            let point = (t * (xs.len() - 1) as f64 + 0.5).floor() as usize;
            let filled = bundle
                .occupations
                .get(point)
                .is_some_and(|electrons| *electrons > 1e-6);
            let inside = y >= 0.0 && y < (rows * DOWN) as f64;
            inside.then_some((y.floor() as usize, filled))
        })
        .collect()
}

fn braille(
    shown: &[&Bundle],
    scale: &EnergyScale,
    xs: &[f64],
    columns: usize,
    rows: usize,
) -> Vec<Vec<char>> {
    // Bits of the eight dots of U+2800, by row and column.
    const BITS: [[u32; ACROSS]; DOWN] = [[0x01, 0x08], [0x02, 0x10], [0x04, 0x20], [0x40, 0x80]];
    let mut bits = vec![vec![0_u32; columns]; rows];
    for bundle in shown {
        let mut before: Option<usize> = None;
        for (dot, found) in trace(bundle, scale, xs, columns * ACROSS, rows)
            .into_iter()
            .enumerate()
        {
            let Some((y, filled)) = found else {
                before = None;
                continue;
            };
            if filled || dot % 4 == 0 {
                // Steep lines are joined.
                let from = before.filter(|_| filled).unwrap_or(y);
                for height in from.min(y)..=from.max(y) {
                    bits[height / DOWN][dot / ACROSS] |= BITS[height % DOWN][dot % ACROSS];
                }
            }
            before = Some(y);
        }
    }
    let character = |bits: u32| match bits {
        0 => ' ',
        bits => char::from_u32(0x2800 + bits).unwrap_or(' '),
    };
    bits.into_iter()
        .map(|row| row.into_iter().map(character).collect())
        .collect()
}

fn ascii(
    shown: &[&Bundle],
    scale: &EnergyScale,
    xs: &[f64],
    columns: usize,
    rows: usize,
) -> Vec<Vec<char>> {
    let mut cells = vec![vec![' '; columns]; rows];
    // Empty lines first: occupied ones lie on top.
    for pass in [false, true] {
        for bundle in shown {
            for (column, found) in trace(bundle, scale, xs, columns, rows)
                .into_iter()
                .enumerate()
            {
                let Some((y, filled)) = found.filter(|(_, filled)| *filled == pass) else {
                    continue;
                };
                if filled || column % 2 == 0 {
                    let low = y % DOWN + 1 == DOWN;
                    cells[y / DOWN][column] = match (filled, low) {
                        (false, _) => '.',
                        (true, true) => '_',
                        (true, false) => '-',
                    };
                }
            }
        }
    }
    cells
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::draw::bundle::bundles;
    use crate::synthetic;

    #[test]
    fn the_drawing_keeps_within_the_window_and_names_both_ends() {
        for seed in 0..40 {
            let document = synthetic::random(seed);
            let all = bundles(&document, true, crate::figure::Follow::Energy);
            for (width, unicode) in [
                (60, true),
                (60, false),
                (80, true),
                (80, false),
                (120, true),
            ] {
                let options = TextOptions {
                    width,
                    unicode,
                    ..TextOptions::default()
                };
                let drawing = draw(&document, &all, &options);
                for line in drawing.lines() {
                    assert!(length(line) <= width, "seed {seed}, {width}: {line}");
                    assert!(unicode || line.is_ascii(), "seed {seed}: {line}");
                }
            }
        }
        let document = synthetic::silicon_difluoride();
        let all = bundles(&document, true, crate::figure::Follow::Energy);
        let ascii = TextOptions {
            unicode: false,
            ..TextOptions::default()
        };
        let drawing = draw(&document, &all, &ascii);
        for label in ["8a1", "3b1", "3pi_u", "1pi_g"] {
            assert!(drawing.contains(label), "{label}:\n{drawing}");
        }
        let drawing = draw(&document, &all, &TextOptions::default());
        assert!(
            drawing.contains("8a₁") && drawing.contains("3πu"),
            "{drawing}"
        );
        assert!(drawing.contains('⠒') || drawing.contains('⣀'), "{drawing}");
    }
}
