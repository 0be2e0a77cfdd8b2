//! Stress measures and their conversion to Cauchy stress.
//!
//! ```text
//! tau = J sigma      P = J sigma F^-T      S = F^-1 P
//! ```
//! Source: Holzapfel, Nonlinear Solid Mechanics (2000), sections 3.1 and 3.2 (from memory).

use super::SymTensor;
use nalgebra::Matrix3;

/// Which stress a table holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum StressMeasure {
    /// Force per current area, both legs in the current body.
    #[default]
    Cauchy,
    /// Force per reference area; first index the direction of the force.
    FirstPiolaKirchhoff,
    /// Symmetric, both legs in the reference body.
    SecondPiolaKirchhoff,
    /// J times Cauchy.
    Kirchhoff,
}

impl StressMeasure {
    pub const ALL: [StressMeasure; 4] = [
        Self::Cauchy,
        Self::FirstPiolaKirchhoff,
        Self::SecondPiolaKirchhoff,
        Self::Kirchhoff,
    ];

    /// The word a suite uses.
    pub fn name(self) -> &'static str {
        match self {
            Self::Cauchy => "cauchy",
            Self::FirstPiolaKirchhoff => "first-piola-kirchhoff",
            Self::SecondPiolaKirchhoff => "second-piola-kirchhoff",
            Self::Kirchhoff => "kirchhoff",
        }
    }

    /// Cauchy stress from `stress` (not symmetric for first Piola-Kirchhoff) and the deformation gradient.
    pub fn to_cauchy(self, stress: &Matrix3<f64>, f: &Matrix3<f64>) -> SymTensor {
        let j = f.determinant();
        let sigma = match self {
            Self::Cauchy => *stress,
            Self::FirstPiolaKirchhoff => stress * f.transpose() / j,
            Self::SecondPiolaKirchhoff => f * stress * f.transpose() / j,
            Self::Kirchhoff => stress / j,
        };
        SymTensor::symmetric_part(&sigma)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn all_measures_of_one_state_give_the_same_cauchy_stress() {
        let f = Matrix3::new(1.2, 0.3, 0.0, -0.1, 0.9, 0.2, 0.05, 0.0, 1.1);
        let sigma = SymTensor::from_array([1.0, -2.0, 0.5, 0.7, -0.3, 0.9]);
        let (j, inverse) = (f.determinant(), f.try_inverse().unwrap());
        let p = sigma.to_matrix() * inverse.transpose() * j;
        let s = inverse * p;
        for (measure, stress) in [
            (StressMeasure::Cauchy, sigma.to_matrix()),
            (StressMeasure::FirstPiolaKirchhoff, p),
            (StressMeasure::SecondPiolaKirchhoff, s),
            (StressMeasure::Kirchhoff, sigma.to_matrix() * j),
        ] {
            let got = measure.to_cauchy(&stress, &f).to_matrix();
            assert!(
                (got - sigma.to_matrix()).abs().max() < 1e-14,
                "{}",
                measure.name()
            );
        }
    }
}
