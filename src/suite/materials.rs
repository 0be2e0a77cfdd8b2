//! The `materials` block: named laws with their constants, as written.

use super::block::Reader;
use super::model::MaterialEntry;
use super::read::placed;
use super::tree::{Node, Value};

/// Reads the named materials.
pub(super) fn read_all(node: &Node, reader: &mut Reader) -> Vec<MaterialEntry> {
    let Value::Map(entries) = &node.value else {
        let found = format!("found {}", node.kind());
        reader
            .refuse("wrong-type", node, "materials", found)
            .expected = "a block of named materials".into();
        return Vec::new();
    };
    entries
        .iter()
        .filter_map(|(key, node)| read_one(&key.name, node, reader))
        .collect()
}

/// One material: a law with its block of constants.
fn read_one(name: &str, node: &Node, reader: &mut Reader) -> Option<MaterialEntry> {
    let path = format!("materials.{name}");
    let (law, constants) = reader.variant(node, &path)?;
    let law_path = format!("{path}.{law}");
    if let Some(found) = constants.filter(|c| !matches!(c.value, Value::Map(_))) {
        let kind = format!("found {}", found.kind());
        reader.refuse("wrong-type", found, &law_path, kind).expected =
            "a block of constants".into();
        return None;
    }
    Some(MaterialEntry {
        name: name.to_string(),
        law: placed(law, node, &law_path),
        constants: constants.map(|c| placed(c.clone(), c, &law_path)),
    })
}
