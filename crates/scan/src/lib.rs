//! orbend-scan
