//! From a named coordinate to its motions: which fragments move, and which
//! equivalent partners move along.

use super::error::PathError;
use super::motion::{Arm, Motion, across};
use crate::bonds::BondGraph;
use crate::coordinate::{Coordinate, CoordinateKind, atoms_text};
use crate::measure::{angle_degrees, torsion_degrees};
use crate::molecule::Molecule;
use crate::vector::{Vector, add, cross, dot, norm, perpendicular, subtract, unit};

/// What surrounds the choice of motions.
pub(crate) struct Setting<'a> {
    pub(crate) molecule: &'a Molecule,
    pub(crate) graph: &'a BondGraph,
    pub(crate) permutations: &'a [Vec<usize>],
}

/// The motions of one coordinate: the named one first, then its partners.
#[derive(Clone, Debug)]
pub(crate) struct Motions {
    pub(crate) list: Vec<Motion>,
    /// Defining atoms of the partners.
    pub(crate) partners: Vec<Vec<usize>>,
    /// A sentence on what moves.
    pub(crate) described: String,
}

impl Setting<'_> {
    /// The motions of `coordinate`.
    pub(crate) fn motions(&self, coordinate: &Coordinate) -> Result<Motions, PathError> {
        for &atom in &coordinate.atoms {
            if atom >= self.molecule.len() {
                return Err(PathError::NoSuchAtom {
                    coordinate: coordinate.name(),
                    atom: atom + 1,
                    atoms: self.molecule.len(),
                });
            }
        }
        let mut refused = None;
        for tier in self.choices(coordinate) {
            let mut best: Option<Motions> = None;
            for shares in tier {
                match self.with_shares(coordinate, shares) {
                    Ok(found) => {
                        let more = |best: &Motions| found.partners.len() > best.partners.len();
                        if best.as_ref().is_none_or(more) {
                            best = Some(found);
                        }
                    }
                    Err(error) => refused = refused.or(Some(error)),
                }
            }
            if let Some(best) = best {
                return Ok(best);
            }
        }
        Err(refused.unwrap_or(PathError::NoCoordinate))
    }

    /// Shares of the two arms, in tiers of preference: half each when a
    /// symmetry operation exchanges them; the last-named arm when it moves
    /// alone; otherwise the lighter arm, or the other one when more partners
    /// can follow then. A tier counts only where the one before is impossible
    /// (an arm in a ring).
    fn choices(&self, coordinate: &Coordinate) -> Vec<Vec<[f64; 2]>> {
        const FIRST: [f64; 2] = [1.0, 0.0];
        const LAST: [f64; 2] = [0.0, 1.0];
        if coordinate.kind == CoordinateKind::Pyramid || coordinate.alone {
            return vec![vec![LAST]];
        }
        let atoms = &coordinate.atoms;
        let exchanged = self.permutations.iter().any(|p| match coordinate.kind {
            CoordinateKind::Bend => {
                p[atoms[0]] == atoms[2] && p[atoms[2]] == atoms[0] && p[atoms[1]] == atoms[1]
            }
            CoordinateKind::Stretch => p[atoms[0]] == atoms[1] && p[atoms[1]] == atoms[0],
            _ => p[atoms[1]] == atoms[2] && p[atoms[2]] == atoms[1],
        });
        if exchanged {
            return vec![vec![[0.5, 0.5]], vec![LAST, FIRST]];
        }
        let weight = |root: usize, end: usize| {
            let side = self.side(root, end).unwrap_or_default();
            let elements = &self.molecule.elements;
            side.iter()
                .map(|&atom| u32::from(elements[atom].number()))
                .sum::<u32>()
        };
        let (first, last) = match coordinate.kind {
            CoordinateKind::Bend => (weight(atoms[1], atoms[0]), weight(atoms[1], atoms[2])),
            CoordinateKind::Stretch => (weight(atoms[1], atoms[0]), weight(atoms[0], atoms[1])),
            _ => (weight(atoms[2], atoms[1]), weight(atoms[1], atoms[2])),
        };
        if first < last {
            vec![vec![FIRST, LAST]]
        } else {
            vec![vec![LAST, FIRST]]
        }
    }

    fn with_shares(&self, coordinate: &Coordinate, shares: [f64; 2]) -> Result<Motions, PathError> {
        let named = self.motion(coordinate, &coordinate.atoms, shares, &[])?;
        let mut moved = vec![false; self.molecule.len()];
        for atom in named.moving() {
            moved[atom] = true;
        }
        let mut list = vec![named];
        let mut partners = Vec::new();
        let mut left_behind = 0;
        if !coordinate.alone {
            for image in self.images(coordinate) {
                let Ok(motion) = self.motion(coordinate, &image, shares, &list) else {
                    left_behind += 1;
                    continue;
                };
                let moving = motion.moving();
                // Neither may move what the other one moves or is measured by.
                let disturbs = moving.iter().any(|&atom| moved[atom])
                    || image
                        .iter()
                        .any(|&atom| moved[atom] && !moving.contains(&atom))
                    || list.iter().any(|other| {
                        other
                            .measured_atoms()
                            .iter()
                            .any(|atom| moving.contains(atom))
                    });
                if disturbs {
                    // A torsion of the same bond has been set by the same turn.
                    left_behind += usize::from(!self.same_bond(coordinate, &image));
                    continue;
                }
                for atom in moving {
                    moved[atom] = true;
                }
                list.push(motion);
                partners.push(image);
            }
        }
        let described = self.describe(coordinate, &list, &partners, left_behind, &moved);
        Ok(Motions {
            list,
            partners,
            described,
        })
    }

    /// The different images of the defining atoms under the permutations,
    /// without the atoms themselves and their reverse, sorted.
    fn images(&self, coordinate: &Coordinate) -> Vec<Vec<usize>> {
        let own = &coordinate.atoms;
        let reversed = |atoms: &[usize]| -> Vec<usize> { atoms.iter().rev().copied().collect() };
        let mut images: Vec<Vec<usize>> = Vec::new();
        for permutation in self.permutations {
            let image: Vec<usize> = own.iter().map(|&atom| permutation[atom]).collect();
            let back = reversed(&image);
            let known = |other: &Vec<usize>| *other == image || *other == back;
            if !known(own) && !images.iter().any(known) {
                images.push(image);
            }
        }
        images.sort_unstable();
        images
    }

    fn same_bond(&self, coordinate: &Coordinate, image: &[usize]) -> bool {
        let own = &coordinate.atoms;
        coordinate.kind == CoordinateKind::Twist
            && ((own[1] == image[1] && own[2] == image[2])
                || (own[1] == image[2] && own[2] == image[1]))
    }

    /// Atoms on `end`'s side of `root`; the whole piece of `end` when the two
    /// are not connected.
    fn side(&self, root: usize, end: usize) -> Option<Vec<usize>> {
        if self.graph.is_connected(root, end) {
            self.graph.fragment(root, end)
        } else {
            Some(self.graph.piece(end))
        }
    }

    /// As [`Self::side`], refused by name when the two atoms are connected but
    /// not bonded, or bonded in a ring.
    fn arm(
        &self,
        coordinate: &Coordinate,
        root: usize,
        end: usize,
        share: f64,
    ) -> Result<Arm, PathError> {
        let graph = self.graph;
        if graph.is_connected(root, end) && !graph.is_bonded(root, end) {
            let bonds = graph.bonds();
            let shown = bonds.iter().take(8).map(|&(a, b)| atoms_text(&[a, b]));
            let mut words: Vec<String> = shown.collect();
            if bonds.len() > 8 {
                words.push("…".into());
            }
            return Err(PathError::NotBonded {
                coordinate: coordinate.name(),
                first: self.molecule.atom_name(root),
                second: self.molecule.atom_name(end),
                bonds: words.join(", "),
            });
        }
        if share <= 0.0 {
            return Ok(Arm {
                atoms: Vec::new(),
                share: 0.0,
            });
        }
        match self.side(root, end) {
            Some(atoms) => Ok(Arm { atoms, share }),
            None => Err(PathError::Ring {
                coordinate: coordinate.name(),
                first: self.molecule.atom_name(root),
                second: self.molecule.atom_name(end),
            }),
        }
    }

    fn motion(
        &self,
        coordinate: &Coordinate,
        atoms: &[usize],
        shares: [f64; 2],
        earlier: &[Motion],
    ) -> Result<Motion, PathError> {
        match coordinate.kind {
            CoordinateKind::Bend => {
                let [a, b, c] = [atoms[0], atoms[1], atoms[2]];
                let first = self.arm(coordinate, b, a, shares[0])?;
                let last = self.arm(coordinate, b, c, shares[1])?;
                let holds = |arm: &Arm, other: usize| arm.atoms.contains(&other);
                if holds(&first, c) || holds(&last, a) {
                    return Err(self.ring(coordinate, a, c));
                }
                Ok(Motion::Bend {
                    atoms: [a, b, c],
                    a: first,
                    c: last,
                    lift: self.lift([a, b, c], earlier),
                })
            }
            CoordinateKind::Stretch => {
                let [i, j] = [atoms[0], atoms[1]];
                Ok(Motion::Stretch {
                    atoms: [i, j],
                    i: self.arm(coordinate, j, i, shares[0])?,
                    j: self.arm(coordinate, i, j, shares[1])?,
                })
            }
            CoordinateKind::Twist => self.twist(coordinate, atoms, shares),
            CoordinateKind::Pyramid => self.pyramid(coordinate, atoms[0]),
        }
    }

    fn ring(&self, coordinate: &Coordinate, first: usize, second: usize) -> PathError {
        PathError::Ring {
            coordinate: coordinate.name(),
            first: self.molecule.atom_name(first),
            second: self.molecule.atom_name(second),
        }
    }

    fn twist(
        &self,
        coordinate: &Coordinate,
        atoms: &[usize],
        shares: [f64; 2],
    ) -> Result<Motion, PathError> {
        let [a, b, c, d] = [atoms[0], atoms[1], atoms[2], atoms[3]];
        let position = |atom: usize| self.molecule.positions[atom];
        // The middle may be a straight chain of bonds (allene).
        let straight = |chain: &[usize]| {
            chain.windows(3).all(|w| {
                let angle = angle_degrees(position(w[0]), position(w[1]), position(w[2]));
                self.graph.neighbours(w[1]).len() == 2 && angle.is_some_and(|x| x > 179.9)
            })
        };
        let chain = self
            .graph
            .shortest_chain(b, c)
            .filter(|chain| straight(chain));
        let Some(chain) = chain else {
            self.arm(coordinate, b, c, 1.0)?;
            return Err(PathError::NotBonded {
                coordinate: coordinate.name(),
                first: self.molecule.atom_name(b),
                second: self.molecule.atom_name(c),
                bonds: "the middle two atoms of a torsion must be".into(),
            });
        };
        let side_b = self.graph.fragment(chain[1], b);
        let side_c = self.graph.fragment(chain[chain.len() - 2], c);
        let (Some(side_b), Some(side_c)) = (side_b, side_c) else {
            return Err(self.ring(coordinate, b, c));
        };
        for (atom, side, end) in [(a, &side_b, b), (d, &side_c, c)] {
            if !side.contains(&atom) {
                return Err(PathError::WrongSide {
                    coordinate: coordinate.name(),
                    atom: self.molecule.atom_name(atom),
                    end: self.molecule.atom_name(end),
                });
            }
        }
        // A mirror-image partner has the opposite torsion; where the start
        // cannot tell (0° or 180°), the partner turns the same way.
        let torsion = |t: &[usize]| {
            torsion_degrees(
                position(t[0]),
                position(t[1]),
                position(t[2]),
                position(t[3]),
            )
        };
        let sign = match (torsion(&coordinate.atoms), torsion(atoms)) {
            (Some(own), Some(other)) => {
                let apart = |x: f64| (x - 360.0 * (x / 360.0).round()).abs();
                if apart(own + other) + 1e-3 < apart(own - other) {
                    -1.0
                } else {
                    1.0
                }
            }
            _ => 1.0,
        };
        let arm = |atoms: Vec<usize>, share: f64| Arm {
            atoms: if share > 0.0 { atoms } else { Vec::new() },
            share,
        };
        Ok(Motion::Twist {
            atoms: [a, b, c, d],
            b: arm(side_b, shares[0]),
            c: arm(side_c, shares[1]),
            sign,
            near: coordinate.range.from,
        })
    }

    fn pyramid(&self, coordinate: &Coordinate, centre: usize) -> Result<Motion, PathError> {
        let neighbours = self.graph.neighbours(centre);
        let &[first, second, third] = neighbours else {
            return Err(PathError::NotThreeCoordinate {
                coordinate: coordinate.name(),
                atom: self.molecule.atom_name(centre),
                count: neighbours.len(),
            });
        };
        let ligands = [first, second, third];
        let mut fragments: [Vec<usize>; 3] = Default::default();
        for (fragment, ligand) in fragments.iter_mut().zip(ligands) {
            *fragment = self.arm(coordinate, centre, ligand, 1.0)?.atoms;
        }
        // A ligand that carries an equivalent centre keeps its direction, so
        // that both centres can move.
        let images: Vec<usize> = self.permutations.iter().map(|p| p[centre]).collect();
        let carries = |atoms: &Vec<usize>| {
            !coordinate.alone && images.iter().any(|image| atoms.contains(image))
        };
        Ok(Motion::Pyramid {
            centre,
            ligands,
            anchor: fragments.iter().position(carries),
            fragments,
        })
    }

    /// Where a bend that starts straight goes: towards the other neighbours of
    /// the middle atom; where these cancel, out of their plane or towards the
    /// first of them; without other neighbours towards the first atom off the
    /// line; and in a linear molecule along the Cartesian axis that the line is
    /// least along. A partner takes the opposite side where it can.
    fn lift(&self, [a, b, c]: [usize; 3], earlier: &[Motion]) -> Vector {
        let position = |atom: usize| self.molecule.positions[atom];
        let nothing = [0.0; 3];
        let Some(line) = unit(subtract(position(a), position(c))) else {
            return nothing;
        };
        let others: Vec<Vector> = self
            .graph
            .neighbours(b)
            .iter()
            .filter(|&&atom| atom != a && atom != c)
            .filter_map(|&atom| {
                let away = unit(subtract(position(atom), position(b)))?;
                Some(perpendicular(away, line)).filter(|part| norm(*part) > 1e-3)
            })
            .collect();
        let sum = others.iter().fold(nothing, |sum, &other| add(sum, other));
        if let Some(direction) = unit(sum).filter(|_| norm(sum) > 1e-3) {
            return direction;
        }
        if let Some(Motion::Bend { lift, .. }) = earlier.last()
            && dot(*lift, line).abs() < 1e-3
        {
            return lift.map(|x| -x);
        }
        if let Some(&first) = others.first() {
            let flat = others.iter().all(|&other| norm(cross(first, other)) < 1e-3);
            return if flat {
                across(line, cross(line, first))
            } else {
                across(line, first)
            };
        }
        let off_line = (0..self.molecule.len()).find_map(|atom| {
            let part = perpendicular(subtract(position(atom), position(b)), line);
            (norm(part) > 0.05).then_some(part)
        });
        across(line, off_line.unwrap_or(nothing))
    }

    fn describe(
        &self,
        coordinate: &Coordinate,
        list: &[Motion],
        partners: &[Vec<usize>],
        left_behind: usize,
        moved: &[bool],
    ) -> String {
        let names = |atoms: Vec<usize>| -> String {
            let words: Vec<String> = atoms
                .iter()
                .map(|&atom| self.molecule.atom_name(atom))
                .collect();
            words.join(", ")
        };
        let chosen = |flag: bool| {
            (0..moved.len())
                .filter(|&atom| moved[atom] == flag)
                .collect()
        };
        let halves = list.iter().any(|motion| match motion {
            Motion::Bend { a, c, .. } => !a.atoms.is_empty() && !c.atoms.is_empty(),
            Motion::Stretch { i, j, .. } => !i.atoms.is_empty() && !j.atoms.is_empty(),
            Motion::Twist { b, c, .. } => !b.atoms.is_empty() && !c.atoms.is_empty(),
            Motion::Pyramid { .. } => false,
        });
        let verb = |atoms: &Vec<usize>| if atoms.len() == 1 { "s" } else { "" };
        let moving: Vec<usize> = chosen(true);
        let s = verb(&moving);
        let mut text = format!("{}: {} move{s}", coordinate.name(), names(moving));
        if halves {
            text.push_str(" (both arms by half)");
        }
        let still: Vec<usize> = chosen(false);
        if !still.is_empty() {
            let s = verb(&still);
            text.push_str(&format!(", {} stay{s}", names(still)));
        }
        if !partners.is_empty() {
            let words: Vec<String> = partners.iter().map(|atoms| atoms_text(atoms)).collect();
            text.push_str(&format!("; moved along by symmetry: {}", words.join(", ")));
        }
        if left_behind > 0 {
            text.push_str(&format!(
                "; {left_behind} equivalent {} cannot have the same value and adapt",
                coordinate.kind
            ));
        }
        text
    }
}
