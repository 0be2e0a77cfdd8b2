//! The report: one self-contained page, no script, nothing fetched.
//!
//! This file holds the order of the page; each section has a file. A section without content is left out and the
//! others are numbered as they come.

mod answer;
mod case;
mod convergence_plot;
mod curves;
mod gauge;
mod levels;
mod margin;
mod marks;
mod profile_plot;
mod scale;
mod sketch;
mod slope_fan;
mod sources;
mod stave;
mod svg;

use super::text::{clean, escape};
use super::wording;
use crate::verdict::outcome::Outcome;

const STYLE: &str = include_str!("style.css");

/// A numbered section: its anchor, its word in the bar, its writer.
type Section = (&'static str, &'static str, fn(usize, &Outcome) -> String);

/// In page order, after the answer.
const SECTIONS: [Section; 6] = [
    ("margins", "Margins", margin::section),
    ("cases", "Cases", case::section),
    ("references", "References", sources::references),
    ("conventions", "Conventions", sources::conventions),
    ("inputs", "Inputs", sources::inputs),
    ("cautions", "Cautions", sources::cautions),
];

/// The page.
pub fn html(outcome: &Outcome) -> String {
    let mut sections = answer::section(outcome);
    let mut links = String::from("<a href=\"#answer\">Answer</a>");
    let mut number = 1;
    for (anchor, word, write) in SECTIONS {
        let section = write(number, outcome);
        if !section.is_empty() {
            number += 1;
            sections += &section;
            links += &format!("<a href=\"#{anchor}\">{word}</a>");
        }
    }
    format!(
        "{}<body>\n{}{}{}<a class=\"skip\" href=\"#answer\">Skip to the answer</a>\n<header class=\"bar\"><b>truebore</b>\
         <nav aria-label=\"Sections\">{links}</nav></header>\n<main>\n{sections}</main></body></html>\n",
        head(outcome),
        marks::SYMBOLS,
        gauge::symbol(),
        marks::SYMBOLS_END
    )
}

fn head(outcome: &Outcome) -> String {
    let (verdict, numbers) = wording::verdict_sentence(outcome);
    let foot = css_string(&format!(
        "{}, {}",
        outcome.suite.id,
        outcome.suite.sha256.get(..12).unwrap_or("")
    ));
    format!(
        "<!doctype html>\n<html lang=\"en\"><head><meta charset=\"utf-8\"/>\
         <meta name=\"viewport\" content=\"width=device-width,initial-scale=1\"/>\
         <title>{}: {} {}</title><style>\n{STYLE}\
         @page {{ @bottom-left {{ content:\"{foot}\"; font:8.5pt sans-serif }} }}\n</style></head>",
        escape(&outcome.suite.title),
        verdict.to_lowercase().trim_end_matches('.'),
        numbers
    )
}

/// Foreign text inside a CSS string: everything but plain letters, digits and a few signs as an escape.
fn css_string(text: &str) -> String {
    let plain = |c: char| c.is_ascii_alphanumeric() || matches!(c, ' ' | '-' | '_' | '.' | ',');
    clean(text)
        .chars()
        .map(|c| {
            if plain(c) {
                c.to_string()
            } else {
                format!("\\{:x} ", c as u32)
            }
        })
        .collect()
}
