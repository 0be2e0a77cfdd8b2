//! Constitutive laws, one file a law.
//!
//! An incompressible law gives its plain energy W(l1, l2, l3) and the same law in *difference form*: the stress
//! differences and W as functions of `d = ln(lt/lr)` and `e = ln lz`, written so that no digit is lost at any
//! strain. Both are generic over [`Number`], so that derivatives are exact (dual numbers) and the plain energy
//! can check the difference form. To add a law: one file, and one line in [`catalogue`].

mod arruda_boyce;
mod arruda_boyce_series;
pub mod catalogue;
mod compressible;
mod constant;
mod demiray;
mod elastic_plastic;
mod general_state;
mod gent;
mod incompressible;
mod invariants;
mod linear_elastic;
mod locking;
mod mooney_rivlin;
mod neo_hookean;
mod ogden;
mod polynomial;
mod power_series;
mod stated;
mod two_fibre;
mod volumetric;
mod yeoh;

pub use arruda_boyce::ArrudaBoyce;
pub use arruda_boyce_series::ArrudaBoyceSeries;
pub use catalogue::{Entry, ParameterEntry, Problem, build, entries, find};
pub use compressible::{Compressible, CompressibleNeoHookean, CompressibleState, VolumeSlope};
pub use constant::{Constant, ConstantForm, Constants, Parameter};
pub use demiray::Demiray;
pub use elastic_plastic::ElasticPlastic;
pub use general_state::{GeneralState, SecondGradient};
pub use gent::Gent;
pub use incompressible::{Differences, Formula, Hardening, IncompressibleLaw, Number, Slope};
pub use linear_elastic::LinearElastic;
pub use locking::LockStretches;
pub use mooney_rivlin::MooneyRivlin;
pub use neo_hookean::NeoHookean;
pub use ogden::{Ogden, OgdenModuli, OgdenTerm};
pub use polynomial::{Polynomial, PolynomialTerm};
pub use stated::Stated;
pub use two_fibre::TwoFibre;
pub use volumetric::{Volumetric, VolumetricForm};
pub use yeoh::Yeoh;

use std::sync::Arc;

/// What a solution asks of a material.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum MaterialKind {
    /// Finite strain, volume preserving.
    Incompressible,
    /// Finite strain, with a finite bulk modulus.
    Compressible,
    /// Small strain, Hooke's law.
    LinearElastic,
    /// Small strain, Hooke's law up to a yield stress.
    ElasticPlastic,
}

/// A material with its numbers.
#[derive(Debug, Clone)]
pub enum Material {
    /// A finite-strain law that preserves volume.
    Incompressible(Arc<dyn IncompressibleLaw>),
    /// A finite-strain law with a finite bulk modulus.
    Compressible(Compressible),
    /// Isotropic linear elasticity at small strain.
    LinearElastic(LinearElastic),
    /// Linear elasticity with a constant yield stress.
    ElasticPlastic(ElasticPlastic),
}

impl Material {
    /// From a law that preserves volume.
    pub fn incompressible(law: impl IncompressibleLaw) -> Self {
        Self::Incompressible(Arc::new(law))
    }

    /// The same law of the shape with a volumetric energy beside it.
    ///
    /// # Errors
    /// When the law has none to be split from, or the bulk modulus is not positive.
    pub fn with_volumetric(self, volumetric: Volumetric) -> Result<Self, Problem> {
        let Self::Incompressible(law) = self else {
            return Err(Problem {
                message: format!("{} has a volume change of its own", self.name()),
                parameter: "volumetric".to_string(),
                hint: "leave `volumetric:` out, or choose an incompressible law".to_string(),
            });
        };
        if volumetric.bulk <= 0.0 || !volumetric.bulk.is_finite() {
            let k = volumetric.bulk;
            return Err(Problem::out_of_range(
                "K",
                k,
                "K > 0",
                "any positive stress",
            ));
        }
        Ok(Self::Compressible(Compressible::Split { law, volumetric }))
    }

    /// The name as a suite writes it, `neo-Hookean`.
    pub fn name(&self) -> &'static str {
        match self {
            Self::Incompressible(law) => law.name(),
            Self::Compressible(law) => law.name(),
            Self::LinearElastic(_) => linear_elastic::NAME,
            Self::ElasticPlastic(_) => elastic_plastic::NAME,
        }
    }

    /// The name, and that its volume changes where the law alone would not say so.
    pub fn in_words(&self) -> String {
        match self {
            Self::Compressible(Compressible::Split { law, volumetric }) => {
                format!("{} with volumetric {}", law.name(), volumetric.form.name())
            }
            _ => self.name().to_string(),
        }
    }

    /// Which solutions can use it.
    pub fn kind(&self) -> MaterialKind {
        match self {
            Self::Incompressible(_) => MaterialKind::Incompressible,
            Self::Compressible(_) => MaterialKind::Compressible,
            Self::LinearElastic(_) => MaterialKind::LinearElastic,
            Self::ElasticPlastic(_) => MaterialKind::ElasticPlastic,
        }
    }

    /// Constants in the order of the catalogue.
    pub fn parameters(&self) -> Vec<Parameter> {
        match self {
            Self::Incompressible(law) => law.parameters(),
            Self::Compressible(law) => law.parameters(),
            Self::LinearElastic(law) => law.parameters(),
            Self::ElasticPlastic(law) => law.parameters(),
        }
    }

    /// The strain energy as text with its numbers' names, exact enough to be typed into a solver.
    pub fn energy_text(&self) -> String {
        match self {
            Self::Incompressible(law) => law.energy_text(),
            Self::Compressible(law) => law.energy_text(),
            Self::LinearElastic(_) => linear_elastic::ENERGY.to_string(),
            Self::ElasticPlastic(_) => elastic_plastic::LAW.to_string(),
        }
    }

    /// Shear modulus of the unstrained material. Unit: the stress unit of the constants.
    pub fn shear_modulus(&self) -> f64 {
        match self {
            Self::Incompressible(law) => law.shear_modulus(),
            Self::Compressible(law) => law.shear_modulus(),
            Self::LinearElastic(law) => law.shear_modulus(),
            Self::ElasticPlastic(law) => law.elastic.shear_modulus(),
        }
    }

    /// Bulk modulus of the unstrained material, infinite when it preserves volume. Unit: that of the constants.
    pub fn bulk_modulus(&self) -> f64 {
        let hooke = |law: &LinearElastic| law.e / (3.0 * law.compressibility());
        match self {
            Self::Incompressible(_) => f64::INFINITY,
            Self::Compressible(law) => law.bulk_modulus(),
            Self::LinearElastic(law) => hooke(law),
            Self::ElasticPlastic(law) => hooke(&law.elastic),
        }
    }

    /// Poisson's ratio of the unstrained material; one half when it preserves volume.
    pub fn poisson_ratio(&self) -> f64 {
        match self {
            Self::Incompressible(_) => 0.5,
            Self::Compressible(law) => {
                let (k, mu) = (law.bulk_modulus(), law.shear_modulus());
                (3.0 * k - 2.0 * mu) / (6.0 * k + 2.0 * mu)
            }
            Self::LinearElastic(law) => law.nu,
            Self::ElasticPlastic(law) => law.elastic.nu,
        }
    }

    /// Young's modulus of the unstrained material. Unit: the stress unit of the constants.
    pub fn young_modulus(&self) -> f64 {
        match self {
            Self::Incompressible(law) => 3.0 * law.shear_modulus(),
            Self::Compressible(law) => 2.0 * law.shear_modulus() * (1.0 + self.poisson_ratio()),
            Self::LinearElastic(law) => law.e,
            Self::ElasticPlastic(law) => law.elastic.e,
        }
    }
}

impl PartialEq for Material {
    fn eq(&self, other: &Self) -> bool {
        self.name() == other.name() && self.parameters() == other.parameters()
    }
}

#[cfg(test)]
#[path = "samples_tests.rs"]
pub(crate) mod samples;
