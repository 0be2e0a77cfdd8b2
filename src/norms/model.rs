//! How a mesh stands for the body: a slice, an axisymmetric half-plane or a solid.

use crate::exact::State;
use crate::mechanics::Point;

/// The kind of model a result set is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Model {
    /// Two-dimensional in X, Y; integrals are per unit length.
    Slice,
    /// Two-dimensional in R, Z; integrals carry 2 pi R and cover the whole section.
    Axisymmetric,
    /// Three-dimensional.
    Solid,
}

impl Model {
    /// 2 or 3.
    pub fn dimension(self) -> usize {
        if self == Model::Solid { 3 } else { 2 }
    }

    /// The reference point of mesh coordinates (`[X, Y, 0]`, `[R, Z, _]` or `[X, Y, Z]`).
    pub fn point(self, c: [f64; 3]) -> Point {
        match self {
            Model::Slice => Point::new(c[0], c[1], 0.0),
            Model::Axisymmetric => Point::new(c[0], 0.0, c[1]),
            Model::Solid => Point::new(c[0], c[1], c[2]),
        }
    }

    /// The volume that a mesh measure (area or volume) at these coordinates stands for.
    pub fn volume_factor(self, c: [f64; 3]) -> f64 {
        match self {
            Model::Axisymmetric => 2.0 * std::f64::consts::PI * c[0],
            Model::Slice | Model::Solid => 1.0,
        }
    }

    /// The exact displacement in the mesh's axes; a slice is judged on its in-plane part.
    pub fn displacement(self, state: &State) -> [f64; 3] {
        let u = state.displacement;
        match self {
            Model::Slice => [u[0], u[1], 0.0],
            Model::Axisymmetric => [u[0], u[2], 0.0],
            Model::Solid => [u[0], u[1], u[2]],
        }
    }

    /// The exact gradient in the mesh's axes, row by row; a slice is judged on its in-plane part. In an
    /// axisymmetric model the last entry is u_R/R.
    pub fn gradient(self, state: &State) -> [[f64; 3]; 3] {
        let h = state.displacement_gradient;
        match self {
            Model::Slice => [[h[(0, 0)], h[(0, 1)], 0.0], [h[(1, 0)], h[(1, 1)], 0.0], [0.0; 3]],
            Model::Axisymmetric => {
                [[h[(0, 0)], h[(0, 2)], 0.0], [h[(2, 0)], h[(2, 2)], 0.0], [0.0, 0.0, h[(1, 1)]]]
            }
            Model::Solid => std::array::from_fn(|i| std::array::from_fn(|j| h[(i, j)])),
        }
    }
}
