//! Two families of fibres in a soft matrix, `W = mu/2 (I1-3) + k1/(2 k2) sum_2 (exp(k2 <I4-1>^2) - 1)`.
//!
//! Holzapfel, Gasser & Ogden, J. Elast. 61 (2000) 1 (from memory). The fibres lie in the hoop-axial plane at +-beta from
//! the **hoop** direction, I4 = lt^2 cos^2 beta + lz^2 sin^2 beta for both families; they carry tension only, `<x>` is x or
//! zero. With E = I4 - 1 > 0 and A = k1 E exp(k2 E^2), beside the neo-Hookean matrix:
//! ```text
//! E = expm1(2 et) cos^2 + expm1(2 e) sin^2        Tt: + 4 lt^2 cos^2 A      Tz: + 4 lz^2 sin^2 A
//! W: + k1/k2 expm1(k2 E^2)
//! ```

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::incompressible::{Differences, Formula, Hardening, Number};
use super::invariants::Invariants;
use super::{Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;
use std::f64::consts::FRAC_PI_2;

/// The law with its numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TwoFibre {
    /// Shear modulus of the matrix, positive. Unit: stress.
    pub mu: f64,
    /// Stiffness of the fibres, zero or positive. Unit: stress.
    pub k1: f64,
    /// Rate of stiffening of the fibres, positive.
    pub k2: f64,
    /// Angle between a fibre and the hoop direction, up to a right angle. Unit: rad.
    pub beta: f64,
}

pub(super) const ENTRY: Entry = Entry {
    name: TwoFibre::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[
        ParameterEntry::number(
            "mu",
            Dimension::Stress,
            "shear modulus of the matrix",
            "mu > 0",
        ),
        ParameterEntry::number(
            "k1",
            Dimension::Stress,
            "stiffness of the fibres",
            "k1 >= 0",
        ),
        ParameterEntry::number(
            "k2",
            Dimension::None,
            "rate of stiffening of the fibres",
            "k2 > 0",
        ),
        ParameterEntry::number(
            "beta",
            Dimension::Angle,
            "angle of the fibres from the hoop direction",
            "-pi/2 <= beta <= pi/2",
        ),
    ],
    family: None,
    formula: TwoFibre::ENERGY,
    convention: "lr lt lz = 1; two families at +-beta from the hoop direction in the hoop-axial plane (some papers measure \
                 from the axis: take 90 deg less theirs); a bare number is rad, write 29 deg; fibres act in tension only, \
                 I4 > 1; k1 of one family; shear modulus at rest that of the matrix, mu, to which stretched fibres add",
    source: "Holzapfel, Gasser & Ogden, J. Elast. 61 (2000) 1",
    build: |given| {
        let law = TwoFibre {
            mu: given.number("mu"),
            k1: given.number("k1"),
            k2: given.number("k2"),
            beta: given.number("beta"),
        };
        law.check()?;
        Ok(Material::incompressible(law))
    },
};

impl TwoFibre {
    fn check(&self) -> Result<(), Problem> {
        let Self { mu, k1, k2, beta } = *self;
        if mu <= 0.0 {
            let problem = Problem::out_of_range("mu", mu, "mu > 0", "any positive stress");
            return Err(problem.because("without a matrix nothing holds slack fibres"));
        }
        if k1 < 0.0 {
            return Err(Problem::out_of_range("k1", k1, "k1 >= 0", "0"));
        }
        if k2 <= 0.0 {
            let problem = Problem::out_of_range("k2", k2, "k2 > 0", "any positive number");
            return Err(problem.because("fibres that soften as they stretch are not this law"));
        }
        if beta.abs() > FRAC_PI_2 {
            let mut problem =
                Problem::out_of_range("beta", beta, "-pi/2 <= beta <= pi/2", "pi/2 = 90 deg");
            problem.hint = format!(
                "{}; is {beta} in degrees? write `beta: {beta} deg`",
                problem.hint
            );
            return Err(problem);
        }
        Ok(())
    }

    /// cos^2 and sin^2 of the angle; a double next to pi/2 is a right angle.
    fn squares(&self) -> (f64, f64) {
        let (s, c) = self.beta.sin_cos();
        if c.abs() < 1e-15 {
            return (0.0, 1.0);
        }
        (c * c, s * s)
    }

    /// I4 - 1 and the sum of the sizes of its parts.
    fn fibre_strain<D: Number>(&self, d: D, e: D) -> (D, f64) {
        let (c2, s2) = self.squares();
        let (hoop, axial) = ((d - e).exp_m1() * c2, (e * 2.0).exp_m1() * s2);
        (hoop + axial, hoop.re().abs() + axial.re().abs())
    }

    /// k1 E exp(k2 E^2) and the energy of both families; zero when they are slack.
    fn fibres<D: Number>(&self, strain: D) -> (D, D) {
        if strain.re() <= 0.0 {
            return (D::from(0.0), D::from(0.0));
        }
        let power = strain * strain * self.k2;
        let energy = power.exp_m1() * (self.k1 / self.k2);
        (power.exp() * strain * self.k1, energy)
    }
}

impl Formula for TwoFibre {
    const NAME: &'static str = "two-fibre";
    const ENERGY: &'static str = "W = mu/2 (I1 - 3) + k1/k2 (exp(k2 <I4 - 1>^2) - 1), \
                                  I4 = lambda_t^2 cos^2 beta + lambda_z^2 sin^2 beta, <x> = max(x, 0)";
    const ISOTROPIC: bool = false;

    fn kinks(&self, e: f64) -> Vec<f64> {
        let (c2, s2) = self.squares();
        // lt^2 - 1 at which I4 = 1; at -1 and below the fibres are taut at every lt
        let square = -(2.0 * e).exp_m1() * s2 / c2;
        if c2 == 0.0 || square <= -1.0 {
            return Vec::new();
        }
        vec![square.ln_1p() + e]
    }

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        let w1 = D::from(0.5 * self.mu);
        let (c2, s2) = self.squares();
        let (pull, stored) = self.fibres(self.fibre_strain(d, e).0);
        let hoop = (d - e).exp() * pull * (4.0 * c2);
        let axial = (e * 2.0).exp() * pull * (4.0 * s2);
        let matrix = i.of_first(w1, w1 * i.i1);
        Differences {
            hoop: matrix.hoop + hoop,
            axial: matrix.axial + axial,
            reduced: matrix.reduced + (axial * 2.0 - hoop),
            energy: matrix.energy + stored,
        }
    }

    fn energy<D: Number>(&self, [lr, lt, lz]: [D; 3]) -> D {
        let (s, c) = self.beta.sin_cos();
        let strain = lt * lt * (c * c) + lz * lz * (s * s) - 1.0;
        let matrix = (lr * lr + lt * lt + lz * lz - 3.0) * (0.5 * self.mu);
        if strain.re() <= 0.0 {
            return matrix;
        }
        let one_family = ((strain * strain * self.k2).exp() - 1.0) * (0.5 * self.k1 / self.k2);
        matrix + one_family * 2.0
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        let (strain, size) = self.fibre_strain(d, e);
        if strain <= 0.0 || self.k1 == 0.0 {
            return Hardening::default();
        }
        let (c2, s2) = self.squares();
        let (hoop, axial) = ((d - e).exp() * c2, (2.0 * e).exp() * s2);
        let growth = 2.0 * self.k2 * strain;
        // beside the matrix, which keeps its digits where the fibres begin
        let i = Invariants::at(d, e);
        let matrix = i.of_first(0.5 * self.mu, 0.0);
        let matrix = matrix.hoop.abs() + matrix.axial.abs();
        let stiff = 4.0 * (hoop + axial) * self.k1 * (self.k2 * strain * strain).exp();
        let share = if stiff.is_finite() {
            stiff * strain / (stiff * strain + matrix)
        } else {
            1.0
        };
        Hardening {
            by_d: growth * hoop,
            loss: (1.0 + growth * strain) * share * size / strain,
        }
    }

    fn shear_modulus(&self) -> f64 {
        self.mu
    }

    fn parameters(&self) -> Vec<Parameter> {
        vec![
            Parameter::number("mu", self.mu, Dimension::Stress),
            Parameter::number("k1", self.k1, Dimension::Stress),
            Parameter::number("k2", self.k2, Dimension::None),
            Parameter::number("beta", self.beta, Dimension::Angle),
        ]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::materials::build;

    fn law(mu: f64, k1: f64, k2: f64, beta: f64) -> Result<Material, Problem> {
        let values = [("mu", mu), ("k1", k1), ("k2", k2), ("beta", beta)];
        build("two-fibre", &values.map(|(n, v)| (n.to_string(), v)))
    }

    // lt = lz = sqrt 2, lr = 1/2: I4 = 2 at every angle, A = k1 exp(k2); at 60 deg cos^2 = 1/4: Tt - Tr = mu (2 - 1/4) + 2 A,
    // Tz - Tr = mu (2 - 1/4) + 6 A, W = mu/2 (4.25 - 3) + k1/k2 (exp(k2) - 1). Red when the angle is from the axis.
    #[test]
    fn equal_biaxial_tension_by_hand() {
        let law = TwoFibre {
            mu: 0.4,
            k1: 0.5,
            k2: 0.8,
            beta: std::f64::consts::FRAC_PI_3,
        };
        let l = 2.0_f64.ln();
        let form = law.differences(1.5 * l, 0.5 * l);
        let pull = 0.5 * 0.8_f64.exp();
        let near =
            |got: f64, exact: f64| assert!((got / exact - 1.0).abs() < 2e-15, "{got} {exact}");
        near(form.hoop, 0.7 + 2.0 * pull);
        near(form.axial, 0.7 + 6.0 * pull);
        near(form.reduced, 0.7 + 10.0 * pull);
        near(form.energy, 0.25 + 0.625 * 0.8_f64.exp_m1());
    }

    // Fibres differ hoop from axial at d = 0, and are slack in compression along them.
    #[test]
    fn fibres_act_in_tension_only() {
        let law = TwoFibre {
            mu: 0.4,
            k1: 0.5,
            k2: 0.8,
            beta: 0.5,
        };
        // stretched along the axis, lt = lr: sin^2 lz^2 + cos^2/lz > 1 from some lz on
        assert!(law.differences(0.0, 0.9).hoop > 0.1);
        assert_eq!(law.differences(0.0, 0.1).hoop, 0.0);
        let matrix = crate::materials::NeoHookean { mu: 0.4 };
        assert_eq!(law.differences(-0.3, 0.1), matrix.differences(-0.3, 0.1));
        // strain small beside 1: W = mu (d^2/2 + 3 e^2/2) + k1 ((d - e) cos^2 + 2 e sin^2)^2
        let (d, e) = (3e-6, 1e-6);
        let (c2, s2) = law.squares();
        let small = 0.4 * (0.5 * d * d + 1.5 * e * e) + 0.5 * ((d - e) * c2 + 2.0 * e * s2).powi(2);
        assert!((law.differences(d, e).energy / small - 1.0).abs() < 1e-5);
    }

    // Red when the place of the kink moves: a solver splits its integrals there.
    #[test]
    fn the_kink_is_where_the_fibres_begin() {
        for beta in [0.0, 0.3, -0.9, 1.2] {
            let law = TwoFibre {
                mu: 0.4,
                k1: 0.5,
                k2: 0.8,
                beta,
            };
            for e in [-0.4, -1e-6, 0.0, 1e-6, 0.02] {
                let kinks = Formula::kinks(&law, e);
                let &[d] = kinks.as_slice() else {
                    panic!("{beta} {e}: {kinks:?}");
                };
                let (c2, _) = law.squares();
                let off = |d: f64| law.fibre_strain(d, e).0;
                assert!(off(d).abs() < 4e-16, "{beta} {e}");
                let step = 1e-9;
                assert!((off(d + step) / (c2 * step * (d - e).exp()) - 1.0).abs() < 1e-6);
            }
        }
        // taut at every lt, and fibres that do not feel lt
        let law = |beta| TwoFibre {
            mu: 0.4,
            k1: 0.5,
            k2: 0.8,
            beta,
        };
        assert!(Formula::kinks(&law(1.2), 0.5).is_empty());
        for e in [-0.5, 0.0, 0.5] {
            assert!(Formula::kinks(&law(FRAC_PI_2), e).is_empty());
        }
    }

    #[test]
    fn what_is_no_fibre_is_refused() {
        for (numbers, parameter, says) in [
            ([0.0, 0.5, 0.8, 0.5], "mu", "any positive stress"),
            ([0.4, -0.5, 0.8, 0.5], "k1", "value: 0"),
            ([0.4, 0.5, 0.0, 0.5], "k2", "any positive number"),
            ([0.4, 0.5, 0.8, 29.0], "beta", "write `beta: 29 deg`"),
            ([0.4, 0.5, 0.8, -1.6], "beta", "90 deg"),
        ] {
            let [mu, k1, k2, beta] = numbers;
            let problem = law(mu, k1, k2, beta).expect_err(parameter);
            assert_eq!(problem.parameter, parameter, "{problem}");
            assert!(problem.hint.contains(says), "{}", problem.hint);
        }
        assert!(law(0.4, 0.0, 0.8, FRAC_PI_2).is_ok());
    }
}
