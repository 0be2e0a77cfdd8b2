//! Published single values of benchmarks, and the solution that consists of one of them.
//!
//! The data are references/published-references.csv: value, half width of what its digits say, the very problem, the point,
//! the source and whether the value was seen, recomputed or remembered.

use super::body::Body;
use super::catalogue::Entry;
use super::description::Description;
use super::given::{Form, Given, ParameterEntry, refuse};
use super::known_value::KnownQuantity;
use super::solution::{ErrorBound, ExactSolution, Kinematics, Refusal, State, Total};
use crate::materials::MaterialKind;
use crate::mechanics::{Dimension, Point, UnitSystem};
use std::sync::OnceLock;

const DATA: &str = include_str!("../../references/published-references.csv");

/// One published value.
#[derive(Debug, Clone, PartialEq)]
pub struct Row {
    pub id: String,
    /// The problem as a suite writes it; empty where no exact solution of truebore has it.
    pub problem: String,
    pub materials: String,
    /// Name of a total, or `ux` to `szx` at the point.
    pub quantity: String,
    pub point: Option<Point>,
    /// Unit of the point; empty where the problem has no units.
    pub length_unit: String,
    pub value: f64,
    /// Half a unit of the last digit that is trusted.
    pub half_width: f64,
    /// Unit of the value; empty where the problem has no units.
    pub unit: String,
    pub source: String,
    /// seen, recomputed or from memory.
    pub flag: String,
    /// Geometry, material and load in words.
    pub note: String,
}

impl Row {
    /// Name of the exact solution whose problem it is.
    pub fn solution(&self) -> Option<&str> {
        let name = self
            .problem
            .trim_start_matches(['{', ' '])
            .split(':')
            .next()?;
        (!name.is_empty()).then_some(name)
    }

    /// What the value is measured in.
    pub fn dimension(&self) -> Dimension {
        KnownQuantity::of(&self.quantity, Some(Point::new(0.0, 0.0, 0.0)))
            .map_or(Dimension::None, |q| q.dimension())
    }
}

/// All rows, in file order.
pub fn rows() -> &'static [Row] {
    static ROWS: OnceLock<Vec<Row>> = OnceLock::new();
    ROWS.get_or_init(read)
}

/// A row that cannot be read is left out, which a test would notice.
fn read() -> Vec<Row> {
    let mut reader = csv::Reader::from_reader(DATA.as_bytes());
    let rows = reader.records().filter_map(|record| {
        let record = record.ok()?;
        let text = |i: usize| record.get(i).map(str::to_string);
        let number = |i: usize| record.get(i)?.parse::<f64>().ok();
        Some(Row {
            id: text(0)?,
            problem: text(1)?,
            materials: text(2)?,
            quantity: text(3)?,
            point: number(4)
                .zip(number(5))
                .zip(number(6))
                .map(|((x, y), z)| Point::new(x, y, z)),
            length_unit: text(7)?,
            value: number(8)?,
            half_width: number(9)?,
            unit: text(10)?,
            source: text(11)?,
            flag: text(12)?,
            note: text(13)?,
        })
    });
    rows.collect()
}

pub(super) const ENTRY: Entry = Entry {
    name: "published",
    title: "One published value of a benchmark, with the digits its source gives",
    parameters: &[ParameterEntry::required(
        "value",
        Form::Name,
        "id of a value of references/published-references.csv; its note is the problem to model",
    )],
    kinematics: Kinematics::Finite,
    material_kinds: &[MaterialKind::Incompressible],
    range: "the very problem of the source; the suite's units are those of the note where it has none; judged by known-value",
    sources: &["named beside each value"],
    checks: &[
        "values that an exact solution has are reproduced, tests/published.rs; the others are as printed or recomputed",
    ],
    build: |given| Ok(Box::new(Published::new(given)?)),
};

/// One published value as a solution without fields.
#[derive(Debug, Clone)]
pub struct Published {
    row: &'static Row,
}

impl Published {
    /// The value of that id.
    pub fn new(given: &Given) -> Result<Self, Refusal> {
        let id = given.text("value").unwrap_or_default();
        let Some(row) = rows().iter().find(|row| row.id == id) else {
            let ids: Vec<_> = rows().iter().map(|row| row.id.as_str()).collect();
            let message = format!("there is no published value \"{id}\"");
            return Err(refuse(
                "value",
                message,
                format!("one of: {}", ids.join(", ")),
            ));
        };
        if !row.problem.is_empty() {
            let message = format!("{id} belongs to a problem that has an exact solution");
            let hint = format!(
                "state that problem, {}, with `reference: published`",
                row.problem
            );
            return Err(refuse("value", message, hint));
        }
        Ok(Self { row })
    }
}

/// A reference of single numbers has no field.
pub(super) fn no_field() -> Refusal {
    refuse(
        "",
        "the reference is a single number, not a field".to_string(),
        "judge it by known-value",
    )
}

impl ExactSolution for Published {
    fn at(&self, _point: Point) -> Result<State, Refusal> {
        Err(no_field())
    }

    fn has_fields(&self) -> bool {
        false
    }

    fn totals(&self) -> &[Total] {
        &[]
    }

    fn body(&self) -> Body {
        Body::Free { hole: 0.0 }
    }

    fn bound(&self) -> ErrorBound {
        let relative = self.row.half_width / self.row.value.abs();
        ErrorBound {
            displacement: relative,
            stress: relative,
            totals: relative,
        }
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::Finite
    }

    fn method(&self) -> String {
        format!("published value, {} ({})", self.row.source, self.row.flag)
    }

    fn description(&self, _units: &UnitSystem) -> Description {
        Description {
            body: format!("as the source states it: {}", self.row.note),
            load: "as the source states it".to_string(),
            modelling: vec![format!(
                "{} is judged, as the source gives it",
                self.row.quantity
            )],
            ..Description::default()
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::collections::BTreeSet;

    // Red when a row is broken and would be left out in silence.
    #[test]
    fn every_row_is_read_once_and_is_complete() {
        assert_eq!(
            rows().len(),
            DATA.lines().filter(|l| !l.is_empty()).count() - 1
        );
        let ids: BTreeSet<_> = rows().iter().map(|row| &row.id).collect();
        assert_eq!(ids.len(), rows().len());
        for row in rows() {
            assert!(row.half_width > 0.0 && row.value.is_finite(), "{}", row.id);
            assert!(!row.source.is_empty() && !row.note.is_empty(), "{}", row.id);
            assert!(["seen", "recomputed", "from memory"].contains(&row.flag.as_str()));
            assert!(
                KnownQuantity::of(&row.quantity, row.point).is_ok(),
                "{}",
                row.id
            );
            assert_eq!(row.problem.is_empty(), row.solution().is_none());
        }
    }
}
