//! The table of a sweep of any length: points are solved, written and forgotten.

use std::io::Write;

use orbend_scan::{PointLevels, ScanError, Stretch, SweepPlan};

use crate::csv_rows::{push_head, push_header, push_level, push_names};
use crate::csv_table::CsvError;
use crate::document::NotFinite;

/// Points of an overview that are evenly spread.
const SHOWN: usize = 2000;

/// Why a sweep could not be written as it ran.
#[derive(Debug, thiserror::Error)]
pub enum StreamError {
    /// A point could not be solved.
    #[error(transparent)]
    Scan(#[from] ScanError),
    /// An energy or a coordinate is not finite.
    #[error(transparent)]
    NotFinite(#[from] NotFinite),
    /// The stream underneath failed.
    #[error(transparent)]
    Table(#[from] CsvError),
}

/// What is kept of a sweep that was written as it ran.
#[derive(Clone, Debug, PartialEq)]
pub struct Streamed {
    /// Number of points, from 0, with the lowest sum; the first of equals.
    pub lowest: usize,
    /// Number of points, from 0, with the highest sum; the last of equals.
    pub highest: usize,
    /// Points whose own group is larger than the path group and where that begins or ends.
    pub special: Vec<usize>,
    points: usize,
}

impl Streamed {
    /// Points that show the sweep as a whole: some 2000 evenly spread, both ends, the lowest and the
    /// highest sum with their neighbours, and where the group changes.
    #[must_use]
    pub fn overview(&self) -> Vec<usize> {
        let last = self.points.saturating_sub(1);
        let stride = last.div_ceil(SHOWN).max(1);
        let mut shown: Vec<usize> = (0..=last).step_by(stride).chain([last]).collect();
        for place in [self.lowest, self.highest] {
            shown.extend([place.saturating_sub(1), place, last.min(place + 1)]);
        }
        shown.extend(&self.special);
        shown.sort_unstable();
        shown.dedup();
        shown
    }
}

/// Rows of one stretch and what is remembered of it.
struct Piece {
    bytes: Vec<u8>,
    sums: Extremes,
    special: Vec<usize>,
}

#[derive(Clone, Copy, Default)]
struct Extremes {
    lowest: Option<(f64, usize)>,
    highest: Option<(f64, usize)>,
}

impl Extremes {
    fn add(&mut self, sum: f64, point: usize) {
        if self.lowest.is_none_or(|(least, _)| sum < least) {
            self.lowest = Some((sum, point));
        }
        if self.highest.is_none_or(|(most, _)| sum >= most) {
            self.highest = Some((sum, point));
        }
    }
}

/// Solves the points of a plan and writes their table, the same bytes as [`crate::sweep_csv`] makes
/// of the document, on the caller's rayon pool. Memory does not grow with the number of points.
/// Without an output the points are only looked at.
///
/// # Errors
/// A point that cannot be solved or the stream's own error; the output is incomplete then.
pub fn stream_csv<W: Write + Send>(
    plan: &SweepPlan,
    mut output: Option<W>,
) -> Result<Streamed, StreamError> {
    if let Some(output) = &mut output {
        let mut header = Vec::new();
        push_header(&mut header, plan.path().axes().len());
        output.write_all(&header).map_err(CsvError::from)?;
    }
    let (mut sums, mut special) = (Extremes::default(), Vec::new());
    let names = Names::new(plan);
    let written = output.is_some();
    plan.stream(
        |stretch| piece(stretch, &names, written),
        |piece: Piece| -> Result<(), StreamError> {
            if let Some(output) = &mut output {
                output.write_all(&piece.bytes).map_err(CsvError::from)?;
            }
            for (sum, point) in piece.sums.lowest.into_iter().chain(piece.sums.highest) {
                sums.add(sum, point);
            }
            special.extend(piece.special);
            Ok(())
        },
    )?;
    if let Some(output) = &mut output {
        output.flush().map_err(CsvError::from)?;
    }
    Ok(Streamed {
        lowest: sums.lowest.map_or(0, |(_, point)| point),
        highest: sums.highest.map_or(0, |(_, point)| point),
        special: ends_of_runs(&special),
        points: plan.points(),
    })
}

/// First and last of each run of neighbouring numbers.
fn ends_of_runs(rising: &[usize]) -> Vec<usize> {
    let inside = |index: usize| {
        index > 0
            && index + 1 < rising.len()
            && rising[index - 1] + 1 == rising[index]
            && rising[index] + 1 == rising[index + 1]
    };
    (0..rising.len())
        .filter(|&index| !inside(index))
        .map(|index| rising[index])
        .collect()
}

/// The ends of the rows at a point without anything special, one per line.
struct Names {
    of_line: Vec<Vec<u8>>,
    /// A grid has no lines.
    lines: bool,
}

impl Names {
    fn new(plan: &SweepPlan) -> Self {
        let lines = plan.path().axes().len() == 1;
        let group = plan.path_group();
        let of_line = plan.lines().iter().zip(0..).map(|(head, line)| {
            let mut out = Vec::new();
            let name = &head.name;
            push_names(
                &mut out,
                [
                    &name.plain,
                    &name.valence_plain,
                    &name.plain,
                    &group.irreps[head.irrep].plain,
                ],
                lines.then_some(line),
                &group.name,
            );
            out
        });
        Self {
            of_line: of_line.collect(),
            lines,
        }
    }
}

fn piece(stretch: &Stretch<'_>, names: &Names, written: bool) -> Result<Piece, StreamError> {
    let plan = stretch.plan();
    let mut levels = PointLevels::new(plan);
    let longest: usize = names.of_line.iter().map(|name| name.len() + 48).sum();
    let mut piece = Piece {
        bytes: Vec::with_capacity(if written {
            longest * stretch.points().len()
        } else {
            0
        }),
        sums: Extremes::default(),
        special: Vec::new(),
    };
    let mut head = Vec::new();
    for point in stretch.points() {
        stretch.levels(point, &mut levels);
        piece.sums.add(levels.sum, point);
        let special = stretch.special(point);
        if special.is_some() {
            piece.special.push(point);
        }
        if !written {
            continue;
        }
        head.clear();
        push_head(&mut head, point + 1, &plan.values(point))?;
        for (&line, rank) in levels.order.iter().zip(1..) {
            let out = &mut piece.bytes;
            out.extend_from_slice(&head);
            push_level(out, rank, levels.energies[line], levels.occupations[line])?;
            let Some(special) = special else {
                out.extend_from_slice(&names.of_line[line]);
                continue;
            };
            let head = &plan.lines()[line];
            push_names(
                out,
                [
                    &head.name.plain,
                    &head.name.valence_plain,
                    &special.names[line].0.plain,
                    &plan.path_group().irreps[head.irrep].plain,
                ],
                names.lines.then_some(line),
                &special.group,
            );
        }
    }
    Ok(piece)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_overview_has_the_ends_and_what_is_special() {
        let streamed = Streamed {
            lowest: 123_457,
            highest: 0,
            special: ends_of_runs(&[5, 6, 7, 8, 900_000, 999_999, 1_000_000]),
            points: 1_000_001,
        };
        assert_eq!(streamed.special, [5, 8, 900_000, 999_999, 1_000_000]);
        let shown = streamed.overview();
        assert!(shown.len() < 2020 && shown.windows(2).all(|pair| pair[0] < pair[1]));
        for point in [0, 5, 8, 123_456, 123_457, 123_458, 900_000, 1_000_000] {
            assert!(shown.contains(&point), "{point}");
        }
        assert!(shown.windows(2).all(|pair| pair[1] - pair[0] <= 501));
    }
}
