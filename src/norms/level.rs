//! Everything that is measured on one mesh: the result set against the exact solution.

use super::accumulate::{NoNorm, SquaredError};
use super::body::BodyReport;
use super::displacement::{DisplacementNorms, displacement_norms, largest_nodal};
use super::measured::Measured;
use super::model::Mesh;
use super::points::{self, PointNorms};
use super::profile::{self, StressProfile};
use super::wall::{self, AtPlace};
use crate::exact::{ExactSolution, KnownValue};
use crate::mechanics::{Dimension, UnitSystem};
use crate::results::{Channel, ModelKind, ResultSet};

/// All of one mesh.
#[derive(Debug, Clone, Default)]
pub struct LevelMeasures {
    pub measured: Vec<Measured>,
    pub quadrature_points: u64,
    pub outside: u64,
    pub outside_distance: f64,
    pub profile: Option<StressProfile>,
    /// Largest half width of the known values against their size.
    pub known_bound: f64,
}

/// What the measures are taken from.
#[derive(Debug)]
pub struct Level<'a> {
    pub set: &'a ResultSet,
    pub exact: &'a dyn ExactSolution,
    /// Published or tabulated values of the case.
    pub known: &'a [KnownValue],
    /// `None` without nodes and elements.
    pub body: Option<&'a BodyReport>,
    /// Norms over the integration points, `None` without points.csv.
    pub points: Option<&'a PointNorms>,
    pub share: f64,
    pub units: &'a UnitSystem,
}

impl<'a> Level<'a> {
    pub(super) fn mesh(&self) -> Option<Mesh<'a>> {
        Some(Mesh {
            nodes: self.set.nodes()?,
            elements: self.set.elements()?,
        })
    }

    pub(super) fn unit(&self, dimension: Dimension) -> String {
        self.units.name_of(dimension)
    }

    /// Unit of the root of an integral over the mesh.
    fn norm_unit(&self, dimension: Dimension) -> String {
        let root = match self.set.kind() {
            ModelKind::Planar => self.units.length.name.to_string(),
            ModelKind::Solid | ModelKind::Axisymmetric => format!("{}^1.5", self.units.length.name),
        };
        match self.unit(dimension) {
            field if field == "1" => root,
            field => format!("{field} {root}"),
        }
    }

    /// Measures everything there is; what is not there has its reason.
    pub fn measure(&self) -> LevelMeasures {
        let mut level = LevelMeasures::default();
        self.displacements(&mut level);
        self.fields(&mut level);
        self.wall_stresses(&mut level);
        self.totals(&mut level);
        self.known_values(&mut level);
        if let (Some(mesh), Some(points)) = (self.mesh(), self.points) {
            let column = profile::column(mesh, &self.exact.body());
            level.profile = profile::profile(mesh, &points.kept, &column, self.exact);
        }
        level
    }

    fn displacements(&self, level: &mut LevelMeasures) {
        let length = self.unit(Dimension::Length);
        let names = [
            "displacement-L2",
            "displacement-H1",
            "displacement-largest",
            "inner-wall-displacement",
            "mid-wall-displacement",
            "outer-wall-displacement",
        ];
        let (mesh, moved) = match self.nodal_displacements() {
            Ok(found) => found,
            Err(why) => {
                level.measured.extend(
                    names
                        .iter()
                        .map(|name| Measured::missing(name, &length, &why)),
                );
                return;
            }
        };
        let norms = displacement_norms(mesh, moved, self.exact);
        level.quadrature_points = norms.points;
        level.outside = norms.outside;
        level.outside_distance = norms.outside_distance;
        self.displacement_norms(&norms, level);
        level
            .measured
            .push(match largest_nodal(mesh, moved, self.exact) {
                Err(why) => Measured::missing(names[2], &length, &why),
                Ok(found) => {
                    let body = self.exact.body();
                    let place = found
                        .node
                        .map(|node| wall::node_in_words(mesh, node, &body));
                    let relative = if found.exact == 0.0 {
                        Err(NoNorm::ExactIsZero.to_string())
                    } else {
                        Ok(found.error / found.exact)
                    };
                    Measured {
                        relative,
                        absolute: Ok(found.error),
                        exact: Some(found.exact),
                        place,
                        ..Measured::missing(names[2], &length, "")
                    }
                }
            });
        let shape = self.exact.body();
        let middle = match shape.span() {
            Some((inner, outer)) => {
                wall::nodes_nearest(mesh, &shape, 0.5 * (inner + outer), outer - inner)
            }
            None => Vec::new(),
        };
        let (inner_nodes, outer_nodes) = match self.body {
            Some(body) => (body.inner_nodes.clone(), body.outer_nodes.clone()),
            None => (Vec::new(), Vec::new()),
        };
        for (name, nodes) in [
            (names[3], inner_nodes),
            (names[4], middle),
            (names[5], outer_nodes),
        ] {
            let found = wall::radial_displacement(mesh, moved, &nodes, self.exact);
            level.measured.push(self.at_place(
                name,
                Dimension::Length,
                found,
                "there are no nodes at this place",
            ));
        }
    }

    fn nodal_displacements(&self) -> Result<(Mesh<'a>, &'a [[f64; 3]]), String> {
        let nodes = self.set.nodes().ok_or("there is no nodes.csv")?;
        let elements = self.set.elements().ok_or("there is no elements.csv")?;
        match &nodes.displacement {
            Some(moved) => Ok((Mesh { nodes, elements }, moved)),
            None => Err(nodes.displacement_channel.reason().to_string()),
        }
    }

    fn displacement_norms(&self, norms: &DisplacementNorms, level: &mut LevelMeasures) {
        let planar = self.set.kind() == ModelKind::Planar;
        let note = planar.then(|| "in-plane components".to_string());
        let found = |norm| match &norms.no_value {
            Some(why) => Err(why.clone()),
            None => Ok(norm),
        };
        self.norm(
            "displacement-L2",
            Dimension::Length,
            found(&norms.l2),
            note.clone(),
            level,
        );
        self.norm(
            "displacement-H1",
            Dimension::None,
            found(&norms.h1),
            note,
            level,
        );
    }

    /// An integral over the mesh, and beside an L2 norm with a unit its root mean square.
    fn norm(
        &self,
        name: &str,
        dimension: Dimension,
        norm: Result<&SquaredError, String>,
        note: Option<String>,
        level: &mut LevelMeasures,
    ) {
        let unit = self.norm_unit(dimension);
        level.measured.push(match &norm {
            Ok(norm) => Measured::norm(name, &unit, norm).noted(note.clone()),
            Err(why) => Measured::missing(name, &unit, why),
        });
        let rms = name.strip_suffix("-L2").map(|field| format!("{field}-rms"));
        let Some(rms) = rms.filter(|_| dimension != Dimension::None) else {
            return;
        };
        let unit = self.unit(dimension);
        level.measured.push(match &norm {
            Ok(norm) => Measured::root_mean_square(&rms, &unit, norm).noted(note),
            Err(why) => Measured::missing(&rms, &unit, why),
        });
    }

    fn fields(&self, level: &mut LevelMeasures) {
        let Some((source, points)) = self.set.points().zip(self.points) else {
            for (name, dimension) in FIELDS {
                self.norm(
                    name,
                    dimension,
                    Err("there is no points.csv".to_string()),
                    None,
                    level,
                );
            }
            return;
        };
        let channels = source.channels();
        let components = points::missing_components(self.set.kind(), channels.components);
        let compared = format!("components {}", channels.components.names().join(" "));
        let stress_channel = match components {
            Some(why) if channels.stress.is_available() => Channel::Missing(why),
            _ => channels.stress.clone(),
        };
        let (volume, against) = points.volume();
        let all = [
            (&stress_channel, &points.stress, Some(compared)),
            (&channels.p, &points.pressure, None),
            (&channels.j, volume, Some(against.to_string())),
            (&channels.w, &points.energy_density, None),
        ];
        for ((name, dimension), (channel, norm, note)) in FIELDS.into_iter().zip(all) {
            let how = match channel {
                Channel::Computed(how) => Some(how.clone()),
                Channel::Given | Channel::Missing(_) => None,
            };
            let found = if !channel.is_available() {
                Err(channel.reason().to_string())
            } else if !channels.weight.is_available() {
                Err(channels.weight.reason().to_string())
            } else {
                points.no_value.clone().map_or(Ok(norm), Err)
            };
            self.norm(name, dimension, found, note.or(how), level);
        }
    }

    pub(super) fn at_place(
        &self,
        name: &str,
        dimension: Dimension,
        found: Result<Option<AtPlace>, String>,
        nothing: &str,
    ) -> Measured {
        let unit = self.unit(dimension);
        match found {
            Ok(Some(at)) => Measured::number(name, &unit, at.computed, at.exact, Some(at.place)),
            Ok(None) => Measured::missing(name, &unit, nothing),
            Err(why) => Measured::missing(name, &unit, &why),
        }
    }
}

/// The norms over integration points.
const FIELDS: [(&str, Dimension); 4] = [
    ("stress-L2", Dimension::Stress),
    ("pressure-L2", Dimension::Stress),
    ("volume-ratio-L2", Dimension::None),
    ("energy-density-L2", Dimension::EnergyDensity),
];
