//! Text for a person at a terminal, within a given number of columns.

mod diagram;
mod distortion;
mod fragments;
mod levels;
mod params;
mod passport;
mod plan;
mod shape;
mod surfaces;
mod sweep;
mod table;
mod why;

pub use fragments::sweep_fragments_text;
pub use levels::levels_text;
pub use params::params_text;
pub use passport::passport_text;
pub use plan::{plan_markdown, plan_text};
pub use shape::shape_text;
pub use surfaces::surfaces_text;
pub use sweep::sweep_text;

use crate::document::{Method, MoleculeRecord, Warning};
use crate::draw::ticks::short;
use crate::draw::wording::{bracketed_charge, heading_formula};
use crate::figure::Numbering;
use crate::lettering::Lettering;

use table::wrap;

/// Choices about text.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct TextOptions {
    /// Columns of the terminal; less than 60 counts as 60.
    pub width: usize,
    /// Greek letters, subscripts and braille drawing; otherwise plain ASCII.
    pub unicode: bool,
    /// Add a drawing of the diagram.
    pub drawing: bool,
    /// Numbering of the labels.
    pub numbering: Numbering,
    /// Points of the whole sweep, where the document holds only some of them.
    pub points: Option<usize>,
}

impl Default for TextOptions {
    fn default() -> Self {
        Self {
            width: 80,
            unicode: true,
            drawing: true,
            numbering: Numbering::Core,
            points: None,
        }
    }
}

impl TextOptions {
    fn columns(&self) -> usize {
        self.width.clamp(60, 400)
    }

    /// A plain label as the terminal can show it.
    fn label(&self, plain: &str) -> String {
        if self.unicode {
            Lettering::level(plain).unicode()
        } else {
            plain.to_owned()
        }
    }

    /// Words with units as the terminal can show them.
    fn words(&self, text: &str) -> String {
        if self.unicode {
            return text.to_owned();
        }
        let plain = text
            .replace('°', " degree")
            .replace('Å', "angstrom")
            .replace('\u{2212}', "-");
        plain
            .chars()
            .map(|c| if c.is_ascii() { c } else { '?' })
            .collect()
    }

    /// Which label of a pair the numbering asks for; the other one where it is empty.
    fn pick<'a>(&self, core: &'a str, valence: &'a str) -> &'a str {
        match self.numbering {
            Numbering::Valence if !valence.is_empty() => valence,
            _ => core,
        }
    }

    fn paragraph(&self, out: &mut String, text: &str) {
        out.push_str(&wrap(&self.words(text), self.columns(), "  "));
    }
}

/// Molecule, electrons and method in one or two lines.
fn heading(out: &mut String, options: &TextOptions, molecule: &MoleculeRecord, method: &Method) {
    let unpaired = match molecule.unpaired {
        0 => "all paired".to_owned(),
        1 => "1 unpaired".to_owned(),
        more => format!("{more} unpaired"),
    };
    options.paragraph(
        out,
        &format!(
            "{}{}: {} valence electrons, {unpaired}",
            heading_formula(molecule),
            bracketed_charge(molecule.charge),
            molecule.valence_electrons
        ),
    );
    let polarised = if method.polarised_hydrogen {
        ", H with a 2p shell"
    } else {
        ""
    };
    options.paragraph(
        out,
        &format!(
            "{} coupling, K = {}; parameters \"{}\"{polarised}",
            method.coupling,
            short(method.k.get(), 4),
            method.parameter_set
        ),
    );
}

fn warnings(out: &mut String, options: &TextOptions, warnings: &[Warning]) {
    for warning in warnings {
        options.paragraph(out, &format!("note: {}", warning.text));
    }
}

/// Electrons as short as possible: `2`, `1.5`.
fn electrons(count: f64) -> String {
    short(count, 2)
}
