//! Axes by convention: where z and x point in each group, and the words that say so.
//!
//! C2v and planar D2h follow Mulliken, J. Chem. Phys. 23, 1997 (1955); where no convention is
//! agreed on, the rule is stated in the convention string.

use crate::element::{Element, Family, at_right_angles, parallel};
use crate::matrix::{
    Matrix3, Vector3, any_perpendicular, cross, distance, dot, norm, normalised, perpendicular,
    scaled, sum,
};
use crate::nucleus::Centred;

/// The axes of a group in the frame of the input.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Frame {
    /// The fixed point of the operations, Å.
    pub origin: [f64; 3],
    /// Unit vector of the x axis.
    pub x: [f64; 3],
    /// Unit vector of the y axis.
    pub y: [f64; 3],
    /// Unit vector of the z axis.
    pub z: [f64; 3],
}

impl Frame {
    /// The matrix whose rows are the axes: it turns components in the frame of the input into
    /// components along x, y, z.
    pub fn rotation(&self) -> Matrix3 {
        [self.x, self.y, self.z]
    }
}

/// Axes, the words for them, and whether all atoms lie in one plane across x or z.
pub(crate) fn choose(
    family: Family,
    n: u32,
    elements: &[Element],
    atoms: &Centred,
    tolerance: f64,
) -> (Frame, String) {
    let scorer = Scorer::new(atoms, tolerance);
    let (z, x, text) = match family {
        Family::Trivial | Family::Inversion => (
            [0.0, 0.0, 1.0],
            [1.0, 0.0, 0.0],
            "axes of the input".to_owned(),
        ),
        Family::Mirror => {
            let z = elements
                .iter()
                .find(|e| e.is_mirror())
                .map_or([0.0, 0.0, 1.0], |e| e.axis);
            (
                z,
                scorer.towards_first(z),
                "z perpendicular to the mirror plane".to_owned(),
            )
        }
        _ if family.is_cubic() => cubic(family, elements, &scorer),
        Family::Dihedral | Family::DihedralHorizontal if n == 2 => three_axes(elements, &scorer),
        _ => axial(family, n, elements, &scorer),
    };
    let z = scorer.signed(z);
    let x = scorer.signed(normalised(perpendicular(x, z)));
    (
        Frame {
            origin: atoms.centre,
            x,
            y: cross(z, x),
            z,
        },
        text,
    )
}

type Choice = (Vector3, Vector3, String);

fn axial(family: Family, n: u32, elements: &[Element], scorer: &Scorer) -> Choice {
    // The axis of highest order, S counted with C: in D2d and S4 that is the S4 axis.
    let mut z = [0.0, 0.0, 1.0];
    let mut highest = 0;
    for e in elements {
        let counts = e.order > highest && e.order > 1 && !e.is_inversion();
        if counts {
            highest = e.order;
            z = e.axis;
        }
    }
    let twofold: Vec<Vector3> = elements
        .iter()
        .filter(|e| e.is_twofold() && at_right_angles(e.axis, z))
        .map(|e| e.axis)
        .collect();
    let vertical: Vec<Vector3> = elements
        .iter()
        .filter(|e| e.is_mirror() && at_right_angles(e.axis, z))
        .map(|e| e.axis)
        .collect();
    match family {
        Family::CyclicVertical if n == 2 => {
            let x = scorer.best_plane(&vertical);
            let text = if scorer.all_in_plane(x) {
                "z along C2, x perpendicular to the plane"
            } else {
                "z along C2, x perpendicular to the mirror plane through most atoms"
            };
            (z, x, text.to_owned())
        }
        Family::CyclicVertical => {
            let normal = scorer.best_plane(&vertical);
            let text = format!("z along C{n}, xz the mirror plane through most atoms (sigma_v)");
            (z, cross(normal, z), text)
        }
        _ if family.is_dihedral() => {
            let x = scorer.best_axis(&twofold);
            let main = if family == Family::DihedralDiagonal && n.is_multiple_of(2) {
                format!("S{}", 2 * n)
            } else {
                format!("C{n}")
            };
            (
                z,
                x,
                format!("z along {main}, x along the C2' axis through most atoms"),
            )
        }
        Family::Improper if n.is_multiple_of(2) => {
            (z, scorer.towards_first(z), format!("z along S{}", 2 * n))
        }
        _ => (z, scorer.towards_first(z), format!("z along C{n}")),
    }
}

/// D2 and D2h: three twofold axes, none of them principal.
fn three_axes(elements: &[Element], scorer: &Scorer) -> Choice {
    let axes: Vec<Vector3> = elements
        .iter()
        .filter(|e| e.is_twofold())
        .map(|e| e.axis)
        .collect();
    let normal = axes.iter().copied().find(|&axis| scorer.all_in_plane(axis));
    let in_plane: Vec<Vector3> = axes
        .iter()
        .copied()
        .filter(|&axis| normal.is_none_or(|n| !parallel(n, axis)))
        .collect();
    let z = scorer.best_axis(&in_plane);
    let others: Vec<Vector3> = axes
        .into_iter()
        .filter(|&axis| !parallel(z, axis))
        .collect();
    let x = scorer.best_plane(&others);
    let text = if normal.is_some() {
        "x perpendicular to the plane, z along the C2 axis through most atoms (then most bonds)"
    } else {
        "z along the C2 axis through most atoms (then most bonds), \
         x perpendicular to the plane closest to the atoms"
    };
    (z, x, text.to_owned())
}

fn cubic(family: Family, elements: &[Element], scorer: &Scorer) -> Choice {
    let wanted = |e: &&Element| match family {
        Family::O | Family::Oh => e.proper && e.order == 4,
        Family::Td => !e.proper && e.order == 4,
        _ => e.is_twofold(),
    };
    let mut axes: Vec<Vector3> = Vec::new();
    for e in elements.iter().filter(wanted) {
        if !axes.iter().any(|&axis| parallel(axis, e.axis)) {
            axes.push(e.axis);
        }
    }
    let z = scorer.best_axis(&axes);
    axes.retain(|&axis| at_right_angles(axis, z));
    let x = scorer.best_axis(&axes);
    let text = match family {
        Family::O | Family::Oh => "x, y, z along the C4 axes",
        Family::Td => "x, y, z along the S4 axes",
        _ => "x, y, z along three C2 axes at right angles",
    };
    (z, x, text.to_owned())
}

/// Counts atoms and bonds on axes and planes.
struct Scorer<'a> {
    atoms: &'a Centred,
    /// Middles of neighbouring pairs.
    bonds: Vec<Vector3>,
    /// What still counts as lying on an axis or plane, Å.
    on: f64,
}

struct Score {
    atoms: usize,
    bonds: usize,
    distance: f64,
    weighted: f64,
    each: Vec<f64>,
}

impl Score {
    /// Most atoms, then most bonds, then closest to all atoms, then closest to the first atoms of
    /// the input: only elements that are equivalent by symmetry get that far.
    fn beats(&self, other: &Self) -> bool {
        if self.atoms != other.atoms {
            return self.atoms > other.atoms;
        }
        if self.bonds != other.bonds {
            return self.bonds > other.bonds;
        }
        let pairs = [
            (self.distance, other.distance),
            (self.weighted, other.weighted),
        ];
        let each = self.each.iter().copied().zip(other.each.iter().copied());
        for (a, b) in pairs.into_iter().chain(each) {
            if (a - b).abs() > 1e-3 * (1.0 + a.abs()) {
                return a < b;
            }
        }
        false
    }
}

impl<'a> Scorer<'a> {
    fn new(atoms: &'a Centred, tolerance: f64) -> Self {
        Self {
            atoms,
            bonds: middles(atoms),
            on: tolerance.max(0.02),
        }
    }

    fn score(&self, distance_of: impl Fn(Vector3) -> f64) -> Score {
        let each: Vec<f64> = self
            .atoms
            .positions
            .iter()
            .map(|p| distance_of(*p))
            .collect();
        Score {
            atoms: each.iter().filter(|d| **d <= self.on).count(),
            bonds: self
                .bonds
                .iter()
                .filter(|p| distance_of(**p) <= self.on)
                .count(),
            distance: each.iter().sum(),
            weighted: each
                .iter()
                .zip(&self.atoms.kinds)
                .map(|(d, kind)| d * f64::from(*kind))
                .sum(),
            each,
        }
    }

    fn best(&self, candidates: &[Vector3], score: impl Fn(Vector3) -> Score) -> Vector3 {
        let mut best: Option<(Vector3, Score)> = None;
        for &candidate in candidates {
            let s = score(candidate);
            if best.as_ref().is_none_or(|(_, b)| s.beats(b)) {
                best = Some((candidate, s));
            }
        }
        best.map_or([1.0, 0.0, 0.0], |(candidate, _)| candidate)
    }

    fn best_axis(&self, candidates: &[Vector3]) -> Vector3 {
        self.best(candidates, |axis| {
            self.score(|p| norm(perpendicular(p, axis)))
        })
    }

    fn best_plane(&self, normals: &[Vector3]) -> Vector3 {
        self.best(normals, |normal| self.score(|p| dot(p, normal).abs()))
    }

    fn all_in_plane(&self, normal: Vector3) -> bool {
        self.atoms
            .positions
            .iter()
            .all(|p| dot(*p, normal).abs() <= self.on)
    }

    /// Perpendicular to z, towards the first atom of the input that is off the axis.
    fn towards_first(&self, z: Vector3) -> Vector3 {
        self.atoms
            .positions
            .iter()
            .map(|p| perpendicular(*p, z))
            .find(|p| norm(*p) > 0.05)
            .map_or_else(|| any_perpendicular(z), normalised)
    }

    /// The direction of an axis in which the first atom off the plane across it lies.
    fn signed(&self, axis: Vector3) -> Vector3 {
        let first = self
            .atoms
            .positions
            .iter()
            .map(|p| dot(*p, axis))
            .find(|x| x.abs() > 0.05);
        if first.is_some_and(|x| x < 0.0) {
            scaled(axis, -1.0)
        } else {
            axis
        }
    }
}

/// Middles of all pairs that are not much longer than the shortest distance of one of the two.
fn middles(atoms: &Centred) -> Vec<Vector3> {
    let count = atoms.len();
    let mut nearest = vec![f64::INFINITY; count];
    for i in 0..count {
        for j in 0..i {
            let d = distance(atoms.positions[i], atoms.positions[j]);
            nearest[i] = nearest[i].min(d);
            nearest[j] = nearest[j].min(d);
        }
    }
    let mut out = Vec::new();
    for i in 0..count {
        for j in 0..i {
            let (a, b) = (atoms.positions[i], atoms.positions[j]);
            if distance(a, b) <= 1.4 * nearest[i].max(nearest[j]) {
                out.push(scaled(sum(a, b), 0.5));
            }
        }
    }
    out
}
