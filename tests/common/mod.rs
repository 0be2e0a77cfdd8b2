//! What the tests of the measuring chain share: a suite text judged through the library, and its numbers.
//! Each test file uses a part of it.
#![allow(dead_code)]

pub mod mesh;
pub mod perfect;

use std::path::{Path, PathBuf};
use truebore::input::Finding;
use truebore::run::check::{Silent, check};
use truebore::run::plan::plan;
use truebore::verdict::outcome::{CaseOutcome, Kind, MeasureSeries, Outcome};

/// A path of the repository.
pub fn repository(path: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join(path)
}

/// Judges a suite text whose result sets lie below `folder`.
pub fn judge(suite: &str, folder: &Path) -> Result<Outcome, Vec<Finding>> {
    let plan = plan(truebore::suite::read(suite, "suite.yaml")?, "suite.yaml")?;
    check(&plan, suite.as_bytes(), folder, &Silent)
}

/// As [`judge`]; a refusal ends the test with its findings.
pub fn judged(suite: &str, folder: &Path) -> Outcome {
    judge(suite, folder).unwrap_or_else(|findings| {
        let text: Vec<_> = findings.iter().map(ToString::to_string).collect();
        panic!("refused:\n{}\n{suite}", text.join("\n"))
    })
}

/// The case of that name.
pub fn case<'o>(outcome: &'o Outcome, id: &str) -> &'o CaseOutcome {
    outcome
        .cases
        .iter()
        .find(|case| case.id == id)
        .unwrap_or_else(|| panic!("no case {id}"))
}

/// A series, if there is one.
pub fn series<'o>(case: &'o CaseOutcome, measure: &str, kind: Kind) -> Option<&'o MeasureSeries> {
    case.measures
        .iter()
        .find(|s| s.measure == measure && s.kind == kind)
}

/// The numbers of a series, coarsest level first; a missing number ends the test with its reason.
pub fn numbers(case: &CaseOutcome, measure: &str, kind: Kind) -> Vec<f64> {
    let series = series(case, measure, kind)
        .unwrap_or_else(|| panic!("{}: no series {measure} {kind:?}", case.id));
    let value = |v: &truebore::verdict::outcome::LevelValue| {
        v.value
            .unwrap_or_else(|| panic!("{}: {measure}: {:?}", case.id, v.reason))
    };
    series.values.iter().map(value).collect()
}

/// The number at the finest level.
pub fn finest(case: &CaseOutcome, measure: &str, kind: Kind) -> f64 {
    *numbers(case, measure, kind).last().unwrap()
}
