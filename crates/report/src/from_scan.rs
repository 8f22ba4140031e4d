//! From a scan's result to its document: names and numbers are copied, none is
//! made.

use orbend_hamiltonian as hamiltonian;
use orbend_scan::{Route, ScanError, Sweep, SweepPlan};
use orbend_structure::CoordinateKind;

use crate::document::{
    AtomPosition, Certificate, CertificateKind, Checked, CoordinateRecord, CoordinateUnit,
    Geometry, LevelRecord, LevelsDocument, LevelsSchema, LineRecord, Method, Missing,
    MoleculeRecord, MotionKind, NearMiss, NotFinite, Number, Passport, Point, Program, ShellValues,
    SpecialLabel, SumMinimum, SweepDocument, SweepSchema, SymmetryRecord, Units, Warning,
};
use crate::from_scan_bonds::describe_bonds;
use crate::from_scan_lines::{crossing_records, crossing_search, followed_records};
use crate::from_scan_populations::{basis_functions, describe_orbitals};

/// What the scan does not know about its input and its reader.
#[derive(Clone, Debug, Default)]
pub struct Provenance {
    /// How the geometry came about.
    pub geometry: Geometry,
    /// Whether valence numbering is shown first.
    pub valence_numbering: bool,
    /// Further things the reader ought to know.
    pub warnings: Vec<Warning>,
}

/// Why a result could not become a document.
#[derive(Debug, thiserror::Error)]
pub enum FromScanError {
    /// A point could not be read back.
    #[error(transparent)]
    Scan(#[from] ScanError),
    /// A coordinate or position is not finite.
    #[error(transparent)]
    NotFinite(#[from] NotFinite),
    /// An element is not in the set.
    #[error(
        "the set `{set}` has no values for {element}; lay a file with its Hii and zeta over the set (--params FILE)"
    )]
    NoParameters {
        /// Element symbol.
        element: String,
        /// Name of the set.
        set: String,
    },
}

/// The document of a sweep.
///
/// # Errors
/// A position or coordinate that is not finite.
pub fn sweep_document(
    sweep: &Sweep,
    provenance: &Provenance,
) -> Result<SweepDocument, FromScanError> {
    let plan = sweep.plan();
    let mut missing = Vec::new();
    let mut points = (0..sweep.points())
        .map(|index| point_record(sweep, index, &mut missing))
        .collect::<Result<Vec<_>, _>>()?;
    let single = plan.path().axes().len() == 1;
    if !single {
        // A grid has no lines that a level could name.
        points
            .iter_mut()
            .flat_map(|point| &mut point.levels)
            .for_each(|level| level.line = None);
    }
    // With a large group the irreps say which line is which.
    let group = plan.path_group();
    let little = single && !group.linear && group.order() <= 2 && sweep.points() > 1;
    let crossings = sweep.crossings()?;
    let followed = followed_records(sweep, &sweep.followed(&crossings)?)?;
    let mut lines = if single {
        Some(line_records(sweep)?)
    } else {
        None
    };
    if little {
        for (line, record) in lines.iter_mut().flatten().zip(&followed) {
            line.certificate = Some(record.certificate.clone());
        }
    }
    Ok(SweepDocument {
        schema: SweepSchema,
        program: Program::this(),
        units: Units::default(),
        molecule: molecule_record(plan, provenance)?,
        method: method_record(plan, provenance)?,
        coordinates: coordinate_records(plan)?,
        symmetry: symmetry_record(plan)?,
        basis: None,
        minimum: if single { sum_minimum(&points) } else { None },
        points,
        lines,
        followed: single.then_some(followed),
        crossings: if single {
            Some(crossing_records(sweep, &crossings)?)
        } else {
            None
        },
        crossing_search: if single { crossing_search(plan)? } else { None },
        fragments: None,
        why: None,
        warnings: warnings(plan, provenance),
        missing,
    })
}

/// The document of one geometry, with coefficients and populations.
///
/// # Errors
/// A position that is not finite.
pub fn levels_document(
    sweep: &Sweep,
    provenance: &Provenance,
) -> Result<LevelsDocument, FromScanError> {
    let plan = sweep.plan();
    let mut missing = Vec::new();
    let mut point = point_record(sweep, 0, &mut missing)?;
    let orbitals = sweep.orbitals(0)?;
    let populations = describe_orbitals(plan, &orbitals, &mut point)?;
    describe_bonds(plan, &orbitals, &populations, &mut point)?;
    Ok(LevelsDocument {
        schema: LevelsSchema,
        program: Program::this(),
        units: Units::default(),
        molecule: molecule_record(plan, provenance)?,
        method: method_record(plan, provenance)?,
        symmetry: symmetry_record(plan)?,
        basis: Some(basis_functions(plan)),
        points: vec![point],
        distortions: None,
        fragments: None,
        warnings: warnings(plan, provenance),
        missing,
    })
}

pub(crate) fn molecule_record(
    plan: &SweepPlan,
    provenance: &Provenance,
) -> Result<MoleculeRecord, NotFinite> {
    let molecule = plan.molecule();
    let electrons = plan.electrons();
    let positions = molecule
        .positions
        .iter()
        .zip(&molecule.elements)
        .zip(1..)
        .map(|((&at, element), atom)| {
            Ok(AtomPosition {
                atom,
                element: element.symbol().to_owned(),
                at: Number::triple(at)?,
            })
        })
        .collect::<Result<_, _>>()?;
    Ok(MoleculeRecord {
        formula: molecule.formula(),
        elements: molecule
            .elements
            .iter()
            .map(|element| element.symbol().to_owned())
            .collect(),
        charge: molecule.charge,
        unpaired: electrons.unpaired(),
        valence_electrons: electrons.total(),
        core_orbitals: plan.core_orbitals(),
        title: molecule.title.clone(),
        positions,
        geometry: provenance.geometry.clone(),
    })
}

pub(crate) fn method_record(
    plan: &SweepPlan,
    provenance: &Provenance,
) -> Result<Method, NotFinite> {
    let request = plan.request();
    let mut elements = request.molecule.elements.clone();
    elements.sort();
    elements.dedup();
    let mut values = Vec::new();
    for element in elements {
        let Some(parameters) = request.parameters.element(element) else {
            continue;
        };
        for shell in parameters.shells() {
            values.push(shell_values(element.symbol(), shell)?);
        }
    }
    Ok(Method {
        parameter_set: request.parameters.name().to_owned(),
        fingerprint: request.parameters.fingerprint(),
        coupling: request.method.coupling.name().to_owned(),
        k: Number::new(request.method.k)?,
        polarised_hydrogen: request.method.polarised_hydrogen,
        numbering: if provenance.valence_numbering {
            "valence"
        } else {
            "core"
        }
        .to_owned(),
        notes: Vec::new(),
        values,
    })
}

/// The record of one shell's values.
pub(crate) fn shell_values(
    element: &str,
    shell: &hamiltonian::ShellParameters,
) -> Result<ShellValues, NotFinite> {
    Ok(ShellValues {
        element: element.to_owned(),
        shell: shell.name().to_string(),
        hii: Number::new(shell.hii_ev)?,
        zeta: shell
            .terms
            .iter()
            .map(|term| Ok([Number::new(term.0)?, Number::new(term.1)?]))
            .collect::<Result<_, _>>()?,
        source: shell.citation(),
        checked: match shell.checked {
            hamiltonian::Checked::Page => Checked::Page,
            hamiltonian::Checked::Memory => Checked::Memory,
        },
    })
}

pub(crate) fn coordinate_records(plan: &SweepPlan) -> Result<Vec<CoordinateRecord>, NotFinite> {
    let path = plan.path();
    let kind = match &plan.request().route {
        Route::Coordinates => None,
        Route::Together => (path.axes().len() > 1).then_some(MotionKind::Table),
        Route::Table { .. } => path
            .axes()
            .first()
            .is_some_and(|axis| axis.unit == "1")
            .then_some(MotionKind::Table),
        Route::Frames { .. } => Some(MotionKind::Frames),
        Route::Toward { .. } => Some(MotionKind::Toward),
        Route::AlongMode { .. } => Some(MotionKind::Mode),
    };
    let moved = path.moved_along();
    let described: Vec<&str> = path.describe().lines().collect();
    path.axes()
        .iter()
        .enumerate()
        .map(|(index, axis)| {
            let coordinate = if kind.is_none() {
                path.coordinates().get(index)
            } else {
                None
            };
            let ends = |at: Option<&f64>| at.map(|&at| Number::new(at)).transpose();
            let steps = (axis.values.len() as f64 - 1.0).max(1.0);
            let even = axis
                .values
                .last()
                .zip(axis.values.first())
                .map(|(to, from)| (to - from).abs() / steps);
            Ok(CoordinateRecord {
                kind: kind.unwrap_or(match coordinate.map(|coordinate| coordinate.kind) {
                    Some(CoordinateKind::Bend) => MotionKind::Bend,
                    Some(CoordinateKind::Stretch) => MotionKind::Stretch,
                    Some(CoordinateKind::Twist) => MotionKind::Twist,
                    Some(CoordinateKind::Pyramid) => MotionKind::Pyramid,
                    None => MotionKind::Table,
                }),
                atoms: coordinate
                    .map(|coordinate| numbers(&coordinate.atoms))
                    .unwrap_or_default(),
                unit: match axis.unit.as_str() {
                    "degree" => CoordinateUnit::Degree,
                    "angstrom" => CoordinateUnit::Angstrom,
                    _ if kind == Some(MotionKind::Toward) => CoordinateUnit::Share,
                    _ => CoordinateUnit::Number,
                },
                moved_along: coordinate
                    .and_then(|_| moved.get(index))
                    .map(|moved| moved.iter().map(|atoms| numbers(atoms)).collect())
                    .unwrap_or_default(),
                from: ends(axis.values.first())?,
                to: ends(axis.values.last())?,
                step: match (coordinate, &plan.request().route) {
                    (Some(_), Route::Table { .. }) => None,
                    (Some(coordinate), _) => Some(Number::new(coordinate.range.step)?),
                    (None, _) => even.map(Number::new).transpose()?,
                },
                text: match plan.request().route {
                    Route::Coordinates => {
                        described.get(index).copied().unwrap_or_default().to_owned()
                    }
                    _ => path.describe().to_owned(),
                },
            })
        })
        .collect()
}

/// Atoms as users count them.
fn numbers(atoms: &[usize]) -> Vec<u32> {
    atoms.iter().map(|&atom| atom as u32 + 1).collect()
}

pub(crate) fn symmetry_record(plan: &SweepPlan) -> Result<SymmetryRecord, NotFinite> {
    let group = plan.path_group();
    Ok(SymmetryRecord {
        path_group: group.name.clone(),
        axes: group.convention.clone(),
        tolerance_angstrom: Number::new(plan.request().tolerance.0)?,
        near_misses: plan
            .near_misses()
            .iter()
            .map(|miss| {
                Ok(NearMiss {
                    group: miss.name.clone(),
                    tolerance_angstrom: Number::new(miss.tolerance_angstrom)?,
                    at: Vec::new(),
                })
            })
            .collect::<Result<_, _>>()?,
    })
}

fn point_record(
    sweep: &Sweep,
    index: usize,
    missing: &mut Vec<Missing>,
) -> Result<Point, FromScanError> {
    let plan = sweep.plan();
    let point = sweep.point(index)?;
    let levels = point
        .levels
        .iter()
        .map(|level| {
            let head = &plan.lines()[level.line];
            Ok(LevelRecord {
                energy: Number::new(level.energy)?,
                occupation: Number::new(level.occupation)?,
                line: Some(level.line as u32),
                irrep: plan.path_group().irreps[head.irrep].plain.clone(),
                degeneracy: level.degeneracy as u32,
                label: head.name.plain.clone(),
                valence_label: head.name.valence_plain.clone(),
                display: head.name.display.clone(),
                full_label: level.full_name.plain.clone(),
                full_display: level.full_name.display.clone(),
                full_valence_label: level.full_name.valence_plain.clone(),
                coefficients: None,
                populations: None,
                bonds: None,
                tags: None,
            })
        })
        .collect::<Result<_, NotFinite>>()?;
    Ok(Point {
        at: point
            .at
            .iter()
            .map(|&value| Number::new(value))
            .collect::<Result<_, _>>()?,
        positions: point
            .positions
            .iter()
            .map(|&p| Number::triple(p))
            .collect::<Result<_, _>>()?,
        point_group: point.point_group,
        sum: Number::or_missing(
            point.sum,
            &format!("/points/{index}/sum"),
            "not a finite number",
            missing,
        ),
        smallest_overlap_eigenvalue: Number::or_missing(
            point.smallest_overlap_eigenvalue,
            &format!("/points/{index}/smallest_overlap_eigenvalue"),
            "not a finite number",
            missing,
        ),
        levels,
        charges: None,
        overlap_populations: None,
    })
}

fn line_records(sweep: &Sweep) -> Result<Vec<LineRecord>, FromScanError> {
    let plan = sweep.plan();
    let last = sweep.points() - 1;
    plan.lines()
        .iter()
        .enumerate()
        .map(|(line, head)| {
            let (start, _) = sweep.full_name(line, 0);
            let (end, _) = sweep.full_name(line, last);
            let other = plan.other_axes_name(line);
            let special = sweep
                .special_points()
                .map(|(point, special)| {
                    let name = &special.names[line].0;
                    Ok(SpecialLabel {
                        at: Number::new(plan.values(point)[0])?,
                        point_group: special.group.clone(),
                        label: name.plain.clone(),
                        valence_label: name.valence_plain.clone(),
                        display: name.display.clone(),
                    })
                })
                .collect::<Result<_, NotFinite>>()?;
            Ok(LineRecord {
                id: line as u32,
                irrep: plan.path_group().irreps[head.irrep].plain.clone(),
                degeneracy: head.degeneracy as u32,
                label: head.name.plain.clone(),
                valence_label: head.name.valence_plain.clone(),
                display: head.name.display.clone(),
                passport: Passport {
                    start: start.plain.clone(),
                    end: end.plain.clone(),
                    other_axes: other.plain.clone(),
                    start_display: start.display.clone(),
                    end_display: end.display.clone(),
                    start_valence: start.valence_plain.clone(),
                    end_valence: end.valence_plain.clone(),
                    other_axes_valence: other.valence_plain.clone(),
                    special,
                },
                energies: sweep
                    .line_energies(line)
                    .into_iter()
                    .map(|energy| Ok(Some(Number::new(energy)?)))
                    .collect::<Result<_, NotFinite>>()?,
                certificate: Some(Certificate {
                    kind: CertificateKind::Symmetry,
                    intervals: Vec::new(),
                }),
            })
        })
        .collect()
}

/// The lowest sum among the points.
fn sum_minimum(points: &[Point]) -> Option<SumMinimum> {
    let (index, sum) = points
        .iter()
        .enumerate()
        .filter_map(|(index, point)| point.sum.map(|sum| (index, sum)))
        .min_by(|a, b| a.1.get().total_cmp(&b.1.get()))?;
    Some(SumMinimum {
        at: *points[index].at.first()?,
        sum,
        inside: index > 0 && index + 1 < points.len(),
    })
}

pub(crate) fn warnings(plan: &SweepPlan, provenance: &Provenance) -> Vec<Warning> {
    plan.notices()
        .iter()
        .map(|notice| Warning {
            code: notice.code.to_owned(),
            text: notice.text.clone(),
        })
        .chain(provenance.warnings.iter().cloned())
        .collect()
}
