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
use super::body::Body;
use super::description::Description;
use super::parameters::{Parameters, refuse};
use super::solution::{ErrorBound, ExactSolution, Kinematics, Refusal, State, Total};
use super::totals::TubeTotals;
use super::tube_words::{Bore, TubeWords};
use crate::materials::{LinearElastic, Material};
use crate::mechanics::{Point, SymTensor, UnitSystem};
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
    words: TubeWords,
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
            words: TubeWords {
                inner: given.inner_radius,
                outer: given.outer_radius,
                ends: given.ends,
                bore: Bore::Pressure,
                inner_pressure: given.inner_pressure,
                outer_pressure: given.outer_pressure,
                kinematics: Kinematics::SmallStrain,
                dead: false,
            },
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

    fn description(&self, units: &UnitSystem) -> Description {
        self.words.description("tube", units)
    }

    fn load_stress(&self) -> f64 {
        self.words.inner_pressure.abs() + self.words.outer_pressure.abs()
    }

    fn method(&self) -> String {
        "closed form".to_string()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::PressurisedTube;
    use crate::materials::NeoHookean;
    use proptest::prelude::*;

    fn total(tube: &dyn ExactSolution, name: &str) -> f64 {
        let found = tube.totals().iter().find(|t| t.name == name).unwrap();
        found.value.clone().unwrap()
    }

    fn ends_of(i: usize, number: f64) -> Ends {
        match i {
            0 => Ends::PlaneStrain,
            1 => Ends::Closed,
            2 => Ends::PlaneStress,
            3 => Ends::FixedStretch {
                axial_stretch: 1.0 + 1e-3 * number,
            },
            _ => Ends::GeneralizedPlaneStrain {
                axial_force: number,
            },
        }
    }

    proptest! {
        // Strains and stresses are computed apart, so Hooke's law, the work of the loads and the derivative of u
        // can all fail (tried: sign of `- nu szz` in al, m^2/3 -> m^2 in W, be without 1 + nu).
        #[test]
        fn random_tubes_obey_every_equation(
            thickness in -4.0..2.0_f64, ends in 0..5_usize, number in -2.0..2.0_f64, nu in -0.9..0.5_f64,
            pi in -1.0..1.0_f64, po in -1.0..1.0_f64, place in 0.0..1.0_f64,
        ) {
            let (a, b) = (1.5, 1.5 * (1.0 + 10f64.powf(thickness)));
            let law = LinearElastic { e: 100.0, nu };
            let tube = LameTube::new(&Parameters {
                inner_radius: a, outer_radius: b, ends: ends_of(ends, number),
                material: Material::LinearElastic(law), inner_pressure: pi, outer_pressure: po,
            }).unwrap();
            let at = |r: f64| tube.at(Point::new(r, 0.0, 1.0)).unwrap();
            prop_assert!((at(a).local_stress.xx + pi).abs() < 1e-15);
            prop_assert!((at(b).local_stress.xx + po).abs() < 1e-15);
            let r = a + place * (b - a);
            let state = at(r);
            let s = [state.local_stress.xx, state.local_stress.yy, state.local_stress.zz];
            let eps = [0, 1, 2].map(|i| state.displacement_gradient[(i, i)]);
            let size = s.iter().fold(0.0_f64, |m, s| m.max(s.abs()));
            for i in 0..3 {
                let hooke = ((1.0 + nu) * s[i] - nu * (s[0] + s[1] + s[2])) / law.e;
                prop_assert!((hooke - eps[i]).abs() < 1e-15 * 20.0 * size / law.e, "Hooke {i}");
            }
            let w: f64 = (0..3).map(|i| 0.5 * s[i] * eps[i]).sum();
            prop_assert!((w - state.energy_density).abs() < 1e-14 * size * size / law.e, "W");
            prop_assert!((state.volume_ratio - 1.0 - eps.iter().sum::<f64>()).abs() < 4e-15 * (1.0 + size / law.e));
            // u is r eps_tt and u' = eps_rr
            let h = 1e-5 * r;
            let u = |r: f64| at(r).displacement.x;
            prop_assert!(((u(r + h) - u(r - h)) / (2.0 * h) - eps[0]).abs() < 1e-8 * size / law.e);
            // d srr/dr = (stt - srr)/r
            let srr = |r: f64| at(r).local_stress.xx;
            prop_assert!(((srr(r + h) - srr(r - h)) * 0.5 * r / h - (s[1] - s[0])).abs() < 1e-7 * size);
            // Clapeyron: 2 E = Pi 2 pi A u(A) - Po 2 pi B u(B) + N ez
            let force = total(&tube, "axial_force");
            let stored = total(&tube, "strain_energy");
            let work = PI * (pi * a * u(a) - po * b * u(b)) + 0.5 * force * eps[2];
            let scale = size * size / law.e * PI * b * b;
            prop_assert!((stored - work).abs() < 1e-13 * scale, "Clapeyron {stored} {work}");
            prop_assert!((force - s[2] * PI * (b - a) * (b + a)).abs() < 1e-13 * size * b * b);
        }
    }

    // The small-load limit of the finite tube at nu = 1/2, E = 3 mu: agreement to the strain. Red when either has a
    // wrong factor.
    #[test]
    fn it_is_the_small_load_limit_of_the_finite_tube() {
        let p = 1e-7;
        for ends in [
            Ends::PlaneStrain,
            Ends::Closed,
            Ends::GeneralizedPlaneStrain { axial_force: 3e-7 },
        ] {
            let given = |material: Material| Parameters {
                inner_radius: 1.0,
                outer_radius: 2.0,
                ends,
                material,
                inner_pressure: p,
                outer_pressure: 0.3 * p,
            };
            let finite =
                PressurisedTube::new(&given(Material::incompressible(NeoHookean { mu: 1.0 })))
                    .unwrap();
            let small = LameTube::new(&given(Material::LinearElastic(LinearElastic {
                e: 3.0,
                nu: 0.5,
            })))
            .unwrap();
            for r in [1.0, 1.3, 2.0] {
                let point = Point::new(r, 0.0, 1.0);
                let (f, s) = (finite.at(point).unwrap(), small.at(point).unwrap());
                assert!(
                    (f.displacement - s.displacement).abs().max() < 1e-5 * p,
                    "{ends:?}"
                );
                for (x, y) in f.stress.to_array().into_iter().zip(s.stress.to_array()) {
                    assert!((x - y).abs() < 1e-5 * p, "{ends:?}");
                }
                assert!((f.energy_density / s.energy_density - 1.0).abs() < 1e-5);
            }
        }
    }

    // MacNeal & Harder (1985) thick cylinder, plane strain, A = 3, B = 9, E = 1000, p = 1: u(A) = 5.0399e-3 at
    // nu = 0.49 (from memory).
    #[test]
    fn macneal_harder_cylinder() {
        let tube = LameTube::new(&Parameters {
            inner_radius: 3.0,
            outer_radius: 9.0,
            ends: Ends::PlaneStrain,
            material: Material::LinearElastic(LinearElastic {
                e: 1000.0,
                nu: 0.49,
            }),
            inner_pressure: 1.0,
            outer_pressure: 0.0,
        })
        .unwrap();
        let u = tube.at(Point::new(3.0, 0.0, 0.0)).unwrap().displacement.x;
        assert!((u - 5.0399e-3).abs() < 5e-8);
        assert!(
            tube.totals()[6]
                .value
                .as_ref()
                .unwrap_err()
                .starts_with("no limit")
        );
    }
}
