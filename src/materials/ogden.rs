//! Ogden law, `W = sum mu_i/alpha_i (l1^alpha_i + l2^alpha_i + l3^alpha_i - 3)`, any number of terms, and the same law by
//! the moduli other programs use, `W = sum 2 mu_i/alpha_i^2 (..)`.
//!
//! Ogden, Proc. R. Soc. A 326 (1972) 565 (from memory). `T_k = f(l_k)`, `f(l) = sum mu_i l^alpha_i`. Difference form (numerics.md 1), none of
//! it by subtracting nearly equal numbers, `y = exp(alpha e/2)`:
//! ```text
//! Tt - Tr = sum mu e^(alpha er) expm1(alpha d)        Tz - Tr = sum mu e^(alpha er) expm1(alpha (3e+d)/2)
//! 2Tz - Tt - Tr = sum 2 mu/y (expm1(3 alpha e/2) - 2 sinh(alpha d/4)^2)
//! W = sum mu/alpha [expm1(alpha e/2)^2 (y+2)/y + 4 sinh(alpha d/4)^2/y]
//! ```
//! **Which constants are sound.** T_k - T_j = f(l_k) - f(l_j), so the greater stretch has the greater stress in every
//! state (Baker and Ericksen) just when f rises everywhere: `sum mu_i alpha_i l^alpha_i > 0` for every l > 0. Then W also
//! grows along every ray of logarithmic strain. Terms with mu_i alpha_i > 0 do it by themselves; a term with
//! mu_i alpha_i < 0 is admitted if it takes away at most nine tenths of what the others give, at every l: so much that
//! no more than one digit is lost in the sums.

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::incompressible::{Differences, Formula, Hardening, Number};
use super::{ConstantForm, Constants, Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;
use crate::numerics::exponential_sum::not_positive_at;

/// Largest |alpha_i|: beyond it powers of ordinary stretches leave the range where digits are kept.
const STEEPEST: f64 = 50.0;

/// Share of the positive stiffness that negative terms may take away.
const MOST_TAKEN: f64 = 0.9;

/// One term: mu (stress) and its exponent.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct OgdenTerm {
    pub mu: f64,
    pub alpha: f64,
}

/// The law with its terms.
#[derive(Debug, Clone, PartialEq)]
pub struct Ogden {
    pub terms: Vec<OgdenTerm>,
}

/// The same law with other moduli: `mu_i` here are `mu_i alpha_i/2` there.
#[derive(Debug, Clone, PartialEq)]
pub struct OgdenModuli {
    law: Ogden,
    moduli: Vec<f64>,
}

const ALPHA: ParameterEntry = ParameterEntry::number(
    "alpha",
    Dimension::None,
    "exponents, one a term",
    "as many as mu, none 0, each at most 50 in size",
)
.of(ConstantForm::List);

pub(super) const ENTRY: Entry = Entry {
    name: Ogden::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[
        ParameterEntry::number(
            "mu",
            Dimension::Stress,
            "factors, one a term",
            "mu_i alpha_i > 0; less if the sum of mu_i alpha_i lambda^alpha_i keeps a tenth of its positive terms",
        )
        .of(ConstantForm::List),
        ALPHA,
    ],
    family: None,
    formula: Ogden::ENERGY,
    convention: "lambda1 lambda2 lambda3 = 1; shear modulus sum of mu_i alpha_i/2, so that mu_i has the sign of alpha_i; \
                 programs that write 2 mu_i/alpha_i^2 give mu_i alpha_i/2 of these: use Ogden-moduli",
    source: "Ogden, Proc. R. Soc. A 326 (1972) 565",
    build: |given| {
        let (mu, alpha) = lists(given)?;
        let pairs = mu.iter().zip(alpha);
        let terms = pairs.map(|(&mu, &alpha)| OgdenTerm { mu, alpha });
        let law = Ogden {
            terms: terms.collect(),
        };
        law.check(mu)?;
        Ok(Material::incompressible(law))
    },
};

pub(super) const ENTRY_MODULI: Entry = Entry {
    name: OgdenModuli::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[
        ParameterEntry::number(
            "mu",
            Dimension::Stress,
            "shear moduli, one a term",
            "mu_i > 0; less if the sum of mu_i lambda^alpha_i keeps a tenth of its positive terms",
        )
        .of(ConstantForm::List),
        ALPHA,
    ],
    family: None,
    formula: OgdenModuli::ENERGY,
    convention: "lambda1 lambda2 lambda3 = 1; shear modulus sum of mu_i; Ogden's own form mu_i/alpha_i (..) has \
                 2 mu_i/alpha_i in place of these mu_i: use Ogden",
    source: "Ogden, Proc. R. Soc. A 326 (1972) 565; the form with moduli is that of several programs",
    build: |given| {
        let (moduli, alpha) = lists(given)?;
        let pairs = moduli.iter().zip(alpha);
        let terms = pairs.map(|(&modulus, &alpha)| OgdenTerm {
            mu: 2.0 * modulus / alpha,
            alpha,
        });
        let law = Ogden {
            terms: terms.collect(),
        };
        law.check(moduli)?;
        let moduli = moduli.to_vec();
        Ok(Material::incompressible(OgdenModuli { law, moduli }))
    },
};

/// mu and alpha, of one length and with admissible exponents.
fn lists(given: &Constants) -> Result<(&[f64], &[f64]), Problem> {
    let (mu, alpha) = (given.numbers("mu"), given.numbers("alpha"));
    if mu.is_empty() || mu.len() != alpha.len() {
        let (m, a) = (mu.len(), alpha.len());
        return Err(Problem {
            message: format!("{m} values of mu and {a} of alpha: each term has one of each"),
            parameter: if mu.is_empty() { "mu" } else { "alpha" }.to_string(),
            hint: "nearest admissible value: two lists of the same length, one term or more".into(),
        });
    }
    for (i, &value) in alpha.iter().enumerate() {
        let term = i + 1;
        let problem = |range: &str, nearest: &str| Problem {
            message: format!("alpha of term {term} = {value} is outside {range}"),
            parameter: "alpha".to_string(),
            hint: format!("nearest admissible value: {nearest}"),
        };
        if value == 0.0 {
            let found = problem("alpha < 0 or alpha > 0", "any small number but 0");
            return Err(found.because("a term with exponent 0 stores no energy"));
        }
        if value.abs() > STEEPEST {
            let nearest = STEEPEST.copysign(value);
            let found = problem("|alpha| <= 50", &nearest.to_string());
            return Err(found.because("the stress would have no digits at ordinary stretches"));
        }
    }
    Ok((mu, alpha))
}

impl Ogden {
    /// Whether some term takes stiffness away.
    fn mixed(&self) -> bool {
        self.terms.iter().any(|t| t.mu * t.alpha < 0.0)
    }

    /// A logarithmic stretch at which negative terms, `times` as large, take away more than their share.
    fn unsound_at(&self, times: f64) -> Option<f64> {
        let weighed = |t: &OgdenTerm| {
            let stiffness = t.mu * t.alpha;
            let factor = if stiffness < 0.0 { times } else { MOST_TAKEN };
            (stiffness * factor, t.alpha)
        };
        let sum: Vec<_> = self.terms.iter().map(weighed).collect();
        not_positive_at(&sum)
    }

    /// `typed` are the mu_i as the suite has them.
    fn check(&self, typed: &[f64]) -> Result<(), Problem> {
        let problem = |message: String, nearest: String| Problem {
            message,
            parameter: "mu".to_string(),
            hint: format!("nearest admissible value: {nearest}"),
        };
        let modulus = Formula::shear_modulus(self);
        if modulus <= 0.0 {
            let message = format!("the shear modulus at rest is {modulus}: no stiffness");
            return Err(problem(
                message,
                "any mu_i of the sign of alpha_i (Ogden-moduli: > 0)".into(),
            ));
        }
        let Some(at) = self.unsound_at(1.0) else {
            return Ok(());
        };
        let where_to = match at {
            f64::INFINITY => "without bound in tension".to_string(),
            f64::NEG_INFINITY => "without bound in compression".to_string(),
            at => format!("about the stretch {:.4}", at.exp()),
        };
        let first = self.terms.iter().position(|t| t.mu * t.alpha < 0.0);
        let i = first.unwrap_or(0);
        let value = typed[i];
        let message = format!(
            "mu of term {} = {value} takes stiffness away, more than nine tenths of what the other terms give, {where_to}: \
             the greater stretch would not carry the greater stress",
            i + 1
        );
        let admissible = self.admissible_share() * value;
        let nearest = if self.terms.iter().filter(|t| t.mu * t.alpha < 0.0).count() > 1 {
            format!("{admissible:.4e}, and the other such terms smaller in proportion")
        } else {
            format!("{admissible:.4e}")
        };
        Err(problem(message, nearest))
    }

    /// By what the negative terms have to be multiplied to be admissible, rounded down.
    fn admissible_share(&self) -> f64 {
        let (mut sound, mut unsound) = (0.0, 1.0);
        for _ in 0..40 {
            let middle = 0.5 * (sound + unsound);
            match self.unsound_at(middle) {
                None => sound = middle,
                Some(_) => unsound = middle,
            }
        }
        // so that four printed digits stay admissible
        sound * 0.9999
    }
}

impl Formula for Ogden {
    const NAME: &'static str = "Ogden";
    const ENERGY: &'static str =
        "W = sum_i mu_i/alpha_i (lambda1^alpha_i + lambda2^alpha_i + lambda3^alpha_i - 3)";

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let er = -(d + e) * 0.5;
        let zero = D::from(0.0);
        let mut sum = Differences {
            hoop: zero,
            axial: zero,
            reduced: zero,
            energy: zero,
        };
        for &OgdenTerm { mu, alpha } in &self.terms {
            let radial = (er * alpha).exp() * mu;
            let z = (e * (0.5 * alpha)).exp_m1();
            let y = z + 1.0;
            let half = (d * (0.25 * alpha)).sinh();
            let square = half * half;
            sum.hoop += radial * (d * alpha).exp_m1();
            sum.axial += radial * ((e * 3.0 + d) * (0.5 * alpha)).exp_m1();
            sum.reduced += ((e * (1.5 * alpha)).exp_m1() - square * 2.0) / y * (2.0 * mu);
            sum.energy += (z * z * (y + 2.0) + square * 4.0) / y * (mu / alpha);
        }
        sum
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let mut w = D::from(0.0);
        for &OgdenTerm { mu, alpha } in &self.terms {
            w += (l1.powf(alpha) + l2.powf(alpha) + l3.powf(alpha) - 3.0) * (mu / alpha);
        }
        w
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        // as a power of I1: (alpha - 2)/2
        let steepest = self.terms.iter().fold(0.0_f64, |m, t| m.max(t.alpha.abs()));
        let rate = (0.5 * steepest - 1.0).max(0.0);
        let cancelled = if self.mixed() {
            MOST_TAKEN / (1.0 - MOST_TAKEN)
        } else {
            0.0
        };
        Hardening {
            by_d: rate,
            loss: rate * (d.abs() + e.abs()) + cancelled,
        }
    }

    fn shear_modulus(&self) -> f64 {
        self.terms.iter().map(|t| 0.5 * t.mu * t.alpha).sum()
    }

    fn parameters(&self) -> Vec<Parameter> {
        let list = |f: fn(&OgdenTerm) -> f64| self.terms.iter().map(f).collect::<Vec<_>>();
        vec![
            Parameter::new("mu", list(|t| t.mu), Dimension::Stress),
            Parameter::new("alpha", list(|t| t.alpha), Dimension::None),
        ]
    }
}

impl Formula for OgdenModuli {
    const NAME: &'static str = "Ogden-moduli";
    const ENERGY: &'static str =
        "W = sum_i 2 mu_i/alpha_i^2 (lambda1^alpha_i + lambda2^alpha_i + lambda3^alpha_i - 3)";

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        self.law.differences(d, e)
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let mut w = D::from(0.0);
        for (&modulus, term) in self.moduli.iter().zip(&self.law.terms) {
            let a = term.alpha;
            w += (l1.powf(a) + l2.powf(a) + l3.powf(a) - 3.0) * (2.0 * modulus / (a * a));
        }
        w
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        Formula::hardening(&self.law, d, e)
    }

    fn shear_modulus(&self) -> f64 {
        self.moduli.iter().sum()
    }

    fn parameters(&self) -> Vec<Parameter> {
        let alpha: Vec<_> = self.law.terms.iter().map(|t| t.alpha).collect();
        vec![
            Parameter::new("mu", self.moduli.clone(), Dimension::Stress),
            Parameter::new("alpha", alpha, Dimension::None),
        ]
    }
}

#[cfg(test)]
#[path = "ogden_tests.rs"]
mod tests;
