//! A linear-elastic tube under inner and outer pressure, at small strain (Lame).
//!
//! ```text
//! C = [(Pi-Po) A^2 - Po (B-A)(B+A)]/((B-A)(B+A))        D = (Pi-Po) A^2 B^2/((B-A)(B+A))
//! srr = -[Pi A^2 (B-R)(B+R) + Po B^2 (R-A)(R+A)]/(R^2 (B-A)(B+A)) = C - D/R^2      stt = 2 C - srr
//! u = al R + be/R     be = (1+nu) D/E     al = [(1-nu) C - nu szz]/E
//! szz: plane strain and given axial strain ez: E ez + 2 nu C; given force: N/area; closed: C; plane stress: 0
//! W = (1+nu)/E (q^2 + m^2/3) + (1-2 nu)/(6 E) (2 C + szz)^2,   q = D/R^2,  m = C - szz
//! ```
//! Lame & Clapeyron (1833); Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 28 (from memory),
//! differences of squares as products (numerics.md 7). Deformed quantities among the totals are those of the small
//! displacement: a = A + u(A), enclosed volume pi a^2 (1 + ez).

use super::Ends;
use super::parameters::{Parameters, refuse};
use super::solution::{Body, ErrorBound, ExactSolution, Kinematics, Refusal, State, Total};
use super::totals::TubeTotals;
use crate::materials::{LinearElastic, Material};
use crate::mechanics::{Point, SymTensor};
use nalgebra::Vector3;
use std::f64::consts::PI;

/// The tube with its constants.
#[derive(Debug, Clone)]
pub struct LameTube {
    inner: f64,
    outer: f64,
    law: LinearElastic,
    inner_pressure: f64,
    outer_pressure: f64,
    /// C and D of the header, and the uniform axial stress and strain.
    constant: f64,
    decaying: f64,
    axial_stress: f64,
    axial_strain: f64,
    /// al and be of the header.
    linear: f64,
    inverse: f64,
    totals: Vec<Total>,
}

impl LameTube {
    /// From parameters; refuses a material that is not linear-elastic.
    pub fn new(given: &Parameters) -> Result<Self, Refusal> {
        given.check()?;
        let Material::LinearElastic(law) = &given.material else {
            let message = format!("a lame-tube cannot be made of {}", given.material.name());
            return Err(refuse(
                "material",
                message,
                "use linear-elastic, or the pressurised-tube",
            ));
        };
        let (a, b, e, nu) = (given.inner_radius, given.outer_radius, law.e, law.nu);
        let (pi, po) = (given.inner_pressure, given.outer_pressure);
        let squares = (b - a) * (b + a);
        let constant = ((pi - po) * a * a - po * squares) / squares;
        let decaying = (pi - po) * a * a * b * b / squares;
        let soft = law.compressibility();
        let strained = |ez: f64| (e * ez + 2.0 * nu * constant, ez);
        let (axial_stress, axial_strain) = match given.ends {
            Ends::PlaneStrain => strained(0.0),
            Ends::FixedStretch { axial_stretch } => strained(axial_stretch - 1.0),
            Ends::Closed => (constant, soft * constant / e),
            Ends::PlaneStress => (0.0, -2.0 * nu * constant / e),
            Ends::GeneralizedPlaneStrain { axial_force } => {
                let stress = axial_force / (PI * squares);
                (stress, (stress - 2.0 * nu * constant) / e)
            }
        };
        let linear = match given.ends {
            Ends::PlaneStrain | Ends::FixedStretch { .. } => {
                (1.0 + nu) * soft * constant / e - nu * axial_strain
            }
            Ends::Closed => soft * constant / e,
            _ => ((1.0 - nu) * constant - nu * axial_stress) / e,
        };
        let mut tube = Self {
            inner: a,
            outer: b,
            law: *law,
            inner_pressure: pi,
            outer_pressure: po,
            constant,
            decaying,
            axial_stress,
            axial_strain,
            linear,
            inverse: (1.0 + nu) * decaying / e,
            totals: Vec::new(),
        };
        tube.totals = tube.all_totals(given).list();
        if tube
            .totals
            .iter()
            .any(|t| matches!(t.value, Ok(v) if !v.is_finite()))
        {
            let message = "the numbers of this tube exceed the range of a double";
            return Err(refuse("", message.to_string(), "choose other units"));
        }
        Ok(tube)
    }

    fn all_totals(&self, given: &Parameters) -> TubeTotals {
        let (a, b) = (self.inner, self.outer);
        let area = PI * (b - a) * (b + a);
        let deformed = |radius: f64| radius + self.linear * radius + self.inverse / radius;
        let uniform =
            (1.0 + self.law.nu) / self.law.e * (self.constant - self.axial_stress).powi(2) / 3.0
                + self.volume_energy();
        // integral of (D/R^2)^2 2 pi R dR = pi D^2 (B-A)(B+A)/(A^2 B^2)
        let shear = (1.0 + self.law.nu) / self.law.e * (self.decaying / (a * b)).powi(2);
        TubeTotals {
            inner_radius: deformed(a),
            outer_radius: deformed(b),
            axial_stretch: 1.0 + self.axial_strain,
            axial_force: match given.ends {
                Ends::GeneralizedPlaneStrain { axial_force } => axial_force,
                _ => self.axial_stress * area,
            },
            strain_energy: (uniform + shear) * area,
            enclosed_volume: PI * deformed(a) * deformed(a) * (1.0 + self.axial_strain),
            limit_pressure: Err("no limit: small-strain elasticity is linear".to_string()),
        }
    }

    /// The part of W that changes the volume: tr(sigma)^2/(18 K).
    fn volume_energy(&self) -> f64 {
        self.law.compressibility() / (6.0 * self.law.e)
            * (2.0 * self.constant + self.axial_stress).powi(2)
    }
}

impl ExactSolution for LameTube {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let (radius, a, b) = (point.radius(), self.inner, self.outer);
        if !(radius > 0.0 && radius.is_finite() && point.z.is_finite()) {
            let message = format!(
                "the tube's formulas have no value at reference radius {radius}, Z = {}",
                point.z
            );
            return Err(refuse("", message, format!("the wall is {a} <= R <= {b}")));
        }
        let square = radius * radius;
        let inward = self.inner_pressure * (a * a) * ((b - radius) * (b + radius));
        let outward = self.outer_pressure * (b * b) * ((radius - a) * (radius + a));
        let srr = -(inward + outward) / (square * ((b - a) * (b + a)));
        let stress = SymTensor::diagonal(srr, 2.0 * self.constant - srr, self.axial_stress);
        let bend = self.inverse / square;
        let (radial, hoop, axial) = (self.linear - bend, self.linear + bend, self.axial_strain);
        let trace = 2.0 * self.constant + self.axial_stress;
        let shear = self.decaying / square;
        let apart = self.constant - self.axial_stress;
        let direction = point.direction();
        let gradient = SymTensor::diagonal(radial, hoop, axial).cylindrical_to_cartesian(direction);
        Ok(State {
            displacement: Vector3::new(point.x * hoop, point.y * hoop, point.z * axial),
            displacement_gradient: gradient.to_matrix(),
            stretches: [1.0 + radial, 1.0 + hoop, 1.0 + axial],
            stress: stress.cylindrical_to_cartesian(direction),
            local_stress: stress,
            pressure: -trace / 3.0,
            volume_ratio: 1.0 + self.law.compressibility() * trace / self.law.e,
            energy_density: (1.0 + self.law.nu) / self.law.e
                * (shear * shear + apart * apart / 3.0)
                + self.volume_energy(),
        })
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        Body::Tube {
            inner: self.inner,
            outer: self.outer,
        }
    }

    fn bound(&self) -> ErrorBound {
        // measured 4e-16 to 1.3e-15 against many-digit values; twice and more of that
        ErrorBound {
            displacement: 4e-15,
            stress: 4e-15,
            totals: 4e-15,
        }
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::SmallStrain
    }

    fn method(&self) -> String {
        "closed form".to_string()
    }
}
