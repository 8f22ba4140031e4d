//! One element's table: its variants and their shells.

use std::ops::Range;

use orbend_structure::Element;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::element::{Checked, Confidence, ShellParameters, Variant};
use super::reader::{Findings, Units};
use super::shell_name::ShellName;
use crate::contraction::contraction_norm;

/// What a file says about an element.
pub(crate) enum ElementEntry {
    /// Values, with the index of the default variant.
    Values(Vec<Variant>, usize),
    /// Only `default = "B"`: a choice among the variants of the set below.
    Choice(String, Range<usize>),
}

/// Deepest Hᵢᵢ of a valence shell, eV, and the exponents that occur, bohr⁻¹.
const HII_RANGE_EV: (f64, f64) = (-60.0, 0.0);
const ZETA_RANGE: (f64, f64) = (0.2, 20.0);
/// A printed contraction further from norm 1 than this has a wrong digit.
const NORM_TOLERANCE: f64 = 2e-3;

const VARIANT_KEYS: [&str; 7] = [
    "source",
    "zeta_source",
    "checked",
    "confidence",
    "zeta_confidence",
    "note",
    "shells",
];
const SHELL_KEYS: [&str; 9] = [
    "shell",
    "hii",
    "zeta",
    "optional",
    "source",
    "zeta_source",
    "checked",
    "confidence",
    "zeta_confidence",
];

/// Reads `[S]` with shells, or with variants `[S.A]`, `[S.B]` and a default.
pub(crate) fn read_element(
    table: &DeTable<'_>,
    place: &Range<usize>,
    element: Element,
    units: Units,
    file: &str,
    findings: &mut Findings,
) -> Option<ElementEntry> {
    let symbol = element.symbol();
    if table.iter().any(|(key, _)| key.get_ref() == "shells") {
        let variant = read_variant(table, place, "A", symbol, units, file, findings)?;
        return Some(ElementEntry::Values(vec![variant], 0));
    }
    let mut default: Option<(String, Range<usize>)> = None;
    let mut variants = Vec::new();
    let mut sound = true;
    for (key, value) in table {
        let word: &str = key.get_ref();
        if word == "default" {
            default = findings.text(word, value).map(|name| (name, value.span()));
            sound &= default.is_some();
        } else if let Some(inner) = value.get_ref().as_table() {
            let label = format!("{symbol}.{word}");
            match read_variant(inner, &key.span(), word, &label, units, file, findings) {
                Some(variant) => variants.push(variant),
                None => sound = false,
            }
        } else {
            let known: Vec<&str> = VARIANT_KEYS.into_iter().chain(["default"]).collect();
            findings.unknown_key(word, key.span(), &known, &format!("[{symbol}]"));
            sound = false;
        }
    }
    if !sound {
        return None;
    }
    match (default, variants.len()) {
        (Some((name, span)), 0) => Some(ElementEntry::Choice(name, span)),
        (None, 0) => {
            findings.add(
                place.clone(),
                format!("[{symbol}] has no `shells`"),
                "add shells = [{ shell = \"…\", hii = …, zeta = … }]",
            );
            None
        }
        (None, 1) => Some(ElementEntry::Values(variants, 0)),
        (None, _) => {
            findings.add(
                place.clone(),
                format!("[{symbol}] has several variants and no `default`"),
                format!("add default = \"{}\"", variants[0].name),
            );
            None
        }
        (Some((name, span)), _) => {
            let Some(index) = variants.iter().position(|variant| variant.name == name) else {
                let names: Vec<&str> = variants
                    .iter()
                    .map(|variant| variant.name.as_str())
                    .collect();
                findings.add(
                    span,
                    format!("{symbol} has no variant `{name}`"),
                    format!("choose from {}", names.join(", ")),
                );
                return None;
            };
            Some(ElementEntry::Values(variants, index))
        }
    }
}

/// Texts that a shell takes from its variant where it does not say otherwise.
#[derive(Clone, Default)]
struct Origin {
    source: Option<String>,
    zeta_source: Option<String>,
    checked: Option<Checked>,
    confidence: Option<Confidence>,
    zeta_confidence: Option<Confidence>,
}

impl Origin {
    /// Takes the key if it is one of these; says whether it was.
    fn take(&mut self, key: &str, value: &Spanned<DeValue<'_>>, findings: &mut Findings) -> bool {
        match key {
            "source" => self.source = findings.text(key, value),
            "zeta_source" => self.zeta_source = findings.text(key, value),
            "checked" => {
                self.checked = match findings.text(key, value).as_deref() {
                    Some("page") => Some(Checked::Page),
                    Some("memory") => Some(Checked::Memory),
                    Some(_) => {
                        findings.add(
                            value.span(),
                            "`checked` is neither \"page\" nor \"memory\"",
                            "write \"page\" if the source was seen, else \"memory\"",
                        );
                        None
                    }
                    None => None,
                }
            }
            "confidence" => self.confidence = confidence(key, value, findings),
            "zeta_confidence" => self.zeta_confidence = confidence(key, value, findings),
            _ => return false,
        }
        true
    }
}

fn confidence(
    key: &str,
    value: &Spanned<DeValue<'_>>,
    findings: &mut Findings,
) -> Option<Confidence> {
    match findings.text(key, value)?.as_str() {
        "H" => Some(Confidence::High),
        "M" => Some(Confidence::Medium),
        "L" => Some(Confidence::Low),
        _ => {
            findings.add(
                value.span(),
                format!("`{key}` is none of H, M, L"),
                "write \"H\", \"M\" or \"L\"",
            );
            None
        }
    }
}

fn read_variant(
    table: &DeTable<'_>,
    place: &Range<usize>,
    name: &str,
    label: &str,
    units: Units,
    file: &str,
    findings: &mut Findings,
) -> Option<Variant> {
    let problems_before = findings.list.len();
    let mut origin = Origin::default();
    let mut note = None;
    let mut list = None;
    for (key, value) in table {
        let word: &str = key.get_ref();
        match word {
            "note" => note = findings.text(word, value),
            "shells" => match value.get_ref().as_array() {
                Some(array) => list = Some(array),
                None => findings.wrong_type(word, "a list of shells", value),
            },
            _ if origin.take(word, value, findings) => {}
            _ => findings.unknown_key(word, key.span(), &VARIANT_KEYS, &format!("[{label}]")),
        }
    }
    let mut shells: Vec<ShellParameters> = Vec::new();
    for value in list.into_iter().flatten() {
        let Some(inner) = value.get_ref().as_table() else {
            findings.wrong_type(
                "shells",
                "{ shell = \"…\", hii = …, zeta = … } for each shell",
                value,
            );
            continue;
        };
        let Some(shell) = read_shell(inner, &value.span(), &origin, label, units, file, findings)
        else {
            continue;
        };
        if shells.iter().any(|other| other.name() == shell.name()) {
            findings.add(
                value.span(),
                format!("{label} has the shell {} twice", shell.name()),
                "keep one; a second choice of values is a variant",
            );
        }
        shells.push(shell);
    }
    if list.is_none_or(|array| array.is_empty()) && findings.list.len() == problems_before {
        findings.add(
            place.clone(),
            format!("[{label}] has no shells"),
            "add shells = [{ shell = \"…\", hii = …, zeta = … }]",
        );
    }
    (findings.list.len() == problems_before).then(|| Variant {
        name: name.to_owned(),
        shells,
        note,
    })
}

fn read_shell(
    table: &DeTable<'_>,
    place: &Range<usize>,
    inherited: &Origin,
    label: &str,
    units: Units,
    file: &str,
    findings: &mut Findings,
) -> Option<ShellParameters> {
    let mut origin = inherited.clone();
    let (mut name, mut hii, mut zeta, mut optional) = (None, None, None, false);
    let mut seen = Vec::new();
    for (key, value) in table {
        let word: &str = key.get_ref();
        seen.push(word.to_owned());
        match word {
            "shell" => name = read_name(value, findings),
            "hii" => hii = read_hii(value, units, findings),
            "zeta" => zeta = Some(value),
            "optional" => match value.get_ref().as_bool() {
                Some(flag) => optional = flag,
                None => findings.wrong_type(word, "true or false", value),
            },
            _ if origin.take(word, value, findings) => {}
            _ => findings.unknown_key(
                word,
                key.span(),
                &SHELL_KEYS,
                &format!("a shell of [{label}]"),
            ),
        }
    }
    for wanted in ["shell", "hii", "zeta"] {
        if !seen.iter().any(|word| word == wanted) {
            findings.add(
                place.clone(),
                format!("a shell of [{label}] has no `{wanted}`"),
                format!("add {wanted} = …"),
            );
        }
    }
    // The exponents are looked at even where the name is wrong, to report everything at once.
    let published = read_zeta(zeta?, findings);
    let (name, hii_ev, published) = (name?, hii?, published?);
    let norm = contraction_norm(name.n, &published);
    if (norm - 1.0).abs() > NORM_TOLERANCE {
        findings.add(
            zeta.map_or(place.clone(), Spanned::span),
            format!("{label} {name} has norm {norm:.4}, not 1 within 0.2 %: a digit is wrong"),
            "look the four numbers up in the original table (some reprints are not normalised)",
        );
        return None;
    }
    let scale = norm.sqrt();
    Some(ShellParameters {
        n: name.n,
        l: name.l,
        hii_ev,
        terms: published
            .iter()
            .map(|&(zeta, coefficient)| (zeta, coefficient / scale))
            .collect(),
        published,
        optional,
        source: origin.source.unwrap_or_else(|| format!("file {file}")),
        zeta_source: origin.zeta_source,
        checked: origin.checked.unwrap_or(Checked::Memory),
        confidence: origin.confidence,
        zeta_confidence: origin.zeta_confidence.or(origin.confidence),
    })
}

fn read_name(value: &Spanned<DeValue<'_>>, findings: &mut Findings) -> Option<ShellName> {
    let text = findings.text("shell", value)?;
    ShellName::parse(&text)
        .map_err(|cause| {
            findings.add(
                value.span(),
                cause,
                "write n (1 to 7) and s, p, d or f, as in \"3d\"",
            )
        })
        .ok()
}

fn read_hii(value: &Spanned<DeValue<'_>>, units: Units, findings: &mut Findings) -> Option<f64> {
    let hii_ev = findings.number("hii", value)? * units.energy;
    if hii_ev < HII_RANGE_EV.1 && hii_ev >= HII_RANGE_EV.0 {
        return Some(hii_ev);
    }
    findings.add(
        value.span(),
        format!(
            "hii = {hii_ev} eV is outside {} to {} eV",
            HII_RANGE_EV.0, HII_RANGE_EV.1
        ),
        "Hii is minus an ionisation energy of the valence shell, in the unit of [set]",
    );
    None
}

/// One exponent, or a list of [exponent, coefficient].
fn read_zeta(value: &Spanned<DeValue<'_>>, findings: &mut Findings) -> Option<Vec<(f64, f64)>> {
    let Some(array) = value.get_ref().as_array() else {
        return Some(vec![(exponent(value, findings)?, 1.0)]);
    };
    let mut terms: Vec<(f64, f64)> = Vec::new();
    let mut sound = true;
    for pair in array {
        let numbers = pair.get_ref().as_array().filter(|inner| inner.len() == 2);
        let Some(numbers) = numbers else {
            findings.wrong_type("zeta", "[exponent, coefficient] for each term", pair);
            sound = false;
            continue;
        };
        let mut members = numbers.iter();
        let zeta = members.next().and_then(|member| exponent(member, findings));
        let coefficient = members
            .next()
            .and_then(|member| findings.number("coefficient", member));
        match (zeta, coefficient) {
            (Some(zeta), Some(coefficient)) => {
                if terms.iter().any(|term| term.0.to_bits() == zeta.to_bits()) {
                    findings.add(
                        pair.span(),
                        format!("the exponent {zeta} stands twice"),
                        "add the coefficients",
                    );
                    sound = false;
                }
                terms.push((zeta, coefficient));
            }
            _ => sound = false,
        }
    }
    if sound && !(1..=4).contains(&terms.len()) {
        findings.add(
            value.span(),
            format!("{} terms in `zeta`", terms.len()),
            "write one to four terms",
        );
        sound = false;
    }
    sound.then_some(terms)
}

fn exponent(value: &Spanned<DeValue<'_>>, findings: &mut Findings) -> Option<f64> {
    let zeta = findings.number("zeta", value)?;
    if zeta >= ZETA_RANGE.0 && zeta <= ZETA_RANGE.1 {
        return Some(zeta);
    }
    findings.add(
        value.span(),
        format!(
            "zeta = {zeta} is outside {} to {} 1/bohr",
            ZETA_RANGE.0, ZETA_RANGE.1
        ),
        "write a Slater exponent in 1/bohr",
    );
    None
}
