//! Finite-strain laws that let the volume change: a law of the shape with a volumetric energy beside it, and the coupled
//! neo-Hookean law.
//!
//! Split: `W = W_shape(J^-1/3 l_i) + U(J)`. Coupled: `W = mu/2 (I1 - 3 - 2 ln J) + lambda/2 (ln J)^2`.
//! Notation as in `incompressible`: `d = ln(lt/lr)`, `e = ln lz`, and `L = ln J = ln lr + ln lt + ln lz`. The unknown that
//! stands for the volume is `Lam = K L` (coupled: `lambda L`), of the size of a stress at any K (numerics.md 4).
//! ```text
//! split:   stt-srr = (Tt-Tr)(d, e - L/3)/J     szz-srr = (Tz-Tr)(d, e - L/3)/J     srr = U' - ((stt-srr) + (szz-srr))/3
//! coupled: lr = exp((L-e-d)/2)     stt-srr = c lr^2 expm1(2d)     szz-srr = c lr^2 expm1(3e+d-L)     c = mu/J
//!          srr = c expm1(L-e-d) + Lam/J
//! ```

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::volumetric::{Volumetric, exp_excess};
use super::{IncompressibleLaw, Material, MaterialKind, Number, Parameter};
use crate::mechanics::Dimension;
use num_dual::DualSVec64;
use std::sync::Arc;

/// The coupled law with its numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CompressibleNeoHookean {
    /// Shear modulus, positive. Unit: stress.
    pub mu: f64,
    /// Lame's first constant, positive. Unit: stress.
    pub lambda: f64,
}

/// A law with a finite bulk modulus.
#[derive(Debug, Clone)]
pub enum Compressible {
    Split {
        law: Arc<dyn IncompressibleLaw>,
        volumetric: Volumetric,
    },
    Coupled(CompressibleNeoHookean),
}

/// Cauchy stresses and energy at one state.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CompressibleState<D> {
    /// srr.
    pub radial: D,
    /// stt - srr.
    pub hoop: D,
    /// szz - srr.
    pub axial: D,
    /// W, per reference volume.
    pub energy: D,
}

/// A number with its derivatives by `d`, `e` and `Lam`.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct VolumeSlope {
    pub value: f64,
    pub by_d: f64,
    pub by_e: f64,
    pub by_lam: f64,
}

pub(super) const NAME: &str = "compressible-neo-Hookean";
const ENERGY: &str = "W = mu/2 (I1 - 3 - 2 ln J) + lambda/2 (ln J)^2";

pub(super) const ENTRY: Entry = Entry {
    name: NAME,
    kind: MaterialKind::Compressible,
    parameters: &[
        ParameterEntry::number("mu", Dimension::Stress, "shear modulus", "mu > 0"),
        ParameterEntry::number(
            "lambda",
            Dimension::Stress,
            "Lame's first constant, K - 2 mu/3",
            "lambda > 0",
        ),
    ],
    family: None,
    formula: ENERGY,
    convention: "I1 of the whole deformation (no isochoric split), J = det F; bulk modulus lambda + 2 mu/3",
    source: "Bonet & Wood, Nonlinear Continuum Mechanics for Finite Element Analysis (1997), section 5.4",
    build: |given| {
        let (mu, lambda) = (given.number("mu"), given.number("lambda"));
        for (name, value) in [("mu", mu), ("lambda", lambda)] {
            if value <= 0.0 {
                let range = format!("{name} > 0");
                return Err(Problem::out_of_range(
                    name,
                    value,
                    &range,
                    "any positive stress",
                ));
            }
        }
        let law = CompressibleNeoHookean { mu, lambda };
        Ok(Material::Compressible(Compressible::Coupled(law)))
    },
};

impl CompressibleNeoHookean {
    fn at<D: Number>(&self, d: D, e: D, lam: D) -> CompressibleState<D> {
        let log = lam / self.lambda;
        let down = (-log).exp();
        let (lr, lt) = ((log - e - d) * 0.5, (log - e + d) * 0.5);
        let c = down * self.mu;
        let radial_square = (lr * 2.0).exp();
        let shape = exp_excess(lr * 2.0) + exp_excess(lt * 2.0) + exp_excess(e * 2.0);
        CompressibleState {
            radial: c * (lr * 2.0).exp_m1() + lam * down,
            hoop: c * radial_square * (d * 2.0).exp_m1(),
            axial: c * radial_square * (e * 3.0 + d - log).exp_m1(),
            energy: shape * (0.5 * self.mu) + lam * log * 0.5,
        }
    }
}

impl Compressible {
    /// What the volume unknown is scaled with: `Lam = modulus ln J`.
    pub fn volume_modulus(&self) -> f64 {
        match self {
            Self::Split { volumetric, .. } => volumetric.bulk,
            Self::Coupled(law) => law.lambda,
        }
    }

    /// Bulk modulus of the unstrained material. Unit: stress.
    pub fn bulk_modulus(&self) -> f64 {
        match self {
            Self::Split { volumetric, .. } => volumetric.bulk,
            Self::Coupled(law) => law.lambda + law.mu / 1.5,
        }
    }

    /// Shear modulus of the unstrained material. Unit: stress.
    pub fn shear_modulus(&self) -> f64 {
        match self {
            Self::Split { law, .. } => law.shear_modulus(),
            Self::Coupled(law) => law.mu,
        }
    }

    /// As a suite writes the law.
    pub fn name(&self) -> &'static str {
        match self {
            Self::Split { law, .. } => law.name(),
            Self::Coupled(_) => NAME,
        }
    }

    /// Whether no direction of the material differs from another.
    pub fn isotropic(&self) -> bool {
        match self {
            Self::Split { law, .. } => law.isotropic(),
            Self::Coupled(_) => true,
        }
    }

    /// W as text.
    pub fn energy_text(&self) -> String {
        match self {
            Self::Split { law, volumetric } => format!(
                "{}, of the stretches J^(-1/3) lambda_i, + {}",
                law.energy_text(),
                volumetric.form.energy_text()
            ),
            Self::Coupled(_) => ENERGY.to_string(),
        }
    }

    /// Constants in the order of the catalogue, the bulk modulus last.
    pub fn parameters(&self) -> Vec<Parameter> {
        match self {
            Self::Split { law, volumetric } => {
                let mut all = law.parameters();
                let name = format!("{} K", volumetric.form.name());
                all.push(Parameter::new(name, volumetric.bulk, Dimension::Stress));
                all
            }
            Self::Coupled(law) => [("mu", law.mu), ("lambda", law.lambda)]
                .map(|(name, value)| Parameter::number(name, value, Dimension::Stress))
                .to_vec(),
        }
    }

    /// Stresses and energy at `d = ln(lt/lr)`, `e = ln lz` and `Lam`.
    pub fn at(&self, d: f64, e: f64, lam: f64) -> CompressibleState<f64> {
        match self {
            Self::Coupled(law) => law.at(d, e, lam),
            Self::Split { law, volumetric } => {
                let log = lam / volumetric.bulk;
                let shape = law.at(d, e - log / 3.0);
                let down = (-log).exp();
                let (hoop, axial) = (shape.hoop * down, shape.axial * down);
                CompressibleState {
                    radial: volumetric.slope(lam) - (hoop + axial) / 3.0,
                    hoop,
                    axial,
                    energy: shape.energy + volumetric.energy(lam),
                }
            }
        }
    }

    /// The same with exact first derivatives.
    pub fn with_slopes(&self, d: f64, e: f64, lam: f64) -> CompressibleState<VolumeSlope> {
        match self {
            Self::Coupled(law) => {
                let unknown = |x: f64, i: usize| DualSVec64::<3>::from_re(x).derivative(i);
                let found = law.at(unknown(d, 0), unknown(e, 1), unknown(lam, 2));
                CompressibleState {
                    radial: slope_of(found.radial),
                    hoop: slope_of(found.hoop),
                    axial: slope_of(found.axial),
                    energy: slope_of(found.energy),
                }
            }
            Self::Split { law, volumetric } => split_slopes(law.as_ref(), volumetric, d, e, lam),
        }
    }
}

fn slope_of(x: DualSVec64<3>) -> VolumeSlope {
    let eps = x
        .eps
        .unwrap_generic(nalgebra::Const::<3>, nalgebra::Const::<1>);
    VolumeSlope {
        value: x.re,
        by_d: eps[0],
        by_e: eps[1],
        by_lam: eps[2],
    }
}

/// The chain rule through `e - L/3` and 1/J.
fn split_slopes(
    law: &dyn IncompressibleLaw,
    volumetric: &Volumetric,
    d: f64,
    e: f64,
    lam: f64,
) -> CompressibleState<VolumeSlope> {
    let soft = 1.0 / volumetric.bulk;
    let log = lam * soft;
    let shape = law.with_slopes(d, e - log / 3.0);
    let down = (-log).exp();
    let stress = |x: super::Slope| VolumeSlope {
        value: x.value * down,
        by_d: x.by_d * down,
        by_e: x.by_e * down,
        by_lam: -soft * down * (x.value + x.by_e / 3.0),
    };
    let (hoop, axial) = (stress(shape.hoop), stress(shape.axial));
    let unknown = DualSVec64::<1>::from_re(lam).derivative(0);
    let along = |x: DualSVec64<1>| {
        let eps = x
            .eps
            .unwrap_generic(nalgebra::Const::<1>, nalgebra::Const::<1>);
        VolumeSlope {
            value: x.re,
            by_lam: eps[0],
            ..VolumeSlope::default()
        }
    };
    let (push, stored) = (
        along(volumetric.slope(unknown)),
        along(volumetric.energy(unknown)),
    );
    let third = |h: f64, a: f64| -(h + a) / 3.0;
    CompressibleState {
        radial: VolumeSlope {
            value: push.value + third(hoop.value, axial.value),
            by_d: third(hoop.by_d, axial.by_d),
            by_e: third(hoop.by_e, axial.by_e),
            by_lam: push.by_lam + third(hoop.by_lam, axial.by_lam),
        },
        hoop,
        axial,
        energy: VolumeSlope {
            value: shape.energy.value + stored.value,
            by_d: shape.energy.by_d,
            by_e: shape.energy.by_e,
            by_lam: stored.by_lam - soft * shape.energy.by_e / 3.0,
        },
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::materials::{MooneyRivlin, VolumetricForm};
    use proptest::prelude::*;

    fn laws() -> Vec<Compressible> {
        let coupled = CompressibleNeoHookean {
            mu: 0.7,
            lambda: 3.0,
        };
        let split = |form| Compressible::Split {
            law: Arc::new(MooneyRivlin { c10: 0.3, c01: 0.2 }),
            volumetric: Volumetric { form, bulk: 4.0 },
        };
        let mut laws: Vec<_> = VolumetricForm::ALL.into_iter().map(split).collect();
        laws.push(Compressible::Coupled(coupled));
        laws
    }

    proptest! {
        // J s_i = dW/d ln l_i: with ln lr = (L-e-d)/2, ln lt = (L-e+d)/2, ln lz = e the energy's slopes are
        // dW/dd = J (stt-srr)/2, dW/de = J (szz - (stt+srr)/2), dW/dLam = J (stt+srr)/(2 modulus).
        // Red when a stress, a factor of 1/J or a slope is wrong.
        #[test]
        fn slopes_of_the_energy_are_the_stresses(d in -1.0..1.0_f64, e in -0.6..0.6_f64, lam in -1.0..1.0_f64) {
            for law in laws() {
                let s = law.with_slopes(d, e, lam);
                let plain = law.at(d, e, lam);
                let modulus = law.volume_modulus();
                let j = (lam / modulus).exp();
                let size = s.hoop.value.abs() + s.axial.value.abs() + s.radial.value.abs() + 1e-3;
                let small = |x: f64| x.abs() < 1e-14 * size;
                prop_assert!(small(s.energy.by_d - 0.5 * j * s.hoop.value), "{law:?} d");
                prop_assert!(small(s.energy.by_e - j * (s.axial.value - 0.5 * s.hoop.value)), "{law:?} e");
                prop_assert!(small(modulus * s.energy.by_lam - j * (s.radial.value + 0.5 * s.hoop.value)), "{law:?} Lam");
                for (a, b) in [(s.radial, plain.radial), (s.hoop, plain.hoop), (s.axial, plain.axial), (s.energy, plain.energy)] {
                    prop_assert!(small(a.value - b));
                }
                let step = 1e-6;
                for (by, forward, back) in [
                    (s.radial.by_lam, law.at(d, e, lam + step).radial, law.at(d, e, lam - step).radial),
                    (s.hoop.by_lam, law.at(d, e, lam + step).hoop, law.at(d, e, lam - step).hoop),
                    (s.axial.by_e, law.at(d, e + step, lam).axial, law.at(d, e - step, lam).axial),
                    (s.radial.by_d, law.at(d + step, e, lam).radial, law.at(d - step, e, lam).radial),
                ] {
                    prop_assert!((by - (forward - back) / (2.0 * step)).abs() < 1e-7 * size, "{law:?}");
                }
            }
        }
    }

    #[test]
    fn small_strain_constants() {
        let law = &laws()[4];
        assert_eq!(law.bulk_modulus(), 3.0 + 0.7 / 1.5);
        // hydrostatic: srr = 3 K ln(l)
        let log = 1e-7;
        let s = law.at(0.0, log, 3.0 * 3.0 * log);
        assert!((s.radial / (3.0 * law.bulk_modulus() * log) - 1.0).abs() < 1e-6);
    }
}
