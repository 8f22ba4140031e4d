//! orbend-overlap
