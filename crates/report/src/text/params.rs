//! Parameter values as text.

use crate::document::{Checked, ParamsDocument, ShellValues};
use crate::draw::ticks::short;

use super::table::{Align, Table};
use super::{TextOptions, warnings};

/// The values in use as a table, each with the number of its source; the sources follow.
#[must_use]
pub fn params_text(document: &ParamsDocument, options: &TextOptions) -> String {
    let mut out = String::new();
    let method = &document.method;
    options.paragraph(
        &mut out,
        &format!("parameters \"{}\"", method.parameter_set),
    );
    out.push_str(&format!("{}\n\n", method.fingerprint));
    let mut sources: Vec<&str> = Vec::new();
    out.push_str(&table(&method.values, &mut sources, options));
    for variant in &document.variants {
        out.push_str(&format!("\nalternative \"{}\"\n", variant.name));
        out.push_str(&table(&variant.values, &mut sources, options));
    }
    out.push('\n');
    for (index, source) in sources.iter().enumerate() {
        options.paragraph(&mut out, &format!("[{}] {source}", index + 1));
    }
    if !document.sets.is_empty() {
        options.paragraph(&mut out, &format!("sets: {}", document.sets.join(", ")));
    }
    warnings(&mut out, options, &document.warnings);
    out
}

fn table<'a>(
    values: &'a [ShellValues],
    sources: &mut Vec<&'a str>,
    options: &TextOptions,
) -> String {
    let mut table = Table::new(&[
        ("element", Align::Left),
        ("shell", Align::Left),
        ("Hii/eV", Align::Right),
        ("zeta/bohr^-1 (coefficient)", Align::Left),
        ("checked", Align::Left),
        ("source", Align::Left),
    ]);
    for value in values {
        let number = match sources.iter().position(|source| *source == value.source) {
            Some(number) => number,
            None => {
                sources.push(&value.source);
                sources.len() - 1
            }
        };
        let single = value.zeta.len() == 1;
        let exponents: Vec<String> = value
            .zeta
            .iter()
            .map(|[zeta, coefficient]| {
                let zeta = short(zeta.get(), 5);
                if single {
                    zeta
                } else {
                    format!("{zeta} ({})", short(coefficient.get(), 5))
                }
            })
            .collect();
        let checked = match value.checked {
            Checked::Page => "page",
            Checked::Memory => "memory",
        };
        table.row(vec![
            value.element.clone(),
            value.shell.clone(),
            format!("{:.3}", value.hii.get()),
            exponents.join(", "),
            checked.to_owned(),
            format!("[{}]", number + 1),
        ]);
    }
    table.render(options.columns())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::document::{ParamsSchema, Program, Units};
    use crate::synthetic;
    use crate::text::table::length;

    #[test]
    fn every_value_has_a_source_below() {
        let document = ParamsDocument {
            schema: ParamsSchema,
            program: Program::this(),
            units: Units::default(),
            molecule: None,
            method: synthetic::method(),
            variants: vec![],
            sets: vec!["made up".into()],
            warnings: vec![],
            missing: vec![],
        };
        let text = params_text(&document, &TextOptions::default());
        assert!(text.contains("S        3s     -20.000  2.122"), "{text}");
        assert!(text.contains("[1] made up for a test"));
        assert!(text.lines().all(|line| length(line) <= 80));
    }
}
