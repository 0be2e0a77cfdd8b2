//! The CSV folder, read and distrusted.
