//! From what was measured on each mesh to series over the levels, with their orders.

use super::criteria::expected_order;
use super::plan::CasePlan;
use crate::convergence::{fit_order, pair_order};
use crate::norms::Measured;
use crate::norms::catalogue::{self, Measure};
use crate::verdict::outcome::{Kind, LevelValue, MeasureSeries, OrderFit};

/// One level of a case, as far as series need it.
#[derive(Debug)]
pub struct LevelData<'a> {
    pub name: &'a str,
    pub h: Option<f64>,
    /// Why nothing was read, or what was measured.
    pub measured: Result<&'a [Measured], &'a str>,
}

/// All series of a case, in catalogue order: those with a number at some level, and those a criterion asks for.
pub fn build(case: &CasePlan, levels: &[LevelData]) -> Vec<MeasureSeries> {
    let mut all = Vec::new();
    for measure in catalogue::MEASURES {
        for kind in [Kind::Relative, Kind::Absolute, Kind::Value] {
            let series = one(case, measure, kind, levels);
            let asked = case
                .criteria
                .iter()
                .any(|c| c.measure == measure.name && c.kind == kind);
            if asked || series.values.iter().any(|v| v.value.is_some()) {
                all.push(series);
            }
        }
    }
    all
}

fn one(case: &CasePlan, measure: &Measure, kind: Kind, levels: &[LevelData]) -> MeasureSeries {
    let found: Vec<Result<&Measured, &str>> = levels
        .iter()
        .map(|level| {
            let list = level.measured?;
            list.iter()
                .find(|m| m.measure == measure.name)
                .ok_or("this measure was not computed")
        })
        .collect();
    let mut values: Vec<LevelValue> = Vec::with_capacity(levels.len());
    for (level, found) in levels.iter().zip(&found) {
        values.push(level_value(level.name, *found, kind));
    }
    if kind != Kind::Value {
        add_orders(&mut values, levels);
    }
    let fit = (kind != Kind::Value)
        .then(|| fit(&values, levels))
        .flatten();
    let first = found.iter().find_map(|f| f.as_ref().ok());
    let unit = match kind {
        Kind::Relative => "1".to_string(),
        Kind::Absolute | Kind::Value => first.map_or_else(String::new, |m| m.unit.clone()),
    };
    MeasureSeries {
        measure: measure.name.to_string(),
        title: measure.title.to_string(),
        label: measure.label.to_string(),
        kind,
        unit,
        expected_order: match kind {
            Kind::Value => None,
            Kind::Relative | Kind::Absolute => {
                expected_order(measure, case.element.as_ref(), &case.stated_orders)
            }
        },
        values,
        fit,
        note: found
            .iter()
            .rev()
            .find_map(|f| f.as_ref().ok().and_then(|m| m.note.clone())),
    }
}

fn level_value(level: &str, found: Result<&Measured, &str>, kind: Kind) -> LevelValue {
    let empty = LevelValue {
        level: level.to_string(),
        value: None,
        reason: None,
        exact: None,
        observed_order: None,
        place: None,
    };
    let measured = match found {
        Ok(measured) => measured,
        Err(why) => {
            return LevelValue {
                reason: Some(why.to_string()),
                ..empty
            };
        }
    };
    let number = match kind {
        Kind::Relative => measured.relative.clone(),
        Kind::Absolute => measured.absolute.clone(),
        Kind::Value => match (measured.value, &measured.absolute) {
            (Some(value), _) => Ok(value),
            (None, Err(why)) => Err(why.clone()),
            (None, Ok(_)) => {
                Err("this measure is an error and has no value of its own".to_string())
            }
        },
    };
    let finite = number.and_then(|v| {
        if v.is_finite() {
            Ok(v)
        } else {
            Err("not a finite number".to_string())
        }
    });
    match finite {
        Ok(value) => LevelValue {
            value: Some(value),
            exact: measured.exact,
            place: measured.place.clone(),
            ..empty
        },
        Err(why) => LevelValue {
            reason: Some(why),
            exact: measured.exact.filter(|v| v.is_finite()),
            ..empty
        },
    }
}

fn add_orders(values: &mut [LevelValue], levels: &[LevelData]) {
    for i in 1..values.len() {
        let point = |j: usize| Some((levels[j].h?, values[j].value?));
        if let (Some(coarse), Some(fine)) = (point(i - 1), point(i)) {
            values[i].observed_order = pair_order(coarse, fine).ok();
        }
    }
}

fn fit(values: &[LevelValue], levels: &[LevelData]) -> Option<OrderFit> {
    let points: Vec<(f64, f64)> = values
        .iter()
        .zip(levels)
        .filter_map(|(value, level)| Some((level.h?, value.value?)))
        .collect();
    let fit = fit_order(&points).ok()?;
    let all_finite = fit.order.is_finite() && fit.log_constant.is_finite();
    all_finite.then_some(OrderFit {
        order: fit.order,
        log_constant: fit.log_constant,
        standard_error: fit.standard_error.filter(|v| v.is_finite()),
        half_width: fit.half_width.filter(|v| v.is_finite()),
        levels: fit.levels as u32,
    })
}
