//! Checks that need only the mesh and its points, no exact solution: is this a mesh, and do the integration
//! points cover it?

pub use super::cover::{
    COVER_CAUTION, COVER_REFUSED, CoverCheck, Coverage, INSIDE_SLACK, check_points,
};
use super::elements::Elements;
use super::frame::ModelKind;
use super::log::Log;
use super::nodes::Nodes;
use super::set::ResultSet;
use crate::elements::{MAX_NODES, Shape, ShapeTable, map};
use crate::input::{Finding, Place, Weight};

/// Nodes closer than this share of the model's extent are at the same place.
pub const COINCIDENT: f64 = 1e-9;

/// A side that belongs to one element only.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Side {
    pub element: u32,
    /// Index into [`Shape::sides`].
    pub side: u8,
}

/// Shape functions at a rule fine enough for the volume of every element: one table a shape of the mesh.
fn tables(elements: &Elements) -> Vec<ShapeTable> {
    let of = |shape: Shape| {
        // the determinant of a quadratic map has degree 5 on hex27 and 3 on tet10; R adds one map more
        let degree = match (shape.degree(), shape.dimension()) {
            (1, 2) => 2,
            (1, _) => 3,
            (_, 2) => 5,
            _ => 6,
        };
        ShapeTable::of_degree(shape, degree)
    };
    elements.shapes_used().into_iter().map(of).collect()
}

/// Area or volume of one element (times 2 pi R in an axisymmetric model), and its smallest determinant over its
/// largest in magnitude. Determinants that are not positive are handed to `bad` with their reference point.
fn measure(
    elements: &Elements,
    nodes: &Nodes,
    element: usize,
    tables: &[ShapeTable],
    bad: &mut dyn FnMut(f64, [f64; 3]),
) -> f64 {
    let mut coords = [[0.0; 3]; MAX_NODES];
    let shape = elements.shapes[element];
    let Some(table) = tables.iter().find(|t| t.shape == shape) else {
        return f64::NAN;
    };
    let count = elements.coordinates(element, nodes, &mut coords);
    let coords = &coords[..count];
    let mut sum = 0.0;
    for q in 0..table.len() {
        let m = map::jacobian(shape.dimension(), table.gradients(q), coords);
        let determinant = map::determinant(&m);
        if determinant.is_nan() || determinant <= 0.0 {
            bad(determinant, table.rule.points[q]);
        }
        let mut weight = table.rule.weights[q] * determinant;
        if elements.kind == ModelKind::Axisymmetric {
            weight *= 2.0 * std::f64::consts::PI * map::position(table.values(q), coords)[0];
        }
        sum += weight;
    }
    sum
}

/// Volume of each element, in the order of the elements: area per unit thickness in a planar model, volume of
/// the whole turn in an axisymmetric one.
pub fn element_volumes(elements: &Elements, nodes: &Nodes) -> Vec<f64> {
    let tables = tables(elements);
    let volume = |e| measure(elements, nodes, e, &tables, &mut |_, _| {});
    (0..elements.len()).map(volume).collect()
}

/// Volume of the mesh, as [`element_volumes`].
pub fn mesh_volume(elements: &Elements, nodes: &Nodes) -> f64 {
    element_volumes(elements, nodes).iter().sum()
}

/// Every side as (sorted corner nodes, side), sorted.
fn sorted_sides(elements: &Elements) -> Vec<([u32; 4], Side)> {
    let mut all = Vec::new();
    for element in 0..elements.len() {
        let nodes = elements.nodes(element);
        let shape = elements.shapes[element];
        let corners = shape.corner_count();
        for (side, local) in shape.sides().iter().enumerate() {
            let mut key = [u32::MAX; 4];
            let ends = local.iter().filter(|&&n| n < corners);
            for (slot, &n) in key.iter_mut().zip(ends) {
                *slot = nodes[n];
            }
            key.sort_unstable();
            all.push((
                key,
                Side {
                    element: element as u32,
                    side: side as u8,
                },
            ));
        }
    }
    all.sort_unstable();
    all
}

/// The sides that belong to exactly one element, in the order of elements and sides.
pub fn boundary_sides(elements: &Elements) -> Vec<Side> {
    let all = sorted_sides(elements);
    let mut alone: Vec<Side> = all
        .chunk_by(|a, b| a.0 == b.0)
        .filter(|same| same.len() == 1)
        .map(|same| same[0].1)
        .collect();
    alone.sort_unstable();
    alone
}

/// Global node indices of a side, in the order of [`Shape::sides`].
pub fn side_nodes(elements: &Elements, side: Side) -> Vec<u32> {
    let element = side.element as usize;
    let nodes = elements.nodes(element);
    let local = elements.shapes[element].sides()[side.side as usize];
    local.iter().map(|&n| nodes[n]).collect()
}

/// Checks the mesh. The remarks, or every finding when one forbids judging; nothing without a mesh.
pub fn check_mesh(set: &ResultSet) -> Result<Vec<Finding>, Vec<Finding>> {
    let (Some(elements), Some(nodes)) = (set.elements(), set.nodes()) else {
        return Ok(Vec::new());
    };
    let mut log = Log::new();
    check_jacobians(elements, nodes, &mut log);
    check_sides(elements, nodes, &mut log);
    let mut remarks = Log::new();
    check_unused(elements, nodes, &mut remarks);
    check_coincident(nodes, &mut log);
    log.extend(remarks.finish(nodes.file()).unwrap_or_else(|e| e));
    log.finish(elements.file())
}

fn check_jacobians(elements: &Elements, nodes: &Nodes, log: &mut Log) {
    let tables = tables(elements);
    for element in 0..elements.len() {
        let mut worst: Option<(f64, [f64; 3])> = None;
        measure(elements, nodes, element, &tables, &mut |determinant, at| {
            // `!(a >= b)` lets NaN win
            if worst.is_none_or(|(w, _)| determinant.is_nan() || determinant < w) {
                worst = Some((determinant, at));
            }
        });
        if let Some((determinant, at)) = worst {
            let shape = elements.shapes[element];
            let what = format!(
                "element {} ({}) has the Jacobian {determinant:e} at reference point {at:?}",
                elements.ids[element],
                shape.name()
            );
            let hint = match shape {
                Shape::Wedge6 | Shape::Wedge15 => {
                    "the triangle of nodes 1 2 3 must point towards nodes 4 5 6 (right hand rule)"
                }
                _ => "check the node order of the shape (that of VTK) and the middle nodes",
            };
            log.add(
                Finding::refused("positive-jacobian", elements.place(element), what).hint(hint),
            );
        }
    }
}

fn check_sides(elements: &Elements, nodes: &Nodes, log: &mut Log) {
    let all = sorted_sides(elements);
    let mut alone = false;
    let mut unlike: Vec<(Side, Side)> = Vec::new();
    for same in all.chunk_by(|a, b| a.0 == b.0) {
        alone |= same.len() == 1;
        if let [one, other] = same {
            let sorted = |side: Side| {
                let mut nodes = side_nodes(elements, side);
                nodes.sort_unstable();
                nodes
            };
            if sorted(one.1) != sorted(other.1) {
                unlike.push((one.1, other.1));
            }
        }
        if same.len() > 2 {
            let ids: Vec<String> = (same[0].0.iter().filter(|&&n| n != u32::MAX))
                .map(|&n| nodes.ids[n as usize].to_string())
                .collect();
            let place = elements.place(same[2].1.element as usize);
            let what = format!(
                "the side with corner nodes {} belongs to {} elements",
                ids.join(" "),
                same.len()
            );
            let hint = "elements overlap, or one is there twice";
            log.add(Finding::refused("manifold-sides", place, what).hint(hint));
        }
    }
    if let Some((one, other)) = unlike.iter().min() {
        let id = |side: &Side| elements.ids[side.element as usize];
        let what = format!(
            "{} sides have other middle nodes in one element than in its neighbour; the first are elements {} and {}",
            unlike.len(),
            id(one),
            id(other)
        );
        let place = elements.place(other.element as usize);
        log.add(
            Finding::new(Weight::Caution, "matching-sides", place, what)
                .hint("the displacement may jump there: merge the nodes, or use shapes that fit"),
        );
    }
    if !alone && !elements.is_empty() {
        let what = "no side belongs to one element only: the mesh has no boundary";
        log.add(Finding::refused(
            "boundary-exists",
            Place::file(elements.file()),
            what,
        ));
    }
}

fn check_unused(elements: &Elements, nodes: &Nodes, log: &mut Log) {
    let mut used = vec![false; nodes.len()];
    for element in 0..elements.len() {
        for &node in elements.nodes(element) {
            used[node as usize] = true;
        }
    }
    for (node, _) in used.iter().enumerate().filter(|(_, used)| !**used) {
        let what = format!("node {} belongs to no element", nodes.ids[node]);
        log.add(
            Finding::new(Weight::Caution, "unused-node", nodes.place(node), what).hint(
                "leave out nodes of other bodies, control points and nodes left over from meshing",
            ),
        );
    }
}

/// Nodes at the same place. They are sorted along a direction that no mesh is aligned with, so that only
/// neighbours in this order have to be compared.
fn check_coincident(nodes: &Nodes, log: &mut Log) {
    let slack = COINCIDENT * nodes.extent();
    let along = |x: &[f64; 3]| 0.612_372_4 * x[0] + 0.553_743_7 * x[1] + 0.564_189_6 * x[2];
    let mut order: Vec<(f64, u32)> = nodes
        .positions
        .iter()
        .zip(0u32..)
        .map(|(x, i)| (along(x), i))
        .collect();
    order.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.cmp(&b.1)));
    let mut pairs: Vec<(u32, u32)> = Vec::new();
    for (at, &(place, node)) in order.iter().enumerate() {
        let a = nodes.positions[node as usize];
        for &(other_place, other) in &order[at + 1..] {
            if other_place - place > slack {
                break;
            }
            let b = nodes.positions[other as usize];
            if (0..3).all(|i| (a[i] - b[i]).abs() <= slack) {
                pairs.push((node.min(other), node.max(other)));
                break;
            }
        }
    }
    if let Some(&(first, second)) = pairs.iter().min() {
        let (a, b) = (nodes.ids[first as usize], nodes.ids[second as usize]);
        let what = format!(
            "{} nodes lie where another one is; the first are {a} and {b}",
            pairs.len()
        );
        let place = nodes.place(second as usize);
        log.add(
            Finding::new(Weight::Caution, "coincident-nodes", place, what)
                .hint("merge them, unless the body is meant to be cut there"),
        );
    }
}
