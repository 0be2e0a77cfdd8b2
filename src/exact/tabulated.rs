//! A published or measured curve as the reference: a table over one total of the result set, interpolated monotonically.

use super::body::Body;
use super::catalogue::Entry;
use super::description::Description;
use super::given::{Form, Given, ParameterEntry, refuse};
use super::known_value::{Known, KnownQuantity, KnownValue};
use super::published::no_field;
use super::solution::{ErrorBound, ExactSolution, Kinematics, Refusal, State, Total};
use crate::materials::MaterialKind;
use crate::mechanics::{Dimension, Point, UnitSystem};
use crate::numerics::Monotone;

pub(super) const ENTRY: Entry = Entry {
    name: "tabulated",
    title: "A curve given as a table with its source and uncertainty",
    parameters: &[
        ParameterEntry::required(
            "table",
            Form::Table,
            "CSV file beside the suite, in the suite's units, with the columns named below and `uncertainty`",
        ),
        ParameterEntry::required(
            "over",
            Form::Name,
            "column of rising numbers, and the total of the same name in totals.csv",
        ),
        ParameterEntry::required(
            "quantity",
            Form::Name,
            "column of values: a total of totals.csv, or ux ... szx at the point",
        ),
        ParameterEntry::optional(
            "point",
            Form::Numbers(Dimension::Length),
            "",
            "X, Y, Z of the node where a displacement or a stress is taken",
        ),
        ParameterEntry::required(
            "source",
            Form::Name,
            "where the table is from, for the report",
        ),
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[MaterialKind::Incompressible],
    range: "between the first and the last row; the uncertainty is the half width of an interval for the value and enters the \
            verdict; judged by known-value",
    sources: &["Fritsch & Butland, SIAM J. Sci. Stat. Comput. 5 (1984) 300, for the interpolation"],
    checks: &[
        "the interpolation against the routine of a common numerical library, numerics/monotone.rs",
    ],
    build: |given| Ok(Box::new(Tabulated::new(given)?)),
};

/// The curve.
#[derive(Debug, Clone)]
pub struct Tabulated {
    known: Vec<KnownValue>,
    /// Largest half width against the value.
    bound: f64,
    words: String,
    source: String,
}

impl Tabulated {
    /// From a table; refuses what is no curve.
    pub fn new(given: &Given) -> Result<Self, Refusal> {
        let name = |key: &'static str| {
            let text = given.text(key).unwrap_or_default().to_string();
            if text.is_empty() {
                return Err(refuse(key, format!("{key} is missing"), ""));
            }
            Ok(text)
        };
        let (over, quantity, source) = (name("over")?, name("quantity")?, name("source")?);
        let missing = || refuse("table", "table is missing".to_string(), "");
        let table = given.table("table").ok_or_else(missing)?;
        let column = |header: &str| {
            let headers: Vec<_> = table.columns.iter().map(|(h, _)| h.as_str()).collect();
            let message = format!("{} has no column `{header}`", table.file);
            let hint = format!("it has the columns {}", headers.join(", "));
            table
                .column(header)
                .ok_or_else(|| refuse("table", message, hint))
        };
        let (x, y, half) = (column(&over)?, column(&quantity)?, column("uncertainty")?);
        if let Some(row) = half.iter().position(|u| *u < 0.0) {
            let message = format!(
                "{}: the uncertainty {} of data row {} is negative",
                table.file,
                half[row],
                row + 1
            );
            return Err(refuse(
                "table",
                message,
                "give the half width of the interval",
            ));
        }
        let rising = |row: usize| {
            let message = match (x.get(row.wrapping_sub(1)), x.get(row)) {
                (Some(before), Some(here)) => format!(
                    "{}: {over} does not rise at data row {}: {here} after {before}",
                    table.file,
                    row + 1
                ),
                _ => format!("{} has {} rows, two are needed", table.file, x.len()),
            };
            refuse(
                "table",
                message,
                "sort the rows, and keep one of equal ones",
            )
        };
        let value = Monotone::new(x, y).map_err(rising)?;
        let half_width = Monotone::new(x, half).map_err(rising)?;
        let point = point(given)?;
        let quantity = KnownQuantity::of(&quantity, point)
            .map_err(|why| refuse("point", why, "point: [X, Y, Z]"))?;
        let relative = |(y, u): (&f64, &f64)| if *y == 0.0 { 0.0 } else { u / y.abs() };
        Ok(Self {
            bound: y.iter().zip(half).map(relative).fold(0.0, f64::max),
            words: format!("{} over {over}, {} rows", table.file, x.len()),
            known: vec![KnownValue {
                id: table.file.clone(),
                dimension: quantity.dimension(),
                quantity,
                known: Known::Curve {
                    over,
                    value,
                    half_width,
                },
                source: source.clone(),
            }],
            source,
        })
    }
}

fn point(given: &Given) -> Result<Option<Point>, Refusal> {
    if given.get("point").is_none() {
        return Ok(None);
    }
    match given.numbers("point")? {
        [x, y] => Ok(Some(Point::new(*x, *y, 0.0))),
        [x, y, z] => Ok(Some(Point::new(*x, *y, *z))),
        other => {
            let message = format!("point has {} numbers", other.len());
            Err(refuse("point", message, "point: [X, Y] or [X, Y, Z]"))
        }
    }
}

impl ExactSolution for Tabulated {
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
        ErrorBound {
            displacement: self.bound,
            stress: self.bound,
            totals: self.bound,
        }
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::Finite
    }

    fn method(&self) -> String {
        format!(
            "table with uncertainty, interpolated monotonically; source: {}",
            self.source
        )
    }

    fn description(&self, _units: &UnitSystem) -> Description {
        Description {
            body: "as the source of the table states it".to_string(),
            load: format!("as the source states it: {}", self.words),
            modelling: vec![
                "export the total that the table is over, at the step that is judged".to_string(),
            ],
            ..Description::default()
        }
    }

    fn known_values(&self) -> &[KnownValue] {
        &self.known
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::given::{TableData, Value};

    fn given(x: &[f64], u: &[f64]) -> Given {
        let y: Vec<f64> = x.iter().map(|x| 10.0 + x).collect();
        let table = TableData {
            file: "curve.csv".to_string(),
            rows: x.len(),
            columns: vec![
                ("inner_pressure".to_string(), x.to_vec()),
                ("inner_radius".to_string(), y),
                ("uncertainty".to_string(), u.to_vec()),
            ],
            ..TableData::default()
        };
        let text = |t: &str| Value::Text(t.to_string());
        Given::default()
            .with("table", Value::Table(table))
            .with("over", text("inner_pressure"))
            .with("quantity", text("inner_radius"))
            .with("source", text("an invented bench"))
    }

    #[test]
    fn a_curve_answers_at_the_load_of_the_result_set() {
        let curve = Tabulated::new(&given(&[0.0, 1.0, 3.0], &[0.1, 0.2, 0.2])).unwrap();
        let known = &curve.known_values()[0].known;
        let at = |p: Option<f64>| known.at(|name| p.filter(|_| name == "inner_pressure"));
        let (value, half_width) = at(Some(2.0)).unwrap();
        assert!((value - 12.0).abs() < 1e-14 && (half_width - 0.2).abs() < 1e-14);
        assert!(at(Some(3.5)).unwrap_err().contains("outside the table"));
        assert!(at(None).unwrap_err().contains("no `inner_pressure`"));
        assert!(curve.at(Point::new(1.0, 0.0, 0.0)).is_err());
    }

    #[test]
    fn what_is_no_curve_is_refused() {
        let refused = |x: &[f64], u: &[f64]| Tabulated::new(&given(x, u)).unwrap_err().message;
        assert!(refused(&[0.0, 2.0, 1.0], &[0.1; 3]).contains("does not rise at data row 3"));
        assert!(refused(&[0.0], &[0.1]).contains("two are needed"));
        assert!(refused(&[0.0, 1.0], &[0.1, -0.1]).contains("negative"));
    }
}
