//! What the irreps of a group become in a subgroup, from the operations themselves.

use crate::error::SymmetryError;
use crate::group::PointGroup;
use crate::linear::{linear_group, multiplicity};
use crate::matrix::{dot, norm, perpendicular};

/// The correlation from a group to one of its subgroups in the same position.
#[derive(Clone, Debug, PartialEq)]
pub struct Descent {
    /// For each irrep of the big group: how often each irrep of the small one is in it, as
    /// (irrep of the small group, number).
    pub content: Vec<Vec<(usize, usize)>>,
}

impl Descent {
    /// Compares the characters of `big` at the operations of `small`; both lie in one frame.
    ///
    /// # Errors
    /// An operation of `small` that is none of `big`.
    pub fn between(big: &PointGroup, small: &PointGroup) -> Result<Self, SymmetryError> {
        let sizes = small.class_sizes();
        let mut content = Vec::with_capacity(big.irreps.len());
        for k in 0..big.irreps.len() {
            let mut values = Vec::with_capacity(sizes.len());
            for class in &small.classes {
                let op = &small.operations[class.operations[0]];
                values.push(big.character(k, &op.matrix).ok_or_else(|| {
                    SymmetryError::NotSubgroup {
                        big: big.name.clone(),
                        small: small.name.clone(),
                        operation: op.label.clone(),
                    }
                })?);
            }
            content.push(
                small
                    .irreps
                    .iter()
                    .enumerate()
                    .map(|(j, irrep)| (j, multiplicity(irrep, &sizes, &values).round()))
                    .filter(|(_, count)| *count > 0.0)
                    .map(|(j, count)| (j, count as usize))
                    .collect(),
            );
        }
        Ok(Self { content })
    }
}

impl PointGroup {
    /// A linear group with the planes of its finite stand-in laid through the axes of a subgroup.
    pub(crate) fn turned_to(&self, subgroup: &PointGroup) -> Result<Self, SymmetryError> {
        let z = self.axes.z;
        let mut x = self.axes.x;
        for axis in [subgroup.axes.x, subgroup.axes.y, subgroup.axes.z] {
            if dot(axis, z).abs() < 0.1 && norm(perpendicular(axis, z)) > 0.5 {
                x = axis;
                break;
            }
        }
        let atoms = self.operations.first().map_or(0, |op| op.permutation.len());
        let swap = self
            .operations
            .iter()
            .map(|op| &op.permutation)
            .find(|p| p.iter().enumerate().any(|(i, &j)| i != j));
        let centred = self.family == crate::element::Family::LinearCentred;
        let swap = if centred {
            swap.map(Vec::as_slice)
        } else {
            None
        };
        linear_group(z, x, self.axes.origin, atoms, swap)
    }
}
