//! What every exact solution answers: the state at a reference point, totals, its body and its own error bound.

use super::body::{Body, Frame};
use super::description::{Description, Line};
use super::known_value::KnownValue;
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use nalgebra::{Matrix3, Vector3};

/// The exact state at one reference point. Everything in the units of the case; tension positive.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct State {
    /// Displacement in X, Y, Z.
    pub displacement: Vector3<f64>,
    /// du_i/dX_j, i.e. F - I, kept as such because F would lose the digits of a small strain.
    pub displacement_gradient: Matrix3<f64>,
    /// Principal stretches along the solution's own axes (tube: radial, hoop, axial).
    pub stretches: [f64; 3],
    /// Cauchy stress in X, Y, Z.
    pub stress: SymTensor,
    /// Cauchy stress in the solution's own axes (tube: radial, hoop, axial).
    pub local_stress: SymTensor,
    /// -tr(sigma)/3, compression positive.
    pub pressure: f64,
    /// det F (small strain: 1 + tr(epsilon)).
    pub volume_ratio: f64,
    /// Strain energy per reference volume.
    pub energy_density: f64,
}

impl State {
    /// The deformation gradient.
    pub fn deformation(&self) -> Matrix3<f64> {
        Matrix3::identity() + self.displacement_gradient
    }
}

/// How a total of the full part follows from the share of it that is modelled.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Extent {
    /// The same for any share: a stretch, a radius, a pressure.
    Whole,
    /// Proportional to the share of the section (of a sphere, of the whole): a force.
    Section,
    /// Proportional to the share of the section and to the axial length (one, in a slice): an energy, a volume.
    SectionAndLength,
}

/// One number of the whole part, for the full section and unit reference length.
#[derive(Debug, Clone, PartialEq)]
pub struct Total {
    pub name: &'static str,
    /// The number, or why there is none.
    pub value: Result<f64, String>,
    pub dimension: Dimension,
    pub extent: Extent,
}

/// Bounds on the error of the solution's own numbers, relative to the largest value of the case.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ErrorBound {
    pub displacement: f64,
    pub stress: f64,
    pub totals: f64,
}

/// Whether the strains are taken as small, or the deformation as finite.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Kinematics {
    Finite,
    SmallStrain,
}

/// Why an exact solution has no value here, or cannot be set up.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[error("{message}")]
pub struct Refusal {
    /// What is wrong, with the numbers, as a lower-case fragment.
    pub message: String,
    /// The parameter it is about, as the suite writes it (`outer-radius`), empty if it is the whole.
    pub parameter: &'static str,
    /// How to mend it; may be empty.
    pub hint: String,
}

/// An exact solution, set up once and asked at many points from many threads.
pub trait ExactSolution: Send + Sync + std::fmt::Debug {
    /// The state at a reference point. Slightly off the body the formula is continued (the caller counts
    /// such points); where it has no continuation the answer is a refusal.
    fn at(&self, point: Point) -> Result<State, Refusal>;

    /// All totals, in the order reports print them.
    fn totals(&self) -> &[Total];

    fn body(&self) -> Body;

    fn bound(&self) -> ErrorBound;

    fn kinematics(&self) -> Kinematics;

    /// How the numbers are obtained, for reports: "closed form", "quadrature and Newton", with digits.
    fn method(&self) -> String;

    /// The solution in words, in the units its numbers are in.
    fn description(&self, units: &UnitSystem) -> Description;

    /// The line its stations stand on: through the wall where there is one.
    fn line(&self) -> Line {
        let body = self.body();
        match (body.span(), body.frame()) {
            (Some((inner, outer)), Frame::Spherical) => Line::radial(inner, outer, Line::SPHERE),
            (Some((inner, outer)), _) => Line::radial(inner, outer, Line::TUBE),
            (None, _) => Line {
                from: Point::new(0.0, 0.0, 0.0),
                to: body.middle(),
                columns: Line::CARTESIAN,
            },
        }
    }

    /// Whether particles turn about the axis, so that the radial direction of the reference is not the deformed one.
    fn turns(&self) -> bool {
        false
    }

    /// Size of the loads as stresses: what a force that is their balance is measured against.
    fn load_stress(&self) -> f64 {
        0.0
    }

    /// Radii about the Z axis where parts meet that may be meshed apart; the displacement may jump there.
    fn interfaces(&self) -> Vec<f64> {
        Vec::new()
    }

    /// Whether it has a state at every point, or consists of single numbers.
    fn has_fields(&self) -> bool {
        true
    }

    /// Single numbers known beside, or instead of, the fields.
    fn known_values(&self) -> &[KnownValue] {
        &[]
    }

    /// Body force per reference volume that equilibrium needs, in X, Y, Z.
    fn body_force(&self, _point: Point) -> Result<Vector3<f64>, Refusal> {
        Ok(Vector3::zeros())
    }
}
