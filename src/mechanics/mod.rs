//! The words everybody uses: points and frames, tensors, stress measures, units. Imports nothing of ours.

pub mod point;
pub mod stress_measure;
pub mod tensor;
pub mod units;

pub use point::Point;
pub use stress_measure::StressMeasure;
pub use tensor::SymTensor;
pub use units::{Dimension, UnitSystem};
