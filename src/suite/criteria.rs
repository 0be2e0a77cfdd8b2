//! The `accept` list: limits set in advance.

use super::block::{Block, Reader, shown};
use super::model::{CriterionEntry, LimitKind, Placed, Subject};
use super::read::placed;
use super::tree::{Node, Value};
use crate::input::Finding;

/// Reads an `accept` list; a missing one is empty.
pub(super) fn read_list(
    node: Option<&Node>,
    path: &str,
    reader: &mut Reader,
) -> Vec<CriterionEntry> {
    let Some(node) = node else { return Vec::new() };
    let Value::List(items) = &node.value else {
        let found = format!("found {}", node.kind());
        reader.refuse("wrong-type", node, path, found).expected = "a list of criteria".into();
        return Vec::new();
    };
    let entries = items.iter().enumerate();
    entries
        .filter_map(|(i, item)| read_one(item, &format!("{path}[{i}]"), reader))
        .collect()
}

fn read_one(node: &Node, path: &str, reader: &mut Reader) -> Option<CriterionEntry> {
    let mut block = reader.block(node, path)?;
    let subjects = [
        ("error", Subject::Error),
        ("value", Subject::Value),
        ("order", Subject::Order),
    ];
    let subject = one_of(&mut block, &subjects, node, reader);
    let limits = [
        ("at-most", LimitKind::AtMost),
        ("at-least", LimitKind::AtLeast),
        ("within", LimitKind::Within),
    ];
    let limit = one_of(&mut block, &limits, node, reader);
    let level = block.optional("level").and_then(|n| {
        let at = format!("{path}.level");
        reader.text(n, &at).map(|text| placed(text, n, &at))
    });
    let by_fit = by_fit(&mut block, reader);
    block.finish(reader);
    let (subject, measure_node, measure_path) = subject?;
    let (kind, limit_node, limit_path) = limit?;
    let measure = reader.text(measure_node, &measure_path)?;
    let measure = placed(measure, measure_node, &measure_path);
    let limit = reader.quantity(limit_node, &limit_path)?;
    let entry = CriterionEntry {
        subject,
        measure,
        kind,
        limit: placed(limit, limit_node, &limit_path),
        level,
        by_fit,
    };
    sensible(&entry, limit_node, reader).then_some(entry)
}

/// `by: fit` or `by: pair` (the default).
fn by_fit(block: &mut Block, reader: &mut Reader) -> bool {
    let path = block.path_of("by");
    let Some(node) = block.optional("by") else {
        return false;
    };
    match node.scalar() {
        Some("fit") => true,
        Some("pair") => false,
        _ => {
            let found = format!("found {}", shown(node));
            reader.refuse("unknown-word", node, &path, found).expected = "fit or pair".into();
            false
        }
    }
}

/// Exactly one of several keys, with its meaning.
fn one_of<'a, T: Copy>(
    block: &mut Block<'a>,
    choices: &[(&'static str, T)],
    node: &Node,
    reader: &mut Reader,
) -> Option<(T, &'a Node, String)> {
    let mut found = Vec::new();
    for (key, meaning) in choices {
        let path = block.path_of(key);
        if let Some(value) = block.optional(key) {
            found.push((*meaning, value, path));
        }
    }
    if found.len() == 1 {
        return found.pop();
    }
    let names: Vec<_> = choices.iter().map(|(key, _)| format!("`{key}:`")).collect();
    let said = if found.is_empty() {
        "none is given"
    } else {
        "more than one is given"
    };
    let place = reader.place(node.line, node.column, &block.path);
    reader
        .push(Finding::refused(
            "criterion-form",
            place,
            format!("of {} {said}", names.join(", ")),
        ))
        .expected = "exactly one, e.g. { error: displacement-L2, at-most: 1e-4 }".into();
    None
}

/// Refuses limits that cannot be meant.
fn sensible(entry: &CriterionEntry, node: &Node, reader: &mut Reader) -> bool {
    let Placed {
        value: limit, path, ..
    } = &entry.limit;
    let (found, expected) = match (entry.subject, entry.kind) {
        (Subject::Error, LimitKind::AtLeast | LimitKind::Within) => (
            "an error can only be limited from above".to_string(),
            "`at-most:`",
        ),
        (Subject::Value, LimitKind::Within) => (
            "`within:` is for orders".to_string(),
            "`at-most:` or `at-least:` for a value",
        ),
        (Subject::Order, LimitKind::AtMost) => (
            "a high order is no fault".to_string(),
            "`within:` (of the theoretical order) or `at-least:`",
        ),
        (Subject::Error, _) | (Subject::Order, LimitKind::Within) if limit.number <= 0.0 => (
            format!("the limit {} is not positive", limit.text),
            "a number above zero",
        ),
        (Subject::Order, _) if limit.unit.is_some() => (
            format!("an order has no unit, found {}", limit.text),
            "a bare number such as 0.2",
        ),
        (Subject::Order, _) if limit.number <= 0.0 => (
            format!("an order of {} is met by an error that grows", limit.text),
            "a number above zero, e.g. `at-least: 1.8`",
        ),
        (Subject::Order, _) if entry.by_fit && entry.level.is_some() => (
            "`by: fit` takes all levels, so that `level:` says nothing".to_string(),
            "one of the two",
        ),
        (Subject::Error | Subject::Value, _) if entry.by_fit => (
            "`by: fit` is for orders".to_string(),
            "no `by:` here, or `order:`",
        ),
        _ => return true,
    };
    reader.refuse("criterion-form", node, path, found).expected = expected.to_string();
    false
}
