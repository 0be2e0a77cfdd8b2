//! The shipped suites of the library: real results pass against their own exact solution and fail against a near relative;
//! every entry of the catalogue has an example that can be briefed and tabled.

mod common;

use assert_cmd::Command;
use common::{judged, repository};
use std::collections::BTreeSet;
use std::path::PathBuf;
use truebore::run::plan::{Plan, plan};
use truebore::verdict::Verdict;
use truebore::verdict::outcome::CaseOutcome;

const FOLDER: &str = "suites/exact-library";

fn path(name: &str) -> PathBuf {
    repository(FOLDER).join(name)
}

fn text(name: &str) -> String {
    std::fs::read_to_string(path(name)).unwrap()
}

fn planned(name: &str) -> Plan {
    let shown = path(name).display().to_string();
    plan(truebore::suite::read(&text(name), &shown).unwrap(), &shown).unwrap()
}

fn said(arguments: &[&str]) -> String {
    let mut command = Command::cargo_bin("truebore").unwrap();
    let done = command.args(arguments).assert().success();
    String::from_utf8(done.get_output().stdout.clone()).unwrap()
}

/// One case of suite.yaml, with some words replaced, judged on the shipped results.
fn altered(id: &str, changes: &[(&str, &str)]) -> CaseOutcome {
    let all = text("suite.yaml");
    let (head, cases) = all.split_once("cases:\n").unwrap();
    let case = cases
        .split("\n\n")
        .find(|case| case.starts_with(&format!("  - id: {id}\n")))
        .unwrap();
    let mut suite = format!("{head}cases:\n{case}\n");
    for (from, to) in changes {
        assert_eq!(suite.matches(from).count(), 1, "{from}");
        suite = suite.replace(from, to);
    }
    judged(&suite, &repository(FOLDER)).cases.remove(0)
}

fn verdicts(case: &CaseOutcome) -> Vec<(&str, Verdict)> {
    let all = case.criteria.iter();
    all.map(|c| (c.text.as_str(), c.verdict)).collect()
}

/// A case fails, by the size and the order of its displacement too: not only by a hair, and not only by its stresses.
fn fails(case: &CaseOutcome) {
    assert_eq!(case.verdict, Verdict::Fail);
    let about = |word: &str| {
        let all = case.criteria.iter();
        let displacement = all.filter(|c| c.text.starts_with(word));
        displacement.map(|c| c.verdict).collect::<Vec<_>>()
    };
    for verdict in about("Displacement, L2") {
        assert_eq!(verdict, Verdict::Fail, "{:?}", verdicts(case));
    }
    assert_eq!(about("Displacement, L2").len(), 2);
}

// Red when an exact solution, a norm or an expected order drifts, or a shipped table is damaged.
#[test]
fn every_case_passes() {
    let out = tempfile::tempdir().unwrap();
    let suite = path("suite.yaml").display().to_string();
    let table = said(&["check", &suite, "--out", &out.path().display().to_string()]);
    assert!(
        table.contains("0 fail, 0 inconclusive, 0 not run, 8 pass"),
        "{table}"
    );
    let report = std::fs::read_to_string(out.path().join("report.html")).unwrap();
    // the constants of typed fields, and places off the axis by their coordinates
    assert!(report.contains("with a = 0.5, b = 0.4"));
    assert!(report.contains("(X ") && report.contains("(R 8.000000, Z "));
}

// Red when the bulk modulus of a law is lost on the way to the exact solution.
#[test]
fn compressible_results_fail_against_the_incompressible_tube() {
    let change = [
        (
            "ends: plane-strain, material: soft",
            "ends: plane-strain, material: rigid",
        ),
        (
            "materials:\n",
            "materials:\n  rigid: { neo-Hookean: { mu: 0.4 } }\n",
        ),
    ];
    assert_eq!(altered("hose-liner", &[]).verdict, Verdict::Pass);
    fails(&altered("hose-liner", &change));
}

// Red when layers are taken in another order than from the bore outwards.
#[test]
fn layered_results_fail_with_swapped_layers() {
    assert_eq!(altered("lined-hose", &[]).verdict, Verdict::Pass);
    fails(&altered(
        "lined-hose",
        &[("[soft, cover]", "[cover, soft]")],
    ));
}

// Red when the body force, the state or the sense of the load does not reach the exact solution.
#[test]
fn other_cases_fail_with_a_slightly_wrong_problem() {
    for (id, from, to) in [
        ("pad", "b: 0.4", "b: 0.401"),
        ("bulb-rod", "stretch: 1.3", "stretch: 1.3000001"),
        ("bulb", "inner-pressure: 0.03", "outer-pressure: 0.03"),
        ("valve-sleeve", "ends: plane-stress", "ends: plane-strain"),
        (
            "drive-disk",
            "density-speed-squared: 0.02",
            "density-speed-squared: 0.0201",
        ),
        (
            "valve-tongue",
            "root: three-points",
            "root: slope-of-section",
        ),
    ] {
        let case = altered(id, &[(from, to)]);
        assert_eq!(case.verdict, Verdict::Fail, "{id}: {:?}", verdicts(&case));
    }
}

#[test]
fn the_catalogue_has_an_example_of_every_solution() {
    let plan = planned("catalogue.yaml");
    let shown: BTreeSet<_> = plan
        .cases
        .iter()
        .map(|case| case.problem.as_str())
        .collect();
    let all: BTreeSet<_> = truebore::exact::entries().iter().map(|e| e.name).collect();
    assert_eq!(shown, all);
}

#[test]
fn every_example_can_be_briefed_and_tabled() {
    let suite = path("catalogue.yaml").display().to_string();
    for case in &planned("catalogue.yaml").cases {
        let brief = said(&["brief", &suite, "--case", &case.id]);
        assert!(
            brief.contains("Body") && brief.contains("nodes.csv"),
            "{brief}"
        );
        let totals = said(&["exact", &suite, "--case", &case.id, "--totals"]);
        assert!(totals.starts_with("quantity,value\n"), "{totals}");
        // a single published or tabulated number has no field
        if ["published", "tabulated"].contains(&case.problem.as_str()) {
            continue;
        }
        let stations = said(&["exact", &suite, "--case", &case.id, "--stations", "5"]);
        assert_eq!(stations.lines().count(), 6, "{}: {stations}", case.id);
        assert!(!stations.contains("NaN"), "{}: {stations}", case.id);
    }
}

// Red when a sphere is asked for as a plane section, which `check` would refuse.
#[test]
fn a_sphere_is_briefed_as_an_axisymmetric_model() {
    let suite = path("suite.yaml").display().to_string();
    let brief = said(&["brief", &suite, "--case", "bulb"]);
    assert!(brief.contains("node,R,Z,ur,uz\n"), "{brief}");
    assert!(
        brief.contains("R,Z,weight,srr,stt,szz,szr,p,J,W\n"),
        "{brief}"
    );
    for file in ["nodes", "points"] {
        let shipped = text(&format!("results/bulb/level-1/{file}.csv"));
        let header = shipped.lines().nth(1).unwrap();
        assert!(brief.contains(&format!("{header}\n")), "{header}");
    }
}
