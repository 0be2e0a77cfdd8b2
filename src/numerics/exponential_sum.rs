//! Sums of exponentials `f(t) = sum c_i exp(a_i t)`: whether one is positive for every real t.
//!
//! With t the logarithm of x these are sums of powers of x > 0, whole or not. Factor out the lowest exponent: what
//! remains has as derivative a sum with one term less, so that its extrema are found before its zeros, and every zero
//! lies between two of them (Rolle).

use super::root::find_root;

/// (factor, exponent).
pub type Term = (f64, f64);

/// A sum this small beside the sum of the sizes of its terms counts as zero.
const NOTHING: f64 = 1e-13;

/// A place where the sum is not positive, or `None` when there is none: `-inf` or `inf` when it is so in that limit,
/// else the extremum. A sum without terms is nowhere positive.
pub fn not_positive_at(terms: &[Term]) -> Option<f64> {
    let terms = in_order(terms);
    let (Some(first), Some(last)) = (terms.first(), terms.last()) else {
        return Some(0.0);
    };
    if last.0 < 0.0 {
        return Some(f64::INFINITY);
    }
    if first.0 < 0.0 {
        return Some(f64::NEG_INFINITY);
    }
    let mut extrema = zeros(&derivative(&terms)).into_iter();
    extrema.find(|&t| share(&terms, t) <= NOTHING)
}

/// Ascending exponents, each once, none with factor zero.
fn in_order(terms: &[Term]) -> Vec<Term> {
    let mut sorted: Vec<_> = terms.to_vec();
    sorted.sort_by(|a, b| a.1.total_cmp(&b.1));
    let mut merged: Vec<Term> = Vec::new();
    for (factor, exponent) in sorted {
        match merged.last_mut() {
            Some(last) if last.1 == exponent => last.0 += factor,
            _ => merged.push((factor, exponent)),
        }
    }
    merged.retain(|(factor, _)| *factor != 0.0);
    merged
}

/// Derivative of `exp(-a_0 t) f(t)`: without the first term.
fn derivative(terms: &[Term]) -> Vec<Term> {
    let Some(&(_, lowest)) = terms.first() else {
        return Vec::new();
    };
    let rest = terms[1..].iter();
    rest.map(|&(c, a)| (c * (a - lowest), a - lowest)).collect()
}

/// The sum over the sum of the sizes of its terms: between -1 and 1, and never an overflow.
fn share(terms: &[Term], t: f64) -> f64 {
    let logs = terms.iter().map(|&(c, a)| c.abs().ln() + a * t);
    let largest = logs.clone().fold(f64::NEG_INFINITY, f64::max);
    let (mut sum, mut size) = (0.0, 0.0);
    for (&(c, _), log) in terms.iter().zip(logs) {
        let term = (log - largest).exp();
        sum += term.copysign(c);
        size += term;
    }
    sum / size
}

/// Where the sum changes sign, ascending. Terms in order.
fn zeros(terms: &[Term]) -> Vec<f64> {
    let changes = terms.windows(2).filter(|w| w[0].0 * w[1].0 < 0.0).count();
    if changes == 0 {
        return Vec::new();
    }
    let extrema = zeros(&derivative(terms));
    let f = |t: f64| share(terms, t);
    let (first, last) = (extrema.first().copied(), extrema.last().copied());
    let mut ends = vec![beyond(&f, first.unwrap_or(0.0), -1.0, terms.first())];
    ends.extend(&extrema);
    ends.push(beyond(&f, last.unwrap_or(0.0), 1.0, terms.last()));
    let pairs = ends.windows(2);
    pairs
        .filter_map(|w| find_root(w[0], w[1], f).ok())
        .collect()
}

/// A place so far in this direction that the sum has the sign of its term there.
fn beyond(f: &impl Fn(f64) -> f64, from: f64, direction: f64, term: Option<&Term>) -> f64 {
    let sign = term.map_or(1.0, |t| t.0.signum());
    let mut step = direction;
    while f(from + step) * sign < 0.5 && step.abs() < 1e9 {
        step *= 2.0;
    }
    from + step
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    // 1 - 2 q x + x^2 touches zero at x = 1 when q = 1. Red when the comparison moves.
    #[test]
    fn a_square_is_positive_until_it_touches() {
        let square = |q: f64| [(1.0, 0.0), (-2.0 * q, 1.0), (1.0, 2.0)];
        assert_eq!(not_positive_at(&square(0.999_999)), None);
        for q in [1.0, 1.01, 30.0] {
            let at = not_positive_at(&square(q)).unwrap();
            assert!((at - q.ln()).abs() < 1e-7, "{q}: {at}");
        }
        assert_eq!(
            not_positive_at(&[(1.0, 2.0), (-1.0, 3.0)]),
            Some(f64::INFINITY)
        );
        assert_eq!(
            not_positive_at(&[(1.0, 2.0), (-1.0, -3.0)]),
            Some(f64::NEG_INFINITY)
        );
        assert_eq!(not_positive_at(&[]), Some(0.0));
        assert_eq!(not_positive_at(&[(1.0, 2.0), (-1.0, 2.0)]), Some(0.0));
    }

    // (x-1)(x-2)(x-3)(x-4) dips below zero twice; lifted by 1.1 (its lowest value is -1) nowhere.
    #[test]
    fn every_dip_is_seen() {
        let quartic = |lift: f64| {
            [
                (24.0 + lift, 0.0),
                (-50.0, 1.0),
                (35.0, 2.0),
                (-10.0, 3.0),
                (1.0, 4.0),
            ]
        };
        assert_eq!(not_positive_at(&quartic(1.1)), None);
        assert!(not_positive_at(&quartic(0.9)).is_some());
        let found = zeros(&quartic(0.0));
        let expected = [1.0_f64, 2.0, 3.0, 4.0].map(f64::ln);
        assert_eq!(found.len(), 4);
        for (got, exact) in found.iter().zip(expected) {
            assert!((got - exact).abs() < 1e-12, "{found:?}");
        }
        // scales far apart, and exponents that are no whole numbers
        let narrow = [(1e-30, -7.5), (-1e3, 0.1), (1e-20, 9.3)];
        assert!(not_positive_at(&narrow).is_some());
    }

    proptest! {
        // Against a dense search. Red when an extremum is lost.
        #[test]
        fn agrees_with_a_dense_search(raw in prop::collection::vec((-1.0..1.0_f64, -6.0..6.0_f64), 1..7)) {
            let terms = in_order(&raw);
            let dense = (-40_000..40_000).any(|i| share(&terms, f64::from(i) * 1e-3) < 0.0);
            let found = not_positive_at(&raw);
            if dense {
                prop_assert!(found.is_some(), "{terms:?}");
            } else if let Some(at) = found {
                prop_assert!(at.abs() > 39.0 || share(&terms, at) < 1e-4, "{terms:?} {at}");
            }
        }
    }
}
