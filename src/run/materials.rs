//! From the materials of a suite to laws with numbers.

use crate::input::Finding;
use crate::materials::{self, Constant, ConstantForm, Material, Volumetric, VolumetricForm};
use crate::mechanics::{Dimension, UnitSystem};
use crate::suite::model::{MaterialEntry, Suite};
use crate::suite::tree::{Node, Value};
use crate::suite::{Placed, Quantity, Reader, nearest};

/// The key under a law that gives it a bulk modulus.
const VOLUMETRIC: &str = "volumetric";

/// The materials of a suite, built; a material that could not be is `None` (and already reported).
#[derive(Debug)]
pub struct Materials {
    list: Vec<(String, Option<Material>)>,
}

impl Materials {
    /// Builds every material of the suite, reporting each problem at its place.
    pub fn build(suite: &Suite, reader: &mut Reader) -> Self {
        let built = suite.materials.iter().map(|entry| {
            (
                entry.name.clone(),
                build_material(entry, &suite.units, reader),
            )
        });
        Self {
            list: built.collect(),
        }
    }

    /// The material of this name, if there is one.
    pub fn find(&self, name: &str) -> Option<&Option<Material>> {
        self.list
            .iter()
            .find(|(known, _)| known == name)
            .map(|(_, material)| material)
    }

    /// All names, for messages.
    pub fn names(&self) -> Vec<&str> {
        self.list.iter().map(|(name, _)| name.as_str()).collect()
    }
}

fn build_material(
    entry: &MaterialEntry,
    units: &UnitSystem,
    reader: &mut Reader,
) -> Option<Material> {
    let Some(law) = materials::find(&entry.law.value) else {
        let names: Vec<_> = materials::entries().iter().map(|e| e.name).collect();
        let found = format!("unknown law \"{}\"", entry.law.value);
        let finding = refuse(&entry.law, "unknown-law", found, reader);
        finding.expected = format!("one of: {}", names.join(", "));
        if let Some(near) = nearest(&entry.law.value, names) {
            finding.hint = format!("did you mean `{near}`?");
        }
        return None;
    };
    let before = reader.findings.len();
    let mut values = Vec::new();
    let mut volumetric = None;
    let block = entry.constants.as_ref();
    let path = block.map_or(entry.law.path.as_str(), |b| b.path.as_str());
    for (key, node) in block.into_iter().flat_map(|b| entries_of(&b.value)) {
        let at = format!("{path}.{key}");
        if key == VOLUMETRIC {
            volumetric = read_volumetric(node, &at, units, reader);
            continue;
        }
        let known = law.constant(key);
        if let Some(value) = constant(node, &at, known, units, reader) {
            values.push((key.to_string(), value));
        }
    }
    if reader.findings.len() > before {
        return None;
    }
    let built = materials::build(&entry.law.value, &values).and_then(|law| match volumetric {
        Some(volumetric) => law.with_volumetric(volumetric),
        None => Ok(law),
    });
    built
        .map_err(|problem| {
            let place = place_of(entry, &problem.parameter, reader);
            let finding = Finding::refused("material-constants", place, problem.message);
            reader.push(finding.hint(problem.hint));
        })
        .ok()
}

/// The keys of a block with their nodes.
fn entries_of(node: &Node) -> impl Iterator<Item = (&str, &Node)> {
    let list = match &node.value {
        Value::Map(entries) => entries.as_slice(),
        _ => &[],
    };
    list.iter().map(|(key, node)| (key.name.as_str(), node))
}

/// Where a constant stands, or its law; `constants.mu` is within the block `constants`.
fn place_of(entry: &MaterialEntry, constant: &str, reader: &Reader) -> crate::input::Place {
    let block = entry.constants.as_ref();
    let found = block.and_then(|b| {
        let mut node = &b.value;
        for word in constant.split('.') {
            node = entries_of(node).find(|(key, _)| *key == word)?.1;
        }
        let path = format!("{}.{constant}", b.path);
        Some(reader.place(node.line, node.column, &path))
    });
    found.unwrap_or_else(|| reader.place(entry.law.line, entry.law.column, &entry.law.path))
}

/// One constant in the form its law wants it; an unknown one is read as a number, and refused by the law.
fn constant(
    node: &Node,
    path: &str,
    known: Option<(ConstantForm, Dimension)>,
    units: &UnitSystem,
    reader: &mut Reader,
) -> Option<Constant> {
    let (form, dimension) = match known {
        Some((form, dimension)) => (form, Some(dimension)),
        None => (ConstantForm::Number, None),
    };
    match form {
        ConstantForm::Number => number(node, path, dimension, units, reader).map(Constant::Number),
        ConstantForm::Text => reader.text(node, path).map(Constant::Text),
        ConstantForm::List => {
            let items = reader.items(node).into_iter().enumerate();
            let values = items
                .map(|(i, item)| number(item, &format!("{path}[{i}]"), dimension, units, reader));
            values.collect::<Option<Vec<f64>>>().map(Constant::List)
        }
        ConstantForm::Named => {
            reader.block(node, path)?;
            let pairs = entries_of(node).map(|(key, node)| {
                let value = number(node, &format!("{path}.{key}"), None, units, reader)?;
                Some((key.to_string(), value))
            });
            pairs.collect::<Option<Vec<_>>>().map(Constant::Named)
        }
    }
}

/// A number in the suite's units; where the dimension is not known, in that of its own unit.
fn number(
    node: &Node,
    path: &str,
    dimension: Option<Dimension>,
    units: &UnitSystem,
    reader: &mut Reader,
) -> Option<f64> {
    let quantity: Quantity = reader.quantity(node, path)?;
    match quantity.within(dimension.unwrap_or(quantity.dimension()), units) {
        Ok(value) => Some(value),
        Err(found) => {
            reader.refuse("wrong-unit", node, path, found);
            None
        }
    }
}

/// `volumetric: { quadratic: { K: 400 } }`.
fn read_volumetric(
    node: &Node,
    path: &str,
    units: &UnitSystem,
    reader: &mut Reader,
) -> Option<Volumetric> {
    let expected = "a volumetric energy with its bulk modulus, e.g. { quadratic: { K: 400 } }";
    let (name, inner) = reader.variant(node, path)?;
    let Some(form) = VolumetricForm::from_name(&name) else {
        let names = VolumetricForm::ALL.map(VolumetricForm::name);
        let found = format!("unknown volumetric energy \"{name}\"");
        let finding = reader.refuse("unknown-word", node, path, found);
        finding.expected = format!("one of: {}", names.join(", "));
        if let Some(near) = nearest(&name, names) {
            finding.hint = format!("did you mean `{near}`?");
        }
        return None;
    };
    let at = format!("{path}.{name}");
    let Some(inner) = inner else {
        let found = "`K:` is missing";
        reader.refuse("missing-key", node, &at, found).expected = expected.into();
        return None;
    };
    let mut block = reader.block(inner, &at)?;
    let bulk = block.required("K", reader, expected).and_then(|n| {
        number(
            n,
            &format!("{at}.K"),
            Some(Dimension::Stress),
            units,
            reader,
        )
    });
    block.finish(reader);
    Some(Volumetric { form, bulk: bulk? })
}

/// A finding at a word of the suite.
pub(super) fn refuse<'r>(
    at: &Placed<String>,
    rule: &str,
    found: String,
    reader: &'r mut Reader,
) -> &'r mut Finding {
    let place = reader.place(at.line, at.column, &at.path);
    reader.push(Finding::refused(rule, place, found))
}
