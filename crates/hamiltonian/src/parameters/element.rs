//! The values of one element.

use orbend_structure::Element;

use super::shell_name::ShellName;

/// Whether the page that states a value was seen.
#[derive(Copy, Clone, Debug, PartialEq, Eq)]
pub enum Checked {
    /// The page that the source names was seen.
    Page,
    /// The value is recalled from memory.
    Memory,
}

impl Checked {
    /// `page` or `memory`, as in files and documents.
    pub fn name(self) -> &'static str {
        match self {
            Self::Page => "page",
            Self::Memory => "memory",
        }
    }
}

/// How sure a value that was not seen in print is.
#[derive(Copy, Clone, Debug, PartialEq, Eq)]
pub enum Confidence {
    /// `H`.
    High,
    /// `M`.
    Medium,
    /// `L`.
    Low,
}

impl Confidence {
    /// `H`, `M` or `L`, as in files.
    pub fn letter(self) -> &'static str {
        match self {
            Self::High => "H",
            Self::Medium => "M",
            Self::Low => "L",
        }
    }
}

/// The values of one shell.
#[derive(Clone, Debug, PartialEq)]
pub struct ShellParameters {
    /// Principal quantum number.
    pub n: u8,
    /// Angular quantum number.
    pub l: u8,
    /// Diagonal element Hᵢᵢ, eV.
    pub hii_ev: f64,
    /// (exponent in bohr⁻¹, coefficient), renormalised: the values that are used.
    pub terms: Vec<(f64, f64)>,
    /// The same as printed in the source; their norm is within 0.2 % of 1.
    pub published: Vec<(f64, f64)>,
    /// Whether the shell is left out unless asked for.
    pub optional: bool,
    /// Where Hᵢᵢ comes from.
    pub source: String,
    /// Where the exponents come from, if told apart.
    pub zeta_source: Option<String>,
    /// Whether the source was seen.
    pub checked: Checked,
    /// Confidence in Hᵢᵢ.
    pub confidence: Option<Confidence>,
    /// Confidence in the exponents (that of Hᵢᵢ where the file makes no difference).
    pub zeta_confidence: Option<Confidence>,
}

impl ShellParameters {
    /// "3s".
    pub fn name(&self) -> ShellName {
        ShellName {
            n: self.n,
            l: self.l,
        }
    }

    /// Both sources in one line, for tables and documents.
    pub fn citation(&self) -> String {
        match &self.zeta_source {
            Some(zeta) if *zeta != self.source => format!("{}; exponents: {zeta}", self.source),
            _ => self.source.clone(),
        }
    }
}

/// One published choice of values for an element.
#[derive(Clone, Debug, PartialEq)]
pub struct Variant {
    /// Its name in the file; "A" where there is only one.
    pub name: String,
    /// All its shells, optional ones included.
    pub shells: Vec<ShellParameters>,
    /// What to know about it.
    pub note: Option<String>,
}

/// All variants of one element, and which of them is in use.
#[derive(Clone, Debug, PartialEq)]
pub struct ElementParameters {
    pub(crate) element: Element,
    pub(crate) variants: Vec<Variant>,
    pub(crate) chosen: usize,
    pub(crate) optional_in_use: Vec<ShellName>,
    pub(crate) origin: String,
}

impl ElementParameters {
    /// The element.
    pub fn element(&self) -> Element {
        self.element
    }

    /// Every variant, in the order of the file.
    pub fn variants(&self) -> &[Variant] {
        &self.variants
    }

    /// The variant in use.
    pub fn variant(&self) -> &Variant {
        &self.variants[self.chosen]
    }

    /// The set or file that the values come from.
    pub fn origin(&self) -> &str {
        &self.origin
    }

    /// The shells in use: those of the chosen variant, optional ones only where asked for.
    pub fn shells(&self) -> impl Iterator<Item = &ShellParameters> {
        self.variant()
            .shells
            .iter()
            .filter(|shell| self.uses(shell))
    }

    /// The optional shells of the chosen variant that are not in use.
    pub fn unused_shells(&self) -> impl Iterator<Item = &ShellParameters> {
        self.variant()
            .shells
            .iter()
            .filter(|shell| !self.uses(shell))
    }

    fn uses(&self, shell: &ShellParameters) -> bool {
        !shell.optional || self.optional_in_use.contains(&shell.name())
    }
}
