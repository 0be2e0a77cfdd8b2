//! Plane stress and plane strain, for solutions that come as either.

use crate::exact::given::{Form, Given, ParameterEntry, refuse};
use crate::exact::solution::Refusal;
use crate::materials::LinearElastic;

/// Plane stress or plane strain: Hooke's law in the plane with constants of its own.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Plane {
    Stress,
    Strain,
}

impl Plane {
    pub(super) const NAMES: &'static [&'static str] = &["plane-stress", "plane-strain"];

    pub(super) const ENTRY: ParameterEntry = ParameterEntry::required(
        "state",
        Form::Word(Self::NAMES),
        "plane-stress: szz = 0, a thin plate; plane-strain: no strain along Z",
    );

    pub(super) fn of(given: &Given) -> Result<Self, Refusal> {
        match given.text("state") {
            Some("plane-stress") => Ok(Self::Stress),
            Some("plane-strain") => Ok(Self::Strain),
            other => {
                let found = other.unwrap_or("nothing");
                let hint = Self::NAMES.join(" or ");
                Err(refuse("state", format!("state is {found}"), hint))
            }
        }
    }

    /// E of the plane: `E/(1 - nu^2)` in plane strain.
    pub(super) fn young(self, law: &LinearElastic) -> f64 {
        match self {
            Self::Stress => law.e,
            Self::Strain => law.e / ((1.0 - law.nu) * (1.0 + law.nu)),
        }
    }

    /// nu of the plane: `nu/(1 - nu)` in plane strain.
    pub(super) fn poisson(self, law: &LinearElastic) -> f64 {
        match self {
            Self::Stress => law.nu,
            Self::Strain => law.nu / (1.0 - law.nu),
        }
    }

    /// (szz, ezz) for the sum of the in-plane normal stresses.
    pub(super) fn across(self, law: &LinearElastic, sum: f64) -> (f64, f64) {
        match self {
            Self::Stress => (0.0, -law.nu * sum / law.e),
            Self::Strain => (law.nu * sum, 0.0),
        }
    }

    pub(super) fn in_words(self) -> &'static str {
        match self {
            Self::Stress => "free of stress along Z (plane stress)",
            Self::Strain => "held along Z (plane strain)",
        }
    }

    pub(super) fn modelling(self) -> &'static str {
        match self {
            Self::Stress => {
                "a plane-stress model: the thickness strain of this field varies, so that a solid of finite \
                 thickness does not follow it exactly"
            }
            Self::Strain => "slice: plane strain; solid: no displacement along Z at both end faces",
        }
    }
}
