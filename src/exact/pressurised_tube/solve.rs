//! The state of the tube at the given loads, its limit pressure, and how sure both are.

use super::balance::{Axial, Control, Loads};
use super::equations::{CHECK_POINTS, Integrals, POINTS};
use super::limit::{Limit, below, beyond, no_such_bore};
use super::path::{End, Path, Station};
use super::problem::TubeProblem;
use super::start::start;
use super::term::Term;
use super::wall::Wall;
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;

/// The solved unknowns, the integrals there and bounds on the unknowns' errors.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Solved {
    pub g: f64,
    pub e: f64,
    pub integrals: Integrals,
    pub g_error: f64,
    pub e_error: f64,
    /// True pressures: Pi - Po and Po.
    pub difference: f64,
    pub outer: f64,
    /// The inner pressure as a suite gives it: Pi, or p0 under dead load.
    pub stated: f64,
    /// Error of the wall's own Pi - Po beside that of g and e.
    pub pressure_error: f64,
    pub limit: Limit,
    /// Whether the state lies beyond the limit of the pressure, where only a prescribed bore holds it.
    pub beyond: bool,
}

/// Solves for the drive on the branch of [`Path`]; refuses what lies beyond it.
pub(super) fn solve(wall: &Wall, problem: &TubeProblem) -> Result<Solved, Refusal> {
    let loads = Loads::of(problem);
    let (control, target) = Control::of(problem);
    let at = start(wall, &loads)?;
    let path = |control: Control, sign: f64| Path {
        wall,
        loads,
        control,
        sign,
    };
    let first = |path: &Path| {
        let all = wall.integrate(at.0, at.1, POINTS);
        path.station_of(at.0, at.1, &all).ok_or_else(|| {
            let message = "the numbers of this tube exceed the range of a double";
            refuse("", message.to_string(), "choose other units")
        })
    };
    let rising = path(Control::Load, 1.0);
    let (mut outward, end) = rising.march(first(&rising)?, |_| false);
    let limit = Limit::of(wall, &loads, end);
    let top = match end {
        Some(End::Maximum(top)) => Some(top),
        _ => None,
    };
    let begin = first(&path(control, 1.0))?;
    let sign = if target >= begin.control { 1.0 } else { -1.0 };
    let way = path(control, sign);
    let near = if target == begin.control {
        begin
    } else if control == Control::Load && sign > 0.0 {
        outward.extend(top);
        station_on(&way, &outward, target).ok_or_else(|| beyond(loads.stated(target), &limit))?
    } else {
        let reached = |s: &Station| sign * s.control >= sign * target;
        let (mut trail, end) = way.march(first(&way)?, reached);
        if let Some(End::Maximum(last)) = end {
            trail.push(last);
        }
        let last = trail.last().map_or(0.0, |s| s.control);
        station_on(&way, &trail, target).ok_or_else(|| match control {
            Control::Load => below(target, last),
            _ => no_such_bore(control, target, last, wall.inner),
        })?
    };
    let (g, e) = polish(&way, near, target);
    let past = |top: Station| {
        let all = wall.integrate(top.g, top.e, POINTS);
        loads
            .control(control, wall, top.g, top.e, all.pressure)
            .value
            < target
    };
    let is_beyond = control != Control::Load && sign > 0.0 && top.is_some_and(past);
    Ok(finish(&way, (g, e), target, limit, is_beyond))
}

/// Everything at the solved unknowns.
fn finish(path: &Path, (g, e): (f64, f64), target: f64, limit: Limit, beyond: bool) -> Solved {
    let integrals = path.wall.integrate(g, e, POINTS);
    let check = path.wall.integrate(g, e, CHECK_POINTS);
    let (g_error, e_error) = errors(path, (g, e), target, &integrals, &check);
    let own = integrals.pressure;
    let loads = &path.loads;
    let given = path.control == Control::Load;
    let difference = if given {
        loads.difference(path.wall, g, e, target).value
    } else {
        own.value
    };
    let load = if given {
        target
    } else {
        loads.load(path.wall, g, e, own).value
    };
    Solved {
        g,
        e,
        integrals,
        g_error,
        e_error,
        difference,
        outer: loads.outer_pressure(path.wall, g, e).value,
        stated: loads.stated(load),
        pressure_error: 2.0 * f64::EPSILON * own.size + (own.value - check.pressure.value).abs(),
        limit,
        beyond,
    }
}

fn station_on(path: &Path, trail: &[Station], target: f64) -> Option<Station> {
    let reached = |s: &Station| path.sign * s.control >= path.sign * target;
    let after = trail.iter().position(reached)?;
    path.between(&trail[after.checked_sub(1)?], &trail[after], target)
}

/// Both equations at once, with a given pressure difference as a constant in the axial one.
fn residuals(path: &Path, (g, e): (f64, f64), target: f64, all: &Integrals) -> (Term, Term) {
    let (wall, loads) = (path.wall, &path.loads);
    let (first, difference) = match path.control {
        Control::Load => {
            let given = loads.difference(wall, g, e, target);
            (all.pressure - given, given)
        }
        control => {
            let reached = loads.control(control, wall, g, e, all.pressure);
            (reached - Term::constant(target), all.pressure)
        }
    };
    (first, loads.axial_residual(wall, (g, e), difference, all))
}

/// Newton in both unknowns until the steps stop shrinking.
fn polish(path: &Path, from: Station, target: f64) -> (f64, f64) {
    let (mut g, mut e) = (from.g, from.e);
    let mut last = f64::INFINITY;
    for _ in 0..12 {
        let all = path.wall.integrate(g, e, POINTS);
        let (p, n) = residuals(path, (g, e), target, &all);
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
fn errors(
    path: &Path,
    at: (f64, f64),
    target: f64,
    all: &Integrals,
    check: &Integrals,
) -> (f64, f64) {
    let (p, n) = residuals(path, at, target, all);
    let (p2, n2) = residuals(path, at, target, check);
    let round_off = 2.0 * f64::EPSILON;
    let p_error = round_off * p.size + (p.value - p2.value).abs();
    let n_error = match path.loads.axial {
        Axial::Fixed(_) => 0.0,
        _ => round_off * n.size + (n.value - n2.value).abs(),
    };
    let determinant = (p.by_g * n.by_e - p.by_e * n.by_g).abs();
    let g_error = (n.by_e.abs() * p_error + p.by_e.abs() * n_error) / determinant;
    let e_error = (n.by_g.abs() * p_error + p.by_g.abs() * n_error) / determinant;
    (g_error, e_error)
}
