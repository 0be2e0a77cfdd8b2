//! What a pressurised wall is built from: bonded layers, ends, loads and what drives the bore.

use super::grading::Grading;
use crate::exact::Ends;
use crate::exact::parameters::{Parameters, refuse};
use crate::exact::solution::Refusal;
use crate::materials::{IncompressibleLaw, Material};
use std::sync::Arc;

/// One layer, bonded to its neighbours. It reaches from the layer before (or the bore) to `outer_radius`.
#[derive(Debug, Clone)]
pub struct Layer {
    /// Reference radius. Unit: length.
    pub outer_radius: f64,
    pub law: Arc<dyn IncompressibleLaw>,
    pub grading: Grading,
}

/// What is prescribed at the bore.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Drive {
    /// The pressure, any sign; per reference area under dead load. Unit: stress.
    InnerPressure(f64),
    /// a/A, deformed over reference radius of the bore.
    InnerWallStretch(f64),
    /// pi a^2 lz, the volume inside per unit reference length. Unit: length squared.
    EnclosedVolume(f64),
}

/// A tube of incompressible layers with its loads, in one system of units.
#[derive(Debug, Clone)]
pub struct TubeProblem {
    /// Reference radius of the bore. Unit: length.
    pub inner_radius: f64,
    /// From the bore outwards.
    pub layers: Vec<Layer>,
    pub ends: Ends,
    pub drive: Drive,
    /// Any sign; per reference area under dead load. Unit: stress.
    pub outer_pressure: f64,
    /// Dead loads: both pressures are per reference area and keep their resultants, true pressures `Pi = p0 A/(a lz)`,
    /// `Po = q0 B/(b lz)`; closed ends carry `pi (p0 A^2 - q0 B^2)`. False: pressures of a fluid.
    pub dead: bool,
}

/// Beyond this ratio of the radii the wall is no tube any more, and its integrals no numbers.
const MOST_RATIO: f64 = 1e6;

impl TubeProblem {
    /// The homogeneous tube of [`Parameters`].
    pub fn homogeneous(given: &Parameters) -> Result<Self, Refusal> {
        let Material::Incompressible(law) = &given.material else {
            let message = format!(
                "a pressurised-tube cannot be made of {}",
                given.material.name()
            );
            let hint = "use an incompressible law, or the lame-tube for small strain";
            return Err(refuse("material", message, hint));
        };
        Ok(Self {
            inner_radius: given.inner_radius,
            layers: vec![Layer {
                outer_radius: given.outer_radius,
                law: law.clone(),
                grading: Grading::None,
            }],
            ends: given.ends,
            drive: Drive::InnerPressure(given.inner_pressure),
            outer_pressure: given.outer_pressure,
            dead: false,
        })
    }

    /// Reference outer radius; the bore's where there is no layer.
    pub fn outer_radius(&self) -> f64 {
        self.layers
            .last()
            .map_or(self.inner_radius, |l| l.outer_radius)
    }

    /// Refuses what is no tube: radii out of order, values that are not finite.
    pub(super) fn check(&self) -> Result<(), Refusal> {
        let (driven, drive, positive) = match self.drive {
            Drive::InnerPressure(p) => ("inner-pressure", p, false),
            Drive::InnerWallStretch(l) => ("inner-wall-stretch", l, true),
            Drive::EnclosedVolume(v) => ("enclosed-volume", v, true),
        };
        let (force, stretch) = match self.ends {
            Ends::GeneralizedPlaneStrain { axial_force } => (axial_force, 1.0),
            Ends::FixedStretch { axial_stretch } => (0.0, axial_stretch),
            Ends::PlaneStress => {
                let message = "plane-stress does not exist for a thick tube at finite strain";
                let hint = "use { generalized-plane-strain: { axial-force: 0 } }, the slice free to change its length";
                return Err(refuse("ends", message.to_string(), hint));
            }
            _ => (0.0, 1.0),
        };
        for (name, value, positive) in [
            ("inner-radius", self.inner_radius, true),
            (driven, drive, positive),
            ("outer-pressure", self.outer_pressure, false),
            ("axial-force", force, false),
            ("axial-stretch", stretch, true),
        ] {
            if !value.is_finite() {
                let message = format!("{name} = {value} is not a finite number");
                return Err(refuse(name, message, ""));
            }
            if positive && value <= 0.0 {
                let message = format!("{name} = {value} must be positive");
                return Err(refuse(name, message, ""));
            }
        }
        self.check_layers()
    }

    fn check_layers(&self) -> Result<(), Refusal> {
        let mut from = self.inner_radius;
        if self.layers.is_empty() {
            return Err(refuse("radii", "a tube without a layer".to_string(), ""));
        }
        for (i, layer) in self.layers.iter().enumerate() {
            let to = layer.outer_radius;
            let name = if self.layers.len() == 1 {
                "outer-radius"
            } else {
                "radii"
            };
            if !to.is_finite() {
                return Err(refuse(
                    name,
                    format!("{name} = {to} is not a finite number"),
                    "",
                ));
            }
            if to <= from {
                let before = if i == 0 { "inner-radius" } else { "radius" };
                let what = if i + 1 == self.layers.len() {
                    "outer-radius"
                } else {
                    "radius"
                };
                let message = format!("{what} = {to} must be larger than {before} = {from}");
                return Err(refuse(name, message, ""));
            }
            let ratio = to / self.inner_radius;
            if !ratio.is_finite() || ratio > MOST_RATIO {
                let message = format!("outer-radius is {ratio:.3e} times inner-radius");
                let hint = format!("at most {MOST_RATIO:e} times; checked up to 100 times");
                return Err(refuse(name, message, hint));
            }
            layer.grading.check(from, to, self.inner_radius)?;
            from = to;
        }
        Ok(())
    }
}
