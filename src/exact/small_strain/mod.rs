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

#[cfg(test)]
mod field_tests;
mod ring;

use super::given::{Form, Given, ParameterEntry, refuse};
use super::solution::{Extent, Refusal, State, Total};
use crate::materials::{LinearElastic, Material};
use crate::mechanics::{Dimension, Point, SymTensor};
use crate::numerics::CompensatedSum;
use nalgebra::{Matrix3, Vector3};

/// What a state is completed from.
#[derive(Debug, Clone, Copy)]
struct Field {
    displacement: Vector3<f64>,
    /// du_i/dX_j.
    gradient: Matrix3<f64>,
    /// Normal strains along the solution's own axes.
    strains: [f64; 3],
    stress: SymTensor,
    local_stress: SymTensor,
    /// Strain of a free expansion in every direction.
    heat: f64,
}

impl Field {
    /// The state; refused where a number left the range of doubles.
    fn complete(self, law: &LinearElastic) -> Result<State, Refusal> {
        let trace = self.local_stress.trace();
        let state = State {
            displacement: self.displacement,
            displacement_gradient: self.gradient,
            stretches: self.strains.map(|strain| 1.0 + strain),
            stress: self.stress,
            local_stress: self.local_stress,
            pressure: -trace / 3.0,
            volume_ratio: 1.0 + 3.0 * self.heat + law.compressibility() * trace / law.e,
            energy_density: energy_density(law, &self.local_stress),
        };
        let numbers = state.displacement.iter().chain(self.gradient.iter());
        if numbers.into_iter().all(|v| v.is_finite())
            && state.stress.is_finite()
            && state.energy_density.is_finite()
        {
            return Ok(state);
        }
        let message = "the solution has no finite value at this point";
        Err(refuse("", message.to_string(), ""))
    }
}

/// `W = (1+nu)/(2E) dev:dev + (1-2nu)/(6E) tr^2`: a sum of squares, so that nothing cancels.
fn energy_density(law: &LinearElastic, s: &SymTensor) -> f64 {
    let apart = (s.xx - s.yy).powi(2) + (s.yy - s.zz).powi(2) + (s.zz - s.xx).powi(2);
    let shears = s.xy * s.xy + s.yz * s.yz + s.zx * s.zx;
    (0.5 * (1.0 + law.nu) * (apart / 3.0 + 2.0 * shears)
        + law.compressibility() * s.trace().powi(2) / 6.0)
        / law.e
}

/// Normal strains and stresses along radius, hoop and axis of a field that depends on the radius alone.
#[derive(Debug, Clone, Copy, Default)]
struct Radial {
    strains: [f64; 3],
    stress: [f64; 3],
    /// d(axial strain)/dR, not zero in plane stress only.
    axial_slope: f64,
    heat: f64,
}

impl Radial {
    fn state(self, point: Point, law: &LinearElastic) -> Result<State, Refusal> {
        let [radial, hoop, axial] = self.strains;
        let (c, s) = point.direction();
        let mut gradient = SymTensor::diagonal(radial, hoop, axial)
            .cylindrical_to_cartesian((c, s))
            .to_matrix();
        gradient[(2, 0)] = point.z * self.axial_slope * c;
        gradient[(2, 1)] = point.z * self.axial_slope * s;
        let [srr, stt, szz] = self.stress;
        let local_stress = SymTensor::diagonal(srr, stt, szz);
        Field {
            displacement: Vector3::new(point.x * hoop, point.y * hoop, point.z * axial),
            gradient,
            strains: self.strains,
            stress: local_stress.cylindrical_to_cartesian((c, s)),
            local_stress,
            heat: self.heat,
        }
        .complete(law)
    }
}

/// `R^2 - radius^2` of a point to its last digit: in a thin wall the radius alone would give the place in the wall only
/// `16 - log10(R/thickness)` digits. `spherical` adds Z^2.
fn beyond(point: Point, radius: f64, spherical: bool) -> f64 {
    let z = if spherical { point.z } else { 0.0 };
    let mut sum = CompensatedSum::new();
    let mut add = |v: f64, sign: f64| {
        let square = v * v;
        sum.add(sign * square);
        sum.add(sign * v.mul_add(v, -square));
    };
    add(radius, -1.0);
    for v in [point.x, point.y, z] {
        add(v, 1.0);
    }
    sum.value()
}

/// Plane stress or plane strain: Hooke's law in the plane with constants of its own.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Plane {
    Stress,
    Strain,
}

impl Plane {
    const NAMES: &'static [&'static str] = &["plane-stress", "plane-strain"];

    const ENTRY: ParameterEntry = ParameterEntry::required(
        "state",
        Form::Word(Self::NAMES),
        "plane-stress: szz = 0, a thin plate; plane-strain: no strain along Z",
    );

    fn of(given: &Given) -> Result<Self, Refusal> {
        match given.text("state") {
            Some("plane-stress") => Ok(Self::Stress),
            Some("plane-strain") => Ok(Self::Strain),
            other => {
                let found = other.unwrap_or("nothing");
                let hint = Self::NAMES.join(" or ");
                Err(refuse("state", format!("state is {found}"), hint))
            }
        }
    }

    /// E of the plane: `E/(1 - nu^2)` in plane strain.
    fn young(self, law: &LinearElastic) -> f64 {
        match self {
            Self::Stress => law.e,
            Self::Strain => law.e / ((1.0 - law.nu) * (1.0 + law.nu)),
        }
    }

    /// nu of the plane: `nu/(1 - nu)` in plane strain.
    fn poisson(self, law: &LinearElastic) -> f64 {
        match self {
            Self::Stress => law.nu,
            Self::Strain => law.nu / (1.0 - law.nu),
        }
    }

    /// (szz, ezz) for the sum of the in-plane normal stresses.
    fn across(self, law: &LinearElastic, sum: f64) -> (f64, f64) {
        match self {
            Self::Stress => (0.0, -law.nu * sum / law.e),
            Self::Strain => (law.nu * sum, 0.0),
        }
    }

    fn in_words(self) -> &'static str {
        match self {
            Self::Stress => "free of stress along Z (plane stress)",
            Self::Strain => "held along Z (plane strain)",
        }
    }

    fn modelling(self) -> &'static str {
        match self {
            Self::Stress => {
                "a plane-stress model: the thickness strain of this field varies, so that a solid of finite \
                 thickness does not follow it exactly"
            }
            Self::Strain => "slice: plane strain; solid: no displacement along Z at both end faces",
        }
    }
}

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
fn closed_form() -> super::solution::ErrorBound {
    super::solution::ErrorBound {
        displacement: 5e-15,
        stress: 5e-15,
        totals: 5e-15,
    }
}
