//! Writers: outcome in, text out; one file per format.
