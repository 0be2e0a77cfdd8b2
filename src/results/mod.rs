//! Results of a solver: a folder of CSV files, read and distrusted.
//!
//! [`ResultSet::open`] reads nodes, elements and totals and prepares the integration points, which are never
//! held: [`PointSource::for_each_block`] streams them. Everything handed out is in the suite's units, in the
//! Cartesian frame, as Cauchy stress and mean pressure with compression positive.

mod block;
mod channel;
mod conventions;
mod cover;
mod elements;
mod files;
mod frame;
mod header;
mod ids;
mod log;
mod nodes;
mod number;
mod pass;
mod points;
pub mod rules;
pub mod sanity;
mod set;
mod steps;
mod stress;
mod table;
mod totals;

pub use block::{MAX_POINT_NUMBER, NO_ELEMENT, PointBlock};
pub use channel::Channel;
pub use conventions::{
    AngleUnit, ColumnNames, Conventions, PressureKind, PressureSign, Reading, Shear,
};
pub use elements::Elements;
pub use files::{InputFile, TableName};
pub use frame::ModelKind;
pub use header::column_names;
pub use log::LISTED;
pub use nodes::Nodes;
pub use points::{Pass, PointChannels, PointSource};
pub use set::ResultSet;
pub use stress::Components;
pub use totals::{Total, Totals, dimension_of};

#[cfg(test)]
mod invariance_tests;
#[cfg(test)]
mod nodes_tests;
#[cfg(test)]
mod sanity_tests;
#[cfg(test)]
mod tests;
