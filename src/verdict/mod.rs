//! Criterion and number in, verdict with its reason out; the outcome record.
