//! The YAML file exactly as written.
