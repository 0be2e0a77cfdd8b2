//! The state at the prescribed loads on a mesh that resolves it to round-off, and the limit of the inner load.

use super::integrals::{BORE, Control};
use super::limit::{Limit, limit_of, rounded};
use super::mesh::{Mesh, Shape};
use super::path::{MOST_PANELS, Path, Station};
use super::refine::{coarse_panels, cut_at, kinks, transfer};
use super::system::newton;
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;
use crate::numerics::Collocation;
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

/// The solved state.
pub(super) struct Solved {
    pub station: Station,
    pub control: Control,
    pub limit: Limit,
}

/// A state at the prescribed drive.
enum Near {
    /// Near enough for Newton's method.
    Close(Station),
    /// Solved on a mesh that resolves it.
    Settled(Station),
}

/// Follows the path and solves at the prescribed drive; refuses a load beyond the limit of the branch.
pub(super) fn solve(path: &Path, drive: Drive) -> Result<Solved, Refusal> {
    let start = path.start()?;
    let control = control_of(path, drive);
    // near a lock a station is as far from the next as from the lock: hundreds of them for nothing
    let enough = |s: &Station| {
        let wanted = match control {
            Control::Load(load) => s.load >= load,
            _ => true,
        };
        wanted && path.stiffened(&start, s)
    };
    let (mut outward, end) = path.march(&start, 1.0, true, enough);
    let (limit, top) = limit_of(path, outward.last().unwrap_or(&start), end);
    outward.extend(top);
    let near = match control {
        Control::Load(load) => at_load(path, &start, &outward, load, &limit)?,
        _ => Near::Close(at_bore(path, &start, control)?),
    };
    let unsettled = || {
        let message = "the wall could not be solved to round-off at these loads".to_string();
        refuse("", message, "choose a smaller load")
    };
    // next to a maximum of the load its equation has no digits left that the bore does not have
    let station = match near {
        Near::Settled(station) => station,
        Near::Close(near) => fine(path, &near, control, NODES)
            .or_else(|| fine(path, &near, Control::Bore(near.place), NODES))
            .ok_or_else(unsettled)?,
    };
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

/// The state at an inner load.
fn at_load(
    path: &Path,
    start: &Station,
    outward: &[Station],
    load: f64,
    limit: &Limit,
) -> Result<Near, Refusal> {
    if load == start.load {
        return Ok(Near::Close(start.clone()));
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

/// The station of this load between two stations that enclose it: first on the path's mesh, then on a fine one, at the
/// load itself where its equation leads to the same branch, and by the bore where it does not.
fn between(path: &Path, low: &Station, high: &Station, load: f64) -> Option<Near> {
    let range = (low.place, high.place);
    let share = (load - low.load) / (high.load - low.load);
    let (guess, _) = path.at(low, low.place + share * (high.place - low.place), 1e-9)?;
    let coarse = searched(path, guess, range, load, 1e-6)?;
    let same = |s: &Station| {
        let near = (s.place - coarse.place).abs() <= 0.1 * (range.1 - range.0).abs();
        near && s.slope > 0.5 * coarse.slope && coarse.slope > 0.5 * s.slope
    };
    if let Some(found) = fine(path, &coarse, Control::Load(load), NODES).filter(same) {
        return Some(Near::Settled(found));
    }
    let fine = fine(path, &coarse, Control::Bore(coarse.place), NODES)?;
    searched(path, fine, range, load, 1e-13).map(Near::Close)
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
