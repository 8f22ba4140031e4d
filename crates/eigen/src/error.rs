//! What can go wrong.

/// Why an eigenproblem was refused or could not be solved.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum EigenError {
    /// A matrix does not have n × n elements.
    #[error("{matrix} has {found} elements, {expected} were expected")]
    Size {
        /// "H" or "S".
        matrix: &'static str,
        /// Elements needed, n·n.
        expected: usize,
        /// Elements given.
        found: usize,
    },
    /// A matrix element is NaN or infinite.
    #[error("element ({row}, {column}) of {matrix} is not a finite number")]
    NotFinite {
        /// "H" or "S".
        matrix: &'static str,
        /// Row, counted from 0.
        row: usize,
        /// Column, counted from 0.
        column: usize,
    },
    /// S is not positive definite, or so nearly singular that the energies would be noise:
    /// its smallest eigenvalue is below [`SINGULAR_RATIO`](crate::SINGULAR_RATIO) times its largest.
    #[error("the overlap matrix is nearly singular: its smallest eigenvalue is {eigenvalue:e}")]
    Singular {
        /// Smallest eigenvalue of S.
        eigenvalue: f64,
        /// Squared coefficients of its normalised eigenvector, one per function: the functions
        /// that are nearly linearly dependent carry the weight.
        weights: Vec<f64>,
    },
    /// The iteration for the eigenvalues did not end.
    #[error("the iteration for the eigenvalues did not converge")]
    NotConverged,
    /// The solution was found but fails its own check.
    #[error(
        "the solution fails its check: residual {residual:e}, orthonormality {orthonormality:e}"
    )]
    Inaccurate {
        /// Largest |HC − SCε|.
        residual: f64,
        /// Largest |C†SC − 1|.
        orthonormality: f64,
    },
}
