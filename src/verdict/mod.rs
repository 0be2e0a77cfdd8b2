//! Criterion and number in, verdict with its reason out; and the outcome, the one full record of a run.

pub mod decision;
pub mod judge;
mod order;
pub mod outcome;

pub use decision::Verdict;
pub use outcome::Outcome;
