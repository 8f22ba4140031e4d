//! orbend-report
