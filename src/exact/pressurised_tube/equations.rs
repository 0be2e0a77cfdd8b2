//! The two equations of the tube and its energy, as integrals over the wall.
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
//! where F and (Pi-Po) a^2 cancel. At small strain the first has the smaller terms.
//! ```text
//! ```
//! Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173 (from memory), in the variables of numerics.md 1.

use crate::materials::{IncompressibleLaw, Slope};
use crate::numerics::{CompensatedSum, GaussRule};
use std::f64::consts::PI;
use std::sync::Arc;

/// Gauss points a panel for the solution, and for the estimate of its error.
pub(super) const POINTS: usize = 16;
pub(super) const CHECK_POINTS: usize = 24;

/// Widest panel in X: the integrands are analytic up to |Im X| = pi/2, so that 16 points miss 1e-25 of them.
const PANEL: f64 = 1.0;

/// Width of a graded panel in units of the law's own length.
const GRADE: f64 = 2.0;

/// More graded panels than any law needs: 60/GRADE and the panels of the wall.
const MOST_PANELS: usize = 400;

/// A number with its derivatives by `g` and `e`, and the sum of the sizes of its terms.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Graded {
    pub value: f64,
    pub by_g: f64,
    pub by_e: f64,
    /// Sum of |weight f|, each times the digits its law loses: what round-off is measured against.
    pub size: f64,
}

/// The three integrals at one `(g, e)`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Integrals {
    /// Pi - Po.
    pub pressure: Graded,
    /// F.
    pub reduced_force: Graded,
    /// N + pi Po (B-A)(B+A)/lz, by the second form.
    pub wall_force: Graded,
    /// Strain energy per unit reference length.
    pub energy: Graded,
}

/// The wall in its reference state, with its law.
#[derive(Debug, Clone)]
pub(super) struct Wall {
    pub inner: f64,
    pub outer: f64,
    /// H = ln(B/A).
    pub span: f64,
    pub law: Arc<dyn IncompressibleLaw>,
}

/// `d = ln(lt/lr)` and `1 + k/s` at a place where s = (R/A)^2, from `swell = s - 1` and `g`.
fn local(swell: f64, g: f64) -> (f64, f64) {
    let (s, k) = (1.0 + swell, g.exp_m1());
    let x = k / s;
    if x > -0.5 {
        (x.ln_1p(), 1.0 + x)
    } else {
        // near the closing of the bore 1 + k/s must not be formed by subtraction
        let stretch = (swell + g.exp()) / s;
        (stretch.ln(), stretch)
    }
}

impl Wall {
    /// From reference radii, inner below outer.
    pub fn new(inner: f64, outer: f64, law: Arc<dyn IncompressibleLaw>) -> Self {
        let span = ((outer - inner) / inner).ln_1p();
        Self {
            inner,
            outer,
            span,
            law,
        }
    }

    /// (B-A)(B+A).
    pub fn area_factor(&self) -> f64 {
        (self.outer - self.inner) * (self.outer + self.inner)
    }

    /// (B/A)^2 - 1.
    fn outer_swell(&self) -> f64 {
        self.area_factor() / (self.inner * self.inner)
    }

    /// `d` at the outer wall.
    pub fn outer_difference(&self, g: f64) -> f64 {
        local(self.outer_swell(), g).0
    }

    /// d(d)/dg at the outer wall.
    pub fn outer_difference_slope(&self, g: f64) -> f64 {
        g.exp() / (self.outer_swell() + g.exp())
    }

    /// Deformed inner and outer radius.
    pub fn radii(&self, g: f64, e: f64) -> (f64, f64) {
        let outer = self.outer_difference(g);
        (
            self.inner * (0.5 * (g - e)).exp(),
            self.outer * (0.5 * (outer - e)).exp(),
        )
    }

    /// Ends of the panels in X, graded where the law stiffens; then as [`Self::plain_panels`].
    fn panels(&self, g: f64, e: f64) -> Vec<f64> {
        let mut ends = self.plain_panels(g);
        if self.law.hardening(g, e).by_d == 0.0 {
            return ends;
        }
        // widths in proportion to the distance from the lock (or to the e-folding of an exponential): the ratio 2 leaves
        // 3.7^-32 of a pole. Once the stiffness fell by e^60 the rest of the wall counts for nothing.
        let (mut graded, mut x, mut fall) = (vec![0.0], 0.0_f64, 0.0);
        while fall < 60.0 && graded.len() < MOST_PANELS {
            let swell = (2.0 * x).exp_m1();
            let (d, stretch) = local(swell, g);
            let d_by_x = 2.0 * (g.exp_m1() / (1.0 + swell)).abs() / stretch;
            let pace = self.law.hardening(d, e).by_d * d_by_x;
            let end = ends.iter().copied().find(|&end| end > x);
            let Some(end) = end.filter(|_| pace.is_finite()) else {
                break;
            };
            let width = GRADE / pace;
            let next = if x + 1.1 * width >= end {
                end
            } else {
                x + width
            };
            fall += pace * (next - x);
            graded.push(next);
            x = next;
        }
        ends.retain(|&end| end > x);
        graded.extend(ends);
        graded
    }

    /// Ends of the panels in X for a law of constant stiffness. For k < 0 the integrand has a pole at X0 = ln(-k)/2 just inside the bore, and the
    /// panels grow with the distance from it.
    fn plain_panels(&self, g: f64) -> Vec<f64> {
        let mut ends = vec![0.0];
        if g >= 0.0 {
            let n = (self.span / PANEL).ceil().max(1.0);
            ends.extend((1..=n as usize).map(|i| self.span * (i as f64 / n)));
            return ends;
        }
        let pole = 0.5 * (-g.exp()).ln_1p();
        let mut x = 0.0;
        while x < self.span {
            let width = (1.5 * (x - pole)).min(PANEL);
            x = if x + 1.1 * width >= self.span {
                self.span
            } else {
                x + width
            };
            ends.push(x);
        }
        ends
    }

    /// All integrals at `(g, e)` with `points` Gauss points a panel. Not finite where the law is not.
    pub fn integrate(&self, g: f64, e: f64, points: usize) -> Integrals {
        let rule = GaussRule::of(points);
        let lz = e.exp();
        let bore = g.exp();
        let mut sums = [CompensatedSum::new(); 4];
        let mut slopes = [(0.0, 0.0, 0.0); 4];
        for panel in self.panels(g, e).windows(2) {
            for (x, weight) in rule.on(panel[0], panel[1]) {
                let swell = (2.0 * x).exp_m1();
                let s = 1.0 + swell;
                let (d, stretch) = local(swell, g);
                // d(k/s)/dg, and from it d(d)/dg
                let stretch_by_g = bore / s;
                let d_by_g = stretch_by_g / stretch;
                let law = self.law.with_slopes(d, e);
                let lost = 1.0 + 3.0 * self.law.hardening(d, e).loss;
                let f = law.hoop.value / stretch;
                let f_by_g = (law.hoop.by_d / stretch - f) * d_by_g;
                let f_by_e = law.hoop.by_e / stretch;
                let times = |x: Slope, factor: f64| {
                    (x.value * factor, x.by_d * d_by_g * factor, x.by_e * factor)
                };
                let axial = times(law.axial, 2.0 * s);
                let terms = [
                    (f, f_by_g, f_by_e),
                    times(law.reduced, s),
                    times(law.energy, s),
                    (
                        axial.0 - f * swell,
                        axial.1 - f_by_g * swell,
                        axial.2 - f_by_e * swell,
                    ),
                ];
                for ((sum, slope), (value, by_g, by_e)) in
                    sums.iter_mut().zip(&mut slopes).zip(terms)
                {
                    sum.add(weight * value);
                    slope.0 += weight * by_g;
                    slope.1 += weight * by_e;
                    slope.2 += weight * value.abs() * lost;
                }
            }
        }
        let graded = |i: usize| Graded {
            value: sums[i].value(),
            by_g: slopes[i].0,
            by_e: slopes[i].1,
            size: slopes[i].2,
        };
        let square = self.inner * self.inner;
        // 1/lz depends on e
        let force = |i: usize| {
            let force = graded(i).times(PI * square / lz);
            Graded {
                by_e: force.by_e - force.value,
                ..force
            }
        };
        Integrals {
            pressure: graded(0),
            reduced_force: force(1),
            wall_force: force(3),
            energy: graded(2).times(2.0 * PI * square),
        }
    }
}

impl Graded {
    /// Times a constant.
    fn times(self, factor: f64) -> Self {
        Self {
            value: self.value * factor,
            by_g: self.by_g * factor,
            by_e: self.by_e * factor,
            size: self.size * factor.abs(),
        }
    }
}
