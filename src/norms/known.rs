//! Numbers that are known where no field is: each held against what the result set has there, the worst of them judged.

use super::level::{Level, LevelMeasures};
use super::measured::Measured;
use super::model::Mesh;
use crate::exact::KnownValue;
use crate::exact::known_value::KnownQuantity;
use crate::mechanics::Point;

/// Name of the measure.
pub const NAME: &str = "known-value";

/// How far the node that stands for a point may lie from it, in the extent of the mesh.
const NEAR: f64 = 1e-6;

impl Level<'_> {
    pub(super) fn known_values(&self, level: &mut LevelMeasures) {
        if self.known.is_empty() {
            let why = "the case has no published or tabulated value";
            level.measured.push(Measured::missing(NAME, "1", why));
            return;
        }
        let mut worst: Option<(f64, Measured)> = None;
        for known in self.known {
            let unit = self.unit(known.dimension);
            let total = |name: &str| self.set.totals().and_then(|t| t.get(name)).map(|t| t.value);
            let found = known
                .known
                .at(total)
                .and_then(|reference| Ok((reference, self.computed(known)?)));
            let ((value, half_width), (computed, place)) = match found {
                Ok(found) => found,
                Err(why) => {
                    // one that cannot be judged must not hide behind those that can
                    let why = format!("{}: {why}", known.id);
                    level.measured.push(Measured::missing(NAME, &unit, &why));
                    return;
                }
            };
            let bound = if half_width == 0.0 {
                0.0
            } else {
                half_width / value.abs()
            };
            level.known_bound = level.known_bound.max(bound);
            let place = format!("{}: {place}", known.id);
            let measured = Measured::number(NAME, &unit, computed, value, Some(place))
                .noted(Some(known.source.clone()));
            let error = measured.relative.clone().unwrap_or(f64::INFINITY);
            if worst.as_ref().is_none_or(|(largest, _)| error > *largest) {
                worst = Some((error, measured));
            }
        }
        level.measured.extend(worst.map(|(_, measured)| measured));
    }

    /// The result set's own number and where it was taken.
    fn computed(&self, known: &KnownValue) -> Result<(f64, String), String> {
        match &known.quantity {
            KnownQuantity::Total(name) => {
                let totals = self.set.totals().ok_or("there is no totals.csv")?;
                let total = totals.get(name);
                let total = total.ok_or(format!("totals.csv has no `{name}`"))?;
                Ok((total.value, name.clone()))
            }
            KnownQuantity::Displacement(i, point) => {
                let mesh = self.mesh().ok_or("there are no nodes and elements")?;
                let node = node_at(mesh, *point)?;
                let moved = mesh.nodes.displacement.as_ref();
                let moved = moved.ok_or_else(|| mesh.nodes.displacement_channel.reason())?;
                Ok((moved[node][*i], self.node_in_words(mesh, node)))
            }
            KnownQuantity::Stress(i, point) => {
                let mesh = self.mesh().ok_or("there are no nodes and elements")?;
                let node = node_at(mesh, *point)?;
                let stress = mesh.nodes.stress.as_ref();
                let stress = stress.ok_or_else(|| mesh.nodes.stress_channel.reason())?;
                if !mesh.nodes.stress_components.has(*i) {
                    return Err("the nodal stress lacks this component".to_string());
                }
                Ok((stress[node][*i], self.node_in_words(mesh, node)))
            }
        }
    }

    fn node_in_words(&self, mesh: Mesh, node: usize) -> String {
        let [x, y, z] = mesh.nodes.positions[node];
        format!("node {} ({x:.6}, {y:.6}, {z:.6})", mesh.nodes.ids[node])
    }
}

/// The node at a point, or why there is none.
fn node_at(mesh: Mesh, point: Point) -> Result<usize, String> {
    let extent = mesh
        .nodes
        .positions
        .iter()
        .flatten()
        .fold(0.0_f64, |m, x| m.max(x.abs()));
    let distance = |node: usize| mesh.node(node).distance(&point);
    let nearest = (0..mesh.nodes.len()).min_by(|&a, &b| distance(a).total_cmp(&distance(b)));
    match nearest {
        Some(node) if distance(node) <= NEAR * extent => Ok(node),
        Some(node) => Err(format!(
            "no node lies at ({}, {}, {}), the nearest is {:.3e} away",
            point.x,
            point.y,
            point.z,
            distance(node)
        )),
        None => Err("there are no nodes".to_string()),
    }
}
