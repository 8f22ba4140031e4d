//! From a geometry to its point group.

use crate::closure::{ClosedSet, Products, chain};
use crate::element::{Element, Family};
use crate::error::SymmetryError;
use crate::group::{PointGroup, RawOperation};
use crate::linear::{atom_group, end_for_end, linear_group};
use crate::matrix::{
    Matrix3, Vector3, any_perpendicular, apply, difference, distance, sum, transpose,
};
use crate::multiplication::Multiplication;
use crate::nucleus::{Centred, Nucleus};
use crate::search::{Mapping, common_line, deviation_of, mappings};

/// How far near misses are looked for, Å.
const NEAR: f64 = 0.1;

/// A bigger group that the geometry nearly has.
#[derive(Clone, Debug, PartialEq)]
pub struct NearMiss {
    /// Plain Schoenflies symbol.
    pub name: String,
    /// The tolerance from which on [`find`] gives this group, Å.
    pub tolerance_angstrom: f64,
}

/// What [`find`] found.
#[derive(Clone, Debug)]
pub struct Symmetry {
    /// The group, with its axes and operations in the frame of the input.
    pub group: PointGroup,
    /// Largest distance between an atom's image under an operation and the atom there, Å.
    pub deviation_angstrom: f64,
    /// Bigger groups up to 0.1 Å, by rising tolerance.
    pub near_misses: Vec<NearMiss>,
}

/// The point group of a geometry: the largest one whose operations all lay the atoms onto atoms
/// of the same kind within `tolerance_angstrom`. Its operations are exact (they multiply like the
/// group to rounding), also where the geometry is not.
///
/// # Errors
/// No atoms, coordinates that are not finite, atoms on one place, a tolerance outside
/// 1e-8 to 0.5 Å, or a geometry on the very edge of the tolerance.
pub fn find(nuclei: &[Nucleus], tolerance_angstrom: f64) -> Result<Symmetry, SymmetryError> {
    if !(1e-8..=0.5).contains(&tolerance_angstrom) {
        return Err(SymmetryError::Tolerance(tolerance_angstrom));
    }
    let atoms = Centred::new(nuclei)?;
    if atoms.len() == 1 {
        return Ok(Symmetry {
            group: atom_group(atoms.centre),
            deviation_angstrom: 0.0,
            near_misses: Vec::new(),
        });
    }
    let (axis, off) = common_line(&atoms);
    if off <= tolerance_angstrom {
        return find_linear(&atoms, axis, off, tolerance_angstrom);
    }
    let limit = tolerance_angstrom.max(NEAR);
    let found = mappings(&atoms, limit);
    let sets = chain(&found);
    let (within, beyond): (Vec<ClosedSet>, Vec<ClosedSet>) = sets
        .into_iter()
        .partition(|set| set.deviation <= tolerance_angstrom);
    // A set at the very edge of the tolerance may close without being a group; the one before it
    // then counts.
    let mut raw = Err(SymmetryError::Inconsistent("the identity was not found"));
    for set in within.iter().rev() {
        raw = exact_operations(&found, set);
        if raw.is_ok() {
            break;
        }
    }
    let raw = raw?;
    let deviation = raw
        .iter()
        .map(|op| deviation_of(&atoms.positions, &op.matrix, &op.permutation))
        .fold(0.0, f64::max);
    let mut near_misses: Vec<NearMiss> = Vec::new();
    for (k, set) in beyond.iter().enumerate() {
        // Sets that appear together count as the largest of them.
        let last = beyond
            .get(k + 1)
            .is_none_or(|next| next.deviation > set.deviation + 1e-6);
        if last && let Ok(name) = name_of(&found, set) {
            near_misses.push(NearMiss {
                name,
                tolerance_angstrom: set.deviation,
            });
        }
    }
    if off <= limit {
        let swap = end_for_end(&atoms, axis).filter(|(_, d)| *d <= off.max(tolerance_angstrom));
        let family = if swap.is_some() {
            Family::LinearCentred
        } else {
            Family::LinearPolar
        };
        near_misses.retain(|miss| miss.tolerance_angstrom < off);
        near_misses.push(NearMiss {
            name: family.name(0),
            tolerance_angstrom: off,
        });
    }
    Ok(Symmetry {
        group: PointGroup::finite(raw, &atoms, tolerance_angstrom)?,
        deviation_angstrom: deviation,
        near_misses,
    })
}

fn find_linear(
    atoms: &Centred,
    axis: Vector3,
    off: f64,
    tolerance: f64,
) -> Result<Symmetry, SymmetryError> {
    let ends = end_for_end(atoms, axis);
    let swap = ends.as_ref().filter(|(_, d)| *d <= tolerance);
    let mut near_misses = Vec::new();
    if let (None, Some((_, d))) = (swap, &ends)
        && *d <= NEAR
    {
        near_misses.push(NearMiss {
            name: Family::LinearCentred.name(0),
            tolerance_angstrom: *d,
        });
    }
    // The axis points to the end where the first atom off the centre is.
    let first = atoms
        .positions
        .iter()
        .map(|p| crate::matrix::dot(*p, axis))
        .find(|x| x.abs() > 0.05);
    let axis = if first.is_some_and(|x| x < 0.0) {
        axis.map(|x| -x)
    } else {
        axis
    };
    let permutation = swap.map(|(p, _)| p.as_slice());
    Ok(Symmetry {
        group: linear_group(
            axis,
            any_perpendicular(axis),
            atoms.centre,
            atoms.len(),
            permutation,
        )?,
        deviation_angstrom: swap.map_or(off, |(_, d)| off.max(*d)),
        near_misses,
    })
}

fn exact_matrices(found: &[Mapping], set: &ClosedSet) -> Result<Vec<Matrix3>, SymmetryError> {
    let chosen: Vec<Mapping> = set.elements.iter().map(|&e| found[e].clone()).collect();
    let products = Products::new(&chosen);
    let table = Multiplication::new(chosen.len(), |i, j| products.of(i, j))
        .ok_or(SymmetryError::Inconsistent("the operations do not close"))?;
    let approximate: Vec<Matrix3> = chosen.iter().map(|m| m.matrix).collect();
    let exact = table.exact(&approximate);
    if table.obeyed(&exact, 1e-9) {
        Ok(exact)
    } else {
        Err(SymmetryError::Inconsistent(
            "the operations cannot be made exact",
        ))
    }
}

pub(crate) fn exact_operations(
    found: &[Mapping],
    set: &ClosedSet,
) -> Result<Vec<RawOperation>, SymmetryError> {
    let exact = exact_matrices(found, set)?;
    Ok(set
        .elements
        .iter()
        .zip(exact)
        .map(|(&e, matrix)| RawOperation {
            matrix,
            permutation: found[e].permutation.clone(),
        })
        .collect())
}

fn name_of(found: &[Mapping], set: &ClosedSet) -> Result<String, SymmetryError> {
    let highest = u32::try_from(set.elements.len()).unwrap_or(u32::MAX);
    let elements: Vec<Element> = exact_matrices(found, set)?
        .iter()
        .map(|m| Element::new(m, highest))
        .collect();
    let (family, n) = Family::of(&elements);
    Ok(family.name(n))
}

/// Positions moved onto a group, and the largest distance that an atom moved, Å: every atom goes
/// to the mean of the images that belong to it.
pub fn symmetrize(nuclei: &[Nucleus], group: &PointGroup) -> (Vec<Nucleus>, f64) {
    let centre = group.axes.origin;
    let mut sums = vec![[0.0; 3]; nuclei.len()];
    for op in &group.operations {
        let back = transpose(&op.matrix);
        for (total, &image) in sums.iter_mut().zip(&op.permutation) {
            *total = sum(
                *total,
                apply(&back, difference(nuclei[image].position, centre)),
            );
        }
    }
    let share = 1.0 / group.operations.len() as f64;
    let mut worst = 0.0_f64;
    let moved = nuclei
        .iter()
        .zip(sums)
        .map(|(nucleus, total)| {
            let position = sum(centre, total.map(|x| x * share));
            worst = worst.max(distance(position, nucleus.position));
            Nucleus {
                kind: nucleus.kind,
                position,
            }
        })
        .collect();
    (moved, worst)
}
