//! Chebyshev interpolants: a smooth function sampled once, then evaluated to round-off in a few nanoseconds.
//!
//! Interpolation at the zeros of T_n, coefficients by the discrete cosine sum, evaluation by Clenshaw's
//! recurrence (Trefethen, Approximation Theory and Approximation Practice, 2013, chapters 3 and 19; from memory).

use super::sum::CompensatedSum;

/// `f(x) = c0/2 + c1 T1(t) + c2 T2(t) + ...`, t in [-1, 1] over `lower..upper`.
#[derive(Debug, Clone, PartialEq)]
pub struct Chebyshev {
    lower: f64,
    upper: f64,
    coefficients: Vec<f64>,
}

/// cos(pi m/(2 n)), reduced to less than an eighth of a turn so that it is right to the last bit or two.
fn cosine(m: usize, n: usize) -> f64 {
    let angle = |m: usize| std::f64::consts::PI * m as f64 / (2 * n) as f64;
    let m = m % (4 * n);
    let m = m.min(4 * n - m);
    if m > n {
        -cosine(2 * n - m, n)
    } else if 2 * m > n {
        angle(n - m).sin()
    } else {
        angle(m).cos()
    }
}

/// The zeros of T_n moved to `lower..upper`, in descending order.
pub fn nodes(lower: f64, upper: f64, n: usize) -> Vec<f64> {
    let node = |i: usize| 0.5 * (lower + upper) + 0.5 * (upper - lower) * cosine(2 * i + 1, n);
    (0..n).map(node).collect()
}

impl Chebyshev {
    /// Interpolates `f` at `n` nodes (at least one) of `lower..upper`.
    pub fn fit(lower: f64, upper: f64, n: usize, f: impl FnMut(f64) -> f64) -> Self {
        let n = n.max(1);
        let values: Vec<f64> = nodes(lower, upper, n).into_iter().map(f).collect();
        let coefficient = |j: usize| {
            let terms = values.iter().enumerate();
            let sum: CompensatedSum = terms.map(|(i, v)| v * cosine(j * (2 * i + 1), n)).collect();
            2.0 * sum.value() / n as f64
        };
        Self {
            lower,
            upper,
            coefficients: (0..n).map(coefficient).collect(),
        }
    }

    /// The interval of the fit.
    pub fn interval(&self) -> (f64, f64) {
        (self.lower, self.upper)
    }

    /// c0, c1, ... of the header.
    pub fn coefficients(&self) -> &[f64] {
        &self.coefficients
    }

    /// Whether `x` lies in the interval of the fit (either orientation).
    pub fn contains(&self, x: f64) -> bool {
        (x - self.lower) * (x - self.upper) <= 0.0
    }

    /// The interpolant at `x`, by Clenshaw's recurrence.
    pub fn value(&self, x: f64) -> f64 {
        let t2 = 2.0 * ((x - self.lower) - (self.upper - x)) / (self.upper - self.lower);
        let (mut b1, mut b2) = (0.0, 0.0);
        for c in self.coefficients.iter().skip(1).rev() {
            (b1, b2) = (c + (t2 * b1 - b2), b1);
        }
        0.5 * self.coefficients[0] + (0.5 * t2 * b1 - b2)
    }

    /// Size of the largest coefficient.
    pub fn largest(&self) -> f64 {
        let sizes = self.coefficients.iter().map(|c| c.abs());
        sizes.fold(0.0, f64::max)
    }

    /// The larger of the last two coefficients against the largest: how well the function is resolved. NaN when
    /// the function was not finite at a node.
    pub fn tail(&self) -> f64 {
        if !self.coefficients.iter().all(|c| c.is_finite()) {
            return f64::NAN;
        }
        let largest = self.largest();
        let end = self.coefficients.iter().rev().take(2);
        let last = end.fold(0.0_f64, |m, c| m.max(c.abs()));
        if largest == 0.0 { 0.0 } else { last / largest }
    }
}

/// Chebyshev pieces side by side, each resolved to a wanted tail.
#[derive(Debug, Clone, PartialEq)]
pub struct Piecewise {
    pieces: Vec<Chebyshev>,
}

impl Piecewise {
    /// Breaks of `lower..upper` (ends included) so that `f`, fitted at `n` nodes a piece, has a tail below
    /// `tail`; pieces are halved at most `depth` times. `None` when that is not enough or `f` is not finite.
    pub fn breaks(
        (lower, upper): (f64, f64),
        n: usize,
        tail: f64,
        depth: usize,
        f: &mut impl FnMut(f64) -> f64,
    ) -> Option<Vec<f64>> {
        let fit_tail = Chebyshev::fit(lower, upper, n, &mut *f).tail();
        if fit_tail <= tail {
            return Some(vec![lower, upper]);
        }
        if depth == 0 || fit_tail.is_nan() {
            return None;
        }
        let middle = 0.5 * (lower + upper);
        let mut left = Self::breaks((lower, middle), n, tail, depth - 1, f)?;
        let right = Self::breaks((middle, upper), n, tail, depth - 1, f)?;
        left.extend(&right[1..]);
        Some(left)
    }

    /// From pieces in order.
    pub fn new(pieces: Vec<Chebyshev>) -> Self {
        Self { pieces }
    }

    /// The pieces, in order.
    pub fn pieces(&self) -> &[Chebyshev] {
        &self.pieces
    }

    /// The value at `x`, or `None` outside all pieces.
    pub fn value(&self, x: f64) -> Option<f64> {
        let piece = self.pieces.iter().find(|p| p.contains(x))?;
        Some(piece.value(x))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Red when a coefficient, the halving of c0 or the recurrence is wrong.
    #[test]
    fn a_smooth_function_is_held_to_round_off() {
        let fit = Chebyshev::fit(0.5, 2.0, 24, f64::exp);
        assert!(fit.tail() < 1e-15);
        for i in 0..=100 {
            let x = 0.5 + 0.015 * i as f64;
            assert!(
                (fit.value(x) - x.exp()).abs() < 1e-15 * 2.0_f64.exp(),
                "{x}"
            );
        }
    }

    #[test]
    fn an_unresolved_function_has_a_tail_and_is_split() {
        let mut f = |x: f64| 1.0 / (1.0 + 25.0 * x * x);
        assert!(Chebyshev::fit(-1.0, 1.0, 20, f).tail() > 1e-3);
        let breaks = Piecewise::breaks((-1.0, 1.0), 20, 1e-15, 8, &mut f).unwrap();
        assert!(breaks.len() > 3 && breaks[0] == -1.0 && breaks[breaks.len() - 1] == 1.0);
        let pieces = breaks.windows(2).map(|w| Chebyshev::fit(w[0], w[1], 20, f));
        let all = Piecewise::new(pieces.collect());
        for i in 0..=200 {
            let x = -1.0 + 0.01 * i as f64;
            assert!((all.value(x.min(1.0)).unwrap() - f(x)).abs() < 2e-15, "{x}");
        }
        assert_eq!(all.value(1.1), None);
        // a kink is never resolved, a NaN never fitted
        assert_eq!(
            Piecewise::breaks((-1.0, 1.1), 20, 1e-15, 8, &mut f64::abs),
            None
        );
        assert_eq!(
            Piecewise::breaks((-1.0, 1.0), 20, 1e-15, 8, &mut f64::ln),
            None
        );
    }

    #[test]
    fn one_node_and_a_constant_zero_are_harmless() {
        assert_eq!(Chebyshev::fit(0.0, 1.0, 0, |_| 3.0).value(0.2), 3.0);
        assert_eq!(Chebyshev::fit(0.0, 1.0, 8, |_| 0.0).tail(), 0.0);
    }
}
