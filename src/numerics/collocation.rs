//! Integrals of a function known at Gauss nodes, up to each node, and its values in between.
//!
//! The interpolant through n Gauss-Legendre nodes is `sum_m c_m P_m(x)`, `c_m = (2m+1)/2 sum_j w_j f_j P_m(x_j)`, and
//! `int P_m = (P_{m+1} - P_{m-1})/(2m+1)`, so that integrals of the interpolant up to a node are sums over the nodal
//! values. Integrals from the other end are built as such: total minus forward would lose the digits of what is small
//! near that end. Values in between by the barycentric formula (Berrut & Trefethen, SIAM Review 46 (2004) 501; the
//! weights of Gauss nodes from Wang & Xiang, Math. Comp. 81 (2012) 861; all from memory).

use super::quadrature::GaussRule;

/// Integration and interpolation on n Gauss nodes of (-1, 1).
#[derive(Debug, Clone, PartialEq)]
pub struct Collocation {
    rule: &'static GaussRule,
    /// Row i: weights of the integral from -1 to node i.
    forward: Vec<f64>,
    /// Weights of the barycentric formula.
    barycentric: Vec<f64>,
    /// Row m: P_m at the nodes.
    polynomials: Vec<f64>,
}

/// P_0 to P_n at x.
fn legendre(x: f64, n: usize) -> Vec<f64> {
    let mut p = vec![1.0, x];
    for m in 1..n {
        let k = m as f64;
        p.push(((2.0 * k + 1.0) * x * p[m] - k * p[m - 1]) / (k + 1.0));
    }
    p.truncate(n + 1);
    p
}

impl Collocation {
    /// On `n` nodes, at least 1 and at most 64 of them.
    pub fn new(n: usize) -> Self {
        let rule = GaussRule::of(n);
        let n = rule.len();
        let at: Vec<Vec<f64>> = rule.pairs().iter().map(|(x, _)| legendre(*x, n)).collect();
        let mut forward = vec![0.0; n * n];
        for (i, (x, _)) in rule.pairs().iter().enumerate() {
            for (j, (_, w)) in rule.pairs().iter().enumerate() {
                let rest = (1..n).map(|m| at[j][m] * (at[i][m + 1] - at[i][m - 1]));
                forward[i * n + j] = 0.5 * w * (1.0 + x + rest.sum::<f64>());
            }
        }
        let sign = |i: usize| if i.is_multiple_of(2) { 1.0 } else { -1.0 };
        let pairs = rule.pairs().iter().enumerate();
        let barycentric = pairs.map(|(i, (x, w))| sign(i) * ((1.0 - x) * (1.0 + x) * w).sqrt());
        Self {
            rule,
            forward,
            barycentric: barycentric.collect(),
            polynomials: (0..n).flat_map(|m| at.iter().map(move |p| p[m])).collect(),
        }
    }

    /// Number of nodes.
    pub fn len(&self) -> usize {
        self.rule.len()
    }

    /// Never true.
    pub fn is_empty(&self) -> bool {
        false
    }

    /// `(node, weight)` pairs on (-1, 1), ascending.
    pub fn pairs(&self) -> &[(f64, f64)] {
        self.rule.pairs()
    }

    /// Weight of value `j` in the integral from -1 to node `i`.
    pub fn forward(&self, i: usize, j: usize) -> f64 {
        self.forward[i * self.len() + j]
    }

    /// Weight of value `j` in the integral from node `i` to 1: the mirror image of the other.
    pub fn backward(&self, i: usize, j: usize) -> f64 {
        let last = self.len() - 1;
        self.forward(last - i, last - j)
    }

    /// The interpolant through `values` at `x`.
    pub fn value(&self, values: &[f64], x: f64) -> f64 {
        let (mut above, mut below) = (0.0, 0.0);
        for (((node, _), b), v) in self.pairs().iter().zip(&self.barycentric).zip(values) {
            let gap = x - node;
            if gap == 0.0 {
                return *v;
            }
            above += b / gap * v;
            below += b / gap;
        }
        above / below
    }

    /// The larger of the last two Legendre coefficients of the interpolant: how well `values` are resolved.
    pub fn tail(&self, values: &[f64]) -> f64 {
        let n = self.len();
        let coefficient = |m: usize| {
            let row = &self.polynomials[m * n..(m + 1) * n];
            let terms = self.pairs().iter().zip(row).zip(values);
            let sum: f64 = terms.map(|(((_, w), p), v)| w * p * v).sum();
            (m as f64 + 0.5) * sum.abs()
        };
        (n.saturating_sub(2)..n)
            .map(coefficient)
            .fold(0.0, f64::max)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Exact for every polynomial the interpolant can be. Red when a factor, an index or the mirror is wrong.
    #[test]
    fn polynomials_are_integrated_and_interpolated_exactly() {
        for n in [1, 2, 3, 7, 12, 20, 30, 64] {
            let rule = Collocation::new(n);
            assert_eq!(rule.len(), n);
            for degree in 0..n {
                let power = degree as i32;
                let values: Vec<f64> = rule.pairs().iter().map(|(x, _)| x.powi(power)).collect();
                let integral = |x: f64| x.powi(power + 1) / (degree as f64 + 1.0);
                for (i, (x, _)) in rule.pairs().iter().enumerate() {
                    let sum = |weight: &dyn Fn(usize) -> f64| -> f64 {
                        (0..n).map(|j| weight(j) * values[j]).sum()
                    };
                    let forward = sum(&|j| rule.forward(i, j));
                    let backward = sum(&|j| rule.backward(i, j));
                    assert!(
                        (forward - (integral(*x) - integral(-1.0))).abs() < 4e-15,
                        "{n} {degree} {i}"
                    );
                    assert!(
                        (backward - (integral(1.0) - integral(*x))).abs() < 4e-15,
                        "{n} {degree} {i}"
                    );
                }
                for x in [-1.0_f64, -0.3, 0.0, 0.77, 1.0] {
                    assert!(
                        (rule.value(&values, x) - x.powi(power)).abs() < 4e-15,
                        "{n} {degree} {x}"
                    );
                }
                // the leading coefficient of x^m falls like 2^-m
                let resolved = degree + 2 < n;
                assert!(
                    n > 20 || (rule.tail(&values) < 1e-14) == resolved,
                    "{n} {degree}"
                );
            }
        }
    }

    #[test]
    fn a_smooth_function_keeps_its_digits_towards_both_ends() {
        let rule = Collocation::new(20);
        let values: Vec<f64> = rule.pairs().iter().map(|(x, _)| x.exp()).collect();
        for (i, (x, _)) in rule.pairs().iter().enumerate() {
            let backward: f64 = (0..20).map(|j| rule.backward(i, j) * values[j]).sum();
            let exact = -(x - 1.0).exp_m1() * 1.0_f64.exp();
            assert!((backward - exact).abs() < 2e-15, "{i} {backward} {exact}");
        }
    }
}
