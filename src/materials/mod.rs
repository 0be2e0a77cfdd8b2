//! Constitutive laws, one file a law.
//!
//! An incompressible law gives its plain energy W(l1, l2, l3) and the same law in *difference form*: the stress
//! differences and W as functions of `d = ln(lt/lr)` and `e = ln lz`, written so that no digit is lost at any
//! strain. Both are generic over [`Number`], so that derivatives are exact (dual numbers) and the plain energy
//! can check the difference form. To add a law: one file, and one line in [`catalogue`].

pub mod catalogue;
mod demiray;
mod incompressible;
mod invariants;
mod linear_elastic;
mod mooney_rivlin;
mod neo_hookean;
mod yeoh;

pub use catalogue::{Entry, ParameterEntry, Problem, build, entries, find};
pub use demiray::Demiray;
pub use incompressible::{Differences, Formula, Hardening, IncompressibleLaw, Number, Slope};
pub use linear_elastic::LinearElastic;
pub use mooney_rivlin::MooneyRivlin;
pub use neo_hookean::NeoHookean;
pub use yeoh::Yeoh;

use crate::mechanics::Dimension;
use std::sync::Arc;

/// One parameter of a law with its value.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Parameter {
    pub name: &'static str,
    pub value: f64,
    pub dimension: Dimension,
}

/// What a solution asks of a material.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum MaterialKind {
    /// Finite strain, volume preserving.
    Incompressible,
    /// Small strain, Hooke's law.
    LinearElastic,
}

/// A material with its numbers.
#[derive(Debug, Clone)]
pub enum Material {
    /// A finite-strain law that preserves volume.
    Incompressible(Arc<dyn IncompressibleLaw>),
    /// Isotropic linear elasticity at small strain.
    LinearElastic(LinearElastic),
}

impl Material {
    /// From a law that preserves volume.
    pub fn incompressible(law: impl IncompressibleLaw) -> Self {
        Self::Incompressible(Arc::new(law))
    }

    /// The name as a suite writes it, `neo-Hookean`.
    pub fn name(&self) -> &'static str {
        match self {
            Self::Incompressible(law) => law.name(),
            Self::LinearElastic(_) => linear_elastic::NAME,
        }
    }

    /// Which solutions can use it.
    pub fn kind(&self) -> MaterialKind {
        match self {
            Self::Incompressible(_) => MaterialKind::Incompressible,
            Self::LinearElastic(_) => MaterialKind::LinearElastic,
        }
    }

    /// Parameters in the order of the catalogue.
    pub fn parameters(&self) -> Vec<Parameter> {
        match self {
            Self::Incompressible(law) => law.parameters(),
            Self::LinearElastic(law) => law.parameters(),
        }
    }

    /// The strain energy as text with its numbers' names, exact enough to be typed into a solver.
    pub fn energy_text(&self) -> &'static str {
        match self {
            Self::Incompressible(law) => law.energy_text(),
            Self::LinearElastic(_) => linear_elastic::ENERGY,
        }
    }

    /// Shear modulus of the unstrained material. Unit: the stress unit of the parameters.
    pub fn shear_modulus(&self) -> f64 {
        match self {
            Self::Incompressible(law) => law.shear_modulus(),
            Self::LinearElastic(law) => law.shear_modulus(),
        }
    }

    /// Poisson's ratio of the unstrained material; one half when it preserves volume.
    pub fn poisson_ratio(&self) -> f64 {
        match self {
            Self::Incompressible(_) => 0.5,
            Self::LinearElastic(law) => law.nu,
        }
    }

    /// Young's modulus of the unstrained material. Unit: the stress unit of the parameters.
    pub fn young_modulus(&self) -> f64 {
        match self {
            Self::Incompressible(law) => 3.0 * law.shear_modulus(),
            Self::LinearElastic(law) => law.e,
        }
    }
}

impl PartialEq for Material {
    fn eq(&self, other: &Self) -> bool {
        self.name() == other.name() && self.parameters() == other.parameters()
    }
}
