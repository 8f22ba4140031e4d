//! What can be wrong with a request, in words that name the cause and the fix.

use thiserror::Error;

/// Electrons, spins and configurations that do not fit.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum FillingError {
    /// More positive charge than valence electrons.
    #[error(
        "charge {charge:+} takes more electrons than the {valence} valence electrons; the highest possible charge is {valence:+}"
    )]
    ChargeTooHigh {
        /// The charge asked for.
        charge: i32,
        /// Valence electrons of the neutral molecule.
        valence: u32,
    },
    /// More electrons than the basis holds.
    #[error(
        "charge {charge:+} needs {electrons} valence electrons, but the basis holds {capacity}"
    )]
    ChargeTooLow {
        /// The charge asked for.
        charge: i32,
        /// Valence electrons that it needs.
        electrons: i64,
        /// Electrons that all orbitals hold together.
        capacity: i64,
    },
    /// A number of unpaired electrons that the count does not allow.
    #[error(
        "{unpaired} unpaired electrons are impossible with {electrons} valence electrons; possible: {}",
        list(legal)
    )]
    Unpaired {
        /// Unpaired electrons asked for.
        unpaired: u32,
        /// Valence electrons.
        electrons: u32,
        /// The numbers that are possible.
        legal: Vec<u32>,
    },
    /// A word that is not `label:electrons`.
    #[error("`{word}` is not a level and its electrons; write for example `3a1:2`")]
    ConfigurationWord {
        /// The word as written.
        word: String,
    },
    /// One label named twice.
    #[error("`{label}` is named twice in the configuration; give its electrons once")]
    ConfigurationTwice {
        /// The label.
        label: String,
    },
    /// A label that no line has.
    #[error("no valence level is called `{label}`; the levels are {}", known.join(", "))]
    ConfigurationLabel {
        /// The label as written.
        label: String,
        /// The labels there are, by rising energy.
        known: Vec<String>,
    },
    /// More electrons than a level takes.
    #[error("`{label}` takes at most {capacity} electrons, not {count}")]
    ConfigurationFull {
        /// The label.
        label: String,
        /// Electrons asked for.
        count: f64,
        /// Electrons it takes.
        capacity: f64,
    },
    /// A configuration whose electrons do not add up.
    #[error(
        "the configuration names {named} electrons, but the molecule has {electrons} valence electrons; levels that are not named are filled from below with the rest"
    )]
    ConfigurationSum {
        /// Electrons named.
        named: f64,
        /// Valence electrons.
        electrons: u32,
    },
}

fn list(numbers: &[u32]) -> String {
    let words: Vec<String> = numbers.iter().map(u32::to_string).collect();
    words.join(", ")
}

/// Everything that ends a scan before or while it runs.
#[derive(Debug, Error)]
pub enum ScanError {
    /// The path or a coordinate is not defined.
    #[error(transparent)]
    Path(#[from] orbend_structure::PathError),
    /// The geometry itself is not usable.
    #[error(transparent)]
    Molecule(#[from] orbend_structure::MoleculeError),
    /// An element has no parameters.
    #[error(transparent)]
    Basis(#[from] orbend_hamiltonian::BasisError),
    /// The form of the Hamiltonian does not fit.
    #[error(transparent)]
    Plan(#[from] orbend_hamiltonian::PlanError),
    /// No point group could be assigned.
    #[error(transparent)]
    Symmetry(#[from] orbend_symmetry::SymmetryError),
    /// A surface that cannot be made.
    #[error(transparent)]
    Surface(#[from] crate::surface::SurfaceError),
    /// The electrons do not fit.
    #[error(transparent)]
    Filling(#[from] FillingError),
    /// No mapping of atoms gives a path that keeps the group asked for.
    #[error(
        "no mapping of the atoms gives a path that keeps {wanted}; the mappings that change no further bonds keep {}",
        kept.join(", ")
    )]
    Keep {
        /// The group asked for.
        wanted: String,
        /// The groups that can be kept.
        kept: Vec<String>,
    },
    /// A pair of atoms that cannot be joined.
    #[error("{cause}; name an atom of the start and one of the same element of the end, each once")]
    Pair {
        /// Which one and why.
        cause: String,
    },
    /// The overlap matrix is singular: two functions say the same.
    #[error(
        "at {at} the overlap matrix is nearly singular (smallest eigenvalue {eigenvalue:.1e}): atoms {first} and {second} nearly coincide for this basis; move them apart or leave that range out"
    )]
    Singular {
        /// The coordinate values, with names, or `this geometry`.
        at: String,
        /// The smallest eigenvalue of S.
        eigenvalue: f64,
        /// First atom with its number.
        first: String,
        /// Second atom with its number.
        second: String,
    },
    /// The eigensolver failed.
    #[error("at {at} the eigenproblem could not be solved: {cause}")]
    Eigen {
        /// The coordinate values, with names, or `this geometry`.
        at: String,
        /// What the solver said.
        cause: String,
    },
    /// A line whose change cannot be split: at the end nothing is left of what it was.
    #[error(
        "{label} at {to} has nothing in common with itself at {from}: its change cannot be split; ask for a shorter range"
    )]
    NothingKept {
        /// The line.
        label: String,
        /// First geometry.
        from: String,
        /// Last geometry.
        to: String,
    },
    /// The thread pool could not be made.
    #[error("cannot start {jobs} threads: {cause}")]
    Threads {
        /// Threads asked for.
        jobs: usize,
        /// What the system said.
        cause: String,
    },
}
