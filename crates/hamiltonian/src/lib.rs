//! orbend-hamiltonian
