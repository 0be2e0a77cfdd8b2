//! Simple shear of an isotropic incompressible law: stresses of an amount of shear, and the amount of a stress.
//!
//! ```text
//! F = I + ka m (x) n: ka = 2 sinh(s/2), principal stretches exp(s/2), exp(-s/2), 1; W = sqrt(1 + ka^2/4)
//! tau = (T1 - T2)/(2 W)      s_mm - s_nn = tau ka      s_33 - s_nn = (2T3 - T1 - T2)/2 + tau ka/2
//! ```

use crate::exact::demands::last_where;
use crate::materials::IncompressibleLaw;
use crate::numerics::find_root;
use std::sync::Arc;

/// The search for a largest shear stress ends at this amount of shear.
const MOST: f64 = 1e4;

/// A law with the range of its first rising branch in shear.
#[derive(Debug, Clone)]
pub(super) struct ShearLaw {
    pub law: Arc<dyn IncompressibleLaw>,
    /// Largest amount of shear on it.
    pub most: f64,
    /// Whether the stress has its maximum there, and not a lock or the end of the search.
    pub softens: bool,
}

/// Stresses of one amount of shear, against the normal stress across the shearing surfaces.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(in crate::exact) struct Local {
    pub amount: f64,
    pub shear: f64,
    /// Along the motion minus across the surfaces.
    pub along: f64,
    /// In the third direction minus across the surfaces.
    pub third: f64,
    pub energy: f64,
    /// ln of the larger principal stretch.
    pub log: f64,
}

/// The stresses of an amount of shear of any sign.
pub(in crate::exact) fn simple_shear(law: &dyn IncompressibleLaw, amount: f64) -> Local {
    let split = 2.0 * (0.5 * amount).asinh();
    let law = law.at(split, 0.0);
    let shear = law.hoop / (2.0 * 1.0_f64.hypot(0.5 * amount));
    Local {
        amount,
        shear,
        along: shear * amount,
        third: 0.5 * (law.reduced + shear * amount),
        energy: law.energy,
        log: 0.5 * split,
    }
}

impl ShearLaw {
    pub fn new(law: Arc<dyn IncompressibleLaw>) -> Self {
        let mut found = Self {
            law,
            most: MOST,
            softens: false,
        };
        let mut last = 0.0;
        let mut amount: f64 = 1e-3;
        while amount < MOST {
            let slope = found.slope(amount);
            if !slope.is_finite() || !found.stress(amount).is_finite() {
                let holds = |k: f64| found.slope(k).is_finite() && found.stress(k).is_finite();
                found.most = last_where(last, amount, holds);
                break;
            }
            if slope <= 0.0 {
                found.softens = true;
                found.most = find_root(last, amount, |k| found.slope(k)).unwrap_or(last);
                break;
            }
            (last, amount) = (amount, 1.05 * amount);
        }
        found
    }

    /// tau at an amount of shear.
    pub fn stress(&self, amount: f64) -> f64 {
        let split = 2.0 * (0.5 * amount).asinh();
        self.law.at(split, 0.0).hoop / (2.0 * 1.0_f64.hypot(0.5 * amount))
    }

    /// dtau/dka: the split grows by 1/W.
    pub fn slope(&self, amount: f64) -> f64 {
        let split = 2.0 * (0.5 * amount).asinh();
        let width = 1.0_f64.hypot(0.5 * amount);
        let law = self.law.with_slopes(split, 0.0).hoop;
        (law.by_d - 0.25 * law.value * amount / width) / (2.0 * width * width)
    }

    pub fn local(&self, amount: f64) -> Local {
        simple_shear(self.law.as_ref(), amount)
    }

    /// Digits the law loses at an amount of shear.
    pub fn loss(&self, amount: f64) -> f64 {
        self.law.hardening(2.0 * (0.5 * amount).asinh(), 0.0).loss
    }

    /// The amount of a shear stress of any sign; `None` beyond the range.
    pub fn amount(&self, stress: f64) -> Option<f64> {
        let goal = stress.abs();
        if goal == 0.0 {
            return Some(0.0);
        }
        let (mut low, mut high) = (0.0_f64, self.most);
        if goal.is_nan() || goal > self.stress(high) {
            return None;
        }
        let mut amount = (goal / self.law.shear_modulus()).min(0.5 * high);
        for _ in 0..200 {
            let here = self.stress(amount);
            if here < goal {
                low = amount;
            } else {
                high = amount;
            }
            // Newton's method between the logarithms: one step for a straight law, few for exponential ones and locks
            let power = amount * self.slope(amount) / here;
            let mut next = amount * (((goal - here) / here).ln_1p() / power).exp();
            if !(next > low && next < high) {
                next = if low > 0.0 {
                    (low * high).sqrt()
                } else {
                    0.5 * high
                };
            }
            let step = (next - amount).abs();
            amount = next;
            if step <= 2.0 * f64::EPSILON * amount {
                break;
            }
        }
        Some(amount.copysign(stress))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::laws_tests;
    use crate::materials::{Demiray, MooneyRivlin};

    fn laws() -> Vec<ShearLaw> {
        let laws: Vec<Arc<dyn IncompressibleLaw>> = vec![
            Arc::new(MooneyRivlin { c10: 0.3, c01: 0.2 }),
            laws_tests::law_of(laws_tests::softening()),
            Arc::new(Demiray { c: 1.0, b: 0.7 }),
        ];
        laws.into_iter().map(ShearLaw::new).collect()
    }

    // tau = dW/dka of the plain energy; Mooney-Rivlin in closed form: tau = 2 (c10 + c01) ka, normal differences 2 (c10 + c01) ka^2
    // and 2 c01 ka^2. Red when a factor is wrong.
    #[test]
    fn stresses_are_the_derivative_of_the_energy() {
        for law in laws() {
            for k in [1e-3, 0.3, 1.0, 2.0] {
                let h = 1e-5 * k;
                let energy = |k: f64| law.local(k).energy;
                let slope = (energy(k + h) - energy(k - h)) / (2.0 * h);
                assert!((slope / law.stress(k) - 1.0).abs() < 1e-7, "{law:?} {k}");
                let slope = (law.stress(k + h) - law.stress(k - h)) / (2.0 * h);
                assert!(
                    (slope - law.slope(k)).abs() < 1e-7 * (1.0 + slope.abs()),
                    "{law:?} {k}"
                );
            }
        }
        let mooney = laws()[0].local(-0.7);
        for (got, exact) in [
            (mooney.shear, -0.7),
            (mooney.along, 0.49),
            (mooney.third, 0.4 * 0.49),
        ] {
            assert!((got - exact).abs() < 1e-15, "{got} {exact}");
        }
    }

    #[test]
    fn the_amount_of_a_stress_is_its_inverse() {
        for law in laws() {
            for k in [1e-9, 1e-3, 0.3, 1.0, 0.9 * law.most.min(5.0)] {
                for sign in [1.0, -1.0] {
                    let back = law.amount(law.stress(sign * k)).unwrap();
                    assert!(
                        (back / (sign * k) - 1.0).abs() < 2e-14,
                        "{law:?} {k} {back}"
                    );
                }
            }
            assert_eq!(law.amount(0.0), Some(0.0));
            assert_eq!(law.amount(f64::NAN), None);
        }
        let soft = &laws()[1];
        assert!(soft.softens && soft.amount(1.01 * soft.stress(soft.most)).is_none());
        assert!(soft.slope(soft.most).abs() < 1e-12);
    }
}
