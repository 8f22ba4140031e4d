//! The group that all geometries of a path keep, with one set of axes.

use crate::closure::chain;
use crate::error::SymmetryError;
use crate::find::exact_operations;
use crate::group::PointGroup;
use crate::linear::{atom_group, end_for_end, linear_group};
use crate::matrix::{Vector3, any_perpendicular, determinant, dot};
use crate::nucleus::{Centred, Nucleus};
use crate::search::{Mapping, common_line, deviation_of, mappings};

/// The path group of a list of geometries.
#[derive(Clone, Debug)]
pub struct PathGroup {
    /// Operations (same matrix, same exchange of atoms) that every geometry keeps within the
    /// tolerance; axes by the conventions, as they apply to the geometry `axes_from`.
    pub group: PointGroup,
    /// Index of the geometry that fixed the axes: the first one with no symmetry beyond the path
    /// group, else the first.
    pub axes_from: usize,
    /// Largest distance between an atom's image and the atom there, over all geometries, Å.
    pub deviation_angstrom: f64,
}

/// The group that every geometry keeps. `kinds` tells atoms apart; the geometries (Å) stand in one
/// common frame, each about its own centre.
///
/// # Errors
/// As [`crate::find`]; no geometry; geometries with different numbers of atoms.
pub fn path_group<G: AsRef<[[f64; 3]]>>(
    kinds: &[u32],
    geometries: &[G],
    tolerance_angstrom: f64,
) -> Result<PathGroup, SymmetryError> {
    if !(1e-8..=0.5).contains(&tolerance_angstrom) {
        return Err(SymmetryError::Tolerance(tolerance_angstrom));
    }
    let mut all = Vec::with_capacity(geometries.len());
    for (geometry, positions) in geometries.iter().enumerate() {
        let positions = positions.as_ref();
        if positions.len() != kinds.len() {
            return Err(SymmetryError::DifferentAtoms {
                geometry,
                found: positions.len(),
                expected: kinds.len(),
            });
        }
        let nuclei: Vec<Nucleus> = kinds
            .iter()
            .zip(positions)
            .map(|(&kind, &position)| Nucleus { kind, position })
            .collect();
        all.push(Centred::new(&nuclei)?);
    }
    let first = all.first().ok_or(SymmetryError::NoAtoms)?;
    if first.len() == 1 {
        let group = atom_group(first.centre);
        return Ok(PathGroup {
            group,
            axes_from: 0,
            deviation_angstrom: 0.0,
        });
    }
    let lines: Vec<(Vector3, f64)> = all.iter().map(common_line).collect();
    // The further a geometry is from a line, the better it fixes the operations.
    let mut start = 0;
    for (k, (_, off)) in lines.iter().enumerate() {
        if *off > lines[start].1 + 1e-6 {
            start = k;
        }
    }
    if lines[start].1 <= tolerance_angstrom {
        return all_linear(&all, &lines, tolerance_angstrom);
    }
    let found = mappings(&all[start], tolerance_angstrom);
    let sets = chain(&found);
    let set = sets
        .last()
        .ok_or(SymmetryError::Inconsistent("the identity was not found"))?;
    let mut kept: Vec<Mapping> = exact_operations(&found, set)?
        .into_iter()
        .map(|op| Mapping {
            proper: determinant(&op.matrix) > 0.0,
            matrix: op.matrix,
            permutation: op.permutation,
            deviation: 0.0,
        })
        .collect();
    for op in &mut kept {
        for atoms in &all {
            let d = deviation_of(&atoms.positions, &op.matrix, &op.permutation);
            op.deviation = op.deviation.max(d);
        }
    }
    kept.retain(|op| op.deviation <= tolerance_angstrom);
    let set = chain(&kept)
        .pop()
        .ok_or(SymmetryError::Inconsistent("the identity was not found"))?;
    let raw = exact_operations(&kept, &set)?;
    let generic = |k: &usize| {
        let (atoms, (_, off)) = (&all[*k], &lines[*k]);
        *off > tolerance_angstrom
            && chain(&mappings(atoms, tolerance_angstrom))
                .last()
                .is_some_and(|set| set.elements.len() == raw.len())
    };
    let axes_from = (0..all.len())
        .find(generic)
        .unwrap_or(if lines[0].1 > tolerance_angstrom {
            0
        } else {
            start
        });
    Ok(PathGroup {
        group: PointGroup::finite(raw, &all[axes_from], tolerance_angstrom)?,
        axes_from,
        deviation_angstrom: set.deviation,
    })
}

fn all_linear(
    all: &[Centred],
    lines: &[(Vector3, f64)],
    tolerance: f64,
) -> Result<PathGroup, SymmetryError> {
    let axis = lines[0].0;
    if lines
        .iter()
        .any(|(other, _)| dot(*other, axis).abs() < 1.0 - 1e-6)
    {
        return Err(SymmetryError::Inconsistent(
            "the axis of a linear molecule turns on the path",
        ));
    }
    let mut swap: Option<Vec<usize>> = None;
    let mut deviation = lines.iter().map(|(_, off)| *off).fold(0.0, f64::max);
    for (k, atoms) in all.iter().enumerate() {
        let here = end_for_end(atoms, axis).filter(|(_, d)| *d <= tolerance);
        match (k, here, &swap) {
            (0, Some((p, d)), _) => {
                deviation = deviation.max(d);
                swap = Some(p);
            }
            (_, Some((p, d)), Some(before)) if p == *before => deviation = deviation.max(d),
            _ => {
                swap = None;
                break;
            }
        }
    }
    let first = &all[0];
    let x = any_perpendicular(axis);
    Ok(PathGroup {
        group: linear_group(axis, x, first.centre, first.len(), swap.as_deref())?,
        axes_from: 0,
        deviation_angstrom: deviation,
    })
}
