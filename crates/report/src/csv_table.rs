//! Tables for spreadsheets and scripts: one row per point and level.

use std::io::Write;

use crate::csv_rows::{push_head, push_header, push_level, push_names};
use crate::document::{LevelsDocument, Point, SweepDocument};

/// Bytes that are held back before they are written.
const HELD_BACK: usize = 1 << 16;

/// Why a table could not be written.
#[derive(Debug, thiserror::Error)]
#[error("the table could not be written: {0}")]
pub struct CsvError(#[from] std::io::Error);

impl CsvError {
    /// The error of the stream underneath (a closed pipe, a full disk).
    #[must_use]
    pub fn io_kind(&self) -> std::io::ErrorKind {
        self.0.kind()
    }
}

/// Writes the table point by point, so that a long sweep need not be held in memory.
///
/// RFC 4180: header row, comma, CR LF, quotes where needed. Columns
/// `point,at_1[,at_2],level,energy_ev,occupation,label,valence_label,full_label,irrep,line,point_group`;
/// points and levels are counted from 1, `line` is the line's `id` or empty; `at_…` are in the
/// coordinate's unit. Numbers read back to the same double.
pub struct CsvWriter<W: Write> {
    output: W,
    bytes: Vec<u8>,
    head: Vec<u8>,
    at: Vec<f64>,
    points: usize,
}

impl<W: Write> CsvWriter<W> {
    /// Starts a table with that many coordinates (none for a single geometry) and its header.
    pub fn new(output: W, coordinates: usize) -> Self {
        let mut bytes = Vec::with_capacity(2 * HELD_BACK);
        push_header(&mut bytes, coordinates);
        Self {
            output,
            bytes,
            head: Vec::new(),
            at: vec![0.0; coordinates],
            points: 0,
        }
    }

    /// Appends all levels of the next point.
    pub fn point(&mut self, point: &Point) -> Result<(), CsvError> {
        // A number of a document is finite: nothing can be refused here.
        let refused = |error| std::io::Error::new(std::io::ErrorKind::InvalidData, error);
        self.points += 1;
        for (target, at) in self.at.iter_mut().zip(&point.at) {
            *target = at.get();
        }
        self.head.clear();
        push_head(&mut self.head, self.points, &self.at).map_err(refused)?;
        for (level, rank) in point.levels.iter().zip(1..) {
            self.bytes.extend_from_slice(&self.head);
            let (energy, occupation) = (level.energy.get(), level.occupation.get());
            push_level(&mut self.bytes, rank, energy, occupation).map_err(refused)?;
            push_names(
                &mut self.bytes,
                [
                    &level.label,
                    &level.valence_label,
                    &level.full_label,
                    &level.irrep,
                ],
                level.line.map(|line| line as usize),
                &point.point_group,
            );
        }
        if self.bytes.len() >= HELD_BACK {
            self.output.write_all(&self.bytes)?;
            self.bytes.clear();
        }
        Ok(())
    }

    /// Writes what is still held back.
    pub fn finish(mut self) -> Result<(), CsvError> {
        self.output.write_all(&self.bytes)?;
        Ok(self.output.flush()?)
    }
}

/// Writes the whole table of a sweep or grid.
pub fn sweep_csv<W: Write>(document: &SweepDocument, output: W) -> Result<(), CsvError> {
    table(&document.points, document.coordinates.len(), output)
}

/// Writes the whole table of one geometry (no `at_…` columns).
pub fn levels_csv<W: Write>(document: &LevelsDocument, output: W) -> Result<(), CsvError> {
    table(&document.points, 0, output)
}

fn table<W: Write>(points: &[Point], coordinates: usize, output: W) -> Result<(), CsvError> {
    let mut writer = CsvWriter::new(output, coordinates);
    for point in points {
        writer.point(point)?;
    }
    writer.finish()
}
