//! How far a value is from its limit: "the limit divided by 233", "the limit times 54".
//!
//! Only the notation is made here; the ratio and the verdict are those of the outcome. Where the value is
//! uncertain the margin is counted from the end of its interval: the far end of a pass, the near end of a fail.

use super::numbers::{Number, THIN};
use crate::verdict::Verdict;
use crate::verdict::outcome::{Bound, CaseOutcome, CriterionOutcome};
use std::cmp::Ordering;

/// A margin, before it is put in words.
#[derive(Debug, Clone, PartialEq)]
pub enum Margin {
    /// The limit divided by this.
    Divided(f64),
    /// The limit times this.
    Times(f64),
    At,
    /// Nothing to divide by: no error at all, or an order above theory.
    Clear(&'static str),
    /// The interval lies on both sides.
    Spans,
    None,
}

impl Margin {
    pub fn of(criterion: &CriterionOutcome) -> Self {
        match (end_ratio(criterion), criterion.verdict) {
            (None, _) => Self::None,
            (Some(_), Verdict::Inconclusive) => Self::Spans,
            (Some(ratio), _) if ratio > 1.0 => Self::Times(ratio),
            (Some(1.0), _) => Self::At,
            (Some(ratio), _) if ratio > 0.0 => Self::Divided(1.0 / ratio),
            _ if criterion.bound == Bound::Within => Self::Clear("above theory"),
            _ if criterion.value == Some(0.0) => Self::Clear("zero"),
            _ => Self::Clear("clear of it"),
        }
    }

    /// For a table cell: `× 54`, `÷ 233`. `number` writes the ratio.
    pub fn cell(&self, number: fn(&Number) -> String) -> String {
        match self {
            Self::Divided(by) => format!("÷{THIN}{}", number(&Number::ratio(*by))),
            Self::Times(by) => format!("×{THIN}{}", number(&Number::ratio(*by))),
            Self::At => "at the limit".to_string(),
            Self::Clear(words) => (*words).to_string(),
            Self::Spans => "spans it".to_string(),
            Self::None => "—".to_string(),
        }
    }

    /// For a sentence: "the limit times 54".
    pub fn phrase(&self, number: fn(&Number) -> String) -> Option<String> {
        match self {
            Self::Divided(by) => Some(format!(
                "the limit divided by {}",
                number(&Number::ratio(*by))
            )),
            Self::Times(by) => Some(format!("the limit times {}", number(&Number::ratio(*by)))),
            Self::At => Some("exactly the limit".to_string()),
            _ => None,
        }
    }
}

/// The ratio to the limit at the end of the interval that decides, or of the value when it is certain.
pub fn end_ratio(criterion: &CriterionOutcome) -> Option<f64> {
    let ratio = criterion.ratio?;
    let towards = match criterion.verdict {
        Verdict::Pass => 1.0,
        Verdict::Fail => -1.0,
        Verdict::Inconclusive | Verdict::NotRun if ratio > 1.0 => -1.0,
        Verdict::Inconclusive | Verdict::NotRun => 1.0,
    };
    let half_width = criterion.uncertainty.unwrap_or(0.0);
    let moved = match criterion.bound {
        Bound::AtMost | Bound::Within => ratio + towards * half_width / criterion.limit.abs(),
        Bound::AtLeast => criterion.limit / (criterion.value? - towards * half_width),
    };
    Some(if half_width > 0.0 && moved.is_finite() {
        moved
    } else {
        ratio
    })
}

/// What needs attention first: worst verdict, then farthest beyond or nearest to the limit.
pub fn attention(a: &CriterionOutcome, b: &CriterionOutcome) -> Ordering {
    let ratio = |c: &CriterionOutcome| end_ratio(c).unwrap_or(f64::NEG_INFINITY);
    a.verdict
        .cmp(&b.verdict)
        .then_with(|| ratio(b).total_cmp(&ratio(a)))
}

/// The criterion a case is named by in tables.
pub fn tightest(case: &CaseOutcome) -> Option<&CriterionOutcome> {
    case.criteria.iter().min_by(|a, b| attention(a, b))
}
