//! Mooney-Rivlin law, `W = c10 (I1 - 3) + c01 (I2 - 3)`.
//!
//! Mooney, J. Appl. Phys. 11 (1940) 582; Rivlin, Phil. Trans. R. Soc. A 241 (1948) 379 (from memory).

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::incompressible::{Differences, Formula, Number};
use super::invariants::Invariants;
use super::{Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;

/// The law with its numbers. Unit: stress.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct MooneyRivlin {
    /// Factor of I1 - 3, zero or positive.
    pub c10: f64,
    /// Factor of I2 - 3, zero or positive.
    pub c01: f64,
}

pub(super) const ENTRY: Entry = Entry {
    name: MooneyRivlin::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[
        ParameterEntry::number(
            "c10",
            Dimension::Stress,
            "factor of I1 - 3",
            "c10 >= 0, c10 + c01 > 0",
        ),
        ParameterEntry::number(
            "c01",
            Dimension::Stress,
            "factor of I2 - 3",
            "c01 >= 0, c10 + c01 > 0",
        ),
    ],
    family: None,
    formula: MooneyRivlin::ENERGY,
    convention: "I1 = sum of lambda_i^2, I2 = sum of lambda_i^-2, lambda1 lambda2 lambda3 = 1; \
                 shear modulus 2 (c10 + c01)",
    source: "Mooney, J. Appl. Phys. 11 (1940) 582; Rivlin, Phil. Trans. R. Soc. A 241 (1948) 379",
    build: |given| {
        let (c10, c01) = (given.number("c10"), given.number("c01"));
        let reason =
            "a negative factor makes W unbounded below in some deformation, and the tube unstable";
        for (name, value) in [("c10", c10), ("c01", c01)] {
            if value < 0.0 {
                return Err(
                    Problem::out_of_range(name, value, &format!("{name} >= 0"), "0")
                        .because(reason),
                );
            }
        }
        if c10 + c01 <= 0.0 {
            let problem = Problem::out_of_range("c10", c10, "c10 + c01 > 0", "any positive stress");
            return Err(problem.because("with both factors zero the material has no stiffness"));
        }
        Ok(Material::incompressible(MooneyRivlin { c10, c01 }))
    },
};

impl Formula for MooneyRivlin {
    const NAME: &'static str = "Mooney-Rivlin";
    const ENERGY: &'static str = "W = c10 (I1 - 3) + c01 (I2 - 3)";

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        let (w1, w2) = (D::from(self.c10), D::from(self.c01));
        Differences {
            hoop: i.hoop(w1, w2),
            axial: i.axial(w1, w2),
            reduced: i.reduced(w1, w2),
            energy: w1 * i.i1 + w2 * i.i2,
        }
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let (a, b, c) = (l1 * l1, l2 * l2, l3 * l3);
        (a + b + c - 3.0) * self.c10 + (a * b + b * c + c * a - 3.0) * self.c01
    }

    fn shear_modulus(&self) -> f64 {
        2.0 * (self.c10 + self.c01)
    }

    fn parameters(&self) -> Vec<Parameter> {
        [("c10", self.c10), ("c01", self.c01)]
            .map(|(name, value)| Parameter::number(name, value, Dimension::Stress))
            .to_vec()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::materials::NeoHookean;

    // Uniaxial tension: true stress 2 (l^2 - 1/l)(c10 + c01/l), = 2 * 3.5 * (0.3 + 0.1) at l = 2. Red when
    // c10 and c01 change places.
    #[test]
    fn uniaxial_tension_is_the_textbook_number() {
        let form = MooneyRivlin { c10: 0.3, c01: 0.2 }.differences(0.0, 2.0_f64.ln());
        assert!((form.axial - 2.8).abs() < 1e-15);
    }

    #[test]
    fn without_c01_it_is_neo_hookean() {
        let plain = NeoHookean { mu: 0.6 }.differences(0.7, -0.2);
        assert_eq!(
            MooneyRivlin { c10: 0.3, c01: 0.0 }.differences(0.7, -0.2),
            plain
        );
    }
}
