//! One file per command; what several need stands here.

pub(crate) mod figure;
mod fragments;
mod geometry_text;
pub(crate) mod levels;
pub(crate) mod params;
pub(crate) mod plan;
mod route;
pub(crate) mod shape;
pub(crate) mod sweep;
mod why;

use std::io::IsTerminal;
use std::path::Path;

use orbend_hamiltonian::{Coupling, Method, ParameterError, ParameterSet};
use orbend_report::{Provenance, TextOptions};
use orbend_scan::{Configuration, Request, Route};
use orbend_structure::{Angstrom, Coordinate};

use crate::arguments::{CouplingChoice, ModelArguments, NumberingChoice};
use crate::failure::Failure;
use crate::geometry::{self, Geometry};

/// The request and where its geometry came from.
pub(crate) struct Resolved {
    pub(crate) request: Request,
    pub(crate) geometry: Geometry,
}

/// Reads the geometry and the model; nothing has been computed then.
pub(crate) fn resolve(
    geometry: &str,
    coordinates: Vec<Coordinate>,
    model: &ModelArguments,
    numbering: NumberingChoice,
) -> Result<Resolved, Failure> {
    let geometry = geometry::read(geometry, model)?;
    if !(1e-8..=0.5).contains(&model.tolerance) {
        return Err(Failure::request(format!(
            "--tolerance {}: not a usable distance",
            model.tolerance
        ))
        .fix("give a distance from 1e-8 to 0.5 Å; 0.001 is the default"));
    }
    if !(model.k.is_finite() && (0.5..=4.0).contains(&model.k)) {
        return Err(
            Failure::request(format!("--k {}: not a usable constant", model.k))
                .fix("give a number from 0.5 to 4; 1.75 is customary"),
        );
    }
    let method = Method {
        coupling: match model.coupling {
            CouplingChoice::Constant => Coupling::Constant,
            CouplingChoice::Weighted => Coupling::Weighted,
        },
        k: model.k,
        ..Method::default()
    };
    let configuration = model
        .occupy
        .as_deref()
        .map(Configuration::parse)
        .transpose()
        .map_err(|error| Failure::request(format!("--occupy: {error}")))?;
    let request = Request {
        molecule: geometry.molecule.clone(),
        coordinates,
        route: Route::Coordinates,
        parameters: parameter_set(model.params.as_deref(), &model.variant)?,
        method,
        configuration,
        numbering: match numbering {
            NumberingChoice::Core => orbend_scan::Numbering::Core,
            NumberingChoice::Valence => orbend_scan::Numbering::Valence,
        },
        tolerance: Angstrom(model.tolerance),
    };
    Ok(Resolved { request, geometry })
}

/// A built-in set by name, or the default set overlaid by a file.
pub(crate) fn parameter_set(
    name: Option<&str>,
    variants: &[String],
) -> Result<ParameterSet, Failure> {
    let set = match name {
        None => ParameterSet::default(),
        Some(name) if Path::new(name).extension().is_some() || name.contains(['/', '\\']) => {
            let text = std::fs::read_to_string(name).map_err(|cause| {
                Failure::request(format!("cannot read the parameter file {name}: {cause}"))
                    .fix("name a TOML file that exists, or a built-in set")
            })?;
            ParameterSet::default()
                .overlay(&text, name)
                .map_err(|error| parameter_failure(&error))?
        }
        Some(name) => ParameterSet::builtin(name).map_err(|error| parameter_failure(&error))?,
    };
    set.choose(variants)
        .map_err(|error| parameter_failure(&error))
}

fn parameter_failure(error: &ParameterError) -> Failure {
    match error {
        ParameterError::InFile(problems) => Failure::request(problems.render(false)),
        other => Failure::request(other.to_string()),
    }
}

/// What the documents say about the input.
pub(crate) fn provenance(geometry: &Geometry, numbering: NumberingChoice) -> Provenance {
    Provenance {
        geometry: geometry.record.clone(),
        valence_numbering: numbering == NumberingChoice::Valence,
        warnings: geometry.warnings.clone(),
    }
}

/// How text is laid out on this standard output.
pub(crate) fn text_options(numbering: NumberingChoice) -> TextOptions {
    let terminal = std::io::stdout().is_terminal();
    let width = if terminal {
        terminal_size::terminal_size().map_or(80, |(width, _)| usize::from(width.0).min(120))
    } else {
        80
    };
    TextOptions {
        width,
        unicode: !terminal || shows_unicode(|name| std::env::var(name).ok()),
        numbering: figure::numbering(numbering),
        ..TextOptions::default()
    }
}

/// Whether a terminal shows letters beyond ASCII: not the Linux console (its fonts have no braille),
/// nor a locale that names another character set (POSIX.1-2017, 8.2).
fn shows_unicode(variable: impl Fn(&str) -> Option<String>) -> bool {
    if variable("TERM").is_some_and(|term| matches!(term.as_str(), "linux" | "dumb")) {
        return false;
    }
    let locale = ["LC_ALL", "LC_CTYPE", "LANG"]
        .into_iter()
        .filter_map(variable)
        .find(|value| !value.is_empty());
    locale.is_none_or(|locale| {
        let locale = locale.to_ascii_lowercase();
        locale.contains("utf-8") || locale.contains("utf8")
    })
}

/// The bytes of a table.
pub(crate) fn csv(
    table: impl FnOnce(&mut Vec<u8>) -> Result<(), orbend_report::CsvError>,
) -> Result<Vec<u8>, Failure> {
    let mut bytes = Vec::new();
    table(&mut bytes).map_err(Failure::document)?;
    Ok(bytes)
}

#[cfg(test)]
mod tests {
    use super::shows_unicode;

    #[test]
    fn terminals_without_unicode_get_ascii() {
        let with = |pairs: &[(&str, &str)]| {
            shows_unicode(|name| {
                let found = pairs.iter().find(|pair| pair.0 == name);
                found.map(|pair| pair.1.to_owned())
            })
        };
        assert!(with(&[("TERM", "xterm-256color"), ("LANG", "de_DE.UTF-8")]));
        assert!(with(&[("TERM", "xterm")]));
        assert!(!with(&[("TERM", "linux"), ("LANG", "C.UTF-8")]));
        assert!(!with(&[("LANG", "en_US.ISO-8859-1")]));
        assert!(!with(&[("LC_ALL", "C"), ("LANG", "en_US.UTF-8")]));
        assert!(with(&[("LC_ALL", ""), ("LANG", "en_US.utf8")]));
    }
}
