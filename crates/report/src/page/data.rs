//! The page's data, rounded to what a reader can see so that the file stays small.

use serde::Serialize;

use crate::document::{
    BasisFunction, CoordinateUnit, CrossingRecord, LineRecord, Number, SweepDocument,
};
use crate::draw::bundle::abscissae;
use crate::draw::wording::{coordinate_name, heading_formula};
use crate::figure::canvas::{Area, Canvas};
use crate::figure::{FigureOptions, Numbering};
use orbend_structure::{BondGraph, Element, Molecule};

/// Everything that the script reads. Energies in eV, positions in Å; coefficients in 10⁻⁴ and shares
/// in 10⁻³ as whole numbers, point after point.
#[derive(Serialize)]
pub(crate) struct PageData<'a> {
    name: &'a str,
    coordinate: String,
    unit: CoordinateUnit,
    core: bool,
    elements: &'a [String],
    bonds: Vec<(usize, usize)>,
    at: Vec<f64>,
    sum: Vec<Option<f64>>,
    group: Vec<&'a str>,
    positions: Vec<Vec<[f64; 3]>>,
    lines: Vec<LineData<'a>>,
    crossings: &'a [CrossingRecord],
    shells: Vec<ShellData>,
    /// Where things stand on the wide and on the narrow drawing.
    areas: [AreaData; 2],
}

#[derive(Serialize)]
struct LineData<'a> {
    id: u32,
    irrep: &'a str,
    degeneracy: u32,
    label: &'a str,
    valence: &'a str,
    passport: &'a crate::document::Passport,
    #[serde(skip_serializing_if = "Option::is_none")]
    evidence: Option<crate::document::CertificateKind>,
    energies: Vec<Option<f64>>,
    electrons: Vec<f64>,
    coefficients: Vec<i32>,
    shares: Vec<i32>,
}

/// One shell of the basis: where its functions start, and its exponents.
#[derive(Serialize)]
struct ShellData {
    atom: u32,
    shell: String,
    n: u32,
    l: u32,
    first: usize,
    zeta: Vec<[Number; 2]>,
}

#[derive(Serialize)]
struct AreaData {
    across: (f64, f64),
    down: (f64, f64),
    energies: Vec<[f64; 4]>,
    lines: Vec<Vec<u32>>,
}

impl<'a> PageData<'a> {
    pub(crate) fn new(
        document: &'a SweepDocument,
        options: &FigureOptions,
        canvases: [&Canvas; 2],
    ) -> Self {
        let drawn: Vec<u32> = canvases[0]
            .area
            .as_ref()
            .map(|area| area.lines.concat())
            .unwrap_or_default();
        // Lines that the user left out are left out here too.
        let kept = |line: &&LineRecord| options.lines.is_none() || drawn.contains(&line.id);
        let coordinate = document.coordinates.first();
        Self {
            name: heading_formula(&document.molecule),
            coordinate: coordinate
                .map(|coordinate| coordinate_name(coordinate, &document.molecule, "–"))
                .unwrap_or_default(),
            unit: coordinate.map_or(CoordinateUnit::Share, |coordinate| coordinate.unit),
            core: options.numbering == Numbering::Core,
            elements: &document.molecule.elements,
            bonds: bonds(document),
            at: abscissae(document),
            sum: document
                .points
                .iter()
                .map(|point| point.sum.map(|sum| round(sum.get(), 5)))
                .collect(),
            group: document
                .points
                .iter()
                .map(|point| point.point_group.as_str())
                .collect(),
            positions: document
                .points
                .iter()
                .map(|point| {
                    point
                        .positions
                        .iter()
                        .map(|at| at.map(|c| round(c.get(), 4)))
                        .collect()
                })
                .collect(),
            lines: document
                .lines
                .iter()
                .flatten()
                .filter(kept)
                .map(|line| LineData::new(document, line))
                .collect(),
            crossings: document.crossings.as_deref().unwrap_or_default(),
            shells: shells(document),
            areas: canvases.map(|canvas| AreaData::new(canvas.area.as_ref())),
        }
    }
}

impl AreaData {
    fn new(area: Option<&Area>) -> Self {
        Self {
            across: area.map(|a| pair(a.across)).unwrap_or_default(),
            down: area.map(|a| pair(a.down)).unwrap_or_default(),
            energies: area
                .iter()
                .flat_map(|area| &area.energies)
                .map(|s| [s.low, s.high, s.bottom, s.top].map(|value| round(value, 3)))
                .collect(),
            lines: area.map(|area| area.lines.clone()).unwrap_or_default(),
        }
    }
}

impl<'a> LineData<'a> {
    fn new(document: &'a SweepDocument, line: &'a LineRecord) -> Self {
        let mut electrons = Vec::new();
        let mut coefficients = Vec::new();
        let mut shares = Vec::new();
        for point in &document.points {
            let level = point
                .levels
                .iter()
                .find(|level| level.line == Some(line.id));
            electrons.push(level.map_or(0.0, |level| round(level.occupation.get(), 4)));
            let Some(level) = level else { continue };
            coefficients.extend(
                level
                    .coefficients
                    .iter()
                    .flatten()
                    .map(|c| whole(c.get(), 1e4)),
            );
            shares.extend(
                level
                    .populations
                    .iter()
                    .flatten()
                    .map(|p| whole(p.share.get(), 1e3)),
            );
        }
        // A line with a hole has no orbitals to step through.
        let whole_line = line.energies.iter().all(Option::is_some);
        Self {
            id: line.id,
            irrep: &line.irrep,
            degeneracy: line.degeneracy,
            label: &line.label,
            valence: &line.valence_label,
            passport: &line.passport,
            evidence: line
                .certificate
                .as_ref()
                .map(|certificate| certificate.kind),
            energies: line
                .energies
                .iter()
                .map(|e| e.map(|e| round(e.get(), 5)))
                .collect(),
            electrons,
            coefficients: if whole_line { coefficients } else { Vec::new() },
            shares: if whole_line { shares } else { Vec::new() },
        }
    }
}

/// The shells behind the basis functions, with the exponents that the document states.
fn shells(document: &SweepDocument) -> Vec<ShellData> {
    let mut found: Vec<ShellData> = Vec::new();
    for (index, function) in document.basis.iter().flatten().enumerate() {
        let seen = found
            .last()
            .is_some_and(|last| last.atom + 1 == function.atom && last.shell == function.shell);
        if !seen {
            found.extend(shell(document, function, index));
        }
    }
    found
}

fn shell(document: &SweepDocument, function: &BasisFunction, first: usize) -> Option<ShellData> {
    let element = document
        .molecule
        .elements
        .get((function.atom as usize).checked_sub(1)?)?;
    let values = document
        .method
        .values
        .iter()
        .find(|values| values.element == *element && values.shell == function.shell);
    let letter = function.shell.chars().last()?;
    Some(ShellData {
        atom: function.atom - 1,
        shell: function.shell.clone(),
        n: function.shell.trim_end_matches(letter).parse().ok()?,
        l: "spdf".find(letter)? as u32,
        first,
        // A shell without stated exponents is left out of the pictures.
        zeta: values.map(|values| values.zeta.clone()).unwrap_or_default(),
    })
}

/// Bonds of the first geometry, by covalent radii.
fn bonds(document: &SweepDocument) -> Vec<(usize, usize)> {
    let elements: Option<Vec<Element>> = document
        .molecule
        .elements
        .iter()
        .map(|symbol| Element::from_symbol(symbol))
        .collect();
    let positions = document.points.first().map(|point| {
        point
            .positions
            .iter()
            .map(|at| at.map(Number::get))
            .collect::<Vec<_>>()
    });
    match (elements, positions) {
        (Some(elements), Some(positions)) if elements.len() == positions.len() => {
            BondGraph::new(&Molecule {
                elements,
                positions,
                charge: document.molecule.charge,
                unpaired: None,
                title: String::new(),
            })
            .bonds()
        }
        _ => Vec::new(),
    }
}

fn pair((a, b): (f64, f64)) -> (f64, f64) {
    (round(a, 3), round(b, 3))
}

fn round(value: f64, decimals: i32) -> f64 {
    let scale = 10.0_f64.powi(decimals);
    // + 0.0 turns −0 into 0.
    (value * scale).round() / scale + 0.0
}

fn whole(value: f64, scale: f64) -> i32 {
    (value * scale).round() as i32
}
