//! `W = sum c_n J^n` for J >= 0, and where it stops to rise: the terms of a law in one invariant.

use super::Number;
use super::catalogue::Problem;
use crate::numerics::exponential_sum::not_positive_at;

/// Factors of J, J^2, ..
#[derive(Debug, Clone, PartialEq)]
pub(super) struct PowerSeries {
    pub factors: Vec<f64>,
}

impl PowerSeries {
    /// dW/dJ and W at `j`.
    pub fn of<D: Number>(&self, j: D) -> (D, D) {
        let (mut slope, mut mean) = (D::from(0.0), D::from(0.0));
        for (i, &c) in self.factors.iter().enumerate().rev() {
            slope = slope * j + c * (i + 1) as f64;
            mean = mean * j + c;
        }
        (slope, mean * j)
    }

    /// By how much more the sizes of the terms of dW/dJ come to than their sum: zero without negative terms.
    pub fn cancelled(&self, j: f64) -> f64 {
        if self.factors.iter().all(|&c| c >= 0.0) {
            return 0.0;
        }
        let size = PowerSeries {
            factors: self.factors.iter().map(|c| c.abs()).collect(),
        };
        size.of(j).0 / self.of(j).0.abs() - 1.0
    }

    /// A J > 0 at which dW/dJ, with its negative terms `times` as large, is not positive.
    fn falls_with(&self, times: f64) -> Option<f64> {
        let terms = self.factors.iter().enumerate().map(|(i, &c)| {
            let factor = if c < 0.0 { times } else { 1.0 };
            (factor * c * (i + 1) as f64, i as f64)
        });
        let terms: Vec<_> = terms.collect();
        // in powers of exp(t) = J
        not_positive_at(&terms).map(f64::exp)
    }

    /// A J > 0 at which dW/dJ is not positive; `None` also when there are no terms at all.
    pub fn falls_at(&self) -> Option<f64> {
        if self.factors.iter().all(|&c| c == 0.0) {
            return None;
        }
        self.falls_with(1.0)
    }

    /// What to say of a series that falls at `j`; `name` of the constant of J^n.
    pub fn refused(&self, j: f64, strain: &str, name: &dyn Fn(usize) -> String) -> Problem {
        let negative: Vec<_> = (0..self.factors.len())
            .filter(|&i| self.factors[i] < 0.0)
            .collect();
        let first = negative.first().copied().unwrap_or(0);
        let (name, value) = (name(first + 1), self.factors[first]);
        let (mut sound, mut unsound) = (0.0, 1.0);
        for _ in 0..40 {
            let middle = 0.5 * (sound + unsound);
            match self.falls_with(middle) {
                None => sound = middle,
                Some(_) => unsound = middle,
            }
        }
        // a little less, so that the printed digits are admissible
        let nearest = match 0.9999 * sound * value {
            0.0 => "0".to_string(),
            nearest => format!("{nearest:.4e}"),
        };
        let others = if negative.len() > 1 {
            ", the other negative constants in proportion:"
        } else {
            ""
        };
        let place = match j {
            f64::INFINITY => format!("as {strain} grows"),
            0.0 => format!("at {strain} = 0"),
            j => format!("about {strain} = {j:.4}"),
        };
        Problem {
            message: format!(
                "{name} = {value} lets the stiffness fall to zero {place}: the stress would fall with it"
            ),
            parameter: name,
            hint: format!("nearest admissible value{others}: {nearest}"),
        }
    }
}
