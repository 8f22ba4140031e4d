//! A point group as it stands in space, with its operations, classes and irreps.

use crate::axes::{self, Frame};
use crate::characters::{Character, Classes, characters};
use crate::element::{Element, Family, parallel};
use crate::error::SymmetryError;
use crate::matrix::{Matrix3, Vector3};
use crate::multiplication::Multiplication;
use crate::names::{self, Marks, Parts};
use crate::nucleus::Centred;

/// A symmetry operation of the molecule.
#[derive(Clone, Debug, PartialEq)]
pub struct Operation {
    /// The orthogonal matrix that acts on positions relative to the centre, in the frame of the
    /// input.
    pub matrix: Matrix3,
    /// Atom i goes to the place of atom `permutation[i]`.
    pub permutation: Vec<usize>,
    /// Plain name: `E`, `C2(z)`, `C3`, `C2'`, `sigma_h`, `sigma(xz)`, `S4^3`, `i`.
    pub label: String,
}

/// A class of conjugate operations.
#[derive(Clone, Debug, PartialEq)]
pub struct Class {
    /// Name with the number of operations: `E`, `2C3`, `3sigma_v`.
    pub label: String,
    /// Indices of the operations.
    pub operations: Vec<usize>,
}

/// An irreducible representation over the real numbers.
#[derive(Clone, Debug, PartialEq)]
pub struct Irrep {
    /// ASCII name: `b1`, `e1g`, `a2''`, `sigma_g+`.
    pub plain: String,
    /// Name for print: `b₁`, `e₁g`, `a₂″`, `σg⁺`.
    pub display: String,
    /// Number of orbitals in one set.
    pub dimension: usize,
    /// Whether two complex-conjugate irreps stand together (the e of Cn, Cnh, S2n, T, Th).
    pub paired: bool,
    /// One character per class of [`PointGroup::classes`].
    pub characters: Vec<f64>,
    pub(crate) parts: Parts,
}

/// A point group in the position that the molecule gives it.
///
/// C∞v and D∞h are represented by the operations of C8v and D8h about the axis, which tell σ, π,
/// δ and φ apart (orbitals up to l = 3 reach no further); a single atom is `Kh` with irreps `sg`,
/// `pu`, `dg`, `fu` and the operations E and i.
#[derive(Clone, Debug)]
pub struct PointGroup {
    /// Plain Schoenflies symbol: `C2v`, `D6h`, `Td`, `Dinfh`.
    pub name: String,
    /// Where x, y and z point.
    pub axes: Frame,
    /// The rule that put the axes there, for print.
    pub convention: String,
    /// The operations, identity first.
    pub operations: Vec<Operation>,
    /// Conjugacy classes, identity first.
    pub classes: Vec<Class>,
    /// Irreps in the usual order (g before u, a b e t g h).
    pub irreps: Vec<Irrep>,
    /// Whether all atoms lie on one line.
    pub linear: bool,
    pub(crate) family: Family,
    pub(crate) n: u32,
    pub(crate) class_of: Vec<usize>,
}

/// Operations before they have names.
pub(crate) struct RawOperation {
    pub(crate) matrix: Matrix3,
    pub(crate) permutation: Vec<usize>,
}

impl PointGroup {
    /// A finite group from exact matrices, closed under multiplication.
    pub(crate) fn finite(
        mut raw: Vec<RawOperation>,
        atoms: &Centred,
        tolerance: f64,
    ) -> Result<Self, SymmetryError> {
        let highest = u32::try_from(raw.len()).unwrap_or(u32::MAX);
        raw.sort_by_cached_key(|op| {
            let e = Element::new(&op.matrix, highest);
            let kind = match (e.proper, e.order) {
                (true, 1) => 0,
                (true, _) => 1,
                (false, 2) => 2,
                (false, 1) => 4,
                (false, _) => 3,
            };
            (kind, u32::MAX - e.order, e.power, op.permutation.clone())
        });
        let elements: Vec<Element> = raw
            .iter()
            .map(|op| Element::new(&op.matrix, highest))
            .collect();
        let (family, n) = Family::of(&elements);
        let (frame, convention) = axes::choose(family, n, &elements, atoms, tolerance);
        Self::assemble(raw, &elements, family, n, frame, convention)
    }

    pub(crate) fn assemble(
        raw: Vec<RawOperation>,
        elements: &[Element],
        family: Family,
        n: u32,
        frame: Frame,
        convention: String,
    ) -> Result<Self, SymmetryError> {
        let matrices: Vec<Matrix3> = raw.iter().map(|op| op.matrix).collect();
        let table = Multiplication::of_matrices(&matrices)
            .ok_or(SymmetryError::Inconsistent("the operations do not close"))?;
        let classes = Classes::new(&table);
        let all = characters(&table, &classes).ok_or(SymmetryError::Inconsistent(
            "the characters are not orthogonal",
        ))?;
        let linear = matches!(family, Family::LinearPolar | Family::LinearCentred);
        let naming = Naming {
            elements,
            classes: &classes,
            family,
            n,
            frame: &frame,
        };
        let irreps = naming.irreps(&all);
        let labels = naming.operation_labels();
        let named_classes = classes
            .members
            .iter()
            .map(|members| Class {
                label: match members.len() {
                    1 => labels[members[0]].clone(),
                    size => format!("{size}{}", labels[members[0]]),
                },
                operations: members.clone(),
            })
            .collect();
        Ok(Self {
            name: family.name(n),
            axes: frame,
            convention,
            operations: raw
                .into_iter()
                .zip(labels)
                .map(|(op, label)| Operation {
                    matrix: op.matrix,
                    permutation: op.permutation,
                    label,
                })
                .collect(),
            classes: named_classes,
            irreps,
            linear,
            family,
            n,
            class_of: classes.of,
        })
    }

    /// Number of operations (of the finite stand-in for linear molecules).
    pub fn order(&self) -> usize {
        self.operations.len()
    }

    /// Index of the irrep with a plain name.
    pub fn irrep(&self, plain: &str) -> Option<usize> {
        self.irreps.iter().position(|irrep| irrep.plain == plain)
    }

    /// The same label (a plain irrep, with or without a number before it) in the other usual
    /// choice of axes, named by [`PointGroup::other_convention`]: b1 and b2 exchanged in C2v, Cnv,
    /// Dn and Dnh with even n; b1 and b3 in D2 and D2h. Unchanged in all other groups.
    pub fn other_axes(&self, label: &str) -> String {
        match self.other_convention() {
            None => label.to_owned(),
            Some(_) if self.three_twofold() => names::exchanged(label, '1', '3'),
            Some(_) => names::exchanged(label, '1', '2'),
        }
    }

    /// What the other usual choice of axes is; `None` where the names do not depend on it.
    pub fn other_convention(&self) -> Option<&'static str> {
        if self.three_twofold() {
            return Some("x and z exchanged (b1 and b3 exchanged)");
        }
        let even = self.n.is_multiple_of(2);
        match self.family {
            Family::CyclicVertical if self.n == 2 => {
                Some("x and y exchanged (b1 and b2 exchanged)")
            }
            Family::CyclicVertical if even => {
                Some("sigma_v and sigma_d exchanged (b1 and b2 exchanged)")
            }
            Family::Dihedral | Family::DihedralHorizontal if even => {
                Some("C2' and C2'' exchanged (b1 and b2 exchanged)")
            }
            _ => None,
        }
    }

    fn three_twofold(&self) -> bool {
        self.n == 2 && matches!(self.family, Family::Dihedral | Family::DihedralHorizontal)
    }
}

struct Naming<'a> {
    elements: &'a [Element],
    classes: &'a Classes,
    family: Family,
    n: u32,
    frame: &'a Frame,
}

impl Naming<'_> {
    fn find(&self, wanted: impl Fn(&Element) -> bool) -> Option<usize> {
        self.elements
            .iter()
            .position(wanted)
            .map(|op| self.classes.of[op])
    }

    /// The smallest turn about z, or the C5 of icosahedral groups: its order and class.
    fn principal(&self) -> (u32, Option<usize>) {
        let smallest = |e: &Element| e.power == 1 || e.power + 1 == e.order;
        if self.family.is_cubic() {
            return (5, self.find(|e| e.proper && e.order == 5 && smallest(e)));
        }
        let doubled = match self.family {
            Family::DihedralDiagonal | Family::Improper => self.n.is_multiple_of(2),
            _ => false,
        };
        let order = if doubled { 2 * self.n } else { self.n };
        let class = self.find(|e| {
            e.proper != doubled && e.order == order && smallest(e) && parallel(e.axis, self.frame.z)
        });
        (order, class)
    }

    fn irreps(&self, all: &[Character]) -> Vec<Irrep> {
        let (order, principal) = self.principal();
        let along = |axis: Vector3| move |e: &Element| e.is_twofold() && parallel(e.axis, axis);
        let three =
            self.n == 2 && matches!(self.family, Family::Dihedral | Family::DihedralHorizontal);
        let twofold = [self.frame.z, self.frame.y, self.frame.x].map(|axis| self.find(along(axis)));
        let linear = matches!(self.family, Family::LinearPolar | Family::LinearCentred);
        let vertical = |e: &Element| e.is_mirror() && parallel(e.axis, self.frame.y);
        let second = match self.family {
            Family::O | Family::Oh => self.find(|e| e.proper && e.order == 4),
            Family::Td => self.find(|e| !e.proper && e.order == 4),
            Family::CyclicVertical => self.find(vertical),
            _ if linear => self.find(vertical),
            _ if self.family.is_dihedral() => self.find(along(self.frame.x)),
            _ => None,
        };
        let inversion = self.find(Element::is_inversion);
        let horizontal = self.find(|e| e.is_mirror() && parallel(e.axis, self.frame.z));
        let horizontal = if self.family.is_cubic() {
            None
        } else {
            horizontal
        };
        let marks: Vec<Marks> = all
            .iter()
            .map(|c| Marks {
                dimension: c.dimension,
                principal: principal.map_or(1.0, |k| c.values[k]),
                twofold: match twofold {
                    [Some(z), Some(y), Some(x)] if three => {
                        Some([c.values[z], c.values[y], c.values[x]])
                    }
                    _ => None,
                },
                second: second.map(|k| c.values[k]),
                inversion: inversion.map(|k| c.values[k]),
                horizontal: horizontal.map(|k| c.values[k]),
            })
            .collect();
        let parts: Vec<Option<Parts>> = if linear {
            marks.iter().map(|m| names::linear(order, m)).collect()
        } else {
            names::parts(self.family, order, &marks)
                .into_iter()
                .map(Some)
                .collect()
        };
        let mut irreps: Vec<Irrep> = all
            .iter()
            .zip(parts)
            .filter_map(|(c, parts)| {
                let parts = parts?;
                Some(Irrep {
                    plain: parts.plain(),
                    display: parts.display(),
                    dimension: c.dimension,
                    paired: c.paired,
                    characters: c.values.clone(),
                    parts,
                })
            })
            .collect();
        irreps.sort_by_key(|irrep| irrep.parts.key());
        irreps
    }

    fn operation_labels(&self) -> Vec<String> {
        (0..self.elements.len())
            .map(|op| self.operation_label(op))
            .collect()
    }

    fn operation_label(&self, op: usize) -> String {
        let e = &self.elements[op];
        let class = &self.classes.members[self.classes.of[op]];
        let along = [self.frame.x, self.frame.y, self.frame.z]
            .iter()
            .position(|axis| parallel(*axis, e.axis));
        let same_class = |other: Option<usize>| other == Some(self.classes.of[op]);
        if e.is_twofold() {
            let primed = if self.family.is_cubic() {
                along.is_none() && matches!(self.family, Family::O | Family::Oh)
            } else {
                self.family.is_dihedral() && class.len() > 1
            };
            if primed {
                let first = self.find(|e| e.is_twofold() && parallel(e.axis, self.frame.x));
                let two = !self.family.is_cubic() && !same_class(first);
                return if two { "C2''" } else { "C2'" }.to_owned();
            }
        }
        if e.is_mirror() {
            let three = self.n == 2 && self.family != Family::DihedralDiagonal;
            let own_plane = three && !matches!(self.family, Family::CyclicHorizontal);
            if own_plane && let Some(k) = along {
                return ["sigma(yz)", "sigma(xz)", "sigma(xy)"][k].to_owned();
            }
            let first = self.find(|e| e.is_mirror() && parallel(e.axis, self.frame.y));
            return match (self.family, along) {
                (Family::Ih, _) => "sigma",
                (Family::Td | Family::DihedralDiagonal, _) => "sigma_d",
                (Family::Th | Family::Mirror, _) => "sigma_h",
                (Family::Oh, Some(_)) | (_, Some(2)) => "sigma_h",
                (Family::Oh, None) => "sigma_d",
                _ if same_class(first) => "sigma_v",
                _ => "sigma_d",
            }
            .to_owned();
        }
        match along {
            Some(k) if class.len() == 1 && e.is_twofold() => {
                format!("C2({})", ["x", "y", "z"][k])
            }
            _ => e.name(),
        }
    }
}
