//! Exact solutions. Never sees a mesh, so that no solution can be bent towards a result.

pub mod solution;

pub use solution::{Body, ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total};
