//! Sums that carry their own round-off.
//!
//! TwoSum (Knuth, The Art of Computer Programming 2, 4.2.2, theorem B; from memory) gives the exact error of
//! one addition; the errors are summed beside the sum and added once, at the end (Ogita, Rump & Oishi, SIAM J.
//! Sci. Comput. 26 (2005) 1955, `Sum2`; from memory). The result is as good as a sum in twice the precision,
//! rounded once. The same additions in the same order give the same bits.

/// A running sum with its compensation.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct CompensatedSum {
    sum: f64,
    carry: f64,
}

/// The rounded sum of two numbers and its exact error.
fn two_sum(a: f64, b: f64) -> (f64, f64) {
    let sum = a + b;
    let shadow = sum - a;
    (sum, (a - (sum - shadow)) + (b - shadow))
}

impl CompensatedSum {
    /// An empty sum.
    pub const fn new() -> Self {
        Self {
            sum: 0.0,
            carry: 0.0,
        }
    }

    /// Adds one term.
    pub fn add(&mut self, term: f64) {
        let (sum, error) = two_sum(self.sum, term);
        self.sum = sum;
        self.carry += error;
    }

    /// Adds many terms at nearly the price of a plain sum: eight plain lanes inside a block of 512, TwoSum
    /// across blocks. For terms of one sign the result is right to the last bit or two (numerics.md 10);
    /// for cancelling terms use [`Self::add`].
    pub fn add_positive(&mut self, terms: &[f64]) {
        for block in terms.chunks(512) {
            let mut lanes = [0.0_f64; 8];
            let eights = block.chunks_exact(8);
            for term in eights.remainder() {
                self.add(*term);
            }
            for eight in eights {
                for (lane, term) in lanes.iter_mut().zip(eight) {
                    *lane += term;
                }
            }
            for lane in lanes {
                self.add(lane);
            }
        }
    }

    /// Adds another sum with its compensation; merge in a fixed order to get the same bits.
    pub fn merge(&mut self, other: &Self) {
        self.add(other.sum);
        self.carry += other.carry;
    }

    /// The sum, rounded once. Infinite or NaN when a term was, or when the terms overflow.
    pub fn value(&self) -> f64 {
        // after an overflow the carry is NaN, and the plain sum says what happened
        if self.sum.is_finite() {
            self.sum + self.carry
        } else {
            self.sum
        }
    }
}

impl FromIterator<f64> for CompensatedSum {
    fn from_iter<I: IntoIterator<Item = f64>>(terms: I) -> Self {
        let mut sum = Self::new();
        for term in terms {
            sum.add(term);
        }
        sum
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Red when `carry` is dropped from `value`, or the error term of `two_sum` has a wrong sign.
    #[test]
    fn terms_that_a_plain_sum_loses_are_kept() {
        let terms = [1.0, 1e100, 1.0, -1e100];
        let sum: CompensatedSum = terms.into_iter().collect();
        assert_eq!(terms.iter().sum::<f64>(), 0.0);
        assert_eq!(sum.value(), 2.0);
    }

    // Red when the compensation is lost in `merge` or a lane is forgotten.
    #[test]
    fn merged_and_blocked_sums_are_right_to_the_last_bit() {
        // sum of k/1e6 over k = 1..n, exact numerator n (n + 1)/2
        let n = 1_000_003_u64;
        let terms: Vec<f64> = (1..=n).map(|k| k as f64 * 0.5).collect();
        let exact = (n * (n + 1) / 2) as f64 * 0.5;
        let mut blocked = CompensatedSum::new();
        blocked.add_positive(&terms);
        assert_eq!(blocked.value(), exact);
        let (front, back) = terms.split_at(777);
        let mut merged: CompensatedSum = front.iter().map(|t| t * 0.1).collect();
        merged.merge(&back.iter().map(|t| t * 0.1).collect());
        assert!((merged.value() / (exact * 0.1) - 1.0).abs() < 2e-16);
    }

    // Red when a merge throws the carry away: the pieces cancel to the carry alone.
    #[test]
    fn merge_keeps_the_carry() {
        let mut left: CompensatedSum = [1e100, 1.0].into_iter().collect();
        left.merge(&[-1e100, 1.0].into_iter().collect());
        assert_eq!(left.value(), 2.0);
    }

    #[test]
    fn an_infinite_term_stays_visible() {
        let sum: CompensatedSum = [1.0, f64::INFINITY, 2.0].into_iter().collect();
        assert_eq!(sum.value(), f64::INFINITY);
        let sum: CompensatedSum = [1.0, f64::NAN].into_iter().collect();
        assert!(sum.value().is_nan());
    }
}
