//! `orbend params`: the values in use, each with its source.

use orbend_report::{params_document, params_text, to_json};
use orbend_structure::Element;

use super::{parameter_set, text_options};
use crate::arguments::{NumberingChoice, ParamsArguments};
use crate::failure::Failure;
use crate::outputs::Outputs;
use crate::write::write_stdout;

pub(crate) fn run(arguments: &ParamsArguments) -> Result<(), Failure> {
    let outputs = Outputs::check(&arguments.out, &["json"])?;
    let elements = arguments
        .elements
        .iter()
        .map(|word| {
            Element::from_symbol(word).ok_or_else(|| {
                let failure = Failure::request(format!("`{word}` is no element symbol"));
                match Element::suggest(word) {
                    Some(element) => failure.fix(format!("did you mean {}?", element.symbol())),
                    None => failure.fix("use symbols such as Si or F"),
                }
            })
        })
        .collect::<Result<Vec<_>, _>>()?;
    let set = parameter_set(arguments.params.as_deref(), &arguments.variant)?;
    let document =
        params_document(&set, &elements).map_err(|error| Failure::request(error.to_string()))?;
    outputs.write(|_| Ok(to_json(&document).map_err(Failure::document)?.into_bytes()))?;
    if arguments.json {
        write_stdout(to_json(&document).map_err(Failure::document)?.as_bytes())
    } else {
        write_stdout(params_text(&document, &text_options(NumberingChoice::Core)).as_bytes())
    }
}
