//! `reference: published`: the published values of the very problem that a case states.
//!
//! The rows of references/published-references.csv carry the problem they belong to as a suite would write it. A row is a
//! case's only if its problem, built in the case's units, is the case's own: same solution, same numbers.

use super::parameters::Context;
use crate::exact::known_value::{Known, KnownQuantity, KnownValue};
use crate::exact::published::{self, Row};
use crate::exact::{ExactSolution, Given, Value};
use crate::mechanics::UnitSystem;
use crate::suite::model::CaseEntry;
use crate::suite::{Quantity, Reader};
use crate::verdict::outcome::InputRecord;

/// Relative difference of two numbers that are the same number.
const SAME: f64 = 1e-12;

/// The known values of a case: the solution's own, and the published ones where it asks for them.
pub fn of_case(
    entry: &CaseEntry,
    solution: &str,
    given: &Given,
    exact: &dyn ExactSolution,
    context: Context,
    reader: &mut Reader,
) -> Vec<KnownValue> {
    let mut known = exact.known_values().to_vec();
    if let Some(id) = given.text("value").filter(|_| solution == "published") {
        let row = published::rows().iter().find(|row| row.id == id);
        known.extend(row.and_then(|row| in_units(row, context.units)));
    }
    let Some(reference) = &entry.reference else {
        return known;
    };
    if reference.value != "published" {
        if reference.value != "exact" {
            let found = format!("unknown reference \"{}\"", reference.value);
            super::plan::refuse(
                reference,
                "unknown-word",
                found,
                "one of: exact, published",
                reader,
            );
        }
        return known;
    }
    let rows = published::rows().iter();
    let of_entry: Vec<&Row> = rows
        .filter(|row| row.solution() == Some(solution))
        .collect();
    known.extend(
        of_entry
            .iter()
            .filter(|row| same_problem(row, given, context.units))
            .filter_map(|row| in_units(row, context.units)),
    );
    if known.is_empty() {
        let ids: Vec<_> = of_entry.iter().map(|row| row.id.as_str()).collect();
        let expected = match ids.as_slice() {
            [] => format!("a solution with published values; there is none for {solution}"),
            ids => format!("the problem of one of: {}", ids.join(", ")),
        };
        let found = "no published value belongs to this very problem".to_string();
        super::plan::refuse(reference, "no-published-value", found, &expected, reader);
    }
    known
}

/// Whether the row's problem, read in these units, gives the same numbers.
fn same_problem(row: &Row, given: &Given, units: &UnitSystem) -> bool {
    let text = format!(
        "suite: row\nunits: {{ length: {}, stress: {} }}\nmaterials: {}\ncases: [ {{ id: row, problem: {} }} ]\n",
        units.length.name, units.stress.name, row.materials, row.problem
    );
    let Ok(plan) = super::plan::read(&text, "published-references.csv") else {
        return false;
    };
    plan.cases
        .first()
        .is_some_and(|case| same(&case.given, given))
}

fn same(a: &Given, b: &Given) -> bool {
    let covered = |a: &Given, b: &Given| {
        a.iter().all(|(name, value)| match b.get(name) {
            Some(other) => same_value(value, other),
            // a load that is not there is zero
            None => matches!(value, Value::Number(0.0)),
        })
    };
    covered(a, b) && covered(b, a)
}

fn same_value(a: &Value, b: &Value) -> bool {
    let near = |x: f64, y: f64| (x - y).abs() <= SAME * x.abs().max(y.abs());
    match (a, b) {
        (Value::Number(x), Value::Number(y)) => near(*x, *y),
        (Value::Numbers(x), Value::Numbers(y)) => {
            x.len() == y.len() && x.iter().zip(y).all(|(x, y)| near(*x, *y))
        }
        (Value::Material(x), Value::Material(y)) => same_material(x, y),
        (Value::Materials(x), Value::Materials(y)) => {
            x.len() == y.len() && x.iter().zip(y).all(|(x, y)| same_material(x, y))
        }
        (Value::Variant(x, a), Value::Variant(y, b)) => x == y && same(a, b),
        (Value::Block(a), Value::Block(b)) => same(a, b),
        _ => a == b,
    }
}

fn same_material(a: &crate::materials::Material, b: &crate::materials::Material) -> bool {
    use crate::materials::Constant;
    let (p, q) = (a.parameters(), b.parameters());
    let near = |x: f64, y: f64| (x - y).abs() <= SAME * x.abs().max(y.abs());
    a.name() == b.name()
        && p.len() == q.len()
        && p.iter().zip(&q).all(|(p, q)| {
            p.name == q.name
                && match (&p.value, &q.value) {
                    (Constant::Number(x), Constant::Number(y)) => near(*x, *y),
                    (Constant::List(x), Constant::List(y)) => {
                        x.len() == y.len() && x.iter().zip(y).all(|(x, y)| near(*x, *y))
                    }
                    (x, y) => x == y,
                }
        })
}

/// The row's value in these units.
pub fn in_units(row: &Row, units: &UnitSystem) -> Option<KnownValue> {
    let convert = |number: f64| {
        let text = format!("{number} {}", row.unit);
        let quantity = Quantity::parse(text.trim()).ok()?;
        quantity.within(row.dimension(), units).ok()
    };
    let point = match row.point {
        Some(point) => {
            let text = |x: f64| format!("{x} {}", row.length_unit);
            let read = |x: f64| {
                let quantity = Quantity::parse(text(x).trim()).ok()?;
                quantity
                    .within(crate::mechanics::Dimension::Length, units)
                    .ok()
            };
            let [x, y, z] = point.to_array().map(read);
            Some(crate::mechanics::Point::new(x?, y?, z?))
        }
        None => None,
    };
    Some(KnownValue {
        id: row.id.clone(),
        quantity: KnownQuantity::of(&row.quantity, point).ok()?,
        known: Known::Number {
            value: convert(row.value)?,
            half_width: convert(row.half_width)?,
        },
        dimension: row.dimension(),
        source: format!("{} ({})", row.source, row.flag),
    })
}

/// Files that the reference rests on.
pub fn tables(given: &Given) -> Vec<InputRecord> {
    let files = given.iter().filter_map(|(_, value)| match value {
        Value::Table(table) => Some(InputRecord {
            file: table.file.clone(),
            sha256: table.sha256.clone(),
            bytes: table.bytes,
            rows: Some(table.rows as u64),
        }),
        _ => None,
    });
    files.collect()
}
