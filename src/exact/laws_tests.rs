//! Laws for the tests of several solutions.

use crate::materials::{Constant, Gent, IncompressibleLaw, Material, catalogue};
use std::sync::Arc;

fn built(law: &str, constants: &[(&str, Constant)]) -> Material {
    let values: Vec<_> = constants
        .iter()
        .map(|(name, value)| (name.to_string(), value.clone()))
        .collect();
    catalogue::build(law, &values).unwrap()
}

/// Softens a little before it stiffens.
pub(super) fn yeoh() -> Material {
    let constants = [("c10", 0.5), ("c20", -0.01), ("c30", 1e-3)];
    built(
        "Yeoh",
        &constants.map(|(name, value)| (name, Constant::Number(value))),
    )
}

/// Shear modulus 1; the shear stress has a maximum.
pub(super) fn softening() -> Material {
    let constants = [("mu", vec![4.0]), ("alpha", vec![0.5])];
    built(
        "Ogden",
        &constants.map(|(name, value)| (name, Constant::List(value))),
    )
}

/// Locks at I1 = 33.
pub(super) fn locking() -> Material {
    Material::incompressible(Gent { mu: 1.0, jm: 30.0 })
}

/// The law inside.
pub(super) fn law_of(material: Material) -> Arc<dyn IncompressibleLaw> {
    match material {
        Material::Incompressible(law) => law,
        other => panic!("{} preserves no volume", other.name()),
    }
}
