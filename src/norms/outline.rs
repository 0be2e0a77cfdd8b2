//! Where the mesh ends, the body must end or be cut: no hole and no missing piece may hide in what coarse sides explain of
//! the volume. And the mesh reaches as far as its share does: a part of it meshed twice has the volume, not the reach.

use super::body::{BodyReport, Declared, Look, Wall, mean};
use crate::exact::Body;
use crate::input::Finding;
use crate::mechanics::Point;
use crate::results::ModelKind;
use crate::results::sanity::Side;
use std::collections::BTreeMap;
use std::f64::consts::PI;

/// Findings of one kind that are listed; the rest are counted.
const LISTED: usize = 3;

/// How far a measured share may fall short of the declared one.
const SHORT: f64 = 1e-3;

impl Look<'_> {
    /// The corners of a side, and the wall that all of them are on.
    pub(super) fn corners(&self, side: Side) -> (Vec<[f64; 3]>, Option<Wall>) {
        let element = side.element as usize;
        let nodes = self.mesh.elements.nodes(element);
        let shape = self.mesh.elements.shapes[element];
        let local = shape.sides()[side.side as usize].iter();
        let corners: Vec<[f64; 3]> = local
            .filter(|&&l| l < shape.corner_count())
            .map(|&l| self.mesh.nodes.positions[nodes[l] as usize])
            .collect();
        let wall = |at: &[f64; 3]| self.wall_of(self.radius(*at));
        let first = corners.first().and_then(wall);
        let all = corners.iter().all(|at| wall(at) == first);
        (corners, first.filter(|_| all))
    }

    /// Every free side is on a wall, on an end, on a cut that such a body can have, or where parts meet.
    pub(super) fn outline(&self, declared: Declared, boundary: &[Side], report: &mut BodyReport) {
        if matches!(self.body, Body::Free { .. }) {
            return;
        }
        let (low, high) = self.bounds();
        let mut inside: Vec<Side> = Vec::new();
        for side in boundary {
            let (corners, wall) = self.corners(*side);
            let at = |axis: usize, place: f64| {
                corners
                    .iter()
                    .all(|c| (c[axis] - place).abs() <= 4.0 * self.slack)
            };
            let end = self.mesh.kind() != ModelKind::Planar
                && self.body.is_prism()
                && (at(2, low[2]) || at(2, high[2]));
            let edge = |axis: usize| at(axis, low[axis]) || at(axis, high[axis]);
            let cut = match (self.body, self.mesh.kind()) {
                (Body::Block { .. }, _) => edge(0) || edge(1),
                (Body::Sphere { .. }, _) => self.through_centre(&corners),
                (_, ModelKind::Axisymmetric) => at(0, 0.0),
                _ => self.through_axis(&corners),
            };
            let meet = |at: f64| {
                let off = |c: &[f64; 3]| (self.radius(*c) - at).abs();
                corners.iter().all(|c| off(c) <= self.slack)
            };
            let meets = declared.interfaces.iter().any(|at| meet(*at));
            if !(wall.is_some() || end || cut || meets) {
                inside.push(*side);
            }
        }
        let inside = self.alone(inside);
        let stray = inside.len();
        for side in inside.iter().take(LISTED) {
            let element = side.element as usize;
            let [x, y, z] = self.corners(*side).0.first().copied().unwrap_or_default();
            let id = self.mesh.elements.ids[element];
            let found = format!(
                "element {id} has a free side inside the body, at X = {x:.6}, Y = {y:.6}, Z = {z:.6}"
            );
            report.findings.push(
                Finding::refused("edge-of-body", self.mesh.elements.place(element), found)
                    .expected("free sides on the walls, on the ends and on plane cuts only")
                    .hint("is a hole or a gap in the mesh, or are neighbours not joined there?"),
            );
        }
        if stray > LISTED {
            let found = format!("{} more free sides lie inside the body", stray - LISTED);
            let place = self.place("elements.csv");
            report
                .findings
                .push(Finding::refused("edge-of-body", place, found));
        }
    }

    /// The sides that have no counterpart: two elements with nodes of their own may meet in the same place, one from each side
    /// (the reader says that nodes coincide). A copy of an element lies on the same side.
    fn alone(&self, sides: Vec<Side>) -> Vec<Side> {
        let size = 8.0 * self.slack.max(1e-9 * self.body.extent());
        let key = |side: &Side| {
            let corners = self.corners(*side).0;
            let mut keys: Vec<_> = corners
                .iter()
                .map(|c| c.map(|x| (x / size).round() as i64))
                .collect();
            keys.sort_unstable();
            keys
        };
        // which way out of the element the side looks
        let outward = |side: &Side| {
            let element = side.element as usize;
            let nodes = self.mesh.elements.nodes(element);
            let count = self.mesh.elements.shapes[element].corner_count();
            let whole = mean(
                nodes[..count]
                    .iter()
                    .map(|&n| self.mesh.nodes.positions[n as usize]),
            );
            let here = mean(self.corners(*side).0.into_iter());
            std::array::from_fn::<f64, 3, _>(|i| here[i] - whole[i])
        };
        let mut places: BTreeMap<Vec<[i64; 3]>, Vec<Side>> = BTreeMap::new();
        for side in sides {
            places.entry(key(&side)).or_default().push(side);
        }
        let opposite = |pair: &[Side]| match pair {
            [a, b] => {
                outward(a)
                    .iter()
                    .zip(outward(b))
                    .map(|(x, y)| x * y)
                    .sum::<f64>()
                    < 0.0
            }
            _ => false,
        };
        let mut alone: Vec<Side> = places
            .into_values()
            .filter(|here| !opposite(here))
            .flatten()
            .collect();
        alone.sort_unstable();
        alone
    }

    /// Smallest and largest coordinates of the nodes.
    fn bounds(&self) -> ([f64; 3], [f64; 3]) {
        let mut bounds = ([f64::INFINITY; 3], [f64::NEG_INFINITY; 3]);
        for position in &self.mesh.nodes.positions {
            for (axis, &at) in position.iter().enumerate() {
                bounds.0[axis] = bounds.0[axis].min(at);
                bounds.1[axis] = bounds.1[axis].max(at);
            }
        }
        bounds
    }

    /// In one plane with the Z axis, to within the tolerance of a node.
    fn through_axis(&self, corners: &[[f64; 3]]) -> bool {
        let farthest = corners
            .iter()
            .max_by(|a, b| a[0].hypot(a[1]).total_cmp(&b[0].hypot(b[1])));
        let Some(farthest) = farthest else {
            return false;
        };
        let size = farthest[0].hypot(farthest[1]);
        let off = |c: &[f64; 3]| (c[0] * farthest[1] - c[1] * farthest[0]).abs() / size;
        size > 0.0 && corners.iter().all(|c| off(c) <= 4.0 * self.slack)
    }

    /// In one plane with the centre; two corners of a section in one line with it.
    fn through_centre(&self, corners: &[[f64; 3]]) -> bool {
        let cross = |a: [f64; 3], b: [f64; 3]| {
            [
                a[1] * b[2] - a[2] * b[1],
                a[2] * b[0] - a[0] * b[2],
                a[0] * b[1] - a[1] * b[0],
            ]
        };
        let size = |a: [f64; 3]| a.iter().map(|x| x * x).sum::<f64>().sqrt();
        let [a, b, rest @ ..] = corners else {
            return false;
        };
        let normal = match rest.first() {
            // the most inclined pair, since two corners may lie on one radius
            Some(_) => {
                let others = corners[1..].iter().map(|c| cross(*a, *c));
                others
                    .max_by(|p, q| size(*p).total_cmp(&size(*q)))
                    .unwrap_or_default()
            }
            None => {
                return size(cross(*a, *b)) <= 4.0 * self.slack * size(*a).max(size(*b))
                    || corners.iter().all(|c| c[0].abs() <= 4.0 * self.slack);
            }
        };
        let long = size(normal);
        let off = |c: &[f64; 3]| c.iter().zip(normal).map(|(x, n)| x * n).sum::<f64>().abs() / long;
        long > 0.0 && corners.iter().all(|c| off(c) <= 4.0 * self.slack)
    }

    /// The share of the whole that the mesh reaches around is the declared one, or more where it is no plain sector.
    pub(super) fn reach(&self, declared: Declared, boundary: &[Side], report: &mut BodyReport) {
        let kind = self.mesh.kind();
        let reached = match self.body {
            Body::Block { .. } => {
                let (low, high) = self.bounds();
                let area = (high[0] - low[0]) * (high[1] - low[1]);
                self.body.section_area().map(|whole| area / whole)
            }
            Body::Sphere { .. } => {
                let up = |at: &[f64; 3]| at[2] / self.radius(*at);
                let heights = self.mesh.nodes.positions.iter().map(up);
                let (low, high) = heights.fold((1.0_f64, -1.0_f64), |(low, high), h| {
                    (low.min(h), high.max(h))
                });
                let around = if kind == ModelKind::Axisymmetric {
                    1.0
                } else {
                    self.around(boundary) / (2.0 * PI)
                };
                Some(around * 0.5 * (high - low))
            }
            _ => None,
        };
        let Some(reached) = reached.filter(|r| *r < declared.share * (1.0 - SHORT)) else {
            return;
        };
        let found = format!(
            "the mesh reaches over {reached:.6} of the body, {} is declared",
            declared.share
        );
        report.findings.push(
            Finding::refused("reach-of-mesh", self.place("nodes.csv"), found)
                .hint("is `section:` right, and is no part of the body meshed twice?"),
        );
    }

    /// The angle that the mesh takes about the Z axis: the whole turn where no gap is wider than a side on a wall.
    pub(super) fn around(&self, boundary: &[Side]) -> f64 {
        let turn = 2.0 * PI;
        // nodes on the axis have no angle
        let mut angles: Vec<f64> = self
            .mesh
            .nodes
            .positions
            .iter()
            .filter(|at| at[0].hypot(at[1]) > self.slack)
            .map(|at| self.angle_of(*at))
            .collect();
        angles.sort_by(f64::total_cmp);
        let (Some(first), Some(last)) = (angles.first(), angles.last()) else {
            return 0.0;
        };
        let across = first + turn - last;
        let gap = angles
            .windows(2)
            .map(|pair| pair[1] - pair[0])
            .fold(across, f64::max);
        let mut widest: f64 = 0.0;
        for side in boundary {
            let (corners, wall) = self.corners(*side);
            if wall.is_none() {
                continue;
            }
            for (i, a) in corners.iter().enumerate() {
                for b in &corners[i + 1..] {
                    let apart = (self.angle_of(*a) - self.angle_of(*b)).abs();
                    widest = widest.max(apart.min(turn - apart));
                }
            }
        }
        if gap <= widest * (1.0 + 1e-9) {
            turn
        } else {
            turn - gap
        }
    }

    /// The angle about the axis, of an ellipse the one that grows with the area.
    fn angle_of(&self, at: [f64; 3]) -> f64 {
        match self.body {
            Body::Ellipse { a, b } => (at[1] / b).atan2(at[0] / a),
            _ => Point::new(at[0], at[1], 0.0).theta(),
        }
    }
}
