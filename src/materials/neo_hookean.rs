//! Neo-Hookean law, `W = mu/2 (I1 - 3)`.
//!
//! Treloar, The Physics of Rubber Elasticity, 3rd ed. (1975), section 4.3 (from memory). The same law as
//! Mooney-Rivlin with `c10 = mu/2`, `c01 = 0`.

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::incompressible::{Differences, Formula, Number};
use super::invariants::Invariants;
use super::{Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;

/// The law with its number.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct NeoHookean {
    /// Shear modulus, positive. Unit: stress.
    pub mu: f64,
}

pub(super) const ENTRY: Entry = Entry {
    name: NeoHookean::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[ParameterEntry::number(
        "mu",
        Dimension::Stress,
        "shear modulus",
        "mu > 0",
    )],
    family: None,
    formula: NeoHookean::ENERGY,
    convention: "I1 = lambda1^2 + lambda2^2 + lambda3^2, lambda1 lambda2 lambda3 = 1; c10 = mu/2, Young's modulus 3 mu",
    source: "Treloar, The Physics of Rubber Elasticity, 3rd ed. (1975), section 4.3",
    build: |given| {
        let mu = given.number("mu");
        if mu <= 0.0 {
            return Err(Problem::out_of_range(
                "mu",
                mu,
                "mu > 0",
                "any positive stress",
            ));
        }
        Ok(Material::incompressible(NeoHookean { mu }))
    },
};

impl Formula for NeoHookean {
    const NAME: &'static str = "neo-Hookean";
    const ENERGY: &'static str = "W = mu/2 (I1 - 3)";

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        let (w1, w2) = (D::from(0.5 * self.mu), D::from(0.0));
        Differences {
            hoop: i.hoop(w1, w2),
            axial: i.axial(w1, w2),
            reduced: i.reduced(w1, w2),
            energy: w1 * i.i1,
        }
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        (l1 * l1 + l2 * l2 + l3 * l3 - 3.0) * (0.5 * self.mu)
    }

    fn shear_modulus(&self) -> f64 {
        self.mu
    }

    fn parameters(&self) -> Vec<Parameter> {
        vec![Parameter::number("mu", self.mu, Dimension::Stress)]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Uniaxial tension at stretch 2: true stress mu (l^2 - 1/l) = 3.5 mu at d = 0. Red when mu/2 and
    // mu are mixed up.
    #[test]
    fn uniaxial_tension_is_the_textbook_number() {
        let form = NeoHookean { mu: 0.4 }.differences(0.0, 2.0_f64.ln());
        assert!((form.axial - 1.4).abs() < 1e-15);
        assert_eq!(form.hoop, 0.0);
        assert!((form.energy - 0.2 * (4.0 + 1.0 - 3.0)).abs() < 1e-15);
    }
}
