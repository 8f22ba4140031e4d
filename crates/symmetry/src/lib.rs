//! orbend-symmetry
