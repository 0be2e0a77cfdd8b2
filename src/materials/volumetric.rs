//! Volumetric energies U(J) of laws that split the deformation into a change of shape and a change of volume.
//!
//! ```text
//! quadratic      K/2 (J - 1)^2             U' = K (J - 1)
//! quadratic-log  K/4 (J^2 - 1 - 2 ln J)    U' = K/2 (J - 1/J)
//! log-squared    K/2 (ln J)^2              U' = K ln J / J
//! linear-log     K (J - 1 - ln J)          U' = K (1 - 1/J)
//! ```
//! All have the same bulk modulus K at J = 1 and differ from the second order of ln J on. Written in `Lam = K ln J`, so that
//! a stress of the order of the shear modulus is not formed as K times a small difference (numerics.md 4).
//! Sources (from memory): quadratic and quadratic-log, Simo & Taylor, Comput. Methods Appl. Mech. Eng. 85 (1991) 273; log-squared is
//! Hencky's form; linear-log, Miehe, Int. J. Numer. Methods Eng. 37 (1994) 1981.

use super::Number;

/// Which U(J).
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum VolumetricForm {
    Quadratic,
    QuadraticLog,
    LogSquared,
    LinearLog,
}

/// U(J) with its bulk modulus.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Volumetric {
    pub form: VolumetricForm,
    /// Bulk modulus, positive. Unit: stress.
    pub bulk: f64,
}

impl VolumetricForm {
    pub const ALL: [Self; 4] = [
        Self::Quadratic,
        Self::QuadraticLog,
        Self::LogSquared,
        Self::LinearLog,
    ];

    /// As a suite writes it.
    pub fn name(self) -> &'static str {
        match self {
            Self::Quadratic => "quadratic",
            Self::QuadraticLog => "quadratic-log",
            Self::LogSquared => "log-squared",
            Self::LinearLog => "linear-log",
        }
    }

    /// U(J) as text.
    pub fn energy_text(self) -> &'static str {
        match self {
            Self::Quadratic => "K/2 (J - 1)^2",
            Self::QuadraticLog => "K/4 (J^2 - 1 - 2 ln J)",
            Self::LogSquared => "K/2 (ln J)^2",
            Self::LinearLog => "K (J - 1 - ln J)",
        }
    }

    pub fn from_name(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|form| form.name() == name)
    }
}

/// exp(x) - 1 - x, without the cancellation of small x.
pub(super) fn exp_excess<D: Number>(x: D) -> D {
    if x.re().abs() > 0.5 {
        return x.exp_m1() - x;
    }
    // the series ends below 0.5^18/18!, 1e-21
    let mut sum = D::from(0.0);
    for n in (3..=18).rev() {
        sum = (sum + 1.0) * x / f64::from(n);
    }
    (sum + 1.0) * x * x * 0.5
}

impl Volumetric {
    /// dU/dJ at `Lam = K ln J`.
    pub fn slope<D: Number>(&self, lam: D) -> D {
        let log = lam / self.bulk;
        match self.form {
            VolumetricForm::Quadratic => log.exp_m1() * self.bulk,
            VolumetricForm::QuadraticLog => log.sinh() * self.bulk,
            VolumetricForm::LogSquared => lam * (-log).exp(),
            VolumetricForm::LinearLog => -(-log).exp_m1() * self.bulk,
        }
    }

    /// U at `Lam = K ln J`.
    pub fn energy<D: Number>(&self, lam: D) -> D {
        let log = lam / self.bulk;
        match self.form {
            VolumetricForm::Quadratic => {
                let change = log.exp_m1();
                change * change * (0.5 * self.bulk)
            }
            VolumetricForm::QuadraticLog => exp_excess(log * 2.0) * (0.25 * self.bulk),
            VolumetricForm::LogSquared => lam * log * 0.5,
            VolumetricForm::LinearLog => exp_excess(log) * self.bulk,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Against the formulas of the header, where these lose nothing. Red when a factor or a sign is wrong.
    #[test]
    fn energies_and_slopes_are_the_printed_ones() {
        let j: f64 = 1.3;
        let (k, ln) = (5.0, j.ln());
        let expected = [
            (k / 2.0 * (j - 1.0).powi(2), k * (j - 1.0)),
            (k / 4.0 * (j * j - 1.0 - 2.0 * ln), k / 2.0 * (j - 1.0 / j)),
            (k / 2.0 * ln * ln, k * ln / j),
            (k * (j - 1.0 - ln), k * (1.0 - 1.0 / j)),
        ];
        for (form, (energy, slope)) in VolumetricForm::ALL.into_iter().zip(expected) {
            let law = Volumetric { form, bulk: k };
            assert!(
                (law.energy(k * ln) / energy - 1.0).abs() < 2e-15,
                "{form:?}"
            );
            assert!((law.slope(k * ln) / slope - 1.0).abs() < 1e-15, "{form:?}");
            assert_eq!(VolumetricForm::from_name(form.name()), Some(form));
        }
    }

    #[test]
    fn a_tiny_change_of_volume_keeps_its_digits() {
        for form in VolumetricForm::ALL {
            let law = Volumetric { form, bulk: 2.0 };
            let lam: f64 = 2e-9;
            assert!((law.energy(lam) / 1e-18 - 1.0).abs() < 2e-9);
            assert!((law.slope(lam) / lam - 1.0).abs() < 2e-9);
        }
        let both = [0.4999, 0.5001].map(|x: f64| exp_excess(x));
        assert!((both[1] - both[0] - 2e-4 * 0.5_f64.exp_m1()).abs() < 1e-12);
    }
}
