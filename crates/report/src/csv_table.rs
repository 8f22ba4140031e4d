//! Tables for spreadsheets and scripts: one row per point and level.

use std::io::Write;

use csv::{Terminator, Writer, WriterBuilder};

use crate::document::{Case, LevelsDocument, Number, Point, ShapeDocument, SweepDocument};
use crate::draw::wording::heading_formula;

/// Why a table could not be written.
#[derive(Debug, thiserror::Error)]
#[error("the table could not be written: {0}")]
pub struct CsvError(#[from] csv::Error);

impl CsvError {
    /// The error of the stream underneath, where there is one (a closed pipe, a full disk).
    #[must_use]
    pub fn io_kind(&self) -> Option<std::io::ErrorKind> {
        match self.0.kind() {
            csv::ErrorKind::Io(error) => Some(error.kind()),
            _ => None,
        }
    }
}

/// Writes the table point by point, so that a long sweep need not be held in memory.
///
/// RFC 4180: header row, comma, CR LF, quotes where needed. Columns
/// `point,at_1[,at_2],level,energy_ev,occupation,label,valence_label,full_label,irrep,line,point_group`;
/// points and levels are counted from 1, `line` is the line's `id` or empty; `at_…` are in the
/// coordinate's unit. Numbers read back to the same double.
pub struct CsvWriter<W: Write> {
    writer: Writer<W>,
    coordinates: usize,
    points: usize,
}

impl<W: Write> CsvWriter<W> {
    /// Starts a table with that many coordinates (none for a single geometry) and writes its header.
    pub fn new(output: W, coordinates: usize) -> Result<Self, CsvError> {
        let mut writer = WriterBuilder::new()
            .terminator(Terminator::CRLF)
            .from_writer(output);
        let mut header = vec!["point".to_owned()];
        header.extend((1..=coordinates).map(|number| format!("at_{number}")));
        header.extend(
            [
                "level",
                "energy_ev",
                "occupation",
                "label",
                "valence_label",
                "full_label",
                "irrep",
                "line",
                "point_group",
            ]
            .map(str::to_owned),
        );
        writer.write_record(&header)?;
        Ok(Self {
            writer,
            coordinates,
            points: 0,
        })
    }

    /// Appends all levels of the next point.
    pub fn point(&mut self, point: &Point) -> Result<(), CsvError> {
        self.points += 1;
        for (rank, level) in point.levels.iter().enumerate() {
            self.writer.write_field(self.points.to_string())?;
            for coordinate in 0..self.coordinates {
                let value = point.at.get(coordinate).map(|at| at.get().to_string());
                self.writer.write_field(value.unwrap_or_default())?;
            }
            self.writer.write_field((rank + 1).to_string())?;
            self.writer.write_field(level.energy.get().to_string())?;
            self.writer
                .write_field(level.occupation.get().to_string())?;
            for field in [
                &level.label,
                &level.valence_label,
                &level.full_label,
                &level.irrep,
            ] {
                self.writer.write_field(field)?;
            }
            self.writer
                .write_field(level.line.map(|id| id.to_string()).unwrap_or_default())?;
            self.writer.write_field(&point.point_group)?;
            self.writer.write_record(None::<&[u8]>)?;
        }
        Ok(())
    }

    /// Writes what is still held back.
    pub fn finish(mut self) -> Result<(), CsvError> {
        self.writer.flush().map_err(|error| CsvError(error.into()))
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

/// Writes the verdicts, one row per case: RFC 4180 as above. Columns
/// `formula,charge,electrons,unpaired,configuration,verdict,confident,value,value_10,value_90,depth_ev,support`,
/// then for each argument what it favours and (for sums) its depth in eV; `value` is in the unit of the
/// case's coordinate, with the 10 and 90 % ends of its range. Empty where there is none.
pub fn shape_csv<W: Write>(document: &ShapeDocument, output: W) -> Result<(), CsvError> {
    let mut writer = WriterBuilder::new()
        .terminator(Terminator::CRLF)
        .from_writer(output);
    let mut names: Vec<&str> = Vec::new();
    for argument in document.cases.iter().flat_map(|case| &case.arguments) {
        if !names.contains(&argument.name.as_str()) {
            names.push(&argument.name);
        }
    }
    let columns = "formula,charge,electrons,unpaired,configuration,verdict,confident,value,value_10,value_90,depth_ev,support";
    let mut header: Vec<String> = columns.split(',').map(str::to_owned).collect();
    for name in &names {
        let plain = name.replace('-', "_");
        header.push(format!("{plain}_favours"));
        header.push(format!("{plain}_ev"));
    }
    writer.write_record(&header)?;
    for case in &document.cases {
        writer.write_record(shape_row(document, case, &names))?;
    }
    writer.flush().map_err(|error| CsvError(error.into()))
}

/// The change of a line stands where a sum has its depth.
fn shape_row(document: &ShapeDocument, case: &Case, names: &[&str]) -> Vec<String> {
    let text = |number: Option<Number>| number.map_or_else(String::new, |n| n.get().to_string());
    let own = || heading_formula(&document.molecule);
    let formula = case.formula.as_deref().unwrap_or_else(own);
    let mut row = vec![
        formula.to_owned(),
        case.charge.to_string(),
        case.electrons.to_string(),
        case.unpaired.to_string(),
        case.configuration.clone(),
        case.verdict.clone(),
        case.confident.to_string(),
        text(case.angle),
        text(case.angle_range.map(|range| range[0])),
        text(case.angle_range.map(|range| range[1])),
        text(case.depth),
        text(case.support),
    ];
    for name in names {
        let found = case
            .arguments
            .iter()
            .find(|argument| argument.name == *name);
        row.push(found.map_or_else(String::new, |argument| argument.favours.clone()));
        row.push(found.map_or_else(String::new, |argument| {
            text(argument.depth.or(argument.change))
        }));
    }
    row
}

fn table<W: Write>(points: &[Point], coordinates: usize, output: W) -> Result<(), CsvError> {
    let mut writer = CsvWriter::new(output, coordinates)?;
    for point in points {
        writer.point(point)?;
    }
    writer.finish()
}
