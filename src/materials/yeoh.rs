//! Yeoh law, `W = c10 (I1-3) + c20 (I1-3)^2 + c30 (I1-3)^3 + ..`.
//!
//! Yeoh, Rubber Chem. Technol. 63 (1990) 792; 66 (1993) 754 (from memory). I1 = sum of lambda_i^2 of the volume-preserving
//! stretches; no factor is in front of the powers. The first three constants must be given: a c30 forgotten in a suite would
//! be a wrong reference without a word. Further ones, c40 to c90, are those of a longer polynomial of the same kind.
//! `dW/dI1 = sum n cn0 J^(n-1)`, J = I1 - 3, must be positive at every J.

use super::catalogue::{Entry, Family, ParameterEntry, Problem};
use super::incompressible::{Differences, Formula, Hardening, Number};
use super::invariants::Invariants;
use super::power_series::PowerSeries;
use super::{Constants, Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;

/// Names of the factors of J, J^2, ..
const NAMES: [&str; 9] = [
    "c10", "c20", "c30", "c40", "c50", "c60", "c70", "c80", "c90",
];

/// How many of them must be given.
const REQUIRED: usize = 3;

/// The law with its numbers.
#[derive(Debug, Clone, PartialEq)]
pub struct Yeoh {
    /// c10, c20, .. without zeros beyond the third. Unit: stress.
    series: PowerSeries,
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
            "c20 >= 0, or above -sqrt(3 c10 c30) when c30 is the last",
        ),
        ParameterEntry::number(
            "c30",
            Dimension::Stress,
            "factor of (I1 - 3)^3, 0 if there is none",
            "c30 >= 0 when it is the last",
        ),
    ],
    family: Some(Family {
        pattern: "cN0",
        fits: |name| NAMES[REQUIRED..].contains(&name),
        dimension: Dimension::Stress,
        meaning: "factor of (I1 - 3)^N, N = 4 to 9; the last positive, dW/dI1 > 0 at every I1 >= 3",
    }),
    formula: Yeoh::ENERGY,
    convention: "I1 = lambda1^2 + lambda2^2 + lambda3^2, lambda1 lambda2 lambda3 = 1; shear modulus 2 c10; \
                 c10, c20 and c30 have no default, write 0; further terms c40, c50, .. may follow",
    source: "Yeoh, Rubber Chem. Technol. 63 (1990) 792; 66 (1993) 754",
    build: |given| {
        let factors = factors(given);
        check(&factors)?;
        let series = PowerSeries { factors };
        Ok(Material::incompressible(Yeoh { series }))
    },
};

/// c10, c20, .. up to the last that is not zero, three at least.
fn factors(given: &Constants) -> Vec<f64> {
    let value = |name: &&str| given.get(name).map_or(0.0, |_| given.number(name));
    let mut factors: Vec<_> = NAMES.iter().map(value).collect();
    while factors.len() > REQUIRED && factors.last() == Some(&0.0) {
        factors.pop();
    }
    factors
}

fn check(factors: &[f64]) -> Result<(), Problem> {
    if factors[0] <= 0.0 {
        let problem = Problem::out_of_range("c10", factors[0], "c10 > 0", "any positive stress");
        return Err(problem.because("the shear modulus is 2 c10"));
    }
    let last = factors.iter().rposition(|&c| c != 0.0).unwrap_or(0);
    if factors[last] < 0.0 {
        let (name, value) = (NAMES[last], factors[last]);
        let problem = Problem::out_of_range(name, value, &format!("{name} >= 0"), "0");
        return Err(problem.because("a negative last constant makes W unbounded below"));
    }
    if last == 2 {
        return check_three(factors);
    }
    let series = PowerSeries {
        factors: factors.to_vec(),
    };
    match series.falls_at() {
        None => Ok(()),
        Some(j) => Err(series.refused(j, "I1 - 3", &|n| NAMES[n - 1].to_string())),
    }
}

/// Three terms: the end of the range in closed form.
fn check_three(factors: &[f64]) -> Result<(), Problem> {
    let (c10, c20, c30) = (factors[0], factors[1], factors[2]);
    // sqrt of each: the product may leave the range of a double
    let lowest = -3.0_f64.sqrt() * c10.sqrt() * c30.sqrt();
    if c20 > lowest || c20 >= 0.0 {
        return Ok(());
    }
    let range = format!("c20 > -sqrt(3 c10 c30) = {lowest}");
    let nearest = format!("any value above {lowest}");
    let problem = Problem::out_of_range("c20", c20, &range, &nearest);
    Err(problem.because("dW/dI1 falls to zero at some strain, and stress with it"))
}

impl Yeoh {
    /// The usual three terms; their range is not checked, as [`super::build`] does.
    pub fn three_terms(c10: f64, c20: f64, c30: f64) -> Self {
        Self {
            series: PowerSeries {
                factors: vec![c10, c20, c30],
            },
        }
    }
}

impl Formula for Yeoh {
    const NAME: &'static str = "Yeoh";
    const ENERGY: &'static str = "W = c10 (I1 - 3) + c20 (I1 - 3)^2 + c30 (I1 - 3)^3";

    fn energy_text(&self) -> String {
        let mut text = Self::ENERGY.to_string();
        for (i, name) in NAMES.iter().enumerate().take(self.series.factors.len()) {
            if i >= REQUIRED {
                text.push_str(&format!(" + {name} (I1 - 3)^{}", i + 1));
            }
        }
        text
    }

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        let (w1, energy) = self.series.of(i.i1);
        i.of_first(w1, energy)
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let j = l1 * l1 + l2 * l2 + l3 * l3 - 3.0;
        let (mut w, mut power) = (D::from(0.0), j);
        for &c in &self.series.factors {
            w += power * c;
            power *= j;
        }
        w
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        Hardening {
            by_d: 0.0,
            loss: self.series.cancelled(Invariants::at(d, e).i1),
        }
    }

    fn shear_modulus(&self) -> f64 {
        2.0 * self.series.factors[0]
    }

    fn parameters(&self) -> Vec<Parameter> {
        let pairs = NAMES.iter().zip(&self.series.factors);
        pairs
            .map(|(name, &value)| Parameter::number(name, value, Dimension::Stress))
            .collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::materials::build;

    fn law(constants: &[(&str, f64)]) -> Result<Material, Problem> {
        let values: Vec<_> = constants.iter().map(|(n, v)| (n.to_string(), *v)).collect();
        build("Yeoh", &values)
    }

    // Uniaxial tension at l = 2, J = 2: true stress 2 (l^2 - 1/l) (c10 + 2 c20 J + 3 c30 J^2 + 4 c40 J^3) =
    // 7 (0.5 - 0.04 + 0.012 + 0.0032). Red when a factor 2, 3 or 4 of a power is lost.
    #[test]
    fn uniaxial_tension_is_the_textbook_number() {
        let three = [("c10", 0.5), ("c20", -0.01), ("c30", 0.001)];
        let four = [three.as_slice(), &[("c40", 1e-4)]].concat();
        for (constants, axial, energy, text) in [
            (three.to_vec(), 3.304, 0.968, "c30 (I1 - 3)^3"),
            (four, 3.3264, 0.9696, "c40 (I1 - 3)^4"),
        ] {
            let Ok(Material::Incompressible(law)) = law(&constants) else {
                panic!("refused");
            };
            let form = law.at(0.0, 2.0_f64.ln());
            assert!((form.axial - axial).abs() < 1e-14);
            assert!((form.energy - energy).abs() < 1e-15);
            assert!(law.energy_text().ends_with(text));
            assert_eq!(law.parameters().len(), constants.len());
        }
    }

    // Red when the lower end of c20 moves: dW/dI1 touches zero at c20 = -sqrt(3 c10 c30) = -0.3.
    #[test]
    fn a_softening_to_nothing_is_refused() {
        let law = |c20: f64, c30: f64| law(&[("c10", 0.3), ("c20", c20), ("c30", c30)]);
        assert!(law(-0.29, 0.1).is_ok() && law(0.0, 0.0).is_ok() && law(0.1, 0.0).is_ok());
        for (c20, c30, parameter) in [(-0.31, 0.1, "c20"), (-1e-3, 0.0, "c20"), (0.1, -0.1, "c30")]
        {
            let problem = law(c20, c30).expect_err(parameter);
            assert_eq!(problem.parameter, parameter);
            assert!(problem.hint.contains("nearest admissible"));
        }
    }

    // c10 + 4 c40 J^3 + 2 c20 J touches zero where c10 = 8 c40 J^3: with c10 = 1, c40 = 1/8 at J = 1, c20 = -3/4.
    // Red when a further term is left out of the search, or the nearest value is not admissible.
    #[test]
    fn further_terms_are_searched_for_a_softening() {
        let made =
            |c20: f64, c40: f64| law(&[("c10", 1.0), ("c20", c20), ("c30", 0.0), ("c40", c40)]);
        assert!(made(-0.7499, 0.125).is_ok());
        let problem = made(-0.7501, 0.125).expect_err("softens");
        assert!(problem.message.contains("I1 - 3 = 1.0"), "{problem}");
        let nearest: f64 = problem.hint.rsplit(' ').next().unwrap().parse().unwrap();
        assert!(
            made(nearest, 0.125).is_ok() && nearest < -0.749,
            "{}",
            problem.hint
        );
        assert_eq!(made(0.1, -1e-9).expect_err("falls").parameter, "c40");
        let unknown = law(&[("c10", 1.0), ("c20", 0.0), ("c30", 0.0), ("c100", 1.0)]);
        assert!(unknown.expect_err("c100").message.contains("no parameter"));
    }
}
