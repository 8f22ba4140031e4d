//! Colours and dash patterns.
//!
//! The palette is the project's own: ten hues of which the first five, and all neighbours in the list,
//! stay apart under protanopia, deuteranopia and tritanopia, each at least 4.5:1 against the ground
//! (WCAG 2 AA). Irreps also differ by dash pattern, so that a grey copy loses nothing.

use super::options::Theme;

/// All colours of a figure.
pub(crate) struct Colours {
    pub(crate) ground: &'static str,
    pub(crate) ink: &'static str,
    pub(crate) soft: &'static str,
    pub(crate) faint: &'static str,
    pub(crate) gap: &'static str,
    /// The range of a verdict's angle.
    pub(crate) band: &'static str,
    /// Opacity of the positive phase in pictures of orbitals.
    pub(crate) lobe: &'static str,
    pub(crate) irreps: &'static [&'static str],
}

const LIGHT: Colours = Colours {
    ground: "#ffffff",
    ink: "#1b1f24",
    soft: "#656d76",
    faint: "#d3d8de",
    gap: "#edf1f4",
    band: "#d5e3d8",
    lobe: "0.78",
    irreps: &[
        "#1f4b99", "#b5410f", "#0b6f5c", "#8b2b78", "#3f2e00", "#3d4a57", "#0f76a3", "#a3243b",
        "#4f6f1a", "#5b4bb3",
    ],
};

const DARK: Colours = Colours {
    ground: "#14181d",
    ink: "#eef1f4",
    soft: "#9ba5b0",
    faint: "#3a424b",
    gap: "#20262d",
    band: "#2c4034",
    lobe: "0.78",
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
    band: "#dcdcdc",
    lobe: "0.5",
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

    type Matrix = [[f64; 3]; 3];

    /// Dichromacy: G. M. Machado, M. M. Oliveira, L. A. F. Fernandes, IEEE Trans. Vis. Comput. Graph.
    /// 15, 1291 (2009), severity 1.0, on linear RGB (numbers from memory).
    const VISIONS: [(&str, Matrix); 4] = [
        ("full", [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]]),
        (
            "protanopia",
            [
                [0.152286, 1.052583, -0.204868],
                [0.114503, 0.786281, 0.099216],
                [-0.003882, -0.048116, 1.051998],
            ],
        ),
        (
            "deuteranopia",
            [
                [0.367322, 0.860646, -0.227968],
                [0.280085, 0.672501, 0.047413],
                [-0.011820, 0.042940, 0.968881],
            ],
        ),
        (
            "tritanopia",
            [
                [1.255528, -0.076749, -0.178779],
                [-0.078411, 0.930809, 0.147602],
                [0.004733, 0.691367, 0.303900],
            ],
        ),
    ];

    /// CIE 1976 L*a*b* under D65 of a colour as such a person sees it.
    fn lab(hex: &str, vision: &Matrix) -> [f64; 3] {
        let linear = [1, 3, 5].map(|k| {
            let value = f64::from(u8::from_str_radix(&hex[k..k + 2], 16).unwrap()) / 255.0;
            if value <= 0.04045 {
                value / 12.92
            } else {
                ((value + 0.055) / 1.055).powf(2.4)
            }
        });
        let apply = |m: &Matrix, c: [f64; 3]| {
            m.map(|row| row.iter().zip(&c).map(|(a, b)| a * b).sum::<f64>())
        };
        let seen = apply(vision, linear).map(|c| c.clamp(0.0, 1.0));
        let [x, y, z] = apply(
            &[
                [0.412_456_4, 0.357_576_1, 0.180_437_5],
                [0.212_672_9, 0.715_152_2, 0.072_175],
                [0.019_333_9, 0.119_192, 0.950_304_1],
            ],
            seen,
        );
        let f = |t: f64| {
            if t > 0.008856 {
                t.cbrt()
            } else {
                7.787 * t + 16.0 / 116.0
            }
        };
        let (x, y, z) = (f(x / 0.95047), f(y), f(z / 1.08883));
        [116.0 * y - 16.0, 500.0 * (x - y), 200.0 * (y - z)]
    }

    fn apart(a: &str, b: &str, vision: &Matrix) -> f64 {
        let (a, b) = (lab(a, vision), lab(b, vision));
        (0..3).map(|k| (a[k] - b[k]).powi(2)).sum::<f64>().sqrt()
    }

    #[test]
    fn colours_stay_apart_for_every_eye() {
        for theme in [Theme::Light, Theme::Dark] {
            let irreps = Colours::of(theme).irreps;
            for (name, vision) in &VISIONS {
                for (i, one) in irreps.iter().enumerate() {
                    for (j, other) in irreps[..i].iter().enumerate() {
                        if i < 5 || i == j + 1 {
                            let found = apart(one, other, vision);
                            assert!(found > 10.0, "{theme:?} {name} {i} {j}: {found:.1}");
                        }
                    }
                }
            }
        }
        let greys = Colours::of(Theme::Grey).irreps;
        for pair in greys.windows(2) {
            assert!(apart(pair[0], pair[1], &VISIONS[0].1) > 15.0, "{pair:?}");
        }
    }

    /// Without any colour the dash patterns tell all ten apart: by the length of their longest dash,
    /// or by the share of the line that is drawn.
    #[test]
    fn dashes_tell_irreps_apart_without_colour() {
        let measure = |place: usize| {
            let lengths = dashes(place, 1.0);
            let drawn: f64 = lengths.iter().step_by(2).sum();
            let whole: f64 = lengths.iter().sum();
            let longest = lengths.iter().step_by(2).copied().fold(0.0, f64::max);
            let gap = lengths
                .iter()
                .skip(1)
                .step_by(2)
                .copied()
                .fold(0.0, f64::max);
            if lengths.is_empty() {
                [1.0, 100.0, 0.0, 0.0]
            } else {
                [drawn / whole, longest, gap, lengths.len() as f64]
            }
        };
        for i in 0..DASHES.len() {
            for j in 0..i {
                let (a, b) = (measure(i), measure(j));
                let different = (0..4).any(|k| {
                    let (low, high) = (a[k].min(b[k]), a[k].max(b[k]));
                    high > 1.25 * low
                });
                assert!(different, "{i} and {j}: {a:?} {b:?}");
            }
        }
    }
}
