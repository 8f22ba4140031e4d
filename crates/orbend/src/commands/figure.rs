//! What the commands that draw have in common.

use std::path::Path;

use orbend_report::{
    Document, ElectronMarks, EnergyUnit, FigureError, FigureOptions, FigureWidth, Follow,
    Numbering, ShapeDocument, Theme, figure_pdf, figure_png, outline_text, read_document,
};

use crate::arguments::{
    EnergyUnitChoice, FigureArguments, FollowChoice, NumberingChoice, ThemeChoice, WidthChoice,
};
use crate::failure::Failure;

/// How a drawing becomes a file.
pub(crate) struct Rendering {
    dots_per_inch: f64,
    outline: bool,
}

impl Default for Rendering {
    /// Live text; the dots per inch that journals ask for.
    fn default() -> Self {
        Self {
            dots_per_inch: 600.0,
            outline: false,
        }
    }
}

impl Rendering {
    pub(crate) fn new(arguments: &FigureArguments) -> Result<Self, Failure> {
        if !(arguments.dpi.is_finite() && (36.0..=4800.0).contains(&arguments.dpi)) {
            return Err(Failure::request(format!(
                "--dpi {}: not a usable number of dots per inch",
                arguments.dpi
            ))
            .fix("give a number from 36 to 4800; journals ask for 300 to 1200"));
        }
        Ok(Self {
            dots_per_inch: arguments.dpi,
            outline: arguments.outline_text,
        })
    }

    /// The bytes of a figure in the form that the ending asks for.
    pub(crate) fn bytes(
        &self,
        figure: Result<String, FigureError>,
        ending: &str,
    ) -> Result<Vec<u8>, Failure> {
        let figure = figure.map_err(|error| failure(&error))?;
        let figure = if self.outline {
            outline_text(&figure).map_err(Failure::from_library)?
        } else {
            figure
        };
        match ending {
            "png" => figure_png(&figure, self.dots_per_inch).map_err(Failure::from_library),
            "pdf" => figure_pdf(&figure).map_err(Failure::document),
            _ => Ok(figure.into_bytes()),
        }
    }
}

/// A figure that cannot be drawn as asked for.
pub(crate) fn failure(error: &FigureError) -> Failure {
    let failure = Failure::request(error.to_string());
    match error {
        FigureError::UnknownLine { .. } => {
            failure.fix("name lines as in the text or the document, separated by commas")
        }
        FigureError::EmptyWindow { .. } => {
            failure.fix("widen --energies, or leave it out for all lines")
        }
        FigureError::Grid => failure.fix("name one coordinate, or write .json or .csv"),
        FigureError::TooFewPoints { .. } => {
            failure.fix("name a coordinate with a range, for example --bend 2-1-3=80..180:2")
        }
        FigureError::ElectronsOutside { .. } => {
            failure.fix("give --electrons-at a value inside the range")
        }
        FigureError::NoVerdict { .. } => failure.fix(
            "make one with the same molecule, charge and unpaired electrons: orbend shape … --out FILE.json",
        ),
        _ => failure,
    }
}

/// The figure's options.
pub(crate) fn options(
    arguments: &FigureArguments,
    which: NumberingChoice,
) -> Result<FigureOptions, Failure> {
    let energies = arguments
        .energies
        .as_deref()
        .map(energy_window)
        .transpose()?;
    Ok(FigureOptions {
        width: match arguments.width {
            WidthChoice::Column => FigureWidth::Column,
            WidthChoice::Page => FigureWidth::Page,
            WidthChoice::Slide => FigureWidth::Slide,
        },
        follow: match arguments.follow {
            FollowChoice::Energy => Follow::Energy,
            FollowChoice::Character => Follow::Character,
        },
        theme: match arguments.theme {
            ThemeChoice::Light => Theme::Light,
            ThemeChoice::Dark => Theme::Dark,
            ThemeChoice::Grey => Theme::Grey,
        },
        energy_unit: match arguments.energy_unit {
            EnergyUnitChoice::ElectronVolt => EnergyUnit::ElectronVolt,
            EnergyUnitChoice::Hartree => EnergyUnit::Hartree,
        },
        electrons: arguments
            .electrons_at
            .map_or(ElectronMarks::Clear, ElectronMarks::At),
        numbering: numbering(which),
        energies,
        lines: (!arguments.lines.is_empty()).then(|| arguments.lines.clone()),
        ..FigureOptions::default()
    })
}

pub(crate) fn numbering(which: NumberingChoice) -> Numbering {
    match which {
        NumberingChoice::Core => Numbering::Core,
        NumberingChoice::Valence => Numbering::Valence,
    }
}

/// Reads the document of `--shape`.
pub(crate) fn shape_document(path: &Path) -> Result<ShapeDocument, Failure> {
    let place = format!("--shape {}", path.display());
    let text = std::fs::read_to_string(path).map_err(|cause| {
        Failure::request(format!("{place}: cannot read it: {cause}"))
            .fix("name a file that orbend shape has written with --out FILE.json")
    })?;
    match read_document(&text) {
        Ok(Document::Shape(document)) => Ok(*document),
        Ok(_) => Err(Failure::request(format!("{place}: not a shape document"))
            .fix("name a file that orbend shape has written with --out FILE.json")),
        Err(error) => Err(Failure::request(format!("{place}: {error}"))
            .fix("name a file that orbend shape has written with --out FILE.json")),
    }
}

fn energy_window(text: &str) -> Result<(f64, f64), Failure> {
    text.split_once("..")
        .and_then(|(from, to)| Some((from.trim().parse().ok()?, to.trim().parse().ok()?)))
        .filter(|&(from, to): &(f64, f64)| from.is_finite() && to.is_finite() && from < to)
        .ok_or_else(|| {
            Failure::request(format!("--energies {text}: not an energy window"))
                .fix("write from..to in eV with from below to, for example -20..0")
        })
}
