//! JUnit XML for continuous integration: a suite per case, a test per criterion.
//!
//! Only a pass is a passing test. `fail` is a failure; `inconclusive` and `not run` are errors, because a
//! skipped test counts as green nearly everywhere.

use super::margin::Margin;
use super::numbers::{NBSP, Number, THIN};
use super::text::escape;
use super::wording::{self, PLAIN};
use crate::verdict::Verdict;
use crate::verdict::outcome::{CaseOutcome, Counts, CriterionOutcome, Outcome};

/// The outcome as JUnit XML, without times and host.
pub fn junit(outcome: &Outcome) -> String {
    let total = outcome
        .cases
        .iter()
        .map(counts)
        .fold(Counts::default(), add);
    let mut out = String::from("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n");
    out += &format!(
        "<testsuites name=\"{}\" {}>\n",
        escape(&outcome.suite.id),
        attributes(total)
    );
    for case in &outcome.cases {
        out += &test_suite(&outcome.suite.id, case);
    }
    out + "</testsuites>\n"
}

fn test_suite(suite: &str, case: &CaseOutcome) -> String {
    let mut out = format!(
        "  <testsuite name=\"{}\" {}>\n",
        escape(&case.id),
        attributes(counts(case))
    );
    let class = format!("{}.{}", escape(suite), escape(&case.id));
    for criterion in &case.criteria {
        let detail = detail(criterion);
        out += &test_case(
            &class,
            &criterion.text,
            criterion.verdict,
            &criterion.reason,
            &detail,
        );
    }
    if let Some(verdict) = whole_case(case) {
        let reason = case.reason.as_deref().unwrap_or("nothing was judged");
        out += &test_case(&class, "case", verdict, reason, "");
    }
    out + "  </testsuite>\n"
}

fn test_case(class: &str, name: &str, verdict: Verdict, reason: &str, detail: &str) -> String {
    let open = format!(
        "    <testcase classname=\"{class}\" name=\"{}\"",
        escape(name)
    );
    let tag = match verdict {
        Verdict::Pass => return format!("{open}/>\n"),
        Verdict::Fail => "failure",
        Verdict::Inconclusive | Verdict::NotRun => "error",
    };
    let word = verdict.word();
    let reason = escape(reason);
    format!(
        "{open}>\n      <{tag} type=\"{word}\" message=\"{word}: {reason}\">{}</{tag}>\n    </testcase>\n",
        escape(detail)
    )
}

/// Value, limit and margin.
fn detail(criterion: &CriterionOutcome) -> String {
    let value = criterion
        .value
        .map_or("no value".to_string(), |v| format!("value {v:?}"));
    let half_width = criterion
        .uncertainty
        .map_or(String::new(), |u| format!(" ± {u:?}"));
    let margin = Margin::of(criterion).cell(Number::ascii);
    let text = format!(
        "{value}{half_width}, limit {}, {margin}",
        wording::limit(criterion, PLAIN)
    );
    text.replace([THIN, NBSP], " ")
}

/// The verdict of the one test that stands for a case whose criteria do not tell it: a case without criteria,
/// or one that is worse than all of them.
fn whole_case(case: &CaseOutcome) -> Option<Verdict> {
    let told = case
        .criteria
        .iter()
        .any(|criterion| criterion.verdict == case.verdict);
    match case.verdict {
        // without criteria nothing passed, whatever the record says
        Verdict::Pass if case.criteria.is_empty() => Some(Verdict::NotRun),
        Verdict::Pass => None,
        verdict => (!told).then_some(verdict),
    }
}

fn counts(case: &CaseOutcome) -> Counts {
    Counts::of(
        case.criteria
            .iter()
            .map(|criterion| criterion.verdict)
            .chain(whole_case(case)),
    )
}

fn add(a: Counts, b: Counts) -> Counts {
    Counts {
        fail: a.fail + b.fail,
        inconclusive: a.inconclusive + b.inconclusive,
        not_run: a.not_run + b.not_run,
        pass: a.pass + b.pass,
    }
}

fn attributes(counts: Counts) -> String {
    let errors = counts.inconclusive + counts.not_run;
    format!(
        "tests=\"{}\" failures=\"{}\" errors=\"{errors}\" skipped=\"0\"",
        counts.total(),
        counts.fail
    )
}
