//! The shear stress that gives the outer wall its motion, and the wall tabled for its points.
//!
//! In x = ln(R/A) over 0..H: tau = tau(A) e^(-m x); motion = int ka dx (azimuthal), int ka R dx (axial);
//! srr = -int_x^H (stt - srr) dx; energy = 2 pi int W R^2 dx; load = 2 pi tau R^m.

use super::Way;
use super::local_shear::{Local, ShearLaw};
use crate::exact::demands::rounded;
use crate::exact::given::refuse;
use crate::exact::solution::{ErrorBound, Refusal};
use crate::materials::IncompressibleLaw;
use crate::numerics::{
    Chebyshev, CompensatedSum, GaussRule, Piecewise, Resolution, RunningMean, find_root,
};
use std::f64::consts::PI;
use std::sync::Arc;

/// Gauss points a panel, and for the estimate of their error.
const POINTS: usize = 16;
const CHECK_POINTS: usize = 24;

/// Widest panel in x.
const PANEL: f64 = 0.4;

/// Chebyshev nodes a piece of the table of amounts.
const NODES: usize = 20;

/// The wall with its tables.
#[derive(Debug, Clone)]
pub(super) struct Wall {
    pub inner: f64,
    pub outer: f64,
    pub way: Way,
    law: ShearLaw,
    /// tau(A).
    stress: f64,
    /// ka/tau in x: of one sign and smooth, whatever the sign of the motion.
    compliance: Piecewise,
    /// Means of ka or ka R from the inner wall, of stt - srr from the outer one.
    motion: RunningMean,
    rise: RunningMean,
}

/// The wall with its totals.
#[derive(Debug, Clone)]
pub(super) struct Solved {
    pub wall: Wall,
    pub load: f64,
    pub energy: f64,
    pub bound: ErrorBound,
}

/// The problem before its constant is known.
struct Problem {
    inner: f64,
    span: f64,
    way: Way,
    law: ShearLaw,
}

impl Problem {
    fn panels(&self) -> Vec<f64> {
        let n = (self.span / PANEL).ceil().max(1.0);
        (0..=n as usize)
            .map(|i| self.span * (i as f64 / n))
            .collect()
    }

    /// Integral of `f(x, ka)` through the wall for the stress `tau(A)`. NaN where the law does not carry it.
    fn integral(&self, stress: f64, points: usize, f: impl Fn(f64, f64) -> f64) -> f64 {
        let power = f64::from(self.way.power());
        let rule = GaussRule::of(points);
        let mut sum = CompensatedSum::new();
        for panel in self.panels().windows(2) {
            for (x, weight) in rule.on(panel[0], panel[1]) {
                let amount = self.law.amount(stress * (-power * x).exp());
                sum.add(weight * f(x, amount.unwrap_or(f64::NAN)));
            }
        }
        sum.value()
    }

    /// Weight of ka in the motion.
    fn weight(&self, x: f64) -> f64 {
        match self.way {
            Way::Azimuthal => 1.0,
            Way::Axial => self.inner * x.exp(),
        }
    }

    fn motion(&self, amount: f64, points: usize) -> f64 {
        self.integral(self.law.stress(amount), points, |x, ka| ka * self.weight(x))
    }

    /// ka at the inner wall for a motion, both without sign.
    fn amount(&self, motion: f64) -> Result<f64, Refusal> {
        if motion == 0.0 {
            return Ok(0.0);
        }
        // constant modulus: the closed form
        let per_amount = match self.way {
            Way::Azimuthal => -0.5 * (-2.0 * self.span).exp_m1(),
            Way::Axial => self.inner * self.span,
        };
        let off = |amount: f64| self.motion(amount, POINTS) - motion;
        let mut high = (motion / per_amount).min(self.law.most);
        while high < self.law.most && off(high) < 0.0 {
            high = (2.0 * high).min(self.law.most);
        }
        find_root(0.0, high, off).map_err(|_| {
            let most = motion + off(self.law.most);
            let why = match self.law.softens {
                true => "there the law's shear stress has its maximum at the inner wall",
                false => "there the law locks, or its numbers end, at the inner wall",
            };
            let name = self.way.motion();
            let message = format!(
                "{name} = {motion} is more than the {} up to which states exist: {why}",
                rounded(most, 9)
            );
            refuse(
                name,
                message,
                format!("nearest admissible value: {}", rounded(most, 6)),
            )
        })
    }
}

pub(super) fn solve(
    (inner, outer): (f64, f64),
    law: Arc<dyn IncompressibleLaw>,
    way: Way,
    motion: f64,
) -> Result<Solved, Refusal> {
    let problem = Problem {
        inner,
        span: ((outer - inner) / inner).ln_1p(),
        way,
        law: ShearLaw::new(law),
    };
    let amount = problem.amount(motion.abs())?;
    let stress = problem.law.stress(amount).copysign(motion);
    let square = inner * inner;
    let energy = |points| {
        let local = |x: f64, ka: f64| problem.law.local(ka).energy * (2.0 * x).exp();
        2.0 * PI * square * problem.integral(stress, points, local)
    };
    let load = 2.0 * PI * stress * inner.powi(way.power());
    let (stored, check) = (energy(POINTS), energy(CHECK_POINTS));
    let bound = bound_of(&problem, amount, motion.abs(), (stored, check));
    let wall = tabled(problem, stress, outer).ok_or_else(|| {
        let message = "the shear varies too steeply to be tabled to round-off";
        refuse(way.motion(), message.to_string(), "choose a smaller motion")
    })?;
    Ok(Solved {
        wall,
        load,
        energy: stored,
        bound,
    })
}

/// From the error of the wall's motion, through the slope of the load by it.
fn bound_of(problem: &Problem, amount: f64, motion: f64, energies: (f64, f64)) -> ErrorBound {
    let round_off = 16.0 * f64::EPSILON;
    // in a thin wall a point's own place has fewer digits
    let place = 2.0 * f64::EPSILON / -(-problem.span).exp_m1();
    if amount == 0.0 {
        return ErrorBound {
            displacement: round_off,
            stress: round_off,
            totals: round_off,
        };
    }
    let h = 1e-4;
    let at = |factor: f64| {
        let amount = (factor * amount).min(problem.law.most);
        (problem.motion(amount, POINTS), problem.law.stress(amount))
    };
    let (down, here) = (at(1.0 - h), at(1.0));
    let loss = 1.0 + problem.law.loss(amount);
    let check = problem.motion(amount, CHECK_POINTS);
    let relative = 2.0 * f64::EPSILON + (check - here.0).abs() / motion;
    // d ln load/d ln motion
    let gain = ((here.1 - down.1) / here.1 / ((here.0 - down.0) / here.0)).abs();
    let load = gain * relative;
    ErrorBound {
        displacement: round_off + place + 2.0 * relative,
        stress: (round_off + 2.0 * load) * loss,
        totals: round_off * loss + 2.0 * load + (energies.0 - energies.1).abs() / energies.0,
    }
}

fn tabled(problem: Problem, stress: f64, outer: f64) -> Option<Wall> {
    let power = f64::from(problem.way.power());
    let (span, way) = (problem.span, problem.way);
    let tau = |x: f64| stress * (-power * x).exp();
    let modulus = problem.law.law.shear_modulus();
    let mut ratio = |x: f64| match tau(x) {
        0.0 => 1.0 / modulus,
        tau => problem.law.amount(tau).map_or(f64::NAN, |ka| ka / tau),
    };
    let breaks = Piecewise::breaks((0.0, span), NODES, 4e-15, 20, &mut ratio)?;
    let pieces = breaks
        .windows(2)
        .map(|ends| Chebyshev::fit(ends[0], ends[1], NODES, &mut ratio));
    let compliance = Piecewise::new(pieces.collect());
    let amount = |x: f64| compliance.value(x).unwrap_or(f64::NAN) * tau(x);
    let size = problem.law.local(amount(0.0));
    let wanted = Resolution {
        relative: 4e-15,
        absolute: 4.0
            * f64::EPSILON
            * (1.0 + problem.law.loss(amount(0.0)))
            * size.along.abs().max(size.third.abs())
            / span,
    };
    let rise = RunningMean::fit(span, 0.0, wanted, |x| {
        rise_of(way, &problem.law.local(amount(x)))
    })?;
    let exact = Resolution {
        absolute: 0.0,
        ..wanted
    };
    let motion = RunningMean::fit(0.0, span, exact, |x| amount(x) * problem.weight(x))?;
    Some(Wall {
        inner: problem.inner,
        outer,
        way,
        law: problem.law,
        stress,
        compliance,
        motion,
        rise,
    })
}

/// stt - srr.
fn rise_of(way: Way, local: &Local) -> f64 {
    match way {
        Way::Azimuthal => local.along,
        Way::Axial => local.third,
    }
}

impl Wall {
    /// tau at a radius.
    pub fn stress(&self, radius: f64) -> f64 {
        self.stress * (self.inner / radius).powi(self.way.power())
    }

    /// Local stresses, srr and the motion at a reference radius; `None` where the law does not carry the stress.
    pub fn at(&self, radius: f64) -> Option<(Local, f64, f64)> {
        let span = ((self.outer - self.inner) / self.inner).ln_1p();
        let x = ((radius - self.inner) / self.inner).ln_1p();
        let stress = self.stress(radius);
        let amount = match self.compliance.value(x) {
            Some(ratio) => ratio * stress,
            None => self.law.amount(stress)?,
        };
        // the shear stress is known without the law
        let local = Local {
            shear: stress,
            along: stress * amount,
            ..self.law.local(amount)
        };
        let elsewhere = |x: f64| {
            self.law
                .amount(self.stress(self.inner * x.exp()))
                .unwrap_or(f64::NAN)
        };
        let srr = match radius == self.outer {
            true => 0.0,
            false => {
                (x - span)
                    * self
                        .rise
                        .value(x, |x| rise_of(self.way, &self.law.local(elsewhere(x))))
            }
        };
        let motion = x * self.motion.value(x, |x| {
            let weight = match self.way {
                Way::Azimuthal => 1.0,
                Way::Axial => self.inner * x.exp(),
            };
            elsewhere(x) * weight
        });
        let known = local.energy.is_finite()
            && srr.is_finite()
            && motion.is_finite()
            && local.third.is_finite();
        known.then_some((local, srr, motion))
    }
}
