//! A compressible hyperelastic tube, of one layer or several, and a sphere, under inner and outer pressure at finite strain.
//!
//! The radial boundary-value problem by integral collocation: the logarithm of the volume ratio, scaled to a stress, is the
//! unknown at Gauss nodes of panels in ln R; the hoop stretch is an integral of it from the bore, srr an integral from the
//! outer wall, and the law ties them (`states`, `integrals`, `system`). Nothing is divided by the bulk modulus, so that
//! nearly incompressible walls lose no digits, and an infinite one is the incompressible wall. States are followed from
//! the unloaded wall (`path`), solved to round-off (`solve`) and tabled (`fields`).
//! Sources: Ogden, Non-Linear Elastic Deformations (1984), chapter 5 (from memory); the collocation is this program's own.

mod fields;
mod integrals;
mod limit;
mod mesh;
mod numbers;
mod path;
mod refine;
mod solve;
mod sphere;
mod states;
mod system;
mod table;
mod tube;

pub use limit::Limit;
pub use solve::Drive;
pub use sphere::{CompressibleSphere, CompressibleSphereProblem};
pub use tube::{CompressibleTube, CompressibleTubeProblem, Load};

use super::parameters::refuse;
use super::solution::{ErrorBound, Refusal};
use crate::materials::{Compressible, IncompressibleLaw, Volumetric, VolumetricForm};
use std::sync::Arc;

/// A law that preserves volume as a layer of a compressible wall: Lam is then its mean stress.
pub fn incompressible_layer(law: Arc<dyn IncompressibleLaw>) -> Compressible {
    let volumetric = Volumetric {
        form: VolumetricForm::LogSquared,
        bulk: f64::INFINITY,
    };
    Compressible::Split { law, volumetric }
}

/// Beyond this ratio of the radii the wall is no wall any more.
const MOST_RATIO: f64 = 1e4;

/// Refuses radii out of order and numbers that are not finite.
fn check(
    inner: f64,
    layers: &[(f64, Compressible)],
    drive: Drive,
    outer_pressure: f64,
) -> Result<(), Refusal> {
    let (name, value) = match drive {
        Drive::InnerPressure(p) => ("inner-pressure", p),
        Drive::InnerWallStretch(stretch) => ("inner-wall-stretch", stretch),
        Drive::EnclosedVolume(volume) => ("enclosed-volume", volume),
    };
    let given = [
        ("inner-radius", inner),
        (name, value),
        ("outer-pressure", outer_pressure),
    ];
    for (name, value) in given {
        if !value.is_finite() {
            return Err(refuse(
                name,
                format!("{name} = {value} is not a finite number"),
                "",
            ));
        }
    }
    let positive = !matches!(drive, Drive::InnerPressure(_));
    for (name, value) in [
        ("inner-radius", inner),
        (name, if positive { value } else { 1.0 }),
    ] {
        if value <= 0.0 {
            return Err(refuse(
                name,
                format!("{name} = {value} must be positive"),
                "",
            ));
        }
    }
    let mut before = inner;
    for (radius, _) in layers {
        if !(*radius > before && radius.is_finite()) {
            let message = format!(
                "an outer radius of {radius} must be larger than the radius {before} inside it"
            );
            return Err(refuse(
                "outer-radius",
                message,
                "radii ascend from the bore outwards",
            ));
        }
        before = *radius;
    }
    if layers.is_empty() {
        return Err(refuse(
            "material",
            "a wall needs at least one layer".to_string(),
            "",
        ));
    }
    if before / inner > MOST_RATIO {
        let message = format!("outer-radius is {:.3e} times inner-radius", before / inner);
        let hint = format!("at most {MOST_RATIO:e} times; checked up to 100 times");
        return Err(refuse("outer-radius", message, hint));
    }
    Ok(())
}

/// How the numbers were obtained, for reports.
fn method(bound: &ErrorBound, residual: f64, nodes: usize, limit: &Limit) -> String {
    let limit = match limit {
        Limit::Maximum { inner_pressure, .. } => {
            format!(
                "maximum of the inner pressure {}",
                limit::rounded(*inner_pressure, 10)
            )
        }
        Limit::Asymptote { inner_pressure } => {
            format!(
                "asymptote of the inner pressure {}",
                limit::rounded(*inner_pressure, 10)
            )
        }
        Limit::None { .. } | Limit::NotFound { .. } => limit.pressure().err().unwrap_or_default(),
    };
    format!(
        "radial equilibrium by integral collocation at {nodes} Gauss nodes in ln R, Newton's method on the branch from the \
         unloaded wall; largest residual {residual:.1e} of the shear modulus; stated bound on the relative error, from half as \
         many nodes again and round-off: displacement {:.1e}, stress {:.1e}, totals {:.1e}; {limit}",
        bound.displacement, bound.stress, bound.totals
    )
}

/// A state without numbers, when setting up failed at the last step.
fn out_of_range() -> Refusal {
    let message = "the numbers of this wall exceed the range of a double".to_string();
    refuse("", message, "choose other units or a smaller load")
}

#[cfg(test)]
mod limit_tests;
#[cfg(test)]
mod tests;
