//! What a figure says to machines and to people who cannot see it.

use serde::Serialize;

use crate::document::{
    CoordinateRecord, CrossingKind, CrossingRecord, LineRecord, MoleculeRecord, Number, Program,
    SumMinimum,
};
use crate::draw::ticks::ascii_number;
use crate::draw::wording::{
    bracketed_charge, coordinate_name, heading_formula, lowest_sum, value_with_unit,
};

use super::options::FigureError;
use super::sheet::Sheet;

/// The data of a correlation diagram: energies in eV, coordinates in the coordinate's unit.
#[derive(Serialize)]
struct FigureData<'a> {
    schema: &'static str,
    program: &'a Program,
    molecule: &'a MoleculeRecord,
    coordinate: Option<&'a CoordinateRecord>,
    path_group: &'a str,
    at: Vec<f64>,
    sum: Vec<Option<Number>>,
    minimum: Option<&'a SumMinimum>,
    drawn: Vec<u32>,
    lines: &'a [LineRecord],
    crossings: &'a [CrossingRecord],
}

/// The data as JSON in one line.
pub(crate) fn json(sheet: &Sheet<'_>) -> Result<String, FigureError> {
    let document = sheet.document;
    let data = FigureData {
        schema: "orbend/figure/1",
        program: &document.program,
        molecule: &document.molecule,
        coordinate: document.coordinates.first(),
        path_group: &document.symmetry.path_group,
        at: sheet.xs.clone(),
        sum: document.points.iter().map(|point| point.sum).collect(),
        minimum: document.minimum.as_ref(),
        drawn: sheet
            .lines()
            .flat_map(|bundle| bundle.ids.clone())
            .collect(),
        lines: document.lines.as_deref().unwrap_or_default(),
        crossings: document.crossings.as_deref().unwrap_or_default(),
    };
    serde_json::to_string(&data).map_err(|error| FigureError::Metadata(error.to_string()))
}

/// One line for `<title>`.
pub(crate) fn title(sheet: &Sheet<'_>) -> String {
    let molecule = &sheet.document.molecule;
    let (from, to) = sheet.span();
    let range = sheet.document.coordinates.first().map(|coordinate| {
        let name = coordinate_name(coordinate, molecule, "-");
        let (from, to) = (
            value_with_unit(from, coordinate.unit),
            value_with_unit(to, coordinate.unit),
        );
        format!(" along the {name} from {from} to {to}")
    });
    format!(
        "Orbital correlation diagram of {}{}{}",
        heading_formula(molecule),
        bracketed_charge(molecule.charge),
        range.unwrap_or_default()
    )
}

/// The figure in words for `<desc>`.
pub(crate) fn description(sheet: &Sheet<'_>) -> String {
    let document = sheet.document;
    let mut text = format!(
        "Orbital energies in eV; labels in plain form; path group {}.",
        document.symmetry.path_group
    );
    for bundle in sheet.lines() {
        let ends = (
            bundle.energies.first().copied().flatten(),
            bundle.energies.last().copied().flatten(),
        );
        let filled = if bundle.ever_occupied() {
            "occupied"
        } else {
            "empty"
        };
        text.push_str(&format!(
            " {} ({filled}): from {}",
            bundle.label, bundle.start
        ));
        if let (Some(start), Some(end)) = ends {
            text.push_str(&format!(
                " at {} to {} at {}.",
                ascii_number(start, 2),
                bundle.end,
                ascii_number(end, 2)
            ));
        } else {
            text.push_str(&format!(" to {}.", bundle.end));
        }
    }
    let unit = document
        .coordinates
        .first()
        .map(|coordinate| coordinate.unit);
    for crossing in document.crossings.iter().flatten() {
        let verb = match crossing.kind {
            CrossingKind::Crossing => "cross",
            CrossingKind::Avoided => "avoid each other",
            CrossingKind::Touching => "become one set",
        };
        let at = crossing.at.get();
        let place = unit.map_or_else(|| at.to_string(), |unit| value_with_unit(at, unit));
        text.push_str(&format!(
            " {} and {} {verb} at {place}.",
            crossing.labels[0], crossing.labels[1]
        ));
    }
    if let (Some((at, _, inside)), Some(unit)) = (lowest_sum(document), unit) {
        let end = if inside { "" } else { ", an end of the range" };
        text.push_str(&format!(
            " The sum is lowest at {}{end}.",
            value_with_unit(at, unit)
        ));
    }
    let hidden: Vec<&str> = (0..sheet.all.len())
        .filter(|place| !sheet.drawn.contains(place))
        .map(|place| sheet.all[place].label.as_str())
        .collect();
    if !hidden.is_empty() {
        text.push_str(&format!(" Not drawn: {}.", hidden.join(", ")));
    }
    text
}
