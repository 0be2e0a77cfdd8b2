//! Norms of displacement and of its gradient, integrated over the mesh.
//!
//! ```text
//! L2:  sqrt( int |u_h - u|^2 dV )        H1 seminorm:  sqrt( int |du_h/dX - du/dX|^2 dV )
//! ```
//! u_h comes from the nodes through the shape functions; the exact u is evaluated at the quadrature points, never
//! interpolated from nodes. The integral runs over the meshed (isoparametric) body; where that leaves the exact body
//! the solution's formula is continued, and such points are counted.

use super::accumulate::{Largest, SquaredError};
use super::model::Model;
use crate::elements::{MAX_NODES, Shape, ShapeTable, map};
use crate::exact::ExactSolution;
use crate::results::Mesh;
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

/// The polynomial degree the quadrature is exact for: far above what the element needs, since the exact solution is
/// no polynomial. Measured against an FE library's order 20: see tests/norm_oracle.rs.
pub fn quadrature_degree(shape: Shape) -> usize {
    match shape.dimension() {
        2 => 2 * shape.degree() + 9,
        _ => 2 * shape.degree() + 7,
    }
}

/// Integrates over the whole mesh. `displacements` are nodal, in the mesh's axes.
pub fn displacement_norms(
    mesh: &Mesh,
    displacements: &[[f64; 3]],
    model: Model,
    exact: &dyn ExactSolution,
) -> DisplacementNorms {
    let tables = shape_tables(mesh);
    let elements: Vec<usize> = (0..mesh.elements.len()).collect();
    let blocks: Vec<DisplacementNorms> = elements
        .par_chunks(BLOCK)
        .map(|block| {
            let mut norms = DisplacementNorms::default();
            for &element in block {
                if let Some(table) = table_of(&tables, mesh.elements.shape(element)) {
                    add_element(&mut norms, mesh, element, displacements, model, exact, table);
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

/// One table for each shape in the mesh.
fn shape_tables(mesh: &Mesh) -> Vec<ShapeTable> {
    let used = Shape::ALL.into_iter().filter(|s| (0..mesh.elements.len()).any(|e| mesh.elements.shape(e) == *s));
    used.map(|shape| ShapeTable::of_degree(shape, quadrature_degree(shape))).collect()
}

fn table_of(tables: &[ShapeTable], shape: Shape) -> Option<&ShapeTable> {
    tables.iter().find(|table| table.shape == shape)
}

fn add_element(
    norms: &mut DisplacementNorms,
    mesh: &Mesh,
    element: usize,
    displacements: &[[f64; 3]],
    model: Model,
    exact: &dyn ExactSolution,
    table: &ShapeTable,
) {
    let nodes = mesh.elements.nodes(element);
    let mut coords = [[0.0; 3]; MAX_NODES];
    let mut moved = [[0.0; 3]; MAX_NODES];
    for (local, &node) in nodes.iter().enumerate() {
        coords[local] = mesh.positions[node as usize];
        moved[local] = displacements[node as usize];
    }
    let (coords, moved) = (&coords[..nodes.len()], &moved[..nodes.len()]);
    let mut gradients = [[0.0; 3]; MAX_NODES];
    for q in 0..table.len() {
        let values = table.values(q);
        let at = map::position(values, coords);
        let dimension = table.shape.dimension();
        let determinant =
            map::physical_gradients(dimension, table.gradients(q), coords, &mut gradients[..nodes.len()]);
        let weight = table.rule.weights[q] * determinant.unwrap_or(f64::NAN) * model.volume_factor(at);
        let point = model.point(at);
        norms.points += 1;
        let outside = exact.body().outside(&point);
        if outside > 0.0 {
            norms.outside += 1;
            norms.outside_distance = norms.outside_distance.max(outside);
        }
        let state = match exact.at(point) {
            Ok(state) => state,
            Err(refusal) => {
                norms.no_value.get_or_insert(format!("element {}: {refusal}", mesh.elements.id(element)));
                continue;
            }
        };
        let computed = map::position(values, moved);
        let (distance, size) = squares(&computed, &model.displacement(&state));
        norms.l2.add(weight, distance, size);
        let computed = gradient_of(moved, &gradients[..nodes.len()], computed, at, model);
        let wanted = model.gradient(&state);
        let (mut distance, mut size) = (0.0, 0.0);
        for (c, w) in computed.iter().zip(&wanted) {
            let (d, s) = squares(c, w);
            distance += d;
            size += s;
        }
        norms.h1.add(weight, distance, size);
    }
}

/// du_i/dX_j from nodal values; in an axisymmetric model also u_R/R in the last place.
fn gradient_of(
    moved: &[[f64; 3]],
    gradients: &[[f64; 3]],
    displacement: [f64; 3],
    at: [f64; 3],
    model: Model,
) -> [[f64; 3]; 3] {
    let dimension = model.dimension();
    let mut h = [[0.0; 3]; 3];
    for (u, g) in moved.iter().zip(gradients) {
        for (i, row) in h.iter_mut().enumerate().take(dimension) {
            for (j, entry) in row.iter_mut().enumerate().take(dimension) {
                *entry += u[i] * g[j];
            }
        }
    }
    if model == Model::Axisymmetric {
        h[2][2] = displacement[0] / at[0];
    }
    h
}

/// (|a - b|^2, |b|^2)
fn squares(a: &[f64; 3], b: &[f64; 3]) -> (f64, f64) {
    let mut sums = (0.0, 0.0);
    for (x, y) in a.iter().zip(b) {
        sums.0 += (x - y) * (x - y);
        sums.1 += y * y;
    }
    sums
}

/// Largest nodal displacement error, the node's index, and the largest nodal exact displacement.
///
/// # Errors
/// Where the exact solution has no value at a node.
pub fn largest_nodal(
    mesh: &Mesh,
    displacements: &[[f64; 3]],
    model: Model,
    exact: &dyn ExactSolution,
) -> Result<(Largest<usize>, f64), String> {
    let mut largest = Largest::default();
    let mut size: f64 = 0.0;
    for (node, (position, moved)) in mesh.positions.iter().zip(displacements).enumerate() {
        let state = exact.at(model.point(*position)).map_err(|r| r.to_string())?;
        let (distance, exact_size) = squares(moved, &model.displacement(&state));
        largest.offer(distance.sqrt(), || node);
        size = size.max(exact_size.sqrt());
    }
    Ok((largest, size))
}
