//! Which atom of one geometry becomes which of another, where there is a choice.

use orbend_structure::{Molecule, PathPlan};
use orbend_symmetry::path_group;

use crate::error::ScanError;
use crate::plan::kinds;

/// Mappings whose paths are tried at most.
const MOST_TRIED: usize = 200;
/// Places of a path at which its group is determined.
const PLACES: usize = 9;

/// What a user says about the mapping of atoms; nothing by default.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct MappingChoice {
    /// Pairs of an atom of the first and an atom of the second geometry, from 0.
    pub pairs: Vec<(usize, usize)>,
    /// The group that the whole path has to keep, plain Schoenflies symbol.
    pub keep: Option<String>,
}

/// The path with the first mapping that fits the choice.
pub(crate) fn toward(
    from: &Molecule,
    to: &Molecule,
    points: usize,
    choice: &MappingChoice,
    tolerance: f64,
) -> Result<PathPlan, ScanError> {
    if choice.pairs.is_empty() && choice.keep.is_none() {
        return Ok(PathPlan::toward(from, to, points, None)?.0);
    }
    check_pairs(from, to, &choice.pairs)?;
    let all = PathPlan::mappings(from, to);
    let mut fitting: Vec<Vec<usize>> = all
        .iter()
        .filter(|mapping| choice.pairs.iter().all(|&(i, k)| mapping[i] == k))
        .take(MOST_TRIED)
        .cloned()
        .collect();
    if fitting.is_empty()
        && let Some(own) = all.first()
    {
        fitting.push(forced(own, &choice.pairs));
    }
    let Some(keep) = &choice.keep else {
        let mapping = fitting.first().map(Vec::as_slice);
        return Ok(PathPlan::toward(from, to, points, mapping)?.0);
    };
    let mut kept: Vec<String> = Vec::new();
    for mapping in &fitting {
        // A mapping whose path ends in a clash is none.
        let Ok((path, _)) = PathPlan::toward(from, to, points, Some(mapping)) else {
            continue;
        };
        let name = group_of(&path, from, tolerance)?;
        if name.eq_ignore_ascii_case(keep) {
            return Ok(path);
        }
        if !kept.contains(&name) {
            kept.push(name);
        }
    }
    if kept.is_empty() {
        // The path's own error says what is wrong.
        return Ok(PathPlan::toward(from, to, points, fitting.first().map(Vec::as_slice))?.0);
    }
    kept.sort_unstable();
    Err(ScanError::Keep {
        wanted: keep.clone(),
        kept,
    })
}

fn check_pairs(from: &Molecule, to: &Molecule, pairs: &[(usize, usize)]) -> Result<(), ScanError> {
    let bad = |cause: String| Err(ScanError::Pair { cause });
    for (place, &(i, k)) in pairs.iter().enumerate() {
        if i >= from.len() || k >= to.len() {
            return bad(format!(
                "{}={} names an atom that is not there",
                i + 1,
                k + 1
            ));
        }
        if from.elements[i] != to.elements[k] {
            let (a, b) = (from.atom_name(i), to.atom_name(k));
            return bad(format!("{a} cannot become {b}"));
        }
        if pairs[..place].iter().any(|&(a, b)| a == i || b == k) {
            return bad(format!("{}={} names an atom twice", i + 1, k + 1));
        }
    }
    Ok(())
}

/// The mapping with the pairs put in by exchanges.
fn forced(mapping: &[usize], pairs: &[(usize, usize)]) -> Vec<usize> {
    let mut mapping = mapping.to_vec();
    for &(i, k) in pairs {
        if let Some(holder) = mapping.iter().position(|&image| image == k) {
            mapping.swap(i, holder);
        }
    }
    mapping
}

fn group_of(path: &PathPlan, molecule: &Molecule, tolerance: f64) -> Result<String, ScanError> {
    let axis = &path.axes()[0];
    let (low, high) = axis.limits();
    let mut geometries = Vec::with_capacity(PLACES);
    for place in 0..PLACES {
        let share = place as f64 / (PLACES - 1) as f64;
        let mut positions = vec![[0.0; 3]; molecule.len()];
        path.positions(&[low + (high - low) * share], &mut positions)?;
        geometries.push(positions);
    }
    Ok(
        path_group(&kinds(&molecule.elements), &geometries, tolerance)?
            .group
            .name,
    )
}
