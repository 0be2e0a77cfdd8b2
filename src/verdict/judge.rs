//! One criterion against the measured series: a verdict with its reason.
//!
//! ```text
//! pass if |error| + U <= limit      fail if |error| - U > limit      else inconclusive
//! ```
//! Decision rule: ISO/IEC 17025:2017, 7.8.6, and JCGM 106:2012 (from memory). U is the bound of the exact solution.
//! Orders are judged on the finest pair of levels and need an error that falls all the way (Oberkampf & Roy 2010,
//! section 5); an order above theory is a remark, not a failure.

use super::outcome::{Bound, CriterionOutcome, Judged, Kind, LevelValue, MeasureSeries};
use super::{Verdict, order};

/// A criterion with everything looked up.
#[derive(Debug, Clone, PartialEq)]
pub struct Criterion {
    /// Unique within the case, e.g. `error displacement-L2 at most 1e-4`.
    pub text: String,
    pub judged: Judged,
    pub measure: String,
    pub title: String,
    /// Which series it reads: relative errors unless the limit carries a unit.
    pub kind: Kind,
    pub bound: Bound,
    /// In the series' unit.
    pub limit: f64,
    pub limit_text: String,
    pub unit: String,
    /// The order theory expects, for `within`.
    pub theory: Option<f64>,
    /// Judge the least-squares order over all levels instead of the finest pair.
    pub by_fit: bool,
    /// `None`: the finest.
    pub level: Option<String>,
}

/// What was measured, as far as one criterion needs it.
#[derive(Debug, Clone, Copy)]
pub struct Evidence<'a> {
    pub series: Option<&'a MeasureSeries>,
    /// Relative bound of the exact solution for this measure.
    pub reference_bound: f64,
    /// What the bound is relative to where the exact number is smaller, in the series' unit: a force that is zero
    /// is still the balance of forces that are not.
    pub reference_size: f64,
    /// Appended to the reason of a failed order, e.g. that wall sides are straight.
    pub suspicion: Option<&'a str>,
}

/// Judges one criterion.
pub fn judge(criterion: &Criterion, evidence: Evidence) -> CriterionOutcome {
    let Some(series) = evidence.series else {
        return without_number(
            criterion,
            None,
            Verdict::NotRun,
            "this measure was not computed",
        );
    };
    let index = match &criterion.level {
        None => series.values.len().checked_sub(1),
        Some(level) => series.values.iter().position(|v| v.level == *level),
    };
    let Some(index) = index else {
        return without_number(criterion, None, Verdict::NotRun, "there is no such level");
    };
    match criterion.judged {
        Judged::Error | Judged::Value => judge_number(criterion, series, index, evidence),
        Judged::Order if criterion.by_fit => order::judge_fit(criterion, series, evidence),
        Judged::Order => order::judge_pair(criterion, series, index, evidence),
    }
}

pub(super) fn without_number(
    criterion: &Criterion,
    level: Option<&str>,
    verdict: Verdict,
    reason: &str,
) -> CriterionOutcome {
    CriterionOutcome {
        text: criterion.text.clone(),
        judged: criterion.judged,
        measure: criterion.measure.clone(),
        title: criterion.title.clone(),
        bound: criterion.bound,
        limit: criterion.limit,
        limit_text: criterion.limit_text.clone(),
        theory: criterion.theory,
        unit: criterion.unit.clone(),
        level: level.map(str::to_string),
        value: None,
        uncertainty: None,
        ratio: None,
        verdict,
        reason: reason.to_string(),
        note: None,
    }
}

fn judge_number(
    criterion: &Criterion,
    series: &MeasureSeries,
    index: usize,
    evidence: Evidence,
) -> CriterionOutcome {
    let entry = &series.values[index];
    let Some(value) = entry.value.filter(|v| v.is_finite()) else {
        return without_number(
            criterion,
            Some(&entry.level),
            Verdict::NotRun,
            missing(entry),
        );
    };
    let size = match series.kind {
        Kind::Relative => 1.0,
        Kind::Absolute | Kind::Value => entry
            .exact
            .unwrap_or(0.0)
            .abs()
            .max(evidence.reference_size),
    };
    let uncertainty = evidence.reference_bound * size;
    let limit = criterion.limit;
    // the distance beyond the limit, negative inside
    let beyond = match criterion.bound {
        Bound::AtLeast => limit - value,
        Bound::AtMost | Bound::Within => value - limit,
    };
    let inside = beyond + uncertainty <= 0.0;
    if inside && met_by_no_deformation(criterion, entry) {
        let said = in_words(value, criterion);
        return CriterionOutcome {
            value: Some(value),
            uncertainty: Some(uncertainty),
            ..without_number(
                criterion,
                Some(&entry.level),
                Verdict::Inconclusive,
                &format!(
                    "{said}, but a part that does not deform would meet the limit {} too",
                    criterion.limit_text
                ),
            )
        };
    }
    let verdict = if inside {
        Verdict::Pass
    } else if beyond - uncertainty > 0.0 {
        Verdict::Fail
    } else {
        Verdict::Inconclusive
    };
    let ratio = match criterion.bound {
        Bound::AtLeast => limit / value,
        Bound::AtMost | Bound::Within => value / limit,
    };
    CriterionOutcome {
        value: Some(value),
        uncertainty: Some(uncertainty),
        ratio: Some(ratio).filter(|r| r.is_finite() && *r >= 0.0),
        verdict,
        reason: number_reason(verdict, criterion, value),
        note: toothless(criterion).or_else(|| entry.place.clone()),
        ..without_number(criterion, Some(&entry.level), verdict, "")
    }
}

/// A stretch that differs from one by less than the limit cannot tell a deformed part from one that did nothing.
fn met_by_no_deformation(criterion: &Criterion, entry: &LevelValue) -> bool {
    let change = entry.exact.map_or(0.0, |exact| (exact - 1.0).abs());
    criterion.measure == "axial-stretch"
        && criterion.judged == Judged::Error
        && change > 0.0
        && change <= criterion.limit * entry.exact.unwrap_or(1.0).abs().min(1.0)
}

/// A relative limit of one or more is met by a result of zeros, and whoever reads the verdict should know.
fn toothless(criterion: &Criterion) -> Option<String> {
    let wide = criterion.judged == Judged::Error
        && criterion.kind == Kind::Relative
        && criterion.limit >= 1.0;
    wide.then(|| {
        format!(
            "a result of zeros would meet the limit {}",
            criterion.limit_text
        )
    })
}

fn number_reason(verdict: Verdict, criterion: &Criterion, value: f64) -> String {
    let bound = match criterion.bound {
        Bound::AtLeast => "at least",
        Bound::AtMost | Bound::Within => "at most",
    };
    let value = in_words(value, criterion);
    let said = format!("{value} where {bound} {} is asked", criterion.limit_text);
    match verdict {
        Verdict::Inconclusive => format!("{said}: closer than the exact solution is known"),
        _ => said,
    }
}

/// In percent where the limit is, else with its unit; three digits.
fn in_words(value: f64, criterion: &Criterion) -> String {
    let plain = |v: f64| match v.abs() {
        0.0 => "0".to_string(),
        size if (1e-3..1e4).contains(&size) => {
            // three significant digits: the decimals are what is left of them behind the point
            let decimals = 2 - size.log10().floor() as i32;
            format!("{v:.*}", decimals.clamp(0, 5) as usize)
        }
        _ => format!("{v:.2e}"),
    };
    if criterion.limit_text.ends_with('%') {
        return format!("{} %", plain(100.0 * value));
    }
    match criterion.unit.as_str() {
        "1" => plain(value),
        unit => format!("{} {unit}", plain(value)),
    }
}

pub(super) fn missing(entry: &LevelValue) -> &str {
    entry.reason.as_deref().unwrap_or("no number at this level")
}

#[cfg(test)]
mod tests {
    use super::*;

    fn series(errors: &[f64]) -> MeasureSeries {
        let mut values: Vec<LevelValue> = Vec::new();
        for (i, e) in errors.iter().enumerate() {
            let observed_order =
                (i > 0 && errors[i - 1] > 0.0 && *e > 0.0).then(|| (errors[i - 1] / e).log2());
            values.push(LevelValue {
                level: (i + 1).to_string(),
                value: Some(*e),
                reason: None,
                exact: Some(1.0),
                observed_order,
                place: None,
            });
        }
        MeasureSeries {
            measure: "displacement-L2".into(),
            title: String::new(),
            label: String::new(),
            kind: Kind::Relative,
            unit: "1".into(),
            expected_order: Some(3.0),
            values,
            fit: None,
            note: None,
        }
    }

    fn criterion(judged: Judged, bound: Bound, limit: f64) -> Criterion {
        Criterion {
            text: String::new(),
            judged,
            measure: "displacement-L2".into(),
            title: String::new(),
            kind: Kind::Relative,
            bound,
            limit,
            limit_text: limit.to_string(),
            unit: "1".into(),
            theory: Some(3.0),
            by_fit: false,
            level: None,
        }
    }

    fn verdict(criterion: &Criterion, errors: &[f64], reference_bound: f64) -> Verdict {
        let series = series(errors);
        judge(
            criterion,
            Evidence {
                series: Some(&series),
                reference_bound,
                reference_size: 0.0,
                suspicion: None,
            },
        )
        .verdict
    }

    fn of(criterion: &Criterion, series: Option<&MeasureSeries>) -> Verdict {
        judge(
            criterion,
            Evidence {
                series,
                reference_bound: 0.0,
                reference_size: 0.0,
                suspicion: None,
            },
        )
        .verdict
    }

    #[test]
    fn an_error_is_judged_with_the_uncertainty_of_the_reference() {
        let c = criterion(Judged::Error, Bound::AtMost, 1e-3);
        assert_eq!(verdict(&c, &[9e-4], 0.0), Verdict::Pass);
        assert_eq!(verdict(&c, &[1.1e-3], 0.0), Verdict::Fail);
        assert_eq!(verdict(&c, &[9.5e-4], 1e-4), Verdict::Inconclusive);
        assert_eq!(verdict(&c, &[1.05e-3], 1e-4), Verdict::Inconclusive);
        assert_eq!(verdict(&c, &[8e-4], 1e-4), Verdict::Pass);
    }

    #[test]
    fn a_stretch_that_no_deformation_would_have_too_is_no_evidence() {
        let mut c = criterion(Judged::Error, Bound::AtMost, 1e-3);
        c.measure = "axial-stretch".into();
        let mut s = series(&[1e-6]);
        for (exact, expected) in [
            (1.0005, Verdict::Inconclusive),
            (0.9995, Verdict::Inconclusive),
            (1.05, Verdict::Pass),
            // held at its length: the stretch is given, and one
            (1.0, Verdict::Pass),
        ] {
            s.values[0].exact = Some(exact);
            assert_eq!(of(&c, Some(&s)), expected, "{exact}");
        }
    }

    #[test]
    fn a_missing_number_is_never_a_pass() {
        let c = criterion(Judged::Error, Bound::AtMost, 1e-3);
        let mut s = series(&[1e-4]);
        s.values[0].value = None;
        assert_eq!(of(&c, Some(&s)), Verdict::NotRun);
        assert_eq!(of(&c, None), Verdict::NotRun);
        s.values[0].value = Some(f64::NAN);
        assert_eq!(of(&c, Some(&s)), Verdict::NotRun);
        s.values.clear();
        assert_eq!(of(&c, Some(&s)), Verdict::NotRun);
    }

    #[test]
    fn orders_need_levels_size_and_monotony() {
        let c = criterion(Judged::Order, Bound::Within, 0.2);
        assert_eq!(verdict(&c, &[8e-3, 1e-3], 0.0), Verdict::Pass);
        assert_eq!(verdict(&c, &[4e-3, 1e-3], 0.0), Verdict::Fail);
        assert_eq!(verdict(&c, &[1e-3], 0.0), Verdict::Inconclusive);
        assert_eq!(verdict(&c, &[8e-15, 1e-15], 0.0), Verdict::Inconclusive);
        assert_eq!(verdict(&c, &[1e-3, 8e-3, 1e-3], 0.0), Verdict::Inconclusive);
        assert_eq!(verdict(&c, &[1e-3, 1e-3], 0.0), Verdict::Fail);
        // faster than theory is a remark
        let s = series(&[16e-3, 1e-3]);
        let judged = judge(
            &c,
            Evidence {
                series: Some(&s),
                reference_bound: 0.0,
                reference_size: 0.0,
                suspicion: None,
            },
        );
        assert_eq!(judged.verdict, Verdict::Pass);
        assert!(judged.note.unwrap().contains("faster"));
    }

    #[test]
    fn without_a_declared_element_no_order_is_expected() {
        let mut c = criterion(Judged::Order, Bound::Within, 0.2);
        c.theory = None;
        assert_eq!(verdict(&c, &[8e-3, 1e-3], 0.0), Verdict::Inconclusive);
        c.bound = Bound::AtLeast;
        c.limit = 2.9;
        assert_eq!(verdict(&c, &[8e-3, 1e-3], 0.0), Verdict::Pass);
    }
}
