//! The drawing surface: SVG elements, and a record of where text stands.

use std::fmt::Write;

use crate::draw::curve::Piece;
use crate::lettering::{Lettering, SMALL, Shift};

use super::key::Mark;
use super::scale::Segment;
use super::xml::{Writer, escape, length};

/// Which end of a text is at its position.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Anchor {
    Start,
    Middle,
    End,
}

/// The rectangle that a text or a picture takes up.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct TextBox {
    pub(crate) left: f64,
    pub(crate) top: f64,
    pub(crate) right: f64,
    pub(crate) bottom: f64,
    pub(crate) text: String,
}

/// Height of a row of text above and below its base line, in font sizes, with sub- and superscripts.
pub(crate) const ASCENT: f64 = 0.86;
pub(crate) const DESCENT: f64 = 0.30;

/// Where the curves of a diagram stand on its page.
#[derive(Clone, Debug)]
pub(crate) struct Area {
    /// Left and right end of the curves.
    pub(crate) across: (f64, f64),
    /// Top of the main panel and bottom of the lowest one.
    pub(crate) down: (f64, f64),
    /// The energy axis.
    pub(crate) energies: Vec<Segment>,
    /// Lines that are drawn: their ids, one list for each drawn line.
    pub(crate) lines: Vec<Vec<u32>>,
}

/// A figure under construction; lengths in points.
#[derive(Default)]
pub(crate) struct Canvas {
    pub(crate) xml: Writer,
    pub(crate) boxes: Vec<TextBox>,
    /// Where the curves stand on the page.
    pub(crate) area: Option<Area>,
    /// Entries of the key for what has been drawn.
    pub(crate) key: Vec<(Mark, String)>,
    /// Height of the finished page, for the checks on where text stands.
    #[cfg_attr(not(test), allow(dead_code))]
    pub(crate) height: f64,
}

impl Canvas {
    /// Text with its base line at `y`.
    pub(crate) fn text(
        &mut self,
        (x, y): (f64, f64),
        anchor: Anchor,
        size: f64,
        colour: &str,
        lettering: &Lettering,
    ) {
        self.styled_text((x, y), anchor, size, colour, lettering, &[]);
    }

    /// Text with further attributes.
    pub(crate) fn styled_text(
        &mut self,
        (x, y): (f64, f64),
        anchor: Anchor,
        size: f64,
        colour: &str,
        lettering: &Lettering,
        more: &[(&str, &str)],
    ) {
        let width = lettering.width(size);
        let left = match anchor {
            Anchor::Start => x,
            Anchor::Middle => x - 0.5 * width,
            Anchor::End => x - width,
        };
        self.boxes.push(TextBox {
            left,
            top: y - ASCENT * size,
            right: left + width,
            bottom: y + DESCENT * size,
            text: lettering.unicode(),
        });
        let (x, y, font) = (length(x), length(y), length(size));
        let mut attributes = vec![
            ("x", x.as_str()),
            ("y", y.as_str()),
            ("font-size", font.as_str()),
            ("fill", colour),
            ("text-anchor", anchor_name(anchor)),
        ];
        attributes.extend(more);
        self.xml
            .with_markup("text", &attributes, &markup(lettering, size));
    }

    /// Text that reads upwards, centred on `(x, y)`, `x` being its base line.
    pub(crate) fn upward_text(&mut self, (x, y): (f64, f64), size: f64, colour: &str, text: &str) {
        let lettering = Lettering::plain(text);
        let half = 0.5 * lettering.width(size);
        self.boxes.push(TextBox {
            left: x - ASCENT * size,
            top: y - half,
            right: x + DESCENT * size,
            bottom: y + half,
            text: text.to_owned(),
        });
        let turn = format!("translate({} {}) rotate(-90)", length(x), length(y));
        self.xml.with_markup(
            "text",
            &[
                ("transform", &turn),
                ("font-size", &length(size)),
                ("fill", colour),
                ("text-anchor", "middle"),
            ],
            &markup(&lettering, size),
        );
    }

    /// A straight line.
    pub(crate) fn line(&mut self, from: (f64, f64), to: (f64, f64), colour: &str, width: f64) {
        let path = format!(
            "M{} {}L{} {}",
            length(from.0),
            length(from.1),
            length(to.0),
            length(to.1)
        );
        self.stroke(&path, colour, width, &[]);
    }

    /// An outline without filling.
    pub(crate) fn stroke(&mut self, path: &str, colour: &str, width: f64, dashes: &[f64]) {
        let width = length(width);
        let dashes: Vec<String> = dashes.iter().map(|dash| length(*dash)).collect();
        let dashes = dashes.join(" ");
        let mut attributes = vec![
            ("d", path),
            ("fill", "none"),
            ("stroke", colour),
            ("stroke-width", &width),
        ];
        if !dashes.is_empty() {
            attributes.push(("stroke-dasharray", &dashes));
        }
        self.xml.empty("path", &attributes);
    }

    /// A filled area.
    pub(crate) fn area(&mut self, path: &str, colour: &str) {
        self.xml.empty("path", &[("d", path), ("fill", colour)]);
    }

    /// A disc with a rim.
    pub(crate) fn disc(&mut self, (x, y): (f64, f64), radius: f64, fill: &str, rim: (&str, f64)) {
        self.xml.empty(
            "circle",
            &[
                ("cx", &length(x)),
                ("cy", &length(y)),
                ("r", &length(radius)),
                ("fill", fill),
                ("stroke", rim.0),
                ("stroke-width", &length(rim.1)),
            ],
        );
    }

    /// The electrons of one orbital, centred on a point: a disc each; a part of an electron is an
    /// open disc.
    pub(crate) fn electrons(
        &mut self,
        (x, y): (f64, f64),
        electrons: f64,
        radius: f64,
        colour: &str,
        ground: &str,
    ) {
        let whole = (electrons + 1e-6).floor();
        let part = electrons - whole > 1e-6;
        let count = whole as usize + usize::from(part);
        for k in 0..count {
            let place = x + (k as f64 - 0.5 * (count as f64 - 1.0)) * 2.5 * radius;
            if part && k + 1 == count {
                self.disc((place, y), radius * 0.9, ground, (colour, radius * 0.45));
            } else {
                self.disc((place, y), radius, colour, (ground, radius * 0.5));
            }
        }
    }

    /// Two lines of equal height at the ends of a short upright line: an avoided crossing.
    pub(crate) fn avoided(
        &mut self,
        x: f64,
        (top, bottom): (f64, f64),
        half: f64,
        colour: &str,
        width: f64,
    ) {
        let path = format!(
            "M{0} {2}H{1}M{0} {3}H{1}M{4} {2}V{3}",
            length(x - half),
            length(x + half),
            length(top),
            length(bottom),
            length(x)
        );
        self.stroke(&path, colour, width, &[]);
    }
}

fn anchor_name(anchor: Anchor) -> &'static str {
    match anchor {
        Anchor::Start => "start",
        Anchor::Middle => "middle",
        Anchor::End => "end",
    }
}

/// A path through Bézier pieces given in page coordinates.
pub(crate) fn path(pieces: &[Piece]) -> String {
    let mut text = String::new();
    for (index, [start, a, b, end]) in pieces.iter().enumerate() {
        if index == 0 {
            let _ = write!(text, "M{} {}", length(start.0), length(start.1));
        }
        let _ = write!(
            text,
            "C{} {} {} {} {} {}",
            length(a.0),
            length(a.1),
            length(b.0),
            length(b.1),
            length(end.0),
            length(end.1)
        );
    }
    text
}

/// Shifted runs as `tspan`s; `dy` rather than `baseline-shift`, which some viewers ignore.
fn markup(lettering: &Lettering, size: f64) -> String {
    let mut text = String::new();
    let mut height = 0.0;
    let mut on_line = true;
    let mut below = 0.0;
    for run in &lettering.runs {
        let wanted = match run.shift {
            Shift::None => 0.0,
            Shift::Sub => 0.18 * size,
            Shift::Super if run.is_prime() => -0.1 * size,
            Shift::Super => -0.36 * size,
        };
        let content = escape(&run.text);
        if run.shift == Shift::None && on_line {
            text.push_str(&content);
        } else {
            let back = if run.shift == Shift::Super {
                below
            } else {
                0.0
            };
            let font = run.scale();
            let _ = write!(text, "<tspan dy=\"{}\"", length(wanted - height));
            if back > 0.0 {
                let _ = write!(text, " dx=\"{}\"", length(-back));
            }
            let _ = write!(
                text,
                " font-size=\"{}\">{content}</tspan>",
                length(font * size)
            );
        }
        below = if run.shift == Shift::Sub {
            Lettering::plain(run.text.clone()).width(size * SMALL)
        } else {
            0.0
        };
        height = wanted;
        on_line = run.shift == Shift::None;
    }
    text
}
