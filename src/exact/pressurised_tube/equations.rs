//! The integrals of the tube's two equations and its energy over the wall.
//!
//! ```text
//! unknowns g = ln(lt/lr) at the bore, e = ln lz;      X = ln(R/A), H = log1p((B-A)/A), s = (R/A)^2
//! k = expm1(g) = lz (a/A)^2 - 1                        d(X) = ln(lt/lr) = log1p(k/s)
//! Pi - Po = int_0^H (Tt-Tr)/(1+k/s) dX                 equilibrium d srr/dr = (stt - srr)/r
//! F = (pi A^2/lz) int_0^H (2Tz-Tt-Tr) s dX             reduced axial force, pi int (2szz-srr-stt) r dr
//! energy = 2 pi A^2 int_0^H W s dX                     per unit reference length
//! N = F + pi [(Pi-Po) a^2 - Po (B-A)(B+A)/lz]          net axial force on the wall, for g < 1.5
//!   = (pi A^2/lz) int_0^H [2 (Tz-Tr) s - (Tt-Tr)/(1+k/s) (s-1)] dX - pi Po (B-A)(B+A)/lz     beyond
//! ```
//! The second form of N is the integral of szz with srr integrated by parts: nothing in it grows with the bore,
//! where F and (Pi-Po) a^2 cancel. At small strain the first has the smaller terms. Layers and gradings only change the
//! integrands from panel to panel: d(X) is the kinematics of the whole wall.
//!
//! Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173 (from memory), in the variables of numerics.md 1.

use super::term::Term;
use super::wall::{Wall, local};
use crate::materials::Slope;
use crate::numerics::{CompensatedSum, GaussRule};
use std::f64::consts::PI;

/// Gauss points a panel for the solution, and for the estimate of its error.
pub(super) const POINTS: usize = 16;
pub(super) const CHECK_POINTS: usize = 24;

/// The integrals at one `(g, e)`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Integrals {
    /// Pi - Po.
    pub pressure: Term,
    /// F.
    pub reduced_force: Term,
    /// N + pi Po (B-A)(B+A)/lz, by the second form.
    pub wall_force: Term,
    /// Strain energy per unit reference length.
    pub energy: Term,
}

/// A compensated value with plain sums of its slopes and sizes.
#[derive(Default)]
struct Sum {
    value: CompensatedSum,
    rest: Term,
}

impl Sum {
    fn add(&mut self, weight: f64, (value, by_g, by_e): (f64, f64, f64), lost: f64) {
        self.value.add(weight * value);
        self.rest.by_g += weight * by_g;
        self.rest.by_e += weight * by_e;
        self.rest.size += weight * value.abs() * lost;
    }

    fn term(&self) -> Term {
        Term {
            value: self.value.value(),
            ..self.rest
        }
    }
}

impl Wall {
    /// All integrals at `(g, e)` with `points` Gauss points a panel. Not finite where a law is not.
    pub fn integrate(&self, g: f64, e: f64, points: usize) -> Integrals {
        let rule = GaussRule::of(points);
        let bore = g.exp();
        let mut sums: [Sum; 4] = Default::default();
        for panel in self.panels(g, e) {
            let segment = &self.segments[panel.segment];
            for (x, weight) in rule.on(panel.from, panel.to) {
                let swell = (2.0 * x).exp_m1();
                let s = 1.0 + swell;
                let (d, stretch) = local(swell, g);
                // d(k/s)/dg, and from it d(d)/dg
                let d_by_g = bore / s / stretch;
                let weight = weight * segment.factor.at(x, self.inner);
                let law = segment.law.with_slopes(d, e);
                let lost = 1.0 + 3.0 * segment.law.hardening(d, e).loss + segment.factor.loss(x);
                let f = law.hoop.value / stretch;
                let f_by_g = (law.hoop.by_d / stretch - f) * d_by_g;
                let f_by_e = law.hoop.by_e / stretch;
                let times = |x: Slope, factor: f64| {
                    (x.value * factor, x.by_d * d_by_g * factor, x.by_e * factor)
                };
                let axial = times(law.axial, 2.0 * s);
                sums[0].add(weight, (f, f_by_g, f_by_e), lost);
                sums[1].add(weight, times(law.reduced, s), lost);
                sums[2].add(weight, times(law.energy, s), lost);
                let wall = (
                    axial.0 - f * swell,
                    axial.1 - f_by_g * swell,
                    axial.2 - f_by_e * swell,
                );
                sums[3].add(weight, wall, lost);
            }
        }
        let [pressure, reduced, energy, wall] = sums.map(|s| s.term());
        let square = PI * self.inner * self.inner;
        // 1/lz depends on e
        let force = |sum: Term| {
            let force = sum.times(square / e.exp());
            Term {
                by_e: force.by_e - force.value,
                ..force
            }
        };
        Integrals {
            pressure,
            reduced_force: force(reduced),
            wall_force: force(wall),
            energy: energy.times(2.0 * square),
        }
    }
}
