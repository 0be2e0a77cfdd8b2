//! Pressure against bore of an incompressible sphere, and all its turning points.
//!
//! ```text
//! d = ln(lt/lr) = 3 ln lt;  at the bore d, at R: d(R) = log1p(k A^3/R^3), k = expm1(d) = (a/A)^3 - 1
//! d srr/dr = 2 (stt - srr)/r,  dr/r = -dd/(3 expm1(d))     =>     Pi - Po = int_dB^d q dd,   q = 2 (Tt-Tr)/(3 expm1(d))
//! d(Pi - Po)/dd = q(d) - q(dB) e^(d - dB) A^3/B^3           the slope is local: no integral in it
//! ```
//! q holds the law alone, without the sphere's size. Both walls are principal states of equal biaxial stretch, so that the law
//! is asked at `(d, e) = (d, d/3)`.

use crate::materials::IncompressibleLaw;
use crate::numerics::running_mean::{panels, panels_in_noise};
use crate::numerics::{CompensatedSum, GaussRule, find_root};
use std::sync::Arc;

/// Gauss points a panel, and for the estimate of their error.
pub(super) const POINTS: usize = 16;
pub(super) const CHECK_POINTS: usize = 24;

/// The search for states ends at these stretches of the bore. Further in the difference form of the laws runs out of digits.
pub(super) const LEAST_STRETCH: f64 = 0.05;
pub(super) const MOST_STRETCH: f64 = 1e3;

/// Next to a lock the stress has 16 digits less the logarithm of this: nothing is searched beyond.
const MOST_LOSS: f64 = 1e8;

/// Stresses beyond this leave no room for their sums.
const LARGEST: f64 = 1e200;

/// Slopes below this many units of round-off are taken for zero.
const NOISE: f64 = 64.0 * f64::EPSILON;

/// Slopes looked at on a panel that 16 points resolve.
const SAMPLES: u32 = 20;

/// The wall with its law.
#[derive(Debug, Clone)]
pub(super) struct Curve {
    pub inner: f64,
    pub outer: f64,
    pub law: Arc<dyn IncompressibleLaw>,
    /// (A/B)^3.
    ratio: f64,
    /// (B^3 - A^3)/B^3.
    rest: f64,
    /// Lowest and highest d at which the law has a stress, within the search.
    pub range: (f64, f64),
}

/// An integral with the sum of its terms' sizes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Sized {
    pub value: f64,
    pub size: f64,
}

/// Turning points of the pressure beyond d = 0, the nearest first.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Turns {
    pub at: Vec<f64>,
    /// Where the slope was lost in round-off for good: the pressure has an asymptote there.
    pub flat_from: Option<f64>,
}

/// B^3 - R^3 as a product.
fn cubes(outer: f64, inner: f64) -> f64 {
    (outer - inner) * (outer * outer + outer * inner + inner * inner)
}

/// log(1 + x), of which `other` is 1 + x formed another way for x near -1.
fn log1p_or(x: f64, other: impl FnOnce() -> f64) -> f64 {
    if x > -0.5 { x.ln_1p() } else { other().ln() }
}

impl Curve {
    pub fn new(inner: f64, outer: f64, law: Arc<dyn IncompressibleLaw>) -> Self {
        let mut curve = Self {
            inner,
            outer,
            law,
            ratio: (inner / outer).powi(3),
            rest: cubes(outer, inner) / outer.powi(3),
            range: (0.0, 0.0),
        };
        let [near, far] = [LEAST_STRETCH, MOST_STRETCH].map(|l| 3.0 * l.ln());
        curve.range = (curve.end(near), curve.end(far));
        curve
    }

    /// The last d on the way to `far` at which the law has a stress.
    fn end(&self, far: f64) -> f64 {
        let below = |x: f64| x.abs() < LARGEST;
        let holds = |d: f64| {
            let loss = self.law.hardening(d, d / 3.0).loss;
            let energy = self.law.at(d, d / 3.0).energy;
            below(self.density(d)) && below(energy) && loss < MOST_LOSS
        };
        match holds(far) {
            true => far,
            false => crate::exact::demands::last_where(0.0, far, holds),
        }
    }

    /// q of the header.
    pub fn density(&self, d: f64) -> f64 {
        if d == 0.0 {
            let hoop = self.law.with_slopes(0.0, 0.0).hoop;
            return (hoop.by_d + hoop.by_e / 3.0) / 1.5;
        }
        self.law.at(d, d / 3.0).hoop / (1.5 * d.exp_m1())
    }

    /// d at the outer wall.
    pub fn outer_difference(&self, d: f64) -> f64 {
        log1p_or(d.exp_m1() * self.ratio, || self.rest + self.ratio * d.exp())
    }

    /// k A^3/(B^3 + k A^3).
    pub fn share(&self, d: f64) -> f64 {
        d.exp_m1() * self.ratio / (self.rest + self.ratio * d.exp())
    }

    /// d - dB without the cancellation of a thin wall or a small strain.
    pub fn span(&self, d: f64) -> f64 {
        self.place(d, self.inner).unwrap_or(f64::NAN)
    }

    /// d(R) - dB, or `None` where the formula has no continuation.
    pub fn place(&self, d: f64, radius: f64) -> Option<f64> {
        let x = self.share(d) * (cubes(self.outer, radius) / radius.powi(3));
        let place = log1p_or(x, || {
            // (1 + k A^3/R^3) of both places, neither by subtraction
            let here = cubes(radius, self.inner) + self.inner.powi(3) * d.exp();
            let there = self.outer.powi(3) * (self.rest + self.ratio * d.exp());
            here / there * (self.outer / radius).powi(3)
        });
        place.is_finite().then_some(place)
    }

    /// Pi - Po.
    pub fn pressure(&self, d: f64, points: usize) -> Sized {
        let (from, span) = (self.outer_difference(d), self.span(d));
        // as distances from dB, so that a thin wall keeps its thickness
        let ends = panels_in_noise((0.0, span), &mut |x| {
            let (d, q) = (from + x, self.density(from + x));
            let loss = self.law.hardening(d, d / 3.0).loss;
            (q, 8.0 * f64::EPSILON * loss * q.abs())
        });
        let rule = GaussRule::of(points);
        let (mut sum, mut size) = (CompensatedSum::new(), 0.0);
        for panel in ends.windows(2) {
            for (x, weight) in rule.on(panel[0], panel[1]) {
                let term = weight * self.density(from + x);
                let lost = 1.0 + self.law.hardening(from + x, (from + x) / 3.0).loss;
                sum.add(term);
                size += term.abs() * lost;
            }
        }
        Sized {
            value: sum.value(),
            size,
        }
    }

    /// d(Pi - Po)/dd, with the size of its terms times the digits they lose.
    pub fn slope(&self, d: f64) -> Sized {
        let inner = self.density(d);
        let outer = self.density(self.outer_difference(d)) * (self.span(d).exp() * self.ratio);
        let lost = 1.0 + self.law.hardening(d, d / 3.0).loss;
        Sized {
            value: inner - outer,
            size: (inner.abs() + outer.abs()) * lost,
        }
    }

    /// Strain energy of the whole sphere.
    pub fn energy(&self, d: f64, points: usize) -> f64 {
        let k = d.exp_m1();
        let thickness = ((self.outer - self.inner) / self.inner).ln_1p();
        let mut f = |x: f64| {
            let cube = (3.0 * x).exp();
            let swell = (3.0 * x).exp_m1();
            let here = log1p_or(k / cube, || (swell + d.exp()) / cube);
            self.law.at(here, here / 3.0).energy * cube
        };
        let rule = GaussRule::of(points);
        let ends = panels((0.0, thickness), &mut f);
        let mut sum = CompensatedSum::new();
        for panel in ends.windows(2) {
            for (x, weight) in rule.on(panel[0], panel[1]) {
                sum.add(weight * f(x));
            }
        }
        4.0 * std::f64::consts::PI * self.inner.powi(3) * sum.value()
    }

    /// All turning points between d = 0 and `end`, one of the ends of the range.
    pub fn turns(&self, end: f64) -> Turns {
        let mut turns = Turns {
            at: Vec::new(),
            flat_from: None,
        };
        let mut f = |d: f64| {
            let slope = self.slope(d);
            (slope.value, NOISE * slope.size)
        };
        // pieces of length one first: what is small beside the end of the range must be seen too
        let count = end.abs().ceil().max(1.0);
        let cut = |i: f64| end * (i / count);
        let pieces = (0..count as usize).map(|i| (cut(i as f64), cut(i as f64 + 1.0)));
        let ends: Vec<f64> = pieces
            .flat_map(|piece| panels_in_noise(piece, &mut f))
            .collect();
        // the slope is positive at rest: a stable law stiffens against the first pressure
        let (mut last, mut sign) = (0.0, 1.0);
        for panel in ends.windows(2) {
            if panel[0] == panel[1] {
                continue;
            }
            for i in 1..=SAMPLES {
                let d = panel[0] + (panel[1] - panel[0]) * f64::from(i) / f64::from(SAMPLES);
                let Sized { value, size } = self.slope(d);
                if value.abs() <= NOISE * size || !value.is_finite() {
                    if (d - last).abs() > 1.0 {
                        turns.flat_from = Some(last);
                        return turns;
                    }
                    continue;
                }
                if value.signum() != sign {
                    if let Ok(root) = find_root(last, d, |d| self.slope(d).value) {
                        turns.at.push(root);
                    }
                    sign = value.signum();
                }
                last = d;
            }
        }
        turns
    }
}
