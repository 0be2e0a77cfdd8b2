//! An isotropic law at any deformation gradient: Cauchy stress, energy, and the divergence of the first Piola-Kirchhoff stress.
//!
//! With `F = I + H`, `b - I = H + H^T + H H^T` is formed without the one, its eigenvalues are `l_a^2 - 1`, its eigenvectors
//! `n_a`; the law is asked in those axes. In the axes `(n_a, N_b)` the tangent `A = dP/dF` has the entries
//! ```text
//! A_aabb = (dT_a/d ln l_b - delta_ab T_a)/(l_a l_b)      T_a = J sigma_a
//! A_abab = beta_ab = (T_a - T_b)/(l_a^2 - l_b^2)          A_abba = (beta_ab l_b^2 - T_b)/(l_a l_b)
//! ```
//! and all others are zero (Ogden, Non-Linear Elastic Deformations, 1984, section 6.1; from memory). `T_a - T_b` comes from
//! the law's difference form with a and b in the roles of hoop and radial, so that `beta_ab` keeps its digits when two
//! stretches meet.

use super::Compressible;
use crate::mechanics::SymTensor;
use nalgebra::{Matrix3, SymmetricEigen, Vector3};

/// Second derivatives `u_i,jk` as one symmetric matrix for each component i.
pub type SecondGradient = [Matrix3<f64>; 3];

/// A law at one deformation.
#[derive(Debug, Clone)]
pub struct GeneralState<'l> {
    law: &'l Compressible,
    /// ln of the principal stretches.
    logs: [f64; 3],
    /// Columns: principal directions in space, and in the reference.
    space: Matrix3<f64>,
    reference: Matrix3<f64>,
    /// `Lam = modulus ln J`.
    volume: f64,
    pub volume_ratio: f64,
    /// Principal Cauchy stresses.
    stresses: [f64; 3],
    /// Strain energy per reference volume.
    pub energy_density: f64,
}

/// det(I + H) - 1 from the invariants of H.
fn volume_change(h: &Matrix3<f64>) -> f64 {
    let minors = h[(0, 0)] * h[(1, 1)] - h[(0, 1)] * h[(1, 0)] + h[(1, 1)] * h[(2, 2)]
        - h[(1, 2)] * h[(2, 1)]
        + h[(2, 2)] * h[(0, 0)]
        - h[(2, 0)] * h[(0, 2)];
    h.trace() + minors + h.determinant()
}

impl<'l> GeneralState<'l> {
    /// At the displacement gradient `h`; `None` where the volume is not positive or a number is not finite. The law must be
    /// isotropic.
    pub fn at(law: &'l Compressible, h: &Matrix3<f64>) -> Option<Self> {
        let change = volume_change(h);
        if !(h.iter().all(|c| c.is_finite()) && change > -1.0) {
            return None;
        }
        let strain = h + h.transpose() + h * h.transpose();
        let eigen = SymmetricEigen::try_new(strain, f64::EPSILON, 1000)?;
        let logs = [0, 1, 2].map(|a| 0.5 * eigen.eigenvalues[a].ln_1p());
        if logs.iter().any(|log| !log.is_finite()) {
            return None;
        }
        let f = Matrix3::identity() + h;
        let mut reference = f.transpose() * eigen.eigenvectors;
        for (a, log) in logs.into_iter().enumerate() {
            let column = reference.column(a) * (-log).exp();
            reference.set_column(a, &column);
        }
        let volume = law.volume_modulus() * change.ln_1p();
        // the roles are radial, hoop and axial
        let found = law.at(logs[1] - logs[0], logs[2], volume);
        let stresses = [
            found.radial,
            found.radial + found.hoop,
            found.radial + found.axial,
        ];
        let sound = stresses.iter().all(|s| s.is_finite()) && found.energy.is_finite();
        sound.then_some(Self {
            law,
            logs,
            space: eigen.eigenvectors,
            reference,
            volume,
            volume_ratio: 1.0 + change,
            stresses,
            energy_density: found.energy,
        })
    }

    /// Cauchy stress in the fixed axes.
    pub fn stress(&self) -> SymTensor {
        let principal = Matrix3::from_diagonal(&Vector3::from(self.stresses));
        SymTensor::symmetric_part(&(self.space * principal * self.space.transpose()))
    }

    /// Principal stretches, in the order of the eigenvalues found.
    pub fn stretches(&self) -> [f64; 3] {
        self.logs.map(f64::exp)
    }

    /// Whether the larger of any two principal stretches has the larger principal stress (Baker and Ericksen, 1954); false
    /// where the law has lost this.
    pub fn is_ordered(&self) -> bool {
        (0..3).all(|a| {
            (0..3).all(|b| {
                let apart = self.logs[a] - self.logs[b];
                apart.abs() < 1e-6 || (self.stresses[a] - self.stresses[b]) * apart > 0.0
            })
        })
    }

    /// `dT_a/d ln l_b`, T = J sigma.
    fn slopes(&self) -> [[f64; 3]; 3] {
        let found = self
            .law
            .with_slopes(self.logs[1] - self.logs[0], self.logs[2], self.volume);
        let modulus = self.law.volume_modulus();
        let parts = [
            [found.radial, found.radial],
            [found.radial, found.hoop],
            [found.radial, found.axial],
        ];
        let mut slopes = [[0.0; 3]; 3];
        for (a, [base, over]) in parts.into_iter().enumerate() {
            let sum = |x: f64, y: f64| if a == 0 { x } else { x + y };
            let by_d = sum(base.by_d, over.by_d);
            let by_e = sum(base.by_e, over.by_e);
            let by_volume = modulus * sum(base.by_lam, over.by_lam) + self.stresses[a];
            let own = [by_volume - by_d, by_volume + by_d, by_volume + by_e];
            slopes[a] = own.map(|slope| self.volume_ratio * slope);
        }
        slopes
    }

    /// `(T_a - T_b)/(l_a^2 - l_b^2)`, its limit where the two stretches are equal.
    fn beta(&self, a: usize, b: usize) -> f64 {
        let c = 3 - a - b;
        let d = self.logs[a] - self.logs[b];
        let square = (2.0 * self.logs[b]).exp();
        if d.abs() < 1e-100 {
            let found = self.law.with_slopes(0.0, self.logs[c], self.volume);
            return self.volume_ratio * found.hoop.by_d / (2.0 * square);
        }
        let found = self.law.at(d, self.logs[c], self.volume);
        self.volume_ratio * found.hoop / (square * (2.0 * d).exp_m1())
    }

    /// Div P at the second derivatives of the displacement.
    pub fn divergence(&self, second: &SecondGradient) -> Vector3<f64> {
        let stretches = self.stretches();
        let kirchhoff = self.stresses.map(|s| self.volume_ratio * s);
        let slopes = self.slopes();
        // g[c][(d, e)] = n_c . u,(N_d N_e)
        let turned = second.map(|m| self.reference.transpose() * m * self.reference);
        let g: [Matrix3<f64>; 3] = std::array::from_fn(|c| {
            (0..3).fold(Matrix3::zeros(), |sum, k| {
                sum + turned[k] * self.space[(k, c)]
            })
        });
        let mut local = Vector3::zeros();
        for a in 0..3 {
            for b in 0..3 {
                let same = if a == b { kirchhoff[a] } else { 0.0 };
                let normal = (slopes[a][b] - same) / (stretches[a] * stretches[b]);
                local[a] += normal * g[b][(b, a)];
                if a == b {
                    continue;
                }
                let beta = self.beta(a, b);
                let square = stretches[b] * stretches[b];
                let cross = (beta * square - kirchhoff[b]) / (stretches[a] * stretches[b]);
                local[a] += beta * g[a][(b, b)] + cross * g[b][(a, b)];
            }
        }
        self.space * local
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::materials::{CompressibleNeoHookean, MooneyRivlin, Volumetric, VolumetricForm};
    use proptest::prelude::*;
    use std::sync::Arc;

    fn laws() -> [Compressible; 2] {
        [
            Compressible::Coupled(CompressibleNeoHookean {
                mu: 0.7,
                lambda: 3.0,
            }),
            Compressible::Split {
                law: Arc::new(MooneyRivlin { c10: 0.3, c01: 0.2 }),
                volumetric: Volumetric {
                    form: VolumetricForm::QuadraticLog,
                    bulk: 4.0,
                },
            },
        ]
    }

    /// First Piola-Kirchhoff stress.
    fn piola(law: &Compressible, h: &Matrix3<f64>) -> Matrix3<f64> {
        let state = GeneralState::at(law, h).unwrap();
        let f = Matrix3::identity() + h;
        state.stress().to_matrix() * f.try_inverse().unwrap().transpose() * state.volume_ratio
    }

    // mu/J (b - I) + lambda ln J/J I, as printed in textbooks. Red when axes, roles or J are mixed up.
    #[test]
    fn the_coupled_law_is_the_textbook_tensor() {
        let h = Matrix3::new(0.2, 0.1, -0.05, 0.0, -0.1, 0.3, 0.02, 0.07, 0.15);
        let f = Matrix3::identity() + h;
        let (b, j): (Matrix3<f64>, f64) = (f * f.transpose(), f.determinant());
        let expected =
            (b - Matrix3::identity()) * (0.7 / j) + Matrix3::identity() * (3.0 * j.ln() / j);
        let law = &laws()[0];
        let found = GeneralState::at(law, &h).unwrap();
        assert!((found.stress().to_matrix() - expected).abs().max() < 3e-15);
        let energy = 0.35 * (b.trace() - 3.0 - 2.0 * j.ln()) + 1.5 * j.ln().powi(2);
        assert!((found.energy_density / energy - 1.0).abs() < 1e-14);
        assert!(found.is_ordered());
    }

    proptest! {
        // Div P against differences of P along X of the field u = h X + second X X/2. Red when an entry of the tangent is
        // wrong (tried: cross without - T_b, normal without - delta T, slopes without sigma dJ).
        #[test]
        fn divergence_is_that_of_the_stress(
            h in prop::array::uniform9(-0.25..0.25_f64), g in prop::array::uniform18(-0.5..0.5_f64), equal in 0..3_usize,
        ) {
            let h = match equal {
                0 => Matrix3::identity() * h[0],
                1 => Matrix3::from_diagonal(&Vector3::new(h[0], h[0], h[1])),
                _ => Matrix3::from_row_slice(&h),
            };
            let second: SecondGradient = std::array::from_fn(|i| {
                let g = &g[6 * i..];
                Matrix3::new(g[0], g[1], g[2], g[1], g[3], g[4], g[2], g[4], g[5])
            });
            for law in laws() {
                let step = 1e-4;
                let mut expected = Vector3::zeros();
                for j in 0..3 {
                    let shift: Matrix3<f64> = Matrix3::from_fn(|i, k| second[i][(k, j)]);
                    let at = |t: f64| piola(&law, &(h + shift * t)).column(j).into_owned();
                    expected += (8.0 * (at(step) - at(-step)) - (at(2.0 * step) - at(-2.0 * step))) / (12.0 * step);
                }
                let found = GeneralState::at(&law, &h).unwrap().divergence(&second);
                prop_assert!((found - expected).abs().max() < 1e-9 * (1.0 + expected.abs().max()), "{found} {expected}");
            }
        }
    }

    #[test]
    fn a_turned_inside_out_body_has_no_state() {
        let law = &laws()[0];
        assert!(GeneralState::at(law, &(Matrix3::identity() * -2.5)).is_none());
        assert!(GeneralState::at(law, &(Matrix3::identity() * f64::NAN)).is_none());
    }
}
