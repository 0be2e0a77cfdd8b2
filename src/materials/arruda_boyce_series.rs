//! Arruda-Boyce law as the series of five terms that programs use, `W = mu sum_{n=1..5} C_n/N^(n-1) (I1^n - 3^n)`.
//!
//! Arruda & Boyce, J. Mech. Phys. Solids 41 (1993) 389 (from memory): `C_n = 1/2, 1/20, 11/1050, 19/7000, 519/673750`. The series has no
//! lock: at large stretch it is another material than the exact law, and so it has another name.

use super::arruda_boyce::{CONSTANTS, checked};
use super::catalogue::Entry;
use super::incompressible::{Differences, Formula, Number};
use super::invariants::Invariants;
use super::{Material, MaterialKind, Parameter};
use crate::mechanics::Dimension;

/// Factors of I1^n - 3^n, n = 1..5.
const FACTORS: [f64; 5] = [
    1.0 / 2.0,
    1.0 / 20.0,
    11.0 / 1050.0,
    19.0 / 7000.0,
    519.0 / 673_750.0,
];

/// The law with its numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ArrudaBoyceSeries {
    /// n k T, positive. Unit: stress.
    pub mu: f64,
    /// Links of a chain between two knots, above 1.
    pub n: f64,
}

pub(super) const ENTRY: Entry = Entry {
    name: ArrudaBoyceSeries::NAME,
    kind: MaterialKind::Incompressible,
    parameters: CONSTANTS,
    family: None,
    formula: ArrudaBoyceSeries::ENERGY,
    convention: "I1 = lambda1^2 + lambda2^2 + lambda3^2, lambda1 lambda2 lambda3 = 1; mu = n k T, shear modulus at rest \
                 mu (1 + 3/(5 N) + 99/(175 N^2) + 513/(875 N^3) + 42039/(67375 N^4)); N = lambda_m^2; no lock",
    source: "Arruda & Boyce, J. Mech. Phys. Solids 41 (1993) 389",
    build: |given| {
        let (mu, n) = checked(given)?;
        Ok(Material::incompressible(ArrudaBoyceSeries { mu, n }))
    },
};

impl ArrudaBoyceSeries {
    /// Factor of I1^n - 3^n.
    fn factor(&self, n: usize) -> f64 {
        let links = (1..n).fold(1.0, |power, _| power / self.n);
        self.mu * FACTORS[n - 1] * links
    }

    /// dW/dI1 and W at `j` = I1 - 3, with I1^n - 3^n = j sum_m I1^m 3^(n-1-m).
    fn of_strain<D: Number>(&self, j: D) -> (D, D) {
        let i1 = j + 3.0;
        let (mut slope, mut mean) = (D::from(0.0), D::from(0.0));
        let (mut power, mut quotient, mut three) = (D::from(1.0), D::from(1.0), 1.0);
        for n in 1..=FACTORS.len() {
            let factor = self.factor(n);
            slope += power * (factor * n as f64);
            mean += quotient * factor;
            power *= i1;
            three *= 3.0;
            quotient = quotient * i1 + three;
        }
        (slope, mean * j)
    }
}

impl Formula for ArrudaBoyceSeries {
    const NAME: &'static str = "Arruda-Boyce-series";
    const ENERGY: &'static str = "W = mu (1/2 (I1 - 3) + 1/(20 N) (I1^2 - 9) + 11/(1050 N^2) (I1^3 - 27) + \
                                  19/(7000 N^3) (I1^4 - 81) + 519/(673750 N^4) (I1^5 - 243))";

    fn differences<D: Number>(&self, d: D, e: D) -> Differences<D> {
        let i = Invariants::at(d, e);
        let (w1, energy) = self.of_strain(i.i1);
        i.of_first(w1, energy)
    }

    fn energy<D: Number>(&self, [l1, l2, l3]: [D; 3]) -> D {
        let i1 = l1 * l1 + l2 * l2 + l3 * l3;
        let (mut sum, mut power, mut three) = (D::from(0.0), i1, 3.0);
        for n in 1..=FACTORS.len() {
            sum += (power - three) * self.factor(n);
            power *= i1;
            three *= 3.0;
        }
        sum
    }

    fn shear_modulus(&self) -> f64 {
        2.0 * self.of_strain(0.0).0
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
    use crate::materials::ArrudaBoyce;

    // Uniaxial tension at l = 2, I1 = 5, N = 5: 2 dW/dI1 (l^2 - 1/l), 2 dW/dI1 = 1 + 2 (1/10 + 33/1050 + 4 19/7000 + 5 519/673750).
    #[test]
    fn uniaxial_tension_is_the_textbook_number() {
        let form = ArrudaBoyceSeries { mu: 1.0, n: 5.0 }.differences(0.0, 2.0_f64.ln());
        let twice = 1.0 + 0.2 + 66.0 / 1050.0 + 152.0 / 7000.0 + 5190.0 / 673_750.0;
        assert!((form.axial / (3.5 * twice) - 1.0).abs() < 1e-15);
    }

    // The modulus of both pages; long chains: the series is the exact law but for N^-5. Red when a coefficient is wrong.
    #[test]
    fn it_is_the_series_of_the_exact_law() {
        let n: f64 = 8.0;
        let series = ArrudaBoyceSeries { mu: 0.4, n };
        let printed = 1.0
            + 3.0 / (5.0 * n)
            + 99.0 / (175.0 * n.powi(2))
            + 513.0 / (875.0 * n.powi(3))
            + 42039.0 / (67375.0 * n.powi(4));
        assert!((Formula::shear_modulus(&series) / (0.4 * printed) - 1.0).abs() < 1e-15);
        let mut off = [1e3, 2e3].map(|n| {
            let series = ArrudaBoyceSeries { mu: 0.4, n }.differences(1.0, 0.3);
            let exact = ArrudaBoyce { mu: 0.4, n }.differences(1.0, 0.3);
            let ratio: f64 = series.energy / exact.energy;
            (ratio - 1.0).abs()
        });
        off.sort_by(f64::total_cmp);
        assert!(off[1] < 1e-12, "{off:?}");
        let rough = |n| {
            let series = Formula::shear_modulus(&ArrudaBoyceSeries { mu: 1.0, n });
            let exact = Formula::shear_modulus(&ArrudaBoyce { mu: 1.0, n });
            exact - series
        };
        // the first term left out is of order N^-5
        let order = (rough(20.0) / rough(40.0)).log2();
        assert!((order - 5.0).abs() < 0.2, "{order}");
    }
}
