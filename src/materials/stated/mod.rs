//! A law whose energy the user types, `W(I1, I2)`, `W(I1, I2, I4)` or `W(l1, l2, l3)`.
//!
//! No derivative is typed: dual numbers take them from the one text. Of invariants, `Tt - Tr = 2 (W1 + lz^2 W2)(lt^2 - lr^2)`
//! and so on have no cancellation, and `I1 - 3`, `I2 - 3`, `I4 - 1` in the text are the differences of the strain, not
//! subtractions. Of stretches see `stretches`.
//!
//! Two families of fibres at +-beta from the hoop direction: `I4 = lt^2 cos^2 beta + lz^2 sin^2 beta` of either, and W as typed
//! counts both: `Tt` gains `2 lt^2 cos^2 beta W4`, `Tz` gains `2 lz^2 sin^2 beta W4`.

mod read;
mod stretches;
#[cfg(test)]
mod tests;

use super::catalogue::{Entry, ParameterEntry};
use super::incompressible::{Differences, Formula, Hardening, Number};
use super::invariants::Invariants;
use super::{Constant, ConstantForm, MaterialKind, Parameter};
use crate::mechanics::Dimension;
use crate::numerics::{Expression, GaussRule, find_root};
use num_dual::{Dual, Dual64};

/// Names that an energy may use, then the differences that the text's `I1 - 3`, `I2 - 3`, `I4 - 1` are.
const VARIABLES: [&str; 6] = ["I1", "I2", "I4", "l1", "l2", "l3"];
/// What is subtracted from each invariant.
const AT_REST: [f64; 3] = [3.0, 3.0, 1.0];
/// Number of values an energy is evaluated with.
const VALUES: usize = 9;

/// Strain below which W is an integral of its slope: of the text itself W has eps/strain^2 of itself.
const SMALL: f64 = 0.5;
/// Half the range of ln(lt/lr) that is searched for kinks, and its step.
const WIDEST: f64 = 6.0;
const STEP: f64 = 0.02;

/// A typed energy with its constants.
#[derive(Debug, Clone, PartialEq)]
pub struct Stated {
    energy: Expression,
    constants: Vec<(String, f64)>,
    form: Form,
    /// Shear modulus of the unstrained material.
    modulus: f64,
}

/// What the energy is a function of.
#[derive(Debug, Clone, Copy, PartialEq)]
enum Form {
    /// I1, I2, and I4 of fibres with the squares of cosine and sine of their angle.
    Invariants {
        cos2: f64,
        sin2: f64,
    },
    Stretches,
}

pub(super) const ENTRY: Entry = Entry {
    name: Stated::NAME,
    kind: MaterialKind::Incompressible,
    parameters: &[
        ParameterEntry::number(
            "energy",
            Dimension::Stress,
            "the strain energy W as an expression, see `truebore catalogue expressions`",
            "zero at rest, shear modulus > 0; of stretches: the same for every order of them",
        )
        .of(ConstantForm::Text),
        ParameterEntry::number(
            "constants",
            Dimension::None,
            "numbers the expression calls by name",
            "each must occur; with I4 an angle beta, 0 to pi/2",
        )
        .of(ConstantForm::Named)
        .optional(),
    ],
    family: None,
    formula: Stated::ENERGY,
    convention: "I1 = l1^2 + l2^2 + l3^2, I2 = l1^-2 + l2^-2 + l3^-2, l1 l2 l3 = 1; I4 = lt^2 cos^2 beta + lz^2 sin^2 beta of two \
                 families of fibres at +-beta from the hoop direction, W as typed counts both; the digits of W and its stresses \
                 do not depend on how I1 - 3, I2 - 3, I4 - 1 are written at small strain",
    source: "the suite itself",
    build: |given| read::build(given.text("energy"), given.named("constants")),
};

impl Stated {
    /// I1 - 3, I2 - 3, I4 - 1.
    fn strain<D: Number>(&self, i: &Invariants<D>, d: D, e: D) -> [D; 3] {
        let fibre = match self.form {
            Form::Invariants { cos2, sin2 } => (d - e).exp_m1() * cos2 + (e * 2.0).exp_m1() * sin2,
            Form::Stretches => D::from(0.0),
        };
        [i.i1, i.i2, fibre]
    }

    /// W of the text at invariants given by their differences from rest.
    fn typed<D: Number>(&self, strain: [D; 3]) -> D {
        let mut values = [D::from(0.0); VALUES];
        for (k, difference) in strain.into_iter().enumerate() {
            values[k] = difference + AT_REST[k];
            values[k + VARIABLES.len()] = difference;
        }
        self.energy.evaluate(&values)
    }

    /// Whether the text has the `k`-th invariant.
    fn has(&self, k: usize) -> bool {
        self.energy.uses(k) || self.energy.uses(k + VARIABLES.len())
    }

    /// dW/dI1, dW/dI2, dW/dI4.
    fn slopes<D: Number>(&self, strain: [D; 3]) -> [D; 3] {
        [0, 1, 2].map(|k| {
            if !self.has(k) {
                return D::from(0.0);
            }
            let mut lifted = strain.map(Dual::from_re);
            lifted[k] = lifted[k].derivative();
            self.typed(lifted).eps
        })
    }

    /// W: at small strain the integral of its slope along the straight way from rest, else the text's value.
    fn stored<D: Number>(&self, strain: [D; 3]) -> D {
        let size = strain.iter().fold(0.0_f64, |m, s| m.max(s.re().abs()));
        let integral = |points: usize| {
            let pairs = GaussRule::of(points).on(0.0, 1.0);
            pairs.fold(D::from(0.0), |sum, (t, weight)| {
                let slopes = self.slopes(strain.map(|s| s * t));
                let along = slopes[0] * strain[0] + slopes[1] * strain[1] + slopes[2] * strain[2];
                sum + along * weight
            })
        };
        settled(size, integral).unwrap_or_else(|| self.typed(strain))
    }

    fn of_invariants<D: Number>(&self, cos2: f64, sin2: f64, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        let strain = self.strain(&i, d, e);
        let [w1, w2, w4] = self.slopes(strain);
        let hoop = (d - e).exp() * w4 * (2.0 * cos2);
        let axial = (e * 2.0).exp() * w4 * (2.0 * sin2);
        Differences {
            hoop: i.hoop(w1, w2) + hoop,
            axial: i.axial(w1, w2) + axial,
            reduced: i.reduced(w1, w2) + axial * 2.0 - hoop,
            energy: self.stored(strain),
        }
    }

    /// Nothing, where the text has no value, or has passed a pole to an energy below that of rest.
    fn sound<D: Number>(&self, found: Differences<D>) -> Differences<D> {
        let all = [found.hoop, found.axial, found.reduced, found.energy];
        if all.iter().all(|x| x.re().is_finite()) && found.energy.re() >= -1e-9 * self.modulus {
            return found;
        }
        let [hoop, axial, reduced, energy] = all.map(|x| x * f64::NAN);
        Differences {
            hoop,
            axial,
            reduced,
            energy,
        }
    }

    /// How much each slope of W weighs in the stress differences.
    fn weights(cos2: f64, sin2: f64, d: f64, e: f64) -> [f64; 3] {
        let both = 2.0 * ((d - e).exp() + (-d - e).exp());
        let (hoop, axial) = ((d - e).exp() * cos2, (2.0 * e).exp() * sin2);
        [both, both * (2.0 * e).exp(), 2.0 * (hoop + axial)]
    }

    /// As of laws of I1 alone, each slope of W by its weight.
    fn hardening_of_invariants(&self, cos2: f64, sin2: f64, d: f64, e: f64) -> Hardening {
        let weights = Self::weights(cos2, sin2, d, e);
        let sum = |slopes: [Dual64; 3], part: fn(&Dual64) -> f64| -> f64 {
            let terms = slopes.iter().zip(weights);
            terms
                .map(|(slope, weight)| part(slope).abs() * weight)
                .sum()
        };
        let dual = Dual64::from(d).derivative();
        let by_d = self.strain(&Invariants::at(dual, e.into()), dual, e.into());
        let by_d = self.slopes(by_d);
        // all strains grow in proportion
        let plain = self.strain(&Invariants::at(d, e), d, e);
        let by_size = self.slopes(plain.map(|s| Dual64::new(s, s)));
        let size = sum(by_size, |s| s.re);
        Hardening {
            by_d: sum(by_d, |s| s.eps) / size,
            loss: sum(by_size, |s| s.eps) / size,
        }
    }
}

/// An integral at small strain, by the first pair of Gauss rules that agree.
fn settled<D: Number>(strain: f64, integral: impl Fn(usize) -> D) -> Option<D> {
    if strain >= SMALL {
        return None;
    }
    let by = |(fewer, more): (usize, usize)| {
        let (coarse, fine) = (integral(fewer), integral(more));
        let near = (coarse.re() - fine.re()).abs() <= 1e-14 * fine.re().abs();
        near.then_some(fine)
    };
    by((5, 8)).or_else(|| by((12, 18)))
}

impl Formula for Stated {
    const NAME: &'static str = "stated";
    const ENERGY: &'static str = "W as typed, of I1, I2, of I1, I2, I4 or of l1, l2, l3";

    fn isotropic(&self) -> bool {
        !self.has(2)
    }

    fn energy_text(&self) -> String {
        let mut text = format!("W = {}", self.energy.text());
        for (i, (name, value)) in self.constants.iter().enumerate() {
            let lead = if i == 0 { ", with " } else { ", " };
            text.push_str(&format!("{lead}{name} = {value}"));
        }
        if !Formula::isotropic(self) {
            text.push_str(
                "; I4 = lt^2 cos(beta)^2 + lz^2 sin(beta)^2, both families of fibres together",
            );
        }
        text
    }

    fn kinks(&self, e: f64) -> Vec<f64> {
        let mut found = Vec::new();
        for switch in 0..self.energy.switches() {
            let argument = |d: f64| {
                let strain = self.strain(&Invariants::at(d, e), d, e);
                let mut values = [0.0; VALUES];
                for (k, difference) in strain.into_iter().enumerate() {
                    values[k] = difference + AT_REST[k];
                    values[k + VARIABLES.len()] = difference;
                }
                self.energy.switch(switch, &values)
            };
            // no node at d = 0, where a kink often is
            let node = |i: usize| (i as f64 + 0.5) * STEP - WIDEST;
            let nodes = (0..(2.0 * WIDEST / STEP) as usize).map(|i| (node(i), argument(node(i))));
            let nodes: Vec<_> = nodes.collect();
            for pair in nodes.windows(2) {
                let ((from, before), (to, after)) = (pair[0], pair[1]);
                if before * after < 0.0 {
                    found.extend(find_root(from, to, argument).ok());
                }
            }
        }
        found.sort_by(f64::total_cmp);
        found.dedup();
        found
    }

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        self.sound(match self.form {
            Form::Invariants { cos2, sin2 } => self.of_invariants(cos2, sin2, d, e),
            Form::Stretches => self.of_stretches(d, e),
        })
    }

    fn energy<D: Number>(&self, [lr, lt, lz]: [D; 3]) -> D {
        let (a, b, c) = (lr * lr, lt * lt, lz * lz);
        let i4 = match self.form {
            Form::Invariants { cos2, sin2 } => b * cos2 + c * sin2,
            Form::Stretches => D::from(0.0),
        };
        let invariants = [a + b + c, a * b + b * c + c * a, i4];
        let less = |k: usize| invariants[k] - AT_REST[k];
        self.energy.evaluate(&[
            invariants[0],
            invariants[1],
            i4,
            lr,
            lt,
            lz,
            less(0),
            less(1),
            less(2),
        ])
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        match self.form {
            Form::Invariants { cos2, sin2 } => self.hardening_of_invariants(cos2, sin2, d, e),
            Form::Stretches => self.hardening_of_stretches(d, e),
        }
    }

    fn shear_modulus(&self) -> f64 {
        self.modulus
    }

    fn parameters(&self) -> Vec<Parameter> {
        let text = Constant::from(self.energy.text());
        let mut all = vec![Parameter::new("energy", text, Dimension::Stress)];
        if !self.constants.is_empty() {
            let named = Constant::Named(self.constants.clone());
            all.push(Parameter::new("constants", named, Dimension::None));
        }
        all
    }
}
