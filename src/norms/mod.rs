//! Distance between computed and exact: norms, largest errors, errors at a place, totals.

pub mod accumulate;
pub mod body;
pub mod catalogue;
pub mod displacement;
pub mod level;
pub mod model;
pub mod points;
pub mod profile;
pub mod wall;

pub use level::{Level, LevelMeasures, Measured};
