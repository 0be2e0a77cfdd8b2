//! Stress through the wall along one radius, for the reader's eye.

use super::model::Mesh;
use super::points::KeptPoint;
use crate::exact::{Body, ExactSolution};
use crate::mechanics::Point;

/// Where along the modelled angle the radius is taken: close to the middle, but off the sides of elements.
const WHERE: f64 = 0.4871;

/// Stations of the exact lines.
const STATIONS: usize = 49;

/// Radial, hoop and axial stress through the wall.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct StressProfile {
    /// R where elements meet, walls included.
    pub borders: Vec<f64>,
    /// (R, [radial, hoop, axial])
    pub exact: Vec<(f64, [f64; 3])>,
    /// (R, computed, exact at the same point)
    pub computed: Vec<(f64, [f64; 3], [f64; 3])>,
}

/// Indices of the elements the radius runs through, ascending.
pub fn column(mesh: Mesh, body: &Body) -> Vec<usize> {
    let angles = (0..mesh.nodes.len()).map(|node| mesh.node(node).theta());
    let (low, high) = extent(angles);
    let target = low + WHERE * (high - low);
    // height along the axis, on a sphere the latitude
    let height_of = |p: Point| match body {
        Body::Sphere { .. } => p.z.atan2(p.radius()),
        _ => p.z,
    };
    let axial = (0..mesh.nodes.len()).map(|node| height_of(mesh.node(node)));
    let (bottom, top) = extent(axial);
    let height = bottom + WHERE * (top - bottom);
    let through = |element: &usize| {
        let corners = mesh.elements.shapes[*element].corner_count();
        let nodes = || {
            mesh.elements.nodes(*element)[..corners]
                .iter()
                .map(|&n| mesh.node(n as usize))
        };
        let (a, b) = extent(nodes().map(|p| p.theta()));
        let (c, d) = extent(nodes().map(height_of));
        // an element across the cut of the angle at pi spans almost the whole turn
        b - a < std::f64::consts::PI
            && (low == high || (a..=b).contains(&target))
            && (c..=d).contains(&height)
    };
    (0..mesh.elements.len()).filter(through).collect()
}

fn extent(values: impl Iterator<Item = f64>) -> (f64, f64) {
    values.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), v| {
        (low.min(v), high.max(v))
    })
}

/// The profile from the points kept in the column.
pub fn profile(
    mesh: Mesh,
    kept: &[KeptPoint],
    column: &[usize],
    exact: &dyn ExactSolution,
) -> Option<StressProfile> {
    let mut profile = StressProfile::default();
    for group in kept.chunk_by(|a, b| a.element == b.element) {
        if column.binary_search(&(group[0].element as usize)).is_ok() {
            along_one_radius(group, &mut profile);
        }
    }
    if profile.computed.is_empty()
        || profile
            .computed
            .iter()
            .any(|(_, c, _)| c[0].is_nan() || c[1].is_nan())
    {
        return None;
    }
    let body = exact.body();
    let (inner, outer) = body.span()?;
    profile.computed.sort_by(|a, b| a.0.total_cmp(&b.0));
    profile
        .computed
        .dedup_by(|a, b| (a.0 - b.0).abs() <= 1e-9 * outer);
    profile.borders = borders(mesh, &body, column, (inner, outer));
    for i in 0..STATIONS {
        let radius = inner + (outer - inner) * (i as f64 / (STATIONS - 1) as f64);
        let state = exact.at(body.point_at(radius.min(outer))).ok()?;
        let s = state.local_stress;
        profile.exact.push((radius.min(outer), [s.xx, s.yy, s.zz]));
    }
    Some(profile)
}

/// Of the points of one element those nearest in angle to its first one, in the order of their radius.
fn along_one_radius(group: &[KeptPoint], profile: &mut StressProfile) {
    let (low, high) = extent(group.iter().map(|k| k.theta));
    let middle = 0.5 * (low + high);
    let nearest = group
        .iter()
        .map(|k| (k.theta - middle).abs())
        .fold(f64::INFINITY, f64::min);
    let slack = 0.05 * (high - low);
    // of two columns at the same distance from the middle, the first
    let side = group
        .iter()
        .find(|k| (k.theta - middle).abs() <= nearest + slack)
        .map_or(0.0, |k| k.theta);
    for k in group.iter().filter(|k| (k.theta - side).abs() <= slack) {
        profile.computed.push((k.radius, k.computed, k.exact));
    }
}

fn borders(mesh: Mesh, body: &Body, column: &[usize], (inner, outer): (f64, f64)) -> Vec<f64> {
    let mut radii = vec![inner, outer];
    for &element in column {
        let corners = mesh.elements.shapes[element].corner_count();
        radii.extend(
            mesh.elements.nodes(element)[..corners]
                .iter()
                .map(|&n| body.radius(&mesh.node(n as usize))),
        );
    }
    radii.retain(|r| (inner..=outer).contains(r));
    radii.sort_by(f64::total_cmp);
    radii.dedup_by(|a, b| (*a - *b).abs() <= 1e-6 * (outer - inner));
    radii
}
