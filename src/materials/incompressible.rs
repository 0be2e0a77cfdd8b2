//! What an incompressible isotropic law has to deliver, and exact derivatives of it.
//!
//! Notation: `lr, lt, lz` radial, hoop and axial stretch with `lr lt lz = 1`; `d = ln(lt/lr)`, `e = ln lz`, hence
//! `ln lt = (d - e)/2`, `ln lr = -(d + e)/2`; `T_i = l_i dW/dl_i`, the Cauchy stress but for a pressure.

use super::Parameter;
use num_dual::{DualNum, DualSVec64};

/// A double, or a dual number that carries derivatives.
pub trait Number: DualNum<Primitive = f64> + Copy {}
impl<T: DualNum<Primitive = f64> + Copy> Number for T {}

/// Stress differences and energy of a law, each without loss of digits at small strain.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Differences<D> {
    /// Tt - Tr, hoop minus radial Cauchy stress.
    pub hoop: D,
    /// Tz - Tr, axial minus radial Cauchy stress.
    pub axial: D,
    /// 2 Tz - Tt - Tr: of its own, because at a large bore it is small beside Tt, or large beside Tz.
    pub reduced: D,
    /// W, strain energy per reference volume.
    pub energy: D,
}

impl<D: Number> Differences<D> {
    /// Of a state that the material cannot reach.
    pub(super) fn none() -> Self {
        let nothing = D::from(f64::NAN);
        Self {
            hoop: nothing,
            axial: nothing,
            reduced: nothing,
            energy: nothing,
        }
    }
}

/// How fast the stiffness dW/dI1 of a law grows, for those who integrate it. Zero for laws of constant stiffness.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Hardening {
    /// |d ln(dW/dI1)/dd|: near a lock, one over the distance to it.
    pub by_d: f64,
    /// |d ln(dW/dI1)/d ln(I1-3)|: by how much a relative error of the strain is magnified in the stress.
    pub loss: f64,
}

/// A number with its derivatives by `d` and by `e`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Slope {
    pub value: f64,
    pub by_d: f64,
    pub by_e: f64,
}

/// One law, written once for plain and dual numbers. Beyond a locking stretch all three differences are NaN.
pub trait Formula: std::fmt::Debug + Send + Sync + 'static {
    /// As a suite writes it.
    const NAME: &'static str;
    /// W as text.
    const ENERGY: &'static str;
    /// Whether no direction of the material differs from another; false for fibres in the hoop-axial plane.
    const ISOTROPIC: bool = true;

    /// Whether no direction differs from another, where constants decide it.
    fn isotropic(&self) -> bool {
        Self::ISOTROPIC
    }

    /// W as text, where it is not the same for every set of constants.
    fn energy_text(&self) -> String {
        Self::ENERGY.to_string()
    }

    /// Values of `d` at which the law has a kink at this `e`.
    fn kinks(&self, _e: f64) -> Vec<f64> {
        Vec::new()
    }

    /// The difference form at `d = ln(lt/lr)`, `e = ln lz`.
    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D>;

    /// The plain energy W(l1, l2, l3), as printed in books: the check of the difference form.
    fn energy<D: Number>(&self, stretches: [D; 3]) -> D;

    /// How fast it stiffens at `(d, e)`; laws that lock or grow exponentially say so.
    fn hardening(&self, _d: f64, _e: f64) -> Hardening {
        Hardening::default()
    }

    /// Shear modulus of the unstrained material.
    fn shear_modulus(&self) -> f64;

    /// Parameters in the order of the catalogue.
    fn parameters(&self) -> Vec<Parameter>;
}

/// [`Formula`] as an object: what solutions hold.
pub trait IncompressibleLaw: std::fmt::Debug + Send + Sync + 'static {
    /// As a suite writes it.
    fn name(&self) -> &'static str;
    /// W as text.
    fn energy_text(&self) -> String;
    /// Whether no direction of the material differs from another.
    fn isotropic(&self) -> bool;
    /// Values of `d` at which the law has a kink at this `e`: where fibres begin to act.
    fn kinks(&self, e: f64) -> Vec<f64>;
    /// Stress differences and energy at `d = ln(lt/lr)`, `e = ln lz`.
    fn at(&self, d: f64, e: f64) -> Differences<f64>;
    /// The same with exact first derivatives.
    fn with_slopes(&self, d: f64, e: f64) -> Differences<Slope>;
    /// How fast it stiffens at `(d, e)`.
    fn hardening(&self, d: f64, e: f64) -> Hardening;
    /// Whether the greater of any two stretches has the greater stress here (Baker and Ericksen): without it the material
    /// is unstable. Equal stretches say nothing. `None` for laws with fibres, where it is no condition, and where
    /// there is no stress, beyond a lock.
    fn baker_ericksen(&self, d: f64, e: f64) -> Option<bool> {
        let form = self.at(d, e);
        let known = form.hoop.is_finite() && form.axial.is_finite();
        if !self.isotropic() || !known {
            return None;
        }
        // logarithms of the ratios of the stretches; those equal but for round-off are left out
        let nothing = 1e-12 * (d.abs() + e.abs());
        let pairs = [
            (d, form.hoop),
            (0.5 * (3.0 * e + d), form.axial),
            (0.5 * (3.0 * e - d), form.axial - form.hoop),
        ];
        let apart = pairs.iter().filter(|(ratio, _)| ratio.abs() > nothing);
        Some(
            apart
                .into_iter()
                .all(|(ratio, stress)| ratio * stress > 0.0),
        )
    }
    /// The plain energy and `l_i dW/dl_i`, by automatic differentiation of W(l1, l2, l3).
    fn plain(&self, stretches: [f64; 3]) -> (f64, [f64; 3]);
    /// Shear modulus of the unstrained material.
    fn shear_modulus(&self) -> f64;
    /// Parameters in the order of the catalogue.
    fn parameters(&self) -> Vec<Parameter>;
}

impl<F: Formula> IncompressibleLaw for F {
    fn name(&self) -> &'static str {
        F::NAME
    }

    fn energy_text(&self) -> String {
        Formula::energy_text(self)
    }

    fn isotropic(&self) -> bool {
        Formula::isotropic(self)
    }

    fn kinks(&self, e: f64) -> Vec<f64> {
        Formula::kinks(self, e)
    }

    fn at(&self, d: f64, e: f64) -> Differences<f64> {
        self.differences(d, e)
    }

    fn with_slopes(&self, d: f64, e: f64) -> Differences<Slope> {
        let d = DualSVec64::<2>::from_re(d).derivative(0);
        let e = DualSVec64::<2>::from_re(e).derivative(1);
        let found = self.differences(d, e);
        let slope = |x: DualSVec64<2>| {
            let eps = x
                .eps
                .unwrap_generic(nalgebra::Const::<2>, nalgebra::Const::<1>);
            Slope {
                value: x.re,
                by_d: eps[0],
                by_e: eps[1],
            }
        };
        Differences {
            hoop: slope(found.hoop),
            axial: slope(found.axial),
            reduced: slope(found.reduced),
            energy: slope(found.energy),
        }
    }

    fn plain(&self, stretches: [f64; 3]) -> (f64, [f64; 3]) {
        let mut duals = stretches.map(DualSVec64::<3>::from_re);
        for (i, dual) in duals.iter_mut().enumerate() {
            *dual = dual.derivative(i);
        }
        let w = Formula::energy(self, duals);
        let eps = w
            .eps
            .unwrap_generic(nalgebra::Const::<3>, nalgebra::Const::<1>);
        let stress = [0, 1, 2].map(|i| stretches[i] * eps[i]);
        (w.re, stress)
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        Formula::hardening(self, d, e)
    }

    fn shear_modulus(&self) -> f64 {
        Formula::shear_modulus(self)
    }

    fn parameters(&self) -> Vec<Parameter> {
        Formula::parameters(self)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::materials::samples::incompressible_laws;
    use crate::materials::{Gent, MooneyRivlin, TwoFibre};
    use proptest::prelude::*;

    proptest! {
        // The plain energy loses digits: stresses to eps/strain, W to eps/strain^2 (numerics.md 8). Red when
        // a factor, a sign or an exponent of a difference form is wrong (tried: 4 -> 2 in `hoop`, lz^2 W2 -> lz W2,
        // the sign of the I2 part of `axial`), or when W of the two forms differs.
        #[test]
        fn difference_form_is_the_plain_energy(d in -2.0..2.0_f64, e in -1.0..1.0_f64, log_scale in -4.0..0.0_f64) {
            let (d, e) = (d * 10f64.powf(log_scale), e * 10f64.powf(log_scale));
            let strain = d.abs().max(e.abs()).max(1e-9);
            let (er, et) = (-0.5 * (d + e), 0.5 * (d - e));
            for law in incompressible_laws() {
                let form = law.at(d, e);
                let (w, [tr, tt, tz]) = law.plain([er.exp(), et.exp(), e.exp()]);
                if !form.hoop.is_finite() {
                    prop_assert!(!form.axial.is_finite() && !form.reduced.is_finite() && !form.energy.is_finite());
                    prop_assert!(!w.is_finite(), "{law:?} locks where the plain energy does not");
                    continue;
                }
                // the plain energy's I1 - 3 carries the round-off of I1
                let i1 = (2.0 * er).exp() + (2.0 * et).exp() + (2.0 * e).exp();
                let lost = 1.0 + i1 * law.hardening(d, e).loss / (i1 - 3.0).max(1e-12);
                let size = tr.abs().max(tt.abs()).max(tz.abs()) * lost;
                prop_assert!((form.hoop - (tt - tr)).abs() < 2e-14 * size, "{law:?} hoop");
                prop_assert!((form.axial - (tz - tr)).abs() < 2e-14 * size, "{law:?} axial");
                prop_assert!((form.reduced - (2.0 * tz - tt - tr)).abs() < 4e-14 * size, "{law:?} reduced");
                prop_assert!((form.energy - w).abs() < 2e-14 * size, "{law:?} energy");
                prop_assert!(form.energy >= 0.0);
                let small = law.shear_modulus() * (0.5 * d * d + 1.5 * e * e);
                // taut fibres add to the modulus
                if strain < 1e-3 && small > 0.0 && law.isotropic() {
                    prop_assert!((form.energy / small - 1.0).abs() < 4.0 * strain, "{law:?} small-strain energy");
                }
            }
        }

        // dW/dd = (Tt - Tr)/2 and dW/de = (2Tz - Tt - Tr)/2, from ln lt = (d-e)/2, ln lr = -(d+e)/2, at any strain.
        // This holds the forms to round-off where the plain energy has no digits left.
        #[test]
        fn slopes_of_the_energy_are_the_stresses(d in -3.0..3.0_f64, e in -1.5..1.5_f64, log_scale in -9.0..0.0_f64) {
            let (d, e) = (d * 10f64.powf(log_scale), e * 10f64.powf(log_scale));
            for law in incompressible_laws() {
                let form = law.with_slopes(d, e);
                if !form.hoop.value.is_finite() {
                    continue;
                }
                let lost = 1.0 + law.hardening(d, e).loss;
                let size = form.hoop.value.abs().max(form.reduced.value.abs()) * lost;
                prop_assert!((2.0 * form.energy.by_d - form.hoop.value).abs() <= 1e-14 * size, "{law:?} d");
                prop_assert!((2.0 * form.energy.by_e - form.reduced.value).abs() <= 1e-14 * size, "{law:?} e");
                let plain = law.at(d, e);
                let same = |a: f64, b: f64| (a - b).abs() <= 1e-14 * a.abs().max(b.abs()) * lost;
                // fibres may pull against the matrix
                let small = !law.isotropic() && (plain.hoop - form.hoop.value).abs() <= 2e-15 * size;
                prop_assert!(small || same(plain.hoop, form.hoop.value), "{law:?} hoop");
                prop_assert!((plain.axial - form.axial.value).abs() <= 8e-15 * size);
                prop_assert!((plain.reduced - form.reduced.value).abs() <= 8e-15 * size);
                let twice = 2.0 * plain.axial - plain.hoop;
                prop_assert!((plain.reduced - twice).abs() <= 1.6e-14 * size.max(plain.axial.abs()));
                prop_assert!(same(plain.energy, form.energy.value));
            }
        }

        // What the ranges of the constants promise. Red when a range lets an unstable law through.
        #[test]
        fn admitted_laws_are_stable(d in -3.0..3.0_f64, e in -1.5..1.5_f64) {
            for law in incompressible_laws() {
                let answer = law.baker_ericksen(d, e);
                let expected = (law.isotropic() && law.at(d, e).hoop.is_finite()).then_some(true);
                prop_assert_eq!(answer, expected, "{:?}", law);
            }
        }
    }

    // c10 + l^2 c01 = 0.5 - 0.1 l^2 is negative above l = sqrt 5. Red when a pair is left out or a sign turned.
    #[test]
    fn loss_of_stability_is_told() {
        let law = MooneyRivlin {
            c10: 0.5,
            c01: -0.1,
        };
        let log = |l: f64| l.ln();
        for (stretch, stable) in [(1.1, true), (2.2, true), (2.3, false), (5.0, false)] {
            // the pair left is unequal: hoop and radial by a stretch of the axis, and so on
            let (big, small) = (log(stretch), 0.1);
            for [er, et, ez] in [
                [-0.5 * big - small, -0.5 * big + small, big],
                [-0.5 * big - small, big, -0.5 * big + small],
                [big, -0.5 * big - small, -0.5 * big + small],
            ] {
                assert_eq!(
                    law.baker_ericksen(et - er, ez),
                    Some(stable),
                    "{er} {et} {ez}"
                );
            }
        }
        assert_eq!(law.baker_ericksen(0.0, 0.0), Some(true));
        assert_eq!(Gent { mu: 1.0, jm: 1.0 }.baker_ericksen(4.0, 0.0), None);
        let fibres = TwoFibre {
            mu: 1.0,
            k1: 1.0,
            k2: 1.0,
            beta: 0.2,
        };
        assert_eq!(fibres.baker_ericksen(0.5, 0.1), None);
    }
}
