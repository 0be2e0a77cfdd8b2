//! Polynomial in both invariants, `W = sum cIJ (I1-3)^I (I2-3)^J`, constants `c10`, `c01`, `c11`, ..
//!
//! Rivlin, Phil. Trans. R. Soc. A 241 (1948) 379; Rivlin & Saunders, ibid. A 243 (1951) 251 (from memory). Mooney-Rivlin and Yeoh are cases of it.
//! The greater stretch has the greater stress (Baker and Ericksen) when `dW/dI1 + l^2 dW/dI2 > 0` for each stretch l. This
//! is granted here by `dW/dI1 >= 0` and `dW/dI2 >= 0`: constants of products must not be negative, those of pure powers
//! may be, as long as the slope of the pure power series stays positive. A negative constant of a product is refused
//! without a look at the attainable pairs of invariants: some of those laws would be sound.

use super::catalogue::{Entry, Family, Problem};
use super::incompressible::{Differences, Formula, Hardening, Number};
use super::invariants::Invariants;
use super::power_series::PowerSeries;
use super::{Constants, Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;

/// One term.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PolynomialTerm {
    /// Power of I1 - 3.
    pub i: usize,
    /// Power of I2 - 3.
    pub j: usize,
    /// Unit: stress.
    pub c: f64,
}

/// The law with its terms, by ascending powers.
#[derive(Debug, Clone, PartialEq)]
pub struct Polynomial {
    pub terms: Vec<PolynomialTerm>,
}

pub(super) const ENTRY: Entry = Entry {
    name: Polynomial::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[],
    family: Some(Family {
        pattern: "cIJ",
        fits: |name| powers(name).is_some(),
        dimension: Dimension::Stress,
        meaning: "factor of (I1 - 3)^I (I2 - 3)^J, I and J single digits, I + J >= 1; c10 + c01 > 0, products \
                  >= 0, pure powers may be negative if dW/dI1 (dW/dI2) stays positive",
    }),
    formula: Polynomial::ENERGY,
    convention: "I1 = sum of lambda_i^2, I2 = sum of lambda_i^-2, lambda1 lambda2 lambda3 = 1; shear modulus \
                 2 (c10 + c01); what is not given is 0; the first digit belongs to I1",
    source: "Rivlin, Phil. Trans. R. Soc. A 241 (1948) 379; Rivlin & Saunders, Phil. Trans. R. Soc. A 243 (1951) 251",
    build: |given| {
        let law = Polynomial {
            terms: terms(given),
        };
        law.check()?;
        Ok(Material::incompressible(law))
    },
};

/// I and J of `cIJ`.
fn powers(name: &str) -> Option<(usize, usize)> {
    let [b'c', i, j] = name.as_bytes() else {
        return None;
    };
    let digit = |c: &u8| c.is_ascii_digit().then(|| usize::from(c - b'0'));
    let found = (digit(i)?, digit(j)?);
    (found != (0, 0)).then_some(found)
}

fn terms(given: &Constants) -> Vec<PolynomialTerm> {
    let mut terms = Vec::new();
    for (name, _) in given.iter() {
        if let Some((i, j)) = powers(name) {
            let c = given.number(name);
            terms.push(PolynomialTerm { i, j, c });
        }
    }
    terms.sort_by_key(|t| (t.i + t.j, t.j));
    terms
}

impl PolynomialTerm {
    fn name(&self) -> String {
        format!("c{}{}", self.i, self.j)
    }

    fn text(&self) -> String {
        let power = |invariant: &str, n: usize| match n {
            0 => String::new(),
            1 => format!(" ({invariant} - 3)"),
            n => format!(" ({invariant} - 3)^{n}"),
        };
        let (first, second) = (power("I1", self.i), power("I2", self.j));
        format!("{}{first}{second}", self.name())
    }
}

impl Polynomial {
    /// Factor of a pair of powers.
    fn factor(&self, i: usize, j: usize) -> f64 {
        let found = self.terms.iter().find(|t| (t.i, t.j) == (i, j));
        found.map_or(0.0, |t| t.c)
    }

    /// Terms of I1 alone, and of I2 alone.
    fn pure(&self) -> [PowerSeries; 2] {
        let first = (1..=9).map(|n| self.factor(n, 0)).collect();
        let second = (1..=9).map(|n| self.factor(0, n)).collect();
        [first, second].map(|factors| PowerSeries { factors })
    }

    fn check(&self) -> Result<(), Problem> {
        let (c10, c01) = (self.factor(1, 0), self.factor(0, 1));
        if c10 + c01 <= 0.0 {
            let name = if c01 < 0.0 { "c01" } else { "c10" };
            let sum = c10 + c01;
            return Err(Problem {
                message: format!(
                    "c10 + c01 = {sum}: the shear modulus, twice that, is not positive"
                ),
                parameter: name.to_string(),
                hint: "nearest admissible value: any positive c10 or c01".to_string(),
            });
        }
        let bad = |t: &&PolynomialTerm| t.c < 0.0 && (t.i + t.j == 1 || (t.i > 0 && t.j > 0));
        if let Some(term) = self.terms.iter().find(bad) {
            let (name, range) = (term.name(), format!("{} >= 0", term.name()));
            let problem = Problem::out_of_range(&name, term.c, &range, "0");
            return Err(problem.because(
                "a negative first or mixed factor takes away stiffness in some deformation, and no test for which is made",
            ));
        }
        let [first, second] = self.pure();
        if let Some(at) = first.falls_at() {
            return Err(first.refused(at, "I1 - 3", &|n| format!("c{n}0")));
        }
        if let Some(at) = second.falls_at() {
            return Err(second.refused(at, "I2 - 3", &|n| format!("c0{n}")));
        }
        Ok(())
    }

    /// dW/dI1, dW/dI2 and W from the invariants less 3.
    fn of<D: Number>(&self, j1: D, j2: D) -> (D, D, D) {
        let mut sums = (D::from(0.0), D::from(0.0), D::from(0.0));
        for &PolynomialTerm { i, j, c } in &self.terms {
            let (a, b) = (power(j1, i), power(j2, j));
            sums.2 += a * b * c;
            if i > 0 {
                sums.0 += power(j1, i - 1) * b * (c * i as f64);
            }
            if j > 0 {
                sums.1 += power(j2, j - 1) * a * (c * j as f64);
            }
        }
        sums
    }
}

/// By repeated multiplication: a dual number at zero has no logarithm.
fn power<D: Number>(x: D, n: usize) -> D {
    (0..n).fold(D::from(1.0), |product, _| product * x)
}

impl Formula for Polynomial {
    const NAME: &'static str = "polynomial";
    const ENERGY: &'static str = "W = sum cIJ (I1 - 3)^I (I2 - 3)^J";

    fn energy_text(&self) -> String {
        let terms: Vec<_> = self.terms.iter().map(PolynomialTerm::text).collect();
        format!("W = {}", terms.join(" + "))
    }

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        let (w1, w2, energy) = self.of(i.i1, i.i2);
        i.of_both(w1, w2, energy)
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let (a, b, c) = (l1 * l1, l2 * l2, l3 * l3);
        let (j1, j2) = (a + b + c - 3.0, a * b + b * c + c * a - 3.0);
        let mut w = D::from(0.0);
        for term in &self.terms {
            w += power(j1, term.i) * power(j2, term.j) * term.c;
        }
        w
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        if self.terms.iter().all(|t| t.c >= 0.0) {
            return Hardening::default();
        }
        let i = Invariants::at(d, e);
        let [first, second] = self.pure();
        Hardening {
            by_d: 0.0,
            loss: first.cancelled(i.i1).max(second.cancelled(i.i2)),
        }
    }

    fn shear_modulus(&self) -> f64 {
        2.0 * (self.factor(1, 0) + self.factor(0, 1))
    }

    fn parameters(&self) -> Vec<Parameter> {
        let terms = self.terms.iter();
        terms
            .map(|t| Parameter::new(t.name(), t.c, Dimension::Stress))
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::materials::build;

    fn law(constants: &[(&str, f64)]) -> Result<Material, Problem> {
        let values: Vec<_> = constants.iter().map(|(n, v)| (n.to_string(), *v)).collect();
        build("polynomial", &values)
    }

    // Uniaxial tension at l = 2: I1 - 3 = 2, I2 - 3 = 4 + 1/4 - 3 = 1.25; true stress 2 (l^2 - 1/l)(W1 + W2/l) with W1 = c10 + c11 1.25,
    // W2 = c01 + 2 c11 + 2 c02 1.25. Red when I and J change places.
    #[test]
    fn uniaxial_tension_is_the_textbook_number() {
        let made = law(&[("c02", 0.03), ("c10", 0.3), ("c11", 0.04), ("c01", 0.2)]);
        let Ok(Material::Incompressible(law)) = made else {
            panic!("refused");
        };
        let form = law.at(0.0, 2.0_f64.ln());
        let (w1, w2) = (0.3 + 0.04 * 1.25, 0.2 + 0.04 * 2.0 + 0.06 * 1.25);
        assert!((form.axial / (7.0 * (w1 + 0.5 * w2)) - 1.0).abs() < 1e-15);
        let energy = 0.6 + 0.25 + 0.04 * 2.5 + 0.03 * 1.5625;
        assert!((form.energy - energy).abs() < 4e-16);
        let text = "W = c10 (I1 - 3) + c01 (I2 - 3) + c11 (I1 - 3) (I2 - 3) + c02 (I2 - 3)^2";
        assert_eq!(law.energy_text(), text);
        assert_eq!(law.parameters()[1].name, "c01");
        assert_eq!(law.shear_modulus(), 1.0);
    }

    // Red when a rule is dropped.
    #[test]
    fn unstable_constants_are_refused_by_name() {
        for (constants, parameter, says) in [
            (vec![], "c10", "not positive"),
            (vec![("c11", 0.1)], "c10", "not positive"),
            (vec![("c10", 0.1), ("c01", -0.2)], "c01", "not positive"),
            (vec![("c10", 0.3), ("c01", -0.1)], "c01", "outside c01 >= 0"),
            (vec![("c10", 0.3), ("c11", -0.1)], "c11", "outside c11 >= 0"),
            (vec![("c10", 0.3), ("c20", -0.1)], "c20", "as I1 - 3 grows"),
            (
                vec![("c10", 0.3), ("c20", -0.31), ("c30", 0.1)],
                "c20",
                "about I1 - 3 = 1.0",
            ),
            (
                vec![("c10", 0.3), ("c02", -0.31), ("c03", 0.1)],
                "c02",
                "at I2 - 3 = 0",
            ),
            (vec![("c10", 0.3), ("c00", 0.1)], "c00", "no parameter"),
            (vec![("c10", 0.3), ("c111", 0.1)], "c111", "no parameter"),
        ] {
            let problem = law(&constants).expect_err(says);
            assert_eq!(problem.parameter, parameter, "{problem}");
            assert!(problem.message.contains(says), "{problem}");
            assert!(!problem.hint.is_empty(), "{problem}");
        }
        assert!(law(&[("c10", 0.3), ("c20", -0.29), ("c30", 0.1)]).is_ok());
        assert!(law(&[("c01", 0.3)]).is_ok());
    }
}
