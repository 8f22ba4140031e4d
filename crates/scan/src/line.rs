//! Lines: one orbital followed from point to point.

use orbend_symmetry::{AdaptedBasis, PointGroup};

use crate::naming::Name;

/// What is fixed about a line before the sweep runs. Inside one irrep of the
/// path group levels keep their energy order (von Neumann, Wigner, Phys. Z.
/// 30, 467 (1929)), so a line is a block and a place in it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct LineHead {
    /// Index of the irrep in the path group.
    pub irrep: usize,
    /// Orbitals of the set that this line belongs to.
    pub degeneracy: usize,
    /// Component within the set, from 0.
    pub row: usize,
    /// Name in the path group.
    pub name: Name,
    /// Column of the energy table.
    pub(crate) slot: usize,
    /// Block of the adapted basis.
    pub(crate) block: usize,
    /// Level of the block, from the lowest.
    pub(crate) place: usize,
    /// Set within the irrep, from the lowest.
    pub(crate) position: usize,
}

/// Lines by rising energy at the first point; `energies` is indexed by slot,
/// slots run over the blocks and within each from the lowest level up.
pub(crate) fn line_heads(
    group: &PointGroup,
    adapted: &AdaptedBasis,
    core_counts: &[usize],
    energies: &[f64],
) -> Vec<LineHead> {
    let mut heads = Vec::with_capacity(energies.len());
    let mut slot = 0;
    for (block_index, block) in adapted.blocks.iter().enumerate() {
        let irrep = &group.irreps[block.irrep];
        for place in 0..block.size() {
            // In a paired block every level comes twice.
            let position = if block.paired {
                place / irrep.dimension
            } else {
                place
            };
            let name = Name::new(irrep, position, core_counts[block.irrep]);
            for row in 0..block.row_count() {
                heads.push(LineHead {
                    irrep: block.irrep,
                    degeneracy: irrep.dimension,
                    row,
                    name: name.clone(),
                    slot,
                    block: block_index,
                    place,
                    position,
                });
            }
            slot += 1;
        }
    }
    heads.sort_by(|a, b| {
        energies[a.slot]
            .total_cmp(&energies[b.slot])
            .then(a.slot.cmp(&b.slot))
            .then(a.row.cmp(&b.row))
    });
    heads
}
