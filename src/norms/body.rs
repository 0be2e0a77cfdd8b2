//! Does the mesh fill the body it is said to fill? Nodes on the body, walls reached, sides curved or straight,
//! and a quarter that is a quarter.

use super::model::{self, Mesh};
use crate::exact::Body;
use crate::input::{Finding, Place, Weight};
use crate::results::ModelKind;
use crate::results::sanity::Side;

/// Which wall a point, node or side is on.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Wall {
    Inner,
    Outer,
}

/// How the mid-side nodes on the walls lie.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum WallSides {
    /// No mid-side nodes, or none that could tell.
    #[default]
    Linear,
    /// On the wall.
    Curved,
    /// At the middle of the chord: one order of the displacement is lost.
    Straight,
    /// Some on the wall, some on the chord or elsewhere.
    Mixed,
}

impl WallSides {
    /// For reports.
    pub fn word(self) -> &'static str {
        match self {
            Self::Linear => "none",
            Self::Curved => "curved",
            Self::Straight => "straight",
            Self::Mixed => "mixed",
        }
    }
}

/// What the mesh is, compared with the body.
#[derive(Debug, Clone, Default)]
pub struct BodyReport {
    pub findings: Vec<Finding>,
    /// Node indices on each wall, ascending.
    pub inner_nodes: Vec<usize>,
    pub outer_nodes: Vec<usize>,
    /// Element indices with a side on each wall, ascending.
    pub inner_elements: Vec<usize>,
    pub outer_elements: Vec<usize>,
    pub sides: WallSides,
    /// Axial extent of the mesh (1 for a slice).
    pub axial_length: f64,
    /// Volume of the exact body's share.
    pub exact_volume: f64,
}

/// What is declared of the mesh.
#[derive(Debug, Clone, Copy)]
pub struct Declared<'a> {
    /// Share of the section.
    pub share: f64,
    pub axial_length: Option<f64>,
    /// How far a node may lie off the body, where it is not [`tolerance`].
    pub node_tolerance: Option<f64>,
    /// Radii where parts may be meshed apart.
    pub interfaces: &'a [f64],
}

/// How far a node may be from where it belongs: a millionth of the wall, and what single precision leaves.
pub fn tolerance(body: &Body) -> f64 {
    1e-6 * body.thickness() + 2e-7 * body.extent()
}

/// Findings of one kind that are listed; the rest are counted.
const LISTED: usize = 5;

/// Compares mesh and body. `mesh_volume` and `boundary` come from the reader's checks; `folder` names the result set.
pub fn compare(
    mesh: Mesh,
    body: &Body,
    declared: Declared,
    mesh_volume: f64,
    boundary: &[Side],
    folder: &str,
) -> BodyReport {
    let mut report = BodyReport::default();
    let look = Look {
        mesh,
        body,
        slack: declared.node_tolerance.unwrap_or_else(|| tolerance(body)),
        folder,
    };
    look.kind_of_model(&mut report);
    look.nodes_on_body(&mut report);
    look.walls(boundary, &mut report);
    look.axial_extent(declared, &mut report);
    look.outline(declared, boundary, &mut report);
    look.share(declared, mesh_volume, boundary, &mut report);
    report
}

pub(super) struct Look<'a> {
    pub(super) mesh: Mesh<'a>,
    pub(super) body: &'a Body,
    pub(super) slack: f64,
    pub(super) folder: &'a str,
}

impl Look<'_> {
    /// The coordinate of a position in space that runs from wall to wall.
    pub(super) fn radius(&self, position: [f64; 3]) -> f64 {
        self.body.radius(&model::point(position))
    }

    pub(super) fn wall_of(&self, radius: f64) -> Option<Wall> {
        let (inner, outer) = self.body.walls();
        let near = |wall: Option<f64>| wall.is_some_and(|w| (radius - w).abs() <= self.slack);
        if near(inner) {
            Some(Wall::Inner)
        } else if near(outer) {
            Some(Wall::Outer)
        } else {
            None
        }
    }

    /// Where the body is, for messages.
    fn range(&self) -> String {
        match self.body {
            Body::Block { lower, upper } => format!(
                "X from {} to {}, Y from {} to {}",
                lower[0], upper[0], lower[1], upper[1]
            ),
            Body::Ellipse { a, b } => format!("(X/{a})^2 + (Y/{b})^2 at most 1"),
            Body::Free { hole } => format!("R at least {hole}"),
            _ => {
                let (inner, outer) = self.body.span().unwrap_or_default();
                format!("R from {inner} to {outer}")
            }
        }
    }

    pub(super) fn place(&self, file: &str) -> Place {
        Place::file(format!("{}/{file}", self.folder))
    }

    /// A plane section cannot stand for a sphere, nor half a section for what is no tube.
    fn kind_of_model(&self, report: &mut BodyReport) {
        let kind = self.mesh.kind();
        let expected = match (self.body, kind) {
            (Body::Sphere { .. }, ModelKind::Planar) => "an axisymmetric model or a solid",
            (Body::Tube { .. } | Body::Sphere { .. }, _) => return,
            (_, ModelKind::Axisymmetric) => "a plane model or a solid",
            _ => return,
        };
        let found = format!("the result set is {} model", kind.words());
        let place = self.place("nodes.csv");
        report
            .findings
            .push(Finding::refused("model-of-body", place, found).expected(expected));
    }

    /// Corner nodes lie on the body; mid-side nodes may lie off it only as far as the chord of their corners does.
    fn nodes_on_body(&self, report: &mut BodyReport) {
        let mut allowed = vec![self.slack; self.mesh.nodes.positions.len()];
        for element in 0..self.mesh.elements.len() {
            let nodes = self.mesh.elements.nodes(element);
            for (mid, corners) in self.mesh.elements.shapes[element].mid_nodes() {
                let chord = mean(
                    corners
                        .iter()
                        .map(|&c| self.mesh.nodes.positions[nodes[c] as usize]),
                );
                let off = self.body.outside(&model::point(chord));
                let entry = &mut allowed[nodes[*mid] as usize];
                *entry = entry.max(off + self.slack);
            }
        }
        let mut stray = 0;
        for (node, allowed) in allowed.into_iter().enumerate() {
            let off = self.body.outside(&self.mesh.node(node));
            if off <= allowed {
                continue;
            }
            stray += 1;
            if stray <= LISTED {
                let [x, y, z] = self.mesh.nodes.positions[node];
                let at = match self.body.span() {
                    Some(_) => format!("R = {:.6}", self.radius([x, y, z])),
                    None => format!("X = {x:.6}, Y = {y:.6}"),
                };
                let id = self.mesh.nodes.ids[node];
                let found = format!("node {id} lies {off:.3e} off the body ({at})");
                report.findings.push(
                    Finding::refused("node-on-body", self.mesh.nodes.place(node), found)
                        .expected(format!("{}, to within {:.1e}", self.range(), self.slack))
                        .hint("are these reference coordinates, in the declared unit, about the Z axis, of this case? a file of few digits needs `node-tolerance:`"),
                );
            }
        }
        if stray > LISTED {
            let found = format!("{} more nodes lie off the body", stray - LISTED);
            report.findings.push(Finding::refused(
                "node-on-body",
                self.place("nodes.csv"),
                found,
            ));
        }
    }

    fn walls(&self, boundary: &[Side], report: &mut BodyReport) {
        let (mut curved, mut straight, mut astray) = (0_usize, 0_usize, 0_usize);
        for side in boundary {
            let shape = self.mesh.elements.shapes[side.element as usize];
            let nodes = self.mesh.elements.nodes(side.element as usize);
            let local = shape.sides()[side.side as usize];
            let corners = local.iter().filter(|&&l| l < shape.corner_count());
            let walls: Vec<_> = corners
                .map(|&l| self.wall_of(self.radius(self.mesh.nodes.positions[nodes[l] as usize])))
                .collect();
            let Some(Some(wall)) = walls.first().copied() else {
                continue;
            };
            if walls.iter().any(|w| *w != Some(wall)) {
                continue;
            }
            let (wall_nodes, wall_elements) = match wall {
                Wall::Inner => (&mut report.inner_nodes, &mut report.inner_elements),
                Wall::Outer => (&mut report.outer_nodes, &mut report.outer_elements),
            };
            wall_elements.push(side.element as usize);
            wall_nodes.extend(local.iter().map(|&l| nodes[l] as usize));
            for (mid, corners) in shape
                .mid_nodes()
                .iter()
                .filter(|(mid, _)| local.contains(mid))
            {
                let chord = mean(
                    corners
                        .iter()
                        .map(|&c| self.mesh.nodes.positions[nodes[c] as usize]),
                );
                if self.wall_of(self.radius(chord)) == Some(wall) {
                    continue;
                }
                let position = self.mesh.nodes.positions[nodes[*mid] as usize];
                let gap = (0..3)
                    .map(|i| (position[i] - chord[i]).abs())
                    .fold(0.0, f64::max);
                match self.wall_of(self.radius(position)) {
                    Some(w) if w == wall => curved += 1,
                    _ if gap <= 2.0 * self.slack => straight += 1,
                    _ => astray += 1,
                }
            }
        }
        for list in [
            &mut report.inner_nodes,
            &mut report.outer_nodes,
            &mut report.inner_elements,
            &mut report.outer_elements,
        ] {
            list.sort_unstable();
            list.dedup();
        }
        report.sides = match (curved, straight, astray) {
            (0, 0, 0) => WallSides::Linear,
            (_, 0, 0) => WallSides::Curved,
            (0, _, 0) => WallSides::Straight,
            _ => WallSides::Mixed,
        };
        self.wall_findings(report, curved, straight, astray);
    }

    fn wall_findings(
        &self,
        report: &mut BodyReport,
        curved: usize,
        straight: usize,
        astray: usize,
    ) {
        let (inner, outer) = self.body.walls();
        let walls = [
            ("inner", inner, report.inner_elements.len()),
            ("outer", outer, report.outer_elements.len()),
        ];
        for (name, radius, sides) in walls {
            let Some(radius) = radius.filter(|_| sides == 0) else {
                continue;
            };
            let (low, high) = self.extent_of_radius();
            report.findings.push(
                Finding::refused(
                    "wall-reached",
                    self.place("nodes.csv"),
                    format!("no element side lies on the {name} wall; nodes reach from R = {low:.6} to {high:.6}"),
                )
                .expected(format!("sides at R = {radius}"))
                .hint("radius or diameter? unit? reference or current coordinates?"),
            );
        }
        let place = self.place("elements.csv");
        match report.sides {
            WallSides::Straight => report.findings.push(
                Finding::new(
                    Weight::Caution,
                    "straight-wall-sides",
                    place,
                    "the mid-side nodes on the walls lie on straight chords, not on the walls",
                )
                .expected("mid-side nodes on the wall")
                .hint("straight sides cost one order of the displacement in L2; move the mid-side nodes onto the wall"),
            ),
            WallSides::Mixed => report.findings.push(
                Finding::new(
                    Weight::Caution,
                    "mixed-wall-sides",
                    place,
                    format!("mid-side nodes on the walls: {curved} on the wall, {straight} on the chord, {astray} elsewhere"),
                )
                .expected("all on the wall"),
            ),
            WallSides::Linear | WallSides::Curved => {}
        }
    }

    fn extent_of_radius(&self) -> (f64, f64) {
        let radii = self.mesh.nodes.positions.iter().map(|c| self.radius(*c));
        radii.fold((f64::INFINITY, 0.0_f64), |(low, high), r| {
            (low.min(r), high.max(r))
        })
    }

    fn axial_extent(&self, declared: Declared, report: &mut BodyReport) {
        if self.mesh.kind() == ModelKind::Planar || !self.body.is_prism() {
            report.axial_length = 1.0;
            return;
        }
        let axial = self.mesh.nodes.positions.iter().map(|c| c[2]);
        let (low, high) = axial.fold((f64::INFINITY, f64::NEG_INFINITY), |(l, h), z| {
            (l.min(z), h.max(z))
        });
        report.axial_length = high - low;
        let Some(length) = declared.axial_length else {
            return;
        };
        if (length - report.axial_length).abs() > self.slack.max(1e-6 * length) {
            report.findings.push(
                Finding::refused(
                    "axial-length",
                    self.place("nodes.csv"),
                    format!("the mesh is {} long", report.axial_length),
                )
                .expected(format!("{length}, as `axial-length:` declares")),
            );
        }
    }
}

pub(super) fn mean(points: impl Iterator<Item = [f64; 3]>) -> [f64; 3] {
    let (mut sum, mut count) = ([0.0; 3], 0.0);
    for p in points {
        for (s, c) in sum.iter_mut().zip(p) {
            *s += c;
        }
        count += 1.0;
    }
    sum.map(|s| s / count)
}
