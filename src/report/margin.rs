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
pub struct Margin {
    size: Size,
    bound: Bound,
}

#[derive(Debug, Clone, PartialEq)]
enum Size {
    /// Inside by this factor.
    Inside(f64),
    /// Beyond by this factor.
    Beyond(f64),
    At,
    /// Nothing to divide by: no error at all, or an order above theory.
    Clear(&'static str),
    /// The interval lies on both sides.
    Spans,
    None,
}

impl Margin {
    pub fn of(criterion: &CriterionOutcome) -> Self {
        let size = match (end_ratio(criterion), criterion.verdict) {
            (None, _) => Size::None,
            (Some(_), Verdict::Inconclusive) => Size::Spans,
            (Some(ratio), _) if ratio > 1.0 => Size::Beyond(ratio),
            (Some(1.0), _) => Size::At,
            (Some(ratio), _) if ratio > 1e-300 => Size::Inside(1.0 / ratio),
            _ if criterion.bound == Bound::Within => Size::Clear("above theory"),
            _ if criterion.value == Some(0.0) => Size::Clear("zero"),
            _ => Size::Clear("clear of it"),
        };
        Self {
            size,
            bound: criterion.bound,
        }
    }

    /// For a table cell headed "Value is limit": `× 54`, `÷ 233`; for a lower limit with its side, `÷ 2.5 below`.
    /// Of an order it is the shortfall below theory that is compared. `number` writes the factor.
    pub fn cell(&self, number: fn(&Number) -> String) -> String {
        let least = self.bound == Bound::AtLeast;
        let factor = |by: f64| number(&Number::ratio(by));
        match self.size {
            Size::Inside(by) if least => format!("×{THIN}{} above", factor(by)),
            Size::Beyond(by) if least => format!("÷{THIN}{} below", factor(by)),
            Size::Inside(by) => format!("÷{THIN}{}", factor(by)),
            Size::Beyond(by) => format!("×{THIN}{}", factor(by)),
            Size::At => "at the limit".to_string(),
            Size::Clear(words) => words.to_string(),
            Size::Spans => "spans it".to_string(),
            Size::None => "—".to_string(),
        }
    }

    /// For a sentence: "the limit 10⁻³ times 54"; `limit` may be empty.
    pub fn phrase(&self, number: fn(&Number) -> String, limit: &str) -> Option<String> {
        let factor = |by: f64| number(&Number::ratio(by));
        let subject = match (self.bound, limit) {
            (Bound::Within, "") => "its shortfall is the allowed one".to_string(),
            (Bound::Within, limit) => format!("its shortfall is the allowed {limit}"),
            (_, "") => "the limit".to_string(),
            (_, limit) => format!("the limit {limit}"),
        };
        match (&self.size, self.bound) {
            (Size::Inside(by), Bound::AtLeast) => {
                Some(format!("above {subject} by a factor of {}", factor(*by)))
            }
            (Size::Beyond(by), Bound::AtLeast) => {
                Some(format!("below {subject} by a factor of {}", factor(*by)))
            }
            (Size::Inside(by), _) => Some(format!("{subject} divided by {}", factor(*by))),
            (Size::Beyond(by), _) => Some(format!("{subject} times {}", factor(*by))),
            (Size::At, _) => Some(format!("exactly {subject}")),
            (Size::Clear(_) | Size::Spans | Size::None, _) => None,
        }
    }

    /// True when there is nothing to say.
    pub fn is_none(&self) -> bool {
        self.size == Size::None
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
