//! The twisted cylinder as a suite names it, and its loads from what a suite gives.

use super::TorsionExtension;
use super::solve::{Axial, Loads, Turn};
use crate::exact::catalogue::Entry;
use crate::exact::given::{Form, Given, ParameterEntry, refuse};
use crate::exact::solution::{Kinematics, Refusal};
use crate::exact::tube_entries;
use crate::materials::MaterialKind;
use crate::mechanics::Dimension;

pub(super) const NAME: &str = "torsion-extension";

pub(in crate::exact) const ENTRY: Entry = Entry {
    name: NAME,
    title: "Incompressible cylinder, solid or hollow, extended and twisted, finite strain",
    parameters: &[
        ParameterEntry::optional(
            "inner-radius",
            Form::Number(Dimension::Length),
            "0",
            "radius of the bore before loading; 0 is a solid cylinder",
        ),
        tube_entries::OUTER_RADIUS,
        tube_entries::MATERIAL,
        ParameterEntry::optional(
            "axial-stretch",
            Form::Number(Dimension::None),
            "",
            "length over reference length; give this or axial-force",
        ),
        ParameterEntry::optional(
            "axial-force",
            Form::Number(Dimension::Force),
            "",
            "net force on the section, tension positive; give this or axial-stretch",
        )
        .load(),
        ParameterEntry::optional(
            "twist",
            Form::Number(Dimension::PerLength),
            "",
            "angle of twist in rad per reference length; give this or torque",
        )
        .load(),
        ParameterEntry::optional(
            "torque",
            Form::Number(Dimension::Torque),
            "",
            "torque of the section; give this or twist",
        )
        .load(),
        tube_entries::INNER_PRESSURE,
        tube_entries::OUTER_PRESSURE,
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[MaterialKind::Incompressible],
    range: "any 0 <= inner-radius < outer-radius, isotropic laws; states on the path of proportional loads from rest; buckling and \
            other loss of the circular shape are not looked for",
    sources: &[
        "Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173",
        "Green & Zerna, Theoretical Elasticity (1954), section 3.6",
    ],
    checks: &[
        "many-digit solution of the textbook equations, tests/oracles/library/torsion-extension",
        "closed Mooney-Rivlin form of Rivlin, down to a twist of 1e-9",
        "energy derivatives: dE/dtwist = torque, dE/dln lz = N lz, and none by the bore",
        "equilibrium and wall tractions of random cylinders",
    ],
    build: |given| Ok(Box::new(TorsionExtension::new(given)?)),
};

/// One of two ways to say a thing.
fn either(given: &Given, names: [&'static str; 2]) -> Result<(usize, f64), Refusal> {
    match names.map(|name| given.get(name).is_some()) {
        [true, false] => Ok((0, given.finite(names[0])?)),
        [false, true] => Ok((1, given.finite(names[1])?)),
        [both, _] => {
            let what = if both {
                "both are given"
            } else {
                "neither is given"
            };
            let message = format!("{} or {}: {what}", names[0], names[1]);
            Err(refuse(names[0], message, "give one of them"))
        }
    }
}

pub(super) fn loads_of(given: &Given, solid: bool) -> Result<Loads, Refusal> {
    let axial = match either(given, ["axial-stretch", "axial-force"])? {
        (0, _) => Axial::Stretch((given.positive("axial-stretch")? - 1.0).ln_1p()),
        (_, force) => Axial::Force(force),
    };
    let turn = match either(given, ["twist", "torque"])? {
        (0, twist) => Turn::Twist(twist),
        (_, torque) => Turn::Torque(torque),
    };
    let walls = (
        given.finite_or("inner-pressure", 0.0)?,
        given.finite_or("outer-pressure", 0.0)?,
    );
    if solid && walls.0 != 0.0 {
        let message = format!("inner-pressure = {}, but the cylinder is solid", walls.0);
        return Err(refuse(
            "inner-pressure",
            message,
            "give an inner-radius, or no inner-pressure",
        ));
    }
    Ok(Loads { axial, turn, walls })
}
