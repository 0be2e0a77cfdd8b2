//! Gauss-Legendre rules on an interval: n points are exact for polynomials of degree 2n - 1.
//!
//! Nodes and weights from the `gauss-quad` crate (Bogaert, SIAM J. Sci. Comput. 36 (2014) A1008), made exactly
//! symmetric here.

use super::sum::CompensatedSum;
use std::num::NonZeroUsize;
use std::sync::OnceLock;

/// Largest number of points of a cached rule.
const LARGEST: usize = 64;

/// Nodes in (-1, 1), ascending, with their weights, which sum to 2.
#[derive(Debug, Clone, PartialEq)]
pub struct GaussRule {
    pairs: Vec<(f64, f64)>,
}

impl GaussRule {
    /// The rule of `points` points, computed once per process. Fewer than 1 count as 1, more than 64 as 64.
    pub fn of(points: usize) -> &'static GaussRule {
        static RULES: [OnceLock<GaussRule>; LARGEST] = [const { OnceLock::new() }; LARGEST];
        let index = points.clamp(1, LARGEST) - 1;
        RULES[index].get_or_init(|| Self::compute(NonZeroUsize::MIN.saturating_add(index)))
    }

    fn compute(points: NonZeroUsize) -> Self {
        let mut pairs = gauss_quad::legendre::GaussLegendre::new(points)
            .as_node_weight_pairs()
            .to_vec();
        pairs.sort_by(|a, b| a.0.total_cmp(&b.0));
        let last = pairs.len() - 1;
        for i in 0..pairs.len() / 2 {
            let node = 0.5 * (pairs[last - i].0 - pairs[i].0);
            let weight = 0.5 * (pairs[last - i].1 + pairs[i].1);
            pairs[i] = (-node, weight);
            pairs[last - i] = (node, weight);
        }
        if last.is_multiple_of(2) {
            pairs[last / 2].0 = 0.0;
        }
        Self { pairs }
    }

    /// Number of points.
    pub fn len(&self) -> usize {
        self.pairs.len()
    }

    /// Never true; a rule has at least one point.
    pub fn is_empty(&self) -> bool {
        self.pairs.is_empty()
    }

    /// `(node, weight)` pairs on (-1, 1).
    pub fn pairs(&self) -> &[(f64, f64)] {
        &self.pairs
    }

    /// `(node, weight)` pairs on `(from, to)`; weights are negative when `to < from`.
    pub fn on(&self, from: f64, to: f64) -> impl Iterator<Item = (f64, f64)> + '_ {
        let half = 0.5 * (to - from);
        // measured from the nearer end, so that a node never leaves the interval by round-off
        self.pairs.iter().map(move |&(x, w)| {
            let node = if x < 0.0 {
                from + half * (1.0 + x)
            } else {
                to - half * (1.0 - x)
            };
            (node, half * w)
        })
    }

    /// Integral of `f` from `from` to `to`.
    pub fn integrate(&self, from: f64, to: f64, mut f: impl FnMut(f64) -> f64) -> f64 {
        let sum: CompensatedSum = self.on(from, to).map(|(x, w)| w * f(x)).collect();
        sum.value()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Red when a node or weight is off by 1e-15, or a rule has the wrong number of points.
    #[test]
    fn monomials_up_to_degree_2n_minus_1_are_exact() {
        for n in 1..=LARGEST {
            let rule = GaussRule::of(n);
            assert_eq!(rule.len(), n);
            for degree in 0..2 * n {
                let got = rule.integrate(0.0, 1.0, |x| x.powi(degree as i32));
                let exact = 1.0 / (degree as f64 + 1.0);
                assert!((got / exact - 1.0).abs() < 4e-15, "n {n} degree {degree}");
            }
        }
        // and not beyond: x^2n on (-1, 1) is missed by (n!)^4 2^(2n+1)/((2n+1) ((2n)!)^2), 8/45 for n = 2
        let missed = GaussRule::of(2).integrate(-1.0, 1.0, |x| x.powi(4)) - 0.4;
        assert!((missed + 8.0 / 45.0).abs() < 1e-15);
    }

    #[test]
    fn nodes_are_symmetric_and_orientation_counts() {
        assert_eq!(GaussRule::of(5).pairs()[2].0, 0.0);
        let rule = GaussRule::of(16);
        let there = rule.integrate(0.3, 2.0, f64::exp);
        assert!((there - (2.0_f64.exp() - 0.3_f64.exp())).abs() < 4e-15);
        assert!((rule.integrate(2.0, 0.3, f64::exp) + there).abs() < 2e-15);
        assert_eq!(GaussRule::of(0).len(), 1);
    }
}
