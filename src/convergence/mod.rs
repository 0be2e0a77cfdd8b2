//! Numbers in, numbers out: observed orders, their uncertainty, and the orders theory expects.

pub mod expected;
pub mod observed;

pub use expected::{ExpectedOrders, Pairing, PressureSpace};
pub use observed::{Fit, fit_order, pair_order};
