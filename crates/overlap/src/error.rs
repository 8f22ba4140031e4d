//! What can be wrong with a request for overlaps.

use thiserror::Error;

/// Why shells or primitives cannot be used.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum OverlapError {
    /// n is outside 1..=7, l above 3, or l ≥ n.
    #[error("n = {n}, l = {l}: a Slater function here needs 1 ≤ n ≤ 7, l ≤ 3 and l < n")]
    QuantumNumbers {
        /// Principal quantum number asked for.
        n: u8,
        /// Angular momentum asked for.
        l: u8,
    },
    /// An exponent is not a positive finite number.
    #[error("exponent {zeta} bohr⁻¹ of the shell n = {n}, l = {l}: it must be positive and finite")]
    Exponent {
        /// Principal quantum number of the shell.
        n: u8,
        /// Angular momentum of the shell.
        l: u8,
        /// The exponent (bohr⁻¹).
        zeta: f64,
    },
    /// A contraction coefficient is not finite, or a shell has no terms.
    #[error("the shell n = {n}, l = {l} has no terms or a coefficient that is not finite")]
    Coefficients {
        /// Principal quantum number of the shell.
        n: u8,
        /// Angular momentum of the shell.
        l: u8,
    },
    /// The contraction is not normalised within 1e-6.
    #[error(
        "the shell n = {n}, l = {l} has ⟨χ|χ⟩ = {norm_squared}, not 1: normalise its coefficients"
    )]
    Norm {
        /// Principal quantum number of the shell.
        n: u8,
        /// Angular momentum of the shell.
        l: u8,
        /// ⟨χ|χ⟩ of the contraction as given.
        norm_squared: f64,
    },
    /// A distance is negative or not finite.
    #[error("distance {0} bohr: it must be finite and not negative")]
    Distance(f64),
    /// The two functions have no common |m|.
    #[error("m = {m} does not exist for both functions (l = {l_a} and l = {l_b})")]
    Order {
        /// The |m| asked for.
        m: u8,
        /// Angular momentum of the first function.
        l_a: u8,
        /// Angular momentum of the second function.
        l_b: u8,
    },
}
