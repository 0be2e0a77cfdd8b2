//! Exact solutions. Never sees a mesh, so that no solution can be bent towards a result.

pub mod body;
pub mod description;
pub mod solution;

pub mod ends;
pub mod given;
pub mod known_value;
pub mod parameters;

pub mod bending;
pub mod compressible;
pub mod homogeneous;
pub mod lame_tube;
pub mod pressurised_sphere;
pub mod pressurised_tube;
pub mod published;
mod small_strain;
mod stated_field;
pub mod tabulated;
pub mod torsion_extension;
pub mod tube_shear;

pub mod catalogue;

mod demands;
#[cfg(test)]
mod laws_tests;
mod totals;
mod tube_entries;
mod tube_words;

pub use bending::{BentBlock, StraightenedSector};
pub use body::{Body, Frame};
pub use catalogue::{Entry, build, entries, find};
pub use description::{Description, Line, Sketch};
pub use ends::Ends;
pub use given::{Form, Given, ParameterEntry, Value, VariantEntry};
pub use homogeneous::Homogeneous;
pub use known_value::{Known, KnownQuantity, KnownValue};
pub use lame_tube::LameTube;
pub use parameters::Parameters;
pub use pressurised_sphere::PressurisedSphere;
pub use pressurised_tube::{Drive, Grading, Layer, Limit, PressurisedTube, TubeProblem};
pub use solution::{ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total};
pub use torsion_extension::TorsionExtension;
pub use tube_shear::TubeShear;
