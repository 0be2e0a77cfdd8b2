//! Isotropic linear elasticity at small strain (Hooke's law).
//!
//! ```text
//! E eps_i = (1 + nu) sigma_i - nu tr(sigma)        W = sigma : eps/2
//! ```
//! Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 6 (from memory).

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::{Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;

/// The law with its numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LinearElastic {
    /// Young's modulus, positive. Unit: stress.
    pub e: f64,
    /// Poisson's ratio in (-1, 0.5]; at 0.5 the material preserves volume.
    pub nu: f64,
}

/// As a suite writes it.
pub(super) const NAME: &str = "linear-elastic";
/// The strain energy as text.
pub(super) const ENERGY: &str = "W = E/(2 (1 + nu)) [eps:eps + nu/(1 - 2 nu) tr(eps)^2]";

pub(super) const ENTRY: Entry = Entry {
    name: NAME,
    kind: MaterialKind::LinearElastic,
    parameters: &[
        ParameterEntry::number("E", Dimension::Stress, "Young's modulus", "E > 0"),
        ParameterEntry::number("nu", Dimension::None, "Poisson's ratio", "-1 < nu <= 0.5"),
    ],
    family: None,
    formula: ENERGY,
    convention: "small strain, the shear modulus is E/(2 (1 + nu)); at nu = 0.5 tr(eps) = 0 and the pressure is free",
    source: "Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 6",
    build: |given| {
        let law = checked(given.number("E"), given.number("nu"))?;
        Ok(Material::LinearElastic(law))
    },
};

/// Within its range, or why not.
pub(super) fn checked(e: f64, nu: f64) -> Result<LinearElastic, Problem> {
    if e <= 0.0 {
        return Err(Problem::out_of_range(
            "E",
            e,
            "E > 0",
            "any positive stress",
        ));
    }
    if nu <= -1.0 || nu > 0.5 {
        let nearest = if nu > 0.5 {
            "0.5"
        } else {
            "any value above -1"
        };
        let problem = Problem::out_of_range("nu", nu, "-1 < nu <= 0.5", nearest);
        return Err(problem.because("outside it the stored energy of some strain is negative"));
    }
    Ok(LinearElastic { e, nu })
}

impl LinearElastic {
    /// E/(2 (1 + nu)).
    pub fn shear_modulus(&self) -> f64 {
        0.5 * self.e / (1.0 + self.nu)
    }

    /// `1 - 2 nu`, exactly: zero for a material that preserves volume.
    pub fn compressibility(&self) -> f64 {
        1.0 - 2.0 * self.nu
    }

    /// Parameters in the order of the catalogue.
    pub fn parameters(&self) -> Vec<Parameter> {
        let e = Parameter::number("E", self.e, Dimension::Stress);
        let nu = Parameter::number("nu", self.nu, Dimension::None);
        vec![e, nu]
    }
}
