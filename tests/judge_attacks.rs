//! Numbers made to talk the judge into a pass that is not deserved.

use truebore::convergence::{fit_order, pair_order};
use truebore::verdict::Verdict::{self, Fail, Inconclusive, NotRun, Pass};
use truebore::verdict::judge::{Criterion, Evidence, judge};
use truebore::verdict::outcome::{Bound, Judged, Kind, LevelValue, MeasureSeries, OrderFit};

/// A series as the run makes it, mesh sizes halved from level to level; `None` is a missing number.
fn series(kind: Kind, exact: f64, numbers: &[Option<f64>]) -> MeasureSeries {
    let size = |i: usize| 0.5_f64.powi(i as i32);
    let order = |i: usize| {
        let (coarse, fine) = (numbers[i.checked_sub(1)?]?, numbers[i]?);
        pair_order((size(i - 1), coarse), (size(i), fine)).ok()
    };
    let values = (0..numbers.len()).map(|i| LevelValue {
        level: (i + 1).to_string(),
        value: numbers[i],
        reason: numbers[i].is_none().then(|| "no points.csv".to_string()),
        exact: Some(exact),
        observed_order: order(i),
        place: None,
    });
    let points: Vec<(f64, f64)> = (0..numbers.len())
        .filter_map(|i| Some((size(i), numbers[i]?)))
        .collect();
    let fit = fit_order(&points).ok().map(|fit| OrderFit {
        order: fit.order,
        log_constant: fit.log_constant,
        standard_error: fit.standard_error,
        half_width: fit.half_width,
        levels: fit.levels as u32,
    });
    MeasureSeries {
        measure: "stress-L2".into(),
        title: "Stress, L2".into(),
        label: "stress".into(),
        kind,
        unit: "1".into(),
        expected_order: Some(2.0),
        values: values.collect(),
        fit,
        note: None,
    }
}

fn criterion(judged: Judged, bound: Bound, limit: f64) -> Criterion {
    Criterion {
        text: "attacked".into(),
        judged,
        measure: "stress-L2".into(),
        title: "Stress, L2".into(),
        kind: Kind::Relative,
        bound,
        limit,
        limit_text: limit.to_string(),
        unit: "1".into(),
        theory: Some(2.0),
        by_fit: false,
        level: None,
    }
}

fn judged(criterion: &Criterion, series: &MeasureSeries, reference_bound: f64) -> Verdict {
    let outcome = judge(
        criterion,
        Evidence {
            series: Some(series),
            reference_bound,
            reference_size: 0.0,
            suspicion: None,
        },
    );
    assert!(!outcome.reason.is_empty());
    assert!(outcome.ratio.is_none_or(|r| r.is_finite()));
    outcome.verdict
}

fn relative(numbers: &[f64]) -> MeasureSeries {
    let numbers: Vec<Option<f64>> = numbers.iter().copied().map(Some).collect();
    series(Kind::Relative, 1.0, &numbers)
}

#[test]
fn an_error_at_its_limit() {
    let at_most = criterion(Judged::Error, Bound::AtMost, 1e-3);
    let next = 1e-3_f64.next_up();
    for (error, bound, verdict) in [
        (1e-3, 0.0, Pass),
        (next, 0.0, Fail),
        (1e-3, 1e-12, Inconclusive),
        (1e-3 - 1e-12, 5e-13, Pass),
        (1e-3 + 1e-12, 5e-13, Fail),
        (0.0, 0.0, Pass),
        (0.0, 1e-2, Inconclusive),
        (1.0, 1.0, Inconclusive),
    ] {
        let found = judged(&at_most, &relative(&[error]), bound);
        assert_eq!(found, verdict, "{error:e} +/- {bound:e}");
    }
    // the bound is relative: of an exact number of 1000 it is 1000 times as large
    let absolute = Criterion {
        kind: Kind::Absolute,
        ..at_most
    };
    let large = series(Kind::Absolute, 1000.0, &[Some(0.9e-3)]);
    assert_eq!(judged(&absolute, &large, 1e-6), Inconclusive);
    assert_eq!(judged(&absolute, &large, 1e-9), Pass);
}

#[test]
fn numbers_that_are_none() {
    for number in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
        for bound in [Bound::AtMost, Bound::AtLeast] {
            let c = criterion(Judged::Value, bound, 1.0);
            assert_eq!(judged(&c, &relative(&[number]), 0.0), NotRun, "{number}");
        }
        let c = criterion(Judged::Order, Bound::Within, 0.2);
        let found = judged(&c, &relative(&[1e-2, number]), 0.0);
        assert_ne!(found, Pass, "{number}");
    }
    let c = criterion(Judged::Error, Bound::AtMost, 1e-3);
    assert_ne!(judged(&c, &relative(&[1e-9]), f64::NAN), Pass);
    assert_ne!(judged(&c, &relative(&[1e-9]), f64::INFINITY), Pass);
    let none = judge(
        &c,
        Evidence {
            series: None,
            reference_bound: 0.0,
            reference_size: 0.0,
            suspicion: None,
        },
    );
    assert_eq!(none.verdict, NotRun);
    let c = Criterion {
        level: Some("7".into()),
        ..c
    };
    assert_eq!(judged(&c, &relative(&[1e-9]), 0.0), NotRun);
}

#[test]
fn orders_that_are_none() {
    let within = criterion(Judged::Order, Bound::Within, 0.2);
    let at_least = criterion(Judged::Order, Bound::AtLeast, 1.5);
    for (errors, verdict, why) in [
        (&[1e-2, 2.5e-3][..], Pass, "sound"),
        (&[1e-2], Inconclusive, "one level"),
        (&[1e-2, 1e-2], Fail, "no progress at all"),
        (&[1e-2, 4e-2], Fail, "grows"),
        (&[2.5e-3, 1e-2, 2.5e-3], Inconclusive, "grows, then falls"),
        (
            &[1e-2, 2.5e-3, 0.0],
            Inconclusive,
            "zero at the finest level",
        ),
        (
            &[0.0, 1e-2, 2.5e-3],
            Inconclusive,
            "zero at the coarsest level",
        ),
        (&[4e-14, 1e-14], Inconclusive, "noise at round-off"),
        (&[1e-12, 1e-14], Inconclusive, "into round-off"),
        (&[1e-2, 1e-2 / 3.4], Fail, "order 1.77"),
    ] {
        assert_eq!(judged(&within, &relative(errors), 0.0), verdict, "{why}");
    }
    // what the reference is not known well enough for is not an order
    assert_eq!(
        judged(&within, &relative(&[4e-9, 1e-9]), 1e-9),
        Inconclusive
    );
    assert_eq!(judged(&at_least, &relative(&[1e-2, 2.5e-3]), 0.0), Pass);
    assert_eq!(judged(&at_least, &relative(&[1e-2, 4e-3]), 0.0), Fail);
}

#[test]
fn orders_with_a_missing_level() {
    let c = criterion(Judged::Order, Bound::Within, 0.2);
    let at = |numbers: &[Option<f64>]| judged(&c, &series(Kind::Relative, 1.0, numbers), 0.0);
    assert_eq!(at(&[None, Some(1e-2)]), NotRun);
    assert_eq!(at(&[Some(1e-2), None]), NotRun);
    assert_eq!(at(&[Some(4e-2), None, Some(2.5e-3)]), NotRun);
    let error = criterion(Judged::Error, Bound::AtMost, 1e-2);
    let series = series(Kind::Relative, 1.0, &[Some(1e-3), None]);
    assert_eq!(
        judged(&error, &series, 0.0),
        NotRun,
        "the finest level is the one that counts"
    );
}

#[test]
fn fitted_orders() {
    let c = Criterion {
        by_fit: true,
        ..criterion(Judged::Order, Bound::Within, 0.2)
    };
    let at = |errors: &[f64]| judged(&c, &relative(errors), 0.0);
    assert_eq!(at(&[16e-3, 4e-3, 1e-3, 2.5e-4]), Pass);
    assert_eq!(
        at(&[4e-3, 1e-3]),
        Inconclusive,
        "a line through two points is no evidence"
    );
    assert_eq!(at(&[16e-3, 4e-3, 0.0]), Inconclusive);
    assert_eq!(at(&[1e-3, 4e-3, 16e-3]), Fail);
    assert_ne!(at(&[16e-3, 1e-3, 4e-3, 1e-3]), Pass, "scatter");
    let errors = [Some(16e-3), Some(4e-3), Some(1e-3), None];
    let gap = series(Kind::Relative, 1.0, &errors);
    assert_eq!(judged(&c, &gap, 0.0), NotRun, "a level without a number");
}
