//! orbend
