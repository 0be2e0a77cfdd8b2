//! How far each case is from its limits: the table that is also the index of the report.

use super::gauge;
use super::marks::{lane_and_word, letter};
use crate::report::margin::{Margin, tightest};
use crate::report::numbers::Number;
use crate::report::text::escape;
use crate::report::wording::{self, HTML};
use crate::verdict::Verdict;
use crate::verdict::outcome::{CaseOutcome, CriterionOutcome, Outcome};
use std::collections::BTreeMap;

/// From this many cases on, the passing ones can be hidden on screen.
const MANY: usize = 12;

/// The section.
pub fn section(number: usize, outcome: &Outcome) -> String {
    let mut out = format!(
        "<section id=\"margins\"><h2><span>{number}</span>How far each case is from its limits</h2>\
         <p class=\"lede\">One row a case, one mark a criterion: value divided by limit. Left of the black line is \
         inside, the hatched side is beyond. The large mark is the tightest criterion, named at the right; its \
         distance to the line, counted from the end of its uncertainty bar, is the margin. Of an \
         order it is the shortfall below theory that is compared.</p>\n"
    );
    let open = outcome.counts.total() - outcome.counts.pass;
    if outcome.cases.len() > MANY && open > 0 && outcome.counts.pass > 0 {
        out += &format!(
            "<input type=\"checkbox\" id=\"only\"/><label for=\"only\">Open points only, {open} of {}</label>",
            outcome.cases.len()
        );
    }
    out += "<table class=\"margins all\"><caption class=\"sr\">Every case: verdict, all criteria against their limits, \
            and the tightest one</caption><thead><tr><th class=\"v\" scope=\"col\">Verdict</th>\
            <th scope=\"col\" class=\"c\">No.</th><th scope=\"col\">Case</th>";
    out += &gauge::head_cell();
    out += "<th scope=\"col\" class=\"t\">Tightest criterion</th><th scope=\"col\" class=\"r g\">Value is limit</th>\
            </tr></thead><tbody>\n";
    let mut titles = BTreeMap::new();
    for case in &outcome.cases {
        *titles.entry(case.title.as_str()).or_insert(0) += 1;
    }
    for (k, case) in outcome.cases.iter().enumerate() {
        let unique = titles.get(case.title.as_str()) == Some(&1);
        out += &row(k + 1, case, unique);
    }
    out + "</tbody></table></section>\n"
}

/// A case is named by its title, or by its id where several cases share a title.
fn row(number: usize, case: &CaseOutcome, unique: bool) -> String {
    let name = match unique {
        true => escape(&case.title),
        false => format!("<code>{}</code>", escape(&case.id)),
    };
    let tightest = tightest(case);
    let criteria: Vec<&CriterionOutcome> = case.criteria.iter().collect();
    let gauge = match tightest {
        Some(first) if case.criteria.iter().any(|c| c.ratio.is_some()) => {
            gauge::track(&criteria, Some(first), 38)
        }
        Some(first) => gauge::empty(case.reason.as_ref().unwrap_or(&first.reason), 38),
        None => gauge::empty(case.reason.as_deref().unwrap_or("no criteria"), 38),
    };
    format!(
        "<tr class=\"w{}\"><td class=\"v\">{}</td><td class=\"c\">{number}</td>\
         <th scope=\"row\"><a href=\"#c{number}\">{name}</a></th><td class=\"tr\">{gauge}</td><td class=\"t\">{}</td>\
         <td class=\"r g\">{}</td></tr>\n",
        letter(case.verdict),
        lane_and_word(case.verdict),
        tightest.map_or("none judged".to_string(), |c| escape(&wording::name(c))),
        tightest.map_or("—".to_string(), |c| Margin::of(c).cell(Number::html))
    )
}

/// The criteria of one case, with value, limit and gauge; remarks beneath.
pub fn criteria(case: &CaseOutcome) -> String {
    if case.criteria.is_empty() {
        return String::new();
    }
    let mut out = String::from(
        "<table class=\"margins one\"><caption class=\"sr\">Criteria of this case</caption><thead><tr>\
         <th class=\"v\" scope=\"col\">Verdict</th><th scope=\"col\">Criterion</th>\
         <th scope=\"col\" class=\"r\">Value</th><th scope=\"col\" class=\"r\">Limit</th>",
    );
    out += &gauge::head_cell();
    out += "<th scope=\"col\" class=\"r\">Value is limit</th></tr></thead><tbody>\n";
    for criterion in &case.criteria {
        out += &format!(
            "<tr><td class=\"v\">{}</td><th scope=\"row\">{}{}</th><td class=\"r\" data-l=\"value\">{}</td>\
             <td class=\"r\" data-l=\"limit\">{}</td><td class=\"tr\">{}</td><td class=\"r g\">{}</td></tr>\n",
            lane_and_word(criterion.verdict),
            escape(&wording::name(criterion)),
            level(criterion),
            wording::value(criterion, HTML).unwrap_or_else(|| "—".to_string()),
            wording::limit(criterion, HTML),
            gauge::single(criterion, 30),
            Margin::of(criterion).cell(Number::html)
        );
    }
    out + "</tbody></table>\n" + &remarks(case)
}

fn level(criterion: &CriterionOutcome) -> String {
    criterion.level.as_deref().map_or(String::new(), |level| {
        format!(" <small>level {}</small>", escape(level))
    })
}

/// Reasons of what is not met, and notes, as sentences.
fn remarks(case: &CaseOutcome) -> String {
    let mut out = String::new();
    for criterion in &case.criteria {
        let reason = (criterion.verdict != Verdict::Pass).then_some(&criterion.reason);
        for text in reason.into_iter().chain(&criterion.note) {
            out += &format!(
                "<li><b>{}, {}.</b> {} <code>{}</code></li>\n",
                escape(&wording::name(criterion)),
                criterion.verdict.word(),
                escape(&crate::report::text::sentence(text)),
                escape(&criterion.text)
            );
        }
    }
    match out.is_empty() {
        true => out,
        false => format!("<ul class=\"remarks\">\n{out}</ul>\n"),
    }
}
