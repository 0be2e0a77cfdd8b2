//! The state at the prescribed loads on a mesh that resolves it to round-off, and the limit of the inner load.

use super::integrals::{BORE, Control};
use super::mesh::{Mesh, Shape};
use super::path::{End, MOST_PANELS, Path, Station};
use super::refine::{coarse_panels, cut_at, kinks, transfer};
use super::system::newton;
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;
use crate::numerics::{Collocation, find_root};
use std::sync::Arc;

/// Nodes a panel of the solution, and of the solution its error is estimated with.
pub(super) const NODES: usize = 20;
pub(super) const CHECK_NODES: usize = 30;
/// Wanted size of the last Legendre coefficients against the largest value.
const TAIL: f64 = 2e-14;
/// Rounds of cutting panels and placing kinks.
const ROUNDS: usize = 12;

/// What is prescribed inside.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Drive {
    /// Pressure on the bore. Unit: stress.
    InnerPressure(f64),
    /// Deformed over reference radius of the bore.
    InnerWallStretch(f64),
    /// Volume of the bore: per reference length of a tube, the whole of a sphere. Unit: area, or volume.
    EnclosedVolume(f64),
}

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

    fn beyond(&self, given: f64) -> Refusal {
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

/// The solved state.
pub(super) struct Solved {
    pub station: Station,
    pub control: Control,
    pub limit: Limit,
}

/// Follows the path and solves at the prescribed drive; refuses a load beyond the limit of the branch.
pub(super) fn solve(path: &Path, drive: Drive) -> Result<Solved, Refusal> {
    let start = path.start()?;
    let (mut outward, end) = path.march(&start, 1.0, true, |_| false);
    let (limit, top) = limit_of(path, &start, end);
    outward.extend(top);
    let control = control_of(path, drive);
    let near = match control {
        Control::Load(load) => at_load(path, &start, &outward, load, &limit)?,
        _ => at_bore(path, &start, control)?,
    };
    let unsettled = || {
        let message = "the wall could not be solved to round-off at these loads".to_string();
        refuse("", message, "choose a smaller load")
    };
    // next to a maximum of the load its equation has no digits left that the bore does not have
    let station = fine(path, &near, control, NODES)
        .or_else(|| fine(path, &near, Control::Bore(near.place), NODES))
        .ok_or_else(unsettled)?;
    Ok(Solved {
        station,
        control,
        limit,
    })
}

fn control_of(path: &Path, drive: Drive) -> Control {
    let (shape, a) = (path.wall.shape, path.wall.inner);
    match drive {
        Drive::InnerPressure(p) => Control::Load(p),
        Drive::InnerWallStretch(stretch) => Control::Bore(shape.power() * stretch.ln()),
        Drive::EnclosedVolume(volume) => Control::Swell((volume / shape_volume(shape, a)).ln()),
    }
}

/// Volume a bore of this radius encloses: per length of a tube, the whole of a sphere.
pub(super) fn shape_volume(shape: Shape, radius: f64) -> f64 {
    match shape {
        Shape::Tube => std::f64::consts::PI * radius * radius,
        Shape::Sphere => std::f64::consts::PI * radius.powi(3) / 0.75,
    }
}

/// The state on a mesh of `nodes` a panel whose panels resolve it, kinks on panel ends.
pub(super) fn fine(path: &Path, from: &Station, control: Control, nodes: usize) -> Option<Station> {
    let rule = Arc::new(Collocation::new(nodes));
    let given = path.conditions(control);
    let mut base = from.mesh.panels.clone();
    let mut cuts: Vec<(usize, f64)> = Vec::new();
    let (mut mesh, mut y) = (from.mesh.clone(), from.y.clone());
    let mut last = f64::INFINITY;
    for round in 0..ROUNDS {
        let next = Arc::new(Mesh::new(&path.wall, &rule, cut_at(&base, &cuts)));
        let guess = transfer(&mesh, &y, &next);
        let found = newton(&next, &given, guess, 0.0)?;
        y = found.y.clone();
        mesh = next;
        let placed = kinks(&mesh, &y);
        let moved = moved(&placed, &cuts);
        let (mut wide, tail) = if moved < 1e-6 {
            coarse_panels(&mesh, &y, TAIL)
        } else {
            (Vec::new(), f64::INFINITY)
        };
        // what halving does not make smaller is round-off
        if tail < 1e-10 && tail > 0.5 * last {
            wide.clear();
        }
        last = tail;
        let full = mesh.panels.len() + wide.len() > MOST_PANELS;
        if (moved < 1e-14 && wide.is_empty()) || full || round + 1 == ROUNDS {
            return path.station(&mesh, found);
        }
        let middles = wide.iter().map(|p| {
            let panel = &mesh.panels[*p];
            (panel.layer, 0.5 * (panel.from + panel.to))
        });
        base = cut_at(&base, &middles.collect::<Vec<_>>());
        cuts = placed;
    }
    None
}

/// How far the kinks moved; infinitely when there are others than before.
fn moved(placed: &[(usize, f64)], cuts: &[(usize, f64)]) -> f64 {
    if placed.len() != cuts.len() {
        return f64::INFINITY;
    }
    let pairs = placed.iter().zip(cuts);
    pairs.fold(0.0, |m, (a, b)| m.max((a.1 - b.1).abs()))
}

/// The limit, and the station at a maximum.
fn limit_of(path: &Path, start: &Station, end: Option<End>) -> (Limit, Option<Station>) {
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
        None => {
            let followed_to = start.load;
            (Limit::NotFound { followed_to }, None)
        }
    }
}

/// The station of zero slope between two stations, first on the path's mesh, then on a fine one.
fn maximum(path: &Path, before: &Station, after: &Station) -> Option<Station> {
    let slope = |place: f64| {
        path.at(before, place, 1e-9)
            .map_or(f64::NAN, |(s, _)| s.slope)
    };
    let place = find_root(before.place, after.place, slope).ok()?;
    let (coarse, _) = path.at(before, place, 1e-9)?;
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

/// The state at an inner load, near enough for Newton's method.
fn at_load(
    path: &Path,
    start: &Station,
    outward: &[Station],
    load: f64,
    limit: &Limit,
) -> Result<Station, Refusal> {
    if load == start.load {
        return Ok(start.clone());
    }
    if load > start.load {
        let found = enclosing(outward, |s| s.load >= load);
        return found
            .and_then(|(low, high)| between(path, low, high, load))
            .ok_or_else(|| limit.beyond(load));
    }
    let (inward, _) = path.march(start, -1.0, true, |s| s.load <= load);
    let found = enclosing(&inward, |s| s.load <= load);
    found.and_then(|(low, high)| between(path, low, high, load)).ok_or_else(|| {
        let lowest = inward.last().map_or(start.load, |s| s.load);
        let message = format!(
            "inner-pressure = {load} is below the {} down to which the states of the wall could be followed",
            rounded(lowest, 9)
        );
        refuse("inner-pressure", message, "reduce the outer pressure, or the suction")
    })
}

/// The first neighbours on a trail of which only the second is `beyond`.
fn enclosing(trail: &[Station], beyond: impl Fn(&Station) -> bool) -> Option<(&Station, &Station)> {
    let after = trail.iter().position(beyond)?;
    Some((&trail[after.checked_sub(1)?], &trail[after]))
}

/// The station of this load between two stations that enclose it: first on the path's mesh, then on a fine one.
fn between(path: &Path, low: &Station, high: &Station, load: f64) -> Option<Station> {
    let range = (low.place, high.place);
    let share = (load - low.load) / (high.load - low.load);
    let (guess, _) = path.at(low, low.place + share * (high.place - low.place), 1e-9)?;
    let coarse = searched(path, guess, range, load, 1e-6)?;
    let fine = fine(path, &coarse, Control::Bore(coarse.place), NODES)?;
    searched(path, fine, range, load, 1e-13)
}

/// Newton's method on the load in the bore, kept inside a bracket on which the load is monotone.
fn searched(
    path: &Path,
    mut here: Station,
    (mut low, mut high): (f64, f64),
    load: f64,
    close: f64,
) -> Option<Station> {
    let rising = low < high;
    let mut last = f64::INFINITY;
    for _ in 0..60 {
        let miss = here.load - load;
        if miss == 0.0 {
            break;
        }
        if (miss > 0.0) == rising {
            high = here.place;
        } else {
            low = here.place;
        }
        let newton = here.place - miss / here.slope;
        let inside = (newton - low) * (newton - high) < 0.0;
        let place = if inside { newton } else { 0.5 * (low + high) };
        let step = (place - here.place).abs();
        if step <= close * place.abs() || (step <= 1e-9 * place.abs() && step >= 0.5 * last) {
            break;
        }
        last = step;
        (here, _) = path.at(&here, place, if close < 1e-9 { 0.0 } else { 1e-9 })?;
    }
    Some(here)
}

/// The state at a prescribed bore or volume, on the branch from the unloaded wall and past maxima of the load.
fn at_bore(path: &Path, start: &Station, control: Control) -> Result<Station, Refusal> {
    let miss = |s: &Station| match control {
        Control::Bore(place) => s.place - place,
        Control::Swell(g) => s.g - g,
        _ => f64::NAN,
    };
    let first = miss(start);
    if first == 0.0 {
        return Ok(start.clone());
    }
    let sign = if first < 0.0 { 1.0 } else { -1.0 };
    let reached = |s: &Station| miss(s) * sign >= 0.0;
    let (trail, _) = path.march(start, sign, false, reached);
    let found = enclosing(&trail, reached).and_then(|(low, high)| {
        let share = miss(low) / (miss(low) - miss(high));
        let (guess, _) = path.at(low, low.place + share * (high.place - low.place), 1e-9)?;
        let n = guess.mesh.len();
        let found = newton(
            &guess.mesh,
            &path.conditions(control),
            guess.y.clone(),
            1e-9,
        )?;
        debug_assert!(found.y[n + BORE].is_finite());
        path.station(&guess.mesh, found)
    });
    found.ok_or_else(|| {
        let last = trail.last().unwrap_or(start);
        let message = format!(
            "the states of the wall could be followed to a bore of {} times its reference radius only",
            rounded(last.bore.exp(), 7)
        );
        let parameter = match control {
            Control::Bore(_) => "inner-wall-stretch",
            _ => "enclosed-volume",
        };
        refuse(parameter, message, "choose a smaller deformation")
    })
}
