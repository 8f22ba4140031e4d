//! A quick test whether a geometry has the group of a reference, without a search.

use crate::error::SymmetryError;
use crate::matrix::{Vector3, cross, difference, distance, dot, norm};
use crate::nucleus::{Centred, Nucleus};
use crate::search::common_line;

/// Above this number of different distances the comparison would cost more than a search.
const MOST_CLASSES: usize = 1500;

#[derive(Clone, Copy, Debug, PartialEq)]
enum Extent {
    Line,
    Plane,
    Space,
}

/// Knows which distances of a reference geometry are equal. The group of a molecule follows from
/// the permutations that keep all distances and from whether it is linear or planar; so where the
/// same distances are equal and the rest differ, the group is the same.
#[derive(Clone, Debug)]
pub struct GroupScreen {
    atoms: usize,
    /// Sets of equal distances between pairs of the same kinds, as pairs of atoms.
    classes: Vec<(u64, Vec<(u32, u32)>)>,
    extent: Extent,
    /// Atoms that span the line, plane or space.
    span: [usize; 4],
    tolerance: f64,
}

impl GroupScreen {
    /// Remembers the pattern of a reference geometry that has the group to be kept (for a path: a
    /// generic point). `tolerance_angstrom` is that of the group search.
    ///
    /// # Errors
    /// As [`crate::find`] for bad input.
    pub fn new(reference: &[Nucleus], tolerance_angstrom: f64) -> Result<Self, SymmetryError> {
        let atoms = Centred::new(reference)?;
        let count = atoms.len();
        let mut pairs: Vec<(u64, f64, (u32, u32))> = Vec::new();
        for j in 0..count {
            for i in 0..j {
                let (a, b) = (
                    atoms.kinds[i].min(atoms.kinds[j]),
                    atoms.kinds[i].max(atoms.kinds[j]),
                );
                let d = distance(atoms.positions[i], atoms.positions[j]);
                pairs.push(((u64::from(a) << 32) | u64::from(b), d, (i as u32, j as u32)));
            }
        }
        pairs.sort_by(|p, q| p.0.cmp(&q.0).then(p.1.total_cmp(&q.1)).then(p.2.cmp(&q.2)));
        let mut classes: Vec<(u64, Vec<(u32, u32)>)> = Vec::new();
        let mut before: Option<(u64, f64)> = None;
        for (kinds, d, pair) in pairs {
            let same =
                before.is_some_and(|(k, last)| k == kinds && d - last <= 2.0 * tolerance_angstrom);
            match classes.last_mut() {
                Some((_, members)) if same => members.push(pair),
                _ => classes.push((kinds, vec![pair])),
            }
            before = Some((kinds, d));
        }
        let (extent, span) = extent_of(&atoms, tolerance_angstrom);
        Ok(Self {
            atoms: count,
            classes,
            extent,
            span,
            tolerance: tolerance_angstrom,
        })
    }

    /// Whether a geometry (Å, atoms in the order of the reference) surely has the same group. A
    /// `false` means that a full search has to tell. Nothing is allocated.
    pub fn unchanged(&self, positions: &[[f64; 3]]) -> bool {
        if positions.len() != self.atoms || self.classes.len() > MOST_CLASSES {
            return false;
        }
        self.same_extent(positions) && self.same_pattern(positions)
    }

    fn same_pattern(&self, positions: &[[f64; 3]]) -> bool {
        let at =
            |pair: (u32, u32)| distance(positions[pair.0 as usize], positions[pair.1 as usize]);
        for (k, (kinds, members)) in self.classes.iter().enumerate() {
            let d = at(members[0]);
            if members
                .iter()
                .any(|&pair| (at(pair) - d).abs() > self.tolerance)
            {
                return false;
            }
            let earlier = self.classes[..k]
                .iter()
                .rev()
                .take_while(|(other, _)| other == kinds);
            for (_, others) in earlier {
                if (at(others[0]) - d).abs() <= 4.0 * self.tolerance {
                    return false;
                }
            }
        }
        true
    }

    fn same_extent(&self, positions: &[[f64; 3]]) -> bool {
        let [a, b, c, d] = self.span.map(|k| positions[k]);
        let along = difference(b, a);
        let length = norm(along);
        let normal = cross(along, difference(c, a));
        let off_line = |p: Vector3| norm(cross(along, difference(p, a))) / length;
        let off_plane = |p: Vector3| dot(normal, difference(p, a)).abs() / norm(normal);
        let small = self.tolerance;
        let large = 4.0 * self.tolerance;
        match self.extent {
            Extent::Line => positions.iter().all(|p| off_line(*p) <= small),
            Extent::Plane => {
                off_line(c) > large && positions.iter().all(|p| off_plane(*p) <= small)
            }
            Extent::Space => off_line(c) > large && off_plane(d) > large,
        }
    }
}

fn extent_of(atoms: &Centred, tolerance: f64) -> (Extent, [usize; 4]) {
    let farthest = |measure: &dyn Fn(usize) -> f64| {
        let mut best = 0;
        for k in 1..atoms.len() {
            if measure(k) > measure(best) + 1e-6 {
                best = k;
            }
        }
        best
    };
    let p = &atoms.positions;
    let a = farthest(&|k| atoms.radii[k]);
    let b = farthest(&|k| distance(p[k], p[a]));
    let along = difference(p[b], p[a]);
    let c = farthest(&|k| norm(cross(along, difference(p[k], p[a]))));
    let normal = cross(along, difference(p[c], p[a]));
    let d = farthest(&|k| dot(normal, difference(p[k], p[a])).abs());
    let (_, off_line) = common_line(atoms);
    let thickness = dot(normal, difference(p[d], p[a])).abs() / norm(normal).max(1e-12);
    let extent = if off_line <= tolerance {
        Extent::Line
    } else if thickness <= tolerance {
        Extent::Plane
    } else {
        Extent::Space
    };
    (extent, [a, b, c, d])
}
