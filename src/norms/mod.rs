//! Distance between computed and exact.
