//! `orbend levels`: one geometry.

use orbend_report::{
    FigureOptions, SurfaceChoiceError, distortions_record, fragments_record, interaction_figure,
    levels_csv, levels_document, levels_figure, levels_text, named_surfaces, surfaces_glb,
    surfaces_text, to_json,
};
use orbend_scan::SURFACE_SHARES;

use orbend_scan::reasons::{Distortions, FragmentAnalysis};

use super::figure::{self, Rendering};
use super::fragments::{fragment_failure, fragments};
use super::geometry_text::geometry_text;
use super::sweep::in_pool;
use super::{csv, provenance, resolve, text_options};
use crate::arguments::LevelsArguments;
use crate::failure::Failure;
use crate::outputs::Outputs;
use crate::write::write_stdout;

pub(crate) fn run(arguments: &LevelsArguments) -> Result<(), Failure> {
    let output = &arguments.output;
    let outputs = Outputs::check(
        &output.out,
        &["json", "csv", "svg", "png", "pdf", "glb", "xyz"],
    )?;
    check_surface(arguments, &outputs)?;
    let resolved = resolve(
        &arguments.geometry,
        Vec::new(),
        &arguments.model,
        output.numbering,
    )?;
    let sweep = in_pool(arguments.jobs, || resolved.request.run())?
        .map_err(|error| Failure::scan(&error).within(&arguments.geometry))?;
    let mut document = levels_document(&sweep, &provenance(&resolved.geometry, output.numbering))
        .map_err(|error| Failure::result(&error).within(&arguments.geometry))?;
    if arguments.distortions {
        let distortions = in_pool(arguments.jobs, || Distortions::new(&resolved.request))?
            .map_err(|error| Failure::scan(&error).within(&arguments.geometry))?;
        document.distortions =
            Some(distortions_record(&distortions, None).map_err(Failure::document)?);
    }
    if let Some(text) = &arguments.fragments {
        let fragments = fragments(text, resolved.request.molecule.len())?;
        let analysis = FragmentAnalysis::new(&sweep, 0, &fragments).map_err(fragment_failure)?;
        document.fragments =
            Some(fragments_record(sweep.plan(), &analysis).map_err(Failure::document)?);
    }
    let surfaces = in_pool(arguments.jobs, || {
        named_surfaces(
            &sweep,
            &arguments.surface.surface,
            figure::numbering(output.numbering),
            arguments.surface.share,
        )
    })?
    .map_err(|error| match error {
        SurfaceChoiceError::Scan(error) => Failure::scan(&error),
        other => Failure::from_library(other),
    })?;
    outputs.write(|ending| {
        Ok(match ending {
            "json" => to_json(&document).map_err(Failure::document)?.into_bytes(),
            "csv" => csv(|out| levels_csv(&document, out))?,
            "glb" => surfaces_glb(&document, &surfaces).map_err(Failure::from_library)?,
            "xyz" => resolved.geometry.to_xyz().into_bytes(),
            _ => {
                let options = FigureOptions {
                    numbering: figure::numbering(output.numbering),
                    ..FigureOptions::default()
                };
                let figure = if document.fragments.is_some() {
                    interaction_figure(&document, &options)
                } else {
                    levels_figure(&document, &options)
                };
                Rendering::default().bytes(figure, ending)?
            }
        })
    })?;
    if output.json {
        write_stdout(to_json(&document).map_err(Failure::document)?.as_bytes())
    } else {
        let options = text_options(output.numbering);
        let start = geometry_text(&resolved.geometry, options.width);
        let text = start + &levels_text(&document, &options) + &surfaces_text(&surfaces, &options);
        write_stdout(text.as_bytes())
    }
}

/// Surfaces need a file and a file needs surfaces, with a share that can be enclosed.
fn check_surface(arguments: &LevelsArguments, outputs: &Outputs<'_>) -> Result<(), Failure> {
    let asked = &arguments.surface;
    match (asked.surface.is_empty(), outputs.any(&["glb"])) {
        (true, true) => {
            return Err(Failure::request(
                "a .glb file holds the surfaces of orbitals, but none is named",
            )
            .fix("name them: --surface 5a1"));
        }
        (false, false) => {
            return Err(Failure::request(format!(
                "--surface {}: there is no file to write it to",
                asked.surface.join(",")
            ))
            .fix("add --out orbital.glb"));
        }
        _ => {}
    }
    // The lattice keeps its promise of the share in this range.
    if !SURFACE_SHARES.contains(&asked.share) {
        return Err(Failure::request(format!(
            "--share {}: not a share of the density that a surface can enclose",
            asked.share
        ))
        .fix("give a number from 0.01 to 0.99; 0.8 is the default"));
    }
    Ok(())
}
