//! Candidate operations: every operation takes a reference pair of atoms (with the centre a
//! triangle) onto an equal pair, so the pairs are tried, two ways each.

use crate::matrix::{
    Matrix3, Vector3, apply, best_fit, cross, distance, norm, normalised, perpendicular, scaled,
};
use crate::nucleus::Centred;

/// One way of laying the molecule onto itself.
#[derive(Clone, Debug)]
pub(crate) struct Mapping {
    pub(crate) matrix: Matrix3,
    /// Atom i goes to the place of atom `permutation[i]`.
    pub(crate) permutation: Vec<usize>,
    pub(crate) proper: bool,
    /// Largest distance between an atom's image and the atom there, Å.
    pub(crate) deviation: f64,
}

/// The line closest to all atoms, through the centre, and the largest distance from it, Å.
pub(crate) fn common_line(atoms: &Centred) -> (Vector3, f64) {
    let mut far = 0;
    for i in 1..atoms.len() {
        if atoms.radii[i] > atoms.radii[far] + 1e-6 {
            far = i;
        }
    }
    let mut axis = normalised(atoms.positions[far]);
    for _ in 0..4 {
        let mut next = [0.0; 3];
        for p in &atoms.positions {
            let along = crate::matrix::dot(*p, axis);
            next = crate::matrix::sum(next, scaled(*p, along));
        }
        axis = normalised(next);
    }
    let worst = atoms
        .positions
        .iter()
        .map(|p| norm(perpendicular(*p, axis)))
        .fold(0.0, f64::max);
    (axis, worst)
}

struct Lists {
    /// For every atom the atoms it may be taken to: same kind, same distance from the centre.
    partners: Vec<Vec<usize>>,
    reach: f64,
    limit: f64,
}

/// All ways of laying the molecule onto itself with a deviation up to `limit` (Å). The molecule
/// must not be linear.
pub(crate) fn mappings(atoms: &Centred, limit: f64) -> Vec<Mapping> {
    let count = atoms.len();
    let lists = Lists {
        partners: (0..count)
            .map(|i| {
                (0..count)
                    .filter(|&j| {
                        atoms.kinds[i] == atoms.kinds[j]
                            && (atoms.radii[i] - atoms.radii[j]).abs() <= limit
                    })
                    .collect()
            })
            .collect(),
        reach: (3.0 * limit).max(0.5),
        limit,
    };
    let (a, b) = reference_pair(atoms, &lists);
    let ab = distance(atoms.positions[a], atoms.positions[b]);
    let from = frame(atoms.positions[a], atoms.positions[b], 1.0);
    let mut found = Vec::new();
    let mut image = vec![usize::MAX; count];
    let mut taken = vec![false; count];
    for &a2 in &lists.partners[a] {
        for &b2 in &lists.partners[b] {
            let (pa, pb) = (atoms.positions[a2], atoms.positions[b2]);
            if a2 == b2 || (distance(pa, pb) - ab).abs() > 2.0 * limit {
                continue;
            }
            for proper in [true, false] {
                let to = frame(pa, pb, if proper { 1.0 } else { -1.0 });
                let start = between(&from, &to);
                if let Some(mapping) = try_mapping(
                    atoms,
                    &lists,
                    start,
                    (a, a2, b, b2),
                    proper,
                    &mut image,
                    &mut taken,
                ) {
                    found.push(mapping);
                }
            }
        }
    }
    found
}

/// The pair with the fewest equals, far from the centre and not in line with it.
fn reference_pair(atoms: &Centred, lists: &Lists) -> (usize, usize) {
    let count = atoms.len();
    let largest = atoms.radii.iter().copied().fold(0.0, f64::max);
    let mut a = usize::MAX;
    for i in 0..count {
        if atoms.radii[i] < 0.3 * largest {
            continue;
        }
        let fewer = |i: usize, a: usize| {
            let (x, y) = (lists.partners[i].len(), lists.partners[a].len());
            x < y || (x == y && atoms.radii[i] > atoms.radii[a] + 1e-6)
        };
        if a == usize::MAX || fewer(i, a) {
            a = i;
        }
    }
    let axis = normalised(atoms.positions[a]);
    let off: Vec<f64> = atoms
        .positions
        .iter()
        .map(|p| norm(perpendicular(*p, axis)))
        .collect();
    let most = off.iter().copied().fold(0.0, f64::max);
    let mut best: Option<(usize, usize)> = None;
    for j in (0..count).filter(|&j| off[j] >= 0.4 * most) {
        let d = distance(atoms.positions[a], atoms.positions[j]);
        let equals = lists.partners[j]
            .iter()
            .filter(|&&k| {
                (distance(atoms.positions[a], atoms.positions[k]) - d).abs() <= 2.0 * lists.limit
            })
            .count();
        if best.is_none_or(|(fewest, _)| equals < fewest) {
            best = Some((equals, j));
        }
    }
    (a, best.map_or(a, |(_, j)| j))
}

fn frame(a: Vector3, b: Vector3, handedness: f64) -> [Vector3; 3] {
    let first = normalised(a);
    let second = normalised(perpendicular(b, first));
    [first, second, scaled(cross(first, second), handedness)]
}

fn between(from: &[Vector3; 3], to: &[Vector3; 3]) -> Matrix3 {
    let mut m = [[0.0; 3]; 3];
    for (f, t) in from.iter().zip(to) {
        for i in 0..3 {
            for j in 0..3 {
                m[i][j] += t[i] * f[j];
            }
        }
    }
    m
}

fn try_mapping(
    atoms: &Centred,
    lists: &Lists,
    start: Matrix3,
    (a, a2, b, b2): (usize, usize, usize, usize),
    proper: bool,
    image: &mut [usize],
    taken: &mut [bool],
) -> Option<Mapping> {
    let deviation = match_atoms(atoms, lists, &start, image, taken)?;
    if image[a] != a2 || image[b] != b2 {
        return None;
    }
    let mut mapping = Mapping {
        matrix: start,
        permutation: image.to_vec(),
        proper,
        deviation,
    };
    if deviation > 1e-9 {
        let pairs = (0..atoms.len()).map(|i| (atoms.positions[i], atoms.positions[image[i]]));
        mapping.matrix = best_fit(pairs, proper)?;
        mapping.deviation = deviation_of(&atoms.positions, &mapping.matrix, image);
    }
    (mapping.deviation <= lists.limit).then_some(mapping)
}

/// The nearest partner of every image; `None` where there is none or two atoms share one.
fn match_atoms(
    atoms: &Centred,
    lists: &Lists,
    matrix: &Matrix3,
    image: &mut [usize],
    taken: &mut [bool],
) -> Option<f64> {
    taken.fill(false);
    let mut worst = 0.0_f64;
    for (i, target) in image.iter_mut().enumerate() {
        let place = apply(matrix, atoms.positions[i]);
        let mut nearest = (f64::INFINITY, usize::MAX);
        for &j in &lists.partners[i] {
            let q = atoms.positions[j];
            let (x, y, z) = (place[0] - q[0], place[1] - q[1], place[2] - q[2]);
            let square = x * x + y * y + z * z;
            if square < nearest.0 {
                nearest = (square, j);
            }
        }
        if nearest.0 > lists.reach * lists.reach || taken[nearest.1] {
            return None;
        }
        taken[nearest.1] = true;
        *target = nearest.1;
        worst = worst.max(nearest.0);
    }
    Some(worst.sqrt())
}

/// Largest distance between an atom's image and the atom that should be there, Å.
pub(crate) fn deviation_of(positions: &[Vector3], matrix: &Matrix3, permutation: &[usize]) -> f64 {
    positions
        .iter()
        .zip(permutation)
        .map(|(p, &j)| distance(apply(matrix, *p), positions[j]))
        .fold(0.0, f64::max)
}
