//! Sizes for each width of the page, in points (1/72 inch).

use super::options::FigureWidth;

/// Fonts, strokes and panel heights.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Measure {
    /// Width of the page.
    pub(crate) page: f64,
    /// Least height of the page.
    pub(crate) least_height: f64,
    /// Height of the main panel; it grows where labels need more.
    pub(crate) main: f64,
    /// Height of the panel of the sum.
    pub(crate) sum: f64,
    /// Margin of the page.
    pub(crate) pad: f64,
    /// Font sizes: level labels, numbers on axes, axis titles, heading, key.
    pub(crate) label: f64,
    pub(crate) tick: f64,
    pub(crate) title: f64,
    pub(crate) heading: f64,
    pub(crate) key: f64,
    /// Stroke width of a filled line.
    pub(crate) stroke: f64,
}

/// Points in one millimetre.
const POINTS_PER_MM: f64 = 72.0 / 25.4;

/// Smallest font of any figure, in points.
#[cfg(test)]
pub(crate) const SMALLEST_FONT: f64 = 6.5;

impl Measure {
    pub(crate) fn of(width: FigureWidth) -> Self {
        match width {
            FigureWidth::Column => Self {
                page: 84.0 * POINTS_PER_MM,
                least_height: 0.0,
                main: 206.0,
                sum: 46.0,
                pad: 4.0,
                label: 8.0,
                tick: 7.0,
                title: 7.5,
                heading: 9.0,
                key: 6.5,
                stroke: 1.25,
            },
            FigureWidth::Page => Self {
                page: 174.0 * POINTS_PER_MM,
                least_height: 0.0,
                main: 320.0,
                sum: 70.0,
                pad: 6.0,
                label: 9.5,
                tick: 8.5,
                title: 9.0,
                heading: 11.0,
                key: 8.0,
                stroke: 1.5,
            },
            FigureWidth::Slide => Self {
                page: 960.0,
                least_height: 540.0,
                main: 318.0,
                sum: 70.0,
                pad: 12.0,
                label: 17.0,
                tick: 14.0,
                title: 15.0,
                heading: 20.0,
                key: 13.0,
                stroke: 2.1,
            },
        }
    }

    /// Distance from the base line of one label to the next.
    pub(crate) fn label_distance(&self) -> f64 {
        1.2 * self.label
    }

    /// Length of the lines that lead from a curve's end to its label.
    pub(crate) fn leader(&self) -> f64 {
        1.1 * self.label
    }

    /// Stroke width of a line that holds so many electrons per orbital.
    pub(crate) fn line_width(&self, electrons: f64) -> f64 {
        if electrons > 1.99 {
            self.stroke
        } else if electrons > 1e-6 {
            0.8 * self.stroke
        } else {
            0.5 * self.stroke
        }
    }

    /// Distance between the lines of a degenerate set.
    pub(crate) fn set_distance(&self) -> f64 {
        2.1 * self.stroke
    }

    /// A length of the page as an SVG width or height.
    pub(crate) fn in_millimetres(points: f64) -> String {
        format!("{}mm", super::xml::length(points / POINTS_PER_MM))
    }
}
