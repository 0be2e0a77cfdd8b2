//! From one combination of a problem block to the parameters of its exact solution.

use super::materials::{Materials, refuse};
use crate::exact::{Ends, Parameters, catalogue};
use crate::materials::Material;
use crate::mechanics::{Dimension, UnitSystem};
use crate::suite::tree::{Node, Value};
use crate::suite::{Block, Placed, Quantity, Reader, nearest};

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
