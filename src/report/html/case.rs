//! One case: what was asked, the answer, the facts, then criteria, plots and numbers.

use super::levels;
use super::margin;
use super::marks::lane_and_word;
use super::{convergence_plot, profile_plot, sketch};
use crate::input::{Finding, Weight};
use crate::report::text::{escape, sentence};
use crate::report::wording::{self, HTML};
use crate::verdict::Verdict;
use crate::verdict::outcome::{CaseOutcome, Fact, Outcome};

/// The section of all cases.
pub fn section(number: usize, outcome: &Outcome) -> String {
    if outcome.cases.is_empty() {
        return String::new();
    }
    let mut out =
        format!("<section id=\"cases\"><h2><span>{number}</span>Case by case</h2></section>\n");
    for k in 0..outcome.cases.len() {
        out += &case(k, outcome);
    }
    out
}

fn case(k: usize, outcome: &Outcome) -> String {
    let case = &outcome.cases[k];
    let panels = format!(
        "{}{}",
        convergence_plot::panel(case, &outcome.suite.length_unit),
        case.profile
            .as_ref()
            .map_or(String::new(), profile_plot::panel)
    );
    let panels = match panels.is_empty() {
        true => panels,
        false => format!("<div class=\"panels\">\n{panels}</div>\n"),
    };
    format!(
        "<section class=\"case\" id=\"c{0}\" aria-labelledby=\"h{0}\">\n{1}{2}{3}{panels}{4}{5}</section>\n",
        k + 1,
        head(k, outcome),
        asked(case, outcome),
        margin::criteria(case),
        levels::tables(case, &outcome.suite.length_unit),
        findings(&case.findings)
    )
}

fn head(k: usize, outcome: &Outcome) -> String {
    let case = &outcome.cases[k];
    let number = k + 1;
    let next = outcome
        .cases
        .iter()
        .skip(number)
        .position(|later| later.verdict != Verdict::Pass);
    let hop = next.map_or(String::new(), |between| {
        let target = number + between + 1;
        format!(" <a href=\"#c{target}\">next open point: {target}</a>")
    });
    format!(
        "<div class=\"chead\"><span class=\"vv\">{}</span><h3 id=\"h{number}\"><span class=\"no\">{number}</span> {} \
         <code>{}</code></h3><nav class=\"hop\" aria-label=\"From case {number}\"><a href=\"#margins\">all cases</a>{hop}</nav></div>\n",
        lane_and_word(case.verdict),
        escape(&case.title),
        escape(&case.id)
    )
}

fn asked(case: &CaseOutcome, outcome: &Outcome) -> String {
    let units = (&outcome.suite.length_unit, &outcome.suite.stress_unit);
    let sketch = case
        .sketch
        .as_ref()
        .map_or("<div class=\"sk\"></div>".to_string(), |sketch| {
            sketch::sketch(sketch, units.0, units.1)
        });
    format!(
        "<div class=\"qa\">{sketch}<div><div class=\"q\"><span>Asked</span><p>{}</p></div>\
         <div class=\"a\"><span>Answer</span><p>{}</p></div></div>{}</div>\n",
        wording::question(case),
        wording::answer(case, HTML),
        facts(&case.facts)
    )
}

fn facts(facts: &[Fact]) -> String {
    if facts.is_empty() {
        return String::new();
    }
    let one = |fact: &Fact| {
        format!(
            "<div><dt>{}</dt><dd>{}</dd></div>",
            escape(&fact.label),
            escape(&fact.text)
        )
    };
    format!(
        "<dl class=\"facts\">{}</dl>",
        facts.iter().map(one).collect::<String>()
    )
}

/// What the checks of the result sets found, heaviest first.
fn findings(findings: &[Finding]) -> String {
    if findings.is_empty() {
        return String::new();
    }
    let mut sorted: Vec<&Finding> = findings.iter().collect();
    sorted.sort_by_key(|finding| std::cmp::Reverse(finding.weight));
    let mut out = String::from(
        "<div class=\"scroll\"><table class=\"findings\"><caption>Found in suite and result sets</caption><thead><tr>\
         <th scope=\"col\">Weight</th><th scope=\"col\">Found</th><th scope=\"col\">Where</th><th scope=\"col\">Rule</th>\
         </tr></thead><tbody>\n",
    );
    for finding in sorted {
        out += &format!(
            "<tr><td>{}</td><th scope=\"row\">{}{}{}</th><td><code>{}</code></td><td><code>{}</code></td></tr>\n",
            weight(finding.weight),
            escape(&sentence(&finding.found)),
            addition("Expected: ", &finding.expected),
            addition("Hint: ", &finding.hint),
            escape(&finding.place.to_string()),
            escape(&finding.rule)
        );
    }
    out + "</tbody></table></div>\n"
}

fn weight(weight: Weight) -> &'static str {
    match weight {
        Weight::Note => "note",
        Weight::Caution => "caution",
        Weight::Refused => "refused",
    }
}

fn addition(label: &str, text: &str) -> String {
    match text.is_empty() {
        true => String::new(),
        false => format!("<br/><small>{label}{}</small>", escape(&sentence(text))),
    }
}
