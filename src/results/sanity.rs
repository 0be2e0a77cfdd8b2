//! Checks that need only the mesh and its points, no exact solution: is this a mesh, and do the integration
//! points cover it?

use super::elements::Elements;
use super::frame::ModelKind;
use super::log::Log;
use super::nodes::Nodes;
use super::set::ResultSet;
use crate::elements::{MAX_NODES, Shape, ShapeTable, map};
use crate::input::{Finding, Place, Weight};

/// How far outside its element an integration point may lie, in reference coordinates.
pub const INSIDE_SLACK: f64 = 1e-6;
/// Nodes closer than this share of the model's extent are at the same place.
pub const COINCIDENT: f64 = 1e-9;
/// Relative difference of weights and volume from which on a caution is given.
pub const COVER_CAUTION: f64 = 1e-6;
/// Relative difference of weights and volume from which on nothing is judged.
pub const COVER_REFUSED: f64 = 1e-3;

/// A side that belongs to one element only.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Side {
    pub element: u32,
    /// Index into [`Shape::sides`].
    pub side: u8,
}

/// What the points say about the mesh.
#[derive(Debug, Clone, PartialEq)]
pub struct Coverage {
    pub points: u64,
    /// Sum of the weights, where there are any.
    pub weight_sum: Option<f64>,
    pub mesh_volume: f64,
    /// `weight_sum` over `mesh_volume`.
    pub ratio: Option<f64>,
    pub remarks: Vec<Finding>,
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
    for same in all.chunk_by(|a, b| a.0 == b.0) {
        alone |= same.len() == 1;
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

/// Reads all points once: are they inside their elements, has every element some, do the weights add up to the
/// volume of the mesh and of each element? `None` without points or without a mesh.
pub fn check_points(set: &ResultSet) -> Result<Option<Coverage>, Vec<Finding>> {
    let (Some(elements), Some(nodes), Some(points)) = (set.elements(), set.nodes(), set.points())
    else {
        return Ok(None);
    };
    let volumes = element_volumes(elements, nodes);
    let mut sums = vec![0.0; elements.len()];
    let mut counts = vec![0u32; elements.len()];
    let mut log = Log::new();
    let given = points.channels().coordinates == super::Channel::Given;
    let mut coords = [[0.0; 3]; MAX_NODES];
    let pass = points.for_each_block(4096, &mut |block| {
        for i in 0..block.len() {
            let element = block.element[i] as usize;
            counts[element] += 1;
            if let Some(weight) = &block.weight {
                sums[element] += weight[i];
            }
            if !given {
                continue;
            }
            let count = elements.coordinates(element, nodes, &mut coords);
            let shape = elements.shapes[element];
            let target = elements.kind.in_plane(block.position[i]);
            let inside = map::inverse_map(shape, &coords[..count], target);
            if !inside.is_some_and(|xi| shape.contains(xi, INSIDE_SLACK)) {
                log.add(outside(
                    block.place(i),
                    block.point[i],
                    elements.ids[element],
                    inside,
                ));
            }
        }
        Ok(())
    })?;
    log.extend(pass.remarks);
    for (element, _) in counts.iter().enumerate().filter(|(_, count)| **count == 0) {
        let what = format!(
            "element {} has no integration point in {}",
            elements.ids[element],
            points.file()
        );
        log.add(Finding::refused(
            "element-without-points",
            elements.place(element),
            what,
        ));
    }
    let mesh_volume: f64 = volumes.iter().sum();
    let weighted = points.channels().weight.is_available();
    let weight_sum = weighted.then(|| sums.iter().sum::<f64>());
    let ratio = weight_sum.map(|sum| sum / mesh_volume);
    if let Some(ratio) = ratio
        && !log.is_refused()
    {
        compare(
            elements,
            nodes,
            points.file(),
            (&sums, &volumes),
            ratio,
            &mut log,
        );
    }
    let remarks = log.finish(points.file())?;
    Ok(Some(Coverage {
        points: pass.points,
        weight_sum,
        mesh_volume,
        ratio,
        remarks,
    }))
}

fn outside(place: Place, point: i64, element: i64, at: Option<[f64; 3]>) -> Finding {
    let place = place.field("X");
    let what = match at {
        Some(xi) => {
            format!("point {point} lies outside element {element}: reference coordinates {xi:?}")
        }
        None => format!("point {point} cannot be found in element {element}"),
    };
    Finding::refused("point-inside-element", place, what)
        .expected(format!("inside, up to {INSIDE_SLACK:e} in reference coordinates"))
        .hint("check the units and the element of the point, and that the coordinates are undeformed ones")
}

/// Weights against volumes: of the mesh, and of each element.
fn compare(
    elements: &Elements,
    nodes: &Nodes,
    file: &str,
    (sums, volumes): (&[f64], &[f64]),
    ratio: f64,
    log: &mut Log,
) {
    let off = |ratio: f64| (ratio - 1.0).abs();
    let weigh = |gap: f64| {
        if gap.is_nan() || gap > COVER_REFUSED {
            Some(Weight::Refused)
        } else {
            (gap > COVER_CAUTION).then_some(Weight::Caution)
        }
    };
    let whole = weigh(off(ratio));
    if let Some(weight) = whole {
        let what = format!("the weights add up to {ratio:.9} times the volume of the mesh");
        let hint = hint_for(elements, nodes, sums, ratio);
        let finding = Finding::new(
            weight,
            "points-cover-mesh",
            Place::file(file).field("weight"),
            what,
        );
        log.add(
            finding
                .expected(format!("1, up to {COVER_CAUTION:e}"))
                .hint(hint),
        );
    }
    if whole == Some(Weight::Refused) {
        return;
    }
    let mut worst: Option<(f64, usize)> = None;
    let mut count = 0;
    for element in 0..elements.len() {
        let gap = off(sums[element] / volumes[element]);
        if let Some(weight) = weigh(gap) {
            if weight == Weight::Refused {
                let what = format!(
                    "the weights of element {} add up to {:.9} times its volume",
                    elements.ids[element],
                    sums[element] / volumes[element]
                );
                let hint = "a point is missing, or belongs to another element";
                log.add(
                    Finding::refused("points-cover-element", elements.place(element), what)
                        .hint(hint),
                );
            } else {
                count += 1;
                if worst.is_none_or(|(w, _)| gap > w) {
                    worst = Some((gap, element));
                }
            }
        }
    }
    if let Some((gap, element)) = worst {
        let what = format!(
            "the weights of {count} elements differ from their volumes, most in element {}: by {gap:.3e}",
            elements.ids[element]
        );
        let place = elements.place(element);
        log.add(
            Finding::new(Weight::Caution, "points-cover-element", place, what)
                .hint("the rule of the solver may not be exact on curved elements"),
        );
    }
}

/// A guess at what went wrong with the weights.
fn hint_for(elements: &Elements, nodes: &Nodes, sums: &[f64], ratio: f64) -> String {
    let near = |a: f64, b: f64| (a - b).abs() <= 1e-6 * b.abs();
    let sum: f64 = sums.iter().sum();
    let bare: f64 = elements.shapes.iter().map(|s| s.reference_measure()).sum();
    let turn = 2.0 * std::f64::consts::PI;
    let thickness = 1.0 / ratio;
    if near(sum, bare) {
        "these are bare quadrature weights: multiply by det(dX/dxi)".to_string()
    } else if elements.kind == ModelKind::Axisymmetric && near(ratio * turn, 1.0) {
        "the factor 2 pi is missing".to_string()
    } else if elements.kind == ModelKind::Axisymmetric && near(sum, section_area(elements, nodes)) {
        "the factor 2 pi R is missing".to_string()
    } else if near(thickness.round(), thickness) && thickness > 1.5 {
        format!(
            "1/{thickness:.0} of the mesh: points are missing, or the weights are those of a sector"
        )
    } else if near(ratio.round(), ratio) && ratio > 1.5 {
        format!(
            "{ratio:.0} times the mesh: a thickness, several steps or all sectors are in the weights"
        )
    } else {
        "a weight is quadrature weight times det(dX/dxi), per unit thickness in two dimensions, times 2 pi R in \
         axisymmetric models, of the modelled part only"
            .to_string()
    }
}

/// The area of an axisymmetric section.
fn section_area(elements: &Elements, nodes: &Nodes) -> f64 {
    let mut flat = elements.clone();
    flat.kind = ModelKind::Planar;
    let mut section = nodes.clone();
    section.positions = nodes
        .positions
        .iter()
        .map(|&x| elements.kind.in_plane(x))
        .collect();
    mesh_volume(&flat, &section)
}
