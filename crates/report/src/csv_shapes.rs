//! Shape verdicts as a table: one row per case.

use std::io::Write;

use crate::csv_rows::{ROW_END, push_text};
use crate::csv_table::CsvError;
use crate::document::{Case, Number, ShapeDocument};
use crate::draw::wording::heading_formula;

/// The columns before the arguments.
const COLUMNS: &str = "formula,charge,electrons,unpaired,configuration,verdict,confident,value,value_10,value_90,depth_ev,support";

/// Writes the verdicts, one row per case (RFC 4180). Columns
/// `formula,charge,electrons,unpaired,configuration,verdict,confident,value,value_10,value_90,depth_ev,support`,
/// then for each argument what it favours and its depth (of the frontier: its change) in eV; `value`
/// is in the unit of the case's coordinate, with the 10 and 90 % ends of its range. Empty where
/// there is none.
pub fn shape_csv<W: Write>(document: &ShapeDocument, mut output: W) -> Result<(), CsvError> {
    let mut names: Vec<&str> = Vec::new();
    for argument in document.cases.iter().flat_map(|case| &case.arguments) {
        if !names.contains(&argument.name.as_str()) {
            names.push(&argument.name);
        }
    }
    let mut header: Vec<String> = COLUMNS.split(',').map(str::to_owned).collect();
    for name in &names {
        let plain = name.replace('-', "_");
        header.push(format!("{plain}_favours"));
        header.push(format!("{plain}_ev"));
    }
    let mut bytes = Vec::new();
    push_row(&mut bytes, &header);
    for case in &document.cases {
        push_row(&mut bytes, &row(document, case, &names));
    }
    output.write_all(&bytes)?;
    Ok(output.flush()?)
}

fn push_row(out: &mut Vec<u8>, cells: &[String]) {
    for (index, cell) in cells.iter().enumerate() {
        if index > 0 {
            out.push(b',');
        }
        push_text(out, cell);
    }
    out.extend_from_slice(ROW_END);
}

fn row(document: &ShapeDocument, case: &Case, names: &[&str]) -> Vec<String> {
    let text = |number: Option<Number>| number.map_or_else(String::new, |n| n.get().to_string());
    let own = || heading_formula(&document.molecule);
    let mut row = vec![
        case.formula.as_deref().unwrap_or_else(own).to_owned(),
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
        let found = case.arguments.iter().find(|one| one.name == *name);
        row.push(found.map_or_else(String::new, |one| one.favours.clone()));
        row.push(found.map_or_else(String::new, |one| text(one.depth.or(one.change))));
    }
    row
}
