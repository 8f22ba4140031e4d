//! Numbers before irreps: `4a1` with core orbitals counted, `1a1` without.

use orbend_symmetry::Irrep;

/// The names of one level in one group.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct Name {
    /// Plain name with core orbitals counted: `4a1`, `2sigma_g+`.
    pub plain: String,
    /// The same for documents and figures: `4a₁`, `2σg⁺`.
    pub display: String,
    /// Plain name without core orbitals.
    pub valence_plain: String,
    /// The same for documents and figures.
    pub valence_display: String,
}

impl Name {
    /// The name of the level that is number `position` (from 0) of its irrep
    /// among the valence levels, `core` core orbitals of that irrep below it.
    pub fn new(irrep: &Irrep, position: usize, core: usize) -> Self {
        let counted = position + core + 1;
        let valence = position + 1;
        Self {
            plain: format!("{counted}{}", irrep.plain),
            display: format!("{counted}{}", irrep.display),
            valence_plain: format!("{valence}{}", irrep.plain),
            valence_display: format!("{valence}{}", irrep.display),
        }
    }

    /// The same numbers before another irrep.
    pub(crate) fn renamed(&self, from: &Irrep, to: &Irrep) -> Self {
        let swap = |text: &str, old: &str, new: &str| {
            format!("{}{new}", text.strip_suffix(old).unwrap_or(text))
        };
        Self {
            plain: swap(&self.plain, &from.plain, &to.plain),
            display: swap(&self.display, &from.display, &to.display),
            valence_plain: swap(&self.valence_plain, &from.plain, &to.plain),
            valence_display: swap(&self.valence_display, &from.display, &to.display),
        }
    }
}
