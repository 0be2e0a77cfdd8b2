//! The main job: every result set measured, every criterion judged, everything recorded.

use super::checks;
use super::facts;
use super::level::{self, LevelResult};
use super::plan::{CasePlan, LevelPlan, Plan};
use super::series::{self, LevelData};
use super::stability;
use crate::input::{Finding, Weight};
use crate::norms::body::WallSides;
use crate::norms::catalogue::{self, Class};
use crate::verdict::Verdict;
use crate::verdict::judge::{Criterion, Evidence, judge};
use crate::verdict::outcome::*;
use rayon::prelude::*;
use sha2::{Digest, Sha256};
use std::collections::BTreeSet;
use std::path::Path;
use std::sync::atomic::{AtomicUsize, Ordering};

/// Told after each result set; called from several threads.
pub trait Progress: Sync {
    fn step(&self, done: usize, all: usize, what: &str);
}

/// Says nothing.
#[derive(Debug)]
pub struct Silent;

impl Progress for Silent {
    fn step(&self, _: usize, _: usize, _: &str) {}
}

/// Judges a whole suite. `suite_bytes` is the suite file (for its hash), `folder` where it lies.
///
/// # Errors
/// Everything that forbids judging, over all result sets, in suite order.
pub fn check(
    plan: &Plan,
    suite_bytes: &[u8],
    folder: &Path,
    progress: &dyn Progress,
) -> Result<Outcome, Vec<Finding>> {
    let tasks: Vec<(usize, &CasePlan, &LevelPlan)> = plan
        .cases
        .iter()
        .enumerate()
        .flat_map(|(i, case)| case.levels.iter().map(move |level| (i, case, level)))
        .collect();
    let done = AtomicUsize::new(0);
    let measured: Vec<Result<LevelResult, Vec<Finding>>> = tasks
        .par_iter()
        .map(|(_, case, level)| {
            let result = level::measure(case, level, folder);
            let count = done.fetch_add(1, Ordering::Relaxed) + 1;
            progress.step(count, tasks.len(), &level.folder);
            result
        })
        .collect();
    let mut by_case: Vec<Vec<LevelResult>> = plan.cases.iter().map(|_| Vec::new()).collect();
    let mut refused = Vec::new();
    for ((case, _, _), result) in tasks.iter().zip(measured) {
        match result {
            Ok(level) => by_case[*case].push(level),
            Err(findings) => refused.extend(findings),
        }
    }
    for (case, levels) in plan.cases.iter().zip(&by_case) {
        refused.extend(checks::declared_sizes(case, levels));
    }
    if !refused.is_empty() {
        refused.dedup();
        return Err(refused);
    }
    let file = file_name(&plan.file);
    let suite = InputRecord {
        file: file.clone(),
        sha256: hex(&Sha256::digest(suite_bytes)),
        bytes: suite_bytes.len() as u64,
        rows: None,
    };
    let mut inputs = vec![suite.clone()];
    inputs.extend(plan.cases.iter().flat_map(|case| &case.tables).cloned());
    inputs.dedup();
    let mut seen = BTreeSet::new();
    for level in by_case.iter().flatten() {
        for input in &level.inputs {
            if seen.insert(input.name.clone()) {
                inputs.push(InputRecord {
                    file: input.name.clone(),
                    sha256: input.sha256.clone(),
                    bytes: input.bytes,
                    rows: Some(input.rows),
                });
            }
        }
    }
    let cases: Vec<CaseOutcome> = plan
        .cases
        .iter()
        .zip(by_case)
        .map(|(case, levels)| judge_case(case, levels))
        .collect();
    let counts = Counts::of(cases.iter().map(|case| case.verdict));
    Ok(Outcome {
        format: FORMAT,
        tool: "truebore".to_string(),
        tool_version: env!("CARGO_PKG_VERSION").to_string(),
        suite: SuiteRecord {
            id: plan.suite.id.clone(),
            title: plan.suite.title.clone(),
            subject: plan.suite.subject.clone(),
            invented: plan.suite.invented,
            length_unit: plan.suite.units.length.name.to_string(),
            stress_unit: plan.suite.units.stress.name.to_string(),
            file,
            sha256: suite.sha256,
        },
        verdict: Verdict::worst(cases.iter().map(|case| case.verdict)),
        counts,
        cases,
        inputs,
    })
}

fn file_name(path: &str) -> String {
    Path::new(path).file_name().map_or_else(
        || path.to_string(),
        |name| name.to_string_lossy().into_owned(),
    )
}

fn hex(bytes: &[u8]) -> String {
    bytes.iter().map(|b| format!("{b:02x}")).collect()
}

fn judge_case(case: &CasePlan, levels: Vec<LevelResult>) -> CaseOutcome {
    let data: Vec<LevelData> = levels
        .iter()
        .map(|level| LevelData {
            name: &level.outcome.level,
            h: level.outcome.h,
            measured: match &level.outcome.missing {
                Some(why) => Err(why),
                None => Ok(&level.measures.measured),
            },
        })
        .collect();
    let measures = series::build(case, &data);
    let straight = levels
        .iter()
        .any(|l| matches!(l.sides, WallSides::Straight | WallSides::Mixed));
    let known_bound = levels
        .iter()
        .map(|level| level.measures.known_bound)
        .fold(0.0, f64::max);
    let criteria: Vec<CriterionOutcome> = case
        .criteria
        .iter()
        .map(|criterion| judge_one(case, criterion, &measures, straight, known_bound))
        .collect();
    let (verdict, reason) = case_verdict(case, &levels, &criteria);
    let mut findings: Vec<Finding> = stability::caution(case).into_iter().collect();
    findings.extend(
        levels
            .iter()
            .flat_map(|level| level.findings.iter().cloned()),
    );
    // cautions first, otherwise in level order
    findings.sort_by_key(|f| std::cmp::Reverse(f.weight));
    CaseOutcome {
        id: case.id.clone(),
        title: case.title.clone(),
        verdict,
        reason,
        facts: facts::facts(case),
        declared: declared(case),
        sketch: facts::sketch(case),
        reference: facts::reference(case),
        criteria,
        profile: profile(case, &levels),
        levels: levels.into_iter().map(|level| level.outcome).collect(),
        measures,
        findings,
    }
}

fn judge_one(
    case: &CasePlan,
    criterion: &Criterion,
    measures: &[MeasureSeries],
    straight: bool,
    known_bound: f64,
) -> CriterionOutcome {
    let series = measures
        .iter()
        .find(|s| s.measure == criterion.measure && s.kind == criterion.kind);
    let bound = case.exact.bound();
    let class = catalogue::find(&criterion.measure).map(|m| m.class);
    let reference_bound = match class {
        Some(Class::Displacement | Class::Gradient) => bound.displacement,
        Some(Class::Stress | Class::Pressure) => bound.stress,
        _ if criterion.measure == crate::norms::known::NAME => known_bound,
        Some(Class::Functional) | None => bound.totals,
    };
    let suspicion =
        "the wall sides of the mesh are straight, which costs an order of the displacement";
    judge(
        criterion,
        Evidence {
            series,
            reference_bound,
            reference_size: reference_size(case, &criterion.measure),
            suspicion: straight.then_some(suspicion),
        },
    )
}

/// What the bound of a total is relative to: an axial force that vanishes is a balance of pressures on the section.
fn reference_size(case: &CasePlan, measure: &str) -> f64 {
    match measure {
        "axial-force" => {
            let area = case.exact.body().section_area().unwrap_or(0.0);
            case.exact.load_stress() * area * case.share
        }
        _ => 0.0,
    }
}

fn case_verdict(
    case: &CasePlan,
    levels: &[LevelResult],
    criteria: &[CriterionOutcome],
) -> (Verdict, Option<String>) {
    if criteria.is_empty() {
        return (
            Verdict::NotRun,
            Some("the case has no criteria, so that nothing can be judged".to_string()),
        );
    }
    if levels.is_empty() {
        return (
            Verdict::NotRun,
            Some("the case names no result sets".to_string()),
        );
    }
    let verdict = Verdict::worst(criteria.iter().map(|c| c.verdict));
    let missing: Vec<&str> = levels
        .iter()
        .filter(|l| l.outcome.missing.is_some())
        .map(|l| l.outcome.level.as_str())
        .collect();
    if missing.len() == levels.len() {
        return (Verdict::NotRun, levels[0].outcome.missing.clone());
    }
    // a declared level that is not there never passes, whatever the finest one says
    if !missing.is_empty() && verdict == Verdict::Pass {
        let reason = format!(
            "level {} of case {} was not run",
            missing.join(", "),
            case.id
        );
        return (Verdict::NotRun, Some(reason));
    }
    // nor do levels of different load steps, unless each says that it is at the case's load
    let read = || levels.iter().filter(|l| l.outcome.missing.is_none());
    let same = read().all(|l| l.outcome.step == levels[0].outcome.step);
    if verdict == Verdict::Pass && !same && read().any(|l| !l.load_confirmed) {
        let steps: Vec<_> = read()
            .map(|l| l.outcome.step.map_or("none".to_string(), |s| s.to_string()))
            .collect();
        let reason = format!(
            "the levels were judged at different load steps ({}), and no load_factor says that each is at the case's load",
            steps.join(", ")
        );
        return (Verdict::NotRun, Some(reason));
    }
    // nor do results of another load, however small their error
    let other_load = levels.iter().find_map(|l| l.other_load.as_ref());
    if let (Verdict::Pass, Some(reason)) = (verdict, other_load) {
        return (Verdict::NotRun, Some(reason.clone()));
    }
    (verdict, None)
}

fn declared(case: &CasePlan) -> Vec<Fact> {
    let reading = level::reading(case);
    let mut facts = vec![
        Fact {
            label: "Conventions".to_string(),
            text: reading.conventions.describe(),
        },
        Fact {
            label: "Units of the files".to_string(),
            text: format!(
                "{}, {}",
                reading.units_from.length.name, reading.units_from.stress.name
            ),
        },
    ];
    if !case.export.columns.is_empty() {
        let names = case.export.columns.iter().map(|(table, name, header)| {
            let table = if table.is_empty() {
                String::new()
            } else {
                format!("{table}: ")
            };
            format!("{table}{name} from \"{}\"", header.value)
        });
        facts.push(Fact {
            label: "Columns".to_string(),
            text: names.collect::<Vec<_>>().join(", "),
        });
    }
    if let Some(rule) = &case.export.point_rule {
        facts.push(Fact {
            label: "Integration rule".to_string(),
            text: rule.value.clone(),
        });
    }
    if let Some(tolerance) = case.node_tolerance {
        let text = format!("{tolerance} {}", case.units.length.name);
        facts.push(Fact {
            label: "Node tolerance".to_string(),
            text,
        });
    }
    if case.load_factor != 1.0 {
        facts.push(Fact {
            label: "Load factor".to_string(),
            text: case.load_factor.to_string(),
        });
    }
    if let Some(step) = &case.export.step {
        facts.push(Fact {
            label: "Load step".to_string(),
            text: step.value.to_string(),
        });
    }
    facts
}

/// Marks that can still be told apart in a plot.
const PROFILE_POINTS: usize = 48;

/// The stress profile of the finest level whose marks can be told apart.
fn profile(case: &CasePlan, levels: &[LevelResult]) -> Option<Profile> {
    let with = || levels.iter().rev().filter(|l| l.measures.profile.is_some());
    let readable = |l: &&LevelResult| {
        l.measures
            .profile
            .as_ref()
            .is_some_and(|p| p.computed.len() <= PROFILE_POINTS)
    };
    let level = with().find(readable).or_else(|| with().next())?;
    let data = level.measures.profile.as_ref()?;
    let (inner, outer) = case.exact.body().span()?;
    let curve = |name: &str, i: usize| ProfileCurve {
        name: name.to_string(),
        exact: data.exact.iter().map(|(r, s)| (*r, s[i])).collect(),
        computed: data
            .computed
            .iter()
            .map(|(r, c, e)| (*r, c[i], c[i] - e[i]))
            .collect(),
    };
    let mut curves = vec![curve("hoop", 1), curve("axial", 2), curve("radial", 0)];
    curves.retain(|c| {
        c.computed
            .iter()
            .all(|(_, value, miss)| value.is_finite() && miss.is_finite())
    });
    Some(Profile {
        level: level.outcome.level.clone(),
        unit: case.units.stress.name.to_string(),
        length_unit: case.units.length.name.to_string(),
        inner_radius: inner,
        outer_radius: outer,
        element_borders: data.borders.clone(),
        curves,
    })
}

/// The heaviest weight among findings, for summaries.
pub fn heaviest(findings: &[Finding]) -> Option<Weight> {
    findings.iter().map(|f| f.weight).max()
}
