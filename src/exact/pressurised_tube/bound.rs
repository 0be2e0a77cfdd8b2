//! The totals of a solved tube, and bounds on the errors of everything that is printed.

use super::problem::{Drive, TubeProblem};
use super::solve::Solved;
use super::wall::Wall;
use super::wall_fields::Fields;
use crate::exact::Ends;
use crate::exact::solution::{ErrorBound, Refusal};
use crate::exact::totals::TubeTotals;
use std::f64::consts::PI;

/// The axial force on the wall as the ends give it, else as the integral.
fn axial_force(problem: &TubeProblem, wall: &Wall, solved: &Solved, bore: f64) -> f64 {
    let caps =
        solved.difference * bore * bore - solved.outer * wall.area_factor() * (-solved.e).exp();
    match problem.ends {
        Ends::GeneralizedPlaneStrain { axial_force } => axial_force,
        Ends::Closed if problem.dead => {
            let (a, b) = (wall.inner, wall.outer);
            // p0 A^2 - q0 B^2
            let net = solved.stated - problem.outer_pressure;
            PI * (net * a * a - problem.outer_pressure * (b - a) * (b + a))
        }
        Ends::Closed => PI * caps,
        _ => solved.integrals.reduced_force.value + PI * caps,
    }
}

pub(super) fn totals_of(problem: &TubeProblem, wall: &Wall, solved: &Solved) -> TubeTotals {
    let (inner_radius, outer_radius) = wall.radii(solved.g, solved.e);
    let square = PI * wall.inner * wall.inner;
    TubeTotals {
        inner_radius: match problem.drive {
            Drive::InnerWallStretch(l) => wall.inner * l,
            _ => inner_radius,
        },
        outer_radius,
        axial_stretch: match problem.ends {
            Ends::FixedStretch { axial_stretch } => axial_stretch,
            _ => solved.e.exp(),
        },
        axial_force: axial_force(problem, wall, solved, inner_radius),
        strain_energy: solved.integrals.energy.value,
        enclosed_volume: match problem.drive {
            Drive::EnclosedVolume(v) => v,
            // a^2 lz = A^2 e^g
            _ => square * solved.g.exp(),
        },
        limit_pressure: solved.limit.pressure(),
    }
}

/// Largest error and largest size of a quantity so far.
#[derive(Default)]
struct Worst {
    error: f64,
    size: f64,
}

impl Worst {
    fn see(&mut self, error: f64, size: f64) {
        self.error = self.error.max(error);
        self.size = self.size.max(size.abs());
    }

    fn relative(&self) -> f64 {
        relative(self.error, self.size)
    }
}

fn relative(error: f64, size: f64) -> f64 {
    if size == 0.0 { 0.0 } else { error / size }
}

/// Relative bounds from the errors of g and e, through the derivatives of what is printed.
pub(super) fn bound_of(
    problem: &TubeProblem,
    wall: &Wall,
    fields: &Fields,
    solved: &Solved,
    totals: &TubeTotals,
) -> Result<ErrorBound, Refusal> {
    let (g, e) = (solved.g, solved.e);
    let (g_error, e_error) = (solved.g_error, solved.e_error);
    let round_off = 8.0 * f64::EPSILON;
    let through = |by_g: f64, by_e: f64| by_g.abs() * g_error + by_e.abs() * e_error;
    let inner = solved.difference + solved.outer;
    let pressure = &solved.integrals.pressure;
    let pressure_error = through(pressure.by_g, pressure.by_e);
    let (mut displacement, mut stress) = (Worst::default(), Worst::default());
    stress.see(0.0, inner);
    stress.see(0.0, solved.outer);
    for segment in &wall.segments {
        for (x, radius) in [(segment.from, segment.inner), (segment.to, segment.outer)] {
            let swell = (2.0 * x).exp_m1();
            let (d, stretch) = super::wall::local(swell, g);
            let d_by_g = g.exp() / (1.0 + swell) / stretch;
            let local = fields.in_segment(segment, radius)?;
            let u = radius * local.strains[1];
            let moved = 0.5 * (radius + u) * (d_by_g * g_error + e_error);
            displacement.see(moved, u);
            let factor = segment.factor.at(x, wall.inner);
            let law = segment.law.with_slopes(d, e);
            let hoop = through(law.hoop.by_d * d_by_g, law.hoop.by_e);
            let axial = through(law.axial.by_d * d_by_g, law.axial.by_e);
            let lost = segment.hardening(x, g, e).loss + segment.factor.loss(x);
            let size = law.hoop.value.abs().max(law.axial.value.abs());
            // the last: srr where ln(B/R) is off by its own round-off
            let own = 4.0 * lost * size + wall.span * (law.hoop.value / stretch).abs();
            let error = factor * (hoop.max(axial) + f64::EPSILON * own);
            for s in [local.stress.xx, local.stress.yy, local.stress.zz] {
                stress.see(pressure_error + error, s);
            }
        }
    }
    let energy = &solved.integrals.energy;
    let force = &solved.integrals.reduced_force;
    let force_error = through(force.by_g, force.by_e)
        + PI * (g_error + e_error)
            * (inner.abs() + solved.outer.abs())
            * totals.outer_radius.powi(2);
    let mut worst = (g_error + e_error)
        .max(relative(through(energy.by_g, energy.by_e), energy.value))
        .max(relative(
            force_error,
            force.size.max(totals.axial_force.abs()),
        ));
    if !matches!(problem.drive, Drive::InnerPressure(_)) {
        let error = pressure_error + solved.pressure_error;
        worst = worst.max(relative(error, pressure.size.max(solved.outer.abs())));
    }
    Ok(ErrorBound {
        displacement: round_off + displacement.relative(),
        stress: round_off + fields.unresolved + stress.relative(),
        totals: round_off + worst,
    })
}
