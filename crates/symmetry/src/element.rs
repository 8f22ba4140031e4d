//! What an operation is: rotation, reflection, inversion or rotation–reflection, about which axis.

use crate::matrix::{Matrix3, Vector3, determinant, negative, normalised, trace};

/// An operation as Schoenflies would describe it: a turn by `power`/`order` of a full turn about
/// `axis`, for improper ones followed by the reflection in the plane across the axis.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Element {
    pub(crate) proper: bool,
    /// 1 for the identity and (improper) for a mirror plane; improper with 2 is the inversion.
    pub(crate) order: u32,
    pub(crate) power: u32,
    /// Unit vector along the axis or normal to the plane; zero for identity and inversion.
    pub(crate) axis: Vector3,
}

impl Element {
    /// Describes an orthogonal matrix; `highest` bounds the order.
    pub(crate) fn new(m: &Matrix3, highest: u32) -> Self {
        let proper = determinant(m) > 0.0;
        // An improper operation is minus a rotation, hence S by half a turn more.
        let rotation = if proper { *m } else { negative(m) };
        let cos = (0.5 * (trace(&rotation) - 1.0)).clamp(-1.0, 1.0);
        if cos > 1.0 - 1e-8 {
            let order = if proper { 1 } else { 2 };
            return Self {
                proper,
                order,
                power: order - 1,
                axis: [0.0; 3],
            };
        }
        let axis = axis_of(&rotation, cos);
        let twice_sin = axis[0] * (rotation[2][1] - rotation[1][2])
            + axis[1] * (rotation[0][2] - rotation[2][0])
            + axis[2] * (rotation[1][0] - rotation[0][1]);
        let mut turn = libm::atan2(0.5 * twice_sin, cos) / (2.0 * std::f64::consts::PI);
        if !proper {
            turn += 0.5;
        }
        turn -= turn.floor();
        let (order, power) = fraction(turn, highest.max(2));
        Self {
            proper,
            order,
            power,
            axis,
        }
    }

    pub(crate) fn is_mirror(&self) -> bool {
        !self.proper && self.order == 1
    }

    pub(crate) fn is_inversion(&self) -> bool {
        !self.proper && self.order == 2
    }

    pub(crate) fn is_twofold(&self) -> bool {
        self.proper && self.order == 2
    }

    /// Plain name without the axis: `E`, `C3`, `C3^2`, `sigma`, `i`, `S4`.
    pub(crate) fn name(&self) -> String {
        let letter = match (self.proper, self.order) {
            (true, 1) => return "E".to_owned(),
            (false, 1) => return "sigma".to_owned(),
            (false, 2) => return "i".to_owned(),
            (true, _) => 'C',
            (false, _) => 'S',
        };
        // An even power of an odd S is a pure rotation, so the improper one is named once round.
        let again = !self.proper && self.order % 2 == 1 && self.power.is_multiple_of(2);
        let power = if again {
            self.power + self.order
        } else {
            self.power
        };
        if power == 1 {
            format!("{letter}{}", self.order)
        } else {
            format!("{letter}{}^{power}", self.order)
        }
    }
}

/// The axis of a rotation that is not the identity, from R + Rᵀ = 2 cos θ + 2 (1 − cos θ) a aᵀ.
fn axis_of(r: &Matrix3, cos: f64) -> Vector3 {
    let mut outer = [[0.0; 3]; 3];
    for i in 0..3 {
        for j in 0..3 {
            outer[i][j] = r[i][j] + r[j][i];
        }
        outer[i][i] -= 2.0 * cos;
    }
    let mut largest = 0;
    for k in 1..3 {
        if outer[k][k] > outer[largest][largest] + 1e-6 {
            largest = k;
        }
    }
    // The first component of some size points up, so that one axis has one name.
    let axis = normalised(outer[largest]);
    let first = axis.iter().find(|x| x.abs() > 1e-4).copied().unwrap_or(1.0);
    if first < 0.0 { axis.map(|x| -x) } else { axis }
}

/// The fraction of a full turn in lowest terms.
fn fraction(turn: f64, highest: u32) -> (u32, u32) {
    for order in 1..=highest {
        let power = (turn * f64::from(order)).round();
        if (turn * f64::from(order) - power).abs() < 1e-4 {
            return (order, power as u32 % order);
        }
    }
    (
        highest,
        (turn * f64::from(highest)).round() as u32 % highest,
    )
}

/// The kind of point group.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Family {
    Trivial,
    Mirror,
    Inversion,
    Cyclic,
    /// S with even order twice `n`.
    Improper,
    CyclicVertical,
    CyclicHorizontal,
    Dihedral,
    DihedralDiagonal,
    DihedralHorizontal,
    T,
    Td,
    Th,
    O,
    Oh,
    I,
    Ih,
    LinearPolar,
    LinearCentred,
    Spherical,
}

impl Family {
    /// The family and the order of the principal rotation, from the operations of a finite group.
    pub(crate) fn of(elements: &[Element]) -> (Self, u32) {
        let improper = elements.iter().any(|e| !e.proper);
        let inversion = elements.iter().any(Element::is_inversion);
        let mut axes: Vec<(Vector3, u32)> = Vec::new();
        for e in elements.iter().filter(|e| e.proper && e.order > 1) {
            match axes.iter_mut().find(|(axis, _)| parallel(*axis, e.axis)) {
                Some((_, order)) => *order = (*order).max(e.order),
                None => axes.push((e.axis, e.order)),
            }
        }
        if axes.iter().filter(|(_, order)| *order >= 3).count() > 1 {
            let family = match (elements.len(), improper, inversion) {
                (12, ..) => Self::T,
                (24, false, _) => Self::O,
                (24, true, false) => Self::Td,
                (24, true, true) => Self::Th,
                (48, ..) => Self::Oh,
                (60, ..) => Self::I,
                _ => Self::Ih,
            };
            return (family, 0);
        }
        let n = axes.iter().map(|(_, order)| *order).max().unwrap_or(1);
        let proper = elements.iter().filter(|e| e.proper).count();
        // In D2h any of the three axes may stand first, so all principal ones are looked at.
        let horizontal = elements.iter().any(|e| {
            e.is_mirror()
                && axes
                    .iter()
                    .any(|(axis, order)| *order == n && parallel(*axis, e.axis))
        });
        let mirror = elements.iter().any(Element::is_mirror);
        let family = if proper == 2 * n as usize {
            match (improper, horizontal) {
                (false, _) => Self::Dihedral,
                (true, true) => Self::DihedralHorizontal,
                (true, false) => Self::DihedralDiagonal,
            }
        } else if n == 1 {
            match (improper, mirror) {
                (false, _) => Self::Trivial,
                (true, true) => Self::Mirror,
                (true, false) => Self::Inversion,
            }
        } else {
            match (improper, horizontal, mirror) {
                (false, ..) => Self::Cyclic,
                (true, true, _) => Self::CyclicHorizontal,
                (true, false, true) => Self::CyclicVertical,
                (true, false, false) => Self::Improper,
            }
        };
        (family, n)
    }

    /// The plain Schoenflies symbol.
    pub(crate) fn name(self, n: u32) -> String {
        match self {
            Self::Trivial => "C1".to_owned(),
            Self::Mirror => "Cs".to_owned(),
            Self::Inversion => "Ci".to_owned(),
            Self::Cyclic => format!("C{n}"),
            Self::Improper => format!("S{}", 2 * n),
            Self::CyclicVertical => format!("C{n}v"),
            Self::CyclicHorizontal => format!("C{n}h"),
            Self::Dihedral => format!("D{n}"),
            Self::DihedralDiagonal => format!("D{n}d"),
            Self::DihedralHorizontal => format!("D{n}h"),
            Self::T => "T".to_owned(),
            Self::Td => "Td".to_owned(),
            Self::Th => "Th".to_owned(),
            Self::O => "O".to_owned(),
            Self::Oh => "Oh".to_owned(),
            Self::I => "I".to_owned(),
            Self::Ih => "Ih".to_owned(),
            Self::LinearPolar => "Cinfv".to_owned(),
            Self::LinearCentred => "Dinfh".to_owned(),
            Self::Spherical => "Kh".to_owned(),
        }
    }

    pub(crate) fn is_cubic(self) -> bool {
        matches!(
            self,
            Self::T | Self::Td | Self::Th | Self::O | Self::Oh | Self::I | Self::Ih
        )
    }

    pub(crate) fn is_dihedral(self) -> bool {
        matches!(
            self,
            Self::Dihedral | Self::DihedralDiagonal | Self::DihedralHorizontal
        )
    }
}

pub(crate) fn parallel(a: Vector3, b: Vector3) -> bool {
    crate::matrix::dot(a, b).abs() > 0.999
}

pub(crate) fn at_right_angles(a: Vector3, b: Vector3) -> bool {
    crate::matrix::dot(a, b).abs() < 0.04
}
