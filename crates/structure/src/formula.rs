//! Chemical formulas as a user types them.

use crate::element::Element;
use thiserror::Error;

/// One unit of a formula: an element or a bracketed group, and how often.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct FormulaPart {
    /// The atoms of one unit, the bonded one first (`[C, O]` for `(CO)`).
    pub elements: Vec<Element>,
    /// How often the unit occurs, at least 1.
    pub count: usize,
}

/// A formula as written: `H2S`, `BrF3`, `Ni(CO)4`, `NO2-`, `PtCl4(2-)`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Formula {
    /// The text.
    pub text: String,
    /// The units in written order.
    pub parts: Vec<FormulaPart>,
    /// The charge, where the formula ends in one (`+`, `-`, `(2-)`, `^2-`).
    pub charge: Option<i32>,
}

/// A text that is no formula, or a formula that fixes no geometry.
#[derive(Clone, Debug, PartialEq, Error)]
#[error("formula `{formula}`, character {column}: {cause}; {fix}")]
pub struct FormulaError {
    /// The text.
    pub formula: String,
    /// Place in it, counted from 1.
    pub column: usize,
    /// What is wrong.
    pub cause: String,
    /// What to do.
    pub fix: String,
}

/// More atoms than this are no formula for an ideal geometry.
const MOST_ATOMS: usize = 1000;

impl Formula {
    /// Reads a formula.
    ///
    /// # Errors
    /// An unknown element, a count that is no number or 0, an open bracket,
    /// a charge of another form.
    pub fn parse(text: &str) -> Result<Self, FormulaError> {
        let text = text.trim();
        let error = |byte: usize, cause: String, fix: &str| FormulaError {
            formula: text.to_string(),
            column: text[..byte].chars().count() + 1,
            cause,
            fix: fix.to_string(),
        };
        let form = "write it like H2S, BrF3 or Ni(CO)4";
        if text.is_empty() {
            return Err(error(0, "it is empty".into(), form));
        }
        if let Some((byte, c)) = text.char_indices().find(|(_, c)| !c.is_ascii()) {
            let cause = format!("`{c}` is not an ASCII character");
            return Err(error(
                byte,
                cause,
                "write digits and signs plainly, as in SO4(2-)",
            ));
        }
        let (body, charge) = split_charge(text);
        let bytes = body.as_bytes();
        let mut parts = Vec::new();
        let mut group: Option<(usize, Vec<Element>)> = None;
        let mut at = 0;
        let mut atoms = 0;
        while at < bytes.len() {
            let start = at;
            let elements = match bytes[at] {
                b'(' if group.is_none() => {
                    group = Some((at, Vec::new()));
                    at += 1;
                    continue;
                }
                b')' => {
                    let Some((_, elements)) = group.take().filter(|(_, list)| !list.is_empty())
                    else {
                        return Err(error(at, "a bracket closes nothing".into(), form));
                    };
                    at += 1;
                    elements
                }
                b'A'..=b'Z' => {
                    at += 1;
                    while at < bytes.len() && bytes[at].is_ascii_lowercase() {
                        at += 1;
                    }
                    let symbol = &body[start..at];
                    let Some(element) = Element::from_symbol(symbol) else {
                        let cause = format!("`{symbol}` is not an element symbol");
                        return Err(error(start, cause, "elements H to Rn are known"));
                    };
                    vec![element]
                }
                _ => {
                    let cause = format!("`{}` has no place here", &body[at..=at]);
                    return Err(error(at, cause, form));
                }
            };
            let digits = at;
            while at < bytes.len() && bytes[at].is_ascii_digit() {
                at += 1;
            }
            let count = match &body[digits..at] {
                "" => 1,
                word => {
                    let count = word.parse::<usize>().ok();
                    count
                        .filter(|n| (1..=MOST_ATOMS).contains(n))
                        .ok_or_else(|| {
                            error(
                                digits,
                                format!("`{word}` is no count"),
                                "write a count from 1 up",
                            )
                        })?
                }
            };
            atoms += count * elements.len();
            if atoms > MOST_ATOMS {
                return Err(error(
                    start,
                    "too many atoms".into(),
                    "give a geometry file",
                ));
            }
            match &mut group {
                Some((_, list)) => list.extend((0..count).flat_map(|_| elements.clone())),
                None => parts.push(FormulaPart { elements, count }),
            }
        }
        if let Some((byte, _)) = group {
            return Err(error(byte, "the bracket is not closed".into(), form));
        }
        if parts.is_empty() {
            return Err(error(0, "there are no atoms".into(), form));
        }
        Ok(Self {
            text: text.to_string(),
            parts,
            charge,
        })
    }

    /// Whether a text looks like a formula rather than a file name: it parses.
    pub fn is_formula(text: &str) -> bool {
        Self::parse(text).is_ok()
    }

    /// All atoms in written order.
    pub fn elements(&self) -> Vec<Element> {
        let units = self.parts.iter();
        units
            .flat_map(|part| (0..part.count).flat_map(|_| part.elements.clone()))
            .collect()
    }

    pub(crate) fn error(&self, cause: impl Into<String>, fix: impl Into<String>) -> FormulaError {
        FormulaError {
            formula: self.text.clone(),
            column: 1,
            cause: cause.into(),
            fix: fix.into(),
        }
    }
}

/// Takes a charge off the end: `+`, `--`, `(2-)`, `^2-`.
fn split_charge(text: &str) -> (&str, Option<i32>) {
    let signed = |number: &str, sign: u8| -> Option<i32> {
        let size = if number.is_empty() {
            1
        } else {
            number.parse::<i32>().ok()?
        };
        Some(if sign == b'-' { -size } else { size })
    };
    let inner = |open: usize, word: &str| -> Option<i32> {
        let _ = open;
        let sign = *word.as_bytes().last()?;
        matches!(sign, b'+' | b'-').then(|| signed(&word[..word.len() - 1], sign))?
    };
    if let Some(open) = text.rfind('(')
        && let Some(word) = text[open + 1..].strip_suffix(')')
        && let Some(charge) = inner(open, word)
    {
        return (&text[..open], Some(charge));
    }
    if let Some(open) = text.find('^')
        && let Some(charge) = inner(open, &text[open + 1..])
    {
        return (&text[..open], Some(charge));
    }
    let body = text.trim_end_matches(['+', '-']);
    let signs = &text[body.len()..];
    let uniform = signs.bytes().all(|b| b == signs.as_bytes()[0]);
    match i32::try_from(signs.len()) {
        Ok(size @ 1..) if uniform => {
            let charge = if signs.starts_with('-') { -size } else { size };
            (body, Some(charge))
        }
        _ => (text, None),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn symbols(text: &str) -> (String, Option<i32>) {
        let formula = Formula::parse(text).unwrap();
        let list: Vec<&str> = formula.elements().iter().map(|e| e.symbol()).collect();
        (list.join(" "), formula.charge)
    }

    #[test]
    fn formulas() {
        assert_eq!(symbols("H2S"), ("H H S".into(), None));
        assert_eq!(symbols("Ni(CO)4").0, "Ni C O C O C O C O");
        assert_eq!(symbols("NO2-"), ("N O O".into(), Some(-1)));
        assert_eq!(symbols("PtCl4(2-)"), ("Pt Cl Cl Cl Cl".into(), Some(-2)));
        assert_eq!(symbols("SO4^2-").1, Some(-2));
        assert_eq!(symbols("CO3--").1, Some(-2));
        assert_eq!(symbols("NH4+").1, Some(1));
        assert!(Formula::is_formula("HOCl") && !Formula::is_formula("h2s.xyz"));
    }

    #[test]
    fn refusals() {
        let refused = |text: &str| {
            let error = Formula::parse(text).unwrap_err();
            (error.column, error.cause)
        };
        assert_eq!(refused("").1, "it is empty");
        assert_eq!(
            refused("SiXx2"),
            (3, "`Xx` is not an element symbol".into())
        );
        assert_eq!(refused("H0"), (2, "`0` is no count".into()));
        assert_eq!(refused("Ni(CO4").1, "the bracket is not closed");
        assert_eq!(refused("NiCO)4").1, "a bracket closes nothing");
        assert_eq!(refused("h2s").1, "`h` has no place here");
        assert_eq!(refused("H₂S").0, 2);
        assert!(refused("H999999999999999999999").1.contains("no count"));
        assert!(Formula::parse("+-").is_err() && Formula::parse("+").is_err());
    }
}
