//! The document of the parameter values in use.

use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

use super::common::{Method, Missing, MoleculeRecord, Program, ShellValues, Units, Warning};
use super::schema::ParamsSchema;

/// The values in use, each with its source: `orbend/params/1`.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct ParamsDocument {
    /// Name and version of this form.
    pub schema: ParamsSchema,
    /// The program that wrote the document.
    pub program: Program,
    /// Units of every value.
    pub units: Units,
    /// Always null: parameters belong to elements.
    pub molecule: Option<MoleculeRecord>,
    /// The method and the values in use.
    pub method: Method,
    /// Published alternatives that are not in use.
    #[serde(default)]
    pub variants: Vec<Variant>,
    /// Names of the parameter sets that come with the program.
    #[serde(default)]
    pub sets: Vec<String>,
    /// What the reader ought to know.
    pub warnings: Vec<Warning>,
    /// Why a value is `null`.
    #[serde(default)]
    pub missing: Vec<Missing>,
}

/// A published alternative for one element.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize, JsonSchema)]
pub struct Variant {
    /// Name by which it is chosen.
    pub name: String,
    /// Its values.
    pub values: Vec<ShellValues>,
}
