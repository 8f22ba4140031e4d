//! A path from one geometry to another.

use super::align::align;
use super::error::PathError;
use super::frames::{FramePath, check_between};
use super::matching::{Matching, alternatives, match_atoms};
use super::{Axis, PathPlan};
use crate::molecule::Molecule;
use crate::range::{LARGEST_POINT_COUNT, Range};
use crate::vector::{Vector, add, distance, scale, subtract};
use nalgebra::{DMatrix, DVector};

/// How a path between two geometries was found.
#[derive(Clone, Debug, PartialEq)]
pub struct TowardReport {
    /// `mapping[i]` is the atom (from 0) of the second geometry that is atom i
    /// of the first.
    pub mapping: Vec<usize>,
    /// Whether the second file has its atoms in another order.
    pub permuted: bool,
    /// Bonds made or broken on the way.
    pub changed_bonds: usize,
    /// Root mean square distance of the two aligned geometries, Å.
    pub deviation: f64,
    /// Interpolation in all distances succeeded; otherwise straight lines
    /// between the aligned positions were taken.
    pub internal: bool,
}

/// Intervals of the fine path that is kept.
const FINE: usize = 100;
/// Longest step of an atom between two fine points that counts as steady, as a
/// share of the longest way of an atom (an even path takes 2 %).
const LONGEST_JUMP: f64 = 0.1;

impl PathPlan {
    /// A path from one geometry to another in `points` points; its parameter
    /// runs from 0 to 1. With `mapping` `None` atoms are matched by element and
    /// bonded environment, the order of the files being kept where it changes
    /// no more bonds than the best other one.
    ///
    /// The second geometry is laid onto the first one; between them all
    /// distances change in step as far as possible: linear synchronous
    /// transit, Halgren & Lipscomb, Chem. Phys. Lett. 49, 225 (1977). The
    /// parameter is the share of the way (mean over the atoms). Both ends
    /// come out exactly (the second one turned and shifted), the path from the
    /// second to the first is the same, and symmetry of both ends is kept.
    ///
    /// # Errors
    /// Different atoms or charges, a mapping that is none, fewer than two
    /// points, ends that coincide, two atoms closer than 0.2 Å on the way.
    pub fn toward(
        from: &Molecule,
        to: &Molecule,
        points: usize,
        mapping: Option<&[usize]>,
    ) -> Result<(Self, TowardReport), PathError> {
        from.check()?;
        to.check()?;
        let refused = |cause: String, fix: &str| PathError::Toward {
            cause,
            fix: fix.into(),
        };
        if from.charge != to.charge {
            let cause = format!("their charges are {:+} and {:+}", from.charge, to.charge);
            return Err(refused(cause, "give both the same charge"));
        }
        if !(2..=LARGEST_POINT_COUNT).contains(&points) {
            let cause = format!("{points} points make no path");
            return Err(refused(cause, "give 2 points to 10 million"));
        }
        let matching = match mapping {
            Some(given) => given_mapping(from, to, given),
            None => match_atoms(from, to),
        };
        let Some(matching) = matching else {
            let cause = format!("they hold {} and {}", from.formula(), to.formula());
            let fix = "both need the same atoms (and a given mapping must join equal elements)";
            return Err(refused(cause, fix));
        };
        let placed: Vec<Vector> = matching.mapping.iter().map(|&k| to.positions[k]).collect();
        let Some(alignment) = align(&placed, &from.positions) else {
            return Err(refused(
                "they cannot be aligned".into(),
                "check the coordinates",
            ));
        };
        let end: Vec<Vector> = placed.iter().map(|&p| alignment.apply(p)).collect();
        if alignment.deviation < 1e-6 {
            let cause = "they are the same geometry".to_string();
            return Err(refused(cause, "give another geometry as the end"));
        }
        let axis = Axis {
            name: "path".into(),
            unit: "1".into(),
            values: Range::with_points(0.0, 1.0, points).map_or(vec![0.0, 1.0], |r| r.values()),
        };
        let (nodes, internal) = interpolate(&from.positions, &end);
        let values = even_values(&nodes);
        let fine = Axis {
            values: values.clone(),
            ..axis.clone()
        };
        for k in 1..nodes.len() {
            check_between(from, &fine, k, &nodes[k - 1], &nodes[k])?;
        }
        let permuted = matching.mapping.iter().enumerate().any(|(i, &k)| i != k);
        let report = TowardReport {
            permuted,
            changed_bonds: matching.changed_bonds,
            deviation: alignment.deviation,
            internal,
            mapping: matching.mapping,
        };
        let described = report.describe(from);
        let path = FramePath::smooth(values, nodes);
        Ok((Self::through(from.clone(), axis, path, described), report))
    }

    /// The mapping that [`PathPlan::toward`] takes by itself, and after it every
    /// other one that changes as many bonds (up to 2000), the one with the
    /// smallest change of distances first. Each lists for every atom of the
    /// first geometry the atom of the second. Empty for different atoms.
    pub fn mappings(from: &Molecule, to: &Molecule) -> Vec<Vec<usize>> {
        let Some(own) = match_atoms(from, to) else {
            return Vec::new();
        };
        let others = alternatives(from, to, &own.mapping);
        let mut mappings = vec![own.mapping];
        for other in others {
            if other.mapping != mappings[0] {
                mappings.push(other.mapping);
            }
        }
        mappings
    }

    /// A straight path along a displacement vector per atom (Å), its parameter
    /// being the amplitude that multiplies it.
    ///
    /// # Errors
    /// A displacement of another length or without any motion, an impossible
    /// range, two atoms closer than 0.2 Å on the way.
    pub fn along(
        molecule: &Molecule,
        displacement: &[[f64; 3]],
        range: Range,
    ) -> Result<Self, PathError> {
        molecule.check()?;
        if displacement.len() != molecule.len() {
            return Err(PathError::Shape {
                what: "displacements",
                given: displacement.len(),
                needed: molecule.len(),
            });
        }
        let refused = |cause: String, fix: &str| PathError::Toward {
            cause,
            fix: fix.into(),
        };
        range
            .check()
            .map_err(|error| refused(error.to_string(), "give another range"))?;
        let longest = displacement
            .iter()
            .map(|&v| crate::vector::norm(v))
            .fold(0.0, f64::max);
        if !(longest > 1e-9 && longest.is_finite()) {
            let cause = "the displacement moves no atom".to_string();
            return Err(refused(
                cause,
                "give finite displacements that are not all zero",
            ));
        }
        let at = |amplitude: f64| -> Vec<Vector> {
            let atoms = molecule.positions.iter().zip(displacement);
            atoms.map(|(&p, &v)| add(p, scale(v, amplitude))).collect()
        };
        let axis = Axis {
            name: "amplitude".into(),
            unit: "1".into(),
            values: range.values(),
        };
        let ends = Axis {
            values: vec![range.from, range.to],
            ..axis.clone()
        };
        let nodes = vec![at(range.from), at(range.to)];
        check_between(molecule, &ends, 1, &nodes[0], &nodes[1])?;
        let path = FramePath::straight(ends.values, nodes);
        let described = "all atoms move along the given displacement".to_string();
        Ok(Self::through(molecule.clone(), axis, path, described))
    }
}

impl TowardReport {
    /// The mapping and the interpolation in words, atoms counted from 1.
    pub fn describe(&self, from: &Molecule) -> String {
        let mut text = if self.permuted {
            let pairs = self.mapping.iter().enumerate();
            let words: Vec<String> = pairs
                .map(|(i, &k)| format!("{}={}", from.atom_name(i), k + 1))
                .collect();
            format!(
                "atoms matched to those of the second file: {}",
                words.join(" ")
            )
        } else {
            "atoms in the same order".to_string()
        };
        if self.changed_bonds > 0 {
            text.push_str(&format!("; bonds made or broken: {}", self.changed_bonds));
        }
        text.push_str(if self.internal {
            "; all distances change evenly"
        } else {
            "; interpolation in distances does not join the two ends, so every atom moves on a straight line"
        });
        text
    }
}

fn given_mapping(from: &Molecule, to: &Molecule, mapping: &[usize]) -> Option<Matching> {
    let mut seen = vec![false; to.len()];
    if mapping.len() != from.len() || from.len() != to.len() {
        return None;
    }
    for (atom, &image) in mapping.iter().enumerate() {
        if image >= to.len() || seen[image] || to.elements[image] != from.elements[atom] {
            return None;
        }
        seen[image] = true;
    }
    let (bonds, others) = (crate::BondGraph::new(from), crate::BondGraph::new(to));
    let own = bonds.bonds();
    let kept = own
        .iter()
        .filter(|&&(i, j)| others.is_bonded(mapping[i], mapping[j]))
        .count();
    Some(Matching {
        mapping: mapping.to_vec(),
        changed_bonds: own.len() + others.bonds().len() - 2 * kept,
    })
}

/// The fine path and whether distances could be interpolated. Each half grows
/// from its own end, so that the reversed path is the same.
fn interpolate(start: &[Vector], end: &[Vector]) -> (Vec<Vec<Vector>>, bool) {
    let intervals = FINE;
    let straight = |t: f64| -> Vec<Vector> {
        let line = |(&a, &b): (&Vector, &Vector)| add(scale(a, 1.0 - t), scale(b, t));
        start.iter().zip(end).map(line).collect()
    };
    // Dense near the ends: a distance in a planar end changes with the square
    // of a torsion, so the torsion runs with the root of the distance.
    let at = |k: usize| {
        let early = |k: usize| {
            let sine = libm::sin(0.5 * std::f64::consts::PI * k as f64 / intervals as f64);
            sine * sine
        };
        if 2 * k <= intervals {
            early(k)
        } else {
            1.0 - early(intervals - k)
        }
    };
    let mut nodes: Vec<Vec<Vector>> = (0..=intervals).map(|k| straight(at(k))).collect();
    nodes[0] = start.to_vec();
    nodes[intervals] = end.to_vec();
    let direct = nodes.clone();
    // Each guess is the neighbour nearer to its end plus the straight change.
    let guess = |near: &[Vector], k: usize, from: usize| -> Vec<Vector> {
        let change = direct[k].iter().zip(&direct[from]);
        let moved = near.iter().zip(change);
        moved.map(|(&p, (&a, &b))| add(p, subtract(a, b))).collect()
    };
    let half = (intervals - 1) / 2;
    let mut found = true;
    for k in 1..=half {
        for (own, before) in [(k, k - 1), (intervals - k, intervals - k + 1)] {
            let first = guess(&nodes[before], own, before);
            match fit(start, end, at(own), first) {
                Some(positions) => nodes[own] = positions,
                None => found = false,
            }
        }
    }
    if intervals.is_multiple_of(2) {
        let middle = intervals / 2;
        let mean = |(&a, &b): (&Vector, &Vector)| scale(add(a, b), 0.5);
        let first = nodes[middle - 1]
            .iter()
            .zip(&nodes[middle + 1])
            .map(mean)
            .collect();
        match fit(start, end, 0.5, first) {
            Some(positions) => nodes[middle] = positions,
            None => found = false,
        }
    }
    let farthest = |a: &[Vector], b: &[Vector]| -> f64 {
        let steps = a.iter().zip(b).map(|(&a, &b)| distance(a, b));
        steps.fold(0.0, f64::max)
    };
    let longest = LONGEST_JUMP * farthest(start, end);
    let steady = nodes
        .windows(2)
        .all(|pair| farthest(&pair[0], &pair[1]) < longest);
    if found && steady {
        (nodes, true)
    } else {
        (direct, false)
    }
}

/// The share of the way at every node, 0 to 1: the root mean square motion of
/// the atoms, summed.
fn even_values(nodes: &[Vec<Vector>]) -> Vec<f64> {
    let mut values = vec![0.0];
    let mut sum = 0.0;
    for pair in nodes.windows(2) {
        let squares: f64 = pair[0]
            .iter()
            .zip(&pair[1])
            .map(|(&a, &b)| distance(a, b) * distance(a, b))
            .sum();
        // The tiny part keeps the values rising where nothing moves.
        sum += squares.sqrt() + 1e-12;
        values.push(sum);
    }
    let count = values.len();
    for value in &mut values {
        *value /= sum;
    }
    values[count - 1] = 1.0;
    values
}

/// Positions whose distances are nearest to the interpolated ones: minimises
/// Σ (d − dᵗ)²/(dᵗ)⁴ + 10⁻⁶ Σ (x − xᵗ)² (Halgren & Lipscomb 1977) by
/// Levenberg–Marquardt steps. `None` when they do not settle.
fn fit(start: &[Vector], end: &[Vector], t: f64, first: Vec<Vector>) -> Option<Vec<Vector>> {
    const TETHER: f64 = 1e-6;
    let count = start.len();
    let wanted = |i: usize, j: usize| {
        (1.0 - t) * distance(start[i], start[j]) + t * distance(end[i], end[j])
    };
    let tether: Vec<Vector> = start
        .iter()
        .zip(end)
        .map(|(&a, &b)| add(scale(a, 1.0 - t), scale(b, t)))
        .collect();
    let cost = |x: &[Vector]| -> f64 {
        let mut sum = 0.0;
        for i in 0..count {
            let off = subtract(x[i], tether[i]);
            sum += TETHER * crate::vector::dot(off, off);
            for j in 0..i {
                let goal = wanted(i, j);
                let miss = (distance(x[i], x[j]) - goal) / (goal * goal);
                sum += miss * miss;
            }
        }
        sum
    };
    let mut x = first;
    let mut now = cost(&x);
    let mut damping = 1e-6;
    for _ in 0..200 {
        let mut normal = DMatrix::<f64>::zeros(3 * count, 3 * count);
        let mut gradient = DVector::<f64>::zeros(3 * count);
        for i in 0..count {
            for k in 0..3 {
                normal[(3 * i + k, 3 * i + k)] += TETHER;
                gradient[3 * i + k] += TETHER * (x[i][k] - tether[i][k]);
            }
            for j in 0..i {
                let goal = wanted(i, j);
                let weight = 1.0 / (goal * goal);
                let line = subtract(x[i], x[j]);
                let length = crate::vector::norm(line).max(1e-6);
                let miss = (length - goal) * weight;
                let slope = scale(line, weight / length);
                for k in 0..3 {
                    gradient[3 * i + k] += miss * slope[k];
                    gradient[3 * j + k] -= miss * slope[k];
                    for l in 0..3 {
                        let part = slope[k] * slope[l];
                        normal[(3 * i + k, 3 * i + l)] += part;
                        normal[(3 * j + k, 3 * j + l)] += part;
                        normal[(3 * i + k, 3 * j + l)] -= part;
                        normal[(3 * j + k, 3 * i + l)] -= part;
                    }
                }
            }
        }
        loop {
            let mut damped = normal.clone();
            for k in 0..3 * count {
                damped[(k, k)] += damping;
            }
            let step = damped.cholesky()?.solve(&gradient);
            let moved: Vec<Vector> = (0..count)
                .map(|i| [0, 1, 2].map(|k| x[i][k] - step[3 * i + k]))
                .collect();
            let next = cost(&moved);
            if next <= now {
                let longest = step.amax();
                x = moved;
                now = next;
                damping = (damping * 0.2).max(1e-14);
                if longest < 1e-10 {
                    return Some(x);
                }
                break;
            }
            damping *= 8.0;
            if damping > 1e6 {
                // No step lowers the cost any more: rounding is reached.
                return (gradient.amax() < 1e-6).then_some(x);
            }
        }
    }
    (now.is_finite()).then_some(x)
}
