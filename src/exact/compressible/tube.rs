//! The compressible tube: what it is built from, and what it answers.

use super::fields::Fields;
use super::integrals::Axial;
use super::limit::Limit;
use super::mesh::{Shape, Wall};
use super::numbers::{Numbers, judge};
use super::path::Path;
use super::solve::{Drive, solve};
use super::{check, method, out_of_range};
use crate::exact::Ends;
use crate::exact::body::Body;
use crate::exact::description::Description;
use crate::exact::parameters::refuse;
use crate::exact::solution::{
    ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total,
};
use crate::exact::totals::TubeTotals;
use crate::exact::tube_words::{Bore, TubeWords, layers_in_words};
use crate::materials::Compressible;
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use nalgebra::Vector3;
use std::sync::Arc;

/// What pressures act on.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Load {
    /// The deformed surface, normal to it.
    #[default]
    Follower,
    /// The reference area: `Pi = p0 A/(a lz)`, `Po = q0 B/(b lz)`; closed ends carry `pi (p0 A^2 - q0 B^2)`.
    Dead,
}

/// A tube of layers, its ends and its loads, in one system of units.
#[derive(Debug, Clone)]
pub struct CompressibleTubeProblem {
    /// Reference radius of the bore. Unit: length.
    pub inner_radius: f64,
    /// Reference outer radius and law of each layer, from the bore outwards.
    pub layers: Vec<(f64, Compressible)>,
    pub ends: Ends,
    /// What is prescribed inside; a pressure is nominal when the load is dead.
    pub drive: Drive,
    /// Pressure on the outer wall, nominal when the load is dead. Unit: stress.
    pub outer_pressure: f64,
    pub load: Load,
}

/// The tube, solved.
#[derive(Debug, Clone)]
pub struct CompressibleTube {
    fields: Fields,
    numbers: Numbers,
    totals: Vec<Total>,
    body: Body,
    bound: ErrorBound,
    limit: Limit,
    method: String,
    words: TubeWords,
    /// Outer radii of the layers, from the bore outwards.
    layers: Vec<f64>,
}

fn axial_of(ends: Ends, load: Load) -> Result<Axial, Refusal> {
    match ends {
        Ends::PlaneStrain => Ok(Axial::Fixed(0.0)),
        Ends::FixedStretch { axial_stretch }
            if axial_stretch > 0.0 && axial_stretch.is_finite() =>
        {
            Ok(Axial::Fixed(axial_stretch.ln()))
        }
        Ends::FixedStretch { axial_stretch } => {
            let message = format!("axial-stretch = {axial_stretch} must be positive");
            Err(refuse("axial-stretch", message, ""))
        }
        Ends::Closed if load == Load::Dead => Ok(Axial::DeadCaps),
        Ends::Closed => Ok(Axial::Closed),
        Ends::GeneralizedPlaneStrain { axial_force } if axial_force.is_finite() => {
            Ok(Axial::Force(axial_force))
        }
        Ends::GeneralizedPlaneStrain { axial_force } => {
            let message = format!("axial-force = {axial_force} is not a finite number");
            Err(refuse("axial-force", message, ""))
        }
        Ends::PlaneStress => {
            let message = "plane-stress does not exist for a thick tube at finite strain";
            let hint = "use { generalized-plane-strain: { axial-force: 0 } }, the slice free to change its length";
            Err(refuse("ends", message.to_string(), hint))
        }
    }
}

impl CompressibleTube {
    /// Solves the tube; refuses loads beyond the limit of the first branch.
    pub fn solve(given: &CompressibleTubeProblem) -> Result<Self, Refusal> {
        check(
            given.inner_radius,
            &given.layers,
            given.drive,
            given.outer_pressure,
        )?;
        let axial = axial_of(given.ends, given.load)?;
        let wall = Arc::new(Wall::new(Shape::Tube, given.inner_radius, &given.layers));
        let outer = wall.outer;
        let path = Path {
            wall,
            axial,
            outer: given.outer_pressure,
            dead: given.load == Load::Dead,
        };
        let solved = solve(&path, given.drive)?;
        let judged = judge(&path, &solved).ok_or_else(out_of_range)?;
        let mut numbers = judged.numbers;
        match given.ends {
            Ends::FixedStretch { axial_stretch } => numbers.axial_stretch = axial_stretch,
            Ends::GeneralizedPlaneStrain { axial_force } => numbers.axial_force = axial_force,
            _ => {}
        }
        let totals = totals_of(&numbers, &solved.limit);
        let words = words(given, &numbers);
        if totals
            .iter()
            .any(|t| matches!(t.value, Ok(v) if !v.is_finite()))
        {
            return Err(out_of_range());
        }
        Ok(Self {
            fields: judged.fields,
            numbers,
            totals,
            body: Body::Tube {
                inner: given.inner_radius,
                outer,
            },
            bound: judged.bound,
            limit: solved.limit,
            words,
            layers: given.layers.iter().map(|(radius, _)| *radius).collect(),
            method: method(
                &judged.bound,
                judged.residual,
                solved.station.mesh.len(),
                &solved.limit,
            ),
        })
    }

    /// The limit of the inner pressure at the given outer pressure and ends.
    pub fn limit(&self) -> &Limit {
        &self.limit
    }

    /// The true pressure on the bore, whatever the drive. Unit: stress.
    pub fn inner_pressure(&self) -> f64 {
        self.numbers.inner_pressure
    }

    /// The true pressure on the outer wall. Unit: stress.
    pub fn outer_pressure(&self) -> f64 {
        self.numbers.outer_pressure
    }

    /// The state at a point of a layer, counted from the bore: at an interface each layer has its own. A little beyond the
    /// layer its formulas go on.
    pub fn at_in_layer(&self, point: Point, layer: usize) -> Result<State, Refusal> {
        self.state(point, Some(layer))
    }

    fn state(&self, point: Point, layer: Option<usize>) -> Result<State, Refusal> {
        if !point.z.is_finite() {
            return Err(refuse(
                "",
                format!("Z = {} is not a finite number", point.z),
                "",
            ));
        }
        let radius = point.radius();
        let local = self.fields.at_radius(radius, layer)?;
        let [radial, hoop, axial] = local.strains;
        let direction = (point.x / radius, point.y / radius);
        let gradient = SymTensor::diagonal(radial, hoop, axial).cylindrical_to_cartesian(direction);
        Ok(State {
            displacement: Vector3::new(point.x * hoop, point.y * hoop, point.z * axial),
            displacement_gradient: gradient.to_matrix(),
            stretches: local.strains.map(|s| 1.0 + s),
            stress: local.stress.cylindrical_to_cartesian(direction),
            local_stress: local.stress,
            pressure: local.pressure,
            volume_ratio: local.volume_ratio,
            energy_density: local.energy_density,
        })
    }
}

fn totals_of(numbers: &Numbers, limit: &Limit) -> Vec<Total> {
    let tube = TubeTotals {
        inner_radius: numbers.inner_radius,
        outer_radius: numbers.outer_radius,
        axial_stretch: numbers.axial_stretch,
        axial_force: numbers.axial_force,
        strain_energy: numbers.strain_energy,
        enclosed_volume: numbers.enclosed_volume,
        limit_pressure: limit.pressure(),
    };
    let mut totals = tube.list();
    totals.push(Total {
        name: "volume_change",
        value: Ok(numbers.volume_change),
        dimension: Dimension::None,
        extent: Extent::Whole,
    });
    totals
}

impl ExactSolution for CompressibleTube {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        self.state(point, None)
    }

    fn interfaces(&self) -> Vec<f64> {
        let between = self.layers.split_last();
        between.map_or_else(Vec::new, |(_, between)| between.to_vec())
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        self.body
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
        let body = layers_in_words(&self.layers, units.length.name);
        self.words.description(&body, units)
    }

    fn load_stress(&self) -> f64 {
        self.words.inner_pressure.abs() + self.words.outer_pressure.abs()
    }
}

fn words(given: &CompressibleTubeProblem, numbers: &Numbers) -> TubeWords {
    let (bore, inner_pressure) = match given.drive {
        Drive::InnerPressure(pressure) => (Bore::Pressure, pressure),
        Drive::InnerWallStretch(stretch) => (Bore::Stretch(stretch), numbers.inner_pressure),
        Drive::EnclosedVolume(volume) => (Bore::Volume(volume), numbers.inner_pressure),
    };
    TubeWords {
        inner: given.inner_radius,
        outer: given.layers.last().map_or(given.inner_radius, |l| l.0),
        ends: given.ends,
        bore,
        inner_pressure,
        outer_pressure: given.outer_pressure,
        kinematics: Kinematics::Finite,
        dead: given.load == Load::Dead,
    }
}
