//! The pictures of both ends: which are shown, how large, and in which planes.

use super::canvas::{Anchor, Canvas};
use super::key::Mark;
use super::labels::{EndLabel, Side};
use super::options::FigureWidth;
use super::pictures::{LEVEL, Shape};
use super::sheet::Sheet;
use crate::lettering::Lettering;

/// All pictures of a figure.
pub(crate) struct Gallery {
    start: Wing,
    end: Wing,
    /// Points per Å, the same everywhere.
    scale: f64,
    /// Planes, the commonest first.
    planes: Vec<String>,
}

/// The pictures of one end.
struct Wing {
    /// For each label the pictures of its orbitals, that of the first line nearest to the label.
    rows: Vec<Vec<Shape>>,
    /// For each column the reach to the left and to the right of the molecule's middle, Å.
    columns: Vec<(f64, f64)>,
}

/// Distances in font sizes of the labels.
const BESIDE: f64 = 0.45;
const BETWEEN: f64 = 0.3;

impl Gallery {
    /// The pictures that belong to the labels; `None` where none are asked for or known.
    pub(crate) fn new(sheet: &Sheet<'_>, starts: &[EndLabel], ends: &[EndLabel]) -> Option<Self> {
        let pictures = sheet.options.pictures.as_ref()?;
        // A column of a journal has room for one orbital of a degenerate set.
        let most = match sheet.options.width {
            FigureWidth::Column => 1,
            FigureWidth::Page | FigureWidth::Slide => 3,
        };
        let wing = |labels: &[EndLabel], all: &[super::pictures::OrbitalPicture]| {
            let rows: Vec<Vec<Shape>> = labels
                .iter()
                .map(|label| {
                    label
                        .lines
                        .iter()
                        .filter_map(|id| all.iter().find(|picture| picture.line == *id))
                        .take(most)
                        .map(Shape::new)
                        .collect()
                })
                .collect();
            Wing {
                columns: columns(&rows),
                rows,
            }
        };
        let (start, end) = (wing(starts, &pictures.start), wing(ends, &pictures.end));
        let size = sheet.measure.label;
        let shapes = || start.rows.iter().chain(&end.rows).flatten();
        let widest = shapes().map(Shape::width).fold(0.0, f64::max);
        let highest = shapes().map(Shape::height).fold(0.0, f64::max);
        if widest <= 0.0 {
            return None;
        }
        let mut scale = (3.5 * size / widest).min(2.9 * size / highest);
        // A crowd of labels gets smaller pictures rather than a page without end.
        let room = 1.3 * sheet.measure.main;
        for _ in 0..8 {
            let taken = [&start, &end].map(|wing| {
                let rows = wing.rows.iter().map(|row| row_height(row, scale, size));
                rows.map(|height| height.max(sheet.measure.label_distance()))
                    .sum::<f64>()
            });
            if taken[0].max(taken[1]) <= room || scale * highest < 1.5 * size {
                break;
            }
            scale *= 0.92;
        }
        let planes = planes(shapes());
        Some(Self {
            start,
            end,
            scale,
            planes,
        })
    }

    fn wing(&self, side: Side) -> &Wing {
        match side {
            Side::Left => &self.start,
            Side::Right => &self.end,
        }
    }

    /// Room for the letter that names a plane.
    fn letter(&self, sheet: &Sheet<'_>) -> f64 {
        if self.planes.len() > 1 {
            0.75 * sheet.measure.key
        } else {
            0.0
        }
    }

    /// Width of all pictures of one end with their distance from the labels.
    pub(crate) fn width(&self, sheet: &Sheet<'_>, side: Side) -> f64 {
        let size = sheet.measure.label;
        let columns = &self.wing(side).columns;
        let own: f64 = columns
            .iter()
            .map(|(left, right)| (left + right) * self.scale + self.letter(sheet))
            .sum();
        own + BESIDE * size + BETWEEN * size * columns.len().saturating_sub(1) as f64
    }

    /// Height of a label's pictures, with some room; zero where it has none.
    pub(crate) fn height(&self, sheet: &Sheet<'_>, side: Side, label: usize) -> f64 {
        let row = &self.wing(side).rows[label];
        row_height(row, self.scale, sheet.measure.label)
    }

    /// Draws a label's pictures outwards from `x`, centred on `y`.
    pub(crate) fn draw(
        &self,
        canvas: &mut Canvas,
        sheet: &Sheet<'_>,
        (side, label): (Side, usize),
        (x, y): (f64, f64),
        colour: &str,
    ) {
        let size = sheet.measure.label;
        let letter = self.letter(sheet);
        let wing = self.wing(side);
        let sign = if side == Side::Left { -1.0 } else { 1.0 };
        let mut near = x + sign * BESIDE * size;
        for (shape, &(left, right)) in wing.rows[label].iter().zip(&wing.columns) {
            let inner = if side == Side::Left { right } else { left };
            let middle = near + sign * inner * self.scale;
            let lifted = y + 0.5 * (shape.extent[2] + shape.extent[3]) * self.scale;
            shape.draw(canvas, sheet, (middle, lifted), self.scale, colour);
            let far = near + sign * (left + right) * self.scale;
            let place = self.planes.iter().position(|plane| *plane == shape.plane);
            if let Some(name) = place.and_then(letter_of) {
                let anchor = if side == Side::Left {
                    Anchor::End
                } else {
                    Anchor::Start
                };
                canvas.text(
                    (far + sign * 0.1 * letter, y + 0.34 * sheet.measure.key),
                    anchor,
                    sheet.measure.key,
                    sheet.colours.soft,
                    &Lettering::plain(name),
                );
            }
            near = far + sign * (letter + BETWEEN * size);
        }
    }

    /// What the pictures show, for the key.
    pub(crate) fn entries(&self) -> Vec<(Mark, String)> {
        let mut entries = vec![(
            Mark::Orbital,
            format!("ψ = ±{LEVEL} bohr^{{\u{2212}3/2}}, filled: positive"),
        )];
        let mut shapes = self.start.rows.iter().chain(&self.end.rows).flatten();
        if shapes.any(Shape::has_outsiders) {
            entries.push((Mark::Nuclei, "nucleus in the plane, off it".to_owned()));
        }
        for (place, plane) in self.planes.iter().enumerate() {
            let mark = letter_of(place).map_or(Mark::Plane, |_| Mark::Letter(place));
            entries.push((mark, format!("cut: {plane}")));
        }
        entries
    }
}

/// The letter of a plane; the commonest plane has none.
pub(crate) fn letter_of(place: usize) -> Option<String> {
    let letter = u8::try_from(place.checked_sub(1)?).ok()?;
    Some(char::from(b'a' + letter.min(25)).to_string())
}

fn row_height(row: &[Shape], scale: f64, size: f64) -> f64 {
    let highest = row.iter().map(Shape::height).fold(0.0, f64::max);
    if highest > 0.0 {
        highest * scale + BETWEEN * size
    } else {
        0.0
    }
}

fn columns(rows: &[Vec<Shape>]) -> Vec<(f64, f64)> {
    let count = rows.iter().map(Vec::len).max().unwrap_or_default();
    (0..count)
        .map(|column| {
            let shapes = rows.iter().filter_map(|row| row.get(column));
            shapes.fold((0.0, 0.0), |(left, right), shape| {
                (
                    f64::max(left, -shape.extent[0]),
                    f64::max(right, shape.extent[1]),
                )
            })
        })
        .collect()
}

/// The planes of the pictures, the commonest first, the others in the order of the labels.
fn planes<'a>(shapes: impl Iterator<Item = &'a Shape>) -> Vec<String> {
    let mut counted: Vec<(String, usize)> = Vec::new();
    for shape in shapes {
        match counted.iter_mut().find(|(plane, _)| *plane == shape.plane) {
            Some((_, count)) => *count += 1,
            None => counted.push((shape.plane.clone(), 1)),
        }
    }
    counted.sort_by_key(|(_, count)| std::cmp::Reverse(*count));
    counted.into_iter().map(|(plane, _)| plane).collect()
}
