//! From the word GEOMETRY to a molecule: a file, standard input or a formula.

use std::io::Read;
use std::path::Path;

use orbend_report::{BondLength, Number, Warning};
use orbend_structure::{
    BondOverride, Formula, LengthUnit, Molecule, XyzOptions, ideal_geometry, read_xyz_bytes,
    write_xyz,
};

use crate::arguments::{ModelArguments, UnitChoice};
use crate::failure::Failure;

/// A molecule and how it came about.
pub(crate) struct Geometry {
    pub(crate) molecule: Molecule,
    pub(crate) record: orbend_report::Geometry,
    pub(crate) warnings: Vec<Warning>,
}

impl Geometry {
    /// The start geometry as extended XYZ.
    pub(crate) fn to_xyz(&self) -> String {
        write_xyz(&self.molecule)
    }
}

/// Reads GEOMETRY; `--charge` and `--unpaired` go before what a file says.
pub(crate) fn read(word: &str, model: &ModelArguments) -> Result<Geometry, Failure> {
    let mut geometry = if word == "-" {
        let mut bytes = Vec::new();
        std::io::stdin()
            .read_to_end(&mut bytes)
            .map_err(|error| Failure::request(format!("cannot read standard input: {error}")))?;
        from_bytes("standard input", &bytes, model)?
    } else if is_file_name(word) {
        let bytes = std::fs::read(word).map_err(|error| {
            Failure::request(format!("cannot read {word}: {error}")).fix(
                "name an XYZ file that exists, `-` for standard input, or a formula such as SiF2",
            )
        })?;
        from_bytes(word, &bytes, model)?
    } else {
        return from_formula(word, model);
    };
    if !model.bond.is_empty() {
        return Err(Failure::request(
            "--bond sets lengths of an ideal geometry, but a file was given",
        )
        .fix("change the file, or give a formula"));
    }
    if let Some(charge) = model.charge {
        geometry.molecule.charge = charge;
    }
    if model.unpaired.is_some() {
        geometry.molecule.unpaired = model.unpaired;
    }
    Ok(geometry)
}

/// A word with a dot, a slash, or the name of a file that is there.
fn is_file_name(word: &str) -> bool {
    word.contains(['.', '/', '\\']) || Path::new(word).exists()
}

/// Atoms beyond this number are refused: matrices grow with its square, time with its cube.
const MOST_ATOMS: usize = 500;

fn from_bytes(name: &str, bytes: &[u8], model: &ModelArguments) -> Result<Geometry, Failure> {
    let unit = match model.unit {
        UnitChoice::Angstrom => LengthUnit::Angstrom,
        UnitChoice::Bohr => LengthUnit::Bohr,
    };
    if let Some(atoms) = announced_atoms(bytes).filter(|&atoms| atoms > MOST_ATOMS) {
        return Err(Failure::request(format!(
            "{name}:1:1: {atoms} atoms are announced, more than the {MOST_ATOMS} that can be treated"
        ))
        .fix("give one molecule of that size or smaller, its number of atoms on the first line"));
    }
    let frames = read_xyz_bytes(bytes, &XyzOptions { unit }).map_err(|error| {
        Failure::request(format!(
            "{name}:{}:{}: {}",
            error.line, error.column, error.cause
        ))
        .fix(error.fix)
    })?;
    let mut frames = frames.into_iter();
    let Some(frame) = frames.next() else {
        return Err(Failure::request(format!("{name}: no geometry in it"))
            .fix("give an XYZ file: the number of atoms, a comment line, then one atom per line"));
    };
    let mut notes = vec![name.to_owned()];
    if !frame.understood.is_empty() {
        notes.push(frame.understood);
    }
    let mut warnings: Vec<Warning> = frame
        .notes
        .into_iter()
        .map(|text| Warning {
            code: "geometry-file".to_owned(),
            text,
        })
        .collect();
    let more = frames.count();
    if more > 0 {
        warnings.push(Warning {
            code: "first-frame".to_owned(),
            text: format!(
                "{name} holds {} geometries; the first one is used",
                more + 1
            ),
        });
    }
    Ok(Geometry {
        molecule: frame.molecule,
        record: orbend_report::Geometry {
            origin: if name == "standard input" {
                name
            } else {
                "file"
            }
            .to_owned(),
            notes,
            bonds: Vec::new(),
        },
        warnings,
    })
}

fn from_formula(word: &str, model: &ModelArguments) -> Result<Geometry, Failure> {
    let overrides = model
        .bond
        .iter()
        .map(|text| text.parse::<BondOverride>())
        .collect::<Result<Vec<_>, _>>()
        .map_err(|error| Failure::from_library(format!("--bond: {error}")))?;
    let formula = Formula::parse(word).map_err(Failure::from_library)?;
    let ideal =
        ideal_geometry(&formula, model.charge, &overrides).map_err(Failure::from_library)?;
    let mut molecule = ideal.molecule;
    formula.text.clone_into(&mut molecule.title);
    molecule.unpaired = model.unpaired;
    let bonds = ideal
        .bonds
        .iter()
        .map(|bond| {
            Ok(BondLength {
                atoms: bond.atoms.map(|atom| atom as u32 + 1),
                elements: bond
                    .atoms
                    .map(|atom| molecule.elements[atom].symbol().to_owned()),
                length: Number::new(bond.length.0)?,
                source: bond.source.clone(),
            })
        })
        .collect::<Result<_, orbend_report::NotFinite>>()
        .map_err(|error| Failure::running(error.to_string()))?;
    Ok(Geometry {
        record: orbend_report::Geometry {
            origin: "formula".to_owned(),
            notes: vec![
                format!("ideal geometry of {word}: {}", ideal.shape_class.name()),
                ideal.because,
            ],
            bonds,
        },
        molecule,
        warnings: Vec::new(),
    })
}

/// The number alone on the first line that holds anything, if it is one.
fn announced_atoms(bytes: &[u8]) -> Option<usize> {
    let line = bytes
        .split(|&byte| byte == b'\n' || byte == b'\r')
        .find(|line| !line.trim_ascii().is_empty())?;
    std::str::from_utf8(line.trim_ascii()).ok()?.parse().ok()
}
