//! The sentences of the reports, so that page and terminal say the same.
//!
//! The list of verdict words is closed: pass, fail, inconclusive, not run.

use super::margin::{self, Margin};
use super::numbers::{NBSP, Number, THIN, with_uncertainty};
use super::text::{clean, count, escape, sentence};
use crate::verdict::Verdict;
use crate::verdict::outcome::{Bound, CaseOutcome, Counts, CriterionOutcome, Judged, Outcome};

/// How numbers and foreign text are written where a sentence ends up.
#[derive(Clone, Copy)]
pub struct Voice {
    pub number: fn(&Number) -> String,
    pub text: fn(&str) -> String,
}

/// Plain text.
pub const PLAIN: Voice = Voice {
    number: Number::ascii,
    text: clean,
};

/// Markup.
pub const HTML: Voice = Voice {
    number: Number::html,
    text: escape,
};

/// The verdict on the whole suite in two short sentences.
pub fn verdict_sentence(outcome: &Outcome) -> (&'static str, String) {
    let counts = outcome.counts;
    match outcome.verdict {
        Verdict::Fail => ("Not qualified.", failing(counts)),
        Verdict::Pass => (
            "Qualified within the stated range.",
            all_pass(counts.total()),
        ),
        Verdict::Inconclusive | Verdict::NotRun => ("Not decided.", open_counts(counts)),
    }
}

fn cases(number: usize) -> String {
    count(number, "case", "cases")
}

fn failing(counts: Counts) -> String {
    let verb = if counts.fail == 1 { "fails" } else { "fail" };
    format!("{} of {} {verb}.", counts.fail, cases(counts.total()))
}

fn all_pass(number: usize) -> String {
    match number {
        1 => "The one case passes.".to_string(),
        2 => "Both cases pass.".to_string(),
        _ => format!("All {number} cases pass."),
    }
}

fn open_counts(counts: Counts) -> String {
    let were = |number| if number == 1 { "was" } else { "were" };
    let are = |number| if number == 1 { "is" } else { "are" };
    let mut parts = Vec::new();
    if counts.inconclusive > 0 {
        parts.push(format!(
            "{} {} inconclusive",
            cases(counts.inconclusive),
            are(counts.inconclusive)
        ));
    }
    if counts.not_run > 0 {
        let number = if parts.is_empty() {
            cases(counts.not_run)
        } else {
            counts.not_run.to_string()
        };
        parts.push(format!("{number} {} not run", were(counts.not_run)));
    }
    match parts.is_empty() {
        true => "No case was judged.".to_string(),
        false => format!("{}.", parts.join(", ")),
    }
}

/// What holds and what does not, in at most two sentences.
pub fn summary(outcome: &Outcome, voice: Voice) -> String {
    let all: Vec<_> = outcome
        .cases
        .iter()
        .flat_map(|case| case.criteria.iter().map(move |c| (case, c)))
        .collect();
    if all.is_empty() {
        return "The suite has no criteria.".to_string();
    }
    let holding = all
        .iter()
        .filter(|(_, c)| c.verdict == Verdict::Pass)
        .count();
    let first = match (holding, all.len()) {
        (1, 1) => "The one criterion is met.".to_string(),
        (holding, total) if holding == total => format!("All {total} criteria are met."),
        (holding, total) => format!(
            "{holding} of {} met.",
            count(total, "criterion is", "criteria are")
        ),
    };
    let worst = all.iter().min_by(|a, b| margin::attention(a.1, b.1));
    let second = worst.and_then(|(case, criterion)| extreme(case, criterion, voice));
    match second {
        Some(second) => format!("{first} {second}"),
        None => first,
    }
}

/// The farthest beyond its limit, or the one nearest to it.
fn extreme(case: &CaseOutcome, criterion: &CriterionOutcome, voice: Voice) -> Option<String> {
    let phrase = Margin::of(criterion).phrase(voice.number, "")?;
    let lead = match criterion.verdict {
        Verdict::Fail => "Farthest beyond its limit",
        Verdict::Pass => "The smallest margin",
        Verdict::Inconclusive | Verdict::NotRun => return None,
    };
    let (title, id) = ((voice.text)(&name(criterion)), (voice.text)(&case.id));
    Some(format!("{lead}: {title} of {id}, {phrase}."))
}

/// What is judged, in words: the measure, and whether it is its order.
pub fn name(criterion: &CriterionOutcome) -> String {
    match criterion.judged {
        Judged::Order if !criterion.title.contains("order") => {
            format!("{}, order", criterion.title)
        }
        _ => criterion.title.clone(),
    }
}

/// The value of a criterion with its uncertainty and unit.
pub fn value(criterion: &CriterionOutcome, voice: Voice) -> Option<String> {
    // in percent where the limit is, so that the two can be compared at a glance
    let percent = criterion.limit_text.trim().ends_with('%');
    let scale = if percent { 100.0 } else { 1.0 };
    let value = scale * criterion.value?;
    let order = (criterion.judged == Judged::Order).then_some(2);
    // an uncertainty below half of the third digit would only lengthen the number
    let visible = |u: &f64| *u > 5e-4 * value.abs();
    let number = match criterion.uncertainty.map(|u| scale * u).filter(visible) {
        Some(half_width) => {
            let (value, half_width) = with_uncertainty(value, half_width, order);
            let sign = format!("{THIN}±{THIN}");
            format!(
                "{}{sign}{}",
                (voice.number)(&value),
                (voice.number)(&half_width)
            )
        }
        None => (voice.number)(&order.map_or(Number::three(value), |_| Number::fixed(value, 2))),
    };
    Some(match percent {
        true => format!("{number}{NBSP}%"),
        false => with_unit(number, &criterion.unit, voice),
    })
}

/// The limit as the suite wrote it; an order's as "≥ 3 − 0.2".
pub fn limit(criterion: &CriterionOutcome, voice: Voice) -> String {
    // a limit that was written with its unit is printed as it was written
    let written = criterion.limit_text.trim();
    let has_unit = written.ends_with('%') || written.contains(char::is_whitespace);
    let number = limit_number(&criterion.limit_text, voice);
    let text = if has_unit {
        number
    } else {
        with_unit(number, &criterion.unit, voice)
    };
    match (criterion.bound, criterion.theory) {
        (Bound::AtMost, _) => text,
        (Bound::AtLeast, _) => format!("≥{THIN}{text}"),
        (Bound::Within, Some(theory)) => {
            format!(
                "≥{THIN}{}{THIN}−{THIN}{text}",
                (voice.number)(&Number::exact(theory))
            )
        }
        (Bound::Within, None) => format!("theory{THIN}−{THIN}{text}"),
    }
}

/// Typesets "1e-4" as a power of ten and "0.1 %" with its space kept, anything else as it is.
fn limit_number(text: &str, voice: Voice) -> String {
    let trimmed = text.trim();
    if let Some(percent) = trimmed.strip_suffix('%') {
        return format!("{}{NBSP}%", (voice.text)(percent.trim()));
    }
    match trimmed
        .split_once(['e', 'E'])
        .map(|(digits, power)| (digits, power.parse::<i32>()))
    {
        Some((digits, Ok(power))) if digits.parse::<f64>().is_ok() => {
            (voice.number)(&Number::written(digits, power))
        }
        _ => (voice.text)(trimmed),
    }
}

fn with_unit(number: String, unit: &str, voice: Voice) -> String {
    match unit {
        "1" | "" => number,
        unit if number.ends_with(unit) => number,
        unit => format!("{number}{NBSP}{}", (voice.text)(unit)),
    }
}

/// What a case is asked: always a question with yes or no.
pub fn question(case: &CaseOutcome) -> String {
    let meshes = match case.levels.len() {
        0 | 1 => "the one mesh".to_string(),
        n => format!("{n} meshes"),
    };
    let limits = match case.criteria.len() {
        0 => return "No criterion was set for this case.".to_string(),
        1 => "its one limit".to_string(),
        2 => "both limits".to_string(),
        n => format!("all {n} limits"),
    };
    format!("Does the solution on {meshes} keep to {limits} against the exact solution?")
}

/// The answer: Yes. / No. / Not decided. / Not run., then the numbers.
pub fn answer(case: &CaseOutcome, voice: Voice) -> String {
    let reason = case
        .reason
        .as_deref()
        .map(|reason| sentence(&(voice.text)(reason)));
    let tightest = margin::tightest(case);
    let told = tightest.map(|criterion| told(criterion, voice));
    match case.verdict {
        Verdict::Pass => join(["Yes.".into(), reason.or(told).unwrap_or_default()]),
        Verdict::Fail => join([
            "No.".into(),
            reason.or(told).unwrap_or_default(),
            rest(case),
        ]),
        Verdict::Inconclusive => {
            let why = tightest.map(|criterion| undecided(criterion, voice));
            join([
                "Not decided.".into(),
                reason.or(why).unwrap_or_default(),
                rest(case),
            ])
        }
        Verdict::NotRun => {
            let why = tightest.map(|criterion| undecided(criterion, voice));
            let end = "This counts against the suite.".to_string();
            join(["Not run.".into(), reason.or(why).unwrap_or_default(), end])
        }
    }
}

fn join<const N: usize>(parts: [String; N]) -> String {
    let parts: Vec<_> = parts.into_iter().filter(|part| !part.is_empty()).collect();
    parts.join(" ")
}

/// "Stress, L2 is 0.0541 at level 4, the limit 10⁻³ times 54."
pub fn told(criterion: &CriterionOutcome, voice: Voice) -> String {
    let title = (voice.text)(&name(criterion));
    let Some(value) = value(criterion, voice) else {
        return undecided(criterion, voice);
    };
    let level = criterion
        .level
        .as_deref()
        .map_or(String::new(), |l| format!(" at level {}", (voice.text)(l)));
    let bare = with_unit(
        limit_number(&criterion.limit_text, voice),
        &criterion.unit,
        voice,
    );
    let margin = Margin::of(criterion).phrase(voice.number, &bare);
    let margin = margin.unwrap_or_else(|| format!("the limit is {}", limit(criterion, voice)));
    let expected = match (criterion.bound, criterion.theory) {
        (Bound::Within, Some(theory)) => format!(
            " where {} is expected",
            (voice.number)(&Number::exact(theory))
        ),
        _ => String::new(),
    };
    let tightest = if criterion.verdict == Verdict::Pass {
        "Tightest: "
    } else {
        ""
    };
    format!("{tightest}{title} is {value}{level}{expected}, {margin}.")
}

fn undecided(criterion: &CriterionOutcome, voice: Voice) -> String {
    sentence(&format!(
        "{}: {}",
        (voice.text)(&name(criterion)),
        (voice.text)(&criterion.reason)
    ))
}

/// How many of the criteria are not met, when it is more than one.
fn rest(case: &CaseOutcome) -> String {
    let open = case
        .criteria
        .iter()
        .filter(|c| c.verdict != Verdict::Pass)
        .count();
    match open {
        0 | 1 => String::new(),
        n if n == case.criteria.len() => format!("Not one of the {n} criteria is met."),
        _ => format!("{open} of {} criteria are not met.", case.criteria.len()),
    }
}

/// The remark every reader of demo data must see.
pub const INVENTED: &str = "Invented scenario: demonstration data, no real part or product.";

/// Statement and consequence, the statement in front. The first ones hold for every report.
pub fn cautions(outcome: &Outcome) -> Vec<(String, String)> {
    let fixed = [
        (
            "Verification of a code is not validation for a use.",
            "Agreement with an exact solution shows that equations are solved right, not that they are the right \
             equations for a part, its material or its loads.",
        ),
        (
            "Pressure-bearing and medical parts defer to local codes and licensed practice.",
            "Nothing here replaces the design rules, tests and approvals that apply where the part is used.",
        ),
        (
            "The statement covers what was judged and nothing beyond.",
            "Geometry, material, load level, element, solver version and settings other than those listed are not covered.",
        ),
    ];
    let mut out: Vec<_> = fixed
        .iter()
        .map(|(a, b)| (a.to_string(), b.to_string()))
        .collect();
    let single: Vec<_> = outcome
        .cases
        .iter()
        .filter(|case| case.levels.len() == 1)
        .map(|case| clean(&case.id))
        .collect();
    if !single.is_empty() {
        let named = match single.len() {
            1..=5 => single.join(", "),
            n => format!("{n} cases"),
        };
        let verb = if single.len() == 1 { "rests" } else { "rest" };
        out.push((
            format!("{named} {verb} on one mesh."),
            "An order of convergence is not known there.".to_string(),
        ));
    }
    out
}
