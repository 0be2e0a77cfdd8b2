//! The state of the tube at the given loads, its limit pressure, and how sure both are.

use super::equations::{CHECK_POINTS, Graded, Integrals, POINTS, Wall};
use super::path::{Axial, End, Path, Station};
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;

/// Where the inner pressure cannot go beyond, at the given outer pressure and axial condition.
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
}

/// The solved unknowns, the integrals there and bounds on the unknowns' errors.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Solved {
    pub g: f64,
    pub e: f64,
    pub integrals: Integrals,
    pub g_error: f64,
    pub e_error: f64,
    pub limit: Limit,
}

/// Solves for `Pi - Po = difference` on the branch of [`Path`]; refuses a load beyond its limit.
pub(super) fn solve(
    wall: &Wall,
    axial: Axial,
    inner_pressure: f64,
    outer_pressure: f64,
) -> Result<Solved, Refusal> {
    let difference = inner_pressure - outer_pressure;
    let path = Path { wall, axial };
    let start = path.start()?;
    let (outward, end) = path.march(start, 1.0, |_| false);
    let limit = limit_of(wall, end, outer_pressure);
    let near = if difference > 0.0 {
        let mut trail = outward;
        if let Some(End::Maximum(top)) = end {
            trail.push(top);
        }
        station_on(&path, &trail, difference).ok_or_else(|| beyond(inner_pressure, &limit))?
    } else if difference < 0.0 {
        let (inward, end) = path.march(start, -1.0, |s| s.pressure <= difference);
        station_on(&path, &inward, difference).ok_or_else(|| {
            let lowest = match end {
                Some(End::Maximum(s) | End::Open(s) | End::Lost(s)) => s.pressure,
                _ => inward.last().map_or(0.0, |s| s.pressure),
            };
            let message = format!(
                "the outer pressure exceeds the inner one by {}, more than the {} up to which the states \
                 of the tube could be followed",
                -difference,
                rounded(-lowest, 9)
            );
            refuse("outer-pressure", message, "reduce the outer pressure")
        })?
    } else {
        start
    };
    let (g, e) = polish(&path, near, difference);
    let integrals = wall.integrate(g, e, POINTS);
    let (g_error, e_error) = errors(&path, g, e, difference, &integrals);
    Ok(Solved {
        g,
        e,
        integrals,
        g_error,
        e_error,
        limit,
    })
}

fn limit_of(wall: &Wall, end: Option<End>, outer_pressure: f64) -> Limit {
    let radius = |s: &Station| wall.radii(s.g, s.e).0;
    match end {
        Some(End::Maximum(s)) => Limit::Maximum {
            inner_pressure: outer_pressure + s.pressure,
            inner_radius: radius(&s),
            axial_stretch: s.e.exp(),
        },
        Some(End::Asymptote(pressure)) => Limit::Asymptote {
            inner_pressure: outer_pressure + pressure,
        },
        Some(End::Open(s)) => Limit::None {
            searched_to: radius(&s),
        },
        Some(End::Lost(s)) => Limit::NotFound {
            followed_to: outer_pressure + s.pressure,
        },
        None => Limit::NotFound {
            followed_to: outer_pressure,
        },
    }
}

fn station_on(path: &Path, trail: &[Station], target: f64) -> Option<Station> {
    let reached = |s: &Station| {
        if target > 0.0 {
            s.pressure >= target
        } else {
            s.pressure <= target
        }
    };
    let after = trail.iter().position(reached)?;
    path.between(&trail[after.checked_sub(1)?], &trail[after], target)
}

fn beyond(inner_pressure: f64, limit: &Limit) -> Refusal {
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

/// `x` to a number of significant digits, for messages.
pub(super) fn rounded(x: f64, digits: usize) -> f64 {
    format!("{x:.*e}", digits.saturating_sub(1))
        .parse()
        .unwrap_or(x)
}

/// Both equations at once, with the given pressure difference as a constant in the axial one.
fn residuals(path: &Path, g: f64, e: f64, difference: f64, all: &Integrals) -> (Graded, Graded) {
    let given = Graded {
        value: difference,
        size: difference.abs(),
        ..Graded::default()
    };
    let mut first = all.pressure;
    first.value -= difference;
    let second = if let Axial::Fixed(fixed) = path.axial {
        Graded {
            value: e - fixed,
            by_e: 1.0,
            ..Graded::default()
        }
    } else {
        path.axial_residual(g, e, given, all)
    };
    (first, second)
}

/// Newton in both unknowns until the steps stop shrinking.
fn polish(path: &Path, from: Station, difference: f64) -> (f64, f64) {
    let (mut g, mut e) = (from.g, from.e);
    let mut last = f64::INFINITY;
    for _ in 0..12 {
        let all = path.wall.integrate(g, e, POINTS);
        let (p, n) = residuals(path, g, e, difference, &all);
        let determinant = p.by_g * n.by_e - p.by_e * n.by_g;
        let dg = (p.value * n.by_e - p.by_e * n.value) / determinant;
        let de = (p.by_g * n.value - n.by_g * p.value) / determinant;
        let step = dg.abs().max(de.abs());
        // a step larger than what the path left over is round-off at a limit point, not an improvement
        if !(step < 1e-3 && step < 0.5 * last) {
            break;
        }
        (g, e, last) = (g - dg, e - de, step);
    }
    (g, e)
}

/// Bounds on the errors of g and e: round-off and quadrature error of each equation, through the inverse tangent.
fn errors(path: &Path, g: f64, e: f64, difference: f64, all: &Integrals) -> (f64, f64) {
    let check = path.wall.integrate(g, e, CHECK_POINTS);
    let (p, n) = residuals(path, g, e, difference, all);
    let (p2, n2) = residuals(path, g, e, difference, &check);
    let round_off = 2.0 * f64::EPSILON;
    let p_error = round_off * (p.size + difference.abs()) + (p.value - p2.value).abs();
    let n_error = match path.axial {
        Axial::Fixed(_) => 0.0,
        _ => round_off * n.size + (n.value - n2.value).abs(),
    };
    let determinant = (p.by_g * n.by_e - p.by_e * n.by_g).abs();
    let g_error = (n.by_e.abs() * p_error + p.by_e.abs() * n_error) / determinant;
    let e_error = (n.by_g.abs() * p_error + p.by_g.abs() * n_error) / determinant;
    (g_error, e_error)
}
