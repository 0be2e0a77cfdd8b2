//! Every number of a run, one row each, for spreadsheets and plotting programs.

use super::text::clean;
use crate::verdict::outcome::{CaseOutcome, LevelValue, MeasureSeries, Outcome};

const HEADER: [&str; 10] = [
    "case",
    "level",
    "h",
    "measure",
    "kind",
    "value",
    "unit",
    "exact",
    "observed_order",
    "expected_order",
];

/// One row per case, measure and level. A number that does not exist is an empty cell, never a zero.
pub fn measures_csv(outcome: &Outcome) -> String {
    let mut writer = csv::Writer::from_writer(Vec::new());
    // a Vec takes every byte: writing cannot fail
    let _ = writer.write_record(HEADER);
    for case in &outcome.cases {
        for series in &case.measures {
            for value in &series.values {
                let _ = writer.write_record(row(case, series, value));
            }
        }
    }
    let bytes = writer.into_inner().unwrap_or_default();
    String::from_utf8_lossy(&bytes).into_owned()
}

fn row(case: &CaseOutcome, series: &MeasureSeries, value: &LevelValue) -> [String; 10] {
    let h = case
        .levels
        .iter()
        .find(|level| level.level == value.level)
        .and_then(|level| level.h);
    [
        clean(&case.id),
        clean(&value.level),
        number(h),
        clean(&series.measure),
        series.kind.word().to_string(),
        number(value.value),
        clean(&series.unit),
        number(value.exact),
        number(value.observed_order),
        number(series.expected_order),
    ]
}

/// The shortest digits that read back to the same double.
fn number(value: Option<f64>) -> String {
    let text = value.map(|v| format!("{v:?}")).unwrap_or_default();
    text.strip_suffix(".0").unwrap_or(&text).to_string()
}
