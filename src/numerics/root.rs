//! A bracketed root, right to round-off whatever the scale of the function and of the interval.
//!
//! Brent's method from the `roots` crate, behind a wrapper that mends its traps: its one tolerance is absolute
//! and serves both |f| and |x2 - x1|, so a small f makes an end point "the root" and a root near zero has no
//! digits; a NaN is not reported; it returns the iterate before the last.

use roots::{Convergency, SearchError, find_root_brent};

/// Why there is no root to return.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum RootError {
    /// An end of the interval, or the function there, is not finite.
    #[error("the function is {value} at {at}")]
    NotFinite { at: f64, value: f64 },
    /// The function has the same sign at both ends.
    #[error("no change of sign between {from} ({at_from}) and {to} ({at_to})")]
    NoBracket {
        from: f64,
        to: f64,
        at_from: f64,
        at_to: f64,
    },
    /// The interval did not shrink to round-off in 300 steps, or the function was NaN inside.
    #[error("no root found between {from} and {to}")]
    NotConverged { from: f64, to: f64 },
}

/// Stops at an exact zero, or when the interval is as narrow as doubles allow.
struct ToRoundOff;

impl Convergency<f64> for ToRoundOff {
    fn is_root_found(&mut self, y: f64) -> bool {
        y == 0.0
    }
    fn is_converged(&mut self, x1: f64, x2: f64) -> bool {
        (x1 - x2).abs() <= 2.0 * f64::EPSILON * x1.abs().max(x2.abs())
    }
    fn is_iteration_limit_reached(&mut self, iterations: usize) -> bool {
        iterations > 300
    }
}

/// The root of `f` between `from` and `to`, where `f` changes sign: of all points visited, the one with the
/// smallest |f| next to the change of sign. A pole with a change of sign is returned like a root.
pub fn find_root(from: f64, to: f64, mut f: impl FnMut(f64) -> f64) -> Result<f64, RootError> {
    let (at_from, at_to) = (f(from), f(to));
    for (at, value) in [(from, at_from), (to, at_to)] {
        if !(at.is_finite() && value.is_finite()) {
            return Err(RootError::NotFinite { at, value });
        }
        if value == 0.0 {
            return Ok(at);
        }
    }
    if (at_from > 0.0) == (at_to > 0.0) {
        return Err(RootError::NoBracket {
            from,
            to,
            at_from,
            at_to,
        });
    }
    let scale = at_from.abs().max(at_to.abs());
    // the crate asks for f(a) and f(b) again at every step; the last few answers are kept
    let mut kept = [
        (from, at_from / scale),
        (to, at_to / scale),
        (f64::NAN, 0.0),
        (f64::NAN, 0.0),
    ];
    let mut next = 2;
    let mut best = if at_from.abs() < at_to.abs() {
        kept[0]
    } else {
        kept[1]
    };
    let mut broken = false;
    let scaled = |x: f64| {
        if let Some(&(_, y)) = kept.iter().find(|(seen, _)| *seen == x) {
            return y;
        }
        let y = f(x) / scale;
        broken |= !y.is_finite();
        if y.abs() < best.1.abs() {
            best = (x, y);
        }
        kept[next] = (x, y);
        next = (next + 1) % kept.len();
        y
    };
    match find_root_brent(from, to, scaled, &mut ToRoundOff) {
        Ok(root) if !broken => {
            // the crate returns a neighbour of the root; the best point visited is it, if it is that close
            let near = (best.0 - root).abs() <= 1e-6 * (best.0.abs().max(root.abs()));
            Ok(if near || best.1 == 0.0 { best.0 } else { root })
        }
        Ok(_) | Err(SearchError::NoConvergency) | Err(_) => {
            Err(RootError::NotConverged { from, to })
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn check(name: &str, from: f64, to: f64, exact: f64, f: impl Fn(f64) -> f64) {
        let mut calls = 0;
        let root = find_root(from, to, |x| {
            calls += 1;
            f(x)
        })
        .unwrap_or_else(|e| panic!("{name}: {e}"));
        let error = (root - exact).abs() / exact.abs().max(f64::MIN_POSITIVE);
        assert!(
            error < 3e-16 && calls < 320,
            "{name}: {root} {error} {calls}"
        );
    }

    // Each line is red when the crate is called directly with any fixed absolute tolerance.
    #[test]
    fn hostile_functions_are_solved_to_round_off() {
        check("tiny f", 0.0, 3.0, 1.0, |x| 1e-20 * (x - 1.0));
        check("underflowing product", 0.0, 3.0, 1.0, |x| {
            1e-200 * ((x - 1.0) + 0.3 * (x - 1.0).powi(3))
        });
        check("tiny root", 0.0, 1.0, 1e-9, |x| x - 1e-9);
        check("huge root", 0.0, 1e10, 1e9, |x| x - 1e9);
        check("saturating", 1e-12, 40.0, 20.0, |x| {
            (-20.0_f64).exp() - (-x).exp()
        });
        check("triple root", -1.0, 2.5, 1.0, |x| (x - 1.0).powi(3));
        check("steep", -1.0, 1.0, 0.5, |x| (1e2 * (x - 0.5)).sinh());
        check("exact zero at an end", 1.0, 2.0, 1.0, |x| x - 1.0);
        check("reversed interval", 3.0, 0.0, 2.0_f64.sqrt(), |x| {
            x * x - 2.0
        });
    }

    #[test]
    fn what_has_no_root_is_said() {
        assert!(matches!(
            find_root(0.0, 1.0, |_| 1.0),
            Err(RootError::NoBracket { .. })
        ));
        assert!(matches!(
            find_root(0.0, 1.0, |x| 1.0 / x),
            Err(RootError::NotFinite { .. })
        ));
        let hole = |x: f64| {
            if x > 0.4 && x < 0.6 {
                f64::NAN
            } else {
                x - 0.5
            }
        };
        assert!(matches!(
            find_root(0.0, 1.0, hole),
            Err(RootError::NotConverged { .. })
        ));
    }
}
