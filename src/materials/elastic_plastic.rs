//! Linear elasticity with a constant yield stress: no hardening, flow at constant volume.
//!
//! Hill, The Mathematical Theory of Plasticity (1950), chapter II (from memory).

use super::catalogue::{Entry, ParameterEntry, Problem};
use super::{LinearElastic, Material, MaterialKind, Parameter, linear_elastic};
use crate::mechanics::Dimension;

/// The law with its numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ElasticPlastic {
    pub elastic: LinearElastic,
    /// Yield stress in uniaxial tension, positive. Unit: stress.
    pub yield_stress: f64,
}

pub(super) const NAME: &str = "elastic-perfectly-plastic";
/// The law as text.
pub(super) const LAW: &str =
    "Hooke's law up to a yield stress that does not harden (tension: yield-stress)";

pub(super) const ENTRY: Entry = Entry {
    name: NAME,
    kind: MaterialKind::ElasticPlastic,
    parameters: &[
        ParameterEntry::number("E", Dimension::Stress, "Young's modulus", "E > 0"),
        ParameterEntry::number("nu", Dimension::None, "Poisson's ratio", "-1 < nu <= 0.5"),
        ParameterEntry::number(
            "yield-stress",
            Dimension::Stress,
            "yield stress in uniaxial tension",
            "yield-stress > 0",
        ),
    ],
    family: None,
    formula: LAW,
    convention: "small strain; the yield condition is the solution's own and stated there; Tresca: the largest difference of \
                 principal stresses is the yield stress",
    source: "Hill, The Mathematical Theory of Plasticity (1950), chapter II",
    build: |given| {
        let elastic = linear_elastic::checked(given.number("E"), given.number("nu"))?;
        let yield_stress = given.number("yield-stress");
        if yield_stress <= 0.0 {
            return Err(Problem::out_of_range(
                "yield-stress",
                yield_stress,
                "yield-stress > 0",
                "any positive stress",
            ));
        }
        Ok(Material::ElasticPlastic(ElasticPlastic {
            elastic,
            yield_stress,
        }))
    },
};

impl ElasticPlastic {
    /// Constants in the order of the catalogue.
    pub fn parameters(&self) -> Vec<Parameter> {
        let mut all = self.elastic.parameters();
        let name = "yield-stress";
        all.push(Parameter::number(
            name,
            self.yield_stress,
            Dimension::Stress,
        ));
        all
    }
}
