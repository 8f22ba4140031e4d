//! From a parameter set to its document.

use orbend_hamiltonian::{Method as Model, ParameterSet, SET_NAMES};
use orbend_structure::Element;

use crate::document::{Method, Number, ParamsDocument, ParamsSchema, Program, Units, Variant};
use crate::from_scan::{FromScanError, shell_values};

/// The document of the values in use for `elements` (all of the set when
/// empty), with the published alternatives that are not in use.
///
/// # Errors
/// An element that the set does not have.
pub fn params_document(
    set: &ParameterSet,
    elements: &[Element],
) -> Result<ParamsDocument, FromScanError> {
    if let Some(&missing) = elements
        .iter()
        .find(|&&element| set.element(element).is_none())
    {
        return Err(FromScanError::NoParameters {
            element: missing.symbol().to_owned(),
            set: set.name().to_owned(),
        });
    }
    let mut values = Vec::new();
    let mut variants = Vec::new();
    for parameters in set.elements() {
        let element = parameters.element();
        if !elements.is_empty() && !elements.contains(&element) {
            continue;
        }
        for shell in parameters.shells() {
            values.push(shell_values(element.symbol(), shell)?);
        }
        for variant in parameters.variants() {
            if variant.name != parameters.variant().name {
                variants.push(Variant {
                    name: format!("{}:{}", element.symbol(), variant.name),
                    values: variant
                        .shells
                        .iter()
                        .map(|shell| shell_values(element.symbol(), shell))
                        .collect::<Result<_, _>>()?,
                });
            }
        }
        let unused = parameters
            .unused_shells()
            .map(|shell| shell_values(element.symbol(), shell));
        let unused = unused.collect::<Result<Vec<_>, _>>()?;
        for shell in unused {
            variants.push(Variant {
                name: format!("{}+{}", element.symbol(), shell.shell),
                values: vec![shell],
            });
        }
    }
    let model = Model::default();
    Ok(ParamsDocument {
        schema: ParamsSchema,
        program: Program::this(),
        units: Units::default(),
        molecule: None,
        method: Method {
            parameter_set: set.name().to_owned(),
            fingerprint: set.fingerprint(),
            coupling: model.coupling.name().to_owned(),
            k: Number::new(model.k)?,
            polarised_hydrogen: model.polarised_hydrogen,
            numbering: "core".to_owned(),
            notes: Vec::new(),
            values,
        },
        variants,
        sets: SET_NAMES.iter().map(|&name| name.to_owned()).collect(),
        warnings: Vec::new(),
        missing: Vec::new(),
    })
}
