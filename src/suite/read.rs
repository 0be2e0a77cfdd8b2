//! From the YAML tree to the typed suite, reporting every problem on the way.

use super::block::{Block, Reader};
use super::model::*;
use super::tree::{Node, Value};
use super::{criteria, export, materials, tree};
use crate::input::Finding;
use crate::mechanics::UnitSystem;
use std::collections::BTreeMap;

/// Reads a suite from its text; `file` is the name messages use.
///
/// # Errors
/// Every problem of the file's form, in file order. What words mean (does the material exist, is the load
/// possible) is checked by `run::plan`.
pub fn read(text: &str, file: &str) -> Result<Suite, Vec<Finding>> {
    match read_all(text, file) {
        (Some(suite), findings) if findings.is_empty() => Ok(suite),
        (_, findings) => Err(findings),
    }
}

/// As much of a suite as can be read, and every problem of its form.
pub fn read_all(text: &str, file: &str) -> (Option<Suite>, Vec<Finding>) {
    let root = match tree::parse(text, file) {
        Ok(root) => root,
        Err(finding) => return (None, vec![finding]),
    };
    let mut reader = Reader::new(file);
    let suite = read_suite(&root, &mut reader);
    let mut findings = reader.findings;
    findings.sort_by_key(|f| (f.place.line, f.place.column));
    (suite, findings)
}

fn read_suite(root: &Node, reader: &mut Reader) -> Option<Suite> {
    let mut block = reader.block(root, "")?;
    let id = block
        .required("suite", reader, "a short name, used for the report folder")
        .and_then(|n| identifier(n, "suite", reader));
    let title = block
        .optional("title")
        .and_then(|n| reader.text(n, "title"));
    let subject = block
        .optional("subject")
        .and_then(|n| reader.text(n, "subject"));
    let invented = block
        .optional("invented")
        .and_then(|n| reader.flag(n, "invented"));
    let units = block
        .required(
            "units",
            reader,
            "{ length: mm, stress: MPa } or other units",
        )
        .and_then(|n| export::read_units(n, "units", reader));
    let materials = block
        // single published numbers need none
        .optional("materials")
        .map(|n| materials::read_all(n, reader))
        .unwrap_or_default();
    let accept = criteria::read_list(block.optional("accept"), "accept", reader);
    let export = export::read_keys(&mut block, reader);
    let cases = block.required("cases", reader, "a list of cases");
    let cases = cases
        .map(|n| read_cases(n, &accept, &export, reader))
        .unwrap_or_default();
    block.finish(reader);
    let id = id?;
    Some(Suite {
        title: title.unwrap_or_else(|| id.value.clone()),
        id: id.value,
        subject,
        invented: invented.unwrap_or(false),
        units: units.unwrap_or_else(UnitSystem::si),
        materials,
        cases,
    })
}

/// A word that can be part of a file name: letters, digits, `-`, `_`, `.`.
fn identifier(node: &Node, path: &str, reader: &mut Reader) -> Option<Placed<String>> {
    let text = reader.text(node, path)?;
    let fine = |c: char| c.is_ascii_alphanumeric() || matches!(c, '-' | '_' | '.');
    let starts_well = text.starts_with(|c: char| c.is_ascii_alphanumeric());
    if text.len() > 120 || !text.chars().all(fine) || !starts_well {
        let finding = reader.refuse(
            "identifier",
            node,
            path,
            format!("\"{text}\" cannot name a folder"),
        );
        finding.expected =
            "letters, digits, '-', '_' and '.', beginning with a letter or digit".into();
        return None;
    }
    Some(placed(text, node, path))
}

/// A value at the place of its node.
pub(super) fn placed<T>(value: T, node: &Node, path: &str) -> Placed<T> {
    Placed {
        value,
        line: node.line,
        column: node.column,
        path: path.to_string(),
    }
}

fn read_cases(
    node: &Node,
    accept: &[CriterionEntry],
    export: &ExportEntry,
    reader: &mut Reader,
) -> Vec<CaseEntry> {
    let Value::List(items) = &node.value else {
        let found = format!("found {}", node.kind());
        reader.refuse("wrong-type", node, "cases", found).expected =
            "a list of cases, each beginning with `- id:`".into();
        return Vec::new();
    };
    if items.is_empty() {
        reader
            .refuse("no-cases", node, "cases", "the list of cases is empty")
            .expected = "at least one case".into();
    }
    let mut seen = BTreeMap::new();
    let mut cases = Vec::new();
    for (i, item) in items.iter().enumerate() {
        let path = format!("cases[{i}]");
        let Some(case) = read_case(item, &path, accept, export, reader) else {
            continue;
        };
        if let Some(first) = seen.insert(case.id.value.clone(), case.id.line) {
            let place = reader.place(case.id.line, case.id.column, &case.id.path);
            let found = format!(
                "case id \"{}\" is already used at line {first}",
                case.id.value
            );
            reader
                .push(Finding::refused("duplicate-case-id", place, found))
                .hint = "give each case its own id".into();
        }
        cases.push(case);
    }
    cases
}

fn read_case(
    node: &Node,
    path: &str,
    accept: &[CriterionEntry],
    export: &ExportEntry,
    reader: &mut Reader,
) -> Option<CaseEntry> {
    let mut block = reader.block(node, path)?;
    let id_path = block.path_of("id");
    let id = block.required("id", reader, "a short name, unique in the suite");
    let id = id.and_then(|n| identifier(n, &id_path, reader));
    let title = text(&mut block, "title", reader).map(|t| t.value);
    let problem = read_problem(&mut block, reader);
    let reference = text(&mut block, "reference", reader);
    let element = take(&mut block, "element").map(|(n, at)| placed(n.clone(), n, &at));
    let section = quantity(&mut block, "section", reader);
    let axial_length = quantity(&mut block, "axial-length", reader);
    let node_tolerance = quantity(&mut block, "node-tolerance", reader);
    let load_factor = quantity(&mut block, "load-factor", reader);
    let results = text(&mut block, "results", reader);
    let levels = words(&mut block, "levels", reader);
    let h = quantities(&mut block, "h", reader);
    let accept_path = block.path_of("accept");
    let mut criteria_list = criteria::read_list(block.optional("accept"), &accept_path, reader);
    criteria_list.extend(accept.iter().cloned());
    let expected_orders = expected_orders(&mut block, reader);
    let mut own_export = export::read_keys(&mut block, reader);
    own_export.units =
        take(&mut block, "units").and_then(|(n, at)| export::read_units(n, &at, reader));
    block.finish(reader);
    let (problem, parameters) = problem?;
    Some(CaseEntry {
        id: id?,
        title,
        problem,
        parameters,
        reference,
        element,
        section,
        axial_length,
        node_tolerance,
        load_factor,
        results,
        levels,
        h,
        accept: criteria_list,
        expected_orders,
        export: own_export.or(export),
    })
}

fn read_problem(block: &mut Block, reader: &mut Reader) -> Option<(Placed<String>, Placed<Node>)> {
    let path = block.path_of("problem");
    let node = block.required(
        "problem",
        reader,
        "an exact solution with its parameters, e.g. pressurised-tube: {...}",
    )?;
    let (name, parameters) = reader.variant(node, &path)?;
    let at = format!("{path}.{name}");
    let Some(parameters) = parameters else {
        reader
            .refuse(
                "missing-key",
                node,
                &at,
                format!("`{name}` has no parameters"),
            )
            .expected = "a block of parameters below it".into();
        return None;
    };
    if !matches!(parameters.value, Value::Map(_)) {
        let found = format!("found {}", parameters.kind());
        reader.refuse("wrong-type", parameters, &at, found).expected =
            "a block of parameters".into();
        return None;
    }
    Some((
        placed(name, node, &at),
        placed(parameters.clone(), parameters, &at),
    ))
}

fn take<'a>(block: &mut Block<'a>, key: &'static str) -> Option<(&'a Node, String)> {
    let path = block.path_of(key);
    block.optional(key).map(|node| (node, path))
}

fn text(block: &mut Block, key: &'static str, reader: &mut Reader) -> Option<Placed<String>> {
    let (node, path) = take(block, key)?;
    reader
        .text(node, &path)
        .map(|text| placed(text, node, &path))
}

fn quantity(
    block: &mut Block,
    key: &'static str,
    reader: &mut Reader,
) -> Option<Placed<super::Quantity>> {
    let (node, path) = take(block, key)?;
    reader.quantity(node, &path).map(|q| placed(q, node, &path))
}

fn words(block: &mut Block, key: &'static str, reader: &mut Reader) -> Vec<Placed<String>> {
    let Some((node, path)) = take(block, key) else {
        return Vec::new();
    };
    let mut list: Vec<Placed<String>> = Vec::new();
    for (i, item) in reader.items(node).into_iter().enumerate() {
        let at = format!("{path}[{i}]");
        let Some(word) = identifier(item, &at, reader) else {
            continue;
        };
        if list.iter().any(|earlier| earlier.value == word.value) {
            let found = format!("\"{}\" is listed twice", word.value);
            reader.refuse("duplicate-level", item, &at, found).expected = "each level once".into();
        }
        list.push(word);
    }
    list
}

fn quantities(
    block: &mut Block,
    key: &'static str,
    reader: &mut Reader,
) -> Vec<Placed<super::Quantity>> {
    let Some((node, path)) = take(block, key) else {
        return Vec::new();
    };
    let items = reader.items(node).into_iter().enumerate();
    items
        .filter_map(|(i, item)| {
            let at = format!("{path}[{i}]");
            reader.quantity(item, &at).map(|q| placed(q, item, &at))
        })
        .collect()
}

fn expected_orders(
    block: &mut Block,
    reader: &mut Reader,
) -> Vec<(Placed<String>, super::Quantity)> {
    let Some((node, path)) = take(block, "expected-orders") else {
        return Vec::new();
    };
    let Value::Map(entries) = &node.value else {
        let found = format!("found {}", node.kind());
        reader.refuse("wrong-type", node, &path, found).expected =
            "measures with their orders".into();
        return Vec::new();
    };
    let mut orders = Vec::new();
    for (key, value) in entries {
        let at = format!("{path}.{}", key.name);
        if let Some(order) = reader.quantity(value, &at) {
            orders.push((placed(key.name.clone(), value, &at), order));
        }
    }
    orders
}

#[cfg(test)]
mod tests {
    use super::*;

    const GOOD: &str = "
suite: demo
units: { length: mm, stress: MPa }
materials:
  soft: { neo-Hookean: { mu: 400 kPa } }
cases:
  - id: wall
    problem:
      pressurised-tube: { inner-radius: 8, outer-radius: [10, 12], ends: plane-strain, material: soft, inner-pressure: 0.03 }
    element: { displacement: quad9, pressure: quad4 }
    section: 1/4
    results: results/{outer-radius}/level-{level}
    levels: [1, 2]
    accept:
      - { error: displacement-L2, at-most: 0.1 % }
      - { order: displacement-L2, within: 0.2 }
";

    #[test]
    fn a_complete_suite_is_read() {
        let suite = read(GOOD, "suite.yaml").unwrap();
        assert_eq!(suite.id, "demo");
        assert_eq!(suite.materials[0].law.value, "neo-Hookean");
        let case = &suite.cases[0];
        assert_eq!(case.levels.len(), 2);
        assert_eq!(case.accept[0].subject, Subject::Error);
        assert_eq!(case.accept[1].kind, LimitKind::Within);
        assert_eq!(case.accept[0].limit.value.text, "0.1 %");
    }

    #[test]
    fn all_problems_come_at_once_each_at_its_line() {
        let broken = GOOD
            .replace("section: 1/4", "secton: 1/4")
            .replace("within: 0.2", "inside: 0.2")
            .replace("stress: MPa", "stress: mm")
            .replace("{ mu: 400 kPa }", "[1]");
        let findings = read(&broken, "suite.yaml").unwrap_err();
        let lines: Vec<_> = findings.iter().filter_map(|f| f.place.line).collect();
        for line in [3, 5, 11, 16] {
            assert!(lines.contains(&line), "{line} not in {lines:?}");
        }
        assert!(findings.iter().any(|f| f.hint.contains("section")));
    }
}
