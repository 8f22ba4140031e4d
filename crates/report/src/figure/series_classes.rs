//! Classes of energy in the picture of a series: colours and fill patterns.

use super::theme::Colours;
use super::xml::{Writer, length};

/// A class of the energy relative to the symmetric form.
pub(crate) struct Class {
    /// Upper bound, eV.
    below: f64,
    colour: &'static str,
    /// Name of its pattern; empty for none.
    pattern: &'static str,
    pub(crate) words: &'static str,
}

/// From the darkest valley to the lightest hill, as in a map.
pub(crate) const CLASSES: [Class; 5] = [
    Class {
        below: -1.0,
        colour: "#1f4b99",
        pattern: "dense",
        words: "below \u{2212}1",
    },
    Class {
        below: -0.3,
        colour: "#5b86c9",
        pattern: "lines",
        words: "\u{2212}1 to \u{2212}0.3",
    },
    Class {
        below: -0.025,
        colour: "#a9c4ea",
        pattern: "sparse",
        words: "\u{2212}0.3 to \u{2212}0.025",
    },
    Class {
        below: 0.025,
        colour: "#e6eaee",
        pattern: "",
        words: "flat",
    },
    Class {
        below: f64::INFINITY,
        colour: "#f2c9a8",
        pattern: "dots",
        words: "above 0.025",
    },
];

/// Place of an energy's class.
pub(crate) fn class_of(energy: f64) -> usize {
    let place = CLASSES.iter().position(|class| energy <= class.below);
    place.unwrap_or(CLASSES.len() - 1)
}

/// A box (left, top, width, height) in the colour and pattern of a class.
pub(crate) fn paint(xml: &mut Writer, place: [f64; 4], class: &Class, prefix: &str) {
    let [x, y, width, height] = place.map(length);
    let pattern = format!("url(#{prefix}-{})", class.pattern);
    let fills = [class.colour, &pattern];
    let shown = if class.pattern.is_empty() { 1 } else { 2 };
    for fill in &fills[..shown] {
        xml.empty(
            "rect",
            &[
                ("x", &x),
                ("y", &y),
                ("width", &width),
                ("height", &height),
                ("fill", fill),
            ],
        );
    }
}

/// The definitions of the patterns.
pub(crate) fn patterns(xml: &mut Writer, colours: &Colours, prefix: &str) {
    let stripes = [
        ("dense", 1.6, "#ffffff", "rotate(45)"),
        ("lines", 2.8, "#ffffff", "rotate(45)"),
        ("sparse", 4.6, "#ffffff", "rotate(45)"),
        ("undecided", 3.2, colours.ink, "rotate(135)"),
    ];
    for (name, distance, colour, turn) in stripes {
        let distance = length(distance);
        xml.open(
            "pattern",
            &[
                ("id", &format!("{prefix}-{name}")),
                ("width", &distance),
                ("height", &distance),
                ("patternUnits", "userSpaceOnUse"),
                ("patternTransform", turn),
            ],
        );
        xml.empty(
            "line",
            &[
                ("x1", "0"),
                ("y1", "0"),
                ("x2", "0"),
                ("y2", &distance),
                ("stroke", colour),
                ("stroke-width", "0.7"),
            ],
        );
        xml.close();
    }
    xml.open(
        "pattern",
        &[
            ("id", &format!("{prefix}-dots")),
            ("width", "4"),
            ("height", "4"),
            ("patternUnits", "userSpaceOnUse"),
        ],
    );
    xml.empty(
        "circle",
        &[("cx", "2"), ("cy", "2"), ("r", "0.6"), ("fill", "#7a4a20")],
    );
    xml.close();
}
