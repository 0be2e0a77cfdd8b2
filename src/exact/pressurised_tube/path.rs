//! The branch of states from the unloaded tube, followed in `g`, and where it ends.
//!
//! The outer pressure and the axial force are applied first, with the same pressure inside (g = 0, the wall is
//! stretched homogeneously); then the inner pressure changes alone and the bore grows or shrinks. Along this path
//! the axial equation gives e(g), and `D = dP/dg = P_g - P_e N_g/N_e` its slope. The first zero of D is the limit
//! load; when P saturates instead, D decays like e^-g down to round-off, which is no limit point: the rule of
//! numerics.md 1 tells them apart.

use super::equations::{Graded, Integrals, POINTS, Wall};
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;
use crate::numerics::find_root;
use std::f64::consts::PI;

/// What fixes the axial stretch.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Axial {
    /// e = ln lz is given.
    Fixed(f64),
    /// F = 0.
    Closed,
    /// N and Po are given.
    Force { force: f64, outer_pressure: f64 },
}

/// One state of the path.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Station {
    pub g: f64,
    pub e: f64,
    /// Pi - Po.
    pub pressure: f64,
    /// d(Pi - Po)/dg along the path.
    pub slope: f64,
    /// de/dg along the path.
    pub e_slope: f64,
}

/// How the path ends when the bore grows, as Pi - Po.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum End {
    /// A maximum of the pressure.
    Maximum(Station),
    /// The pressure tends to this value as the bore grows without bound.
    Asymptote(f64),
    /// The pressure still rises at this station, the last one followed.
    Open(Station),
    /// The path could not be followed beyond this station.
    Lost(Station),
}

/// Largest |g| followed: a bore of e^25 times the reference one.
const FARTHEST: f64 = 50.0;

/// Beyond this g the axial equation takes the form whose terms do not grow with the bore.
const WIDE: f64 = 1.5;

/// Most stations of a march, so that it always ends; 40 to 80 are usual.
const MOST_STATIONS: usize = 500;

/// The path at given axial condition.
pub(super) struct Path<'a> {
    pub wall: &'a Wall,
    pub axial: Axial,
}

impl Path<'_> {
    /// Left side minus right side of the axial equation, with `difference` = Pi - Po.
    pub fn axial_residual(&self, g: f64, e: f64, difference: Graded, all: &Integrals) -> Graded {
        let force = all.reduced_force;
        let Axial::Force {
            force: given,
            outer_pressure,
        } = self.axial
        else {
            return force;
        };
        let caps = PI * outer_pressure * self.wall.area_factor() * (-e).exp();
        if g > WIDE {
            let wall = all.wall_force;
            return Graded {
                value: wall.value - caps - given,
                by_e: wall.by_e + caps,
                size: wall.size + caps.abs() + given.abs(),
                ..wall
            };
        }
        let bore = PI * self.wall.inner * self.wall.inner * (g - e).exp();
        Graded {
            value: force.value + difference.value * bore - caps - given,
            by_g: force.by_g + (difference.by_g + difference.value) * bore,
            by_e: force.by_e + (difference.by_e - difference.value) * bore + caps,
            size: force.size + difference.size * bore + caps.abs() + given.abs(),
        }
    }

    /// The state at `g`; `e` by Newton from a neighbouring value. `None` when Newton does not settle.
    pub fn station(&self, g: f64, e_guess: f64) -> Option<Station> {
        let mut e = e_guess;
        let mut last = f64::INFINITY;
        if let Axial::Fixed(e) = self.axial {
            let p = self.wall.integrate(g, e, POINTS).pressure;
            return station_of(g, e, p, 0.0);
        }
        for _ in 0..40 {
            let all = self.wall.integrate(g, e, POINTS);
            let n = self.axial_residual(g, e, all.pressure, &all);
            if !(n.value.is_finite() && n.by_e > 0.0) {
                return None;
            }
            let step = (n.value / n.by_e).clamp(-0.5, 0.5);
            let settled =
                step.abs() <= 1e-15 * e.abs() || (step.abs() < 1e-9 && step.abs() > 0.25 * last);
            if settled {
                return station_of(g, e, all.pressure, -n.by_g / n.by_e);
            }
            last = step.abs();
            e -= step;
        }
        None
    }

    /// The state at g = 0: outer pressure and axial force alone, applied in proportion from zero.
    pub fn start(&self) -> Result<Station, Refusal> {
        let lost = || {
            let hint = "the wall necks before the full force is reached; reduce it";
            refuse(
                "axial-force",
                "the axial force is beyond what the wall carries".to_string(),
                hint,
            )
        };
        let Axial::Force {
            force,
            outer_pressure,
        } = self.axial
        else {
            let e = if let Axial::Fixed(e) = self.axial {
                e
            } else {
                0.0
            };
            return self.station(0.0, e).ok_or_else(lost);
        };
        let (mut e, mut done, mut step) = (0.0_f64, 0.0_f64, 1.0_f64);
        let mut tries = 0;
        while done < 1.0 {
            tries += 1;
            let share = (done + step).min(1.0);
            let part = Path {
                wall: self.wall,
                axial: Axial::Force {
                    force: share * force,
                    outer_pressure: share * outer_pressure,
                },
            };
            match part.station(0.0, e) {
                Some(next) if (next.e - e).abs() <= 0.3 => {
                    (e, done, step) = (next.e, share, 1.5 * step)
                }
                _ => step *= 0.5,
            }
            if step < 1e-7 || tries > MOST_STATIONS {
                let mut refusal = lost();
                refusal.message += &format!("; the limit is about {:.5} of the given load", done);
                return Err(refusal);
            }
        }
        self.station(0.0, e).ok_or_else(lost)
    }

    /// Follows the path from `start` to growing g (`sign` = 1) or falling g (-1) until `stop` or its end.
    /// All stations passed, in order, and how it ended; `None` when `stop` said so.
    pub fn march(
        &self,
        start: Station,
        sign: f64,
        stop: impl Fn(&Station) -> bool,
    ) -> (Vec<Station>, Option<End>) {
        let mut trail = vec![start];
        let mut here = start;
        let mut step = 0.1_f64;
        loop {
            if stop(&here) {
                return (trail, None);
            }
            if trail.len() > MOST_STATIONS {
                return (trail, Some(End::Lost(here)));
            }
            if here.g.abs() >= FARTHEST {
                let end = if saturated(&trail, &here) {
                    End::Asymptote(here.pressure)
                } else {
                    End::Open(here)
                };
                return (trail, Some(end));
            }
            let g = here.g + sign * step;
            let Some(next) = self.station(g, here.e + here.e_slope * (g - here.g)) else {
                step *= 0.5;
                if step < 1e-6 {
                    let end = if self.hardened(&here, sign) {
                        End::Open(here)
                    } else {
                        End::Lost(here)
                    };
                    return (trail, Some(end));
                }
                continue;
            };
            // creeping up on a maximum: smaller steps, so that a pair of extrema is not stepped over
            if next.slope < 0.3 * here.slope
                && step > 0.02
                && next.slope > 1e-9 * next.pressure.abs()
            {
                step *= 0.5;
                continue;
            }
            if sign > 0.0 {
                let flat = next.slope.abs() <= 1e-16 * next.pressure.abs();
                if (next.slope <= 0.0 || flat) && saturated(&trail, &next) {
                    return (trail, Some(End::Asymptote(next.pressure)));
                }
            }
            if next.slope <= 0.0 {
                let end = self
                    .extremum(&here, &next)
                    .map_or(End::Lost(here), End::Maximum);
                return (trail, Some(end));
            }
            trail.push(next);
            here = next;
            let widest = if here.g.abs() < 5.0 { 0.25 } else { 1.0 };
            step = (1.5 * step).min(widest);
        }
    }

    /// Whether the law at the bore has stiffened without bound: it locks within the next step, or nearly, or its numbers
    /// leave the range of doubles there.
    fn hardened(&self, here: &Station, sign: f64) -> bool {
        let g = here.g + sign * 1e-4;
        let e = here.e + here.e_slope * (g - here.g);
        let ahead = self.wall.law.at(g, e);
        let loss = self.wall.law.hardening(here.g, here.e).loss;
        !ahead.hoop.is_finite() || !ahead.reduced.is_finite() || loss > 500.0
    }

    /// The station with slope zero between two stations of opposite slope.
    fn extremum(&self, before: &Station, after: &Station) -> Option<Station> {
        let e_near = |g: f64| {
            let share = (g - before.g) / (after.g - before.g);
            before.e + share * (after.e - before.e)
        };
        let slope = |g: f64| self.station(g, e_near(g)).map_or(f64::NAN, |s| s.slope);
        let g = find_root(before.g, after.g, slope).ok()?;
        self.station(g, e_near(g))
    }

    /// The station where Pi - Po = `target`, between two neighbouring stations of the path that enclose it.
    pub fn between(&self, low: &Station, high: &Station, target: f64) -> Option<Station> {
        let (mut low, mut high) = (*low, *high);
        let mut here = low;
        let mut last = f64::INFINITY;
        for _ in 0..100 {
            let miss = here.pressure - target;
            if miss == 0.0 {
                return Some(here);
            }
            if (miss > 0.0) == (high.pressure >= low.pressure) {
                high = here;
            } else {
                low = here;
            }
            let newton = here.g - miss / here.slope;
            let inside = (newton - low.g) * (newton - high.g) < 0.0;
            let g = if inside {
                newton
            } else {
                0.5 * (low.g + high.g)
            };
            let step = (g - here.g).abs();
            if step <= 1e-13 * g.abs() || (step <= 1e-9 * g.abs() && step >= 0.5 * last) {
                return Some(here);
            }
            last = step;
            here = self.station(g, here.e + here.e_slope * (g - here.g))?;
        }
        None
    }
}

/// Whether the pressure moved by less than 1e-9 of itself over the last unit of g: before a true maximum it moves
/// by 4e-2 or more, at an asymptote by round-off (numerics.md 1).
fn saturated(trail: &[Station], here: &Station) -> bool {
    let before = trail.iter().rev().find(|s| (s.g - here.g).abs() >= 1.0);
    before.is_some_and(|s| (here.pressure - s.pressure).abs() < 1e-9 * here.pressure.abs())
}

fn station_of(g: f64, e: f64, p: Graded, e_slope: f64) -> Option<Station> {
    let slope = p.by_g + p.by_e * e_slope;
    let station = Station {
        g,
        e,
        pressure: p.value,
        slope,
        e_slope,
    };
    (p.value.is_finite() && slope.is_finite()).then_some(station)
}
