//! From criteria as written to criteria with everything looked up.

use super::pairing::Element;
use crate::convergence::ExpectedOrders;
use crate::mechanics::{Dimension, UnitSystem};
use crate::norms::catalogue::{self, Class, Measure};
use crate::suite::model::{CaseEntry, CriterionEntry, LimitKind, Subject};
use crate::suite::{Placed, Reader, nearest};
use crate::verdict::judge::Criterion;
use crate::verdict::outcome::{Bound, Judged, Kind};

/// The order theory expects of a measure, from the element or as the case states it.
pub fn expected_order(
    measure: &Measure,
    element: Option<&Element>,
    stated: &[(String, f64)],
) -> Option<f64> {
    if let Some((_, order)) = stated.iter().find(|(name, _)| name == measure.name) {
        return Some(*order);
    }
    element.map(|e| of_class(measure.class, e.pairing.orders()))
}

fn of_class(class: Class, orders: ExpectedOrders) -> f64 {
    match class {
        Class::Displacement => orders.displacement,
        Class::Gradient => orders.gradient,
        Class::Stress => orders.stress,
        Class::Pressure => orders.pressure,
        Class::Functional => orders.functional,
    }
}

/// The orders a case states itself.
pub fn stated_orders(case: &CaseEntry, reader: &mut Reader) -> Vec<(String, f64)> {
    let mut orders = Vec::new();
    for (name, order) in &case.expected_orders {
        if known(name, reader).is_none() {
            continue;
        }
        if order.unit.is_some() || order.number <= 0.0 {
            refuse(
                name,
                format!("\"{}\" is no order of convergence", order.text),
                "a positive number",
                reader,
            );
            continue;
        }
        orders.push((name.value.clone(), order.number));
    }
    orders
}

/// All criteria of a case.
pub fn resolve(
    case: &CaseEntry,
    element: Option<&Element>,
    stated: &[(String, f64)],
    units: &UnitSystem,
    reader: &mut Reader,
) -> Vec<Criterion> {
    let mut resolved: Vec<Criterion> = Vec::new();
    for entry in &case.accept {
        let Some(criterion) = resolve_one(case, entry, element, stated, units, reader) else {
            continue;
        };
        if resolved
            .iter()
            .any(|earlier| earlier.text == criterion.text)
        {
            refuse(
                &entry.measure,
                format!("the criterion \"{}\" stands twice", criterion.text),
                "each once",
                reader,
            );
            continue;
        }
        resolved.push(criterion);
    }
    resolved
}

fn resolve_one(
    case: &CaseEntry,
    entry: &CriterionEntry,
    element: Option<&Element>,
    stated: &[(String, f64)],
    units: &UnitSystem,
    reader: &mut Reader,
) -> Option<Criterion> {
    let measure = known(&entry.measure, reader)?;
    if let Some(level) = &entry.level
        && !case.levels.iter().any(|l| l.value == level.value)
    {
        refuse(
            level,
            format!("there is no level \"{}\" in this case", level.value),
            "one of `levels:`",
            reader,
        );
        return None;
    }
    let measure = root_mean_square(entry, measure);
    let (kind, dimension) = what_is_compared(entry, measure);
    if let Some((found, expected)) = cannot_be_compared(entry, measure, kind, element) {
        refuse(&entry.limit, found, expected, reader);
        return None;
    }
    let limit = match entry.limit.value.within(dimension, units) {
        Ok(limit) => limit,
        Err(found) => {
            refuse(
                &entry.limit,
                found,
                "a limit in the unit of the measure",
                reader,
            );
            return None;
        }
    };
    let judged = match entry.subject {
        Subject::Error => Judged::Error,
        Subject::Value => Judged::Value,
        Subject::Order => Judged::Order,
    };
    let theory = (judged == Judged::Order)
        .then(|| expected_order(measure, element, stated))
        .flatten();
    if entry.kind == LimitKind::Within && theory.is_none() {
        if case.element.is_some() && element.is_none() {
            // the element could not be read, which is said at its own place
            return None;
        }
        let found = format!("no order is known to expect of {}", measure.name);
        refuse(
            &entry.limit,
            found,
            "`element:` or `expected-orders:` in the case, or `at-least:` here",
            reader,
        );
        return None;
    }
    if let (LimitKind::Within, Some(theory)) = (entry.kind, theory)
        && limit >= theory
    {
        let found = format!(
            "within {} of the order {theory} is any order at all",
            entry.limit.value.text
        );
        let expected = format!("less than {theory}, e.g. 0.2");
        refuse(&entry.limit, found, &expected, reader);
        return None;
    }
    let unit = if kind == Kind::Relative {
        "1".to_string()
    } else {
        units.name_of(dimension)
    };
    Some(Criterion {
        text: text_of(entry, measure),
        judged,
        measure: measure.name.to_string(),
        title: title_of(judged, measure),
        kind,
        bound: match entry.kind {
            LimitKind::AtMost => Bound::AtMost,
            LimitKind::AtLeast => Bound::AtLeast,
            LimitKind::Within => Bound::Within,
        },
        limit,
        limit_text: entry.limit.value.text.clone(),
        unit,
        theory,
        by_fit: entry.by_fit,
        level: entry.level.as_ref().map(|l| l.value.clone()),
    })
}

/// An integral over the mesh, whose absolute value grows with the mesh.
fn is_norm(measure: &Measure) -> bool {
    ["-L2", "-H1", "-rms"]
        .iter()
        .any(|end| measure.name.ends_with(end))
}

/// A limit with a unit cannot be held against an integral over the mesh (mm x mm in a slice): it is held against the
/// root mean square over the mesh, which has the unit of the field.
fn root_mean_square(entry: &CriterionEntry, measure: &'static Measure) -> &'static Measure {
    let with_unit =
        entry.subject == Subject::Error && entry.limit.value.dimension() != Dimension::None;
    let sibling = measure
        .name
        .strip_suffix("-L2")
        .map(|field| format!("{field}-rms"));
    match sibling.and_then(|name| catalogue::find(&name)) {
        Some(rms) if with_unit => rms,
        _ => measure,
    }
}

/// Why a limit cannot be held against this measure, and what to write instead.
fn cannot_be_compared(
    entry: &CriterionEntry,
    measure: &Measure,
    kind: Kind,
    element: Option<&Element>,
) -> Option<(String, &'static str)> {
    let text = &entry.limit.value.text;
    if kind == Kind::Value && (is_norm(measure) || measure.name == "displacement-largest") {
        let found = format!("{} is an error and has no value of its own", measure.name);
        return Some((found, "`error:` instead of `value:`"));
    }
    let solid = element.is_some_and(|e| e.displacement.dimension() == 3);
    if measure.dimension == Dimension::Energy
        && entry.limit.value.dimension() == Dimension::Energy
        && !solid
    {
        let found = format!("\"{text}\": the energy of a slice is one per unit length");
        return Some((
            found,
            "a pure number or a percentage; a unit of energy only with a solid `element:`",
        ));
    }
    None
}

/// A bare number or a percentage limits a relative error; a limit with a unit the absolute one.
fn what_is_compared(entry: &CriterionEntry, measure: &Measure) -> (Kind, Dimension) {
    match entry.subject {
        Subject::Order => (Kind::Relative, Dimension::None),
        Subject::Value => (Kind::Value, measure.dimension),
        Subject::Error if entry.limit.value.dimension() == Dimension::None => {
            (Kind::Relative, Dimension::None)
        }
        Subject::Error => (Kind::Absolute, measure.dimension),
    }
}

fn text_of(entry: &CriterionEntry, measure: &Measure) -> String {
    let subject = match entry.subject {
        Subject::Error => "error",
        Subject::Value => "value",
        Subject::Order => "order",
    };
    let (kind, tail) = match entry.kind {
        LimitKind::AtMost => ("at most", ""),
        LimitKind::AtLeast => ("at least", ""),
        LimitKind::Within => ("within", " of theory"),
    };
    let fit = if entry.by_fit { ", all levels" } else { "" };
    let level = entry
        .level
        .as_ref()
        .map(|l| format!(", level {}", l.value))
        .unwrap_or_default();
    format!(
        "{subject} {} {kind} {}{tail}{fit}{level}",
        measure.name, entry.limit.value.text
    )
}

fn title_of(judged: Judged, measure: &Measure) -> String {
    match judged {
        Judged::Error => measure.title.to_string(),
        Judged::Value => format!("{}, value", measure.title),
        Judged::Order => format!("{}, order", measure.title),
    }
}

fn known(name: &Placed<String>, reader: &mut Reader) -> Option<&'static Measure> {
    let found = catalogue::find(&name.value);
    if found.is_none() {
        let names = || catalogue::MEASURES.iter().map(|m| m.name);
        let hint = match nearest(&name.value, names()) {
            Some(near) => format!("did you mean `{near}`?"),
            None => "`truebore catalogue` lists all measures".to_string(),
        };
        let expected = "a measure such as displacement-L2, stress-L2 or strain-energy";
        refuse(
            name,
            format!("unknown measure \"{}\"", name.value),
            expected,
            reader,
        )
        .hint = hint;
    }
    found
}

fn refuse<'r, T>(
    at: &Placed<T>,
    found: String,
    expected: &str,
    reader: &'r mut Reader,
) -> &'r mut crate::input::Finding {
    let place = reader.place(at.line, at.column, &at.path);
    reader.push(crate::input::Finding::refused("criterion", place, found).expected(expected))
}
