//! `orbend plan`: what to compute next.

use orbend_report::{plan_document, plan_markdown, plan_text, qcschema_molecule, to_json};
use orbend_scan::reasons::{Distortions, HandOff, StartKind, usual_path};
use orbend_scan::shape::{Centre, ShapeRequest, ShapeVerdict};
use orbend_scan::{Request, ScanError, Sweep};
use orbend_structure::{Coordinate, write_xyz};

use super::geometry_text::geometry_text;
use super::route::{is_still, movement, route};
use super::sweep::in_pool;
use super::{provenance, resolve, text_options};
use crate::arguments::PlanArguments;
use crate::failure::Failure;
use crate::outputs::Outputs;
use crate::write::write_stdout;

pub(crate) fn run(arguments: &PlanArguments) -> Result<(), Failure> {
    let output = &arguments.output;
    let outputs = Outputs::check(&output.out, &["json", "md", "xyz", "qcschema.json"])?;
    let movement = movement(&arguments.coordinates)?;
    if movement.coordinates.len() > 1 && movement.route.is_none() {
        return Err(Failure::request("a grid has no path to plan along")
            .fix("give one coordinate; --with-bend, --with-stretch … move in step with it"));
    }
    let mut resolved = resolve(
        &arguments.geometry,
        movement.coordinates.clone(),
        &arguments.model,
        output.numbering,
    )?;
    let still = is_still(&movement, &arguments.coordinates, &resolved.geometry);
    let mut notes = Vec::new();
    if still {
        match usual_coordinate(&resolved.request) {
            Ok(coordinate) => resolved.request.coordinates = vec![coordinate],
            Err(reason) => notes.push(reason),
        }
    } else {
        resolved.request.route = route(
            &movement,
            &arguments.coordinates,
            &mut resolved.geometry,
            &arguments.model,
        )?;
    }
    let fail = |error: ScanError| Failure::scan(&error).within(&arguments.geometry);
    let (sweep, hand_off, distortions) = in_pool(arguments.jobs, || {
        let sweep = Sweep::run(resolved.request.plan()?)?;
        let verdicts = verdicts(&resolved.request);
        let hand_off = HandOff::new(&sweep, &verdicts)?;
        let distortions = distortions(&resolved.request, &hand_off)?;
        Ok::<_, ScanError>((sweep, hand_off, distortions))
    })?
    .map_err(fail)?;
    let mut provenance = provenance(&resolved.geometry, output.numbering);
    provenance
        .warnings
        .extend(notes.into_iter().map(|text| orbend_report::Warning {
            code: "no-path".to_owned(),
            text,
        }));
    let document = plan_document(&sweep, &hand_off, &distortions, &provenance)
        .map_err(|error| Failure::result(&error).within(&arguments.geometry))?;
    let options = text_options(output.numbering);
    outputs.write(|ending| {
        Ok(match ending {
            "json" => to_json(&document).map_err(Failure::document)?.into_bytes(),
            "md" => plan_markdown(&document, &options).into_bytes(),
            "qcschema.json" => {
                let molecule = &hand_off.starts[0].molecule;
                let unpaired = sweep.plan().electrons().unpaired();
                let molecule = qcschema_molecule(molecule, unpaired).map_err(Failure::document)?;
                to_json(&molecule).map_err(Failure::document)?.into_bytes()
            }
            _ => {
                let all = hand_off
                    .geometries(&sweep)
                    .map_err(|error| Failure::scan(&error))?;
                all.iter().map(write_xyz).collect::<String>().into_bytes()
            }
        })
    })?;
    if output.json {
        write_stdout(to_json(&document).map_err(Failure::document)?.as_bytes())
    } else {
        let start = geometry_text(&resolved.geometry, options.width);
        write_stdout((start + &plan_text(&document, &options)).as_bytes())
    }
}

/// The coordinate of the shape verdict: the bend or the pyramid at the only possible centre.
fn usual_coordinate(request: &Request) -> Result<Coordinate, String> {
    let (centre, motion) = Centre::find(&request.molecule, None).map_err(|error| {
        format!("no path was given and none is obvious, so this is about one geometry: {error}")
    })?;
    usual_path(&centre, motion).ok_or_else(|| {
        "no path was given and none is obvious, so this is about one geometry".to_owned()
    })
}

/// Of the first start geometry and of those of higher symmetry.
fn distortions(
    request: &Request,
    hand_off: &HandOff,
) -> Result<Vec<(usize, Distortions)>, ScanError> {
    let mut found = Vec::new();
    for (index, start) in hand_off.starts.iter().enumerate() {
        if index > 0 && start.kind != StartKind::HigherSymmetry {
            continue;
        }
        let mut request = request.clone();
        request.molecule = start.molecule.clone();
        request.configuration = None;
        if request.molecule.len() > 1 {
            found.push((index, Distortions::new(&request)?));
        }
    }
    Ok(found)
}

/// Verdicts of the charge asked for, then of one electron less and one more; empty where there is
/// no centre, without those that the electrons do not allow.
fn verdicts(request: &Request) -> Vec<ShapeVerdict> {
    let own = request.molecule.charge;
    let mut verdicts = Vec::new();
    for charge in [own, own + 1, own - 1] {
        let mut shape = ShapeRequest::new(request.clone());
        shape.flips = false;
        shape.request.route = orbend_scan::Route::Coordinates;
        shape.request.molecule.charge = charge;
        if charge != own {
            shape.request.molecule.unpaired = None;
            shape.request.configuration = None;
        }
        match shape.run() {
            Ok(verdict) => verdicts.push(verdict),
            Err(_) if charge == own => return Vec::new(),
            Err(_) => {}
        }
    }
    verdicts
}
