//! The state under outer pressure and the ends' load alone, with the same pressure on the bore.

use super::balance::{Axial, Loads};
use super::equations::{Integrals, POINTS};
use super::term::Term;
use super::wall::Wall;
use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;

/// Most shares of the load tried.
const MOST_SHARES: usize = 500;

/// `(g, e)` where Pi = Po, all loads applied in proportion from zero.
pub(super) fn start(wall: &Wall, loads: &Loads) -> Result<(f64, f64), Refusal> {
    let (mut at, mut done, mut step) = ((0.0_f64, 0.0_f64), 0.0_f64, 1.0_f64);
    if let (Axial::Fixed(e), true) = (loads.axial, wall.isotropic()) {
        return Ok((0.0, e));
    }
    let mut tries = 0;
    while done < 1.0 {
        tries += 1;
        let share = (done + step).min(1.0);
        match settle(wall, &loads.times(share), at) {
            Some(next) if (next.0 - at.0).abs().max((next.1 - at.1).abs()) <= 0.3 => {
                (at, done, step) = (next, share, 1.5 * step)
            }
            _ => step *= 0.5,
        }
        if step < 1e-7 || tries > MOST_SHARES {
            let (parameter, message, hint) = match loads.axial {
                Axial::Fixed(_) => (
                    "axial-stretch",
                    "the axial stretch is beyond what the wall's law carries",
                    "choose a stretch closer to one",
                ),
                _ => (
                    "axial-force",
                    "the axial force is beyond what the wall carries",
                    "the wall necks before the full force is reached; reduce it",
                ),
            };
            let message = format!("{message}; the limit is about {done:.5} of the given load");
            return Err(refuse(parameter, message, hint));
        }
    }
    Ok(at)
}

/// Both equations at Pi = Po. An isotropic wall is unsheared there, exactly.
fn rows(wall: &Wall, loads: &Loads, (g, e): (f64, f64), all: &Integrals) -> (Term, Term) {
    let first = if wall.isotropic() {
        Term::exact(g, 1.0, 0.0)
    } else {
        all.pressure
    };
    let second = loads.axial_residual(wall, (g, e), Term::default(), all);
    (first, second)
}

/// Newton in both unknowns, in a stable wall.
fn settle(wall: &Wall, loads: &Loads, from: (f64, f64)) -> Option<(f64, f64)> {
    let (mut g, mut e) = from;
    let mut last = f64::INFINITY;
    for _ in 0..40 {
        let all = wall.integrate(g, e, POINTS);
        let (p, n) = rows(wall, loads, (g, e), &all);
        let determinant = p.by_g * n.by_e - p.by_e * n.by_g;
        if !(p.value.is_finite() && n.value.is_finite() && determinant > 0.0) {
            return None;
        }
        let dg = ((p.value * n.by_e - p.by_e * n.value) / determinant).clamp(-0.5, 0.5);
        let de = ((p.by_g * n.value - n.by_g * p.value) / determinant).clamp(-0.5, 0.5);
        let step = dg.abs().max(de.abs());
        if step <= 1e-15 * g.abs().max(e.abs()) || (step < 1e-9 && step > 0.25 * last) {
            return Some((g, e));
        }
        last = step;
        (g, e) = (g - dg, e - de);
    }
    None
}
