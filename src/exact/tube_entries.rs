//! The pressurised tubes as a suite names them.

use super::catalogue::Entry;
use super::compressible::{self, CompressibleTube, CompressibleTubeProblem, incompressible_layer};
use super::given::{Form, Given, ParameterEntry, VariantEntry, refuse};
use super::parameters::Parameters;
use super::pressurised_tube::{Drive, Grading, Layer, TubeProblem};
use super::solution::{ExactSolution, Kinematics, Refusal};
use super::{Ends, LameTube, PressurisedTube};
use crate::materials::{Compressible, IncompressibleLaw, Material, MaterialKind};
use crate::mechanics::Dimension;
use std::sync::Arc;

/// Ends of a tube at finite strain.
const FINITE_ENDS: &[&str] = &[
    Ends::NAMES[0],
    Ends::NAMES[1],
    Ends::NAMES[2],
    Ends::NAMES[3],
];

/// Laws of finite strain, with and without a change of volume.
const FINITE: &[MaterialKind] = &[MaterialKind::Incompressible, MaterialKind::Compressible];

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

pub(super) const INNER_WALL_STRETCH: ParameterEntry = ParameterEntry::optional(
    "inner-wall-stretch",
    Form::Number(Dimension::None),
    "",
    "a/A of the bore, in place of inner-pressure",
);

pub(super) const ENCLOSED_VOLUME: ParameterEntry = ParameterEntry::optional(
    "enclosed-volume",
    Form::Number(Dimension::Area),
    "",
    "pi a^2 lz, deformed volume of the bore per unit reference length, in place of inner-pressure",
);

pub(super) const LOAD: ParameterEntry = ParameterEntry::optional(
    "load",
    Form::Word(&["follower", "dead"]),
    "follower",
    "dead: pressures per reference area that keep their size and direction",
);

const MATERIALS: ParameterEntry = ParameterEntry::required(
    "materials",
    Form::Materials,
    "one material for each layer, from the bore outwards",
);

const GRADINGS: &[VariantEntry] = &[
    VariantEntry {
        name: "power",
        parameters: &[ParameterEntry::required(
            "exponent",
            Form::Number(Dimension::None),
            "n of (R/A)^n",
        )],
        meaning: "moduli times (R/A)^n, A the radius of the bore; `power: n` is enough",
    },
    VariantEntry {
        name: "exponential",
        parameters: &[ParameterEntry::required(
            "rate",
            Form::Number(Dimension::PerLength),
            "k of exp(k (R - A))",
        )],
        meaning: "moduli times exp(k (R - A)); `exponential: k` is enough",
    },
    VariantEntry {
        name: "table",
        parameters: &[
            ParameterEntry::required("R", Form::Numbers(Dimension::Length), "rising radii"),
            ParameterEntry::required(
                "factor",
                Form::Numbers(Dimension::None),
                "factor on the moduli at each of them",
            ),
        ],
        meaning: "moduli times a factor that is piecewise linear in R",
    },
];

/// The tube of layers that a suite gives, less its layers.
fn problem(given: &Given, inner_radius: f64, layers: Vec<Layer>) -> Result<TubeProblem, Refusal> {
    Ok(TubeProblem {
        inner_radius,
        layers,
        ends: given.ends()?,
        drive: drive(given)?,
        outer_pressure: given.finite_or("outer-pressure", 0.0)?,
        dead: given.text("load") == Some("dead"),
    })
}

/// What is prescribed at the bore: one of three.
pub(super) fn drive(given: &Given) -> Result<Drive, Refusal> {
    let names = ["inner-pressure", "inner-wall-stretch", "enclosed-volume"];
    let there: Vec<&'static str> = names
        .into_iter()
        .filter(|name| given.get(name).is_some())
        .collect();
    if let [_, second, ..] = there.as_slice() {
        let message = format!(
            "{} are given, and one fixes the others",
            there.join(" and ")
        );
        return Err(refuse(second, message, "keep one of them"));
    }
    match there.first() {
        Some(&"inner-wall-stretch") => given
            .positive("inner-wall-stretch")
            .map(Drive::InnerWallStretch),
        Some(&"enclosed-volume") => given.positive("enclosed-volume").map(Drive::EnclosedVolume),
        _ => given
            .finite_or("inner-pressure", 0.0)
            .map(Drive::InnerPressure),
    }
}

/// The law of an incompressible material.
fn incompressible(material: &Material) -> Result<Arc<dyn IncompressibleLaw>, Refusal> {
    match material {
        Material::Incompressible(law) => Ok(law.clone()),
        other => {
            let message = format!("{} is not incompressible", other.in_words());
            Err(refuse("material", message, "use laws of one kind"))
        }
    }
}

fn pressurised_tube(given: &Given) -> Result<Box<dyn ExactSolution>, Refusal> {
    let (inner, outer) = (given.finite("inner-radius")?, given.finite("outer-radius")?);
    tube_of(given, inner, &[(outer, given.material()?)])
}

fn layered_tube(given: &Given) -> Result<Box<dyn ExactSolution>, Refusal> {
    let (radii, materials) = (given.numbers("radii")?, given.material_list()?);
    if radii.len() != materials.len() + 1 || materials.is_empty() {
        let message = format!(
            "{} radii and {} materials: each layer has one material and lies between two radii",
            radii.len(),
            materials.len()
        );
        return Err(refuse(
            "radii",
            message,
            "radii: [A, C, B], materials: [inner, outer]",
        ));
    }
    let layers: Vec<_> = radii[1..].iter().copied().zip(materials).collect();
    tube_of(given, radii[0], &layers)
}

/// A tube of layers given by outer radius and material: with a finite bulk modulus anywhere it is the compressible one.
fn tube_of(
    given: &Given,
    inner_radius: f64,
    layers: &[(f64, &Material)],
) -> Result<Box<dyn ExactSolution>, Refusal> {
    let any_compressible = layers
        .iter()
        .any(|(_, m)| matches!(m, Material::Compressible(_)));
    if any_compressible {
        return compressible_tube(given, inner_radius, layers);
    }
    let layers = layers.iter().map(|(radius, material)| {
        Ok(Layer {
            outer_radius: *radius,
            law: incompressible(material)?,
            grading: Grading::None,
        })
    });
    let layers = layers.collect::<Result<Vec<_>, Refusal>>()?;
    let problem = problem(given, inner_radius, layers)?;
    Ok(Box::new(PressurisedTube::solve(&problem)?))
}

/// A law for a compressible wall; one that preserves volume has an infinite bulk modulus there.
pub(super) fn compressible(material: &Material) -> Result<Compressible, Refusal> {
    match material {
        Material::Compressible(law) => Ok(law.clone()),
        Material::Incompressible(law) => Ok(incompressible_layer(law.clone())),
        other => {
            let message = format!("{} is no law of finite strain", other.in_words());
            Err(refuse("material", message, ""))
        }
    }
}

fn compressible_tube(
    given: &Given,
    inner_radius: f64,
    layers: &[(f64, &Material)],
) -> Result<Box<dyn ExactSolution>, Refusal> {
    let layers = layers
        .iter()
        .map(|(radius, material)| Ok((*radius, compressible(material)?)));
    let problem = CompressibleTubeProblem {
        inner_radius,
        layers: layers.collect::<Result<Vec<_>, Refusal>>()?,
        ends: given.ends()?,
        drive: compressible_drive(given)?,
        outer_pressure: given.finite_or("outer-pressure", 0.0)?,
        load: match given.text("load") {
            Some("dead") => compressible::Load::Dead,
            _ => compressible::Load::Follower,
        },
    };
    Ok(Box::new(CompressibleTube::solve(&problem)?))
}

/// The same choice for a compressible wall.
pub(super) fn compressible_drive(given: &Given) -> Result<compressible::Drive, Refusal> {
    Ok(match drive(given)? {
        Drive::InnerPressure(p) => compressible::Drive::InnerPressure(p),
        Drive::InnerWallStretch(l) => compressible::Drive::InnerWallStretch(l),
        Drive::EnclosedVolume(v) => compressible::Drive::EnclosedVolume(v),
    })
}

fn graded_tube(given: &Given) -> Result<Box<dyn ExactSolution>, Refusal> {
    let missing = || refuse("grading", "grading is missing".to_string(), "");
    let (name, block) = given.variant("grading").ok_or_else(missing)?;
    let grading = match name {
        "power" => Grading::Power(block.finite("exponent")?),
        "exponential" => Grading::Exponential(block.finite("rate")?),
        _ => {
            let (radii, factors) = (block.numbers("R")?, block.numbers("factor")?);
            if radii.len() != factors.len() {
                let message = format!("{} radii and {} factors", radii.len(), factors.len());
                return Err(refuse("factor", message, "one factor for each radius"));
            }
            let rows = radii.iter().copied().zip(factors.iter().copied());
            Grading::Table(rows.collect())
        }
    };
    let layer = Layer {
        outer_radius: given.finite("outer-radius")?,
        law: incompressible(given.material()?)?,
        grading,
    };
    let problem = problem(given, given.finite("inner-radius")?, vec![layer])?;
    Ok(Box::new(PressurisedTube::solve(&problem)?))
}
/// How every tube of this wall was checked.
const WALL_CHECKS: &[&str] = &[
    "many-digit integration of equilibrium in the deformed radius, tests/oracles/library",
    "energy derivatives: dE/dg = pi lz a^2 (Pi - Po), dE/de = N lz - pi lz a^2 (Pi - Po) at Po = 0",
    "equal layers and a grading of power 0 are the homogeneous tube; equilibrium and tractions of random walls",
];

pub(super) const LAYERED_TUBE: Entry = Entry {
    name: "layered-tube",
    title: "Tube of bonded layers under pressure, finite strain",
    parameters: &[
        ParameterEntry::required(
            "radii",
            Form::Numbers(Dimension::Length),
            "bore, interfaces and outer wall before loading, rising",
        ),
        MATERIALS,
        ends(FINITE_ENDS),
        INNER_PRESSURE,
        INNER_WALL_STRETCH,
        ENCLOSED_VOLUME,
        OUTER_PRESSURE,
        LOAD,
    ],
    kinematics: Kinematics::Finite,
    material_kinds: FINITE,
    range: "any number of layers; otherwise as pressurised-tube; at an interface the stresses are those of the inner layer",
    sources: &["Ogden, Non-Linear Elastic Deformations (1984), section 5.3, layer by layer"],
    checks: WALL_CHECKS,
    build: layered_tube,
};

pub(super) const GRADED_TUBE: Entry = Entry {
    name: "graded-tube",
    title: "Incompressible tube whose moduli vary with the radius, finite strain",
    parameters: &[
        INNER_RADIUS,
        OUTER_RADIUS,
        MATERIAL,
        ParameterEntry::required(
            "grading",
            Form::Variant(GRADINGS),
            "factor on every modulus of the law; exponents and locking constants stay",
        ),
        ends(FINITE_ENDS),
        INNER_PRESSURE,
        INNER_WALL_STRETCH,
        ENCLOSED_VOLUME,
        OUTER_PRESSURE,
        LOAD,
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[MaterialKind::Incompressible],
    range: "factors above zero in the whole wall; otherwise as pressurised-tube",
    sources: &["Ogden, Non-Linear Elastic Deformations (1984), section 5.3, with moduli of R"],
    checks: WALL_CHECKS,
    build: graded_tube,
};

pub(super) const PRESSURISED_TUBE: Entry = Entry {
    name: "pressurised-tube",
    title: "Tube under inner and outer pressure, finite strain",
    parameters: &[
        INNER_RADIUS,
        OUTER_RADIUS,
        ends(FINITE_ENDS),
        MATERIAL,
        INNER_PRESSURE,
        INNER_WALL_STRETCH,
        ENCLOSED_VOLUME,
        OUTER_PRESSURE,
        LOAD,
    ],
    kinematics: Kinematics::Finite,
    material_kinds: FINITE,
    range: "any 0 < inner-radius < outer-radius, checked for ratios from 1.0001 to 100; pressures up to the first \
            limit of the inner pressure (maximum or asymptote); axial force applied before the pressure",
    sources: &[
        "Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173",
        "Ogden, Non-Linear Elastic Deformations (1984), section 5.3",
    ],
    checks: &[
        "many-digit solutions, tests/oracles/tube and tests/oracles/library; Oden (1972) p. 325",
        "energy derivatives: dE/dg = pi lz a^2 (Pi - Po), dE/de = N lz - pi lz a^2 (Pi - Po) at Po = 0",
        "equilibrium, boundary tractions and axial force of random tubes",
    ],
    build: pressurised_tube,
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
