//! Gent law, `W = -(mu Jm/2) ln(1 - (I1-3)/Jm)`: rubber whose chains are at full length at I1 - 3 = Jm.
//!
//! Gent, Rubber Chem. Technol. 69 (1996) 59 (from memory). Beyond the lock `dW/dI1` of the formula is finite and negative, and the logarithm
//! has no value: the law is NaN there, so that no state beyond it can be taken for a solution.

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::incompressible::{Differences, Formula, Hardening, Number};
use super::invariants::Invariants;
use super::locking::LockStretches;
use super::{Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;

/// The law with its numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Gent {
    /// Shear modulus of the unstrained material, positive. Unit: stress.
    pub mu: f64,
    /// I1 - 3 at the lock, positive.
    pub jm: f64,
}

pub(super) const ENTRY: Entry = Entry {
    name: Gent::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[
        ParameterEntry::number(
            "mu",
            Dimension::Stress,
            "shear modulus of the unstrained material",
            "mu > 0",
        ),
        ParameterEntry::number(
            "Jm",
            Dimension::None,
            "I1 - 3 at which the chains are at full length",
            "Jm > 0",
        ),
    ],
    family: None,
    formula: Gent::ENERGY,
    convention: "I1 = lambda1^2 + lambda2^2 + lambda3^2, lambda1 lambda2 lambda3 = 1; no state has I1 - 3 >= Jm: at \
                 Jm = 97.2 the stretch locks at 10 in uniaxial, 7.08 in equibiaxial, 9.96 in planar tension; Jm is the \
                 limit of I1 - 3, not of I1 and not a stretch",
    source: "Gent, Rubber Chem. Technol. 69 (1996) 59",
    build: |given| {
        let (mu, jm) = (given.number("mu"), given.number("Jm"));
        if mu <= 0.0 {
            return Err(Problem::out_of_range(
                "mu",
                mu,
                "mu > 0",
                "any positive stress",
            ));
        }
        if jm <= 0.0 {
            let problem = Problem::out_of_range("Jm", jm, "Jm > 0", "any positive number");
            return Err(
                problem.because("I1 - 3 is never below zero, the material would lock unstrained")
            );
        }
        Ok(Material::incompressible(Gent { mu, jm }))
    },
};

impl Gent {
    /// Stretches at which it locks.
    pub fn lock_stretches(&self) -> LockStretches {
        LockStretches::at(self.jm)
    }
}

impl Formula for Gent {
    const NAME: &'static str = "Gent";
    const ENERGY: &'static str = "W = -(mu Jm/2) ln(1 - (I1 - 3)/Jm)";

    fn energy_text(&self) -> String {
        format!("{}, {}", Self::ENERGY, self.lock_stretches())
    }

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        if i.i1.re() >= self.jm {
            return Differences::none();
        }
        let w1 = (-i.i1 + self.jm).recip() * (0.5 * self.mu * self.jm);
        let energy = -(-i.i1 / self.jm).ln_1p() * (0.5 * self.mu * self.jm);
        i.of_first(w1, energy)
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let j = l1 * l1 + l2 * l2 + l3 * l3 - 3.0;
        (-j / self.jm + 1.0).ln() * (-0.5 * self.mu * self.jm)
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        let i = Invariants::at(d, e);
        i.hardening(d, 1.0 / (self.jm - i.i1))
    }

    fn shear_modulus(&self) -> f64 {
        self.mu
    }

    fn parameters(&self) -> Vec<Parameter> {
        vec![
            Parameter::number("mu", self.mu, Dimension::Stress),
            Parameter::number("Jm", self.jm, Dimension::None),
        ]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Uniaxial tension at l = 2, J = 2, Jm = 4: mu (l^2 - 1/l) Jm/(Jm - J) = 3.5 * 2; W = mu Jm/2 ln 2. Red when the
    // factor 1/2 or Jm of the logarithm is lost.
    #[test]
    fn uniaxial_tension_is_the_textbook_number() {
        let form = Gent { mu: 1.0, jm: 4.0 }.differences(0.0, 2.0_f64.ln());
        assert!((form.axial - 7.0).abs() < 7e-15);
        assert!((form.energy - 2.0 * 2.0_f64.ln()).abs() < 1e-15);
    }

    // Red when the lock is not guarded: dW/dI1 of the formula is finite and negative beyond it.
    #[test]
    fn nothing_is_beyond_the_lock() {
        let law = Gent { mu: 1.0, jm: 97.2 };
        let lock = law.lock_stretches();
        for (stretch, state) in [
            (lock.uniaxial, [0.0, 1.0]),
            (lock.planar, [1.0, 0.0]),
            (lock.equibiaxial, [0.0, -2.0]),
        ] {
            // planar: lt = l, lr = 1/l, so that d = 2 ln l
            let scale = if state[0] == 0.0 { 1.0 } else { 2.0 };
            let at = |l: f64| law.differences(scale * l.ln() * state[0], l.ln() * state[1]);
            let inside = at(stretch * (1.0 - 1e-9));
            assert!(
                inside.energy.is_finite() && inside.energy > 100.0,
                "{inside:?}"
            );
            let outside = at(stretch * (1.0 + 1e-9));
            for x in [outside.hoop, outside.axial, outside.reduced, outside.energy] {
                assert!(x.is_nan());
            }
        }
        assert!(Formula::energy_text(&law).contains("stretch of 10.000000 (uniaxial)"));
    }
}
