//! orbend-eigen
