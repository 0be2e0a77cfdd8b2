//! Which elements' integration points are needed after the pass: those at the walls, at mid-wall and on the profile.

use super::body::BodyReport;
use super::model::Mesh;
use super::profile;
use crate::exact::{Body, ExactSolution};

/// Elements whose corners reach to both sides of a radius, ascending.
pub fn elements_across(mesh: Mesh, body: &Body, radius: f64) -> Vec<usize> {
    let across = |element: &usize| {
        let corners = mesh.elements.shapes[*element].corner_count();
        let nodes = mesh.elements.nodes(*element)[..corners].iter();
        let radii = nodes.map(|&n| body.radius(&mesh.node(n as usize)));
        let (low, high) = radii.fold((f64::INFINITY, 0.0_f64), |(l, h), r| (l.min(r), h.max(r)));
        let slack = 1e-9 * radius;
        low <= radius + slack && radius <= high + slack
    };
    (0..mesh.elements.len()).filter(across).collect()
}

/// By element index, whether its integration points are needed after the pass.
pub fn watched(mesh: Mesh, body: &BodyReport, exact: &dyn ExactSolution) -> Vec<bool> {
    let shape = exact.body();
    let mut watched = vec![false; mesh.elements.len()];
    let (middle, column) = match shape.span() {
        Some((inner, outer)) => (
            elements_across(mesh, &shape, 0.5 * (inner + outer)),
            profile::column(mesh, &shape),
        ),
        None => (Vec::new(), Vec::new()),
    };
    let lists = [
        body.inner_elements.as_slice(),
        &body.outer_elements,
        &middle,
        &column,
    ];
    for &element in lists.into_iter().flatten() {
        watched[element] = true;
    }
    watched
}
