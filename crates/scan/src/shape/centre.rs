//! The atom about which the shape is judged, and what moves with each ligand.

use orbend_structure::{BondGraph, Molecule};
use thiserror::Error;

use crate::error::ScanError;

use super::motion::Motion;

/// The centre and its ligands, counted from 0.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Centre {
    /// The centre.
    pub atom: usize,
    /// Its two or three ligands.
    pub ligands: Vec<usize>,
    /// Per ligand all atoms that move with it when its bond is stretched, itself included.
    pub(crate) carried: Vec<Vec<usize>>,
}

/// Why there is no verdict.
#[derive(Debug, Error)]
pub enum ShapeError {
    /// The scan behind it could not be planned.
    #[error(transparent)]
    Scan(#[from] ScanError),
    /// The coordinate is not defined.
    #[error(transparent)]
    Coordinate(#[from] orbend_structure::CoordinateError),
    /// No atom has two or three neighbours.
    #[error(
        "{formula} has no centre with two or three ligands, so no shape class fits; \
         verdicts are given for bent or linear and for pyramidal or planar centres"
    )]
    NoCentre {
        /// The molecule.
        formula: String,
    },
    /// More than one atom could be the centre.
    #[error("{formula} has several possible centres: {}; choose one with --centre", .atoms.join(", "))]
    SeveralCentres {
        /// The molecule.
        formula: String,
        /// The atoms with their numbers and neighbours.
        atoms: Vec<String>,
    },
    /// The atom asked for has another number of neighbours.
    #[error(
        "atom {atom} cannot be the centre: it has {neighbours} neighbours, two or three are needed; \
         possible: {}", if .possible.is_empty() { "none".to_owned() } else { .possible.join(", ") }
    )]
    NotACentre {
        /// The atom with its number, or the number where there is no such atom.
        atom: String,
        /// Its neighbours.
        neighbours: usize,
        /// Atoms that could be.
        possible: Vec<String>,
    },
    /// The symmetric form itself could not be solved.
    #[error("the {word} form of {formula} could not be solved: two functions are nearly the same")]
    NoSymmetricForm {
        /// `linear` or `planar`.
        word: &'static str,
        /// The molecule.
        formula: String,
    },
}

impl Centre {
    /// Finds the centre, or checks the one asked for (from 0). With no more than four atoms an
    /// atom asked for has all others as ligands.
    ///
    /// # Errors
    /// No atom, several atoms, or another atom with two or three neighbours.
    pub fn find(molecule: &Molecule, asked: Option<usize>) -> Result<Self, ShapeError> {
        let graph = BondGraph::new(molecule);
        let atoms = molecule.len();
        let possible: Vec<usize> =
            (0..atoms).filter(|&atom| matches!(graph.neighbours(atom).len(), 2 | 3)).collect();
        let named = |list: &[usize]| -> Vec<String> {
            list.iter()
                .map(|&atom| {
                    let around: Vec<String> =
                        graph.neighbours(atom).iter().map(|&other| molecule.atom_name(other)).collect();
                    format!("{} (with {})", molecule.atom_name(atom), around.join(", "))
                })
                .collect()
        };
        if let Some(atom) = asked {
            let small = matches!(atoms, 3 | 4) && atom < atoms;
            if small {
                let ligands: Vec<usize> = (0..atoms).filter(|&other| other != atom).collect();
                let carried = ligands.iter().map(|&ligand| vec![ligand]).collect();
                return Ok(Self { atom, ligands, carried });
            }
            if !possible.contains(&atom) {
                let known = atom < atoms;
                return Err(ShapeError::NotACentre {
                    atom: if known { molecule.atom_name(atom) } else { (atom + 1).to_string() },
                    neighbours: if known { graph.neighbours(atom).len() } else { 0 },
                    possible: named(&possible),
                });
            }
            return Ok(Self::with_neighbours(&graph, atom));
        }
        match possible[..] {
            [] => Err(ShapeError::NoCentre { formula: molecule.formula() }),
            [atom] => Ok(Self::with_neighbours(&graph, atom)),
            _ => Err(ShapeError::SeveralCentres { formula: molecule.formula(), atoms: named(&possible) }),
        }
    }

    fn with_neighbours(graph: &BondGraph, atom: usize) -> Self {
        let ligands = graph.neighbours(atom).to_vec();
        let carried = ligands
            .iter()
            .map(|&ligand| graph.fragment(atom, ligand).unwrap_or_else(|| vec![ligand]))
            .collect();
        Self { atom, ligands, carried }
    }

    /// Bend with two ligands, pyramid with three.
    pub fn motion(&self) -> Motion {
        if self.ligands.len() == 2 { Motion::Bend } else { Motion::Pyramid }
    }

    /// Moves each ligand, with what hangs on it, so that its bond is `scale` times as long.
    pub(crate) fn stretch(&self, scale: &[f64], positions: &mut [[f64; 3]]) {
        for ((&ligand, carried), factor) in self.ligands.iter().zip(&self.carried).zip(scale) {
            let shift: [f64; 3] = std::array::from_fn(|axis| {
                (factor - 1.0) * (positions[ligand][axis] - positions[self.atom][axis])
            });
            for &atom in carried {
                for (value, shift) in positions[atom].iter_mut().zip(shift) {
                    *value += shift;
                }
            }
        }
    }
}
