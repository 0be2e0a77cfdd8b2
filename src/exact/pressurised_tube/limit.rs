//! How far the load on the bore can go, and how a load beyond it is refused.

use super::balance::{Control, Loads};
use super::path::{End, Station};
use super::wall::Wall;
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;

/// Where the inner pressure cannot go beyond, at the given outer pressure and axial condition. Under dead load it is the
/// pressure per reference area.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Limit {
    /// A maximum of the inner pressure, at this deformed bore radius and axial stretch.
    Maximum {
        inner_pressure: f64,
        inner_radius: f64,
        axial_stretch: f64,
    },
    /// The inner pressure tends to this value as the bore grows without bound.
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

    /// From the end of the path on which the load grows.
    pub(super) fn of(wall: &Wall, loads: &Loads, end: Option<End>) -> Self {
        let radius = |s: &Station| wall.radii(s.g, s.e).0;
        match end {
            Some(End::Maximum(s)) => Self::Maximum {
                inner_pressure: loads.stated(s.control),
                inner_radius: radius(&s),
                axial_stretch: s.e.exp(),
            },
            Some(End::Asymptote(load)) => Self::Asymptote {
                inner_pressure: loads.stated(load),
            },
            Some(End::Open(s)) => Self::None {
                searched_to: radius(&s),
            },
            Some(End::Lost(s)) => Self::NotFound {
                followed_to: loads.stated(s.control),
            },
            None => Self::NotFound {
                followed_to: loads.outer,
            },
        }
    }
}

/// `x` to a number of significant digits, for messages.
pub(super) fn rounded(x: f64, digits: usize) -> f64 {
    format!("{x:.*e}", digits.saturating_sub(1))
        .parse()
        .unwrap_or(x)
}

/// An inner pressure above the limit.
pub(super) fn beyond(inner_pressure: f64, limit: &Limit) -> Refusal {
    let (message, hint) = match limit {
        Limit::Maximum {
            inner_pressure: top,
            inner_radius,
            ..
        } => (
            format!(
                "inner-pressure = {inner_pressure} is beyond the maximum {} that the tube can carry, \
                 reached at a deformed bore radius of {}",
                rounded(*top, 12),
                rounded(*inner_radius, 7)
            ),
            format!("stay below {}", rounded(*top, 9)),
        ),
        Limit::Asymptote {
            inner_pressure: top,
        } => (
            format!(
                "inner-pressure = {inner_pressure} is beyond (or within round-off of) {}, which the pressure \
                 approaches as the bore grows without bound",
                rounded(*top, 12)
            ),
            format!("stay below {}", rounded(*top, 9)),
        ),
        Limit::None { .. } | Limit::NotFound { .. } => {
            let reason = limit.pressure().err().unwrap_or_default();
            (
                format!(
                    "inner-pressure = {inner_pressure} is beyond what could be followed; {reason}"
                ),
                "reduce the pressure".to_string(),
            )
        }
    };
    refuse("inner-pressure", message, hint)
}

/// A bore squeezed further than the path goes. `control` is the last value reached.
pub(super) fn below(target: f64, control: f64) -> Refusal {
    let message = format!(
        "the outer pressure exceeds the inner one by {}, more than the {} up to which the states \
         of the tube could be followed",
        -target,
        rounded(-control, 9)
    );
    refuse("outer-pressure", message, "reduce the outer pressure")
}

/// A prescribed size of the bore that no state on the path has.
pub(super) fn no_such_bore(what: Control, target: f64, control: f64, reference: f64) -> Refusal {
    let (name, factor) = match what {
        Control::Volume => (
            "enclosed-volume",
            std::f64::consts::PI * reference * reference,
        ),
        _ => ("inner-wall-stretch", 1.0),
    };
    let (given, reached) = (factor * target.exp(), factor * control.exp());
    let message = format!(
        "{name} = {} cannot be reached; the states of the tube could be followed up to {}",
        rounded(given, 12),
        rounded(reached, 9)
    );
    refuse(
        name,
        message,
        format!("stay nearer than {}", rounded(reached, 7)),
    )
}
