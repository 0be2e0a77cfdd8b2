//! Norms of displacement and of its gradient, integrated over the mesh.
//!
//! ```text
//! L2:  sqrt( int |u_h - u|^2 dV )        H1 seminorm:  sqrt( int |du_h/dX - du/dX|^2 dV )
//! ```
//! u_h comes from the nodes through the shape functions; the exact u is evaluated at the quadrature points, never
//! interpolated from nodes. The integral runs over the meshed (isoparametric) body; where that leaves the exact body
//! the solution's formula is continued, and such points are counted.

use super::accumulate::{Largest, SquaredError};
use super::model::{self, Mesh};
use crate::elements::{MAX_NODES, Shape, ShapeTable, map};
use crate::exact::ExactSolution;
use rayon::prelude::*;

/// Elements a block holds. Part of the definition of the sums' last bit, so it never depends on the machine.
const BLOCK: usize = 128;

/// What one pass over the mesh gives.
#[derive(Debug, Clone, Default)]
pub struct DisplacementNorms {
    pub l2: SquaredError,
    pub h1: SquaredError,
    /// Quadrature points used.
    pub points: u64,
    /// How many of them lie outside the exact body.
    pub outside: u64,
    /// The largest distance outside.
    pub outside_distance: f64,
    /// The first place where the exact solution has no value, in words.
    pub no_value: Option<String>,
}

impl DisplacementNorms {
    fn merge(&mut self, later: Self) {
        self.l2.merge(&later.l2);
        self.h1.merge(&later.h1);
        self.points += later.points;
        self.outside += later.outside;
        self.outside_distance = self.outside_distance.max(later.outside_distance);
        if self.no_value.is_none() {
            self.no_value = later.no_value;
        }
    }
}

/// The polynomial degrees the quadrature is exact for, in even and in distorted elements. Both are far above what an
/// element needs: the exact solution is no polynomial, nor is a gradient where the Jacobian varies. On coarse and
/// distorted meshes the norms agree with an FE library to 7e-10 (tests/norm_oracle.rs; the worst are hex8 and tet10,
/// gradients), on finer ones to more.
pub fn quadrature_degrees(shape: Shape) -> [usize; 2] {
    let even = match shape.dimension() {
        2 => 2 * shape.degree() + 11,
        _ => 2 * shape.degree() + 9,
    };
    [even, 21]
}

/// An element whose smallest Jacobian is below this share of its largest is distorted. Without the second quadrature
/// the gradient norm of a badly distorted hex27 is off by 1e-6.
const EVEN: f64 = 0.7;

/// The two quadratures of a shape.
struct Quadrature {
    even: ShapeTable,
    distorted: ShapeTable,
}

impl Quadrature {
    fn new(shape: Shape) -> Self {
        let [even, distorted] = quadrature_degrees(shape);
        Self {
            even: ShapeTable::of_degree(shape, even),
            distorted: ShapeTable::of_degree(shape, distorted),
        }
    }

    /// The one that an element with these nodes needs.
    fn of(&self, coords: &[[f64; 3]]) -> &ShapeTable {
        let dimension = self.even.shape.dimension();
        let (mut low, mut high) = (f64::INFINITY, 0.0_f64);
        for q in 0..self.even.len() {
            let jacobian = map::jacobian(dimension, self.even.gradients(q), coords);
            let determinant = map::determinant(&jacobian);
            (low, high) = (low.min(determinant), high.max(determinant));
        }
        if low >= EVEN * high {
            &self.even
        } else {
            &self.distorted
        }
    }
}

/// Integrates over the whole mesh. `displacements` are nodal, in space.
pub fn displacement_norms(
    mesh: Mesh,
    displacements: &[[f64; 3]],
    exact: &dyn ExactSolution,
) -> DisplacementNorms {
    let tables: Vec<Quadrature> = mesh
        .elements
        .shapes_used()
        .into_iter()
        .map(Quadrature::new)
        .collect();
    let elements: Vec<usize> = (0..mesh.elements.len()).collect();
    let blocks: Vec<DisplacementNorms> = elements
        .par_chunks(BLOCK)
        .map(|block| {
            let mut norms = DisplacementNorms::default();
            for &element in block {
                let shape = mesh.elements.shapes[element];
                if let Some(quadrature) = tables.iter().find(|q| q.even.shape == shape) {
                    Pass {
                        mesh,
                        displacements,
                        exact,
                        quadrature,
                    }
                    .add(element, &mut norms);
                }
            }
            norms
        })
        .collect();
    let mut whole = DisplacementNorms::default();
    for block in blocks {
        whole.merge(block);
    }
    whole
}

/// One element under integration.
struct Pass<'a> {
    mesh: Mesh<'a>,
    displacements: &'a [[f64; 3]],
    exact: &'a dyn ExactSolution,
    quadrature: &'a Quadrature,
}

impl Pass<'_> {
    fn add(&self, element: usize, norms: &mut DisplacementNorms) {
        let kind = self.mesh.kind();
        let mut coords = [[0.0; 3]; MAX_NODES];
        let mut moved = [[0.0; 3]; MAX_NODES];
        let mut gradients = [[0.0; 3]; MAX_NODES];
        let count = self
            .mesh
            .elements
            .coordinates(element, self.mesh.nodes, &mut coords);
        for (target, &node) in moved.iter_mut().zip(self.mesh.elements.nodes(element)) {
            *target = self.displacements[node as usize];
        }
        let (coords, moved, gradients) =
            (&coords[..count], &moved[..count], &mut gradients[..count]);
        let table = self.quadrature.of(coords);
        for q in 0..table.len() {
            let values = table.values(q);
            let dimension = table.shape.dimension();
            let determinant =
                map::physical_gradients(dimension, table.gradients(q), coords, gradients);
            let position = kind.in_space(map::position(values, coords));
            let weight = table.rule.weights[q]
                * determinant.unwrap_or(f64::NAN)
                * model::volume_factor(kind, position);
            let point = model::point(position);
            norms.points += 1;
            let outside = self.exact.body().outside(&point);
            if outside > 0.0 {
                norms.outside += 1;
                norms.outside_distance = norms.outside_distance.max(outside);
            }
            let state = match self.exact.at(point) {
                Ok(state) => state,
                Err(refusal) => {
                    let id = self.mesh.elements.ids[element];
                    norms
                        .no_value
                        .get_or_insert_with(|| format!("element {id}: {refusal}"));
                    continue;
                }
            };
            let computed = map::position(values, moved);
            let (distance, size) =
                squares(&judged(kind, computed), &model::displacement(kind, &state));
            norms.l2.add(weight, distance, size);
            let computed = model::computed_gradient(kind, moved, gradients, computed, position);
            let wanted = model::gradient(kind, &state);
            let rows = computed.iter().zip(&wanted).map(|(c, w)| squares(c, w));
            let (distance, size) = rows.fold((0.0, 0.0), |sum, row| (sum.0 + row.0, sum.1 + row.1));
            norms.h1.add(weight, distance, size);
        }
    }
}

/// The part of a computed displacement that is judged.
fn judged(kind: crate::results::ModelKind, u: [f64; 3]) -> [f64; 3] {
    if kind == crate::results::ModelKind::Planar {
        [u[0], u[1], 0.0]
    } else {
        u
    }
}

/// (|a - b|^2, |b|^2)
pub fn squares<const N: usize>(a: &[f64; N], b: &[f64; N]) -> (f64, f64) {
    let mut sums = (0.0, 0.0);
    for (x, y) in a.iter().zip(b) {
        sums.0 += (x - y) * (x - y);
        sums.1 += y * y;
    }
    sums
}

/// The node with the largest displacement error.
#[derive(Debug, Clone, PartialEq)]
pub struct LargestNodal {
    pub error: f64,
    pub node: Option<usize>,
    /// The largest exact displacement of any node.
    pub exact: f64,
}

/// Looks at every node.
///
/// # Errors
/// Where the exact solution has no value at a node.
pub fn largest_nodal(
    mesh: Mesh,
    displacements: &[[f64; 3]],
    exact: &dyn ExactSolution,
) -> Result<LargestNodal, String> {
    let kind = mesh.kind();
    let places = model::NodePlaces::new(mesh, exact);
    let mut largest = Largest::default();
    let mut size: f64 = 0.0;
    for (node, moved) in displacements.iter().enumerate() {
        let state = exact.at(places.of(node)).map_err(|r| r.to_string())?;
        let (distance, exact_size) =
            squares(&judged(kind, *moved), &model::displacement(kind, &state));
        largest.offer(distance.sqrt(), || node);
        size = size.max(exact_size.sqrt());
    }
    Ok(LargestNodal {
        error: largest.value,
        node: largest.place,
        exact: size,
    })
}
