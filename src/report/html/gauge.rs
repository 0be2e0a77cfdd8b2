//! The gauge: value against limit on a logarithmic axis from a millionth of the limit to a thousand times it.
//!
//! Fluid without script: positions in percent, marks in nested drawings that keep their size.

use super::marks::{colour, letter};
use super::svg::at;
use crate::report::margin::end_ratio;
use crate::report::numbers::THIN;
use crate::report::text::{escape, shorten};
use crate::verdict::Verdict;
use crate::verdict::outcome::CriterionOutcome;

const LOW: f64 = -6.0;
const HIGH: f64 = 3.0;

/// Percent of the width for a ratio; what lies off the axis is drawn at its edge.
fn percent(ratio: f64) -> f64 {
    let logarithm = if ratio > 0.0 {
        ratio.log10().clamp(LOW, HIGH)
    } else {
        LOW
    };
    100.0 * (logarithm - LOW) / (HIGH - LOW)
}

/// The background, defined once: decade lines, the hatched side beyond, the limit line.
pub fn symbol() -> String {
    let limit = format!("{:.2}", percent(1.0));
    let mut out = String::from("<symbol id=\"gauge\">");
    for decade in LOW as i32..=HIGH as i32 {
        let x = format!("{:.2}", percent(10f64.powi(decade)));
        out += &format!("<line x1=\"{x}%\" x2=\"{x}%\" y1=\"0\" y2=\"100%\" stroke=\"#E4E7EC\"/>");
    }
    let width = format!("{:.2}", 100.0 - percent(1.0));
    out += &format!(
        "<rect x=\"{limit}%\" y=\"0\" width=\"{width}%\" height=\"100%\" fill=\"url(#over)\"/>"
    );
    out += &format!(
        "<line x1=\"{limit}%\" x2=\"{limit}%\" y1=\"0\" y2=\"100%\" stroke=\"#161A21\" stroke-width=\"2\"/></symbol>"
    );
    out
}

/// The axis in a table head. HTML, not SVG: percentages in a repeated head collapse in Chromium's PDF.
pub fn head_cell() -> String {
    let label = |decade: i32, text: String| {
        format!(
            "<i style=\"left:{:.2}%\">{text}</i>",
            percent(10f64.powi(decade))
        )
    };
    format!(
        "<th scope=\"col\" class=\"tr\" aria-label=\"Value against limit, logarithmic\">\
         <div class=\"ax\" aria-hidden=\"true\">{}{}{}<b style=\"left:{:.2}%\">limit</b></div></th>",
        label(-4, format!("÷{THIN}10<sup>4</sup>")),
        label(-2, format!("÷{THIN}10<sup>2</sup>")),
        label(2, format!("×{THIN}10<sup>2</sup>")),
        percent(1.0)
    )
}

/// A row of the margin table: every criterion small, the one that counts large and last.
pub fn track(
    criteria: &[&CriterionOutcome],
    counted: Option<&CriterionOutcome>,
    height: u32,
) -> String {
    let y = f64::from(height) / 2.0;
    let mut out = open(height, "track");
    if let Some(first) = counted
        && let Some(ratio) = first.ratio
    {
        let all = criteria
            .iter()
            .filter_map(|c| c.ratio)
            .chain([ratio])
            .map(percent);
        let limit = percent(1.0);
        let ends = all.fold((limit, limit), |(low, high), x| (x.min(low), x.max(high)));
        let (from, to) = if first.verdict == Verdict::Pass {
            (ends.0, limit)
        } else {
            ends
        };
        out += &line((from, to), y, 1.2, 1.0, first.verdict);
    }
    let drawn = |c: &&&CriterionOutcome| counted.is_none_or(|first| !std::ptr::eq(**c, first));
    for criterion in criteria.iter().filter(drawn) {
        out += &plug(criterion, y, 0.62);
    }
    if let Some(first) = counted {
        out += &uncertainty(first, y);
        out += &plug(first, y, 1.0);
    }
    out + "</svg>"
}

/// A row of a case's criteria table.
pub fn single(criterion: &CriterionOutcome, height: u32) -> String {
    match criterion.ratio {
        Some(_) => track(&[criterion], Some(criterion), height),
        None => empty(&criterion.reason, height),
    }
}

/// A row without a mark: the reason in words.
pub fn empty(reason: &str, height: u32) -> String {
    let y = at(f64::from(height) / 2.0 + 4.0);
    format!(
        "{}<text x=\"6\" y=\"{y}\" font-size=\"12\" fill=\"#4A5260\" paint-order=\"stroke\" stroke=\"#fff\" \
         stroke-width=\"6\">{}</text></svg>",
        open(height, "track none"),
        escape(&shorten(&format!("no number: {reason}"), 50))
    )
}

fn open(height: u32, class: &str) -> String {
    format!(
        "<svg class=\"{class}\" width=\"100%\" height=\"{height}\" aria-hidden=\"true\">\
         <use href=\"#gauge\" width=\"100%\" height=\"{height}\"/>"
    )
}

fn line((from, to): (f64, f64), y: f64, width: f64, opacity: f64, verdict: Verdict) -> String {
    let opacity = if opacity < 1.0 {
        format!(" stroke-opacity=\"{opacity}\"")
    } else {
        String::new()
    };
    format!(
        "<line x1=\"{from:.2}%\" x2=\"{to:.2}%\" y1=\"{y:.1}\" y2=\"{y:.1}\" stroke=\"{}\" stroke-width=\"{width}\"{opacity}/>",
        colour(verdict)
    )
}

/// The uncertainty, from the mark towards the limit only: both ends would run to zero on this axis.
fn uncertainty(criterion: &CriterionOutcome, y: f64) -> String {
    match (criterion.ratio, end_ratio(criterion), criterion.uncertainty) {
        (Some(ratio), Some(end), Some(half_width)) if half_width > 0.0 => line(
            (percent(ratio), percent(end)),
            y,
            6.0,
            0.38,
            criterion.verdict,
        ),
        _ => String::new(),
    }
}

fn plug(criterion: &CriterionOutcome, y: f64, scale: f64) -> String {
    let Some(ratio) = criterion.ratio else {
        return String::new();
    };
    let scale = if scale == 1.0 {
        String::new()
    } else {
        format!("scale({scale}) ")
    };
    format!(
        "<svg x=\"{:.2}%\" y=\"{y:.1}\" overflow=\"visible\"><g transform=\"{scale}translate(-8 -8)\" color=\"{}\">\
         <circle cx=\"8\" cy=\"8\" r=\"9.6\" fill=\"#fff\"/><use href=\"#mk{}\" width=\"16\" height=\"16\"/></g></svg>",
        percent(ratio),
        colour(criterion.verdict),
        letter(criterion.verdict)
    )
}
