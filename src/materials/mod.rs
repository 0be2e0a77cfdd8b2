//! Constitutive laws, one file a law.
