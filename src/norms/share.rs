//! Is a quarter a quarter? The meshed volume against the exact body's share.

use super::body::{BodyReport, Declared, Look, Wall};
use crate::elements::{MAX_NODES, map};
use crate::exact::Body;
use crate::input::Finding;
use crate::results::ModelKind;
use crate::results::sanity::Side;

impl Look<'_> {
    /// The meshed volume against the exact body's share, allowing for what the sides cut off.
    pub(super) fn share(
        &self,
        declared: Declared,
        mesh_volume: f64,
        boundary: &[Side],
        report: &mut BodyReport,
    ) {
        let Some(area) = self.body.section_area() else {
            // the mesh itself says what is modelled
            report.exact_volume = mesh_volume;
            return;
        };
        let whole = area * report.axial_length;
        report.exact_volume = declared.share * whole;
        let ring = self.mesh.kind() == ModelKind::Axisymmetric && self.body.is_prism();
        if ring && declared.share != 1.0 {
            let found = format!(
                "`section:` declares {} of the section of an axisymmetric model",
                declared.share
            );
            report.findings.push(
                Finding::refused("share-of-body", self.place("nodes.csv"), found)
                    .expected("no `section:`, since such a model stands for the whole ring"),
            );
            return;
        }
        let allowed = 1.2 * self.cut_off(boundary, declared.share * report.axial_length)
            + 2e-6 * report.exact_volume;
        let excess = (mesh_volume - report.exact_volume).abs();
        if excess <= allowed {
            self.angle(declared, boundary, report);
            self.reach(declared, boundary, report);
            return;
        }
        report.findings.push(
            Finding::refused(
                "share-of-body",
                self.place("elements.csv"),
                format!(
                    "the mesh covers {:.6} of the body, {} is declared; the sides explain a difference of {:.1e} at most",
                    mesh_volume / whole,
                    declared.share,
                    allowed / whole
                ),
            )
            .expected(format!("a meshed volume of {:.6e}, found {mesh_volume:.6e}", report.exact_volume))
            .hint("is `section:` right, and is the mesh whole, without overlaps and gaps?"),
        );
    }

    /// A sector spans its share of the turn: the same sector meshed twice would have the volume, not the angle.
    fn angle(&self, declared: Declared, boundary: &[Side], report: &mut BodyReport) {
        let full = self.body.turn();
        let Some(full) = full.filter(|_| self.mesh.kind() != ModelKind::Axisymmetric) else {
            return;
        };
        let wanted = declared.share * full;
        let found = self.around(boundary);
        let (inner, outer) = match self.body.walls() {
            (inner, Some(outer)) => (inner.unwrap_or(0.0), outer),
            _ => (0.0, 1.0),
        };
        let nearest = inner.max(0.1 * outer);
        if (found - wanted).abs() <= 1e-3 * wanted + 4.0 * self.slack / nearest {
            return;
        }
        let text = format!(
            "the mesh spans {:.3} deg about the axis",
            found.to_degrees()
        );
        report.findings.push(
            Finding::refused("sector-angle", self.place("nodes.csv"), text)
                .expected(format!(
                    "{:.3} deg, the declared share of the turn",
                    wanted.to_degrees()
                ))
                .hint("is `section:` right, and is no part of the section meshed twice?"),
        );
    }

    /// Volume between the wall circles and the sides that stand for them, from the largest gap found on any side.
    fn cut_off(&self, boundary: &[Side], share_and_length: f64) -> f64 {
        let (inner, outer) = self.body.walls();
        let (inner, outer) = (inner.unwrap_or(0.0), outer.unwrap_or(0.0));
        let (mut inner_gap, mut outer_gap) = (self.slack, self.slack);
        for side in boundary {
            let (_, Some(wall)) = self.corners(*side) else {
                continue;
            };
            let shape = self.mesh.elements.shapes[side.element as usize];
            let corners: Vec<usize> = shape.sides()[side.side as usize]
                .iter()
                .copied()
                .filter(|&l| l < shape.corner_count())
                .collect();
            let gap = self.side_gap(
                side.element as usize,
                &corners,
                if wall == Wall::Inner { inner } else { outer },
            );
            match wall {
                Wall::Inner => inner_gap = inner_gap.max(gap),
                Wall::Outer => outer_gap = outer_gap.max(gap),
            }
        }
        let gaps = |i: f64, o: f64| i * inner_gap + o * outer_gap;
        let turn = 2.0 * std::f64::consts::PI;
        match self.body {
            Body::Sphere { .. } => {
                2.0 * turn * gaps(inner * inner, outer * outer) * share_and_length
            }
            _ => turn * gaps(inner, outer.max(self.body.extent())) * share_and_length,
        }
    }

    /// The largest distance from the wall on the lines between the corners of a side.
    fn side_gap(&self, element: usize, corners: &[usize], wall: f64) -> f64 {
        let shape = self.mesh.elements.shapes[element];
        let mut coords = [[0.0; 3]; MAX_NODES];
        let count = self
            .mesh
            .elements
            .coordinates(element, self.mesh.nodes, &mut coords);
        let reference = shape.reference_nodes();
        let mut values = [0.0; MAX_NODES];
        let mut gap: f64 = 0.0;
        for (i, &a) in corners.iter().enumerate() {
            for &b in &corners[i + 1..] {
                for t in [0.25, 0.5, 0.75] {
                    let xi =
                        std::array::from_fn(|j| (1.0 - t) * reference[a][j] + t * reference[b][j]);
                    shape.values(xi, &mut values[..count]);
                    let at = map::position(&values[..count], &coords[..count]);
                    gap = gap.max((self.radius(self.mesh.kind().in_space(at)) - wall).abs());
                }
            }
        }
        gap
    }
}
