//! From the words of the command line to the path of a sweep.

use std::path::Path;

use orbend_scan::{MappingChoice, Route};
use orbend_structure::{Coordinate, CoordinateKind, FrameValues, Range};

use crate::arguments::{CoordinateArguments, ModelArguments};
use crate::failure::Failure;
use crate::geometry::{self, Geometry};

/// Coordinates and, where they are not simply swept, how they move.
pub(crate) struct Movement {
    pub(crate) coordinates: Vec<Coordinate>,
    pub(crate) route: Option<Route>,
}

/// Reads the coordinates and the files that they name.
pub(crate) fn movement(arguments: &CoordinateArguments) -> Result<Movement, Failure> {
    let mut coordinates = parse_all(
        arguments,
        [
            &arguments.bend,
            &arguments.stretch,
            &arguments.twist,
            &arguments.pyramid,
        ],
        "",
    )?;
    let along = parse_all(
        arguments,
        [
            &arguments.with_bend,
            &arguments.with_stretch,
            &arguments.with_twist,
            &arguments.with_pyramid,
        ],
        "with-",
    )?;
    let other = arguments.toward.is_some() || arguments.along_mode.is_some();
    if (other || arguments.table.is_some()) && !(coordinates.is_empty() && along.is_empty()) {
        return Err(
            Failure::request("a path of its own and coordinates: one of them has to go").fix(
                "give either --toward, --along-mode or --table, or coordinates such as --bend",
            ),
        );
    }
    if let Some(file) = &arguments.table {
        let (coordinates, rows) = table(file, arguments.alone)?;
        return Ok(Movement {
            coordinates,
            route: Some(Route::Table { rows }),
        });
    }
    if along.is_empty() {
        return match coordinates.len() {
            0..=2 => Ok(Movement { coordinates, route: None }),
            more => Err(Failure::request(format!("{more} coordinates: a grid has two at most"))
                .fix("leave some out, or run one sweep for each value; --with-bend, --with-stretch … move in step")),
        };
    }
    if coordinates.len() != 1 {
        return Err(Failure::request(format!(
            "{} coordinates lead those that move in step",
            coordinates.len()
        ))
        .fix("give exactly one of --bend, --stretch, --twist, --pyramid"));
    }
    coordinates.extend(along);
    Ok(Movement {
        coordinates,
        route: Some(Route::Together),
    })
}

/// Whether nothing says how the atoms move.
pub(crate) fn is_still(
    movement: &Movement,
    arguments: &CoordinateArguments,
    geometry: &Geometry,
) -> bool {
    movement.route.is_none()
        && movement.coordinates.is_empty()
        && arguments.toward.is_none()
        && arguments.along_mode.is_none()
        && geometry.frames.len() <= 1
}

/// The route that the geometry's file and the arguments make together.
pub(crate) fn route(
    movement: &Movement,
    arguments: &CoordinateArguments,
    geometry: &mut Geometry,
    model: &ModelArguments,
) -> Result<Route, Failure> {
    if let Some(route) = &movement.route {
        return Ok(route.clone());
    }
    if let Some(file) = &arguments.toward {
        let other = geometry::read(&file.to_string_lossy(), model)?;
        let mut end = other.molecule;
        end.charge = geometry.molecule.charge;
        return Ok(Route::Toward {
            other: Box::new(end),
            points: arguments.steps,
            choice: MappingChoice {
                pairs: pairs(&arguments.map)?,
                keep: arguments.keep.clone(),
            },
        });
    }
    if let Some(text) = &arguments.along_mode {
        let Some(displacement) = geometry.displacement.clone() else {
            return Err(Failure::request("--along-mode: the geometry has no displacement vectors")
                .fix("give an extended XYZ file with Properties=species:S:1:pos:R:3:displacement:R:3"));
        };
        return Ok(Route::AlongMode {
            displacement,
            range: range(text)?,
        });
    }
    if !movement.coordinates.is_empty() {
        return Ok(Route::Coordinates);
    }
    if geometry.frames.len() > 1 {
        geometry
            .warnings
            .retain(|warning| warning.code != "first-frame");
        return Ok(Route::Frames {
            frames: geometry.frames.clone(),
            values: FrameValues::Number,
        });
    }
    Err(Failure::request("no coordinate: a sweep needs something that moves")
        .fix("add for example --bend 2-1-3=90..180:2, --stretch, --twist, --pyramid, --toward FILE, or give a file of several geometries"))
}

/// `7=10`: atoms of the start and of the end, counted from 1.
fn pairs(words: &[String]) -> Result<Vec<(usize, usize)>, Failure> {
    let number = |word: &str| word.trim().parse::<usize>().ok()?.checked_sub(1);
    words
        .iter()
        .map(|word| {
            word.split_once('=')
                .and_then(|(from, to)| Some((number(from)?, number(to)?)))
                .ok_or_else(|| {
                    Failure::request(format!("--map {word}: not a pair of atoms"))
                        .fix("write an atom of this file, `=` and its atom in the other file, for example 7=10")
                })
        })
        .collect()
}

fn parse_all(
    arguments: &CoordinateArguments,
    texts: [&Vec<String>; 4],
    prefix: &str,
) -> Result<Vec<Coordinate>, Failure> {
    let kinds = [
        CoordinateKind::Bend,
        CoordinateKind::Stretch,
        CoordinateKind::Twist,
        CoordinateKind::Pyramid,
    ];
    let mut coordinates = Vec::new();
    for (kind, texts) in kinds.into_iter().zip(texts) {
        for text in texts {
            let mut coordinate = Coordinate::parse(kind, text)
                .map_err(|error| Failure::request(format!("--{prefix}{error}")))?;
            coordinate.alone = arguments.alone;
            coordinates.push(coordinate);
        }
    }
    Ok(coordinates)
}

/// `FROM..TO:STEP`.
fn range(text: &str) -> Result<Range, Failure> {
    let bad = || {
        Failure::request(format!("--along-mode {text}: not a range of amplitudes"))
            .fix("write from..to:step, for example -1..1:0.1")
    };
    let (from, rest) = text.split_once("..").ok_or_else(bad)?;
    let (to, step) = rest.split_once(':').ok_or_else(bad)?;
    let number = |word: &str| word.trim().parse::<f64>().map_err(|_| bad());
    Range::new(number(from)?, number(to)?, number(step)?)
        .map_err(|error| Failure::request(format!("--along-mode {text}: {error}")))
}

/// Coordinates and rows of a CSV table.
fn table(file: &Path, alone: bool) -> Result<(Vec<Coordinate>, Vec<Vec<f64>>), Failure> {
    let name = file.display();
    let text = std::fs::read_to_string(file).map_err(|cause| {
        Failure::request(format!("cannot read the table {name}: {cause}"))
            .fix("name a CSV file with a heading such as `bend 2-1-3,stretch 1-2`")
    })?;
    let mut lines = text
        .lines()
        .enumerate()
        .filter(|(_, line)| !line.trim().is_empty());
    let heading = lines.next().map(|(_, line)| line).unwrap_or_default();
    let mut rows = Vec::new();
    for (index, line) in lines {
        let row = line
            .split(',')
            .map(|cell| {
                cell.trim().trim_matches('"').parse::<f64>().map_err(|_| {
                    Failure::request(format!(
                        "{name}: line {}: `{}` is no number",
                        index + 1,
                        cell.trim()
                    ))
                    .fix("write one number per coordinate, separated by commas")
                })
            })
            .collect::<Result<Vec<f64>, Failure>>()?;
        rows.push(row);
    }
    let mut coordinates = Vec::new();
    for (column, cell) in heading.split(',').enumerate() {
        let cell = cell.trim().trim_matches('"').trim_start_matches('\u{feff}');
        let words: Vec<&str> = cell.split_whitespace().collect();
        let kind = match words.first().copied() {
            Some("bend") => CoordinateKind::Bend,
            Some("stretch") => CoordinateKind::Stretch,
            Some("twist") => CoordinateKind::Twist,
            Some("pyramid") => CoordinateKind::Pyramid,
            _ => {
                return Err(
                    Failure::request(format!("{name}: `{cell}` names no coordinate"))
                        .fix("write a heading such as `bend 2-1-3,stretch 1-2`"),
                );
            }
        };
        let values = rows.iter().filter_map(|row| row.get(column).copied());
        let low = values.clone().fold(f64::INFINITY, f64::min);
        let high = values.fold(f64::NEG_INFINITY, f64::max);
        // The rows hold the values; a range only has to be one.
        let (low, high) = if high > low {
            (low, high)
        } else {
            (0.999 * high, high)
        };
        let text = format!(
            "{}={low}..{high}:{}",
            words.get(1).copied().unwrap_or_default(),
            high - low
        );
        let mut coordinate = Coordinate::parse(kind, &text)
            .map_err(|error| Failure::request(format!("{name}: {error}")))?;
        coordinate.alone = alone;
        coordinates.push(coordinate);
    }
    Ok((coordinates, rows))
}
