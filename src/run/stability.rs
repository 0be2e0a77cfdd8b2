//! Whether the laws of a case are stable where its exact solution is.
//!
//! In an isotropic material the greater of two principal stretches has the greater principal Cauchy stress (Baker and Ericksen).
//! Where a law has lost that, the equations still have the exact solution, but no solver can be expected to follow it there: the
//! case is judged, and it is said.

use super::plan::{CasePlan, LevelPlan};
use crate::exact::{Body, ExactSolution, Kinematics, State};
use crate::input::{Finding, Place, Weight};
use crate::materials::Material;
use crate::mechanics::Point;
use crate::results::ResultSet;
use nalgebra::Matrix3;

/// Points on the solution's line.
const STATIONS: usize = 65;

/// Points along each side of a block.
const GRID: usize = 7;

/// Nodes that are asked of a mesh.
const NODES: usize = 2000;

/// Stretches that differ by less of the largest strain are equal: their axes are round-off.
const EQUAL: f64 = 1e-9;

/// Stresses whose order is turned by less of the largest stress are equal.
const TURNED: f64 = 1e-9;

/// Two principal axes of which the greater stretch has the smaller stress.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Disorder {
    /// Stretch and Cauchy stress.
    greater: (f64, f64),
    smaller: (f64, f64),
}

/// The caution of a case, if its laws are not stable where its solution is. Where the mesh decides what the body is, the points
/// are those of the solution's line only; see `note_at_nodes`.
pub fn caution(case: &CasePlan) -> Option<Finding> {
    let exact = case.exact.as_ref();
    if !is_asked(case) {
        return None;
    }
    let (at, found) = first(exact, &sample(exact))?;
    Some(finding(case, case.place.clone(), at, found))
}

/// The same at the nodes of the finest mesh, for a body that is what the mesh covers.
pub(super) fn note_at_nodes(
    case: &CasePlan,
    plan: &LevelPlan,
    set: &ResultSet,
    findings: &mut Vec<Finding>,
) {
    let finest = case.levels.last().is_some_and(|l| l.name == plan.name);
    let free = matches!(case.exact.body(), Body::Free { .. });
    let Some(nodes) = set.nodes().filter(|_| finest && free && is_asked(case)) else {
        return;
    };
    let step = nodes.positions.len().div_ceil(NODES).max(1);
    let all = nodes.positions.iter().step_by(step);
    let points: Vec<_> = all.map(|[x, y, z]| Point::new(*x, *y, *z)).collect();
    if let Some((at, found)) = first(case.exact.as_ref(), &points) {
        let place = Place::file(plan.folder.clone());
        findings.push(finding(case, place, at, found));
    }
}

/// Whether it is a condition here: finite strain, and no direction of any material differs from another.
fn is_asked(case: &CasePlan) -> bool {
    let isotropic = |material: &&Material| match material {
        Material::Incompressible(law) => law.isotropic(),
        Material::Compressible(law) => law.isotropic(),
        Material::LinearElastic(_) | Material::ElasticPlastic(_) => false,
    };
    let materials = case.given.materials();
    case.exact.kinematics() == Kinematics::Finite
        && !materials.is_empty()
        && materials.iter().all(isotropic)
}

/// Points of the solution's line, and of the body beside it.
fn sample(exact: &dyn ExactSolution) -> Vec<Point> {
    let line = exact.line();
    let share = |i: usize, of: usize| i as f64 / (of - 1) as f64;
    let between = |a: f64, b: f64, t: f64| a * (1.0 - t) + b * t;
    let mut points: Vec<Point> = (0..STATIONS)
        .map(|i| {
            let (t, a, b) = (share(i, STATIONS), line.from, line.to);
            Point::new(
                between(a.x, b.x, t),
                between(a.y, b.y, t),
                between(a.z, b.z, t),
            )
        })
        .collect();
    match exact.body() {
        Body::Block { lower, upper } => {
            let at = |i: usize, axis: usize| between(lower[axis], upper[axis], share(i, GRID));
            let grid = (0..GRID * GRID).map(|k| Point::new(at(k % GRID, 0), at(k / GRID, 1), 0.0));
            points.extend(grid);
        }
        Body::Free { .. } => {}
        body => points.push(body.middle()),
    }
    points
}

/// The first of the points that is out of order.
fn first(exact: &dyn ExactSolution, points: &[Point]) -> Option<(Point, Disorder)> {
    let of = |point: &Point| {
        let state = exact.at(*point).ok()?;
        disorder(&state).map(|found| (*point, found))
    };
    points.iter().find_map(of)
}

/// Stretch and stress along the principal axes of F F^T, by the worst pair that is out of order.
fn disorder(state: &State) -> Option<Disorder> {
    let h = state.displacement_gradient;
    // F F^T - I: the strain keeps its digits
    let strain = h + h.transpose() + h * h.transpose();
    let stress = state.stress.to_matrix();
    if !(strain.iter().all(|x| x.is_finite()) && stress.iter().all(|x| x.is_finite())) {
        return None;
    }
    let axes = strain.symmetric_eigen();
    let along = |i: usize| {
        let axis = axes.eigenvectors.column(i);
        (axes.eigenvalues[i], axis.dot(&(stress * axis)))
    };
    worst([along(0), along(1), along(2)], largest(&stress))
}

fn largest(matrix: &Matrix3<f64>) -> f64 {
    matrix.abs().max()
}

/// Of (l^2 - 1, stress) along three axes.
fn worst(axes: [(f64, f64); 3], size: f64) -> Option<Disorder> {
    let strain = axes.iter().fold(0.0_f64, |m, (s, _)| m.max(s.abs()));
    let pairs = [(0, 1), (1, 2), (2, 0)].map(|(i, j)| {
        let ordered = axes[i].0 >= axes[j].0;
        if ordered {
            (axes[i], axes[j])
        } else {
            (axes[j], axes[i])
        }
    });
    let missing = |(more, less): &((f64, f64), (f64, f64))| less.1 - more.1;
    let stretch = |(square, stress): (f64, f64)| ((1.0 + square).max(0.0).sqrt(), stress);
    pairs
        .iter()
        .filter(|(more, less)| more.0 - less.0 > EQUAL * strain)
        .filter(|pair| missing(pair) > TURNED * size)
        .max_by(|a, b| missing(a).total_cmp(&missing(b)))
        .map(|(more, less)| Disorder {
            greater: stretch(*more),
            smaller: stretch(*less),
        })
}

fn finding(case: &CasePlan, place: Place, at: Point, found: Disorder) -> Finding {
    let unit = case.units.stress.name;
    let [x, y, z] = at.to_array().map(six);
    let (more, less) = (six(found.greater.0), six(found.smaller.0));
    let (s, t) = (six(found.greater.1), six(found.smaller.1));
    let text = format!(
        "at X {x}, Y {y}, Z {z} the stretch {more} carries {s} {unit} and the smaller one {less} carries {t} {unit}: \
         the law is not stable there"
    );
    Finding::new(Weight::Caution, "ordered-stresses", place, text)
        .expected("the greater of two principal stretches has the greater Cauchy stress (Baker and Ericksen)")
        .hint("lower the load, or mend the law: a solver need not find this state, and other states may exist beside it")
}

/// Six digits of a number.
fn six(value: f64) -> f64 {
    format!("{value:.5e}").parse().unwrap_or(value)
}

#[cfg(test)]
#[path = "stability_tests.rs"]
mod tests;
