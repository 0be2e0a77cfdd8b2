//! Reference elements of the exchange format: node order, shape functions, maps, quadrature rules.
//!
//! Reference domains: the square and cube are [-1, 1]^d, the triangle and tetrahedron have their right angle
//! at the origin and legs of length 1, the wedge is that triangle times [-1, 1].

mod functions;
pub mod map;
mod rule;
mod shape;
mod table;

pub use rule::{Rule, STANDARD_RULES, standard_rule};
pub use shape::Shape;
pub use table::ShapeTable;

/// The largest number of nodes of any element, for buffers.
pub const MAX_NODES: usize = 27;

#[cfg(test)]
mod tests;
