//! Observed orders against theory or a floor: on the finest pair of levels, or fitted over all of them.

use super::Verdict;
use super::judge::{Criterion, Evidence, missing, without_number};
use super::outcome::{Bound, CriterionOutcome, Kind, LevelValue, MeasureSeries};
use crate::convergence::observed::ROUND_OFF;

/// The finest pair up to `index`.
pub(super) fn judge_pair(
    criterion: &Criterion,
    series: &MeasureSeries,
    index: usize,
    evidence: Evidence,
) -> CriterionOutcome {
    let level = series.values[index].level.as_str();
    if index == 0 {
        let reason = "an order needs at least 2 levels, there is 1 up to here";
        return without_number(criterion, Some(level), Verdict::Inconclusive, reason);
    }
    let used = &series.values[..=index];
    if let Some(gap) = used[index - 1..].iter().find(|v| v.value.is_none()) {
        let reason = format!("no error at level {}: {}", gap.level, missing(gap));
        return without_number(criterion, Some(level), Verdict::NotRun, &reason);
    }
    if let Some(reason) = at_round_off(&used[index - 1..], series.kind, evidence.reference_bound) {
        return without_number(criterion, Some(level), Verdict::Inconclusive, &reason);
    }
    let Some(order) = used[index].observed_order else {
        let reason = "no order between the two finest levels: an error is zero, or the mesh does not get finer (list levels coarsest first)";
        return without_number(criterion, Some(level), Verdict::Inconclusive, reason);
    };
    doubted(
        judge_order(criterion, level, order, 0.0, evidence.suspicion),
        used,
    )
}

/// A pass that rests on levels which are not in the asymptotic range is none.
fn doubted(mut outcome: CriterionOutcome, used: &[LevelValue]) -> CriterionOutcome {
    if outcome.verdict == Verdict::Pass
        && let Some(reason) = not_monotone(used).or_else(|| too_fast(&outcome))
    {
        outcome.verdict = Verdict::Inconclusive;
        outcome.reason = format!("{}, but {reason}", outcome.reason);
    }
    outcome
}

/// Legitimate superconvergence seen so far stays below this above theory (nodes of quadratic elements: about one).
const SUPERCONVERGENCE: f64 = 1.5;

/// An error that falls much faster than theory says that the coarser mesh is no mesh to judge by.
fn too_fast(outcome: &CriterionOutcome) -> Option<String> {
    let (order, theory) = (outcome.value?, outcome.theory?);
    (order > theory + SUPERCONVERGENCE).then(|| {
        format!("no element of order {theory} falls like that: the coarser level is not in the asymptotic range, or wrong")
    })
}

/// The order fitted over all levels.
pub(super) fn judge_fit(
    criterion: &Criterion,
    series: &MeasureSeries,
    evidence: Evidence,
) -> CriterionOutcome {
    let level = series.values.last().map(|v| v.level.as_str());
    if let Some(gap) = series.values.iter().find(|v| v.value.is_none()) {
        let reason = format!("no error at level {}: {}", gap.level, missing(gap));
        return without_number(criterion, level, Verdict::NotRun, &reason);
    }
    if let Some(reason) = at_round_off(&series.values, series.kind, evidence.reference_bound) {
        return without_number(criterion, level, Verdict::Inconclusive, &reason);
    }
    match series
        .fit
        .map(|fit| (fit.order, fit.half_width, fit.levels))
    {
        Some((order, Some(half_width), _)) => {
            let level = level.unwrap_or("");
            let judged = judge_order(criterion, level, order, half_width, evidence.suspicion);
            doubted(judged, &series.values)
        }
        Some((_, None, levels)) => {
            let reason = format!("a fitted order needs at least 3 levels, there are {levels}");
            without_number(criterion, level, Verdict::Inconclusive, &reason)
        }
        None => {
            let reason = "a fitted order needs at least 3 levels with an error above zero";
            without_number(criterion, level, Verdict::Inconclusive, reason)
        }
    }
}

/// Judges an order known to within `half_width`.
fn judge_order(
    criterion: &Criterion,
    level: &str,
    order: f64,
    half_width: f64,
    suspicion: Option<&str>,
) -> CriterionOutcome {
    let (least, shortfall_scale) = match (criterion.bound, criterion.theory) {
        (Bound::Within, Some(theory)) => (theory - criterion.limit, criterion.limit),
        (Bound::Within, None) => {
            let reason = "no order is expected: the case does not declare its element";
            return without_number(criterion, Some(level), Verdict::Inconclusive, reason);
        }
        _ => (criterion.limit, criterion.limit),
    };
    let verdict = if order - half_width >= least {
        Verdict::Pass
    } else if order + half_width < least {
        Verdict::Fail
    } else {
        Verdict::Inconclusive
    };
    let ratio = match criterion.theory {
        Some(theory) if criterion.bound == Bound::Within => {
            ((theory - order) / shortfall_scale).max(0.0)
        }
        _ => shortfall_scale / order,
    };
    let mut reason = match (criterion.bound, criterion.theory) {
        (Bound::Within, Some(theory)) => {
            format!(
                "order {order:.2} where {theory} less at most {} is asked",
                criterion.limit_text
            )
        }
        _ => format!(
            "order {order:.2} where at least {} is asked",
            criterion.limit_text
        ),
    };
    if half_width > 0.0 {
        reason = format!("{reason} (95 % interval +/- {half_width:.2})");
    }
    if verdict != Verdict::Pass
        && let Some(suspicion) = suspicion
    {
        reason = format!("{reason}; {suspicion}");
    }
    let above = criterion.theory.filter(|theory| order > theory + 0.2);
    CriterionOutcome {
        value: Some(order),
        uncertainty: Some(half_width),
        ratio: Some(ratio).filter(|r| r.is_finite() && *r >= 0.0),
        note: above.map(|theory| format!("falls faster than theory ({order:.2} against {theory})")),
        ..without_number(criterion, Some(level), verdict, &reason)
    }
}

fn at_round_off(values: &[LevelValue], kind: Kind, reference_bound: f64) -> Option<String> {
    let floor = ROUND_OFF.max(10.0 * reference_bound);
    let low = values.iter().find(|entry| {
        let size = if kind == Kind::Relative {
            1.0
        } else {
            entry.exact.unwrap_or(0.0).abs()
        };
        entry.value.is_some_and(|v| v.abs() <= floor * size)
    })?;
    Some(format!(
        "the error at level {} is at round-off: no order can be read from it",
        low.level
    ))
}

fn not_monotone(values: &[LevelValue]) -> Option<String> {
    let grown = values
        .windows(2)
        .find(|pair| match (pair[0].value, pair[1].value) {
            (Some(coarse), Some(fine)) => fine.abs() >= coarse.abs(),
            _ => false,
        })?;
    Some(format!(
        "the error does not fall from level {} to {}",
        grown[0].level, grown[1].level
    ))
}
