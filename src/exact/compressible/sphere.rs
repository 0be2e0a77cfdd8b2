//! The compressible sphere: what it is built from, and what it answers.

use super::fields::Fields;
use super::integrals::Axial;
use super::limit::Limit;
use super::mesh::{Shape, Wall};
use super::numbers::{Numbers, judge};
use super::path::Path;
use super::solve::{Drive, solve};
use super::{check, method, out_of_range};
use crate::exact::body::Body;
use crate::exact::description::Description;
use crate::exact::parameters::refuse;
use crate::exact::solution::{
    ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total,
};
use crate::exact::tube_words::pressures;
use crate::materials::Compressible;
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use nalgebra::{Matrix3, Vector3};
use std::sync::Arc;

/// A sphere of layers and its loads, in one system of units.
#[derive(Debug, Clone)]
pub struct CompressibleSphereProblem {
    /// Reference radius of the bore. Unit: length.
    pub inner_radius: f64,
    /// Reference outer radius and law of each layer, from the bore outwards.
    pub layers: Vec<(f64, Compressible)>,
    pub drive: Drive,
    /// Pressure on the outer wall, follows the surface. Unit: stress.
    pub outer_pressure: f64,
}

/// The sphere, solved.
#[derive(Debug, Clone)]
pub struct CompressibleSphere {
    fields: Fields,
    numbers: Numbers,
    totals: Vec<Total>,
    radii: (f64, f64),
    bound: ErrorBound,
    limit: Limit,
    method: String,
}

impl CompressibleSphere {
    /// Solves the sphere; refuses loads beyond the limit of the first branch.
    pub fn solve(given: &CompressibleSphereProblem) -> Result<Self, Refusal> {
        check(
            given.inner_radius,
            &given.layers,
            given.drive,
            given.outer_pressure,
        )?;
        if let Some((_, law)) = given.layers.iter().find(|(_, law)| !law.isotropic()) {
            let message = format!(
                "a sphere cannot be made of {}: its fibres would have to cover the sphere alike",
                law.name()
            );
            return Err(refuse("material", message, "use an isotropic law"));
        }
        let wall = Arc::new(Wall::new(Shape::Sphere, given.inner_radius, &given.layers));
        let radii = (wall.inner, wall.outer);
        let path = Path {
            wall,
            axial: Axial::Fixed(0.0),
            outer: given.outer_pressure,
            dead: false,
        };
        let solved = solve(&path, given.drive)?;
        let judged = judge(&path, &solved).ok_or_else(out_of_range)?;
        let totals = totals_of(&judged.numbers, &solved.limit);
        if totals
            .iter()
            .any(|t| matches!(t.value, Ok(v) if !v.is_finite()))
        {
            return Err(out_of_range());
        }
        Ok(Self {
            fields: judged.fields,
            numbers: judged.numbers,
            totals,
            radii,
            bound: judged.bound,
            limit: solved.limit,
            method: method(
                &judged.bound,
                judged.residual,
                solved.station.mesh.len(),
                &solved.limit,
            ),
        })
    }

    /// The limit of the inner pressure at the given outer pressure.
    pub fn limit(&self) -> &Limit {
        &self.limit
    }

    /// The pressure on the bore, whatever the drive. Unit: stress.
    pub fn inner_pressure(&self) -> f64 {
        self.numbers.inner_pressure
    }

    /// Reference radii of the bore and of the outer wall.
    pub fn radii(&self) -> (f64, f64) {
        self.radii
    }

    /// The state at a point of a layer, counted from the bore: at an interface each layer has its own.
    pub fn at_in_layer(&self, point: Point, layer: usize) -> Result<State, Refusal> {
        self.state(point, Some(layer))
    }

    fn state(&self, point: Point, layer: Option<usize>) -> Result<State, Refusal> {
        let place = Vector3::new(point.x, point.y, point.z);
        let radius = point.radius().hypot(point.z);
        let local = self.fields.at_radius(radius, layer)?;
        let [radial, hoop, _] = local.strains;
        let outward = place / radius;
        let (srr, stt) = (local.stress.xx, local.stress.yy);
        Ok(State {
            displacement: place * hoop,
            displacement_gradient: along(&outward, radial, hoop),
            stretches: local.strains.map(|s| 1.0 + s),
            stress: SymTensor::symmetric_part(&along(&outward, srr, stt)),
            local_stress: local.stress,
            pressure: local.pressure,
            volume_ratio: local.volume_ratio,
            energy_density: local.energy_density,
        })
    }
}

impl ExactSolution for CompressibleSphere {
    /// Local axes are radial, hoop, hoop.
    fn at(&self, point: Point) -> Result<State, Refusal> {
        self.state(point, None)
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        Body::Sphere {
            inner: self.radii.0,
            outer: self.radii.1,
        }
    }

    fn bound(&self) -> ErrorBound {
        self.bound
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::Finite
    }

    fn method(&self) -> String {
        self.method.clone()
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let length = units.length.name;
        let walls = [
            ("inner wall", self.numbers.inner_pressure),
            ("outer wall", self.numbers.outer_pressure),
        ];
        let load = match pressures(walls, units) {
            none if none.is_empty() => "no pressure".to_string(),
            loaded => format!("{loaded}, follows the deformed wall"),
        };
        Description {
            body: format!(
                "sphere, inner radius {} {length}, outer radius {} {length}",
                self.radii.0, self.radii.1
            ),
            load,
            ends: None,
            modelling: vec![
                "the load is normal to the deformed surface, per deformed area (a follower load)"
                    .to_string(),
            ],
            totals: vec!["strain_energy", "load_factor"],
            sketch: None,
        }
    }

    fn load_stress(&self) -> f64 {
        self.numbers.inner_pressure.abs() + self.numbers.outer_pressure.abs()
    }
}

/// The tensor with one principal value along a unit vector and another across it.
fn along(outward: &Vector3<f64>, radial: f64, hoop: f64) -> Matrix3<f64> {
    Matrix3::identity() * hoop + outward * outward.transpose() * (radial - hoop)
}

fn totals_of(numbers: &Numbers, limit: &Limit) -> Vec<Total> {
    let total = |name, value, dimension, extent| Total {
        name,
        value,
        dimension,
        extent,
    };
    vec![
        total(
            "inner_radius",
            Ok(numbers.inner_radius),
            Dimension::Length,
            Extent::Whole,
        ),
        total(
            "outer_radius",
            Ok(numbers.outer_radius),
            Dimension::Length,
            Extent::Whole,
        ),
        total(
            "strain_energy",
            Ok(numbers.strain_energy),
            Dimension::Energy,
            Extent::SectionAndLength,
        ),
        total(
            "enclosed_volume",
            Ok(numbers.enclosed_volume),
            Dimension::Volume,
            Extent::SectionAndLength,
        ),
        total(
            "limit_pressure",
            limit.pressure(),
            Dimension::Stress,
            Extent::Whole,
        ),
        total(
            "volume_change",
            Ok(numbers.volume_change),
            Dimension::None,
            Extent::Whole,
        ),
    ]
}
