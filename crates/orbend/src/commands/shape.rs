//! `orbend shape`: the verdict of one molecule, of a series of electron counts, or of several
//! molecules.

use orbend_report::{
    FigureOptions, Provenance, Warning, shape_csv, shape_document, shape_figure, shape_text,
    to_json,
};
use orbend_scan::shape::{ShapeError, ShapeRequest, ShapeVerdict};

use orbend_structure::{Coordinate, CoordinateKind};

use super::figure::Rendering;
use super::sweep::in_pool;
use super::{csv, provenance, resolve, text_options};
use crate::arguments::{CouplingChoice, ModelArguments, ShapeArguments};
use crate::failure::Failure;
use crate::outputs::Outputs;
use crate::write::write_stdout;

/// Fillings whose leading sum lies more than this (eV) above the lowest one are left out of
/// `--unpaired all`.
const WINDOW_EV: f64 = 10.0;
/// Most unpaired electrons above the lowest possible number that `--unpaired all` tries.
const MOST_UNPAIRED: u32 = 4;

/// Which numbers of unpaired electrons are asked for.
enum Spins {
    One(Option<u32>),
    All,
}

pub(crate) fn run(arguments: &ShapeArguments) -> Result<(), Failure> {
    let output = &arguments.output;
    let outputs = Outputs::check(&output.out, &["json", "csv", "svg", "png", "pdf"])?;
    let charges = arguments.charges.as_deref().map(charges).transpose()?;
    let spins = spins(arguments.unpaired.as_deref())?;
    if arguments.centre == Some(0) {
        return Err(Failure::request("--centre 0: atoms are counted from 1"));
    }
    let coordinate = coordinate(arguments)?;
    let verdicts = in_pool(arguments.jobs, || {
        let mut verdicts = Vec::new();
        for geometry in &arguments.geometries {
            molecule(
                arguments,
                geometry,
                coordinate.as_ref(),
                charges.as_deref(),
                &spins,
                &mut verdicts,
            )?;
        }
        Ok::<_, Failure>(verdicts)
    })??;
    let document = shape_document(&verdicts)
        .map_err(|error| Failure::running(error.to_string()))?
        .ok_or_else(|| Failure::request("no geometry was given"))?;
    outputs.write(|ending| {
        Ok(match ending {
            "json" => to_json(&document).map_err(Failure::document)?.into_bytes(),
            "csv" => csv(|out| shape_csv(&document, out))?,
            _ => Rendering::default()
                .bytes(shape_figure(&document, &FigureOptions::default()), ending)?,
        })
    })?;
    if output.json {
        write_stdout(to_json(&document).map_err(Failure::document)?.as_bytes())
    } else {
        write_stdout(shape_text(&document, &text_options(output.numbering)).as_bytes())
    }
}

/// The coordinate that the user wants judged, if any; the command line allows one.
fn coordinate(arguments: &ShapeArguments) -> Result<Option<Coordinate>, Failure> {
    let given = [
        (CoordinateKind::Bend, &arguments.bend),
        (CoordinateKind::Stretch, &arguments.stretch),
        (CoordinateKind::Twist, &arguments.twist),
        (CoordinateKind::Pyramid, &arguments.pyramid),
    ];
    let found = given
        .into_iter()
        .find_map(|(kind, text)| Some((kind, text.as_deref()?)));
    found
        .map(|(kind, text)| Coordinate::parse(kind, text))
        .transpose()
        .map_err(|error| Failure::request(format!("--{error}")))
}

/// The verdicts of one geometry: one, or one for each charge and number of unpaired electrons.
fn molecule(
    arguments: &ShapeArguments,
    geometry: &str,
    coordinate: Option<&Coordinate>,
    charges: Option<&[i32]>,
    spins: &Spins,
    verdicts: &mut Vec<(ShapeVerdict, Provenance)>,
) -> Result<(), Failure> {
    let model = model(arguments, spins);
    let resolved = resolve(geometry, Vec::new(), &model, arguments.output.numbering)?;
    let provenance = provenance(&resolved.geometry, arguments.output.numbering);
    let own = resolved.request.molecule.charge;
    for &charge in charges.unwrap_or(&[own]) {
        let mut request = ShapeRequest::new(resolved.request.clone());
        request.centre = arguments.centre.map(|atom| atom - 1);
        request.coordinate = coordinate.cloned();
        request.repulsion = arguments.repulsion;
        request.request.molecule.charge = charge;
        if charges.is_some() {
            request.request.molecule.unpaired = match spins {
                Spins::One(unpaired) => *unpaired,
                Spins::All => None,
            };
        }
        match spins {
            Spins::One(_) => verdicts.push((verdict(&request)?, provenance.clone())),
            Spins::All => all_fillings(&request, &provenance, verdicts)?,
        }
    }
    Ok(())
}

/// Every number of unpaired electrons within the window.
fn all_fillings(
    request: &ShapeRequest,
    provenance: &Provenance,
    verdicts: &mut Vec<(ShapeVerdict, Provenance)>,
) -> Result<(), Failure> {
    let mut request = request.clone();
    request.request.molecule.unpaired = None;
    let first = verdict(&request)?;
    let mut provenance = provenance.clone();
    provenance.warnings.push(Warning {
        code: "spin-window".to_owned(),
        text: format!(
            "fillings with up to {MOST_UNPAIRED} more unpaired electrons whose polarised sum lies within \
             {WINDOW_EV} eV of the lowest one; their order is not claimed: the method knows no multiplets"
        ),
    });
    let electrons = first.plan.electrons();
    let (lowest, total) = (electrons.unpaired(), electrons.total());
    let orbitals = first.plan.basis().len() as u32;
    let most = total.min(2 * orbitals - total).min(lowest + MOST_UNPAIRED);
    let floor = least(&first);
    verdicts.push((first, provenance.clone()));
    for unpaired in (lowest + 2..=most).step_by(2) {
        request.request.molecule.unpaired = Some(unpaired);
        let next = verdict(&request)?;
        if least(&next) - floor <= WINDOW_EV {
            verdicts.push((next, provenance.clone()));
        }
    }
    Ok(())
}

/// Lowest point of the leading sum, eV.
fn least(verdict: &ShapeVerdict) -> f64 {
    verdict.sums.first().map_or(f64::INFINITY, |sum| {
        sum.sums
            .iter()
            .copied()
            .filter(|sum| sum.is_finite())
            .fold(f64::INFINITY, f64::min)
    })
}

fn verdict(request: &ShapeRequest) -> Result<ShapeVerdict, Failure> {
    request.run().map_err(|error| match &error {
        ShapeError::Scan(scan) => Failure::scan(scan),
        _ => Failure::request(error.to_string()),
    })
}

fn model(arguments: &ShapeArguments, spins: &Spins) -> ModelArguments {
    ModelArguments {
        charge: arguments.charge,
        unpaired: match spins {
            Spins::One(unpaired) => *unpaired,
            Spins::All => None,
        },
        occupy: arguments.occupy.clone(),
        params: arguments.params.clone(),
        variant: arguments.variant.clone(),
        coupling: CouplingChoice::Constant,
        k: 1.75,
        bond: arguments.bond.clone(),
        unit: arguments.unit,
        tolerance: arguments.tolerance,
        symmetrize: None,
    }
}

/// `-1..+2`: every charge from the first to the last.
fn charges(text: &str) -> Result<Vec<i32>, Failure> {
    text.split_once("..")
        .and_then(|(from, to)| {
            Some((
                from.trim().parse::<i32>().ok()?,
                to.trim().parse::<i32>().ok()?,
            ))
        })
        .filter(|&(from, to)| from <= to && to.abs_diff(from) <= 20)
        .map(|(from, to)| (from..=to).rev().collect())
        .ok_or_else(|| {
            Failure::request(format!("--charges {text}: not a range of charges"))
                .fix("write from..to with from below to and at most 21 charges, for example -1..+2")
        })
}

fn spins(text: Option<&str>) -> Result<Spins, Failure> {
    match text {
        None => Ok(Spins::One(None)),
        Some("all") => Ok(Spins::All),
        Some(word) => word
            .parse()
            .map(|number| Spins::One(Some(number)))
            .map_err(|_| {
                Failure::request(format!("--unpaired {word}: not a number of electrons"))
                    .fix("give a number such as 2, or `all`")
            }),
    }
}
