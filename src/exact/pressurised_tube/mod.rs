//! An incompressible hyperelastic tube under inner and outer pressure, at finite strain.
//!
//! The wall stays a tube: `r^2 = a^2 + (R^2 - A^2)/lz`, `z = lz Z`. Equilibrium and the end condition are two
//! equations for the bore and the axial stretch (`equations`); their states are followed from the unloaded tube
//! (`path`), solved at the given loads (`solve`) and evaluated at points (`wall_fields`).
//! Sources: Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173; Ogden, Non-Linear Elastic Deformations (1984),
//! section 5.3 (from memory). Pressures of any sign; axial force positive in tension.

mod equations;
mod path;
mod solve;
mod wall_fields;

pub use solve::Limit;

use super::Ends;
use super::body::Body;
use super::description::Description;
use super::parameters::{Parameters, refuse};
use super::solution::{ErrorBound, ExactSolution, Kinematics, Refusal, State, Total};
use super::totals::TubeTotals;
use super::tube_words::TubeWords;
use crate::materials::Material;
use crate::mechanics::{Point, UnitSystem};
use equations::Wall;
use path::Axial;
use solve::{Solved, rounded};
use std::f64::consts::PI;
use wall_fields::Fields;

/// The tube, solved.
#[derive(Debug, Clone)]
pub struct PressurisedTube {
    fields: Fields,
    totals: Vec<Total>,
    body: Body,
    bound: ErrorBound,
    limit: Limit,
    words: TubeWords,
}

impl PressurisedTube {
    /// Solves the tube; refuses loads beyond the limit of the first branch.
    pub fn new(given: &Parameters) -> Result<Self, Refusal> {
        given.check()?;
        let Material::Incompressible(law) = &given.material else {
            let message = format!(
                "a pressurised-tube cannot be made of {}",
                given.material.name()
            );
            let hint = "use an incompressible law, or the lame-tube for small strain";
            return Err(refuse("material", message, hint));
        };
        let (inner, outer) = (given.inner_pressure, given.outer_pressure);
        let axial = match given.ends {
            Ends::PlaneStrain => Axial::Fixed(0.0),
            Ends::FixedStretch { axial_stretch } => Axial::Fixed(axial_stretch.ln()),
            Ends::Closed => Axial::Closed,
            Ends::GeneralizedPlaneStrain { axial_force } => Axial::Force {
                force: axial_force,
                outer_pressure: outer,
            },
            Ends::PlaneStress => {
                let message = "plane-stress does not exist for a thick tube at finite strain";
                let hint = "use { generalized-plane-strain: { axial-force: 0 } }, the slice free to change its length";
                return Err(refuse("ends", message.to_string(), hint));
            }
        };
        let wall = Wall::new(given.inner_radius, given.outer_radius, law.clone());
        let solved = solve::solve(&wall, axial, inner, outer)?;
        let fields = Fields::new(wall.clone(), solved.g, solved.e, outer)?;
        let totals = totals_of(&wall, given, &solved);
        let bound = bound_of(&wall, &fields, given, &solved, &totals)?;
        let totals = totals.list();
        if totals
            .iter()
            .any(|t| matches!(t.value, Ok(v) if !v.is_finite()))
        {
            let message = "the numbers of this tube exceed the range of a double";
            return Err(refuse("", message.to_string(), "choose other units"));
        }
        Ok(Self {
            fields,
            totals,
            body: Body::Tube {
                inner: given.inner_radius,
                outer: given.outer_radius,
            },
            bound,
            limit: solved.limit,
            words: TubeWords {
                inner: given.inner_radius,
                outer: given.outer_radius,
                ends: given.ends,
                inner_pressure: given.inner_pressure,
                outer_pressure: given.outer_pressure,
                kinematics: Kinematics::Finite,
                dead: false,
            },
        })
    }

    /// The limit of the inner pressure at the given outer pressure and ends.
    pub fn limit(&self) -> &Limit {
        &self.limit
    }
}

fn totals_of(wall: &Wall, given: &Parameters, solved: &Solved) -> TubeTotals {
    let (g, e) = (solved.g, solved.e);
    let (inner_radius, outer_radius) = wall.radii(g, e);
    let caps = (given.inner_pressure - given.outer_pressure) * inner_radius * inner_radius
        - given.outer_pressure * wall.area_factor() * (-e).exp();
    TubeTotals {
        inner_radius,
        outer_radius,
        axial_stretch: match given.ends {
            Ends::FixedStretch { axial_stretch } => axial_stretch,
            _ => e.exp(),
        },
        axial_force: match given.ends {
            Ends::GeneralizedPlaneStrain { axial_force } => axial_force,
            Ends::Closed => PI * caps,
            _ => solved.integrals.reduced_force.value + PI * caps,
        },
        strain_energy: solved.integrals.energy.value,
        // a^2 lz = A^2 e^g
        enclosed_volume: PI * wall.inner * wall.inner * g.exp(),
        limit_pressure: solved.limit.pressure(),
    }
}

/// Relative bounds from the errors of g and e, through the derivatives of what is printed.
fn bound_of(
    wall: &Wall,
    fields: &Fields,
    given: &Parameters,
    solved: &Solved,
    totals: &TubeTotals,
) -> Result<ErrorBound, Refusal> {
    let (g_error, e_error) = (solved.g_error, solved.e_error);
    let both = g_error + e_error;
    let round_off = 8.0 * f64::EPSILON;
    let relative = |error: f64, size: f64| if size == 0.0 { 0.0 } else { error / size };
    let mut displacement = (0.0_f64, 0.0_f64);
    let mut stress = (
        0.0_f64,
        given.inner_pressure.abs().max(given.outer_pressure.abs()),
    );
    let places = [
        (wall.inner, totals.inner_radius, solved.g, g_error),
        (
            wall.outer,
            totals.outer_radius,
            wall.outer_difference(solved.g),
            wall.outer_difference_slope(solved.g) * g_error,
        ),
    ];
    for (radius, deformed, d, d_error) in places {
        let local = fields.at_radius(radius)?;
        let u = radius * local.strains[1];
        displacement.0 = displacement.0.max(0.5 * deformed * (d_error + e_error));
        displacement.1 = displacement.1.max(u.abs());
        let law = wall.law.with_slopes(d, solved.e);
        let by = |by_d: f64, by_e: f64| by_d.abs() * d_error + by_e.abs() * e_error;
        let hoop = by(law.hoop.by_d, law.hoop.by_e);
        let axial = by(law.axial.by_d, law.axial.by_e);
        let lost = 4.0 * f64::EPSILON * wall.law.hardening(d, solved.e).loss;
        let round_off = lost * law.hoop.value.abs().max(law.axial.value.abs());
        let pressure = &solved.integrals.pressure;
        let radial = pressure.by_g.abs() * g_error + pressure.by_e.abs() * e_error;
        stress.0 = stress.0.max(radial + hoop.max(axial) + round_off);
        for s in [local.stress.xx, local.stress.yy, local.stress.zz] {
            stress.1 = stress.1.max(s.abs());
        }
    }
    let energy = &solved.integrals.energy;
    let energy_error = energy.by_g.abs() * g_error + energy.by_e.abs() * e_error;
    let force = &solved.integrals.reduced_force;
    let force_error = force.by_g.abs() * g_error
        + force.by_e.abs() * e_error
        + PI * both
            * (given.inner_pressure.abs() + given.outer_pressure.abs())
            * totals.outer_radius.powi(2);
    let force_size = force.size.max(totals.axial_force.abs());
    Ok(ErrorBound {
        displacement: round_off + relative(displacement.0, displacement.1),
        stress: round_off + relative(stress.0, stress.1),
        totals: round_off
            + both
                .max(relative(energy_error, energy.value))
                .max(relative(force_error, force_size)),
    })
}

impl ExactSolution for PressurisedTube {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        self.fields.at(point)
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

    fn description(&self, units: &UnitSystem) -> Description {
        self.words.description("tube", units)
    }

    fn load_stress(&self) -> f64 {
        self.words.inner_pressure.abs() + self.words.outer_pressure.abs()
    }

    fn method(&self) -> String {
        let limit = match self.limit {
            Limit::Maximum { inner_pressure, .. } => {
                format!(
                    "maximum of the inner pressure {}",
                    rounded(inner_pressure, 10)
                )
            }
            Limit::Asymptote { inner_pressure } => {
                format!(
                    "asymptote of the inner pressure {}",
                    rounded(inner_pressure, 10)
                )
            }
            Limit::None { .. } | Limit::NotFound { .. } => {
                self.limit.pressure().err().unwrap_or_default()
            }
        };
        format!(
            "equilibrium and end condition as Gauss integrals over the wall, solved by Newton's method on the branch \
             from the unloaded tube; stated bound on the relative error: displacement {:.1e}, stress {:.1e}, totals \
             {:.1e}; {limit}",
            self.bound.displacement, self.bound.stress, self.bound.totals
        )
    }
}

#[cfg(test)]
mod tests;
