//! Solutions of small-strain elasticity, one file a solution, and what they share: a full state from displacement,
//! displacement gradient and stress; plane stress and plane strain; squares without loss near a wall.
//!
//! Strains are the symmetric part of the displacement gradient, `J = 1 + tr(eps)`, and the elastic energy follows from the
//! stress alone. In plane stress the thickness strain varies where the in-plane stresses do; `uz = ezz Z` then is exact for a
//! plane model (Z = 0) and only there.

pub(super) mod bar_torsion;
pub(super) mod elastic_plastic_tube;
pub(super) mod heated_tube;
pub(super) mod lame_sphere;
pub(super) mod plate_with_hole;
pub(super) mod rotating;
pub(super) mod shrink_fit_tube;
pub(super) mod strip;

mod plane;
mod ring;
mod state;

use super::given::{Given, refuse};
use super::solution::{ErrorBound, Extent, Refusal, Total};
use crate::materials::{LinearElastic, Material};
use crate::mechanics::Dimension;
use plane::Plane;
use state::{Field, Radial, beyond, energy_density};

/// The material of a problem that only Hooke's law makes sense for.
fn hooke(material: &Material) -> Result<LinearElastic, Refusal> {
    match material {
        Material::LinearElastic(law) => Ok(*law),
        other => {
            let message = format!("it cannot be made of {}", other.name());
            Err(refuse("material", message, "use linear-elastic"))
        }
    }
}

/// Largest ratio of the radii, as for every tube.
const MOST_RATIO: f64 = 1e6;

/// Radii in ascending order with a wall between each two.
fn in_order(name: &'static str, inner: f64, outer: f64) -> Result<(), Refusal> {
    if outer <= inner {
        let message =
            format!("the outer radius {outer} must be larger than the inner radius {inner}");
        return Err(refuse(name, message, format!("anything above {inner}")));
    }
    if inner > 0.0 && outer / inner > MOST_RATIO {
        let message = format!(
            "the outer radius is {:.3e} times the inner radius",
            outer / inner
        );
        return Err(refuse(
            name,
            message,
            format!("at most {MOST_RATIO:e} times"),
        ));
    }
    Ok(())
}

/// `inner-radius` and `outer-radius`; `solid` lets the inner one be missing or zero.
fn radii(given: &Given, solid: bool) -> Result<(f64, f64), Refusal> {
    let outer = given.positive("outer-radius")?;
    let inner = if solid {
        given.finite_or("inner-radius", 0.0)?
    } else {
        given.positive("inner-radius")?
    };
    if inner < 0.0 {
        let message = format!("inner-radius = {inner} must not be negative");
        return Err(refuse("inner-radius", message, "0 for a solid body"));
    }
    in_order("outer-radius", inner, outer)?;
    Ok((inner, outer))
}

/// The given ends if they are among `names`.
fn ends_among(given: &Given, names: &'static [&'static str]) -> Result<super::Ends, Refusal> {
    let ends = given.ends()?;
    if !names.contains(&ends.name()) {
        let message = format!("ends {} make no sense here", ends.name());
        return Err(refuse(
            "ends",
            message,
            format!("one of: {}", names.join(", ")),
        ));
    }
    if let super::Ends::GeneralizedPlaneStrain { axial_force } = ends
        && !axial_force.is_finite()
    {
        let message = format!("axial-force = {axial_force} is not a finite number");
        return Err(refuse("axial-force", message, ""));
    }
    Ok(ends)
}

fn total(
    name: &'static str,
    value: Result<f64, String>,
    dimension: Dimension,
    extent: Extent,
) -> Total {
    Total {
        name,
        value,
        dimension,
        extent,
    }
}

/// Totals of a body about the Z axis, those of its walls first.
struct RingTotals {
    /// Reference radius and hoop strain of each wall; no inner one in a solid body.
    inner: Option<(f64, f64)>,
    outer: (f64, f64),
    /// Why there is none, where it varies over the section.
    axial_strain: Result<f64, String>,
    axial_force: f64,
    strain_energy: f64,
}

impl RingTotals {
    fn list(self) -> Vec<Total> {
        let deformed = |(radius, hoop): (f64, f64)| radius + radius * hoop;
        let inner = self.inner.map(deformed);
        let mut list = Vec::new();
        if let Some(inner) = inner {
            let value = Ok(inner);
            list.push(total(
                "inner_radius",
                value,
                Dimension::Length,
                Extent::Whole,
            ));
        }
        let outer = Ok(deformed(self.outer));
        list.push(total(
            "outer_radius",
            outer,
            Dimension::Length,
            Extent::Whole,
        ));
        let stretch = self.axial_strain.map(|strain| 1.0 + strain);
        list.push(total(
            "axial_stretch",
            stretch,
            Dimension::None,
            Extent::Whole,
        ));
        let force = Ok(self.axial_force);
        list.push(total(
            "axial_force",
            force,
            Dimension::Force,
            Extent::Section,
        ));
        list.push(energy_total(self.strain_energy));
        list
    }
}

/// Strain energy per unit length along Z.
fn energy_total(energy: f64) -> Total {
    total(
        "strain_energy",
        Ok(energy),
        Dimension::EnergyPerLength,
        Extent::SectionAndLength,
    )
}

/// The totals, if all that have a number have a finite one.
fn finite(totals: Vec<Total>) -> Result<Vec<Total>, Refusal> {
    match totals
        .iter()
        .find(|t| matches!(t.value, Ok(v) if !v.is_finite()))
    {
        None => Ok(totals),
        Some(odd) => {
            let message = format!("{} exceeds the range of a double", odd.name);
            Err(refuse("", message, "choose other units"))
        }
    }
}

/// Bound of the closed forms: measured 1e-16 to 2e-15 against many-digit values, doubled and more.
fn closed_form() -> ErrorBound {
    ErrorBound {
        displacement: 5e-15,
        stress: 5e-15,
        totals: 5e-15,
    }
}

#[cfg(test)]
mod field_tests;
