//! The atom, or the two atoms, about which the shape is judged, and what moves with each bond.

use orbend_structure::{BondGraph, Coordinate, CoordinateKind, Molecule, measure};
use thiserror::Error;

use crate::error::ScanError;

use super::motion::{Motion, MotionKind};

/// √3/2.
const SIN_120: f64 = 0.866_025_403_784_438_6;
/// 1/√3.
const DIAGONAL: f64 = 0.577_350_269_189_625_8;
/// How far (degrees) angles may be from a straight chain, a plane or a threefold end.
const NEARLY: f64 = 5.0;

/// The centre and its ligands, counted from 0.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Centre {
    /// The centre; of a torsion or a chain the first of its two.
    pub atom: usize,
    /// The second centre of a torsion or a chain; otherwise the centre itself.
    pub other: usize,
    /// All neighbours of the centre.
    pub ligands: Vec<usize>,
    /// The outer atoms of a bend or a torsion.
    pub(crate) ends: [usize; 2],
    /// The atoms of a coordinate that the user named.
    pub(crate) named: Vec<usize>,
    /// Bonds whose lengths are varied.
    pub(crate) bonds: Vec<Bond>,
}

/// A bond with all atoms that move when it is stretched.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct Bond {
    pub(crate) root: usize,
    pub(crate) end: usize,
    carried: Vec<usize>,
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
    /// No atom has two to four neighbours.
    #[error(
        "{formula} has no centre with two to four ligands, so no shape class fits; \
         verdicts are given for bent or linear, pyramidal or planar, tetrahedral or square-planar \
         centres and for torsions"
    )]
    NoCentre {
        /// The molecule.
        formula: String,
    },
    /// More than one atom could be the centre.
    #[error(
        "{formula} has several possible centres: {}; choose one with --centre, or name a coordinate \
         such as --twist", .atoms.join(", ")
    )]
    SeveralCentres {
        /// The molecule.
        formula: String,
        /// The atoms with their numbers and neighbours.
        atoms: Vec<String>,
    },
    /// The atom asked for has another number of neighbours.
    #[error(
        "atom {atom} cannot be the centre: it has {neighbours} neighbours, two to four are needed; \
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
    /// Finds the centre and its motion, or checks the one asked for (from 0). With no more than
    /// four atoms an atom asked for has all others as ligands. Two equal neighbouring centres that
    /// hold all other atoms have a torsion, or both ends to bend where they are in line.
    ///
    /// # Errors
    /// No atom, several atoms, or an atom with another number of neighbours.
    pub fn find(molecule: &Molecule, asked: Option<usize>) -> Result<(Self, Motion), ShapeError> {
        let graph = BondGraph::new(molecule);
        let atoms = molecule.len();
        let count = |atom: usize| graph.neighbours(atom).len();
        if let Some(atom) = asked {
            if matches!(atoms, 3 | 4) && atom < atoms {
                let ligands: Vec<usize> = (0..atoms).filter(|&other| other != atom).collect();
                let bonds = ligands.iter().map(|&end| Bond {
                    root: atom,
                    end,
                    carried: vec![end],
                });
                return Ok(Self::at(atom, ligands.clone(), bonds.collect()));
            }
            if atom >= atoms || !matches!(count(atom), 2..=4) {
                let possible: Vec<usize> =
                    (0..atoms).filter(|&k| matches!(count(k), 2..=4)).collect();
                return Err(ShapeError::NotACentre {
                    atom: if atom < atoms {
                        molecule.atom_name(atom)
                    } else {
                        (atom + 1).to_string()
                    },
                    neighbours: if atom < atoms { count(atom) } else { 0 },
                    possible: named(molecule, &graph, &possible),
                });
            }
            return Ok(Self::with_neighbours(&graph, atom));
        }
        if let Some(found) = Self::pair(molecule, &graph) {
            return Ok(found);
        }
        // Four neighbours are nearly always tetrahedral: asked about only where nothing else is open.
        let mut possible: Vec<usize> = (0..atoms).filter(|&k| matches!(count(k), 2 | 3)).collect();
        if possible.is_empty() {
            possible = (0..atoms).filter(|&k| count(k) == 4).collect();
        }
        match possible[..] {
            [] => Err(ShapeError::NoCentre {
                formula: molecule.formula(),
            }),
            [atom] => Ok(Self::with_neighbours(&graph, atom)),
            _ => Err(ShapeError::SeveralCentres {
                formula: molecule.formula(),
                atoms: named(molecule, &graph, &possible),
            }),
        }
    }

    /// The centre of a coordinate that the user gave.
    ///
    /// # Errors
    /// None here; a coordinate that the molecule does not have is refused when the path is planned.
    pub(crate) fn along(molecule: &Molecule, coordinate: &Coordinate) -> (Self, Motion) {
        let graph = BondGraph::new(molecule);
        let atoms = &coordinate.atoms;
        let (atom, other) = match coordinate.kind {
            CoordinateKind::Bend => (atoms[1], atoms[1]),
            CoordinateKind::Twist => (atoms[1], atoms[2]),
            CoordinateKind::Pyramid => (atoms[0], atoms[0]),
            CoordinateKind::Stretch => (atoms[0], atoms[1]),
        };
        let ends = [atoms[0], atoms[atoms.len() - 1]];
        let mut bonds = bonds_at(&graph, atom, None);
        if other != atom {
            bonds.extend(bonds_at(&graph, other, Some(atom)));
        }
        if coordinate.kind == CoordinateKind::Stretch {
            // Its length is the coordinate.
            bonds.retain(|bond| (bond.root, bond.end) != (atom, other));
        }
        let ligands = graph.neighbours(atom).to_vec();
        let known = Self::pair(molecule, &graph)
            .filter(|(pair, _)| [pair.atom, pair.other] == [atom.min(other), atom.max(other)])
            .map(|found| found.1);
        let motion = Motion::given(coordinate, ligands.len() == 2, known);
        let centre = Self {
            atom,
            other,
            ligands,
            ends,
            named: atoms.clone(),
            bonds,
        };
        (centre, motion)
    }

    fn at(atom: usize, ligands: Vec<usize>, bonds: Vec<Bond>) -> (Self, Motion) {
        let motion = match ligands.len() {
            2 => Motion::BEND,
            3 => Motion::PYRAMID,
            _ => Motion::SQUASH,
        };
        let centre = Self {
            atom,
            other: atom,
            ends: [ligands[0], ligands[1]],
            ligands,
            named: Vec::new(),
            bonds,
        };
        (centre, motion)
    }

    fn with_neighbours(graph: &BondGraph, atom: usize) -> (Self, Motion) {
        let ligands = graph.neighbours(atom).to_vec();
        Self::at(atom, ligands, bonds_at(graph, atom, None))
    }

    /// X–A–A–X, X2A–AX2 and X3A–AX3.
    fn pair(molecule: &Molecule, graph: &BondGraph) -> Option<(Self, Motion)> {
        let inner: Vec<usize> = (0..molecule.len())
            .filter(|&atom| graph.neighbours(atom).len() > 1)
            .collect();
        let &[atom, other] = &inner[..] else {
            return None;
        };
        let own = |atom: usize, without: usize| -> Vec<usize> {
            let list = graph.neighbours(atom).iter().copied();
            list.filter(|&neighbour| neighbour != without).collect()
        };
        let (first, second) = (own(atom, other), own(other, atom));
        let alike = molecule.elements[atom] == molecule.elements[other]
            && graph.is_bonded(atom, other)
            && first.len() == second.len()
            && 2 + first.len() + second.len() == molecule.len();
        if !alike {
            return None;
        }
        let angle = |a: usize, b: usize, c: usize| {
            measure(CoordinateKind::Bend, &[a, b, c], &molecule.positions).unwrap_or(180.0)
        };
        let all = |wanted: &dyn Fn(usize, &[usize], usize) -> bool| {
            wanted(atom, &first, other) && wanted(other, &second, atom)
        };
        let straight = |centre: usize, list: &[usize], beyond: usize| {
            angle(list[0], centre, beyond) > 180.0 - NEARLY
        };
        let bent = |centre: usize, list: &[usize], beyond: usize| !straight(centre, list, beyond);
        let planar = |centre: usize, list: &[usize], beyond: usize| {
            let sum = angle(list[0], centre, list[1])
                + angle(list[0], centre, beyond)
                + angle(list[1], centre, beyond);
            (sum - 360.0).abs() < 1.0
        };
        let threefold = |centre: usize, list: &[usize], beyond: usize| {
            let angles: Vec<f64> = list.iter().map(|&a| angle(a, centre, beyond)).collect();
            angles.iter().all(|one| (one - angles[0]).abs() < NEARLY)
        };
        let motion = match first.len() {
            1 if all(&straight) => Motion::ENDS,
            1 if all(&bent) => Motion::twist(180.0),
            2 if all(&planar) => Motion::twist(90.0),
            3 if all(&threefold) => Motion::twist(60.0),
            _ => return None,
        };
        let mut bonds = bonds_at(graph, atom, None);
        bonds.extend(bonds_at(graph, other, Some(atom)));
        let ends = if motion.kind == MotionKind::Ends {
            [first[0], other]
        } else {
            [first[0], second[0]]
        };
        let centre = Self {
            atom,
            other,
            ligands: graph.neighbours(atom).to_vec(),
            ends,
            named: Vec::new(),
            bonds,
        };
        Some((centre, motion))
    }

    /// The two bends of a squash: one where a symmetry operation moves the other pair along.
    pub(crate) fn pairs(&self) -> Vec<Vec<usize>> {
        let pair = |i: usize| vec![self.ligands[i], self.atom, self.ligands[i + 1]];
        vec![pair(0), pair(2)]
    }

    /// A start of the motion's own with the bond lengths of the molecule (Å), for a centre with
    /// single atoms around it; `None` where more hangs on it.
    pub(crate) fn own_start(&self, molecule: &Molecule, motion: Motion) -> Option<Vec<[f64; 3]>> {
        let directions: &[[f64; 3]] = match motion.kind {
            MotionKind::Bend => &[[0.0, 0.0, 1.0], [0.0, 0.0, -1.0]],
            MotionKind::Pyramid => &[[1.0, 0.0, 0.0], [-0.5, SIN_120, 0.0], [-0.5, -SIN_120, 0.0]],
            MotionKind::Squash => &[
                [DIAGONAL, DIAGONAL, DIAGONAL],
                [-DIAGONAL, -DIAGONAL, DIAGONAL],
                [DIAGONAL, -DIAGONAL, -DIAGONAL],
                [-DIAGONAL, DIAGONAL, -DIAGONAL],
            ],
            _ => return None,
        };
        let whole = molecule.len() == self.ligands.len() + 1;
        if !whole || directions.len() != self.ligands.len() {
            return None;
        }
        let mut positions = vec![[0.0; 3]; molecule.len()];
        for (&ligand, direction) in self.ligands.iter().zip(directions) {
            let length = distance(&molecule.positions, self.atom, ligand);
            positions[ligand] = direction.map(|component| component * length);
        }
        Some(positions)
    }

    /// One pair of ligands in line, the first two at 100° in the plane across.
    pub(crate) fn see_saw_start(&self, molecule: &Molecule) -> Option<Vec<[f64; 3]>> {
        if molecule.len() != 5 || self.ligands.len() != 4 {
            return None;
        }
        let (sine, cosine) = libm::sincos(50f64.to_radians());
        let directions = [
            [sine, 0.0, cosine],
            [-sine, 0.0, cosine],
            [0.0, 1.0, 0.0],
            [0.0, -1.0, 0.0],
        ];
        let mut positions = vec![[0.0; 3]; 5];
        for (&ligand, direction) in self.ligands.iter().zip(directions) {
            let length = distance(&molecule.positions, self.atom, ligand);
            positions[ligand] = direction.map(|component| component * length);
        }
        Some(positions)
    }

    /// Puts equal ligands into the pairs that become trans.
    pub(crate) fn pair_up(&mut self, molecule: &Molecule) {
        self.ligands
            .sort_by_key(|&ligand| molecule.elements[ligand]);
        let key = |k: usize| molecule.elements[self.ligands[k]];
        // A pair in the middle (X Y Y Z) goes to the front.
        if self.ligands.len() == 4 && key(0) != key(1) && key(1) == key(2) {
            self.ligands.rotate_left(1);
        }
        self.ends = [self.ligands[0], self.ligands[1]];
    }

    /// Moves the far side of each bond so that the bond is `scale` times as long.
    pub(crate) fn stretch(&self, scale: &[f64], positions: &mut [[f64; 3]]) {
        for (bond, factor) in self.bonds.iter().zip(scale) {
            let shift: [f64; 3] = std::array::from_fn(|axis| {
                (factor - 1.0) * (positions[bond.end][axis] - positions[bond.root][axis])
            });
            for &atom in &bond.carried {
                for (value, shift) in positions[atom].iter_mut().zip(shift) {
                    *value += shift;
                }
            }
        }
    }
}

/// Distance of two atoms, in the unit of the positions.
pub(crate) fn distance(positions: &[[f64; 3]], a: usize, b: usize) -> f64 {
    (0..3)
        .map(|axis| (positions[b][axis] - positions[a][axis]).powi(2))
        .sum::<f64>()
        .sqrt()
}

/// All bonds of an atom but the one to `without`.
fn bonds_at(graph: &BondGraph, root: usize, without: Option<usize>) -> Vec<Bond> {
    let ends = graph.neighbours(root).iter().copied();
    ends.filter(|&end| Some(end) != without)
        .map(|end| Bond {
            root,
            end,
            carried: graph.fragment(root, end).unwrap_or_else(|| vec![end]),
        })
        .collect()
}

fn named(molecule: &Molecule, graph: &BondGraph, list: &[usize]) -> Vec<String> {
    list.iter()
        .map(|&atom| {
            let around: Vec<String> = graph
                .neighbours(atom)
                .iter()
                .map(|&other| molecule.atom_name(other))
                .collect();
            format!("{} (with {})", molecule.atom_name(atom), around.join(", "))
        })
        .collect()
}
