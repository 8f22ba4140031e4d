//! From TOML text to elements. The table is walked by hand over spanned keys and values, so that
//! one reading reports every problem of the file, each at its place; an automatic deserialiser
//! stops at the first.

use std::ops::Range;

use orbend_structure::{ElectronVolt, Element, Hartree};
use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::element_reader::{ElementEntry, read_element};
use super::problem::FileProblems;
use crate::nearest::nearest;

/// A file as read, before it is merged into a set.
pub(crate) struct ParameterFile {
    pub(crate) name: String,
    pub(crate) title: String,
    /// In the order of the file; the span is that of the symbol.
    pub(crate) elements: Vec<(Element, Range<usize>, ElementEntry)>,
}

/// Factor from the unit of energy of the file to eV.
#[derive(Copy, Clone)]
pub(crate) struct Units {
    pub(crate) energy: f64,
}

/// Collects problems, and gives typed access to values.
#[derive(Default)]
pub(crate) struct Findings {
    pub(crate) list: Vec<(Range<usize>, String, String)>,
}

impl Findings {
    pub(crate) fn add(
        &mut self,
        span: Range<usize>,
        cause: impl Into<String>,
        fix: impl Into<String>,
    ) {
        self.list.push((span, cause.into(), fix.into()));
    }

    /// Reports a key that is not among `known`.
    pub(crate) fn unknown_key(
        &mut self,
        key: &str,
        span: Range<usize>,
        known: &[&str],
        place: &str,
    ) {
        let fix = match nearest(key, known) {
            Some(word) => format!("did you mean `{word}`?"),
            None => format!("known here: {}", known.join(", ")),
        };
        self.add(span, format!("unknown key `{key}` in {place}"), fix);
    }

    pub(crate) fn text(&mut self, key: &str, value: &Spanned<DeValue<'_>>) -> Option<String> {
        match value.get_ref().as_str() {
            Some(text) if !text.trim().is_empty() => Some(text.to_owned()),
            Some(_) => {
                self.add(
                    value.span(),
                    format!("`{key}` is empty"),
                    "write a text, or leave the key out",
                );
                None
            }
            None => {
                self.wrong_type(key, "a text in quotes", value);
                None
            }
        }
    }

    /// A finite number; NaN and inf, which TOML allows, are refused.
    pub(crate) fn number(&mut self, key: &str, value: &Spanned<DeValue<'_>>) -> Option<f64> {
        let text = match value.get_ref() {
            DeValue::Float(float) => float.as_str(),
            DeValue::Integer(integer) if integer.radix() == 10 => integer.as_str(),
            _ => {
                self.wrong_type(key, "a number", value);
                return None;
            }
        };
        match text.parse::<f64>() {
            Ok(number) if number.is_finite() => Some(number),
            _ => {
                self.add(
                    value.span(),
                    format!("`{key}` is {text}"),
                    "write a finite number",
                );
                None
            }
        }
    }

    pub(crate) fn wrong_type(&mut self, key: &str, wanted: &str, value: &Spanned<DeValue<'_>>) {
        let found = value.get_ref().type_str();
        self.add(
            value.span(),
            format!("`{key}` is of type {found}"),
            format!("write {wanted}"),
        );
    }
}

/// Reads one file.
///
/// # Errors
/// Every problem of the file.
pub(crate) fn read(text: &str, file: &str) -> Result<ParameterFile, FileProblems> {
    let (root, syntax) = DeTable::parse_recoverable(text);
    let mut findings = Findings::default();
    for error in syntax {
        let span = error.span().unwrap_or(0..0);
        findings.add(
            span,
            error.message().to_owned(),
            "correct the TOML syntax here",
        );
    }
    if !findings.list.is_empty() {
        return Err(FileProblems::new(file, text, findings.list));
    }
    let root = root.into_inner();
    let header = read_header(&root, text.len(), &mut findings);
    let mut elements = Vec::new();
    for (key, value) in &root {
        if key.get_ref() == "set" {
            continue;
        }
        let Some(element) = Element::from_symbol(key.get_ref()) else {
            let fix = Element::suggest(key.get_ref()).map_or_else(
                || "name the table `set` or by an element symbol from H to Rn".to_owned(),
                |meant| format!("did you mean `{}`?", meant.symbol()),
            );
            findings.add(
                key.span(),
                format!("`{}` is no element", key.get_ref()),
                fix,
            );
            continue;
        };
        let Some(table) = value.get_ref().as_table() else {
            findings.wrong_type(key.get_ref(), "a table of shells", value);
            continue;
        };
        if let Some(entry) = read_element(
            table,
            &key.span(),
            element,
            header.units,
            file,
            &mut findings,
        ) {
            elements.push((element, key.span(), entry));
        }
    }
    if !findings.list.is_empty() {
        return Err(FileProblems::new(file, text, findings.list));
    }
    Ok(ParameterFile {
        name: header.name,
        title: header.title,
        elements,
    })
}

struct Header {
    name: String,
    title: String,
    units: Units,
}

const HEADER_KEYS: [&str; 4] = ["name", "title", "energy", "exponent"];

fn read_header(root: &DeTable<'_>, length: usize, findings: &mut Findings) -> Header {
    let mut header = Header {
        name: String::new(),
        title: String::new(),
        units: Units { energy: 1.0 },
    };
    let end = length.saturating_sub(1)..length;
    let Some((set_key, set)) = root.iter().find(|(key, _)| key.get_ref() == "set") else {
        findings.add(
            if length == 0 { 0..0 } else { end },
            "the table `[set]` is missing",
            "begin with [set], name = \"…\", energy = \"eV\", exponent = \"1/bohr\"",
        );
        return header;
    };
    let Some(table) = set.get_ref().as_table() else {
        findings.wrong_type("set", "a table with name, energy and exponent", set);
        return header;
    };
    let mut seen = Vec::new();
    for (key, value) in table {
        let word: &str = key.get_ref();
        seen.push(word.to_owned());
        match word {
            "name" => header.name = findings.text(word, value).unwrap_or_default(),
            "title" => header.title = findings.text(word, value).unwrap_or_default(),
            "energy" => match findings.text(word, value).as_deref() {
                Some("eV") | None => {}
                Some("hartree") => header.units.energy = ElectronVolt::from(Hartree(1.0)).0,
                Some(other) => findings.add(
                    value.span(),
                    format!("unknown unit of energy `{other}`"),
                    "write \"eV\" or \"hartree\"",
                ),
            },
            "exponent" => match findings.text(word, value).as_deref() {
                Some("1/bohr") | None => {}
                Some(other) => findings.add(
                    value.span(),
                    format!("unknown unit of exponents `{other}`"),
                    "write \"1/bohr\" (atomic units)",
                ),
            },
            _ => findings.unknown_key(word, key.span(), &HEADER_KEYS, "[set]"),
        }
    }
    for wanted in ["name", "energy", "exponent"] {
        if !seen.iter().any(|word| word == wanted) {
            let fix = match wanted {
                "energy" => "add energy = \"eV\"",
                "exponent" => "add exponent = \"1/bohr\"",
                _ => "add name = \"…\"",
            };
            findings.add(set_key.span(), format!("[set] has no `{wanted}`"), fix);
        }
    }
    header
}
