//! The answer, all on the first screen: verdict, what holds, who was judged, the stave, what to do first.

use super::marks::lane_and_word;
use super::stave::stave;
use crate::report::margin::tightest;
use crate::report::text::{escape, sentence};
use crate::report::wording::{self, HTML};
use crate::verdict::Verdict;
use crate::verdict::outcome::{CaseOutcome, Outcome};

/// Rows of "Do this first".
const FIRST: usize = 5;

/// The section.
pub fn section(outcome: &Outcome) -> String {
    let (verdict, numbers) = wording::verdict_sentence(outcome);
    let invented = match outcome.suite.invented {
        true => format!("<p class=\"invented\">{}</p>", wording::INVENTED),
        false => String::new(),
    };
    format!(
        "<section id=\"answer\" class=\"answer\"><div class=\"lead\"><p class=\"eyebrow\">{}</p>\
         <h1><span>{verdict}</span> <span>{numbers}</span></h1>\n<p class=\"sub\">{}</p>{invented}</div>\n{}{}{}</section>\n",
        escape(&outcome.suite.title),
        wording::summary(outcome, HTML),
        title_block(outcome),
        stave(outcome),
        first(outcome)
    )
}

fn title_block(outcome: &Outcome) -> String {
    let suite = &outcome.suite;
    let mut out = String::from("<dl class=\"block\">");
    if let Some(subject) = &suite.subject {
        out += &format!(
            "<div class=\"w\"><dt>Subject</dt><dd>{}</dd></div>",
            escape(subject)
        );
    }
    let criteria: usize = outcome.cases.iter().map(|case| case.criteria.len()).sum();
    let hash: String = suite.sha256.chars().take(12).collect();
    out += &format!(
        "<div><dt>Cases, criteria</dt><dd>{}, {criteria}</dd></div><div><dt>Units</dt><dd>{}, {}</dd></div>\
         <div class=\"w\"><dt>Judged with</dt><dd>{} {}</dd></div>\
         <div class=\"w\"><dt>Suite, SHA-256 begins</dt><dd><code>{}</code> {}</dd></div></dl>\n",
        outcome.cases.len(),
        escape(&suite.length_unit),
        escape(&suite.stress_unit),
        escape(&outcome.tool),
        escape(&outcome.tool_version),
        escape(&suite.id),
        escape(&hash)
    );
    out
}

/// The open cases, worst first: the finding in numbers, the case, the reason.
fn first(outcome: &Outcome) -> String {
    let mut open: Vec<(usize, &CaseOutcome)> = outcome
        .cases
        .iter()
        .enumerate()
        .filter(|(_, case)| case.verdict != Verdict::Pass)
        .collect();
    if open.is_empty() {
        return String::new();
    }
    open.sort_by(|(_, a), (_, b)| urgency(a, b));
    let mut out = String::from("<div class=\"todo\"><h2>Do this first</h2><ol>\n");
    for (k, case) in open.iter().take(FIRST) {
        let (finding, then) = finding(case);
        out += &format!(
            "<li><span class=\"vv\">{}</span><span class=\"what\"><b>{finding}</b> <a href=\"#c{}\"><code>{}</code></a></span>\
             <span class=\"do\">{then}</span></li>\n",
            lane_and_word(case.verdict),
            k + 1,
            escape(&case.id)
        );
    }
    out += "</ol>";
    if open.len() > FIRST {
        let more = open.len() - FIRST;
        out += &format!(
            "<p class=\"more\"><a href=\"#margins\">{more} more open in the table of margins</a></p>"
        );
    }
    out + "</div>\n"
}

fn urgency(a: &CaseOutcome, b: &CaseOutcome) -> std::cmp::Ordering {
    use crate::report::margin::attention;
    a.verdict
        .cmp(&b.verdict)
        .then_with(|| match (tightest(a), tightest(b)) {
            (Some(a), Some(b)) => attention(a, b),
            (a, b) => b.is_some().cmp(&a.is_some()),
        })
}

/// What was found, and the words of the outcome about it.
fn finding(case: &CaseOutcome) -> (String, String) {
    let reason = |text: &str| escape(&sentence(text));
    let tightest = tightest(case);
    match (&case.reason, tightest) {
        (Some(text), _) => (
            reason(text),
            "It has no verdict of its criteria and counts against the suite.".to_string(),
        ),
        (None, Some(criterion)) => (wording::told(criterion, HTML), reason(&criterion.reason)),
        (None, None) => (
            "No criterion was set.".to_string(),
            "Set limits, or take the case out.".to_string(),
        ),
    }
}
