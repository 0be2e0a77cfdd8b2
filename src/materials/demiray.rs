//! Demiray law, `W = c/(2b) (exp(b (I1-3)) - 1)`: soft tissue that stiffens exponentially.
//!
//! Demiray, J. Biomech. 5 (1972) 309 (from memory). Delfino et al., J. Biomech. 30 (1997) 777 (from memory) write the same
//! law as `W = (a/b) (exp(b (I1-3)/2) - 1)`: then `c = a` and this `b` is half of theirs.

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::incompressible::{Differences, Formula, Hardening, Number};
use super::invariants::Invariants;
use super::{Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;

/// The law with its numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Demiray {
    /// Shear modulus of the unstrained material, positive. Unit: stress.
    pub c: f64,
    /// Rate of stiffening by I1, positive.
    pub b: f64,
}

pub(super) const ENTRY: Entry = Entry {
    name: Demiray::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[
        ParameterEntry::number(
            "c",
            Dimension::Stress,
            "shear modulus of the unstrained material",
            "c > 0",
        ),
        ParameterEntry::number("b", Dimension::None, "rate of stiffening", "b > 0"),
    ],
    family: None,
    formula: Demiray::ENERGY,
    convention: "I1 = lambda1^2 + lambda2^2 + lambda3^2, lambda1 lambda2 lambda3 = 1; shear modulus c; Delfino's form \
                 (a/b) (exp(b (I1 - 3)/2) - 1) has a = c and twice this b",
    source: "Demiray, J. Biomech. 5 (1972) 309; Delfino et al., J. Biomech. 30 (1997) 777",
    build: |given| {
        let (c, b) = (given.number("c"), given.number("b"));
        if c <= 0.0 {
            return Err(Problem::out_of_range(
                "c",
                c,
                "c > 0",
                "any positive stress",
            ));
        }
        if b <= 0.0 {
            let problem = Problem::out_of_range("b", b, "b > 0", "any positive number");
            return Err(problem.because(
                "at b = 0 the law is neo-Hookean with mu = c, below it softens to nothing",
            ));
        }
        Ok(Material::incompressible(Demiray { c, b }))
    },
};

impl Demiray {
    /// dW/dI1 and W at `j` = I1 - 3; not finite where the exponential exceeds a double.
    fn of_strain<D: Number>(&self, j: D) -> (D, D) {
        let power = j * self.b;
        let energy = power.exp_m1() * (0.5 * self.c / self.b);
        (power.exp() * (0.5 * self.c), energy)
    }
}

impl Formula for Demiray {
    const NAME: &'static str = "Demiray";
    const ENERGY: &'static str = "W = c/(2 b) (exp(b (I1 - 3)) - 1)";

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        let (w1, energy) = self.of_strain(i.i1);
        let w2 = D::from(0.0);
        Differences {
            hoop: i.hoop(w1, w2),
            axial: i.axial(w1, w2),
            reduced: i.reduced(w1, w2),
            energy,
        }
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let j = l1 * l1 + l2 * l2 + l3 * l3 - 3.0;
        ((j * self.b).exp() - 1.0) * (0.5 * self.c / self.b)
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        Invariants::at(d, e).hardening(d, self.b)
    }

    fn shear_modulus(&self) -> f64 {
        self.c
    }

    fn parameters(&self) -> Vec<Parameter> {
        vec![
            Parameter::number("c", self.c, Dimension::Stress),
            Parameter::number("b", self.b, Dimension::None),
        ]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Uniaxial tension at l = 2, J = 2: c (l^2 - 1/l) exp(b J) = 3.5 e. Red when b is read as Delfino's.
    #[test]
    fn uniaxial_tension_is_the_textbook_number() {
        let form = Demiray { c: 1.0, b: 0.5 }.differences(0.0, 2.0_f64.ln());
        assert!((form.axial / (3.5 * 1.0_f64.exp()) - 1.0).abs() < 1e-15);
        assert!((form.energy / 1.0_f64.exp_m1() - 1.0).abs() < 1e-15);
    }
}
