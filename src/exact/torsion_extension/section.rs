//! The stresses of an extended and twisted cylinder at one radius, and their integrals over the section.
//!
//! Motion `r = r(R), theta = Theta + psi Z, z = lz Z`; logarithms throughout, so that a twist of 1e-6 keeps its digits:
//! ```text
//! e = ln lz;  g = ln(lt/lr) at the bore (0 when solid);  ln(lt/lr) = log1p(expm1(g) A^2/R^2)
//! et = (ln(lt/lr) - e)/2    er = -(ln(lt/lr) + e)/2    ga = r psi    P = lt lz = 1/lr    del = et - e
//! principal stretches in (theta, z): l1 l2 = P, (l1 - l2)^2 = (lt - lz)^2 + ga^2  =>  ln(l1/l2) = 2 asinh(hypot(sinh(del/2), ga/(2 sqrt P)))
//! c = (T1 - T2)/(l1^2 - l2^2)         w = lt^2 + ga^2 - lz^2 = 2 P sinh(del) + ga^2
//! stz = c ga lz     stt - srr = (T1 + T2)/2 - Tr + c w/2     szz - srr = (T1 + T2)/2 - Tr - c w/2
//! ```
//! The law is asked with 1, 2, r in the place of its hoop, radial and axial direction: any three axes will do for an isotropic one.
//! ```text
//! Pi - Po = int (stt-srr) dr/r       N = pi int (2(szz-srr) - (stt-srr)) r dr + pi (Pi a^2 - Po b^2)
//! M = 2 pi int stz r^2 dr            energy = 2 pi int W R dR        r dr = R dR/lz
//! ```

use crate::materials::IncompressibleLaw;
use crate::numerics::running_mean::panels;
use crate::numerics::{CompensatedSum, GaussRule};
use std::f64::consts::PI;
use std::sync::Arc;

/// Gauss points a panel, and for the estimate of their error.
pub(super) const POINTS: usize = 16;
pub(super) const CHECK_POINTS: usize = 24;

/// The section before loading; `inner` = 0 is solid.
#[derive(Debug, Clone)]
pub(super) struct Section {
    pub inner: f64,
    pub outer: f64,
    pub law: Arc<dyn IncompressibleLaw>,
}

/// What fixes the motion.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Motion {
    pub g: f64,
    pub e: f64,
    /// Angle per reference length.
    pub twist: f64,
}

/// One radius.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Local {
    /// Deformed radius, ln of the hoop and of the radial stretch.
    pub radius: f64,
    pub hoop_log: f64,
    pub radial_log: f64,
    /// r psi.
    pub shear: f64,
    /// ln(l1/l2).
    pub split: f64,
    /// stt - srr, szz - srr, stz.
    pub hoop: f64,
    pub axial: f64,
    pub turning: f64,
    pub energy: f64,
}

/// A number with the sum of its terms' sizes.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Sized {
    pub value: f64,
    pub size: f64,
}

/// The integrals of one motion.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Integrals {
    /// Pi - Po; of no meaning when solid.
    pub drop: Sized,
    /// N without the walls' pressures.
    pub force: Sized,
    pub torque: Sized,
    pub energy: Sized,
}

impl Section {
    pub fn solid(&self) -> bool {
        self.inner == 0.0
    }

    /// (B-A)(B+A).
    pub fn area_factor(&self) -> f64 {
        (self.outer - self.inner) * (self.outer + self.inner)
    }

    /// The coordinate of integration: ln(R/A), and (R/B)^2 when solid, in which all is smooth.
    pub fn coordinate(&self, radius: f64) -> f64 {
        if self.solid() {
            (radius / self.outer).powi(2)
        } else {
            ((radius - self.inner) / self.inner).ln_1p()
        }
    }

    /// The coordinate less its value at the outer wall, with all digits next to it.
    pub fn off_outer(&self, radius: f64) -> f64 {
        let off = (radius - self.outer) / self.outer;
        if self.solid() {
            off * ((radius + self.outer) / self.outer)
        } else {
            off.ln_1p()
        }
    }

    /// Its values at the inner and the outer end.
    pub fn span(&self) -> (f64, f64) {
        let end = if self.solid() {
            1.0
        } else {
            self.coordinate(self.outer)
        };
        (0.0, end)
    }

    /// Reference radius and d(R^2)/d(coordinate) at a coordinate.
    fn square(&self, t: f64) -> (f64, f64) {
        if self.solid() {
            (self.outer * t.max(0.0).sqrt(), self.outer * self.outer)
        } else {
            let radius = self.inner * t.exp();
            (radius, 2.0 * radius * radius)
        }
    }

    /// ln(lt/lr) at a coordinate.
    fn difference(&self, motion: &Motion, t: f64) -> f64 {
        if self.solid() {
            return 0.0;
        }
        let s = (2.0 * t).exp();
        let x = motion.g.exp_m1() / s;
        if x > -0.5 {
            x.ln_1p()
        } else {
            // near the closing of the bore
            (((2.0 * t).exp_m1() + motion.g.exp()) / s).ln()
        }
    }

    pub fn local(&self, motion: &Motion, t: f64) -> Local {
        let d = self.difference(motion, t);
        let e = motion.e;
        let (hoop_log, radial_log) = (0.5 * (d - e), -0.5 * (d + e));
        let radius = self.square(t).0 * hoop_log.exp();
        let shear = radius * motion.twist;
        let product = (-radial_log).exp();
        let apart = hoop_log - e;
        let split = 2.0
            * (0.5 * apart)
                .sinh()
                .hypot(0.5 * shear / product.sqrt())
                .asinh();
        let law = self.law.at(split, radial_log);
        let c = if split == 0.0 {
            self.law.with_slopes(0.0, radial_log).hoop.by_d / (2.0 * product)
        } else {
            law.hoop / (2.0 * product * split.sinh())
        };
        let lean = 0.5 * c * (2.0 * product * apart.sinh() + shear * shear);
        let mean = -0.5 * law.reduced;
        Local {
            radius,
            hoop_log,
            radial_log,
            shear,
            split,
            hoop: mean + lean,
            axial: mean - lean,
            turning: c * shear * e.exp(),
            energy: law.energy,
        }
    }

    /// d srr/d(coordinate): (stt - srr) dln r/dt.
    pub fn rise(&self, motion: &Motion, t: f64) -> f64 {
        let local = self.local(motion, t);
        if self.solid() {
            0.5 * local.hoop / t
        } else {
            // dr/r = lr dR/(R lt)
            local.hoop * (local.radial_log - local.hoop_log).exp()
        }
    }

    /// Panels on which everything is smooth.
    pub fn panels(&self, motion: &Motion) -> Vec<f64> {
        let mut f = |t: f64| {
            let local = self.local(motion, t);
            (local.energy + local.turning * local.shear) * self.square(t).1
        };
        panels(self.span(), &mut f)
    }

    pub fn integrals(&self, motion: &Motion, ends: &[f64], points: usize) -> Integrals {
        let rule = GaussRule::of(points);
        let mut sums = [CompensatedSum::new(); 4];
        let mut sizes = [0.0; 4];
        for panel in ends.windows(2) {
            for (t, weight) in rule.on(panel[0], panel[1]) {
                let local = self.local(motion, t);
                let squares = self.square(t).1;
                let lost = 1.0 + 3.0 * self.law.hardening(local.split, local.radial_log).loss;
                let rise = if self.solid() {
                    0.0
                } else {
                    self.rise(motion, t)
                };
                let pull = 2.0 * local.axial - local.hoop;
                let terms = [
                    (rise, local.hoop.abs() + local.axial.abs()),
                    (
                        pull * squares,
                        (local.hoop.abs() + local.axial.abs()) * squares,
                    ),
                    (local.turning * local.radius * squares, 0.0),
                    (local.energy * squares, 0.0),
                ];
                for (i, (value, size)) in terms.into_iter().enumerate() {
                    sums[i].add(weight * value);
                    sizes[i] += (weight * size.max(value.abs())).abs() * lost;
                }
            }
        }
        let down = (-motion.e).exp();
        let sized = |i: usize, factor: f64| Sized {
            value: sums[i].value() * factor,
            size: sizes[i] * factor.abs(),
        };
        Integrals {
            drop: sized(0, 1.0),
            force: sized(1, 0.5 * PI * down),
            torque: sized(2, PI * down),
            energy: sized(3, PI),
        }
    }

    /// Deformed inner and outer radius.
    pub fn radii(&self, motion: &Motion) -> (f64, f64) {
        let (inner, outer) = self.span();
        let at = |t: f64, radius: f64| radius * self.local(motion, t).hoop_log.exp();
        (at(inner, self.inner), at(outer, self.outer))
    }

    /// N with the walls' pressures.
    pub fn axial_force(&self, motion: &Motion, all: &Integrals, walls: (f64, f64)) -> f64 {
        let down = (-motion.e).exp();
        let bore = self.inner * self.inner * (motion.g - motion.e).exp();
        let ring = walls.1 * self.area_factor() * down;
        all.force.value + PI * ((walls.0 - walls.1) * bore - ring)
    }
}
