//! `orbend sweep`: the correlation diagram along a coordinate, or a grid.
//!
//! A long sweep of which only a table is asked for is written as it runs; what is said about it
//! comes from some of its points.

use orbend_report::{
    FigureError, FigureOptions, Support, add_populations, end_pictures, passport_text, stream_csv,
    sweep_csv, sweep_document, sweep_document_with_orbitals, sweep_figure, sweep_fragments_text,
    sweep_page, sweep_text, to_json,
};
use orbend_scan::Sweep;

use super::figure::{self, Rendering};
use super::fragments::{along, fragments};
use super::geometry_text::geometry_text;
use super::route::{movement, route};
use super::{csv, provenance, resolve, text_options};
use crate::arguments::{NumberingChoice, SweepArguments};
use crate::failure::Failure;
use crate::geometry::Geometry;
use crate::outputs::Outputs;
use crate::write::{Whole, write_stdout};

/// A sweep with more levels than this over all its points is long.
const LONG: usize = 100_000;

pub(crate) fn run(arguments: &SweepArguments) -> Result<(), Failure> {
    let output = &arguments.output;
    let mut outputs = Outputs::check(
        &output.out,
        &["json", "csv", "svg", "png", "pdf", "html", "xyz"],
    )?;
    let mut figure = figure::options(&arguments.figure, output.numbering)?;
    let rendering = Rendering::new(&arguments.figure)?;
    let shape = arguments.figure.shape.as_deref();
    let shape = shape.map(figure::shape_document).transpose()?;
    let movement = movement(&arguments.coordinates)?;
    let mut resolved = resolve(
        &arguments.geometry,
        movement.coordinates.clone(),
        &arguments.model,
        output.numbering,
    )?;
    resolved.request.route = route(
        &movement,
        &arguments.coordinates,
        &mut resolved.geometry,
        &arguments.model,
    )?;
    let mut plan = resolved
        .request
        .plan()
        .map_err(|error| Failure::scan(&error).within(&arguments.geometry))?;
    if plan.path().axes().len() > 1 && outputs.any(&["svg", "png", "pdf", "html"]) {
        return Err(figure::failure(&FigureError::Grid));
    }
    let points = plan.points();
    let mut table = None;
    let long = points * plan.lines().len() > LONG;
    if let (true, false, Some(path)) = (long, output.json, outputs.streamed()) {
        table = path.map(Whole::begin).transpose()?;
        let streamed = in_pool(arguments.jobs, || stream_csv(&plan, table.as_mut()))?
            .map_err(|error| Failure::stream(&error).within(&arguments.geometry))?;
        plan = plan.only(streamed.overview());
        outputs = outputs.without_table();
    }
    let sweep = in_pool(arguments.jobs, || Sweep::run(plan))?
        .map_err(|error| Failure::scan(&error).within(&arguments.geometry))?;
    let asked = super::why::asked(&sweep, &arguments.why)?;
    let mut document = sweep_document(&sweep, &provenance(&resolved.geometry, output.numbering))
        .map_err(|error| Failure::result(&error).within(&arguments.geometry))?;
    if arguments.populations {
        if document.lines.is_none() {
            return Err(
                Failure::request("--populations: a grid has no lines to describe")
                    .fix("sweep along one coordinate"),
            );
        }
        add_populations(&sweep, &mut document)
            .map_err(|error| Failure::from_library(error.to_string()))?;
    }
    if let Some(text) = &arguments.fragments {
        let fragments = fragments(text, resolved.request.molecule.len())?;
        document.fragments = Some(along(&sweep, &fragments)?);
    }
    if !asked.is_empty() {
        document.why = Some(super::why::records(&sweep, &asked)?);
    }
    if let Some(shape) = &shape {
        let support = Support::of(shape, &document).map_err(|error| figure::failure(&error))?;
        figure.support = Some(support);
    }
    if arguments.figure.orbitals && document.lines.is_some() {
        figure.pictures = Some(end_pictures(&sweep).map_err(|error| Failure::scan(&error))?);
    }
    outputs.write(|ending| {
        Ok(match ending {
            "json" => to_json(&document).map_err(Failure::document)?.into_bytes(),
            "csv" => csv(|out| sweep_csv(&document, out))?,
            "html" => page(&sweep, &resolved.geometry, output.numbering, &figure)?,
            "xyz" => resolved.geometry.to_xyz().into_bytes(),
            _ => rendering.bytes(sweep_figure(&document, &figure), ending)?,
        })
    })?;
    if let Some(table) = table {
        table.finish()?;
    }
    if output.json {
        write_stdout(to_json(&document).map_err(Failure::document)?.as_bytes())
    } else if arguments.passport {
        write_stdout(passport_text(&document, &text_options(output.numbering)).as_bytes())
    } else {
        let mut options = text_options(output.numbering);
        options.points = Some(points);
        let start = geometry_text(&resolved.geometry, options.width);
        let mut text = start + &sweep_text(&document, &options);
        if let Some(records) = &document.fragments {
            text.push('\n');
            text.push_str(&sweep_fragments_text(records, &options));
        }
        write_stdout(text.as_bytes())
    }
}

/// The page, with the orbitals at every point.
fn page(
    sweep: &Sweep,
    geometry: &Geometry,
    numbering: NumberingChoice,
    figure: &FigureOptions,
) -> Result<Vec<u8>, Failure> {
    let document = sweep_document_with_orbitals(sweep, &provenance(geometry, numbering))
        .map_err(|error| Failure::running(error.to_string()))?;
    let page =
        sweep_page(&document, figure).map_err(|error| Failure::request(error.to_string()))?;
    Ok(page.into_bytes())
}

/// Runs on a pool of its own when a number of threads is asked for.
pub(crate) fn in_pool<T: Send>(
    jobs: Option<usize>,
    work: impl FnOnce() -> T + Send,
) -> Result<T, Failure> {
    let Some(jobs) = jobs else { return Ok(work()) };
    if !(1..=1024).contains(&jobs) {
        return Err(
            Failure::request(format!("--jobs {jobs}: not a usable number of threads"))
                .fix("give a number from 1 to 1024"),
        );
    }
    let pool = rayon::ThreadPoolBuilder::new()
        .num_threads(jobs)
        .build()
        .map_err(|error| Failure::running(format!("cannot start {jobs} threads: {error}")))?;
    Ok(pool.install(work))
}
