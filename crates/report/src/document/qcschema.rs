//! One geometry in the open QCSchema form (molecule, version 2), for other programs to read.

use serde::{Deserialize, Serialize};

use super::common::Program;
use super::number::Number;

/// A molecule as `qcschema_molecule` version 2 (MolSSI QCSchema; key names from memory): geometry in
/// bohr, flat, atom after atom.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct QcMolecule {
    /// `qcschema_molecule`.
    pub schema_name: String,
    /// 2.
    pub schema_version: u32,
    /// Element symbols.
    pub symbols: Vec<String>,
    /// x, y, z of every atom, bohr.
    pub geometry: Vec<Number>,
    /// Charge.
    pub molecular_charge: Number,
    /// Unpaired electrons plus one.
    pub molecular_multiplicity: u32,
    /// Title.
    pub name: String,
    /// The centre stays where it is.
    pub fix_com: bool,
    /// The axes stay as they are: labels refer to them.
    pub fix_orientation: bool,
    /// Who wrote it.
    pub provenance: QcProvenance,
}

/// The writer, in the words of that form.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct QcProvenance {
    /// Name of the program.
    pub creator: String,
    /// Its version.
    pub version: String,
    /// The command.
    pub routine: String,
}

impl QcProvenance {
    pub(crate) fn this() -> Self {
        let program = Program::this();
        Self {
            creator: program.name,
            version: program.version,
            routine: "plan".to_owned(),
        }
    }
}
