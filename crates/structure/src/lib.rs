//! orbend-structure
