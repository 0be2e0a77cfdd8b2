//! The branch of states from the unloaded wall, followed in the bore's radius, and where the load has its maximum on it.
//!
//! The outer pressure and the axial condition are applied first, with the same pressure inside; then the inner load
//! changes alone while the bore grows or shrinks. With ln(a/A) as the parameter and the load as an unknown, a maximum
//! of the load is a point like any other, and so is one of the volume (a locking tube that draws in). Followed on a
//! coarse mesh; what is printed is solved again on a fine one (`solve`).

use super::integrals::{Axial, BORE, Conditions, Control, Integrals, STRETCH};
use super::mesh::{Mesh, Shape, Wall};
use super::system::{Found, newton};
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;
use crate::numerics::Collocation;
use nalgebra::DVector;
use std::sync::Arc;

/// Nodes a panel of the path's mesh, and how well it is to be resolved.
const NODES: usize = 10;
const TAIL: f64 = 1e-4;
/// Newton's tolerance on the path.
const CLOSE: f64 = 1e-9;
/// Largest parameter followed.
const FARTHEST: f64 = 40.0;
/// A load this many times the modulus is that of a law that locks or grows exponentially: no limit is looked for beyond.
const STIFFENED: f64 = 1e3;
/// Most stations of a march, so that it always ends.
const MOST_STATIONS: usize = 400;
/// Most panels of a mesh: a bound on the work, far above what smooth walls need.
pub(super) const MOST_PANELS: usize = 20;

/// One state of the path.
#[derive(Debug, Clone)]
pub(super) struct Station {
    pub mesh: Arc<Mesh>,
    pub y: DVector<f64>,
    /// dy/dplace along the path.
    pub tangent: DVector<f64>,
    pub g: f64,
    /// The path's parameter: 2 ln(a/A), 3 ln(a/A) in the sphere.
    pub place: f64,
    /// ln(a/A).
    pub bore: f64,
    /// Inner load: Pi, nominal for dead loads.
    pub load: f64,
    /// d load/dplace along the path.
    pub slope: f64,
}

/// How a march ends.
#[derive(Debug, Clone)]
pub(super) enum End {
    /// The load has a maximum between these two stations.
    Maximum(Box<(Station, Station)>),
    /// The load tends to this value.
    Asymptote(f64),
    /// The load still rises at this station, the last one followed.
    Open(Box<Station>),
    /// The path could not be followed beyond this station.
    Lost(Box<Station>),
}

/// What is held while the path is followed.
#[derive(Debug, Clone)]
pub(super) struct Path {
    pub wall: Arc<Wall>,
    pub axial: Axial,
    pub outer: f64,
    pub dead: bool,
}

impl Path {
    /// All conditions with this control.
    pub fn conditions(&self, control: Control) -> Conditions {
        Conditions {
            axial: self.axial,
            control,
            outer: self.outer,
            dead: self.dead,
        }
    }

    /// The same with a share of what is applied before the inner load.
    fn share(&self, t: f64) -> Conditions {
        let axial = match self.axial {
            Axial::Fixed(e) => Axial::Fixed(t * e),
            Axial::Force(force) => Axial::Force(t * force),
            other => other,
        };
        Conditions {
            axial,
            control: Control::Level,
            outer: t * self.outer,
            dead: self.dead,
        }
    }

    pub fn station(&self, mesh: &Arc<Mesh>, found: Found) -> Option<Station> {
        let y = found.y;
        let n = mesh.len();
        let mut right = DVector::zeros(y.len());
        right[y.len() - 1] = 1.0;
        let tangent = found.lu.solve(&right)?;
        // whatever the control was, along the path its parameter grows at the rate of one
        let rate = match self.wall.shape {
            Shape::Tube => tangent[n + BORE] - tangent[n + STRETCH],
            Shape::Sphere => tangent[n + BORE],
        };
        let tangent = &tangent / rate;
        let all = Integrals::new(mesh, &y, &found.states);
        let load = all.load(self.dead);
        let g = y[n + BORE];
        let bore = match self.wall.shape {
            Shape::Tube => 0.5 * (g - y[n + STRETCH]),
            Shape::Sphere => g / 3.0,
        };
        let slope = load.by.dot(&tangent);
        let station = Station {
            mesh: mesh.clone(),
            g,
            place: self.wall.shape.power() * bore,
            bore,
            load: load.value,
            slope,
            tangent,
            y,
        };
        (slope.is_finite() && station.load.is_finite()).then_some(station)
    }

    /// The state at a place from a neighbouring one, and how many steps it took.
    pub fn at(&self, from: &Station, place: f64, tolerance: f64) -> Option<(Station, usize)> {
        let guess = &from.y + &from.tangent * (place - from.place);
        let found = newton(
            &from.mesh,
            &self.conditions(Control::Bore(place)),
            guess,
            tolerance,
        )?;
        let steps = found.steps;
        Some((self.station(&from.mesh, found)?, steps))
    }

    /// The wall under outer pressure and axial condition alone, applied in proportion from zero.
    pub fn start(&self) -> Result<Station, Refusal> {
        let rule = Arc::new(Collocation::new(NODES));
        let mesh = Arc::new(Mesh::new(&self.wall, &rule, self.wall.panels()));
        let mut y = DVector::zeros(mesh.len() + super::integrals::EXTRA);
        let (mut done, mut step) = (0.0_f64, 1.0_f64);
        let mut tries = 0;
        while done < 1.0 {
            tries += 1;
            let share = (done + step).min(1.0);
            match newton(&mesh, &self.share(share), y.clone(), CLOSE) {
                Some(found) if (&found.y - &y).rows(mesh.len(), 2).amax() <= 0.4 => {
                    (y, done, step) = (found.y, share, 1.5 * step);
                }
                _ => step *= 0.5,
            }
            if step < 1e-6 || tries > MOST_STATIONS {
                let message = format!(
                    "the outer pressure and the axial condition are beyond what the wall carries: about {done:.5} of them \
                     could be applied before the inner load"
                );
                return Err(refuse("outer-pressure", message, "reduce them"));
            }
        }
        // Swell of the state itself: the tangent by g does not depend on what led here
        let g = y[mesh.len() + BORE];
        newton(&mesh, &self.conditions(Control::Swell(g)), y, CLOSE)
            .and_then(|found| self.station(&mesh, found))
            .ok_or_else(|| {
                refuse(
                    "",
                    "the wall cannot be solved at its own outer load".to_string(),
                    "",
                )
            })
    }

    /// The station on a mesh that resolves it as well as the path needs.
    fn resolved(&self, station: Station) -> Option<Station> {
        let (bad, _) = super::refine::coarse_panels(&station.mesh, &station.y, TAIL);
        if bad.is_empty() || station.mesh.panels.len() + bad.len() > MOST_PANELS {
            return Some(station);
        }
        let panels = super::refine::halved(&station.mesh.panels, &bad);
        let mesh = Arc::new(Mesh::new(&self.wall, &station.mesh.rule, panels));
        let y = super::refine::transfer(&station.mesh, &station.y, &mesh);
        let found = newton(
            &mesh,
            &self.conditions(Control::Bore(station.place)),
            y,
            CLOSE,
        )?;
        self.station(&mesh, found)
    }

    /// Whether the load rose so far that the law must have stiffened without bound.
    pub fn stiffened(&self, start: &Station, here: &Station) -> bool {
        here.load - start.load > STIFFENED * self.wall.pressure_scale()
    }

    /// The end at a station beyond which there is none.
    fn stuck(&self, start: &Station, here: Station) -> End {
        let end = if self.stiffened(start, &here) {
            End::Open
        } else {
            End::Lost
        };
        end(Box::new(here))
    }

    /// Follows the path from `start` to growing (`sign` = 1) or shrinking bores (-1) until `stop` or its end. A maximum of the
    /// load is an end only with `to_maximum`. All stations passed, in order; no end when `stop` said so.
    pub fn march(
        &self,
        start: &Station,
        sign: f64,
        to_maximum: bool,
        stop: impl Fn(&Station) -> bool,
    ) -> (Vec<Station>, Option<End>) {
        let mut trail = vec![start.clone()];
        let mut here = start.clone();
        let mut step = 0.1_f64;
        loop {
            if stop(&here) {
                return (trail, None);
            }
            if trail.len() > MOST_STATIONS {
                return (trail, Some(self.stuck(start, here)));
            }
            if here.place.abs() >= FARTHEST {
                let end = if saturated(&trail, &here) {
                    End::Asymptote(here.load)
                } else {
                    End::Open(Box::new(here))
                };
                return (trail, Some(end));
            }
            let next = self.at(&here, here.place + sign * step, CLOSE);
            let next = next.and_then(|(s, steps)| Some((self.resolved(s)?, steps)));
            let Some((next, steps)) = next else {
                step *= 0.5;
                if step < 1e-6 {
                    return (trail, Some(self.stuck(start, here)));
                }
                continue;
            };
            // creeping up on a maximum: smaller steps, so that a pair of extrema is not stepped over
            let falls = next.slope < 0.3 * here.slope;
            if to_maximum && falls && step > 0.02 && next.slope > 1e-9 * next.load.abs() {
                step *= 0.5;
                continue;
            }
            if to_maximum && next.slope <= 0.0 {
                let end = if saturated(&trail, &next) {
                    End::Asymptote(next.load)
                } else {
                    End::Maximum(Box::new((here, next)))
                };
                return (trail, Some(end));
            }
            trail.push(next.clone());
            here = next;
            let growth = if steps <= 4 { 1.7 } else { 1.0 };
            step = (growth * step).min(1.0);
        }
    }
}

/// Whether the load moved by less than 1e-9 of itself over the last unit of the path: before a true maximum it moves by 4e-2 or
/// more, at an asymptote by round-off (numerics.md 1).
fn saturated(trail: &[Station], here: &Station) -> bool {
    let before = trail
        .iter()
        .rev()
        .find(|s| (s.place - here.place).abs() >= 1.0);
    before.is_some_and(|s| (here.load - s.load).abs() < 1e-9 * here.load.abs())
}
