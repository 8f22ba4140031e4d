//! Colours and dash patterns.
//!
//! The palette is the project's own: ten hues whose lightness alternates so that neighbours in the
//! list stay apart under protanopia, deuteranopia and tritanopia, each at least 4.5:1 against the
//! ground (WCAG 2 AA). Irreps also differ by dash pattern, so that a grey copy loses nothing.

use super::options::Theme;

/// All colours of a figure.
pub(crate) struct Colours {
    pub(crate) ground: &'static str,
    pub(crate) ink: &'static str,
    pub(crate) soft: &'static str,
    pub(crate) faint: &'static str,
    pub(crate) gap: &'static str,
    pub(crate) irreps: &'static [&'static str],
}

const LIGHT: Colours = Colours {
    ground: "#ffffff",
    ink: "#1b1f24",
    soft: "#656d76",
    faint: "#d3d8de",
    gap: "#edf1f4",
    irreps: &[
        "#1f4b99", "#b5410f", "#0b6f5c", "#8b2b78", "#7a5c00", "#3d4a57", "#0f76a3", "#a3243b",
        "#4f6f1a", "#5b4bb3",
    ],
};

const DARK: Colours = Colours {
    ground: "#14181d",
    ink: "#eef1f4",
    soft: "#9ba5b0",
    faint: "#3a424b",
    gap: "#20262d",
    irreps: &[
        "#8fb4f0", "#f2a274", "#6fd0b9", "#dd9ad0", "#d9be62", "#b4c0cc", "#7cc7ea", "#f093a0",
        "#b3cf7b", "#b9adf2",
    ],
};

const GREY: Colours = Colours {
    ground: "#ffffff",
    ink: "#111111",
    soft: "#5f5f5f",
    faint: "#d0d0d0",
    gap: "#efefef",
    irreps: &["#111111", "#555555", "#2b2b2b", "#6b6b6b"],
};

/// Dash lengths in stroke widths of an occupied line; the first is unbroken.
const DASHES: [&[f64]; 10] = [
    &[],
    &[6.0, 1.6],
    &[2.4, 1.4],
    &[6.0, 1.4, 1.3, 1.4],
    &[1.2, 1.3],
    &[9.0, 1.4, 1.3, 1.4, 1.3, 1.4],
    &[10.0, 3.2],
    &[2.4, 3.2],
    &[4.0, 1.4, 2.0, 1.4],
    &[1.2, 2.8],
];

impl Colours {
    pub(crate) fn of(theme: Theme) -> &'static Self {
        match theme {
            Theme::Light => &LIGHT,
            Theme::Dark => &DARK,
            Theme::Grey => &GREY,
        }
    }

    /// Colour of the irrep at this place in the list of irreps.
    pub(crate) fn irrep(&self, place: usize) -> &'static str {
        self.irreps[place % self.irreps.len()]
    }
}

/// Dash lengths of the irrep at this place, for a stroke of this width.
pub(crate) fn dashes(place: usize, width: f64) -> Vec<f64> {
    DASHES[place % DASHES.len()]
        .iter()
        .map(|length| length * width)
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn luminance(hex: &str) -> f64 {
        let channel = |k: usize| {
            let value = f64::from(u8::from_str_radix(&hex[k..k + 2], 16).unwrap()) / 255.0;
            if value <= 0.04045 {
                value / 12.92
            } else {
                ((value + 0.055) / 1.055).powf(2.4)
            }
        };
        0.2126 * channel(1) + 0.7152 * channel(3) + 0.0722 * channel(5)
    }

    fn contrast(a: &str, b: &str) -> f64 {
        let (a, b) = (luminance(a), luminance(b));
        (a.max(b) + 0.05) / (a.min(b) + 0.05)
    }

    #[test]
    fn every_colour_of_text_is_legible() {
        for theme in [Theme::Light, Theme::Dark, Theme::Grey] {
            let colours = Colours::of(theme);
            for colour in colours.irreps.iter().chain([&colours.ink, &colours.soft]) {
                let ratio = contrast(colour, colours.ground);
                assert!(ratio >= 4.5, "{theme:?} {colour}: {ratio:.2}");
            }
        }
    }
}
