//! Arruda-Boyce law of eight chains with the exact inverse Langevin function,
//! `W = mu N (x b + ln(b/sinh b)) - const`, `x = sqrt(I1/(3N))`, `L(b) = coth b - 1/b = x`.
//!
//! Arruda & Boyce, J. Mech. Phys. Solids 41 (1993) 389 (from memory). `dW/dI1 = mu b/(6 x)`. mu is n k T, the modulus of chains that never
//! stretch out; the shear modulus at rest is `mu b0/(3 x0)` with `x0 = 1/sqrt(N)`, larger by 1 + 3/(5N) + .. (some
//! programs ask for that one). The law locks at `I1 = 3N`.

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::incompressible::{Differences, Formula, Hardening, Number};
use super::invariants::Invariants;
use super::locking::LockStretches;
use super::{Constants, Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;
use crate::numerics::GaussRule;
use crate::numerics::langevin::{InverseLangevin, ln_sinh_ratio};

/// Up to here W is integrated, beyond it is the difference of two values of the closed form (numerics.md 8).
const INTEGRATED: f64 = 0.3;

/// The law with its numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ArrudaBoyce {
    /// n k T, positive. Unit: stress.
    pub mu: f64,
    /// Links of a chain between two knots, above 1.
    pub n: f64,
}

pub(super) const CONSTANTS: &[ParameterEntry] = &[
    ParameterEntry::number(
        "mu",
        Dimension::Stress,
        "n k T; the shear modulus at rest is larger",
        "mu > 0",
    ),
    ParameterEntry::number("N", Dimension::None, "links of a chain", "N > 1"),
];

pub(super) const ENTRY: Entry = Entry {
    name: ArrudaBoyce::NAME,
    kind: MaterialKind::Incompressible,
    parameters: CONSTANTS,
    family: None,
    formula: ArrudaBoyce::ENERGY,
    convention: "I1 = lambda1^2 + lambda2^2 + lambda3^2, lambda1 lambda2 lambda3 = 1; mu = n k T, shear modulus at rest \
                 mu b0/(3 x0) = mu (1 + 3/(5 N) + 99/(175 N^2) + ..), x0 = 1/sqrt(N); locks at I1 = 3 N (some texts \
                 give lambda_m = sqrt(N))",
    source: "Arruda & Boyce, J. Mech. Phys. Solids 41 (1993) 389",
    build: |given| {
        let (mu, n) = checked(given)?;
        Ok(Material::incompressible(ArrudaBoyce { mu, n }))
    },
};

/// mu and N in their ranges.
pub(super) fn checked(given: &Constants) -> Result<(f64, f64), Problem> {
    let (mu, n) = (given.number("mu"), given.number("N"));
    if mu <= 0.0 {
        let nearest = "any positive stress";
        return Err(Problem::out_of_range("mu", mu, "mu > 0", nearest));
    }
    if n <= 1.0 {
        let problem = Problem::out_of_range("N", n, "N > 1", "any number above 1");
        return Err(
            problem.because("a chain of one link is at full length in the unstrained material")
        );
    }
    Ok((mu, n))
}

/// W and its derivatives by J = I1 - 3.
#[derive(Debug, Clone, Copy)]
struct OfStrain {
    energy: f64,
    slope: f64,
    by_j: f64,
    by_j2: f64,
}

impl ArrudaBoyce {
    /// Stretches at which it locks.
    pub fn lock_stretches(&self) -> LockStretches {
        LockStretches::at(self.range())
    }

    /// I1 - 3 at the lock.
    fn range(&self) -> f64 {
        3.0 * (self.n - 1.0)
    }

    /// x and b at J; beyond the lock not finite.
    fn chain(&self, j: f64) -> (f64, InverseLangevin) {
        let x = ((3.0 + j) / (3.0 * self.n)).sqrt();
        // 1 - x from what is left to the lock, not from x
        let gap = (self.range() - j) / (3.0 * self.n) / (1.0 + x);
        (x, InverseLangevin::at(x, gap))
    }

    /// dW/dI1 and its first two derivatives.
    fn stiffness(&self, j: f64) -> (f64, f64, f64) {
        let (x, b) = self.chain(j);
        let ratio = b.value / x;
        // derivatives by x of b/x, then x^2 = I1/(3N)
        let first = (b.slope - ratio) / x;
        let second = (b.curvature - 2.0 * first) / x;
        let by_j = 1.0 / (6.0 * self.n * x);
        let scale = self.mu / 6.0;
        let bend = (second - first / x) * by_j * by_j;
        (scale * ratio, scale * first * by_j, scale * bend)
    }

    fn of_strain(&self, j: f64) -> OfStrain {
        let (slope, by_j, by_j2) = self.stiffness(j);
        let energy = if j < INTEGRATED {
            self.integrated(j)
        } else {
            self.closed(j) - self.closed(0.0)
        };
        OfStrain {
            energy,
            slope,
            by_j,
            by_j2,
        }
    }

    /// mu N (x b - ln(sinh b/b)).
    fn closed(&self, j: f64) -> f64 {
        let (x, b) = self.chain(j);
        self.mu * self.n * (x * b.value - ln_sinh_ratio(b.value))
    }

    /// The integral of dW/dI1 from rest; each panel halves the distance to the lock, where the integrand has a pole.
    fn integrated(&self, j: f64) -> f64 {
        let (mut from, mut sum) = (0.0, 0.0);
        while from < j {
            let to = j.min(from + 0.5 * (self.range() - from));
            if to <= from {
                return f64::NAN;
            }
            let rule = GaussRule::of(16);
            sum += rule.integrate(from, to, |j| self.stiffness(j).0);
            from = to;
        }
        sum
    }
}

impl Formula for ArrudaBoyce {
    const NAME: &'static str = "Arruda-Boyce";
    const ENERGY: &'static str =
        "W = mu N (x b + ln(b/sinh b)) - const, x = sqrt(I1/(3 N)), coth b - 1/b = x";

    fn energy_text(&self) -> String {
        format!("{}, {}", Self::ENERGY, self.lock_stretches())
    }

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        let j = i.i1.re();
        if j >= self.range() {
            return Differences::none();
        }
        // Halley on dual numbers would iterate derivatives as well: the chain rule is written out, as the Taylor
        // polynomial in a dual number that is zero but for its derivatives
        let at = self.of_strain(j);
        let step = i.i1 - j;
        let w1 = (step * (0.5 * at.by_j2) + at.by_j) * step + at.slope;
        let energy = (step * (0.5 * at.by_j) + at.slope) * step + at.energy;
        i.of_first(w1, energy)
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let x = ((l1 * l1 + l2 * l2 + l3 * l3) / (3.0 * self.n)).sqrt();
        let at = |x: D| {
            let found = InverseLangevin::at(x.re(), 1.0 - x.re());
            let step = x - x.re();
            let b = (step * (0.5 * found.curvature) + found.slope) * step + found.value;
            // ln(b/sinh b); sinh leaves the range of doubles at b = 710, close to the lock
            let tail = if b.re() > 1.0 {
                b.ln() - b + std::f64::consts::LN_2 - (-(b * -2.0).exp()).ln_1p()
            } else {
                (b / b.sinh()).ln()
            };
            x * b + tail
        };
        if x.re() >= 1.0 {
            return D::from(f64::NAN);
        }
        (at(x) - at(D::from((1.0 / self.n).sqrt()))) * (self.mu * self.n)
    }

    fn hardening(&self, d: f64, e: f64) -> Hardening {
        let i = Invariants::at(d, e);
        if i.i1 >= self.range() {
            return i.hardening(d, f64::NAN);
        }
        let (slope, by_j, _) = self.stiffness(i.i1);
        i.hardening(d, by_j / slope)
    }

    fn shear_modulus(&self) -> f64 {
        2.0 * self.stiffness(0.0).0
    }

    fn parameters(&self) -> Vec<Parameter> {
        vec![
            Parameter::number("mu", self.mu, Dimension::Stress),
            Parameter::number("N", self.n, Dimension::None),
        ]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // True stress, W and the modulus at rest in uniaxial tension, solved at 50 digits for mu = 1; N = 26.5 is the fit to
    // Treloar's rubber (from memory). Red when mu is taken for the modulus at rest, or x for the stretch itself.
    #[test]
    fn uniaxial_tension_is_the_known_number() {
        for (n, stretch, energy, axial, modulus) in [
            (
                26.5,
                2.0_f64,
                1.0317347692548309,
                3.6404545541460807,
                1.0234799060803408,
            ),
            (
                26.5,
                8.0,
                51.10219215999087,
                234.4637558853981,
                1.0234799060803408,
            ),
            (
                1.25,
                1.1,
                0.05063737829552081,
                1.1009810456976057,
                3.530056251759143,
            ),
            (
                1.25,
                1.25,
                0.3209205009508951,
                3.3889572265531793,
                3.530056251759143,
            ),
        ] {
            let law = ArrudaBoyce { mu: 1.0, n };
            let form = law.differences(0.0, stretch.ln());
            for (got, exact) in [
                (form.energy, energy),
                (form.axial, axial),
                (Formula::shear_modulus(&law), modulus),
            ] {
                assert!(
                    (got / exact - 1.0).abs() < 4e-15,
                    "{n} {stretch}: {got} {exact}"
                );
            }
        }
    }

    // The derivatives written out by hand, against differences. Red when a term of the chain rule is wrong.
    #[test]
    fn slopes_of_the_stiffness() {
        for (n, j) in [(26.5, 0.1), (26.5, 60.0), (1.3, 0.5), (5.0, 2.0)] {
            let law = ArrudaBoyce { mu: 0.7, n };
            let h = 1e-4 * (law.range() - j);
            let (_, by_j, by_j2) = law.stiffness(j);
            let [below, above] = [j - h, j + h].map(|j| law.stiffness(j));
            let slope = (above.0 - below.0) / (2.0 * h);
            let bend = (above.1 - below.1) / (2.0 * h);
            assert!((by_j / slope - 1.0).abs() < 1e-6, "{n} {j}: {by_j} {slope}");
            assert!((by_j2 / bend - 1.0).abs() < 1e-6, "{n} {j}: {by_j2} {bend}");
        }
    }

    // Red when W changes its route with a jump.
    #[test]
    fn both_routes_to_the_energy_meet() {
        for n in [1.12, 2.0, 26.5, 300.0] {
            let law = ArrudaBoyce { mu: 1.0, n };
            for j in [0.25, 0.3, 0.34] {
                let closed = law.closed(j) - law.closed(0.0);
                let tolerance = 1e-15 * law.closed(j).max(n) / closed;
                assert!(
                    (law.integrated(j) / closed - 1.0).abs() < 2.0 * tolerance,
                    "{n} {j}"
                );
            }
        }
    }

    #[test]
    fn nothing_is_beyond_the_lock() {
        let law = ArrudaBoyce { mu: 1.0, n: 4.0 };
        let lock = law.lock_stretches().uniaxial;
        assert!((lock * lock + 2.0 / lock - 12.0).abs() < 1e-13);
        let inside = law.differences(0.0, (lock * (1.0 - 1e-12)).ln());
        assert!(inside.hoop == 0.0 && inside.axial > 1e10 && inside.energy.is_finite());
        let outside = law.differences(0.0, (lock * (1.0 + 1e-12)).ln());
        assert!(outside.axial.is_nan() && outside.energy.is_nan() && outside.reduced.is_nan());
    }
}
