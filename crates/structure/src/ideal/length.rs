//! Bond lengths: given, published standard, or from covalent radii.

use super::connect::{is_alkali, is_halogen, is_hydrogen};
use crate::element::{BondOrder, Element};
use crate::units::Angstrom;
use thiserror::Error;

/// A bond length that a user sets: every bond between these elements.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BondOverride {
    /// One element.
    pub first: Element,
    /// The other.
    pub second: Element,
    /// The length.
    pub length: Angstrom,
}

/// A text that is no bond length.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error("bond `{argument}`: {cause}; write it like Si-F=1.59")]
pub struct BondOverrideError {
    /// The text.
    pub argument: String,
    /// What is wrong.
    pub cause: String,
}

impl std::str::FromStr for BondOverride {
    type Err = BondOverrideError;

    /// Reads `"Si-F=1.59"`, the length in Å.
    fn from_str(text: &str) -> Result<Self, BondOverrideError> {
        let refused = |cause: String| BondOverrideError {
            argument: text.to_string(),
            cause,
        };
        let Some((pair, value)) = text.split_once('=') else {
            return Err(refused("there is no `=`".into()));
        };
        let Some((first, second)) = pair.split_once('-') else {
            return Err(refused("there is no `-` between two elements".into()));
        };
        let element = |word: &str| {
            let found = Element::from_symbol(word.trim());
            found.ok_or_else(|| refused(format!("`{word}` is not an element symbol")))
        };
        let length = value.trim().parse::<f64>().ok();
        let length = length
            .filter(|x| (0.2..=20.0).contains(x))
            .ok_or_else(|| refused(format!("`{value}` is not a length between 0.2 and 20 Å")))?;
        Ok(Self {
            first: element(first)?,
            second: element(second)?,
            length: Angstrom(length),
        })
    }
}

/// A bond of an ideal geometry and where its length comes from.
#[derive(Clone, Debug, PartialEq)]
pub struct BondLengthUsed {
    /// The two atoms, counted from 0.
    pub atoms: [usize; 2],
    /// The length.
    pub length: Angstrom,
    /// Its source in words.
    pub source: String,
}

const SUTTON: &str =
    "standard length (Sutton, Tables of Interatomic Distances, 1958/1965; from memory)";
const HUBER: &str =
    "standard length (Huber & Herzberg, Constants of Diatomic Molecules, 1979; from memory)";

/// Published standard lengths: elements, bond order, number of neighbours of
/// the centre (0: any), Å, source.
const STANDARD: [(&str, &str, f64, usize, f64, &str); 48] = [
    ("H", "H", 1.0, 1, 0.74, HUBER),
    ("Li", "H", 1.0, 0, 1.60, HUBER),
    ("Na", "H", 1.0, 0, 1.89, HUBER),
    ("Be", "H", 1.0, 0, 1.34, HUBER),
    ("Mg", "H", 1.0, 0, 1.73, HUBER),
    ("B", "H", 1.0, 0, 1.20, SUTTON),
    ("Al", "H", 1.0, 1, 1.65, HUBER),
    ("Al", "H", 1.0, 0, 1.60, SUTTON),
    ("C", "H", 1.0, 0, 1.09, SUTTON),
    ("Si", "H", 1.0, 0, 1.48, SUTTON),
    ("Ge", "H", 1.0, 0, 1.53, SUTTON),
    ("Sn", "H", 1.0, 0, 1.70, SUTTON),
    ("N", "H", 1.0, 0, 1.01, SUTTON),
    ("P", "H", 1.0, 0, 1.42, SUTTON),
    ("As", "H", 1.0, 0, 1.52, SUTTON),
    ("Sb", "H", 1.0, 0, 1.71, SUTTON),
    ("O", "H", 1.0, 0, 0.96, SUTTON),
    ("S", "H", 1.0, 0, 1.34, SUTTON),
    ("Se", "H", 1.0, 0, 1.46, SUTTON),
    ("Te", "H", 1.0, 0, 1.66, SUTTON),
    ("F", "H", 1.0, 0, 0.92, SUTTON),
    ("Cl", "H", 1.0, 0, 1.27, SUTTON),
    ("Br", "H", 1.0, 0, 1.41, SUTTON),
    ("I", "H", 1.0, 0, 1.61, SUTTON),
    ("C", "O", 2.0, 2, 1.16, SUTTON),
    ("C", "O", 2.0, 3, 1.21, SUTTON),
    ("C", "O", 3.0, 2, 1.14, SUTTON),
    ("C", "S", 2.0, 2, 1.55, SUTTON),
    ("C", "N", 3.0, 0, 1.16, SUTTON),
    ("C", "C", 3.0, 2, 1.20, SUTTON),
    ("C", "C", 2.0, 3, 1.34, SUTTON),
    ("C", "F", 1.0, 0, 1.33, SUTTON),
    ("N", "N", 2.0, 0, 1.24, SUTTON),
    ("N", "N", 1.0, 0, 1.45, SUTTON),
    ("N", "F", 1.0, 0, 1.37, SUTTON),
    ("N", "Cl", 1.0, 0, 1.75, SUTTON),
    ("O", "O", 1.0, 0, 1.48, SUTTON),
    ("O", "O", 2.0, 0, 1.21, HUBER),
    ("O", "F", 1.0, 0, 1.42, SUTTON),
    ("O", "Cl", 1.0, 0, 1.70, SUTTON),
    ("F", "F", 1.0, 0, 1.42, SUTTON),
    ("S", "O", 2.0, 0, 1.43, SUTTON),
    ("S", "Cl", 1.0, 0, 2.00, SUTTON),
    ("Cl", "O", 2.0, 0, 1.48, SUTTON),
    ("P", "O", 2.0, 0, 1.45, SUTTON),
    ("S", "S", 1.0, 0, 2.05, SUTTON),
    ("Si", "O", 2.0, 1, 1.51, HUBER),
    ("Li", "F", 1.0, 1, 1.56, HUBER),
];

/// Schomaker & Stevenson's coefficient (Å per unit of electronegativity).
const POLAR: f64 = 0.09;
/// The correction is used from this difference of electronegativity on.
const POLAR_FROM: f64 = 0.5;

/// Takes lengths, remembers their sources and which overrides were used.
pub(crate) struct Lengths<'a> {
    overrides: &'a [BondOverride],
    taken: Vec<bool>,
    used: Vec<BondLengthUsed>,
}

impl<'a> Lengths<'a> {
    pub(crate) fn new(overrides: &'a [BondOverride]) -> Self {
        Self {
            overrides,
            taken: vec![false; overrides.len()],
            used: Vec::new(),
        }
    }

    /// The length (Å) of the bond between two elements at a centre with
    /// `neighbours` neighbours; the later of two overrides counts.
    pub(crate) fn take(
        &mut self,
        pair: [Element; 2],
        atoms: [usize; 2],
        order: f64,
        neighbours: usize,
    ) -> f64 {
        let mut given = None;
        for (index, entry) in self.overrides.iter().enumerate() {
            let own = [entry.first, entry.second];
            if own == pair || own == [pair[1], pair[0]] {
                self.taken[index] = true;
                given = Some(entry.length.0);
            }
        }
        let (length, source) = match given {
            Some(length) => (length, "given".to_string()),
            None => estimate(pair, order, neighbours),
        };
        self.used.push(BondLengthUsed {
            atoms,
            length: Angstrom(length),
            source,
        });
        length
    }

    /// Notes a further bond with the length taken last.
    pub(crate) fn repeat(&mut self, atoms: [usize; 2]) {
        if let Some(last) = self.used.last().cloned() {
            self.used.push(BondLengthUsed { atoms, ..last });
        }
    }

    pub(crate) fn unused(&self) -> Option<&BondOverride> {
        let index = self.taken.iter().position(|taken| !taken)?;
        self.overrides.get(index)
    }

    /// The bonds asked for so far, each pair of elements once: `C–O, C–H`.
    pub(crate) fn pairs(&self, elements: &[Element]) -> String {
        let mut names: Vec<String> = Vec::new();
        for bond in &self.used {
            let [first, second] = bond.atoms.map(|atom| elements[atom]);
            let name = format!("{first}-{second}");
            if !names.contains(&name) {
                names.push(name);
            }
        }
        names.join(", ")
    }

    pub(crate) fn into_used(mut self) -> Vec<BondLengthUsed> {
        self.used.sort_by_key(|bond| bond.atoms);
        self.used
    }
}

/// Length (Å) and source for any bond order; between whole orders by straight line.
pub(crate) fn estimate(pair: [Element; 2], order: f64, neighbours: usize) -> (f64, String) {
    if order < 1.0 {
        // Pauling, J. Am. Chem. Soc. 69, 542 (1947): D(n) = D(1) − 0.71 log₁₀ n.
        let (single, source) = whole(pair, 1, neighbours);
        let length = single - 0.71 * libm::log10(order);
        return (length, format!("{source}, half bond by Pauling 1947"));
    }
    let low = order.floor();
    let (first, source) = whole(
        pair,
        if low > 2.0 {
            3
        } else if low > 1.0 {
            2
        } else {
            1
        },
        neighbours,
    );
    let fraction = order - low;
    if fraction < 1e-9 {
        return (first, source);
    }
    let (second, _) = whole(pair, if low > 1.0 { 3 } else { 2 }, neighbours);
    let length = first + fraction * (second - first);
    (
        length,
        format!("{source}, bond order {order:.2} between two whole orders"),
    )
}

fn whole(pair: [Element; 2], order: u8, neighbours: usize) -> (f64, String) {
    let [a, b] = pair.map(Element::symbol);
    let fits = |row: &&(&str, &str, f64, usize, f64, &str)| {
        ((row.0, row.1) == (a, b) || (row.0, row.1) == (b, a))
            && (row.2 - f64::from(order)).abs() < 1e-9
            && (row.3 == 0 || row.3 == neighbours)
    };
    if let Some(row) = STANDARD.iter().find(fits) {
        return (row.4, row.5.to_string());
    }
    from_radii(pair, order)
}

/// Sum of Pyykkö's radii of the order (of a lower one where a radius is
/// missing). Polar single bonds of main-group elements without hydrogen are
/// shortened by 0.09 Å per unit of electronegativity (Schomaker & Stevenson,
/// J. Am. Chem. Soc. 63, 37 (1941)), but not at N, O, F, whose bonds to one
/// another are already too short.
fn from_radii(pair: [Element; 2], order: u8) -> (f64, String) {
    let kind = |order: u8| match order {
        1 => BondOrder::Single,
        2 => BondOrder::Double,
        _ => BondOrder::Triple,
    };
    let mut order = order;
    let (mut sum, name) = loop {
        let radii = pair.map(|element| element.covalent_radius(kind(order)));
        if let [Some(first), Some(second)] = radii {
            let name = ["single", "double", "triple"][usize::from(order.clamp(1, 3)) - 1];
            break (first.0 + second.0, name);
        }
        if order <= 1 {
            break (pair[0].single_radius() + pair[1].single_radius(), "single");
        }
        order -= 1;
    };
    let mut source = format!("{name}-bond radii (Pyykkö & Atsumi 2009; from memory)");
    let hydrogen = pair
        .iter()
        .any(|&x| is_hydrogen(x) || x.is_transition_metal());
    let small = pair
        .iter()
        .all(|x| matches!(x.symbol(), "N" | "O" | "F" | "Cl"));
    if let (1, false, false, Some(first), Some(second)) = (
        order,
        hydrogen,
        small,
        pair[0].electronegativity(),
        pair[1].electronegativity(),
    ) && (first - second).abs() >= POLAR_FROM
    {
        sum -= POLAR * (first - second).abs();
        source.push_str(" with the Schomaker–Stevenson correction (1941)");
    }
    (sum, source)
}

/// Bond order of a diatomic: 1 with H, halogens or metals; otherwise by its
/// valence electrons (10: 3, 12: 2, 14: 1; 9 and 11: 2.5; 8: 2).
pub(crate) fn diatomic_order(pair: [Element; 2], charge: i32) -> f64 {
    let simple = |x: Element| {
        is_hydrogen(x)
            || is_halogen(x)
            || is_alkali(x)
            || x.is_transition_metal()
            || x.outer_electrons() < 3
            || (x.outer_electrons() == 3 && x.period() > 2)
    };
    if pair.iter().any(|&x| simple(x)) {
        return 1.0;
    }
    let sum = |x: Element| i32::from(x.outer_electrons());
    match sum(pair[0]) + sum(pair[1]) - charge {
        10 => 3.0,
        9 | 11 => 2.5,
        8 | 12 => 2.0,
        13 => 1.5,
        _ => 1.0,
    }
}
