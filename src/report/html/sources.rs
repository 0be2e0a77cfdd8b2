//! The back of the report: exact solutions used, conventions declared, files read, cautions.

use crate::report::numbers::{Number, grouped};
use crate::report::text::{escape, sentence};
use crate::report::wording;
use crate::verdict::outcome::{CaseOutcome, Fact, Outcome, ReferenceRecord};

/// Exact solutions, identical ones once.
pub fn references(number: usize, outcome: &Outcome) -> String {
    if outcome.cases.is_empty() {
        return String::new();
    }
    let mut out = format!(
        "<section id=\"references\"><h2><span>{number}</span>Exact solutions used</h2>\
         <p class=\"lede\">Bounds are the relative errors of the exact solution itself. Totals are those of the full \
         section and unit length.</p>\n"
    );
    for (reference, cases) in grouped_by(&outcome.cases, |case| &case.reference) {
        out += &reference_block(reference, &cases);
    }
    out + "</section>\n"
}

fn reference_block(reference: &ReferenceRecord, cases: &[usize]) -> String {
    let bound = |bound: f64| Number::significant(bound, 2).html();
    let mut out = format!(
        "<div class=\"ref\"><h3><code>{}</code></h3><p>{} {}.</p><p>Bounds: displacement {}, stress {}, totals {}.</p>",
        escape(&reference.solution),
        escape(&sentence(&reference.method)),
        sentence(&case_numbers(cases)).trim_end_matches('.'),
        bound(reference.displacement_bound),
        bound(reference.stress_bound),
        bound(reference.totals_bound)
    );
    if !reference.totals.is_empty() {
        out += "<table class=\"totals\"><caption class=\"sr\">Exact totals</caption><thead><tr><th scope=\"col\">Total</th>\
                <th scope=\"col\" class=\"r\">Value</th><th scope=\"col\">Unit</th></tr></thead><tbody>\n";
        for total in &reference.totals {
            let value = match (total.value, &total.reason) {
                (Some(value), _) => Number::significant(value, 12).html(),
                (None, Some(reason)) => escape(reason),
                (None, None) => "—".to_string(),
            };
            out += &format!(
                "<tr><th scope=\"row\">{}</th><td class=\"r\">{value}</td><td>{}</td></tr>\n",
                escape(&total.name),
                escape(&total.unit)
            );
        }
        out += "</tbody></table>";
    }
    out + "</div>\n"
}

/// Conventions and columns the result sets declare, identical declarations once.
pub fn conventions(number: usize, outcome: &Outcome) -> String {
    let declaring: Vec<_> = grouped_by(&outcome.cases, |case| &case.declared);
    if declaring.iter().all(|(facts, _)| facts.is_empty()) {
        return String::new();
    }
    let mut out = format!(
        "<section id=\"conventions\"><h2><span>{number}</span>Conventions the results were read with</h2>\
         <p class=\"lede\">As the suite and the result sets declare them.</p>\n"
    );
    for (facts, cases) in declaring.into_iter().filter(|(facts, _)| !facts.is_empty()) {
        out += &format!(
            "<table class=\"declared\"><caption>{}</caption><thead><tr><th scope=\"col\">Convention</th>\
             <th scope=\"col\">Declared</th></tr></thead><tbody>\n",
            sentence(&case_numbers(&cases)).trim_end_matches('.')
        );
        for fact in facts {
            let Fact { label, text } = fact;
            out += &format!(
                "<tr><th scope=\"row\">{}</th><td>{}</td></tr>\n",
                escape(label),
                escape(text)
            );
        }
        out += "</tbody></table>\n";
    }
    out + "</section>\n"
}

/// Cases that share something, in the order of their first.
fn grouped_by<'a, T: PartialEq + ?Sized>(
    cases: &'a [CaseOutcome],
    pick: impl Fn(&'a CaseOutcome) -> &'a T,
) -> Vec<(&'a T, Vec<usize>)> {
    let mut groups: Vec<(&T, Vec<usize>)> = Vec::new();
    for (k, case) in cases.iter().enumerate() {
        let shared = pick(case);
        match groups.iter_mut().find(|(known, _)| *known == shared) {
            Some((_, numbers)) => numbers.push(k + 1),
            None => groups.push((shared, vec![k + 1])),
        }
    }
    groups
}

/// "case 3", "cases 1 to 4, 7": links to each end.
fn case_numbers(numbers: &[usize]) -> String {
    let mut runs: Vec<(usize, usize)> = Vec::new();
    for &number in numbers {
        match runs.last_mut() {
            Some((_, last)) if *last + 1 == number => *last = number,
            _ => runs.push((number, number)),
        }
    }
    let link = |number: usize| format!("<a href=\"#c{number}\">{number}</a>");
    let run = |&(first, last): &(usize, usize)| match last - first {
        0 => link(first),
        1 => format!("{}, {}", link(first), link(last)),
        _ => format!("{} to {}", link(first), link(last)),
    };
    let word = if numbers.len() == 1 { "case" } else { "cases" };
    format!(
        "{word} {}",
        runs.iter().map(run).collect::<Vec<_>>().join(", ")
    )
}

/// Every file with its hash.
pub fn inputs(number: usize, outcome: &Outcome) -> String {
    let suite = &outcome.suite;
    let mut out = format!(
        "<section id=\"inputs\"><h2><span>{number}</span>Inputs</h2><p class=\"lede\">Files read: {}. Lengths in {}, \
         stress in {}. To check a file, compare its SHA-256 with the one below.</p>\n\
         <div class=\"scroll\"><table class=\"inputs\"><caption class=\"sr\">Files read, with size and SHA-256</caption>\
         <thead><tr><th scope=\"col\">File</th><th scope=\"col\" class=\"r\">Rows</th><th scope=\"col\" class=\"r\">Bytes</th>\
         <th scope=\"col\">SHA-256</th></tr></thead><tbody>\n",
        outcome.inputs.len(),
        escape(&suite.length_unit),
        escape(&suite.stress_unit)
    );
    for input in &outcome.inputs {
        out += &format!(
            "<tr><th scope=\"row\"><code>{}</code></th><td class=\"r\">{}</td><td class=\"r\">{}</td><td>{}</td></tr>\n",
            escape(&input.file),
            input.rows.map_or("—".to_string(), grouped),
            grouped(input.bytes),
            hash(&input.sha256)
        );
    }
    out + "</tbody></table></div></section>\n"
}

/// All digits in spans of eight: the gaps are margins, so that a copy has none.
fn hash(digits: &str) -> String {
    let digits: Vec<char> = digits.chars().collect();
    let spans = digits
        .chunks(8)
        .map(|chunk| format!("<span>{}</span>", escape(&chunk.iter().collect::<String>())));
    format!("<code class=\"hash\">{}</code>", spans.collect::<String>())
}

/// What the reader must know before relying on any of it.
pub fn cautions(number: usize, outcome: &Outcome) -> String {
    let mut out = format!(
        "<section id=\"cautions\"><h2><span>{number}</span>Read this before you rely on the result</h2>\
         <ol class=\"cautions\">\n"
    );
    for (statement, consequence) in wording::cautions(outcome) {
        out += &format!(
            "<li><b>{}</b> {}</li>\n",
            escape(&statement),
            escape(&consequence)
        );
    }
    out + "</ol></section>\n"
}
