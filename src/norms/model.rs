//! How a mesh stands for the body, and which part of the exact state it is held to.

use crate::elements::{MAX_NODES, ShapeTable, map};
use crate::exact::{Body, ExactSolution, Frame, State};
use crate::mechanics::{Point, SymTensor};
use crate::results::{Elements, ModelKind, Nodes};
use std::collections::BTreeMap;

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

    /// Area or volume of the mesh itself: in an axisymmetric model that of the half section, not of the turn.
    pub fn own_measure(&self) -> f64 {
        let shapes = self.elements.shapes_used().into_iter();
        // the Jacobian of hex27 has degree 5 in each direction, that of tet10 and wedge15 less in all
        let tables: Vec<_> = shapes.map(|s| ShapeTable::of_degree(s, 5)).collect();
        let mut sum = 0.0;
        for (element, shape) in self.elements.shapes.iter().enumerate() {
            let mut coords = [[0.0; 3]; MAX_NODES];
            let count = self.elements.coordinates(element, self.nodes, &mut coords);
            for table in tables.iter().filter(|table| table.shape == *shape) {
                for (q, weight) in table.rule.weights.iter().enumerate() {
                    let gradients = table.gradients(q);
                    let jacobian = map::jacobian(shape.dimension(), gradients, &coords[..count]);
                    sum += weight * map::determinant(&jacobian);
                }
            }
        }
        sum
    }
}

/// Normal stresses along the body's own axes (radial, hoop, axial) from Cartesian components, of which those that are not
/// given hold NaN. NaN stays only where a component that is not given is needed: on the X axis, where every axisymmetric
/// model lies, no shear with Y is. `at` is where the axes are taken: the reference point, or the deformed one where
/// particles turn. On a sphere the two hoop stresses should be one: the one farther from `exact` is taken.
pub fn local_normal_stress(
    body: &Body,
    mut stress: [f64; 6],
    at: Point,
    exact: &SymTensor,
) -> [f64; 3] {
    let direction = at.direction();
    let idle = if direction.1 == 0.0 { 3..5 } else { 4..5 };
    let mut forget = |range: std::ops::Range<usize>| {
        for shear in stress[range].iter_mut().filter(|shear| shear.is_nan()) {
            *shear = 0.0;
        }
    };
    match body.frame() {
        Frame::Cartesian => [stress[0], stress[1], stress[2]],
        Frame::Cylindrical => {
            forget(idle.start..6);
            let local = SymTensor::from_array(stress).cartesian_to_cylindrical(direction);
            [local.xx, local.yy, local.zz]
        }
        Frame::Spherical => {
            if direction.1 == 0.0 {
                forget(idle);
            }
            let local = SymTensor::from_array(stress).cartesian_to_cylindrical(direction);
            let size = at.radius().hypot(at.z);
            let (c, s) = if size == 0.0 {
                (1.0, 0.0)
            } else {
                (at.radius() / size, at.z / size)
            };
            let radial = local.xx * c * c + local.zz * s * s + 2.0 * local.zx * s * c;
            let along = local.xx * s * s + local.zz * c * c - 2.0 * local.zx * s * c;
            let off = |hoop: f64| (hoop - exact.yy).abs();
            let worse = if off(along) > off(local.yy) || along.is_nan() {
                along
            } else {
                local.yy
            };
            [radial, worse, f64::NAN]
        }
    }
}

/// Where the local axes of a particle are: its reference point, or where it has moved to if particles turn.
pub fn place_of_axes(exact: &dyn ExactSolution, point: Point, state: &State) -> Point {
    if exact.turns() {
        let u = state.displacement;
        Point::new(point.x + u[0], point.y + u[1], point.z + u[2])
    } else {
        point
    }
}

/// Where the exact solution is asked for the nodes of a mesh. A node where parts meet belongs to the part of its element, and
/// is asked for just inside that part.
pub struct NodePlaces<'a> {
    mesh: Mesh<'a>,
    moved: BTreeMap<usize, Point>,
}

impl<'a> NodePlaces<'a> {
    pub fn new(mesh: Mesh<'a>, exact: &dyn ExactSolution) -> Self {
        let (interfaces, body) = (exact.interfaces(), exact.body());
        let mut moved = BTreeMap::new();
        let elements = if interfaces.is_empty() {
            0
        } else {
            mesh.elements.len()
        };
        let near = 1e-6 * body.thickness() + 2e-7 * body.extent();
        for element in 0..elements {
            let nodes = mesh.elements.nodes(element);
            let count = mesh.elements.shapes[element].corner_count();
            let radii = nodes[..count]
                .iter()
                .map(|&n| mesh.node(n as usize).radius());
            let middle = radii.sum::<f64>() / count as f64;
            for &node in nodes {
                let point = mesh.node(node as usize);
                let radius = point.radius();
                let Some(at) = interfaces.iter().find(|at| (radius - **at).abs() <= near) else {
                    continue;
                };
                let inwards = if middle < *at { -1e-11 } else { 1e-11 };
                let factor = at * (1.0 + inwards) / radius;
                let place = Point::new(point.x * factor, point.y * factor, point.z);
                moved.entry(node as usize).or_insert(place);
            }
        }
        Self { mesh, moved }
    }

    pub fn of(&self, node: usize) -> Point {
        let moved = self.moved.get(&node).copied();
        moved.unwrap_or_else(|| self.mesh.node(node))
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

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_shear_that_is_not_given_matters_only_off_the_x_axis() {
        let tube = Body::Tube {
            inner: 1.0,
            outer: 2.0,
        };
        let local = |stress, (c, s): (f64, f64)| {
            local_normal_stress(&tube, stress, Point::new(c, s, 0.0), &SymTensor::default())
        };
        let stress = [1.0, 2.0, 3.0, f64::NAN, f64::NAN, 0.5];
        assert_eq!(local(stress, (1.0, 0.0)), [1.0, 2.0, 3.0]);
        let turned = local(stress, (0.6, 0.8));
        assert!(turned[0].is_nan() && turned[1].is_nan());
        assert_eq!(turned[2], 3.0);
        let known = [1.0, 2.0, 3.0, 0.25, f64::NAN, f64::NAN];
        let turned = local(known, (0.6, 0.8));
        // 0.36 + 2 * 0.64 + 2 * 0.25 * 0.48
        assert!((turned[0] - 1.88).abs() < 1e-15 && (turned[1] - 1.12).abs() < 1e-15);
    }

    #[test]
    fn on_a_sphere_the_worse_of_the_two_hoop_stresses_counts() {
        let sphere = Body::Sphere {
            inner: 1.0,
            outer: 2.0,
        };
        let exact = SymTensor::diagonal(-1.0, 2.0, 2.0);
        // radial along Z: rr = szz, the hoops are sxx and syy
        let at = Point::new(0.0, 0.0, 1.5);
        let local = |sxx: f64, syy: f64| {
            local_normal_stress(&sphere, [sxx, syy, -1.0, 0.0, 0.0, 0.0], at, &exact)
        };
        assert_eq!(local(2.0, 2.5)[..2], [-1.0, 2.5]);
        assert_eq!(local(1.0, 2.5)[..2], [-1.0, 1.0]);
        // 45 degrees in the X-Z plane, shear only: radial +, meridian -
        let at = Point::new(1.0, 0.0, 1.0);
        let half = local_normal_stress(
            &sphere,
            [0.0, 0.0, 0.0, f64::NAN, f64::NAN, 3.0],
            at,
            &exact,
        );
        assert!((half[0] - 3.0).abs() < 1e-15);
    }
}
