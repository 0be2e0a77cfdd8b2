//! Errors at a place: the walls and mid-wall, from nodes and from the integration points kept on the way.

use super::accumulate::Largest;
use super::model::{self, Mesh};
use super::points::KeptPoint;
use crate::exact::{Body, ExactSolution, Frame};
use crate::mechanics::Point;
use crate::results::ModelKind;

/// A number at a place with the exact one it is held against.
#[derive(Debug, Clone, PartialEq)]
pub struct AtPlace {
    pub computed: f64,
    pub exact: f64,
    /// In words, e.g. `node 17 (R 8.0000, 45.00 deg)`.
    pub place: String,
}

impl AtPlace {
    pub fn error(&self) -> f64 {
        (self.computed - self.exact).abs()
    }
}

/// The worst of several numbers; ties go to the first.
fn worst(candidates: impl IntoIterator<Item = AtPlace>) -> Option<AtPlace> {
    let mut largest = Largest::default();
    for candidate in candidates {
        largest.offer(candidate.error(), || candidate);
    }
    largest.place
}

fn words(radius: f64, theta: f64) -> String {
    format!("(R {radius:.6}, {:.3} deg)", theta.to_degrees())
}

/// A node and where it is: about the axis where the body has one, else by its coordinates.
pub fn node_in_words(mesh: Mesh, node: usize, body: &Body) -> String {
    let (id, point) = (mesh.nodes.ids[node], mesh.node(node));
    let Point { x, y, z } = point;
    let place = match (body.frame(), mesh.kind()) {
        (Frame::Cylindrical, _) => words(body.radius(&point), point.theta()),
        (_, ModelKind::Planar) => format!("(X {x:.6}, Y {y:.6})"),
        (_, ModelKind::Axisymmetric) => format!("(R {x:.6}, Z {z:.6})"),
        (_, ModelKind::Solid) => format!("(X {x:.6}, Y {y:.6}, Z {z:.6})"),
    };
    format!("node {id} {place}")
}

/// The part of a displacement that points from the axis, or from the centre of a sphere, to the particle.
fn outward(body: &Body, point: &Point, u: [f64; 3]) -> f64 {
    let (c, s) = point.direction();
    let plane = u[0] * c + u[1] * s;
    match body {
        Body::Sphere { .. } => {
            let size = body.radius(point);
            if size == 0.0 {
                return 0.0;
            }
            (plane * point.radius() + u[2] * point.z) / size
        }
        _ => plane,
    }
}

/// Radial displacement of the worst of the nodes.
///
/// # Errors
/// Where the exact solution has no value.
pub fn radial_displacement(
    mesh: Mesh,
    displacements: &[[f64; 3]],
    nodes: &[usize],
    exact: &dyn ExactSolution,
) -> Result<Option<AtPlace>, String> {
    let body = exact.body();
    let places = model::NodePlaces::new(mesh, exact);
    let mut candidates = Vec::with_capacity(nodes.len());
    for &node in nodes {
        let point = mesh.node(node);
        let state = exact.at(places.of(node)).map_err(|r| r.to_string())?;
        let outward = |u: [f64; 3]| outward(&body, &point, u);
        candidates.push(AtPlace {
            computed: outward(displacements[node]),
            exact: outward(state.displacement.into()),
            place: node_in_words(mesh, node, &body),
        });
    }
    Ok(worst(candidates))
}

/// The nodes nearest to a radius: all within a millionth of `scale` of the nearest.
pub fn nodes_nearest(mesh: Mesh, body: &Body, radius: f64, scale: f64) -> Vec<usize> {
    let distance = |node: usize| (body.radius(&mesh.node(node)) - radius).abs();
    let nearest = (0..mesh.nodes.len())
        .map(distance)
        .fold(f64::INFINITY, f64::min);
    (0..mesh.nodes.len())
        .filter(|&node| distance(node) <= nearest + 1e-6 * scale)
        .collect()
}

/// Recovered nodal stress (radial, hoop or axial by `component` 0, 1, 2) of the worst of the nodes.
///
/// # Errors
/// Where the exact solution has no value.
pub fn nodal_stress(
    mesh: Mesh,
    stress: &[[f64; 6]],
    nodes: &[usize],
    component: usize,
    exact: &dyn ExactSolution,
) -> Result<Option<AtPlace>, String> {
    let body = exact.body();
    let mut candidates = Vec::with_capacity(nodes.len());
    for &node in nodes {
        let point = mesh.node(node);
        let state = exact.at(point).map_err(|r| r.to_string())?;
        let at = model::place_of_axes(exact, point, &state);
        let local = model::local_normal_stress(&body, stress[node], at, &state.local_stress);
        candidates.push(AtPlace {
            computed: local[component],
            exact: state.local_stress.to_array()[component],
            place: node_in_words(mesh, node, &body),
        });
    }
    Ok(worst(candidates))
}

/// The kept points of one element after the other.
fn by_element<'k>(
    kept: &'k [KeptPoint],
    elements: &'k [usize],
) -> impl Iterator<Item = &'k [KeptPoint]> {
    let groups = kept.chunk_by(|a, b| a.element == b.element);
    groups.filter(|group| elements.binary_search(&(group[0].element as usize)).is_ok())
}

/// In each of the elements the integration point nearest to `radius`, against the exact value at that same point; the
/// worst of them.
pub fn nearest_points(
    mesh: Mesh,
    kept: &[KeptPoint],
    elements: &[usize],
    radius: f64,
    component: usize,
) -> Option<AtPlace> {
    let candidates = by_element(kept, elements).filter_map(|group| {
        let nearest = group.iter().min_by(|a, b| {
            let distance = |k: &KeptPoint| (k.radius - radius).abs();
            distance(a)
                .total_cmp(&distance(b))
                .then(a.point.cmp(&b.point))
        })?;
        let id = mesh.elements.ids[nearest.element as usize];
        Some(AtPlace {
            computed: nearest.computed[component],
            exact: nearest.exact[component],
            place: format!(
                "element {id} point {} {}",
                nearest.point,
                words(nearest.radius, nearest.theta)
            ),
        })
    });
    worst(candidates)
}

/// In each of the elements a straight line in R through its integration points, at the wall under their middle; the worst
/// of them.
///
/// # Errors
/// Where the exact solution has no value.
pub fn extrapolated(
    mesh: Mesh,
    kept: &[KeptPoint],
    elements: &[usize],
    radius: f64,
    component: usize,
    exact: &dyn ExactSolution,
) -> Result<Option<AtPlace>, String> {
    let mut candidates = Vec::new();
    for group in by_element(kept, elements) {
        let id = mesh.elements.ids[group[0].element as usize];
        let at = under(group, radius);
        let state = exact.at(at).map_err(|r| r.to_string())?;
        candidates.push(AtPlace {
            computed: line_at(group, radius, component),
            exact: state.local_stress.to_array()[component],
            place: format!(
                "element {id}, line through {} points at R {radius}",
                group.len()
            ),
        });
    }
    Ok(worst(candidates))
}

/// The point of that radius in the mean direction of the points: beside a hole the stress changes around the wall.
fn under(group: &[KeptPoint], radius: f64) -> Point {
    let (c, s) = group.iter().fold((0.0, 0.0), |(c, s), k| {
        (c + k.theta.cos(), s + k.theta.sin())
    });
    Point::from_cylindrical(radius, s.atan2(c), 0.0)
}

/// Least-squares line of the stress over R - radius, at zero; the mean where all points share one radius.
fn line_at(group: &[KeptPoint], radius: f64, component: usize) -> f64 {
    let n = group.len() as f64;
    let mean_x = group.iter().map(|k| k.radius - radius).sum::<f64>() / n;
    let mean_y = group.iter().map(|k| k.computed[component]).sum::<f64>() / n;
    let (mut xx, mut xy) = (0.0, 0.0);
    for k in group {
        let x = k.radius - radius - mean_x;
        xx += x * x;
        xy += x * (k.computed[component] - mean_y);
    }
    if xx <= (1e-12 * radius).powi(2) {
        mean_y
    } else {
        mean_y - mean_x * xy / xx
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn kept(radius: f64, stress: f64) -> KeptPoint {
        KeptPoint {
            element: 0,
            point: 1,
            radius,
            theta: 0.0,
            computed: [stress; 3],
            exact: [0.0; 3],
        }
    }

    #[test]
    fn a_straight_line_is_extended_to_the_wall() {
        let group = [
            kept(1.25, 5.0),
            kept(1.75, 6.0),
            kept(1.25, 5.0),
            kept(1.75, 6.0),
        ];
        assert!((line_at(&group, 1.0, 0) - 4.5).abs() < 1e-14);
        assert_eq!(line_at(&[kept(1.2, 3.0)], 1.0, 0), 3.0);
    }

    #[test]
    fn the_worst_is_the_first_of_equals() {
        let at = |computed: f64, place: &str| AtPlace {
            computed,
            exact: 1.0,
            place: place.to_string(),
        };
        let found = worst([at(1.5, "a"), at(0.5, "b"), at(1.1, "c")]).unwrap();
        assert_eq!(found.place, "a");
        assert_eq!(worst([]), None);
    }
}
