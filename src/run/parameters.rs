//! From one combination of a problem block to the parameters of its exact solution.

use crate::exact::{Ends, Parameters, catalogue};
use crate::input::Finding;
use crate::materials::{self, Material};
use crate::mechanics::{Dimension, UnitSystem};
use crate::suite::model::{MaterialEntry, Suite};
use crate::suite::tree::{Node, Value};
use crate::suite::{Block, Placed, Quantity, Reader, nearest};

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

    fn find(&self, name: &str) -> Option<&Option<Material>> {
        self.list
            .iter()
            .find(|(known, _)| known == name)
            .map(|(_, material)| material)
    }

    fn names(&self) -> Vec<&str> {
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
        let finding = refuse(
            &entry.law,
            "unknown-law",
            format!("unknown law \"{}\"", entry.law.value),
            reader,
        );
        finding.expected = format!("one of: {}", names.join(", "));
        if let Some(near) = nearest(&entry.law.value, names) {
            finding.hint = format!("did you mean `{near}`?");
        }
        return None;
    };
    let mut values = Vec::new();
    let mut complete = true;
    for (name, quantity) in &entry.constants {
        let known = law.parameters.iter().find(|p| p.name == name.value);
        let dimension = known.map_or(quantity.dimension(), |p| p.dimension);
        match quantity.within(dimension, units) {
            Ok(value) => values.push((name.value.clone(), value)),
            Err(found) => {
                refuse(name, "wrong-unit", found, reader);
                complete = false;
            }
        }
    }
    if !complete {
        return None;
    }
    match materials::build(&entry.law.value, &values) {
        Ok(material) => Some(material),
        Err(problem) => {
            let at = entry
                .constants
                .iter()
                .map(|(name, _)| name)
                .find(|n| n.value == problem.parameter);
            refuse(
                at.unwrap_or(&entry.law),
                "material-constants",
                problem.message,
                reader,
            )
            .hint = problem.hint;
            None
        }
    }
}

fn refuse<'r>(
    at: &Placed<String>,
    rule: &str,
    found: String,
    reader: &'r mut Reader,
) -> &'r mut Finding {
    let place = reader.place(at.line, at.column, &at.path);
    reader.push(Finding::refused(rule, place, found))
}

/// Reads one combination. What is wrong is reported; `None` then.
pub fn read(
    node: &Node,
    path: &str,
    materials: &Materials,
    units: &UnitSystem,
    reader: &mut Reader,
) -> Option<Parameters> {
    let before = reader.findings.len();
    let mut block = reader.block(node, path)?;
    let inner_radius = length(&mut block, "inner-radius", units, reader);
    let outer_radius = length(&mut block, "outer-radius", units, reader);
    let ends_path = block.path_of("ends");
    let ends = block
        .required(
            "ends",
            reader,
            &format!("one of: {}", Ends::NAMES.join(", ")),
        )
        .and_then(|n| ends(n, &ends_path, units, reader));
    let material_path = block.path_of("material");
    let material = block
        .required("material", reader, "the name of a material of this suite")
        .and_then(|n| material(n, &material_path, materials, reader));
    let inner_pressure = pressure(&mut block, "inner-pressure", units, reader);
    let outer_pressure = pressure(&mut block, "outer-pressure", units, reader);
    block.finish(reader);
    if reader.findings.len() > before {
        return None;
    }
    Some(Parameters {
        inner_radius: inner_radius?,
        outer_radius: outer_radius?,
        ends: ends?,
        material: material?,
        inner_pressure: inner_pressure.unwrap_or(0.0),
        outer_pressure: outer_pressure.unwrap_or(0.0),
    })
}

fn length(
    block: &mut Block,
    key: &'static str,
    units: &UnitSystem,
    reader: &mut Reader,
) -> Option<f64> {
    let path = block.path_of(key);
    let node = block.required(key, reader, "a length")?;
    let length = number(node, &path, Dimension::Length, units, reader)?;
    // zero and negative lengths are refused by the solution, in its own words
    if length > 0.0 && !(SMALLEST..=LARGEST).contains(&length) {
        let found = format!("{length:e} {} is the length of no part", units.length.name);
        reader
            .refuse("implausible-length", node, &path, found)
            .expected = format!("from {SMALLEST:e} to {LARGEST:e}");
        return None;
    }
    Some(length)
}

/// Lengths beyond these are slips of the pen, and their ratios leave the range of doubles.
const SMALLEST: f64 = 1e-12;
const LARGEST: f64 = 1e12;

fn pressure(
    block: &mut Block,
    key: &'static str,
    units: &UnitSystem,
    reader: &mut Reader,
) -> Option<f64> {
    let path = block.path_of(key);
    let node = block.optional(key)?;
    number(node, &path, Dimension::Stress, units, reader)
}

/// A number in the suite's units.
pub fn number(
    node: &Node,
    path: &str,
    dimension: Dimension,
    units: &UnitSystem,
    reader: &mut Reader,
) -> Option<f64> {
    let quantity: Quantity = reader.quantity(node, path)?;
    match quantity.within(dimension, units) {
        Ok(value) => Some(value),
        Err(found) => {
            reader.refuse("wrong-unit", node, path, found);
            None
        }
    }
}

fn ends(node: &Node, path: &str, units: &UnitSystem, reader: &mut Reader) -> Option<Ends> {
    let (name, inner) = reader.variant(node, path)?;
    let at = format!("{path}.{name}");
    if let Some(inner) = inner.filter(|inner| !matches!(inner.value, Value::Map(_))) {
        let found = format!("found {}", inner.scalar().unwrap_or(inner.kind()));
        let finding = reader.refuse("wrong-type", inner, &at, found);
        finding.expected = match name.as_str() {
            "fixed-stretch" => "{ fixed-stretch: { axial-stretch: 1.2 } }",
            "generalized-plane-strain" => {
                "{ generalized-plane-strain: { axial-force: 20 N } }, or the bare word"
            }
            _ => "the bare word",
        }
        .to_string();
        return None;
    }
    let mut block = match inner {
        Some(inner) => Some(reader.block(inner, &at)?),
        None => None,
    };
    let ends = match name.as_str() {
        "plane-strain" => Some(Ends::PlaneStrain),
        "closed" => Some(Ends::Closed),
        "plane-stress" => Some(Ends::PlaneStress),
        "generalized-plane-strain" => {
            let given = block.as_mut().and_then(|b| b.optional("axial-force"));
            let at = format!("{at}.axial-force");
            let force = given.map(|n| number(n, &at, Dimension::Force, units, reader));
            force
                .unwrap_or(Some(0.0))
                .map(|axial_force| Ends::GeneralizedPlaneStrain { axial_force })
        }
        "fixed-stretch" => {
            let expected = "the axial stretch, e.g. { fixed-stretch: { axial-stretch: 1.2 } }";
            let given = match block.as_mut() {
                Some(b) => b.required("axial-stretch", reader, expected),
                None => {
                    reader
                        .refuse("missing-key", node, &at, "`axial-stretch:` is missing")
                        .expected = expected.into();
                    None
                }
            };
            let at = format!("{at}.axial-stretch");
            let stretch = given.and_then(|n| number(n, &at, Dimension::None, units, reader));
            stretch.map(|axial_stretch| Ends::FixedStretch { axial_stretch })
        }
        _ => {
            let finding = reader.refuse(
                "unknown-word",
                node,
                path,
                format!("unknown end condition \"{name}\""),
            );
            finding.expected = format!("one of: {}", Ends::NAMES.join(", "));
            if let Some(near) = nearest(&name, Ends::NAMES) {
                finding.hint = format!("did you mean `{near}`?");
            }
            return None;
        }
    };
    if let Some(block) = block {
        block.finish(reader);
    }
    ends
}

fn material(
    node: &Node,
    path: &str,
    materials: &Materials,
    reader: &mut Reader,
) -> Option<Material> {
    let name = match &node.value {
        Value::Scalar(name) => name,
        _ => {
            let found = format!("found {}", node.kind());
            reader.refuse("wrong-type", node, path, found).expected =
                "the name of a material of this suite".into();
            return None;
        }
    };
    match materials.find(name) {
        Some(material) => material.clone(),
        None => {
            let names = materials.names();
            let finding = reader.refuse(
                "unknown-material",
                node,
                path,
                format!("there is no material \"{name}\""),
            );
            finding.expected = format!("one of: {}", names.join(", "));
            if let Some(near) = nearest(name, names) {
                finding.hint = format!("did you mean `{near}`?");
            }
            None
        }
    }
}

/// The solution of this name, or a finding with the names there are.
pub fn solution_entry(
    problem: &Placed<String>,
    reader: &mut Reader,
) -> Option<&'static catalogue::Entry> {
    let found = catalogue::find(&problem.value);
    if found.is_none() {
        let names: Vec<_> = catalogue::entries().iter().map(|e| e.name).collect();
        let finding = refuse(
            problem,
            "unknown-solution",
            format!("unknown exact solution \"{}\"", problem.value),
            reader,
        );
        finding.expected = format!("one of: {}", names.join(", "));
        if let Some(near) = nearest(&problem.value, names) {
            finding.hint = format!("did you mean `{near}`?");
        }
    }
    found
}
