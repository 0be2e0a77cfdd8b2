//! Yeoh law, `W = c10 (I1-3) + c20 (I1-3)^2 + c30 (I1-3)^3`.
//!
//! Yeoh, Rubber Chem. Technol. 63 (1990) 792; 66 (1993) 754 (from memory). I1 = sum of lambda_i^2 of the volume-preserving
//! stretches; no factor is in front of the powers. All three constants must be given: a c30 forgotten in a suite would
//! be a wrong reference without a word. `dW/dI1 = c10 + 2 c20 J + 3 c30 J^2`, J = I1 - 3, must be positive at every J.

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::incompressible::{Differences, Formula, Number};
use super::invariants::Invariants;
use super::{Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;

/// The law with its numbers. Unit: stress.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Yeoh {
    /// Factor of I1 - 3, positive: half the shear modulus.
    pub c10: f64,
    /// Factor of (I1 - 3)^2; may be negative, above -sqrt(3 c10 c30).
    pub c20: f64,
    /// Factor of (I1 - 3)^3, zero or positive.
    pub c30: f64,
}

pub(super) const ENTRY: Entry = Entry {
    name: Yeoh::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[
        ParameterEntry::number("c10", Dimension::Stress, "factor of I1 - 3", "c10 > 0"),
        ParameterEntry::number(
            "c20",
            Dimension::Stress,
            "factor of (I1 - 3)^2, 0 if there is none",
            "c20 >= 0, or above -sqrt(3 c10 c30)",
        ),
        ParameterEntry::number(
            "c30",
            Dimension::Stress,
            "factor of (I1 - 3)^3, 0 if there is none",
            "c30 >= 0",
        ),
    ],
    family: None,
    formula: Yeoh::ENERGY,
    convention: "I1 = lambda1^2 + lambda2^2 + lambda3^2, lambda1 lambda2 lambda3 = 1; shear modulus 2 c10; \
                 no constant has a default, write 0",
    source: "Yeoh, Rubber Chem. Technol. 63 (1990) 792; 66 (1993) 754",
    build: |given| {
        let (c10, c20, c30) = (
            given.number("c10"),
            given.number("c20"),
            given.number("c30"),
        );
        if c10 <= 0.0 {
            let problem = Problem::out_of_range("c10", c10, "c10 > 0", "any positive stress");
            return Err(problem.because("the shear modulus is 2 c10"));
        }
        if c30 < 0.0 {
            let problem = Problem::out_of_range("c30", c30, "c30 >= 0", "0");
            return Err(problem.because("a negative c30 makes W unbounded below"));
        }
        // sqrt of each: the product may leave the range of a double
        let lowest = -3.0_f64.sqrt() * c10.sqrt() * c30.sqrt();
        if c20 < 0.0 && c20 <= lowest {
            let range = format!("c20 > -sqrt(3 c10 c30) = {lowest}");
            let nearest = match lowest {
                0.0 => "0".to_string(),
                _ => format!("any value above {lowest}"),
            };
            let problem = Problem::out_of_range("c20", c20, &range, &nearest);
            return Err(problem.because("dW/dI1 falls to zero at some strain, and stress with it"));
        }
        Ok(Material::incompressible(Yeoh { c10, c20, c30 }))
    },
};

impl Yeoh {
    /// dW/dI1 and W at `j` = I1 - 3.
    fn of_strain<D: Number>(&self, j: D) -> (D, D) {
        let slope = (j * (3.0 * self.c30) + 2.0 * self.c20) * j + self.c10;
        let energy = ((j * self.c30 + self.c20) * j + self.c10) * j;
        (slope, energy)
    }
}

impl Formula for Yeoh {
    const NAME: &'static str = "Yeoh";
    const ENERGY: &'static str = "W = c10 (I1 - 3) + c20 (I1 - 3)^2 + c30 (I1 - 3)^3";

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
        j * self.c10 + j * j * self.c20 + j * j * j * self.c30
    }

    fn shear_modulus(&self) -> f64 {
        2.0 * self.c10
    }

    fn parameters(&self) -> Vec<Parameter> {
        vec![
            Parameter::number("c10", self.c10, Dimension::Stress),
            Parameter::number("c20", self.c20, Dimension::Stress),
            Parameter::number("c30", self.c30, Dimension::Stress),
        ]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::materials::build;

    // Uniaxial tension at l = 2, J = 2: true stress 2 (l^2 - 1/l) (c10 + 2 c20 J + 3 c30 J^2) = 7 (0.5 - 0.04 + 0.012).
    // Red when a factor 2 or 3 of a power is lost.
    #[test]
    fn uniaxial_tension_is_the_textbook_number() {
        let law = Yeoh {
            c10: 0.5,
            c20: -0.01,
            c30: 0.001,
        };
        let form = law.differences(0.0, 2.0_f64.ln());
        assert!((form.axial - 3.304).abs() < 1e-14);
        assert!((form.energy - (1.0 - 0.04 + 0.008)).abs() < 1e-15);
    }

    // Red when the lower end of c20 moves: dW/dI1 touches zero at c20 = -sqrt(3 c10 c30) = -0.3.
    #[test]
    fn a_softening_to_nothing_is_refused() {
        let law = |c20: f64, c30: f64| {
            let values = [("c10", 0.3), ("c20", c20), ("c30", c30)];
            build("Yeoh", &values.map(|(n, v)| (n.to_string(), v)))
        };
        assert!(law(-0.29, 0.1).is_ok() && law(0.0, 0.0).is_ok());
        for (c20, c30, parameter) in [(-0.31, 0.1, "c20"), (-1e-3, 0.0, "c20"), (0.1, -0.1, "c30")]
        {
            let problem = law(c20, c30).expect_err(parameter);
            assert_eq!(problem.parameter, parameter);
            assert!(problem.hint.contains("nearest admissible"));
        }
    }
}
