//! Distance between computed and exact: norms, largest errors, errors at a place, totals.

pub mod accumulate;
pub mod body;
pub mod catalogue;
pub mod displacement;
pub mod known;
pub mod level;
pub mod measured;
pub mod model;
mod outline;
pub mod points;
pub mod profile;
mod share;
mod totals;
pub mod wall;
mod wall_measures;
pub mod watched;

pub use level::{Level, LevelMeasures};
pub use measured::Measured;
