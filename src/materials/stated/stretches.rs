//! The typed energy of stretches, `w(d, e) = W(lr, lt, lz)` with W the same for every order of them.
//!
//! `Tt - Tr = 2 dw/dd` is a difference of nearly equal numbers at small strain: as it stands it has eps/strain of itself. But
//! it vanishes at `d = 0`, so it is also
//! ```text
//! Tt - Tr = 2 d int_0^1 w_dd(t d, e) dt        W = int_0^1 (1 - t) d2/dt2 w(t d, t e) dt
//! Tz - Tr, Tz - Tt: the same with the stretches in another order
//! ```
//! of second derivatives that do not cancel. These are taken at small strain where two Gauss rules agree.

use super::super::incompressible::{Differences, Formula, Hardening, IncompressibleLaw, Number};
use super::super::invariants::Invariants;
use super::{SMALL, Stated, VALUES, VARIABLES, settled};
use crate::numerics::GaussRule;
use num_dual::{Dual, Dual2, Dual64};

/// Largest loss that is told: beyond 500 a law counts as locked.
const MOST_LOSS: f64 = 400.0;

impl Stated {
    /// w(d, e).
    pub(super) fn of_logarithms<D: Number>(&self, d: D, e: D) -> D {
        let mut values = [D::from(0.0); VALUES];
        let logarithms = [(d + e) * -0.5, (d - e) * 0.5, e];
        for (k, logarithm) in logarithms.into_iter().enumerate() {
            values[3 + k] = logarithm.exp();
        }
        if self.has(0) || self.has(1) {
            let i = Invariants::at(d, e);
            for (k, difference) in [i.i1, i.i2].into_iter().enumerate() {
                values[k] = difference + 3.0;
                values[k + VARIABLES.len()] = difference;
            }
        }
        self.energy.evaluate(&values)
    }

    /// T_b - T_a, with `d = ln(l_b/l_a)` and `e` the logarithm of the third stretch.
    fn difference<D: Number>(&self, d: D, e: D) -> D {
        let integral = |points: usize| {
            let pairs = GaussRule::of(points).on(0.0, 1.0);
            let mean = pairs.fold(D::from(0.0), |sum, (t, weight)| {
                let at = Dual2::new(d * t, D::from(1.0), D::from(0.0));
                sum + self.of_logarithms(at, Dual2::from_re(e)).v2 * weight
            });
            mean * d * 2.0
        };
        settled(d.re().abs(), integral).unwrap_or_else(|| {
            let at = Dual::from_re(d).derivative();
            self.of_logarithms(at, Dual::from_re(e)).eps * 2.0
        })
    }

    fn stored_of_stretches<D: Number>(&self, d: D, e: D) -> D {
        let integral = |points: usize| {
            let pairs = GaussRule::of(points).on(0.0, 1.0);
            pairs.fold(D::from(0.0), |sum, (t, weight)| {
                let (d, e) = (
                    Dual2::new(d * t, d, D::from(0.0)),
                    Dual2::new(e * t, e, D::from(0.0)),
                );
                sum + self.of_logarithms(d, e).v2 * ((1.0 - t) * weight)
            })
        };
        let strain = d.re().abs().max(e.re().abs());
        settled(strain, integral).unwrap_or_else(|| self.of_logarithms(d, e))
    }

    pub(super) fn of_stretches<D: Number>(&self, d: D, e: D) -> Differences<D> {
        // the pairs (z, r) and (z, t)
        let axial = self.difference((e * 3.0 + d) * 0.5, (d - e) * 0.5);
        let other = self.difference((e * 3.0 - d) * 0.5, (d + e) * -0.5);
        Differences {
            hoop: self.difference(d, e),
            axial,
            reduced: axial + other,
            energy: self.stored_of_stretches(d, e),
        }
    }

    /// The growth of (Tt - Tr)/sinh d, which is constant for laws of constant stiffness; beyond small strain what the
    /// subtraction loses.
    pub(super) fn hardening_of_stretches(&self, d: f64, e: f64) -> Hardening {
        let away = SMALL.max(d.abs());
        let found = self.difference(Dual64::from(away).derivative(), Dual64::from(e));
        let growth = (found.eps / found.re - 1.0 / away.tanh()).abs();
        let by_d = if growth < 1e-9 { 0.0 } else { growth };
        let lost = if d.abs() < SMALL {
            0.0
        } else {
            let (lr, lt) = ((-0.5 * (d + e)).exp(), (0.5 * (d - e)).exp());
            let (_, [tr, tt, _]) = self.plain([lr, lt, e.exp()]);
            tr.abs().max(tt.abs()) / found.re.abs()
        };
        Hardening {
            by_d,
            loss: by_d * d.abs() + lost.min(MOST_LOSS),
        }
    }

    /// Second derivative of w by d at rest, the shear modulus.
    pub(super) fn stiffness_at_rest(&self) -> f64 {
        let d = Dual2::from_re(0.0).derivative();
        self.of_logarithms(d, Dual2::from_re(0.0)).v2
    }

    /// Two orders of the same stretches for which W is not the same, with its values.
    pub(super) fn asymmetry(&self) -> Option<[([f64; 3], f64); 2]> {
        const STATES: [[f64; 2]; 5] = [
            [1.01, 0.995],
            [1.1, 0.95],
            [1.3, 0.9],
            [0.7, 1.2],
            [2.0, 0.8],
        ];
        for [a, b] in STATES {
            let c = 1.0 / (a * b);
            let first = ([a, b, c], Formula::energy(self, [a, b, c]));
            for order in [[b, a, c], [a, c, b], [c, b, a], [b, c, a], [c, a, b]] {
                let other = (order, Formula::energy(self, order));
                let size = first.1.abs().max(other.1.abs());
                let apart = (first.1 - other.1).abs();
                let finite = first.1.is_finite() && other.1.is_finite();
                let same = !finite || apart <= 1e-9 * size + 1e-12 * self.modulus.abs();
                if !same || first.1.is_finite() != other.1.is_finite() {
                    return Some([first, other]);
                }
            }
        }
        None
    }
}
