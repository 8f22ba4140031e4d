//! `orbend levels`: one geometry.

use orbend_report::{
    FigureOptions, distortions_record, fragments_record, interaction_figure, levels_csv,
    levels_document, levels_figure, levels_text, to_json,
};

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
    let outputs = Outputs::check(&output.out, &["json", "csv", "svg", "png", "pdf", "xyz"])?;
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
    outputs.write(|ending| {
        Ok(match ending {
            "json" => to_json(&document).map_err(Failure::document)?.into_bytes(),
            "csv" => csv(|out| levels_csv(&document, out))?,
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
        write_stdout((start + &levels_text(&document, &options)).as_bytes())
    }
}
