//! Which stresses are measured at the walls and at mid-wall, and why there is none where there is none.

use super::level::{Level, LevelMeasures};
use super::measured::Measured;
use super::model::Mesh;
use super::points;
use super::wall::{self, AtPlace};
use super::watched::elements_across;
use crate::exact::Frame;
use crate::mechanics::Dimension;
use crate::results::ModelKind;

impl<'a> Level<'a> {
    pub(super) fn wall_stresses(&self, level: &mut LevelMeasures) {
        let Some((mesh, body)) = self.mesh().zip(self.body) else {
            return;
        };
        let shape = self.exact.body();
        let (inner, outer) = shape.walls();
        let middle = shape.span().map(|(inner, outer)| 0.5 * (inner + outer));
        let across = middle.map_or_else(Vec::new, |r| elements_across(mesh, &shape, r));
        let walls = [
            ("inner-wall", inner, &body.inner_elements, &body.inner_nodes),
            ("mid-wall", middle, &across, &Vec::new()),
            ("outer-wall", outer, &body.outer_elements, &body.outer_nodes),
        ];
        for (wall_name, radius, elements, nodes) in walls {
            for (component, symbol) in ["srr", "stt", "szz"].into_iter().enumerate() {
                let name = format!("{wall_name}-{symbol}");
                if let Some(why) = self.no_such_stress(radius, component) {
                    self.missing_stresses(&name, why, level);
                    continue;
                }
                let radius = radius.unwrap_or(0.0);
                self.point_stress(&name, mesh, elements, radius, component, level);
                if wall_name != "mid-wall" {
                    self.nodal_stress(&format!("{name}-nodal"), mesh, nodes, component, level);
                }
            }
        }
    }

    /// Why the body has no stress of that name, or `None`.
    fn no_such_stress(&self, radius: Option<f64>, component: usize) -> Option<&'static str> {
        match (radius, self.exact.body().frame()) {
            (None, _) => Some("the body has no such wall"),
            (_, Frame::Cartesian) => Some("the body has no radial and hoop direction"),
            (_, Frame::Spherical) if component == 2 => Some("a sphere has no axial direction"),
            _ => None,
        }
    }

    fn missing_stresses(&self, name: &str, why: &str, level: &mut LevelMeasures) {
        let unit = self.unit(Dimension::Stress);
        let mut names = vec![name.to_string()];
        if !name.starts_with("mid-wall") {
            names.extend(["extrapolated", "nodal"].map(|how| format!("{name}-{how}")));
        }
        let missing = names.iter().map(|name| Measured::missing(name, &unit, why));
        level.measured.extend(missing);
    }

    fn point_stress(
        &self,
        name: &str,
        mesh: Mesh,
        elements: &[usize],
        radius: f64,
        component: usize,
        level: &mut LevelMeasures,
    ) {
        let unit = self.unit(Dimension::Stress);
        let mut push = |name: &str, found: Result<Option<AtPlace>, String>| {
            level.measured.push(match found {
                Ok(Some(at)) => {
                    Measured::number(name, &unit, at.computed, at.exact, Some(at.place))
                }
                Ok(None) => {
                    Measured::missing(name, &unit, "there are no integration points at this place")
                }
                Err(why) => Measured::missing(name, &unit, &why),
            });
        };
        let kept = self.kept_points(component);
        let nearest = kept
            .clone()
            .map(|kept| wall::nearest_points(mesh, kept, elements, radius, component));
        push(name, nearest);
        if name.starts_with("mid-wall") {
            return;
        }
        let extrapolated = kept.and_then(|kept| {
            wall::extrapolated(mesh, kept, elements, radius, component, self.exact)
        });
        push(&format!("{name}-extrapolated"), extrapolated);
    }

    /// The points kept near the walls, if they carry this component.
    fn kept_points(&self, component: usize) -> Result<&'a [points::KeptPoint], String> {
        let (source, points) = self
            .set
            .points()
            .zip(self.points)
            .ok_or("there is no points.csv")?;
        let channels = source.channels();
        if !channels.stress.is_available() {
            return Err(channels.stress.reason().to_string());
        }
        let lacks = |i: &&usize| !channels.components.has(**i);
        match self.needed_for(component).iter().find(lacks) {
            None => Ok(&points.kept),
            Some(&i) => Err(format!(
                "stress component {} is not exported",
                crate::results::Components::NAMES[i]
            )),
        }
    }

    /// Cartesian components that the radial and hoop (0, 1) or the axial stress (2) are made of.
    fn needed_for(&self, component: usize) -> &'static [usize] {
        let spherical = self.exact.body().frame() == Frame::Spherical;
        match (component, self.set.kind()) {
            (_, ModelKind::Axisymmetric) if spherical => &[0, 1, 2, 5],
            (_, _) if spherical => &[0, 1, 2, 3, 4, 5],
            (2, _) => &[2],
            // on the X axis the shear has no part in them
            (_, ModelKind::Axisymmetric) => &[0, 1],
            _ => &[0, 1, 3],
        }
    }

    fn nodal_stress(
        &self,
        name: &str,
        mesh: Mesh,
        nodes: &[usize],
        component: usize,
        level: &mut LevelMeasures,
    ) {
        let needed = self.needed_for(component);
        let found = match &mesh.nodes.stress {
            None => Err(mesh.nodes.stress_channel.reason().to_string()),
            Some(_) if needed.iter().any(|&i| !mesh.nodes.stress_components.has(i)) => {
                Err("the nodal stress lacks a component".to_string())
            }
            Some(stress) => wall::nodal_stress(mesh, stress, nodes, component, self.exact),
        };
        level.measured.push(self.at_place(
            name,
            Dimension::Stress,
            found,
            "there are no nodes on this wall",
        ));
    }
}
