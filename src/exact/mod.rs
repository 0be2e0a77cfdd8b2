//! Exact solutions. Never sees a mesh, so that no solution can be bent towards a result.

pub mod solution;

pub mod ends;
pub mod parameters;

pub mod compressible;
pub mod lame_tube;
pub mod pressurised_tube;

pub mod catalogue;

mod totals;

pub use catalogue::{Entry, ParameterEntry, build, entries, find};
pub use ends::Ends;
pub use lame_tube::LameTube;
pub use parameters::Parameters;
pub use pressurised_tube::{Limit, PressurisedTube};
pub use solution::{Body, ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total};
