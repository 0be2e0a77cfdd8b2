//! Every exact solution a suite can name: parameters, ends, materials, range, sources, checks.

use super::parameters::{Parameters, refuse};
use super::solution::{ExactSolution, Kinematics, Refusal};
use super::{Ends, LameTube, PressurisedTube};
use crate::materials::{MaterialKind, catalogue as materials};
use crate::mechanics::Dimension;

/// One parameter of a solution.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ParameterEntry {
    /// As a suite writes it.
    pub name: &'static str,
    /// `None` for words (ends, material).
    pub dimension: Option<Dimension>,
    pub required: bool,
    /// What is taken when it is not given, as text.
    pub default: &'static str,
    pub meaning: &'static str,
}

/// One solution as a reader of the catalogue sees it.
#[derive(Debug, Clone, Copy)]
pub struct Entry {
    /// As a suite writes it.
    pub name: &'static str,
    pub title: &'static str,
    pub parameters: &'static [ParameterEntry],
    /// Ends it can have, as a suite writes them.
    pub ends: &'static [&'static str],
    pub kinematics: Kinematics,
    /// Laws it can be made of.
    pub material_kind: MaterialKind,
    /// Where it holds.
    pub range: &'static str,
    pub sources: &'static [&'static str],
    /// How its numbers were checked.
    pub checks: &'static [&'static str],
    build: fn(&Parameters) -> Result<Box<dyn ExactSolution>, Refusal>,
}

impl Entry {
    /// Names of the laws it can be made of.
    pub fn materials(&self) -> Vec<&'static str> {
        materials::names_of(self.material_kind)
    }
}

const fn parameter(
    name: &'static str,
    dimension: Option<Dimension>,
    default: Option<&'static str>,
    meaning: &'static str,
) -> ParameterEntry {
    ParameterEntry {
        name,
        dimension,
        required: default.is_none(),
        default: match default {
            Some(text) => text,
            None => "",
        },
        meaning,
    }
}

const TUBE: &[ParameterEntry] = &[
    parameter(
        "inner-radius",
        Some(Dimension::Length),
        None,
        "radius of the bore before loading",
    ),
    parameter(
        "outer-radius",
        Some(Dimension::Length),
        None,
        "outer radius before loading",
    ),
    parameter(
        "ends",
        None,
        None,
        "what holds the tube axially; axial-force is the net force on the wall (tension positive)",
    ),
    parameter("material", None, None, "name of a material of the suite"),
    parameter(
        "inner-pressure",
        Some(Dimension::Stress),
        Some("0"),
        "pressure on the deformed bore, follows the surface; negative is suction",
    ),
    parameter(
        "outer-pressure",
        Some(Dimension::Stress),
        Some("0"),
        "pressure on the deformed outer wall, follows the surface; negative is suction",
    ),
];

const ENTRIES: &[Entry] = &[
    Entry {
        name: "pressurised-tube",
        title: "Incompressible tube under inner and outer pressure, finite strain",
        parameters: TUBE,
        ends: &[
            Ends::NAMES[0],
            Ends::NAMES[1],
            Ends::NAMES[2],
            Ends::NAMES[3],
        ],
        kinematics: Kinematics::Finite,
        material_kind: MaterialKind::Incompressible,
        range: "any 0 < inner-radius < outer-radius, checked for ratios from 1.0001 to 100; pressures up to the first \
                limit of the inner pressure (maximum or asymptote); axial force applied before the pressure",
        sources: &[
            "Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173",
            "Ogden, Non-Linear Elastic Deformations (1984), section 5.3",
        ],
        checks: &[
            "many-digit solution of the textbook equations, tests/oracles/tube",
            "published values: Oden (1972) p. 325 and closed neo-Hookean and Mooney-Rivlin forms",
            "energy derivatives: dE/dg = pi lz a^2 (Pi - Po), dE/de = N lz - pi lz a^2 (Pi - Po) at Po = 0",
            "equilibrium, boundary tractions and axial force of random tubes",
        ],
        build: |given| Ok(Box::new(PressurisedTube::new(given)?)),
    },
    Entry {
        name: "lame-tube",
        title: "Linear-elastic tube under inner and outer pressure, small strain",
        parameters: TUBE,
        ends: &Ends::NAMES,
        kinematics: Kinematics::SmallStrain,
        material_kind: MaterialKind::LinearElastic,
        range: "any 0 < inner-radius < outer-radius, -1 < nu <= 0.5; strains must be small for the answer to mean \
                anything: the formulas are linear in the loads",
        sources: &["Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 28"],
        checks: &[
            "many-digit values, tests/oracles/tube",
            "equilibrium, Hooke's law, boundary tractions and work of the loads of random tubes",
            "limit of the pressurised-tube at small load, nu = 0.5",
        ],
        build: |given| Ok(Box::new(LameTube::new(given)?)),
    },
];

/// All solutions.
pub fn entries() -> &'static [Entry] {
    ENTRIES
}

/// The solution of this name.
pub fn find(name: &str) -> Option<&'static Entry> {
    ENTRIES.iter().find(|e| e.name == name)
}

/// A solution from its name and parameters.
pub fn build(name: &str, given: &Parameters) -> Result<Box<dyn ExactSolution>, Refusal> {
    let entry = find(name).ok_or_else(|| {
        let known: Vec<_> = ENTRIES.iter().map(|e| e.name).collect();
        let hint = format!("known solutions: {}", known.join(", "));
        refuse("", format!("unknown exact solution `{name}`"), hint)
    })?;
    if given.material.kind() != entry.material_kind {
        let message = format!("a {name} cannot be made of {}", given.material.name());
        let hint = format!("laws it can be made of: {}", entry.materials().join(", "));
        return Err(refuse("material", message, hint));
    }
    (entry.build)(given)
}

#[cfg(test)]
mod tests {
    use super::*;

    // Red when an entry promises ends or materials that its solution refuses, or the other way round.
    #[test]
    fn every_entry_does_what_it_says() {
        for entry in entries() {
            for name in entry.materials() {
                let law = materials::find(name).unwrap();
                let values: Vec<_> = law
                    .parameters
                    .iter()
                    .map(|p| (p.name.to_string(), 0.4))
                    .collect();
                let material = materials::build(name, &values).unwrap();
                for ends in [
                    Ends::PlaneStrain,
                    Ends::GeneralizedPlaneStrain { axial_force: 0.1 },
                    Ends::Closed,
                    Ends::FixedStretch {
                        axial_stretch: 1.01,
                    },
                    Ends::PlaneStress,
                ] {
                    let built = build(
                        entry.name,
                        &Parameters {
                            inner_radius: 1.0,
                            outer_radius: 2.0,
                            ends,
                            material: material.clone(),
                            inner_pressure: 0.01,
                            outer_pressure: 0.0,
                        },
                    );
                    assert_eq!(
                        built.is_ok(),
                        entry.ends.contains(&ends.name()),
                        "{} {ends:?}",
                        entry.name
                    );
                    let Ok(built) = built else { continue };
                    assert_eq!(built.kinematics(), entry.kinematics);
                    let names: Vec<_> = built.totals().iter().map(|t| t.name).collect();
                    assert_eq!(names[..2], ["inner_radius", "outer_radius"]);
                    assert_eq!(names.len(), 7);
                }
            }
            assert!(!entry.sources.is_empty() && !entry.checks.is_empty());
        }
    }

    #[test]
    fn unknown_names_and_wrong_materials_are_refused() {
        let given = |name: &str, value: &[(&str, f64)]| Parameters {
            inner_radius: 1.0,
            outer_radius: 2.0,
            ends: Ends::Closed,
            material: materials::build(
                name,
                &value
                    .iter()
                    .map(|(n, v)| (n.to_string(), *v))
                    .collect::<Vec<_>>(),
            )
            .unwrap(),
            inner_pressure: 0.0,
            outer_pressure: 0.0,
        };
        let soft = given("neo-Hookean", &[("mu", 1.0)]);
        let refusal = build("pressurized-tube", &soft).unwrap_err();
        assert!(refusal.hint.contains("pressurised-tube"));
        let refusal = build("lame-tube", &soft).unwrap_err();
        assert_eq!(refusal.parameter, "material");
        assert_eq!(refusal.hint, "laws it can be made of: linear-elastic");
    }
}
