//! Load steps: which rows belong to the step that is judged.

use super::log::Log;
use super::table::{Next, Row, Table};
use crate::input::{Finding, Place};
use std::collections::BTreeSet;

/// Chooses the rows of one table.
#[derive(Debug, Clone, Default)]
pub(crate) struct StepFilter {
    column: Option<usize>,
    step: Option<i64>,
}

impl StepFilter {
    /// Without a column every row is taken.
    pub fn new(column: Option<usize>, step: Option<i64>) -> Self {
        Self { column, step }
    }

    /// True for a row of the step; a step that is no number goes to the log.
    pub fn wants(&self, row: &Row, log: &mut Log) -> bool {
        let Some(column) = self.column else {
            return true;
        };
        let here = row.integer(column, log);
        here.is_some() && (self.step.is_none() || here == self.step)
    }
}

/// Every step of a table, by reading its step column only; `None` when it has none. Findings of other kinds
/// come up when the table is read.
pub(crate) fn steps_of(table: &mut Table, log: &mut Log) -> Option<BTreeSet<i64>> {
    let column = table.header.find("step", log)?;
    let mut steps = BTreeSet::new();
    let mut ignored = Log::new();
    table.scan(&mut ignored, &mut |row, log| {
        steps.extend(row.integer(column, log));
        Next::More
    });
    Some(steps)
}

/// Checks that `step` is among the steps of a table.
pub(crate) fn check_step(file: &str, steps: &BTreeSet<i64>, step: i64, log: &mut Log) {
    if !steps.contains(&step) {
        let what = format!("there is no step {step}");
        let finding = Finding::refused("step-found", Place::file(file).field("step"), what);
        log.add(finding.expected(format!("steps found: {}", listed(steps))));
    }
}

/// The first and last few steps.
pub(crate) fn listed(steps: &BTreeSet<i64>) -> String {
    let words: Vec<String> = steps.iter().map(i64::to_string).collect();
    if words.len() <= 8 {
        words.join(", ")
    } else {
        format!(
            "{}, ..., {}",
            words[..3].join(", "),
            words[words.len() - 2..].join(", ")
        )
    }
}
