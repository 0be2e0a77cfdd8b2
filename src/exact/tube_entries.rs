//! The pressurised tubes as a suite names them.

use super::catalogue::Entry;
use super::given::{Form, ParameterEntry};
use super::parameters::Parameters;
use super::solution::Kinematics;
use super::{Ends, LameTube, PressurisedTube};
use crate::materials::MaterialKind;
use crate::mechanics::Dimension;

/// Ends of a tube at finite strain.
const FINITE_ENDS: &[&str] = &[
    Ends::NAMES[0],
    Ends::NAMES[1],
    Ends::NAMES[2],
    Ends::NAMES[3],
];

pub(super) const INNER_RADIUS: ParameterEntry = ParameterEntry::required(
    "inner-radius",
    Form::Number(Dimension::Length),
    "radius of the bore before loading",
);

pub(super) const OUTER_RADIUS: ParameterEntry = ParameterEntry::required(
    "outer-radius",
    Form::Number(Dimension::Length),
    "outer radius before loading",
);

pub(super) const MATERIAL: ParameterEntry = ParameterEntry::required(
    "material",
    Form::Material,
    "name of a material of the suite",
);

pub(super) const fn ends(names: &'static [&'static str]) -> ParameterEntry {
    ParameterEntry::required(
        "ends",
        Form::Ends(names),
        "what holds the tube axially; axial-force is the net force on the wall (tension positive)",
    )
}

pub(super) const INNER_PRESSURE: ParameterEntry = ParameterEntry::optional(
    "inner-pressure",
    Form::Number(Dimension::Stress),
    "0",
    "pressure on the deformed bore, follows the surface; negative is suction",
)
.load();

pub(super) const OUTER_PRESSURE: ParameterEntry = ParameterEntry::optional(
    "outer-pressure",
    Form::Number(Dimension::Stress),
    "0",
    "pressure on the deformed outer wall, follows the surface; negative is suction",
)
.load();

pub(super) const PRESSURISED_TUBE: Entry = Entry {
    name: "pressurised-tube",
    title: "Incompressible tube under inner and outer pressure, finite strain",
    parameters: &[
        INNER_RADIUS,
        OUTER_RADIUS,
        ends(FINITE_ENDS),
        MATERIAL,
        INNER_PRESSURE,
        OUTER_PRESSURE,
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[MaterialKind::Incompressible],
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
    build: |given| Ok(Box::new(PressurisedTube::new(&Parameters::of(given)?)?)),
};

pub(super) const LAME_TUBE: Entry = Entry {
    name: "lame-tube",
    title: "Linear-elastic tube under inner and outer pressure, small strain",
    parameters: &[
        INNER_RADIUS,
        OUTER_RADIUS,
        ends(&Ends::NAMES),
        MATERIAL,
        INNER_PRESSURE,
        OUTER_PRESSURE,
    ],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::LinearElastic],
    range: "any 0 < inner-radius < outer-radius, -1 < nu <= 0.5; strains must be small for the answer to mean \
            anything: the formulas are linear in the loads",
    sources: &["Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 28"],
    checks: &[
        "many-digit values, tests/oracles/tube",
        "equilibrium, Hooke's law, boundary tractions and work of the loads of random tubes",
        "limit of the pressurised-tube at small load, nu = 0.5",
    ],
    build: |given| Ok(Box::new(LameTube::new(&Parameters::of(given)?)?)),
};
