//! A tube bonded to two rigid cylinders, the outer of which is turned (azimuthal shear) or moved along the axis (axial shear).
//!
//! Radii and length stay; each surface R = constant slides on the next by the amount of shear ka(R):
//! ```text
//! azimuthal: theta = Theta + phi(R), ka = R phi'     srt = C/R^2   d srr/dR = (stt - srr)/R, along the motion
//! axial:     z = Z + w(R),           ka = w'         szr = C/R     d srr/dR = (stt - srr)/R, the third direction
//! ```
//! `local_shear` inverts tau(ka); the constant C follows from the motion of the outer wall, and srr(B) = 0 fixes the pressure.
//! Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173; Ogden, Non-Linear Elastic Deformations (1984), section 5.3 (from memory).

mod entries;
pub(super) mod local_shear;
mod solve;

use super::body::Body;
use super::demands;
use super::description::{Description, Line};
use super::given::{Given, refuse};
use super::solution::{ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total};
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use local_shear::Local;
use nalgebra::{Matrix3, Vector3};
use solve::Wall;

pub(super) use entries::{AXIAL_SHEAR, AZIMUTHAL_SHEAR};

/// Which way the outer wall moves.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Way {
    Azimuthal,
    Axial,
}

impl Way {
    /// The shear stress falls with this power of the radius.
    fn power(self) -> i32 {
        match self {
            Self::Azimuthal => 2,
            Self::Axial => 1,
        }
    }

    fn name(self) -> &'static str {
        match self {
            Self::Azimuthal => "azimuthal-shear",
            Self::Axial => "axial-shear",
        }
    }

    /// The parameter that moves the outer wall.
    fn motion(self) -> &'static str {
        match self {
            Self::Azimuthal => "rotation",
            Self::Axial => "displacement",
        }
    }
}

/// The tube, solved.
#[derive(Debug, Clone)]
pub struct TubeShear {
    wall: Wall,
    motion: f64,
    totals: Vec<Total>,
    bound: ErrorBound,
}

impl TubeShear {
    /// Solves the tube; refuses a motion that the law does not carry.
    pub(super) fn new(given: &Given, way: Way) -> Result<Self, Refusal> {
        let (inner, outer) = demands::radii(given)?;
        let why = "the shear would turn its preferred directions";
        let law = demands::isotropic_law(given, way.name(), why)?;
        let motion = given.finite(way.motion())?;
        let solved = solve::solve((inner, outer), law, way, motion)?;
        let extent = Extent::SectionAndLength;
        let load = match way {
            Way::Azimuthal => {
                demands::total("torque", solved.load, Dimension::MomentPerLength, extent)
            }
            Way::Axial => demands::total(
                "axial_shear_force",
                solved.load,
                Dimension::ForcePerLength,
                extent,
            ),
        };
        let energy = demands::total(
            "strain_energy",
            solved.energy,
            Dimension::EnergyPerLength,
            extent,
        );
        Ok(Self {
            totals: demands::finite(vec![load, energy])?,
            wall: solved.wall,
            motion,
            bound: solved.bound,
        })
    }

    fn no_value(&self, radius: f64) -> Refusal {
        let message = format!("the tube's formulas have no value at reference radius {radius}");
        let (a, b) = (self.wall.inner, self.wall.outer);
        refuse("", message, format!("the wall is {a} <= R <= {b}"))
    }

    fn azimuthal(&self, point: Point, local: &Local, srr: f64, angle: f64) -> State {
        let (c, s) = point.direction();
        let (sin, cos) = angle.sin_cos();
        let versed = -2.0 * (0.5 * angle).sin().powi(2);
        let (dc, ds) = (c * cos - s * sin, s * cos + c * sin);
        let turn = Matrix3::new(versed, -sin, 0.0, sin, versed, 0.0, 0.0, 0.0, 0.0);
        let shear = Vector3::new(-ds, dc, 0.0) * local.amount * Vector3::new(c, s, 0.0).transpose();
        let stress = SymTensor {
            xy: local.shear,
            ..SymTensor::diagonal(srr, srr + local.along, srr + local.third)
        };
        State {
            displacement: Vector3::new(
                point.x * versed - point.y * sin,
                point.y * versed + point.x * sin,
                0.0,
            ),
            displacement_gradient: turn + shear,
            stretches: [(-local.log).exp(), local.log.exp(), 1.0],
            stress: stress.cylindrical_to_cartesian((dc, ds)),
            ..self.common(stress, local)
        }
    }

    fn axial(&self, point: Point, local: &Local, srr: f64, moved: f64) -> State {
        let (c, s) = point.direction();
        let stress = SymTensor {
            zx: local.shear,
            ..SymTensor::diagonal(srr, srr + local.third, srr + local.along)
        };
        State {
            displacement: Vector3::new(0.0, 0.0, moved),
            displacement_gradient: Vector3::z()
                * local.amount
                * Vector3::new(c, s, 0.0).transpose(),
            stretches: [(-local.log).exp(), 1.0, local.log.exp()],
            stress: stress.cylindrical_to_cartesian((c, s)),
            ..self.common(stress, local)
        }
    }

    fn common(&self, stress: SymTensor, local: &Local) -> State {
        State {
            displacement: Vector3::zeros(),
            displacement_gradient: Matrix3::zeros(),
            stretches: [1.0; 3],
            stress,
            local_stress: stress,
            pressure: -(stress.xx + (local.along + local.third) / 3.0),
            volume_ratio: 1.0,
            energy_density: local.energy,
        }
    }
}

impl ExactSolution for TubeShear {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let radius = point.radius();
        if !(radius > 0.0 && radius.is_finite() && point.z.is_finite()) {
            return Err(self.no_value(radius));
        }
        let (local, srr, moved) = self.wall.at(radius).ok_or_else(|| self.no_value(radius))?;
        Ok(match self.wall.way {
            Way::Azimuthal => self.azimuthal(point, &local, srr, moved),
            Way::Axial => self.axial(point, &local, srr, moved),
        })
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        Body::Tube {
            inner: self.wall.inner,
            outer: self.wall.outer,
        }
    }

    fn bound(&self) -> ErrorBound {
        self.bound
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::Finite
    }

    fn line(&self) -> Line {
        let columns: &'static [&'static str] = match self.wall.way {
            Way::Azimuthal => &["R", "ux", "uy", "srr", "stt", "szz", "srt", "p", "W"],
            Way::Axial => &["R", "uz", "srr", "stt", "szz", "szr", "p", "W"],
        };
        Line::radial(self.wall.inner, self.wall.outer, columns)
    }

    fn turns(&self) -> bool {
        self.wall.way == Way::Azimuthal
    }

    fn load_stress(&self) -> f64 {
        self.wall.stress(self.wall.outer).abs()
    }

    fn method(&self) -> String {
        format!(
            "amount of shear from the shear stress by a bracketed Newton iteration, the load by a bracketed root of the wall's motion, \
             Gauss integrals through the wall; stated bound on the relative error: displacement {:.1e}, stress {:.1e}, totals {:.1e}",
            self.bound.displacement, self.bound.stress, self.bound.totals
        )
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let length = units.length.name;
        let (load, held, total) = match self.wall.way {
            Way::Azimuthal => (
                format!(
                    "outer wall turned about the axis by {} rad, inner wall held",
                    demands::rounded(self.motion, 12)
                ),
                "outer wall: every point turned about the axis by the angle, at its radius; no axial displacement at the end faces",
                "torque",
            ),
            Way::Axial => (
                format!(
                    "outer wall moved along the axis by {} {length}, inner wall held",
                    self.motion
                ),
                "outer wall: every point moved along Z by the displacement, at its radius; end faces are not free: they carry the stresses \
                 that go with this motion, so prescribe the exact displacements there",
                "axial_shear_force",
            ),
        };
        Description {
            body: format!(
                "tube, inner radius {} {length}, outer radius {} {length}, bonded to rigid cylinders at both walls",
                self.wall.inner, self.wall.outer
            ),
            load,
            ends: Some("held at their length (plane strain in the mean)".to_string()),
            modelling: vec![
                "inner wall: no displacement".to_string(),
                held.to_string(),
                "the pressure of an incompressible body is free by a constant here: the exact one has srr = 0 at the outer wall; fix it at \
                 one point, or let one wall carry a radial load"
                    .to_string(),
            ],
            totals: vec!["strain_energy", total, "load_factor"],
            sketch: None,
        }
    }
}

#[cfg(test)]
mod tests;
