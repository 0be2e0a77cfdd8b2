//! The limit of the inner load: its kind, and the state at a maximum.

use super::integrals::Control;
use super::path::{End, Path, Station};
use super::solve::{NODES, fine};
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;

/// Where the inner pressure cannot go beyond, at the given outer pressure and axial condition.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Limit {
    /// A maximum of the inner pressure, at this deformed bore radius.
    Maximum {
        inner_pressure: f64,
        inner_radius: f64,
    },
    /// The inner pressure tends to this value as the bore grows.
    Asymptote { inner_pressure: f64 },
    /// The inner pressure still rises where the search ended, at this deformed bore radius.
    None { searched_to: f64 },
    /// The path of states could not be followed beyond this inner pressure.
    NotFound { followed_to: f64 },
}

impl Limit {
    /// The limit pressure, or why there is none.
    pub fn pressure(&self) -> Result<f64, String> {
        match self {
            Self::Maximum { inner_pressure, .. } | Self::Asymptote { inner_pressure } => {
                Ok(*inner_pressure)
            }
            Self::None { searched_to } => Err(format!(
                "no limit: the inner pressure still rises at a bore radius of {searched_to:.3e}"
            )),
            Self::NotFound { followed_to } => Err(format!(
                "not found: the states could be followed up to an inner pressure of {} only",
                rounded(*followed_to, 7)
            )),
        }
    }

    pub(super) fn beyond(&self, given: f64) -> Refusal {
        let (reason, hint) = match self {
            Self::Maximum {
                inner_pressure: top,
                inner_radius,
            } => (
                format!(
                    "the maximum {} that the wall can carry, reached at a deformed bore radius of {}",
                    rounded(*top, 12),
                    rounded(*inner_radius, 7)
                ),
                format!("stay below {}", rounded(*top, 9)),
            ),
            Self::Asymptote {
                inner_pressure: top,
            } => (
                format!(
                    "(or within round-off of) {}, which the pressure approaches as the bore grows",
                    rounded(*top, 12)
                ),
                format!("stay below {}", rounded(*top, 9)),
            ),
            Self::None { .. } | Self::NotFound { .. } => (
                format!(
                    "what could be followed; {}",
                    self.pressure().err().unwrap_or_default()
                ),
                "reduce the pressure".to_string(),
            ),
        };
        refuse(
            "inner-pressure",
            format!("inner-pressure = {given} is beyond {reason}"),
            hint,
        )
    }
}

/// `x` to a number of significant digits, for messages.
pub(super) fn rounded(x: f64, digits: usize) -> f64 {
    format!("{x:.*e}", digits.saturating_sub(1))
        .parse()
        .unwrap_or(x)
}

/// The limit, and the station at a maximum.
pub(super) fn limit_of(path: &Path, last: &Station, end: Option<End>) -> (Limit, Option<Station>) {
    let radius = |s: &Station| path.wall.inner * s.bore.exp();
    match end {
        Some(End::Maximum(pair)) => match maximum(path, &pair.0, &pair.1) {
            Some(top) => {
                let limit = Limit::Maximum {
                    inner_pressure: top.load,
                    inner_radius: radius(&top),
                };
                (limit, Some(top))
            }
            None => {
                let followed_to = pair.0.load;
                (Limit::NotFound { followed_to }, None)
            }
        },
        Some(End::Asymptote(inner_pressure)) => (Limit::Asymptote { inner_pressure }, None),
        Some(End::Open(s)) => {
            let searched_to = radius(&s);
            (Limit::None { searched_to }, None)
        }
        Some(End::Lost(s)) => {
            let followed_to = s.load;
            (Limit::NotFound { followed_to }, None)
        }
        // far enough
        None => {
            let searched_to = radius(last);
            (Limit::None { searched_to }, None)
        }
    }
}

/// The station of zero slope between two stations, first on the path's mesh, then on a fine one.
fn maximum(path: &Path, before: &Station, after: &Station) -> Option<Station> {
    let coarse = near_maximum(path, before, after)?;
    let place = coarse.place;
    let mut here = fine(path, &coarse, Control::Bore(place), NODES)?;
    let (mut other, _) = path.at(&here, place + 1e-4 * (after.place - before.place), 0.0)?;
    for _ in 0..8 {
        let step = here.slope * (here.place - other.place) / (here.slope - other.slope);
        if !step.is_finite() || step.abs() <= 1e-12 * (1.0 + place.abs()) {
            break;
        }
        let (next, _) = path.at(&here, here.place - step, 0.0)?;
        // no closer: round-off
        if next.slope.abs() >= here.slope.abs() {
            break;
        }
        other = std::mem::replace(&mut here, next);
    }
    Some(here)
}

/// The station of zero slope on the path's mesh, near enough for the fine one: by false position, the end that stays
/// weighted down (Illinois), from the slopes that are known.
fn near_maximum(path: &Path, before: &Station, after: &Station) -> Option<Station> {
    let (mut far, mut near) = ((before.place, before.slope), (after.place, after.slope));
    for _ in 0..40 {
        let chord = near.0 - near.1 * (near.0 - far.0) / (near.1 - far.1);
        let inside = (chord - near.0) * (chord - far.0) < 0.0;
        let place = if inside {
            chord
        } else {
            0.5 * (near.0 + far.0)
        };
        let (here, _) = path.at(before, place, 1e-9)?;
        let moved = (place - near.0).abs().min((place - far.0).abs());
        if moved <= 1e-6 * (1.0 + place.abs()) || here.slope == 0.0 {
            return Some(here);
        }
        if here.slope * near.1 < 0.0 {
            far = near;
        } else {
            far.1 *= 0.5;
        }
        near = (place, here.slope);
    }
    None
}
