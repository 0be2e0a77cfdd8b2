//! The declared element: which shape the mesh must have, and which orders theory expects.

use crate::convergence::{Pairing, PressureSpace};
use crate::elements::Shape;
use crate::suite::tree::{Node, Value};
use crate::suite::{Reader, nearest};

/// A declared element.
#[derive(Debug, Clone, PartialEq)]
pub struct Element {
    pub displacement: Shape,
    pub pairing: Pairing,
    /// In words, for reports.
    pub text: String,
}

/// Reads `element: quad4` or `element: { displacement: quad9, pressure: quad4 }`.
pub fn read(node: &Node, path: &str, reader: &mut Reader) -> Option<Element> {
    if let Value::Scalar(_) = node.value {
        let shape = shape(node, path, reader)?;
        return Some(element(shape, PressureSpace::None, String::new()));
    }
    let mut block = reader.block(node, path)?;
    let shape_path = block.path_of("displacement");
    let displacement = block
        .required(
            "displacement",
            reader,
            "the shape of the displacement element, e.g. quad9",
        )
        .and_then(|n| shape(n, &shape_path, reader));
    let pressure_path = block.path_of("pressure");
    let pressure = match block.optional("pressure") {
        None => Some((PressureSpace::None, String::new())),
        Some(n) => pressure(n, &pressure_path, reader),
    };
    block.finish(reader);
    let (space, words) = pressure?;
    Some(element(displacement?, space, words))
}

fn element(displacement: Shape, pressure: PressureSpace, words: String) -> Element {
    let text = match pressure {
        PressureSpace::None => format!("{}, displacement only", displacement.name()),
        _ => format!("{}, pressure {words}", displacement.name()),
    };
    let pairing = Pairing {
        displacement_degree: displacement.degree() as u32,
        pressure,
    };
    Element {
        displacement,
        pairing,
        text,
    }
}

fn shape(node: &Node, path: &str, reader: &mut Reader) -> Option<Shape> {
    let name = reader.text(node, path)?;
    let found = Shape::from_name(&name);
    if found.is_none() {
        let names = Shape::ALL.map(Shape::name);
        let finding = reader.refuse(
            "unknown-shape",
            node,
            path,
            format!("unknown shape \"{name}\""),
        );
        finding.expected = format!("one of: {}", names.join(", "));
        if let Some(near) = nearest(&name, names) {
            finding.hint = format!("did you mean `{near}`?");
        }
    }
    found
}

fn pressure(node: &Node, path: &str, reader: &mut Reader) -> Option<(PressureSpace, String)> {
    let word = reader.text(node, path)?;
    let space = match word.as_str() {
        "none" => PressureSpace::None,
        "constant" => PressureSpace::Constant,
        "linear" => PressureSpace::Linear,
        "quadratic" => PressureSpace::Quadratic,
        name => match Shape::from_name(name).map(Shape::degree) {
            Some(1) => PressureSpace::Linear,
            Some(_) => PressureSpace::Quadratic,
            None => {
                reader
                    .refuse(
                        "unknown-shape",
                        node,
                        path,
                        format!("unknown pressure space \"{word}\""),
                    )
                    .expected =
                    "none, constant, linear, quadratic, or a shape such as quad4".into();
                return None;
            }
        },
    };
    Some((space, word))
}
