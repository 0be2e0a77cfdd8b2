//! The branch of states from the unloaded tube, followed by its arc length in `(g, e)`, and where it ends.
//!
//! The outer pressure and the ends' load are applied first, with the same pressure inside (the start); then the load on the
//! bore changes alone and the bore grows or shrinks. Along this path the end condition is one equation `n(g, e) = 0`, whose
//! gradient gives the direction; neither g nor e need be monotone (near a lock the path folds in g, where `n_e = 0`).
//! The first zero of the load's slope along the path is the limit load. When the load saturates instead, its slope decays
//! like e^-g down to round-off, which is no limit point: the rule of numerics.md 1 tells them apart.

use super::balance::{Control, Loads};
use super::equations::{Integrals, POINTS};
use super::wall::{Segment, Wall, local};
use crate::numerics::find_root;

/// One state of the path.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Station {
    pub g: f64,
    pub e: f64,
    /// Unit vector along the path, in (g, e).
    pub tangent: (f64, f64),
    /// The control: Pi - Po, p0, ln(a/A) or ln(lz (a/A)^2).
    pub control: f64,
    /// Its derivative by the arc length.
    pub slope: f64,
}

impl Station {
    /// Arc length of `other` from here, measured along the tangent here.
    fn ahead(&self, other: &Self) -> f64 {
        self.tangent.0 * (other.g - self.g) + self.tangent.1 * (other.e - self.e)
    }

    /// How far the path lies beside the tangent from here, as a function of the way along it: the cubic that has the place
    /// and direction of `other`, a neighbour on either side. A guess, zero where it would be a bad one.
    fn beside(&self, other: &Self) -> impl Fn(f64) -> f64 + use<> {
        let (tg, te) = self.tangent;
        let (dg, de) = (other.g - self.g, other.e - self.e);
        let (along, across) = (tg * dg + te * de, tg * de - te * dg);
        let slope = (tg * other.tangent.1 - te * other.tangent.0) / self.turn(other);
        let (second, third) = (
            (3.0 * across - slope * along) / (along * along),
            (slope * along - 2.0 * across) / (along * along * along),
        );
        move |x: f64| {
            let guess = x * x * (second + x * third);
            if guess.abs() <= 0.3 * x.abs() {
                guess
            } else {
                0.0
            }
        }
    }

    fn turn(&self, other: &Self) -> f64 {
        self.tangent.0 * other.tangent.0 + self.tangent.1 * other.tangent.1
    }
}

/// How the path ends when the bore grows, in the control.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum End {
    /// A maximum.
    Maximum(Station),
    /// The control tends to this value as the bore grows without bound.
    Asymptote(f64),
    /// The control still rises at this station, the last one followed.
    Open(Station),
    /// The path could not be followed beyond this station.
    Lost(Station),
}

/// Largest |g| and |e| followed: a bore of e^25 times the reference one.
const FARTHEST: f64 = 50.0;

/// Most stations of a march, so that it always ends; 40 to 80 are usual.
const MOST_STATIONS: usize = 1000;

/// Shortest step: the distance to a lock at which the march stops.
const SHORTEST: f64 = 1e-9;

/// Strains are magnified so much in the stress when a march stops at a lock: 6 digits of the stress are left.
const MOST_LOSS: f64 = 1e10;

/// cos 18 degrees: a sharper turn of the path in one step is tried again in smaller ones.
const MOST_TURN: f64 = 0.95;

/// A step this short may turn the path by any acute angle: where fibres of a whole wall begin to act at once (in the
/// unloaded state all do) the path has a corner.
const CORNER: f64 = 1e-5;

/// The path at given loads.
pub(super) struct Path<'a> {
    pub wall: &'a Wall,
    pub loads: Loads,
    pub control: Control,
    /// 1 from the start to where g grows, -1 to where it falls.
    pub sign: f64,
}

impl Path<'_> {
    /// The state `along` the tangent from `from`, and across it by Newton from a guess to the path. `None` when Newton does
    /// not settle.
    fn station(&self, from: &Station, along: f64, across: f64) -> Option<Station> {
        let (tg, te) = from.tangent;
        let (mut g, mut e) = (
            from.g + along * tg - across * te,
            from.e + along * te + across * tg,
        );
        let mut last = f64::INFINITY;
        for _ in 0..40 {
            let all = self.wall.integrate(g, e, POINTS);
            let n = self
                .loads
                .axial_residual(self.wall, (g, e), all.pressure, &all);
            let across = n.by_e * tg - n.by_g * te;
            if !(n.value.is_finite() && across * self.sign > 0.0) {
                return None;
            }
            let step = (n.value / across).clamp(-0.5, 0.5);
            let settled = step.abs() <= 1e-15 * (te * g).abs().max((tg * e).abs())
                || (step.abs() < 1e-9 && step.abs() > 0.25 * last);
            if settled {
                return self.station_of(g, e, &all);
            }
            last = step.abs();
            (g, e) = (g + te * step, e - tg * step);
        }
        None
    }

    /// The station at a place on the path, where the integrals are `all`.
    pub fn station_of(&self, g: f64, e: f64, all: &Integrals) -> Option<Station> {
        let n = self
            .loads
            .axial_residual(self.wall, (g, e), all.pressure, all);
        let norm = self.sign / n.by_g.hypot(n.by_e);
        let tangent = (n.by_e * norm, -n.by_g * norm);
        let control = self
            .loads
            .control(self.control, self.wall, g, e, all.pressure);
        let slope = control.by_g * tangent.0 + control.by_e * tangent.1;
        let station = Station {
            g,
            e,
            tangent,
            control: control.value,
            slope,
        };
        (control.value.is_finite() && slope.is_finite()).then_some(station)
    }

    /// Follows the path from `start` until `stop` or its end. All stations passed, in order, and how it ended; `None` when
    /// `stop` said so. The control rises along the path with sign 1 and falls with -1.
    pub fn march(
        &self,
        start: Station,
        stop: impl Fn(&Station) -> bool,
    ) -> (Vec<Station>, Option<End>) {
        let mut trail = vec![start];
        let mut here = start;
        let mut step = 0.1_f64;
        let rise = |s: &Station| s.slope * self.sign;
        if rise(&start) <= 0.0 {
            return (trail, Some(End::Lost(start)));
        }
        loop {
            if stop(&here) {
                return (trail, None);
            }
            if trail.len() > MOST_STATIONS {
                return (trail, Some(End::Lost(here)));
            }
            if self.loss(&here) > MOST_LOSS {
                return (trail, Some(End::Open(here)));
            }
            if here.g.abs().max(here.e.abs()) >= FARTHEST {
                let end = if saturated(&trail, &here) {
                    End::Asymptote(here.control)
                } else {
                    End::Open(here)
                };
                return (trail, Some(end));
            }
            let guess = match trail.len() {
                0 | 1 => 0.0,
                n => here.beside(&trail[n - 2])(step),
            };
            let next = self.station(&here, step, guess).or_else(|| {
                let again = guess != 0.0;
                again.then(|| self.station(&here, step, 0.0)).flatten()
            });
            let Some(next) = next.filter(|s| here.turn(s) >= MOST_TURN || step < CORNER) else {
                step *= 0.5;
                if step < SHORTEST {
                    let end = if self.hardened(&here) {
                        End::Open(here)
                    } else {
                        End::Lost(here)
                    };
                    return (trail, Some(end));
                }
                continue;
            };
            // creeping up on a maximum: smaller steps, so that a pair of extrema is not stepped over
            if rise(&next) < 0.3 * rise(&here)
                && step > 0.02
                && rise(&next) > 1e-9 * next.control.abs()
            {
                step *= 0.5;
                continue;
            }
            if self.sign > 0.0 {
                let flat = next.slope.abs() <= 1e-16 * next.control.abs();
                if (next.slope <= 0.0 || flat) && saturated(&trail, &next) {
                    return (trail, Some(End::Asymptote(next.control)));
                }
            }
            if rise(&next) <= 0.0 {
                let end = self
                    .extremum(&here, &next)
                    .map_or(End::Lost(here), End::Maximum);
                return (trail, Some(end));
            }
            trail.push(next);
            here = next;
            // in g, where the wall is thick and soft; an arc that is all in e is not stretched further than twice
            let widest = if here.g.abs() < 5.0 { 0.25 } else { 1.0 };
            step = (1.5 * step).min(widest / here.tangent.0.abs().max(0.5));
        }
    }

    /// Largest magnification of the strain in the stress at the edges of the layers.
    fn loss(&self, here: &Station) -> f64 {
        let edges = self
            .wall
            .segments
            .iter()
            .flat_map(|s| [(s, s.from), (s, s.to)]);
        let loss = edges.map(|(s, x)| s.hardening(x, here.g, here.e).loss);
        loss.fold(0.0, f64::max)
    }

    /// Whether a law has stiffened without bound at an edge of its layer: it locks within the next step, or nearly, or its
    /// numbers leave the range of doubles there.
    fn hardened(&self, here: &Station) -> bool {
        let (tg, te) = here.tangent;
        let (g, e) = (here.g + 1e-4 * tg, here.e + 1e-4 * te);
        let beyond = |(s, x): (&Segment, f64)| {
            let (d, _) = local((2.0 * x).exp_m1(), g);
            let law = s.law.at(d, e);
            !law.hoop.is_finite() || !law.reduced.is_finite()
        };
        let mut edges = self
            .wall
            .segments
            .iter()
            .flat_map(|s| [(s, s.from), (s, s.to)]);
        self.loss(here) > 500.0 || edges.any(beyond)
    }

    /// The station with slope zero between two stations of opposite slope.
    fn extremum(&self, before: &Station, after: &Station) -> Option<Station> {
        let beside = before.beside(after);
        let at = |along: f64| self.station(before, along, beside(along));
        // below round-off of the control a slope is zero: there is nothing closer to find
        let slope = |along: f64| match at(along) {
            Some(s) if s.slope.abs() <= 2.0 * f64::EPSILON * s.control.abs() => 0.0,
            Some(s) => s.slope,
            None => f64::NAN,
        };
        let along = find_root(0.0, before.ahead(after), slope).ok()?;
        at(along)
    }

    /// The station where the control is `target`, between two neighbouring stations of the path that enclose it.
    pub fn between(&self, low: &Station, high: &Station, target: f64) -> Option<Station> {
        let rising = high.control >= low.control;
        let beside = low.beside(high);
        let (mut least, mut most) = (0.0, low.ahead(high));
        let (mut here, mut along, mut last) = (*low, 0.0_f64, f64::INFINITY);
        for _ in 0..100 {
            let miss = here.control - target;
            if miss == 0.0 {
                return Some(here);
            }
            if (miss > 0.0) == rising {
                most = along;
            } else {
                least = along;
            }
            // the slope is by the arc length, the step along the tangent of `low`
            let newton = along - miss / here.slope * low.turn(&here);
            let next = if newton > least && newton < most {
                newton
            } else {
                0.5 * (least + most)
            };
            let step = (next - along).abs();
            let size = here.g.abs().max(here.e.abs());
            // the floor: at no load the pressure of a fibred wall is round-off; Newton in both unknowns follows
            if step <= 1e-13 * size + 1e-15 || (step <= 1e-9 * size && step >= 0.5 * last) {
                return Some(here);
            }
            (along, last) = (next, step);
            here = self.station(low, along, beside(along))?;
        }
        None
    }
}

/// Whether the control moved by less than 1e-9 of itself over the last unit of g: before a true maximum it moves
/// by 4e-2 or more, at an asymptote by round-off (numerics.md 1).
fn saturated(trail: &[Station], here: &Station) -> bool {
    let before = trail.iter().rev().find(|s| (s.g - here.g).abs() >= 1.0);
    before.is_some_and(|s| (here.control - s.control).abs() < 1e-9 * here.control.abs())
}
