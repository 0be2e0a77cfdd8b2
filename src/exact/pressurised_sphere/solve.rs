//! The branches of a sphere at given pressures: which there are, and the state on the wanted one.

use super::curve::{CHECK_POINTS, Curve, POINTS, Turns};
use crate::exact::demands::rounded;
use crate::exact::given::refuse;
use crate::exact::solution::Refusal;
use crate::numerics::find_root;

/// A turning point of the pressure.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Turn {
    /// d at the bore.
    pub d: f64,
    /// Pi - Po.
    pub pressure: f64,
}

/// The whole curve: turning points from rest outwards, and what is at its far end.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Branches {
    pub turns: Vec<Turn>,
    /// The first turning point on the way in, under suction.
    pub inward: Option<Turn>,
    /// Where the pressure becomes flat for good, and its value.
    pub asymptote: Option<Turn>,
}

/// d at the bore and a bound on its error.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Solved {
    pub d: f64,
    pub d_error: f64,
    pub p_error: f64,
}

impl Branches {
    pub fn of(curve: &Curve) -> Self {
        let turn = |d: f64| Turn {
            d,
            pressure: curve.pressure(d, POINTS).value,
        };
        let out: Turns = curve.turns(curve.range.1);
        let inward = curve.turns(curve.range.0);
        Self {
            turns: out.at.iter().map(|d| turn(*d)).collect(),
            inward: inward.at.first().map(|d| turn(*d)),
            asymptote: out.flat_from.map(turn),
        }
    }

    /// d at both ends of branch `number`, 1 from rest; `None` when there are not so many.
    fn piece(&self, number: usize, range: (f64, f64)) -> Option<(f64, f64)> {
        let lower = match number.checked_sub(2) {
            None => self.inward.map_or(range.0, |t| t.d),
            Some(i) => self.turns.get(i)?.d,
        };
        let upper = self.turns.get(number - 1).map_or(range.1, |t| t.d);
        Some((lower, upper))
    }

    /// The limit of the first branch: maximum or asymptote, or why there is none.
    pub fn limit(&self, curve: &Curve, outer_pressure: f64) -> Result<f64, String> {
        if let Some(top) = self.turns.first() {
            return Ok(outer_pressure + top.pressure);
        }
        if let Some(flat) = self.asymptote {
            return Ok(outer_pressure + flat.pressure);
        }
        let stretch = (curve.range.1 / 3.0).exp();
        Err(format!(
            "no limit: the inner pressure still rises at a bore of {stretch:.6} times its reference radius"
        ))
    }

    /// Turning points in words, with the stretch of the bore.
    pub fn words(&self, curve: &Curve, outer_pressure: f64) -> String {
        let point = |(i, t): (usize, &Turn)| {
            let kind = if i % 2 == 0 { "maximum" } else { "minimum" };
            format!(
                "{kind} {} at bore stretch {}",
                rounded(outer_pressure + t.pressure, 10),
                rounded((t.d / 3.0).exp(), 8)
            )
        };
        let mut words: Vec<_> = self.turns.iter().enumerate().map(point).collect();
        if words.is_empty() {
            words.push("none".to_string());
        }
        if let Some(flat) = self.asymptote {
            let value = rounded(outer_pressure + flat.pressure, 10);
            words.push(format!("then flat at {value} to round-off"));
        }
        format!(
            "turning points of the inner pressure, searched up to a bore stretch of {}: {}",
            rounded((curve.range.1 / 3.0).exp(), 6),
            words.join(", ")
        )
    }

    /// The state on branch `number` at these pressures.
    pub fn solve(
        &self,
        curve: &Curve,
        number: usize,
        (inner_pressure, outer_pressure): (f64, f64),
    ) -> Result<Solved, Refusal> {
        let difference = inner_pressure - outer_pressure;
        let Some((lower, upper)) = self.piece(number, curve.range) else {
            let count = self.turns.len() + 1;
            let message =
                format!("branch = {number}, but the sphere has {count} within the range searched");
            return Err(refuse(
                "branch",
                message,
                format!("nearest admissible value: {count}"),
            ));
        };
        let off = |d: f64| curve.pressure(d, POINTS).value - difference;
        // on the first branch the sign of the load says on which side of rest the state is
        let (lower, upper) = match (number, difference > 0.0) {
            (1, true) => (0.0, upper),
            (1, false) => (lower, 0.0),
            _ => (lower, upper),
        };
        if number == 1 && difference == 0.0 {
            return Ok(errors(curve, 0.0, difference));
        }
        let scale = difference.abs().max(curve.law.shear_modulus());
        let (from, to) = tamed((lower, upper), scale, off);
        let d = find_root(from, to, off).map_err(|_| {
            self.beyond(
                curve,
                number,
                (inner_pressure, outer_pressure),
                (lower, upper),
            )
        })?;
        Ok(errors(curve, polished(curve, d, difference), difference))
    }

    fn beyond(
        &self,
        curve: &Curve,
        number: usize,
        (inner, outer): (f64, f64),
        (lower, upper): (f64, f64),
    ) -> Refusal {
        if number == 1 && inner < outer {
            let most = -curve.pressure(lower, POINTS).value;
            let message = format!(
                "outer-pressure exceeds inner-pressure by {}, more than the {} up to which states were found",
                outer - inner,
                rounded(most, 9)
            );
            return refuse("outer-pressure", message, "reduce the outer pressure");
        }
        let ends = [lower, upper].map(|d| outer + curve.pressure(d, POINTS).value);
        let (low, high) = (ends[0].min(ends[1]), ends[0].max(ends[1]));
        let range = format!("from {} to {}", rounded(low, 12), rounded(high, 12));
        let nearest = rounded(if inner > high { high } else { low }, 9);
        let message = match self.turns.first() {
            Some(top) if number == 1 => format!(
                "inner-pressure = {inner} is beyond the maximum {} of the first branch, reached at a bore stretch of {}",
                rounded(high, 12),
                rounded((top.d / 3.0).exp(), 8)
            ),
            _ => format!("inner-pressure = {inner} is not on branch {number}, which runs {range}"),
        };
        let parameter = if number == 1 {
            "inner-pressure"
        } else {
            "branch"
        };
        refuse(
            parameter,
            message,
            format!("nearest admissible inner-pressure: {nearest}"),
        )
    }
}

/// An interval whose pressures are within reach of a root finder: a law that stiffens without bound has 1e190 at the end of its range.
fn tamed((mut lower, mut upper): (f64, f64), scale: f64, off: impl Fn(f64) -> f64) -> (f64, f64) {
    let (at_lower, at_upper) = (off(lower), off(upper));
    if at_lower.signum() == at_upper.signum() {
        return (lower, upper);
    }
    for _ in 0..200 {
        if off(lower).abs().max(off(upper).abs()) <= 1e6 * scale {
            break;
        }
        let middle = 0.5 * (lower + upper);
        if off(middle).signum() == at_upper.signum() {
            upper = middle;
        } else {
            lower = middle;
        }
    }
    (lower, upper)
}

/// Newton's method with the exact slope, as long as it improves.
fn polished(curve: &Curve, mut d: f64, difference: f64) -> f64 {
    let mut last = 1e-6 * d.abs();
    for _ in 0..4 {
        let step = (curve.pressure(d, POINTS).value - difference) / curve.slope(d).value;
        if step.is_nan() || step.abs() >= 0.5 * last {
            break;
        }
        (d, last) = (d - step, step.abs());
    }
    d
}

/// Round-off and quadrature error of the pressure, through the slope, or near a turning point through the curvature.
fn errors(curve: &Curve, d: f64, difference: f64) -> Solved {
    let p = curve.pressure(d, POINTS);
    let check = curve.pressure(d, CHECK_POINTS).value;
    let p_error = 2.0 * f64::EPSILON * (p.size + difference.abs()) + (p.value - check).abs();
    let h = 1e-4;
    let bend = (curve.slope(d + h).value - curve.slope(d - h).value) / (2.0 * h);
    let near_a_turn = (2.0 * p_error / bend.abs()).sqrt();
    let plain = p_error / curve.slope(d).value.abs();
    Solved {
        d,
        d_error: if near_a_turn.is_nan() {
            plain
        } else {
            plain.min(2.0 * near_a_turn)
        },
        p_error,
    }
}
