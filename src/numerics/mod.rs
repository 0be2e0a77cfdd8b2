//! Mathematics without mechanics.
