//! Numbers before irreps: 1a1, 2a1, 1b2 … in order of energy within each irrep.

use crate::group::Irrep;

/// Counts levels of each irrep upwards.
#[derive(Clone, Debug, PartialEq)]
pub struct Numbering {
    used: Vec<usize>,
}

impl Numbering {
    /// Starts after the given number of levels of each irrep: zeros for numbering valence levels
    /// only, the content of the core ([`crate::PointGroup::count`] of the core shells) for
    /// numbering with the core.
    pub fn after(core: Vec<usize>) -> Self {
        Self { used: core }
    }

    /// The number of the next level (a whole set if degenerate) of an irrep, from the lowest
    /// energy up.
    pub fn next(&mut self, irrep: usize) -> usize {
        if self.used.len() <= irrep {
            self.used.resize(irrep + 1, 0);
        }
        self.used[irrep] += 1;
        self.used[irrep]
    }
}

impl Irrep {
    /// ASCII label of a level: `2sigma_g+`, `1pi_u`, `1b2`, `3a1'`.
    pub fn level(&self, number: usize) -> String {
        format!("{number}{}", self.plain)
    }

    /// Label of a level for print: `2σg⁺`, `1πu`, `1b₂`, `3a₁′`.
    pub fn level_display(&self, number: usize) -> String {
        format!("{number}{}", self.display)
    }
}
