//! Exact solutions as a user gets them: from the text of a suite. Each test file uses a part of it.
#![allow(dead_code)]

use std::sync::Arc;
use truebore::exact::{ExactSolution, State};
use truebore::input::Finding;
use truebore::mechanics::Point;
use truebore::run::plan::{self, CasePlan};

/// The cases of a suite of one problem, in mm and MPa; `materials` without its braces.
pub fn cases(materials: &str, problem: &str) -> Result<Vec<CasePlan>, Vec<Finding>> {
    let text = format!(
        "suite: s\nunits: {{ length: mm, stress: MPa }}\nmaterials: {{ {materials} }}\ncases: [ {{ id: c, problem: {{ {problem} }} }} ]\n"
    );
    plan::read(&text, "suite.yaml").map(|plan| plan.cases)
}

/// The exact solution of a suite of one case.
#[track_caller]
pub fn solved(materials: &str, problem: &str) -> Arc<dyn ExactSolution> {
    match cases(materials, problem) {
        Ok(cases) => Arc::clone(&cases[0].exact),
        Err(findings) => panic!("{}\n{materials}\n{problem}", findings[0]),
    }
}

/// Why there is none.
#[track_caller]
pub fn refused(materials: &str, problem: &str) -> Finding {
    match cases(materials, problem) {
        Ok(_) => panic!("not refused: {materials}\n{problem}"),
        Err(findings) => findings[0].clone(),
    }
}

#[track_caller]
pub fn total(exact: &Arc<dyn ExactSolution>, name: &str) -> f64 {
    let found = exact.totals().iter().find(|t| t.name == name);
    let found = found.unwrap_or_else(|| panic!("no total {name}"));
    found.value.clone().unwrap()
}

/// At a radius on the X axis.
#[track_caller]
pub fn at(exact: &Arc<dyn ExactSolution>, radius: f64) -> State {
    exact.at(Point::new(radius, 0.0, 0.0)).unwrap()
}

/// Radial displacement on the X axis.
#[track_caller]
pub fn u(exact: &Arc<dyn ExactSolution>, radius: f64) -> f64 {
    at(exact, radius).displacement.x
}

/// `value`, within half a unit of the last of `digits` printed digits.
#[track_caller]
pub fn prints(what: &str, value: f64, printed: &str) {
    let (mantissa, exponent) = printed.split_once('e').unwrap_or((printed, "0"));
    let decimals = mantissa
        .split_once('.')
        .map_or(0, |(_, tail)| tail.len() as i32);
    let half = 0.5 * 10_f64.powi(exponent.parse::<i32>().unwrap() - decimals);
    let expected: f64 = printed.parse().unwrap();
    // a double holds sixteen digits
    let slack = half + 8e-16 * expected.abs();
    assert!(
        (value - expected).abs() <= slack,
        "{what}: {value}, printed {printed} (off by {:.1e})",
        (value - expected).abs()
    );
}
