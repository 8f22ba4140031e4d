//! The key below a figure: what the marks mean.

use crate::lettering::Lettering;

use super::canvas::{ASCENT, Anchor, Canvas};
use super::measure::Measure;
use super::theme::Colours;
use super::xml::length;

/// A mark of the key.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Mark {
    Electrons,
    Occupied,
    Empty,
    Gap,
    Crossing,
    Avoided,
    /// The range of a shape verdict's angle.
    Band,
    /// Both phases of an orbital.
    Orbital,
    /// A nucleus in the plane and one off it.
    Nuclei,
    /// The plane of the pictures without a letter.
    Plane,
    /// The plane of the pictures with this letter.
    Letter(usize),
}

/// Lays the entries out in rows from `left` to `right`, starting below `top`; returns the page
/// height below them.
pub(crate) fn draw(
    canvas: &mut Canvas,
    (measure, colours): (&Measure, &Colours),
    entries: &[(Mark, String)],
    (left, right): (f64, f64),
    top: f64,
) -> f64 {
    if entries.is_empty() {
        return top;
    }
    let size = measure.key;
    let mut x = left;
    let mut base = top + 1.5 * size;
    canvas.xml.open("g", &[("class", "key")]);
    for (kind, words) in entries {
        let text = Lettering::words(words);
        let sign = 2.0 * size;
        let width = sign + 0.4 * size + text.width(size);
        if x > left && x + width > right {
            x = left;
            base += 1.4 * size;
        }
        mark(
            canvas,
            measure,
            colours,
            *kind,
            (x, base - 0.32 * size),
            sign,
        );
        canvas.text(
            (x + sign + 0.4 * size, base),
            Anchor::Start,
            size,
            colours.soft,
            &text,
        );
        x += width + 1.3 * size;
    }
    canvas.xml.close();
    base + (1.0 - ASCENT + 0.3) * size
}

fn mark(
    canvas: &mut Canvas,
    measure: &Measure,
    colours: &Colours,
    kind: Mark,
    (x, y): (f64, f64),
    width: f64,
) {
    let middle = x + 0.5 * width;
    let ink = colours.ink;
    let thin = 0.5 * measure.stroke;
    match kind {
        Mark::Electrons => {
            canvas.electrons((middle, y), 2.0, 1.15 * measure.stroke, ink, colours.ground)
        }
        Mark::Occupied => canvas.line((x, y), (x + width, y), ink, measure.line_width(2.0)),
        Mark::Empty => canvas.line((x, y), (x + width, y), ink, measure.line_width(0.0)),
        Mark::Gap => {
            let (high, low) = (y - 0.4 * measure.key, y + 0.4 * measure.key);
            let path = format!(
                "M{} {}H{}V{}H{0}Z",
                length(x),
                length(high),
                length(x + width),
                length(low)
            );
            canvas.area(&path, colours.gap);
            canvas.stroke(&path, colours.faint, 0.3 * measure.stroke, &[]);
        }
        Mark::Band => super::sum::band(
            canvas,
            measure,
            colours,
            ((x + 0.2 * width, x + 0.8 * width), Some(middle)),
            (y - 0.45 * measure.key, y + 0.45 * measure.key),
        ),
        Mark::Orbital => {
            let radius = 0.36 * measure.key;
            let at = |sign: f64| (middle + sign * 1.05 * radius, y);
            canvas.disc(at(-1.0), radius, colours.soft, (colours.soft, thin));
            canvas.disc(at(1.0), radius, "none", (colours.soft, thin));
        }
        Mark::Nuclei => {
            super::pictures::nucleus(
                canvas,
                measure,
                colours,
                (middle - 0.4 * measure.key, y),
                true,
            );
            super::pictures::nucleus(
                canvas,
                measure,
                colours,
                (middle + 0.4 * measure.key, y),
                false,
            );
        }
        Mark::Plane => {
            let (half, tilt) = (0.28 * measure.key, 0.35 * measure.key);
            let path = format!(
                "M{} {}H{}L{} {}H{}Z",
                length(x + 0.2 * width),
                length(y + half),
                length(x + 0.8 * width - tilt),
                length(x + 0.8 * width),
                length(y - half),
                length(x + 0.2 * width + tilt)
            );
            canvas.stroke(&path, colours.soft, thin, &[]);
        }
        Mark::Letter(place) => {
            if let Some(letter) = super::gallery::letter_of(place) {
                canvas.text(
                    (middle, y + 0.32 * measure.key),
                    Anchor::Middle,
                    measure.key,
                    colours.soft,
                    &Lettering::plain(letter),
                );
            }
        }
        Mark::Crossing => canvas.disc((middle, y), 1.9 * measure.stroke, "none", (ink, thin)),
        Mark::Avoided => {
            let half = 0.4 * measure.key;
            canvas.avoided(
                middle,
                (y - half, y + half),
                1.5 * measure.stroke,
                ink,
                thin,
            );
        }
    }
}
