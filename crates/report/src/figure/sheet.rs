//! The sheet: everything that the parts of a correlation diagram have in common.

use crate::document::SweepDocument;
use crate::draw::bundle::{Bundle, abscissae, bundles};
use crate::draw::curve::Piece;
use crate::draw::nearest::nearest;

use super::measure::Measure;
use super::options::{FigureError, FigureOptions, Numbering};
use super::scale::{EnergyScale, automatic_window, check_window, extents, ranges};
use super::theme::Colours;

/// One correlation diagram, laid out.
pub(crate) struct Sheet<'a> {
    pub(crate) document: &'a SweepDocument,
    pub(crate) options: &'a FigureOptions,
    pub(crate) measure: Measure,
    pub(crate) colours: &'static Colours,
    /// Coordinate of every point.
    pub(crate) xs: Vec<f64>,
    /// All lines of the document.
    pub(crate) all: Vec<Bundle>,
    /// Places in `all` of the lines that are drawn.
    pub(crate) drawn: Vec<usize>,
    /// Irreps of the document in Mulliken's order: colours and dashes go by it.
    irreps: Vec<String>,
    pub(crate) ranges: Vec<(f64, f64)>,
    pub(crate) scale: EnergyScale,
    /// Left and right end of the curves on the page.
    pub(crate) left: f64,
    pub(crate) right: f64,
    /// Height of the main panel on the page.
    pub(crate) top: f64,
    pub(crate) bottom: f64,
    /// Where the energy axis stands.
    pub(crate) axis: f64,
}

impl<'a> Sheet<'a> {
    /// Checks the document and chooses lines and energies; the page is not laid out yet.
    pub(crate) fn new(
        document: &'a SweepDocument,
        options: &'a FigureOptions,
    ) -> Result<Self, FigureError> {
        document.check()?;
        if document.is_grid() {
            return Err(FigureError::Grid);
        }
        let xs = abscissae(document);
        if xs.len() < 2 {
            return Err(FigureError::TooFewPoints { points: xs.len() });
        }
        check_direction(&xs)?;
        let all = bundles(
            document,
            options.numbering == Numbering::Core,
            options.follow,
        );
        let chosen = choose(&all, options.lines.as_deref())?;
        let picked: Vec<Bundle> = chosen.iter().map(|place| all[*place].clone()).collect();
        let extents = extents(&picked);
        let automatic = automatic_window(&extents).ok_or(FigureError::Nothing)?;
        let (window, padded) = match (options.energies, &options.lines) {
            (Some(window), _) => {
                check_window(window, &extents)?;
                (window, false)
            }
            (None, None) => (automatic, true),
            // Lines that were asked for by name are shown in full.
            (None, Some(_)) => {
                let low = extents.iter().map(|e| e.0).fold(f64::INFINITY, f64::min);
                let high = extents
                    .iter()
                    .map(|e| e.1)
                    .fold(f64::NEG_INFINITY, f64::max);
                ((low, high), true)
            }
        };
        let ranges = if options.axis_breaks {
            ranges(window, padded, &extents)
        } else {
            ranges(window, padded, &[(window.0, window.1, true)])
        };
        let drawn = chosen
            .into_iter()
            .filter(|place| {
                all[*place]
                    .extent()
                    .is_some_and(|(low, high)| high >= window.0 && low <= window.1)
            })
            .collect();
        Ok(Self {
            document,
            options,
            measure: Measure::of(options.width),
            colours: Colours::of(options.theme),
            xs,
            irreps: irreps_in_order(all.iter().map(|bundle| bundle.irrep.as_str())),
            all,
            drawn,
            ranges,
            scale: EnergyScale {
                segments: Vec::new(),
            },
            left: 0.0,
            right: 0.0,
            top: 0.0,
            bottom: 0.0,
            axis: 0.0,
        })
    }

    /// The lines that are drawn.
    pub(crate) fn lines(&self) -> impl Iterator<Item = &Bundle> {
        self.drawn.iter().map(|place| &self.all[*place])
    }

    /// First and last coordinate.
    pub(crate) fn span(&self) -> (f64, f64) {
        (self.xs[0], self.xs[self.xs.len() - 1])
    }

    /// Page position of a coordinate.
    pub(crate) fn x(&self, value: f64) -> f64 {
        let (from, to) = self.span();
        self.left + (value - from) / (to - from) * (self.right - self.left)
    }

    /// A curve's pieces on the page, moved down by `offset` points.
    pub(crate) fn on_page(&self, pieces: &[Piece], offset: f64) -> Vec<Piece> {
        pieces
            .iter()
            .map(|piece| piece.map(|(x, energy)| (self.x(x), self.scale.y(energy) + offset)))
            .collect()
    }

    /// Place of a line's irrep among all irreps.
    pub(crate) fn place(&self, bundle: &Bundle) -> usize {
        self.irreps
            .iter()
            .position(|irrep| *irrep == bundle.irrep)
            .unwrap_or_default()
    }

    /// Colour of a line.
    pub(crate) fn colour(&self, bundle: &Bundle) -> &'static str {
        self.colours.irrep(self.place(bundle))
    }

    /// Offsets of the orbitals of a set from the set's energy, in points.
    pub(crate) fn offsets(&self, bundle: &Bundle) -> Vec<f64> {
        let middle = 0.5 * (bundle.multiplicity as f64 - 1.0);
        (0..bundle.multiplicity)
            .map(|k| (k as f64 - middle) * self.measure.set_distance())
            .collect()
    }
}

fn check_direction(xs: &[f64]) -> Result<(), FigureError> {
    let rises = xs[1] > xs[0];
    let turn = xs.windows(2).position(|pair| {
        if rises {
            pair[1] <= pair[0]
        } else {
            pair[1] >= pair[0]
        }
    });
    turn.map_or(Ok(()), |place| {
        Err(FigureError::Unordered { point: place + 2 })
    })
}

fn choose(all: &[Bundle], names: Option<&[String]>) -> Result<Vec<usize>, FigureError> {
    if all.is_empty() {
        return Err(FigureError::Nothing);
    }
    let Some(names) = names else {
        return Ok((0..all.len()).collect());
    };
    let mut chosen = Vec::new();
    for name in names {
        let before = chosen.len();
        chosen.extend((0..all.len()).filter(|place| all[*place].names.contains(name)));
        if chosen.len() == before {
            let offered: Vec<String> = all.iter().map(|bundle| bundle.label.clone()).collect();
            return Err(FigureError::UnknownLine {
                name: name.clone(),
                nearest: nearest(name, &offered),
            });
        }
    }
    chosen.sort_unstable();
    chosen.dedup();
    if chosen.is_empty() {
        Err(FigureError::Nothing)
    } else {
        Ok(chosen)
    }
}

/// Irreps in the order of character tables: a, b, e, t, g, h, or σ, π, δ, φ.
pub(crate) fn irreps_in_order<'a>(irreps: impl Iterator<Item = &'a str>) -> Vec<String> {
    let rank = |irrep: &str| {
        ["sigma", "pi", "delta", "phi", "a", "b", "e", "t"]
            .iter()
            .position(|start| irrep.starts_with(start))
            .unwrap_or(8)
    };
    let mut irreps: Vec<String> = irreps.map(str::to_owned).collect();
    irreps.sort_by(|a, b| rank(a).cmp(&rank(b)).then_with(|| a.cmp(b)));
    irreps.dedup();
    irreps
}
