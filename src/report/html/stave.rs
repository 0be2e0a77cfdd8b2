//! The stave: four lines, one column a case in suite order. Passes form a ground line; what sticks out is open.
//!
//! A map for the mouse and the eye only: the margin table is the way for keyboard and reader.

use super::marks::{colour, lane_number, letter, mark};
use super::svg::at;
use crate::report::text::{escape, shorten};
use crate::verdict::Verdict;
use crate::verdict::outcome::{CaseOutcome, Outcome};

const WIDE: f64 = 848.0;
/// Cases per line of ticks.
const CHUNK: usize = 50;

/// Counts at the left, the case map at the right.
pub fn stave(outcome: &Outcome) -> String {
    let mut out = String::from("<div class=\"stave\"><ul>");
    for verdict in Verdict::ALL {
        let (k, count) = (letter(verdict), outcome.counts.get(verdict));
        out += &format!(
            "<li class=\"{k}\">{}<b>{count}</b> {}</li>",
            mark(verdict, 18),
            verdict.word()
        );
    }
    out += "</ul>";
    let cases = &outcome.cases;
    out += &match cases.len() {
        0 => String::new(),
        1..=8 if told_apart(cases) => {
            format!(
                "<div class=\"st wide\" aria-hidden=\"true\">{}</div><div class=\"st slim\" aria-hidden=\"true\">{}</div>",
                named(cases),
                numbered(cases)
            )
        }
        1..=24 => format!(
            "<div class=\"st\" aria-hidden=\"true\">{}</div>",
            numbered(cases)
        ),
        _ => {
            let chunks: String = cases
                .chunks(CHUNK)
                .enumerate()
                .map(|(k, chunk)| ticks(k * CHUNK, chunk))
                .collect();
            format!("<div class=\"st\" aria-hidden=\"true\">{chunks}</div>")
        }
    };
    out + "</div>\n"
}

/// Whether ids, cut to the width of a column, still differ.
fn told_apart(cases: &[CaseOutcome]) -> bool {
    let cut = |case: &CaseOutcome| case.id.chars().take(9).collect::<String>();
    let mut seen: Vec<String> = cases.iter().map(cut).collect();
    seen.sort();
    seen.windows(2).all(|pair| pair[0] != pair[1])
}

fn open(width: f64, height: u32) -> String {
    let mut out = format!(
        "<svg width=\"{width:.0}\" height=\"{height}\" viewBox=\"0 0 {width:.0} {height}\" overflow=\"visible\">"
    );
    for y in [15, 45, 75, 105] {
        out += &format!(
            "<line x1=\"0\" y1=\"{y}\" x2=\"{width:.0}\" y2=\"{y}\" stroke=\"#C3C8D0\" stroke-width=\"0.75\"/>"
        );
    }
    out
}

fn link(number: usize, case: &CaseOutcome) -> String {
    format!(
        "<a href=\"#c{number}\" tabindex=\"-1\"><title>{number} {}: {}</title>",
        escape(&case.id),
        case.verdict.word()
    )
}

fn plug(x: f64, verdict: Verdict, halo: f64) -> String {
    format!(
        "<g transform=\"translate({} {})\" color=\"{}\"><rect x=\"-3\" y=\"-3\" width=\"{}\" height=\"22\" fill=\"#fff\"/>\
         <use href=\"#mk{}\" width=\"16\" height=\"16\"/></g>",
        at(x),
        7 + 30 * lane_number(verdict),
        colour(verdict),
        at(halo),
        letter(verdict)
    )
}

/// Up to eight cases: columns of 105 px with the ids.
fn named(cases: &[CaseOutcome]) -> String {
    let pitch = (WIDE / 8.0).floor() - 1.0;
    let mut out = open(WIDE, 120);
    for (k, case) in cases.iter().enumerate() {
        // room up to the next mark in the same lane, 7.3 px a character
        let free = cases[k + 1..]
            .iter()
            .position(|next| next.verdict == case.verdict);
        let room = match free {
            Some(between) => (between + 1) as f64 * pitch,
            None => WIDE - k as f64 * pitch,
        };
        let id = shorten(&case.id, ((room - 28.0) / 7.3) as usize);
        let x = 2.0 + k as f64 * pitch;
        let y = 19 + 30 * lane_number(case.verdict);
        out += &format!(
            "{}{}<text x=\"{}\" y=\"{y}\" font-size=\"12\" fill=\"#161A21\" class=\"id\">{}</text></a>",
            link(k + 1, case),
            plug(x, case.verdict, 25.0 + 7.3 * id.chars().count() as f64),
            at(x + 21.0),
            escape(&id)
        );
    }
    out + "</svg>"
}

/// Up to 24 cases: columns of 26 px with numbers.
fn numbered(cases: &[CaseOutcome]) -> String {
    let mut out = open(26.0 * cases.len() as f64, 136);
    for (k, case) in cases.iter().enumerate() {
        let x = 5.0 + 26.0 * k as f64;
        out += &format!(
            "{}{}<text x=\"{}\" y=\"133\" font-size=\"10.5\" fill=\"#4A5260\" text-anchor=\"middle\">{}</text></a>",
            link(k + 1, case),
            plug(x, case.verdict, 22.0),
            at(x + 8.0),
            k + 1
        );
    }
    out + "</svg>"
}

/// More: ticks 4.2 px apart whose height and fill tell the verdict.
fn ticks(before: usize, cases: &[CaseOutcome]) -> String {
    let mut out = open(4.2 * CHUNK as f64 + 1.0, 136);
    for (k, case) in cases.iter().enumerate() {
        let (x, y) = (
            2.1 + 4.2 * k as f64,
            15.0 + 30.0 * lane_number(case.verdict) as f64,
        );
        out += &format!(
            "{}{}</a>",
            link(before + k + 1, case),
            tick(x, y, case.verdict)
        );
    }
    for k in (0..cases.len()).filter(|k| (before + k + 1).is_multiple_of(10)) {
        out += &format!(
            "<text x=\"{}\" y=\"133\" font-size=\"10\" fill=\"#4A5260\" text-anchor=\"middle\">{}</text>",
            at(2.1 + 4.2 * k as f64),
            before + k + 1
        );
    }
    out + "</svg>"
}

fn tick(x: f64, y: f64, verdict: Verdict) -> String {
    let fill = colour(verdict);
    let bar = |width: f64, height: f64, style: String| {
        let (x0, y0) = (at(x - width / 2.0), at(y - height / 2.0));
        format!("<rect x=\"{x0}\" y=\"{y0}\" width=\"{width}\" height=\"{height}\" {style}/>")
    };
    match verdict {
        Verdict::Fail => bar(3.4, 18.0, format!("fill=\"{fill}\"")),
        Verdict::Pass => bar(1.8, 10.0, format!("fill=\"{fill}\"")),
        Verdict::NotRun => bar(
            3.4,
            12.0,
            format!("fill=\"#fff\" stroke=\"{fill}\" stroke-width=\"0.9\""),
        ),
        Verdict::Inconclusive => format!(
            "<path d=\"M{} {}l2 6l-2 6l-2 -6z\" fill=\"{fill}\"/>",
            at(x),
            at(y - 6.0)
        ),
    }
}
