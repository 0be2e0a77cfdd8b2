//! Both shears of a tube as a suite names them.

use super::{TubeShear, Way};
use crate::exact::catalogue::Entry;
use crate::exact::given::{Form, ParameterEntry};
use crate::exact::solution::Kinematics;
use crate::exact::tube_entries;
use crate::materials::MaterialKind;
use crate::mechanics::Dimension;

const RANGE: &str = "any 0 < inner-radius < outer-radius, isotropic laws; the first rising branch of the law's shear stress, up to an amount of \
                     shear of 1e4 or the lock of the law";

const SOURCES: &[&str] = &[
    "Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173",
    "Ogden, Non-Linear Elastic Deformations (1984), section 5.3",
];

const CHECKS: &[&str] = &[
    "many-digit solution of the textbook equations, tests/oracles/library",
    "closed forms of constant shear modulus: neo-Hookean and Mooney-Rivlin",
    "energy derivative by the motion = load; equilibrium of random tubes",
];

pub(in crate::exact) const AZIMUTHAL_SHEAR: Entry = Entry {
    name: "azimuthal-shear",
    title: "Incompressible tube bonded to rigid cylinders, the outer one turned, finite strain",
    parameters: &[
        tube_entries::INNER_RADIUS,
        tube_entries::OUTER_RADIUS,
        tube_entries::MATERIAL,
        ParameterEntry::required(
            "rotation",
            Form::Number(Dimension::Angle),
            "angle by which the outer wall is turned about the axis; the inner wall is held",
        )
        .load(),
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[MaterialKind::Incompressible],
    range: RANGE,
    sources: SOURCES,
    checks: CHECKS,
    build: |given| Ok(Box::new(TubeShear::new(given, Way::Azimuthal)?)),
};

pub(in crate::exact) const AXIAL_SHEAR: Entry = Entry {
    name: "axial-shear",
    title: "Incompressible tube bonded to rigid cylinders, the outer one moved along the axis, finite strain",
    parameters: &[
        tube_entries::INNER_RADIUS,
        tube_entries::OUTER_RADIUS,
        tube_entries::MATERIAL,
        ParameterEntry::required(
            "displacement",
            Form::Number(Dimension::Length),
            "axial displacement of the outer wall; the inner wall is held",
        )
        .load(),
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[MaterialKind::Incompressible],
    range: RANGE,
    sources: SOURCES,
    checks: CHECKS,
    build: |given| Ok(Box::new(TubeShear::new(given, Way::Axial)?)),
};
