//! A molecule: elements, positions, charge and unpaired electrons.

use crate::element::Element;
use crate::neighbours::CellGrid;
use thiserror::Error;

/// Two atoms nearer than this (Å) are refused: no chemistry is that short, and
/// the overlap matrix would be singular.
pub const SMALLEST_DISTANCE: f64 = 0.2;
/// Coordinates beyond this (Å) are taken for a mistake.
pub const LARGEST_COORDINATE: f64 = 1.0e6;

/// Atoms with their positions in Å.
#[derive(Clone, Debug, PartialEq)]
pub struct Molecule {
    /// One element per atom.
    pub elements: Vec<Element>,
    /// One position per atom, Å.
    pub positions: Vec<[f64; 3]>,
    /// Total charge in units of e.
    pub charge: i32,
    /// Unpaired electrons where they were given.
    pub unpaired: Option<u32>,
    /// A line of text about the molecule; may be empty.
    pub title: String,
}

/// A set of atoms that is no molecule.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum MoleculeError {
    /// No atoms.
    #[error("there are no atoms; give at least one")]
    Empty,
    /// Lists of different length.
    #[error("{elements} elements stand beside {positions} positions; give one position per atom")]
    Lengths {
        /// Number of elements.
        elements: usize,
        /// Number of positions.
        positions: usize,
    },
    /// A coordinate that is not a finite number of reasonable size.
    #[error(
        "atom {atom} ({element}): coordinate {axis} is {value}; give a finite number below 10^6 Å"
    )]
    NotFinite {
        /// Atom, counted from 1.
        atom: usize,
        /// Its element.
        element: Element,
        /// x, y or z.
        axis: char,
        /// The value.
        value: f64,
    },
    /// Two atoms on top of each other.
    #[error(
        "atoms {first} ({first_element}) and {second} ({second_element}) are {distance:.4} Å apart, closer than 0.2 Å; move them apart or remove one of them (are the coordinates in the unit that was stated?)"
    )]
    Close {
        /// First atom, counted from 1.
        first: usize,
        /// Its element.
        first_element: Element,
        /// Second atom, counted from 1.
        second: usize,
        /// Its element.
        second_element: Element,
        /// Distance, Å.
        distance: f64,
    },
}

impl Molecule {
    /// A molecule from elements and positions (Å), checked.
    ///
    /// # Errors
    /// No atoms, lists of different length, a coordinate that is not finite or
    /// beyond 10⁶ Å, or two atoms closer than 0.2 Å: named, counted from 1.
    pub fn new(
        elements: Vec<Element>,
        positions: Vec<[f64; 3]>,
        charge: i32,
        unpaired: Option<u32>,
        title: impl Into<String>,
    ) -> Result<Self, MoleculeError> {
        let molecule = Self {
            elements,
            positions,
            charge,
            unpaired,
            title: title.into(),
        };
        molecule.check()?;
        Ok(molecule)
    }

    /// Checks what [`Molecule::new`] checks, for a molecule whose public fields
    /// were changed.
    ///
    /// # Errors
    /// As [`Molecule::new`].
    pub fn check(&self) -> Result<(), MoleculeError> {
        if self.elements.is_empty() {
            return Err(MoleculeError::Empty);
        }
        if self.elements.len() != self.positions.len() {
            return Err(MoleculeError::Lengths {
                elements: self.elements.len(),
                positions: self.positions.len(),
            });
        }
        for (atom, position) in self.positions.iter().enumerate() {
            for (axis, &value) in ['x', 'y', 'z'].into_iter().zip(position) {
                if !value.is_finite() || value.abs() > LARGEST_COORDINATE {
                    return Err(MoleculeError::NotFinite {
                        atom: atom + 1,
                        element: self.elements[atom],
                        axis,
                        value,
                    });
                }
            }
        }
        self.check_distances()
    }

    fn check_distances(&self) -> Result<(), MoleculeError> {
        let mut grid = CellGrid::new(&self.positions, 1.0);
        for (atom, &position) in self.positions.iter().enumerate() {
            let mut close: Option<(usize, f64)> = None;
            grid.near(position, SMALLEST_DISTANCE, |other, distance| {
                if close.is_none_or(|(first, _)| other < first) {
                    close = Some((other, distance));
                }
            });
            if let Some((first, distance)) = close {
                return Err(MoleculeError::Close {
                    first: first + 1,
                    first_element: self.elements[first],
                    second: atom + 1,
                    second_element: self.elements[atom],
                    distance,
                });
            }
            grid.insert(atom);
        }
        Ok(())
    }

    /// Number of atoms.
    pub fn len(&self) -> usize {
        self.elements.len()
    }

    /// Whether there are no atoms (never, when checked).
    pub fn is_empty(&self) -> bool {
        self.elements.is_empty()
    }

    /// The formula in Hill's order (C, H, then the alphabet; without carbon all
    /// by the alphabet), without the charge: Hill, J. Am. Chem. Soc. 22, 478 (1900).
    pub fn formula(&self) -> String {
        let mut counts: Vec<(&str, usize)> = Vec::new();
        for element in &self.elements {
            let symbol = element.symbol();
            match counts.iter_mut().find(|(known, _)| *known == symbol) {
                Some((_, count)) => *count += 1,
                None => counts.push((symbol, 1)),
            }
        }
        let carbon = counts.iter().any(|(symbol, _)| *symbol == "C");
        counts.sort_by_key(|&(symbol, _)| match symbol {
            "C" if carbon => (0, symbol),
            "H" if carbon => (1, symbol),
            _ => (2, symbol),
        });
        let mut formula = String::new();
        for (symbol, count) in counts {
            formula.push_str(symbol);
            if count > 1 {
                formula.push_str(&count.to_string());
            }
        }
        formula
    }

    /// `"Si1"`: an atom with its number counted from 1, as messages name it.
    pub fn atom_name(&self, atom: usize) -> String {
        match self.elements.get(atom) {
            Some(element) => format!("{element}{}", atom + 1),
            None => format!("atom {}", atom + 1),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn element(symbol: &str) -> Element {
        Element::from_symbol(symbol).unwrap()
    }

    fn build(symbols: &[&str], positions: &[[f64; 3]]) -> Result<Molecule, MoleculeError> {
        let elements = symbols.iter().map(|s| element(s)).collect();
        Molecule::new(elements, positions.to_vec(), 0, None, "")
    }

    #[test]
    fn hill_order() {
        let line = |n: usize| -> Vec<[f64; 3]> { (0..n).map(|i| [i as f64, 0.0, 0.0]).collect() };
        assert_eq!(build(&["S", "H", "H"], &line(3)).unwrap().formula(), "H2S");
        assert_eq!(
            build(&["O", "C", "H", "H"], &line(4)).unwrap().formula(),
            "CH2O"
        );
        assert_eq!(
            build(&["Si", "F", "F"], &line(3)).unwrap().formula(),
            "F2Si"
        );
        assert_eq!(build(&["Si", "F"], &line(2)).unwrap().atom_name(1), "F2");
    }

    #[test]
    fn refusals_name_the_atoms() {
        assert_eq!(build(&[], &[]), Err(MoleculeError::Empty));
        assert!(matches!(
            build(&["H"], &[]),
            Err(MoleculeError::Lengths {
                elements: 1,
                positions: 0
            })
        ));
        let error = build(&["H", "O"], &[[0.0; 3], [0.0, f64::NAN, 0.0]]).unwrap_err();
        assert!(matches!(
            error,
            MoleculeError::NotFinite {
                atom: 2,
                axis: 'y',
                ..
            }
        ));
        let far = build(&["H"], &[[0.0, 0.0, 1e300]]).unwrap_err();
        assert!(matches!(
            far,
            MoleculeError::NotFinite {
                atom: 1,
                axis: 'z',
                ..
            }
        ));
        let error = build(
            &["H", "F", "O"],
            &[[0.95, 0.0, 0.0], [3.0, 0.0, 0.0], [1.05, 0.0, 0.1]],
        );
        let text = error.unwrap_err().to_string();
        assert!(
            text.starts_with("atoms 1 (H) and 3 (O) are 0.1414 Å apart"),
            "{text}"
        );
        assert!(build(&["H", "H"], &[[0.0; 3], [0.2, 0.0, 0.0]]).is_ok());
    }
}
