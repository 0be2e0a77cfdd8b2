//! From one combination of a problem block to what its exact solution is given.

use super::materials::{Materials, refuse};
use super::table_file;
use crate::exact::given::{Form, ParameterEntry, VariantEntry};
use crate::exact::{Ends, Given, Value as GivenValue, catalogue};
use crate::materials::Material;
use crate::mechanics::{Dimension, UnitSystem};
use crate::suite::tree::{Node, Value};
use crate::suite::{Placed, Quantity, Reader, nearest};
use std::path::Path;

/// What reading a parameter needs besides its node.
#[derive(Debug, Clone, Copy)]
pub struct Context<'a> {
    pub materials: &'a Materials,
    pub units: &'a UnitSystem,
    /// Where the suite lies; files it names are beside it.
    pub folder: &'a Path,
}

/// Reads one combination by the entries of its solution. What is wrong is reported; `None` then.
pub fn read(
    node: &Node,
    path: &str,
    entries: &'static [ParameterEntry],
    context: Context,
    reader: &mut Reader,
) -> Option<Given> {
    let before = reader.findings.len();
    let mut block = reader.block(node, path)?;
    let mut given = Given::default();
    // a material that could not be built was reported at its own place
    let mut complete = true;
    for entry in entries {
        let at = block.path_of(entry.name);
        let found = if entry.required {
            block.required(entry.name, reader, &expected(entry))
        } else {
            block.optional(entry.name)
        };
        let Some(found) = found else { continue };
        match value(found, &at, entry.form, context, reader) {
            Some(value) => given = given.with(entry.name, value),
            None => complete = false,
        }
    }
    block.finish(reader);
    (complete && reader.findings.len() == before).then_some(given)
}

/// What a missing parameter should be.
fn expected(entry: &ParameterEntry) -> String {
    match entry.form {
        Form::Number(Dimension::Length) => "a length".to_string(),
        Form::Ends(names) => format!("one of: {}", names.join(", ")),
        Form::Word(names) => format!("one of: {}", names.join(", ")),
        Form::Variant(variants) => format!("one of: {}", names_of(variants).join(", ")),
        Form::Material => "the name of a material of this suite".to_string(),
        _ => entry.meaning.to_string(),
    }
}

fn names_of(variants: &[VariantEntry]) -> Vec<&'static str> {
    variants.iter().map(|v| v.name).collect()
}

/// One value in the form its entry wants.
fn value(
    node: &Node,
    path: &str,
    form: Form,
    context: Context,
    reader: &mut Reader,
) -> Option<GivenValue> {
    let Context {
        materials, units, ..
    } = context;
    match form {
        Form::Number(Dimension::Length) => {
            length(node, path, units, reader).map(GivenValue::Number)
        }
        Form::Number(dimension) => {
            number(node, path, dimension, units, reader).map(GivenValue::Number)
        }
        Form::Numbers(dimension) => {
            let items = reader.items(node).into_iter().enumerate();
            let numbers = items.map(|(i, item)| {
                let at = format!("{path}[{i}]");
                match dimension {
                    Dimension::Length => length(item, &at, units, reader),
                    _ => number(item, &at, dimension, units, reader),
                }
            });
            let numbers: Vec<_> = numbers.collect();
            let numbers: Option<Vec<f64>> = numbers.into_iter().collect();
            numbers.map(GivenValue::Numbers)
        }
        Form::Word(names) => word(node, path, names, reader).map(GivenValue::Text),
        Form::Expression | Form::Name => reader.text(node, path).map(GivenValue::Text),
        Form::Table => table_file::read(node, path, context.folder, reader).map(GivenValue::Table),
        Form::Named => named(node, path, units, reader).map(GivenValue::Block),
        Form::Ends(_) => ends(node, path, units, reader).map(GivenValue::Ends),
        Form::Material => material(node, path, materials, reader).map(GivenValue::Material),
        Form::Materials => {
            let items = reader.items(node).into_iter().enumerate();
            let all: Vec<_> = items
                .map(|(i, item)| material(item, &format!("{path}[{i}]"), materials, reader))
                .collect();
            let all: Option<Vec<Material>> = all.into_iter().collect();
            all.map(GivenValue::Materials)
        }
        Form::Variant(variants) => variant(node, path, variants, context, reader),
        Form::Block(entries) => read(node, path, entries, context, reader).map(GivenValue::Block),
    }
}

/// One of a few words.
fn word(node: &Node, path: &str, names: &[&'static str], reader: &mut Reader) -> Option<String> {
    let text = reader.text(node, path)?;
    if names.contains(&text.as_str()) {
        return Some(text);
    }
    unknown_word(node, path, &text, names, reader);
    None
}

fn unknown_word(node: &Node, path: &str, text: &str, names: &[&'static str], reader: &mut Reader) {
    let found = format!("unknown word \"{text}\"");
    let finding = reader.refuse("unknown-word", node, path, found);
    finding.expected = format!("one of: {}", names.join(", "));
    if let Some(near) = nearest(text, names.iter().copied()) {
        finding.hint = format!("did you mean `{near}`?");
    }
}

/// Named numbers; a number with a unit is turned into the suite's.
fn named(node: &Node, path: &str, units: &UnitSystem, reader: &mut Reader) -> Option<Given> {
    reader.block(node, path)?;
    let mut given = Given::default();
    let Value::Map(entries) = &node.value else {
        return None;
    };
    for (key, node) in entries {
        let at = format!("{path}.{}", key.name);
        let quantity: Quantity = reader.quantity(node, &at)?;
        let value = number(node, &at, quantity.dimension(), units, reader)?;
        given = given.number(&key.name, value);
    }
    Some(given)
}

/// A name with its block.
fn variant(
    node: &Node,
    path: &str,
    variants: &'static [VariantEntry],
    context: Context,
    reader: &mut Reader,
) -> Option<GivenValue> {
    let (name, inner) = reader.variant(node, path)?;
    let names = names_of(variants);
    let Some(entry) = variants.iter().find(|v| v.name == name) else {
        unknown_word(node, path, &name, &names, reader);
        return None;
    };
    let at = format!("{path}.{name}");
    // `power: 2` stands for the block of the one parameter there is
    let single = match (inner, entry.parameters) {
        (Some(inner), [only]) if !matches!(inner.value, Value::Map(_)) => Some((inner, only)),
        _ => None,
    };
    if let Some((inner, only)) = single {
        let value = value(inner, &at, only.form, context, reader)?;
        let block = Given::default().with(only.name, value);
        return Some(GivenValue::Variant(name, block));
    }
    let block = match inner {
        Some(inner) => read(inner, &at, entry.parameters, context, reader)?,
        None if entry.parameters.iter().all(|p| !p.required) => Given::default(),
        None => {
            let wanted: Vec<_> = entry.parameters.iter().map(|p| p.name).collect();
            let found = format!("`{name}` has no block");
            reader.refuse("missing-key", node, &at, found).expected =
                format!("a block with {}", wanted.join(", "));
            return None;
        }
    };
    Some(GivenValue::Variant(name, block))
}

/// A length that a part can have; zero and negative ones are refused by the solution, in its own words.
fn length(node: &Node, path: &str, units: &UnitSystem, reader: &mut Reader) -> Option<f64> {
    let length = number(node, path, Dimension::Length, units, reader)?;
    if length > 0.0 && !(SMALLEST..=LARGEST).contains(&length) {
        let found = format!("{length:e} {} is the length of no part", units.length.name);
        reader
            .refuse("implausible-length", node, path, found)
            .expected = format!("from {SMALLEST:e} to {LARGEST:e}");
        return None;
    }
    Some(length)
}

/// Lengths beyond these are slips of the pen, and their ratios leave the range of doubles.
const SMALLEST: f64 = 1e-12;
const LARGEST: f64 = 1e12;

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
            finding.expected = match names.as_slice() {
                [] => "named materials in `materials:`, e.g. soft: { neo-Hookean: { mu: 0.4 } }"
                    .into(),
                names => format!("one of: {}", names.join(", ")),
            };
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
