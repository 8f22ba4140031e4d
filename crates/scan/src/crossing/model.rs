//! What the search asks of a family of eigenproblems.

/// Arguments that one call may hold.
pub const BATCH: usize = 8;

/// Levels as functions of one parameter, each of a class (an irrep). Levels of
/// one class never cross (von Neumann, Wigner, Phys. Z. 30, 467 (1929)) and are
/// listed by rising energy.
pub trait LevelModel: Sync {
    /// Why a point could not be solved.
    type Error: Send;
    /// Buffers of one thread.
    type Room: Send;

    /// Buffers for [`LevelModel::energies`].
    fn room(&self) -> Self::Room;

    /// The class of each column. Columns of one class are neighbours in the
    /// list and rise in energy.
    fn classes(&self) -> &[usize];

    /// Energies (eV) at up to [`BATCH`] arguments, `at.len() × columns`.
    ///
    /// # Errors
    /// A point that cannot be solved.
    fn energies(&self, room: &mut Self::Room, at: &[f64], out: &mut [f64]) -> Result<(), Self::Error>;
}
