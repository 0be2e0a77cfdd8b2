//! How result sets are written: units, column names, conventions; at suite level a default for every case.

use super::block::{Block, Reader, nearest, shown};
use super::model::{ConventionsEntry, ExportEntry, Placed};
use super::read::placed;
use super::tree::{Node, Value};
use crate::mechanics::units::Unit;
use crate::mechanics::{Dimension, StressMeasure, UnitSystem};

/// The tables of the exchange format.
const TABLES: [&str; 4] = ["nodes", "elements", "points", "totals"];

/// Reads `columns`, `conventions`, `point-rule` and `step` of a suite or a case.
pub(super) fn read_keys(block: &mut Block, reader: &mut Reader) -> ExportEntry {
    let path = block.path_of("columns");
    let columns = block
        .optional("columns")
        .map(|n| read_columns(n, &path, reader))
        .unwrap_or_default();
    let path = block.path_of("conventions");
    let conventions = block
        .optional("conventions")
        .and_then(|n| read_conventions(n, &path, reader));
    let path = block.path_of("point-rule");
    let point_rule = block
        .optional("point-rule")
        .and_then(|n| reader.text(n, &path).map(|text| placed(text, n, &path)));
    let path = block.path_of("step");
    let step = block
        .optional("step")
        .and_then(|n| whole_number(n, &path, reader));
    ExportEntry {
        units: None,
        columns,
        conventions: conventions.unwrap_or_default(),
        point_rule,
        step,
    }
}

impl ExportEntry {
    /// This case's declarations, completed by the suite's.
    pub(super) fn or(self, suite: &ExportEntry) -> ExportEntry {
        let mut columns = self.columns;
        for (table, name, header) in &suite.columns {
            if !columns.iter().any(|(t, n, _)| t == table && n == name) {
                columns.push((table.clone(), name.clone(), header.clone()));
            }
        }
        let (own, theirs) = (self.conventions, &suite.conventions);
        ExportEntry {
            units: self.units,
            columns,
            conventions: ConventionsEntry {
                stress: own.stress.or(theirs.stress),
                pressure_is_multiplier: own
                    .pressure_is_multiplier
                    .or(theirs.pressure_is_multiplier),
                tension_positive_pressure: own
                    .tension_positive_pressure
                    .or(theirs.tension_positive_pressure),
                engineering_shear: own.engineering_shear.or(theirs.engineering_shear),
                degrees: own.degrees.or(theirs.degrees),
            },
            point_rule: self.point_rule.or_else(|| suite.point_rule.clone()),
            step: self.step.or_else(|| suite.step.clone()),
        }
    }
}

/// `{ length: mm, stress: MPa }`.
pub(super) fn read_units(node: &Node, path: &str, reader: &mut Reader) -> Option<UnitSystem> {
    let mut block = reader.block(node, path)?;
    let length = one_unit(&mut block, "length", Dimension::Length, reader);
    let stress = one_unit(&mut block, "stress", Dimension::Stress, reader);
    block.finish(reader);
    Some(UnitSystem {
        length: length?,
        stress: stress?,
    })
}

fn one_unit(
    block: &mut Block,
    key: &'static str,
    dimension: Dimension,
    reader: &mut Reader,
) -> Option<Unit> {
    let expected = format!("one of: {}", Unit::names_of(dimension).join(", "));
    let path = block.path_of(key);
    let node = block.required(key, reader, &expected)?;
    let name = reader.text(node, &path)?;
    let unit = Unit::find(&name).filter(|u| u.dimension == dimension);
    if unit.is_none() {
        let found = format!("\"{name}\" is not a unit of {key}");
        let finding = reader.refuse("unknown-unit", node, &path, found);
        finding.expected = expected;
        if let Some(near) = nearest(&name, Unit::names_of(dimension)) {
            finding.hint = format!("did you mean `{near}`?");
        }
    }
    unit
}

fn whole_number(node: &Node, path: &str, reader: &mut Reader) -> Option<Placed<i64>> {
    match node.scalar().and_then(|text| text.parse().ok()) {
        Some(number) => Some(placed(number, node, path)),
        None => {
            let found = format!("found {}", shown(node));
            reader.refuse("wrong-type", node, path, found).expected = "a whole number".into();
            None
        }
    }
}

fn read_columns(
    node: &Node,
    path: &str,
    reader: &mut Reader,
) -> Vec<(String, String, Placed<String>)> {
    let Value::Map(entries) = &node.value else {
        let found = format!("found {}", node.kind());
        reader.refuse("wrong-type", node, path, found).expected =
            "exchange names with the headers of your files, e.g. { ux: U1, uy: U2 }".into();
        return Vec::new();
    };
    let mut columns = Vec::new();
    for (key, value) in entries {
        let at = format!("{path}.{}", key.name);
        match &value.value {
            Value::Map(inner) if TABLES.contains(&key.name.as_str()) => {
                for (name, header) in inner {
                    let at = format!("{at}.{}", name.name);
                    if let Some(text) = reader.text(header, &at) {
                        columns.push((
                            key.name.clone(),
                            name.name.clone(),
                            placed(text, header, &at),
                        ));
                    }
                }
            }
            _ => {
                if let Some(text) = reader.text(value, &at) {
                    columns.push((String::new(), key.name.clone(), placed(text, value, &at)));
                }
            }
        }
    }
    columns
}

fn read_conventions(node: &Node, path: &str, reader: &mut Reader) -> Option<ConventionsEntry> {
    let mut block = reader.block(node, path)?;
    let measures = StressMeasure::ALL.map(|measure| (measure.name(), measure));
    let read = ConventionsEntry {
        stress: choice(&mut block, "stress", &measures, reader),
        pressure_is_multiplier: choice(
            &mut block,
            "pressure",
            &[("mean", false), ("multiplier", true)],
            reader,
        ),
        tension_positive_pressure: choice(
            &mut block,
            "pressure-positive",
            &[("compression", false), ("tension", true)],
            reader,
        ),
        engineering_shear: choice(
            &mut block,
            "shear",
            &[("tensor", false), ("engineering", true)],
            reader,
        ),
        degrees: choice(
            &mut block,
            "angles",
            &[("radians", false), ("degrees", true)],
            reader,
        ),
    };
    block.finish(reader);
    Some(read)
}

fn choice<T: Copy>(
    block: &mut Block,
    key: &'static str,
    choices: &[(&'static str, T)],
    reader: &mut Reader,
) -> Option<T> {
    let path = block.path_of(key);
    let node = block.optional(key)?;
    let word = reader.text(node, &path)?;
    let found = choices
        .iter()
        .find(|(name, _)| *name == word)
        .map(|(_, meaning)| *meaning);
    if found.is_none() {
        let names: Vec<_> = choices.iter().map(|(name, _)| *name).collect();
        let finding = reader.refuse("unknown-word", node, &path, format!("found \"{word}\""));
        finding.expected = format!("one of: {}", names.join(", "));
        if let Some(near) = nearest(&word, names) {
            finding.hint = format!("did you mean `{near}`?");
        }
    }
    found
}
