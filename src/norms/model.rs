//! How a mesh stands for the body, and which part of the exact state it is held to.

use crate::exact::State;
use crate::mechanics::Point;
use crate::results::{Elements, ModelKind, Nodes};

/// A mesh with its nodes.
#[derive(Debug, Clone, Copy)]
pub struct Mesh<'a> {
    pub nodes: &'a Nodes,
    pub elements: &'a Elements,
}

impl Mesh<'_> {
    pub fn kind(&self) -> ModelKind {
        self.elements.kind
    }

    /// The reference point of a node.
    pub fn node(&self, node: usize) -> Point {
        point(self.nodes.positions[node])
    }
}

/// A position in space as a point.
pub fn point(position: [f64; 3]) -> Point {
    let [x, y, z] = position;
    Point::new(x, y, z)
}

/// The volume that a mesh measure (area or volume) at a position in space stands for.
pub fn volume_factor(kind: ModelKind, position: [f64; 3]) -> f64 {
    match kind {
        ModelKind::Axisymmetric => 2.0 * std::f64::consts::PI * position[0],
        ModelKind::Planar | ModelKind::Solid => 1.0,
    }
}

/// The exact displacement in space; a planar model is judged on its in-plane part.
pub fn displacement(kind: ModelKind, state: &State) -> [f64; 3] {
    let u = state.displacement;
    match kind {
        ModelKind::Planar => [u[0], u[1], 0.0],
        ModelKind::Axisymmetric | ModelKind::Solid => [u[0], u[1], u[2]],
    }
}

/// The exact du_i/dX_j; a planar model is judged on its in-plane part.
pub fn gradient(kind: ModelKind, state: &State) -> [[f64; 3]; 3] {
    let h = state.displacement_gradient;
    let full = std::array::from_fn(|i| std::array::from_fn(|j| h[(i, j)]));
    match kind {
        ModelKind::Planar => in_plane(full),
        ModelKind::Axisymmetric | ModelKind::Solid => full,
    }
}

fn in_plane(h: [[f64; 3]; 3]) -> [[f64; 3]; 3] {
    [[h[0][0], h[0][1], 0.0], [h[1][0], h[1][1], 0.0], [0.0; 3]]
}

/// The computed du_i/dX_j in space from nodal displacements and gradients of the shape functions in the mesh's
/// own coordinates (`[R, Z]` in an axisymmetric model, where the hoop strain u_R/R joins them).
pub fn computed_gradient(
    kind: ModelKind,
    moved: &[[f64; 3]],
    gradients: &[[f64; 3]],
    displacement: [f64; 3],
    position: [f64; 3],
) -> [[f64; 3]; 3] {
    // the axis of space along each axis of the mesh
    let axes: &[usize] = match kind {
        ModelKind::Planar => &[0, 1],
        ModelKind::Axisymmetric => &[0, 2],
        ModelKind::Solid => &[0, 1, 2],
    };
    let mut h = [[0.0; 3]; 3];
    for (u, g) in moved.iter().zip(gradients) {
        for row in 0..3 {
            for (j, &axis) in axes.iter().enumerate() {
                h[row][axis] += u[row] * g[j];
            }
        }
    }
    match kind {
        ModelKind::Planar => in_plane(h),
        ModelKind::Solid => h,
        ModelKind::Axisymmetric => {
            // a turn about the axis carries the radial into the hoop direction: -u_hoop/R and u_R/R
            h[0][1] = -displacement[1] / position[0];
            h[1][1] = displacement[0] / position[0];
            h
        }
    }
}
