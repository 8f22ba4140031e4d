//! Elements: symbols, names, covalent radii, electronegativities and the
//! ground-state configuration of the neutral atom.

use crate::element_table::ROWS;
use crate::units::Angstrom;

/// A chemical element, Z = 1 (hydrogen) to 86 (radon).
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Element(u8);

/// Which of the three covalent radii of an element is meant.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum BondOrder {
    /// One electron pair.
    Single,
    /// Two electron pairs.
    Double,
    /// Three electron pairs.
    Triple,
}

/// A shell of the neutral ground-state atom that holds electrons.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct OccupiedShell {
    /// Principal quantum number.
    pub n: u8,
    /// Angular momentum (0 = s, 1 = p, 2 = d, 3 = f).
    pub l: u8,
    /// Electrons in the shell, at least 1.
    pub electrons: u8,
}

/// Filling order by n + l, then n (Madelung's rule).
const FILLING_ORDER: [(u8, u8); 16] = [
    (1, 0),
    (2, 0),
    (2, 1),
    (3, 0),
    (3, 1),
    (4, 0),
    (3, 2),
    (4, 1),
    (5, 0),
    (4, 2),
    (5, 1),
    (6, 0),
    (4, 3),
    (5, 2),
    (6, 1),
    (7, 0),
];

type Anomaly = (u8, (u8, u8), (u8, u8), u8);

/// Ground states that break Madelung's rule: (Z, from, to, electrons moved).
/// NIST Atomic Spectra Database, ground levels of the neutral atoms; from memory.
const ANOMALIES: [Anomaly; 13] = [
    (24, (4, 0), (3, 2), 1), // Cr 3d5 4s1
    (29, (4, 0), (3, 2), 1), // Cu 3d10 4s1
    (41, (5, 0), (4, 2), 1), // Nb 4d4 5s1
    (42, (5, 0), (4, 2), 1), // Mo 4d5 5s1
    (44, (5, 0), (4, 2), 1), // Ru 4d7 5s1
    (45, (5, 0), (4, 2), 1), // Rh 4d8 5s1
    (46, (5, 0), (4, 2), 2), // Pd 4d10
    (47, (5, 0), (4, 2), 1), // Ag 4d10 5s1
    (57, (4, 3), (5, 2), 1), // La 5d1 6s2
    (58, (4, 3), (5, 2), 1), // Ce 4f1 5d1 6s2
    (64, (4, 3), (5, 2), 1), // Gd 4f7 5d1 6s2
    (78, (6, 0), (5, 2), 1), // Pt 5d9 6s1
    (79, (6, 0), (5, 2), 1), // Au 5d10 6s1
];

impl Element {
    /// The heaviest element known here (radon).
    pub const LAST: u8 = 86;

    /// The element with this symbol, in exact case (`"Si"`); `None` for anything else.
    pub fn from_symbol(symbol: &str) -> Option<Self> {
        let index = ROWS.iter().position(|row| row.symbol == symbol)?;
        Self::from_number(u8::try_from(index + 1).ok()?)
    }

    /// The element that a misspelt symbol or name most likely means
    /// (`"SI"`, `"si"`, `"silicon"`, `"D"`), for the fix in an error message.
    pub fn suggest(word: &str) -> Option<Self> {
        let lower = word.trim().to_lowercase();
        if lower == "d" || lower == "t" {
            return Self::from_number(1);
        }
        let index = ROWS
            .iter()
            .position(|row| row.symbol.to_lowercase() == lower || row.name == lower);
        let index = index.or(match lower.as_str() {
            "aluminum" => Some(12),
            "sulphur" => Some(15),
            "cesium" => Some(54),
            _ => None,
        })?;
        Self::from_number(u8::try_from(index + 1).ok()?)
    }

    /// The element with atomic number `number`; `None` outside 1 to 86.
    pub fn from_number(number: u8) -> Option<Self> {
        (1..=Self::LAST).contains(&number).then_some(Self(number))
    }

    /// All elements by rising atomic number.
    pub fn all() -> impl Iterator<Item = Self> {
        (1..=Self::LAST).map(Self)
    }

    /// Atomic number Z.
    pub fn number(self) -> u8 {
        self.0
    }

    /// Symbol (`"Si"`).
    pub fn symbol(self) -> &'static str {
        self.row().symbol
    }

    /// English name in lower case (`"silicon"`).
    pub fn name(self) -> &'static str {
        self.row().name
    }

    /// Electronegativity on Pauling's scale (Allred, J. Inorg. Nucl. Chem. 17,
    /// 215 (1961), from memory); `None` where the scale has no value.
    pub fn electronegativity(self) -> Option<f64> {
        let value = self.row().electronegativity;
        (value > 0.0).then_some(value)
    }

    /// Covalent radius for a bond of this order: Pyykkö & Atsumi, Chem. Eur. J.
    /// 15, 186 and 12770 (2009); Pyykkö, Riedel & Patzschke, Chem. Eur. J. 11,
    /// 3511 (2005). From memory. `None` where the sources have no value.
    pub fn covalent_radius(self, order: BondOrder) -> Option<Angstrom> {
        let column = match order {
            BondOrder::Single => 0,
            BondOrder::Double => 1,
            BondOrder::Triple => 2,
        };
        let radius = self.row().radii_pm[column];
        (radius > 0).then(|| Angstrom(f64::from(radius) / 100.0))
    }

    /// The single-bond radius in Å; every element has one.
    pub(crate) fn single_radius(self) -> f64 {
        f64::from(self.row().radii_pm[0]) / 100.0
    }

    /// Ground-state configuration of the neutral atom, shells by (n, l):
    /// Madelung's rule with the known exceptions.
    pub fn occupied_shells(self) -> Vec<OccupiedShell> {
        let mut left = self.0;
        let mut shells: Vec<OccupiedShell> = Vec::new();
        for (n, l) in FILLING_ORDER {
            let electrons = left.min(4 * l + 2);
            left -= electrons;
            shells.push(OccupiedShell { n, l, electrons });
        }
        for (number, from, to, moved) in ANOMALIES {
            if number == self.0 {
                for shell in &mut shells {
                    if (shell.n, shell.l) == from {
                        shell.electrons -= moved;
                    } else if (shell.n, shell.l) == to {
                        shell.electrons += moved;
                    }
                }
            }
        }
        shells.retain(|shell| shell.electrons > 0);
        shells.sort_unstable();
        shells
    }

    /// Electrons outside the noble-gas core (and outside filled d and f shells
    /// of p-block elements): the group number count used for shape rules.
    pub fn outer_electrons(self) -> u8 {
        let z = self.0;
        let core = [86, 54, 36, 18, 10, 2, 0]
            .into_iter()
            .find(|&core| core < z)
            .unwrap_or(0);
        let outer = z - core;
        match core {
            18 | 36 if outer > 12 => outer - 10,
            54 if outer > 26 => outer - 24,
            54 if outer > 17 => outer - 14,
            _ => outer,
        }
    }

    /// Row of the periodic table, 1 to 6.
    pub fn period(self) -> u8 {
        match self.0 {
            0..=2 => 1,
            3..=10 => 2,
            11..=18 => 3,
            19..=36 => 4,
            37..=54 => 5,
            _ => 6,
        }
    }

    /// Whether the element stands in groups 3 to 12 (d block, f block with it).
    pub fn is_transition_metal(self) -> bool {
        matches!(self.0, 21..=30 | 39..=48 | 57..=80)
    }

    fn row(self) -> &'static crate::element_table::Row {
        &ROWS[usize::from(self.0) - 1]
    }
}

impl std::fmt::Display for Element {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.pad(self.symbol())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn configuration(symbol: &str) -> String {
        let element = Element::from_symbol(symbol).unwrap();
        let words: Vec<String> = element
            .occupied_shells()
            .iter()
            .map(|shell| {
                let letter = ["s", "p", "d", "f"][usize::from(shell.l)];
                format!("{}{letter}{}", shell.n, shell.electrons)
            })
            .collect();
        words.join(" ")
    }

    #[test]
    fn symbols_return() {
        for element in Element::all() {
            assert_eq!(Element::from_symbol(element.symbol()), Some(element));
            assert!(element.covalent_radius(BondOrder::Single).is_some());
        }
        assert_eq!(Element::from_symbol("SI"), None);
        assert_eq!(Element::suggest("SI").map(Element::symbol), Some("Si"));
        assert_eq!(Element::suggest("Tungsten").map(Element::symbol), Some("W"));
        assert_eq!(Element::suggest("Xx"), None);
        assert_eq!(Element::from_number(0), None);
        assert_eq!(Element::from_number(87), None);
        assert_eq!(format!("{:>3}", Element::from_number(14).unwrap()), " Si");
    }

    #[test]
    fn electrons_add_up() {
        for element in Element::all() {
            let shells = element.occupied_shells();
            let sum: u8 = shells.iter().map(|shell| shell.electrons).sum();
            assert_eq!(sum, element.number());
            assert!(
                shells
                    .iter()
                    .all(|s| s.electrons <= 4 * s.l + 2 && s.l < s.n)
            );
        }
    }

    // NIST Atomic Spectra Database, from memory.
    #[test]
    fn known_configurations() {
        assert_eq!(configuration("S"), "1s2 2s2 2p6 3s2 3p4");
        assert_eq!(configuration("Cr"), "1s2 2s2 2p6 3s2 3p6 3d5 4s1");
        assert_eq!(configuration("Pd"), "1s2 2s2 2p6 3s2 3p6 3d10 4s2 4p6 4d10");
        assert!(configuration("Gd").ends_with("4f7 5s2 5p6 5d1 6s2"));
        assert!(configuration("La").ends_with("4d10 5s2 5p6 5d1 6s2"));
        assert!(configuration("Au").ends_with("4f14 5s2 5p6 5d10 6s1"));
        assert!(configuration("W").ends_with("5d4 6s2"));
    }

    #[test]
    fn outer_electrons_are_group_numbers() {
        let expected = [
            ("H", 1),
            ("He", 2),
            ("C", 4),
            ("Ne", 8),
            ("Al", 3),
            ("Ar", 8),
            ("Ti", 4),
            ("Ni", 10),
            ("Zn", 12),
            ("Ga", 3),
            ("Kr", 8),
            ("Xe", 8),
            ("Pt", 10),
            ("Hg", 12),
            ("Tl", 3),
            ("Bi", 5),
            ("Rn", 8),
            ("Hf", 4),
            ("Cs", 1),
        ];
        for (symbol, count) in expected {
            let element = Element::from_symbol(symbol).unwrap();
            assert_eq!(element.outer_electrons(), count, "{symbol}");
        }
    }
}
