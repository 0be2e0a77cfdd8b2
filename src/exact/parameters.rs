//! What a tube is built from, and the checks every tube shares.

use super::Ends;
pub(super) use super::given::refuse;
use super::given::{Given, Value};
use super::solution::Refusal;
use crate::materials::Material;

/// A tube, its material and its loads, in one system of units.
#[derive(Debug, Clone, PartialEq)]
pub struct Parameters {
    /// Reference radius of the bore. Unit: length.
    pub inner_radius: f64,
    /// Reference outer radius. Unit: length.
    pub outer_radius: f64,
    pub ends: Ends,
    pub material: Material,
    /// Pressure on the bore, any sign: srr(a) = -inner_pressure. Unit: stress.
    pub inner_pressure: f64,
    /// Pressure on the outer wall, any sign: srr(b) = -outer_pressure. Unit: stress.
    pub outer_pressure: f64,
}

/// Beyond this ratio of the radii the wall is no tube any more, and its integrals no numbers.
const MOST_RATIO: f64 = 1e6;

impl Parameters {
    /// From what a suite gives.
    pub(super) fn of(given: &Given) -> Result<Self, Refusal> {
        Ok(Self {
            inner_radius: given.finite("inner-radius")?,
            outer_radius: given.finite("outer-radius")?,
            ends: given.ends()?,
            material: given.material()?.clone(),
            inner_pressure: given.finite_or("inner-pressure", 0.0)?,
            outer_pressure: given.finite_or("outer-pressure", 0.0)?,
        })
    }

    /// Refuses what is no tube: radii out of order, values that are not finite.
    pub(super) fn check(&self) -> Result<(), Refusal> {
        let (force, stretch) = match self.ends {
            Ends::GeneralizedPlaneStrain { axial_force } => (axial_force, 1.0),
            Ends::FixedStretch { axial_stretch } => (0.0, axial_stretch),
            _ => (0.0, 1.0),
        };
        for (name, value) in [
            ("inner-radius", self.inner_radius),
            ("outer-radius", self.outer_radius),
            ("inner-pressure", self.inner_pressure),
            ("outer-pressure", self.outer_pressure),
            ("axial-force", force),
            ("axial-stretch", stretch),
        ] {
            if !value.is_finite() {
                return Err(refuse(
                    name,
                    format!("{name} = {value} is not a finite number"),
                    "",
                ));
            }
        }
        for (name, value) in [
            ("inner-radius", self.inner_radius),
            ("axial-stretch", stretch),
        ] {
            if value <= 0.0 {
                return Err(refuse(
                    name,
                    format!("{name} = {value} must be positive"),
                    "",
                ));
            }
        }
        let ratio = self.outer_radius / self.inner_radius;
        if !ratio.is_finite() || ratio > MOST_RATIO {
            let message = format!("outer-radius is {ratio:.3e} times inner-radius");
            return Err(refuse(
                "outer-radius",
                message,
                format!("at most {MOST_RATIO:e} times; checked up to 100 times"),
            ));
        }
        if self.outer_radius <= self.inner_radius {
            let (inner, outer) = (self.inner_radius, self.outer_radius);
            let message =
                format!("outer-radius = {outer} must be larger than inner-radius = {inner}");
            return Err(refuse("outer-radius", message, ""));
        }
        Ok(())
    }
}

impl From<&Parameters> for Given {
    fn from(p: &Parameters) -> Self {
        Self::default()
            .number("inner-radius", p.inner_radius)
            .number("outer-radius", p.outer_radius)
            .with("ends", Value::Ends(p.ends))
            .with("material", Value::Material(p.material.clone()))
            .number("inner-pressure", p.inner_pressure)
            .number("outer-pressure", p.outer_pressure)
    }
}

impl From<&Given> for Given {
    fn from(given: &Given) -> Self {
        given.clone()
    }
}
