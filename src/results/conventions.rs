//! What a result set means by its numbers. The default is the exchange format; anything else is declared by
//! the suite, and printed in the report.

use crate::mechanics::UnitSystem;
use crate::mechanics::stress_measure::StressMeasure;
use std::collections::BTreeMap;

/// What the column `p` holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum PressureKind {
    /// The mean of the normal stresses: -tr(sigma)/3 (compression positive).
    #[default]
    Mean,
    /// The multiplier of a mixed formulation, whose relation to the mean depends on the split of the energy.
    Multiplier,
}

/// Which pressure is positive.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum PressureSign {
    #[default]
    CompressionPositive,
    TensionPositive,
}

/// What a shear component is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Shear {
    #[default]
    Tensor,
    /// The exported number is twice the tensor component.
    Engineering,
}

/// The unit of the column `Theta`.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum AngleUnit {
    #[default]
    Radians,
    Degrees,
}

/// The conventions of one result set.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Conventions {
    pub stress: StressMeasure,
    pub pressure: PressureKind,
    pub pressure_sign: PressureSign,
    pub shear: Shear,
    pub angle: AngleUnit,
    /// Particles turn about the axis: cylindrical stress components could be along axes that turn with them or not, and
    /// are refused.
    pub turning: bool,
}

impl Conventions {
    /// One line for reports.
    pub fn describe(&self) -> String {
        let p = match self.pressure {
            PressureKind::Mean => "mean of the normal stresses",
            PressureKind::Multiplier => "multiplier of a mixed formulation",
        };
        let sign = match self.pressure_sign {
            PressureSign::CompressionPositive => "compression positive",
            PressureSign::TensionPositive => "tension positive",
        };
        let shear = match self.shear {
            Shear::Tensor => "tensor components",
            Shear::Engineering => "twice the tensor components",
        };
        let angle = match self.angle {
            AngleUnit::Radians => "radians",
            AngleUnit::Degrees => "degrees",
        };
        let stress = self.stress.name();
        format!(
            "stress: {stress}, tension positive; shear: {shear}; p: {p}, {sign}; angles: {angle}"
        )
    }
}

/// Headers of a solver for names of the exchange format: `all` holds for every table, the others for one and
/// come first.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct ColumnNames {
    pub all: BTreeMap<String, String>,
    pub nodes: BTreeMap<String, String>,
    pub elements: BTreeMap<String, String>,
    pub points: BTreeMap<String, String>,
    pub totals: BTreeMap<String, String>,
}

/// How to read a result set.
#[derive(Debug, Clone, PartialEq)]
pub struct Reading {
    pub columns: ColumnNames,
    pub conventions: Conventions,
    /// The units the files are written in.
    pub units_from: UnitSystem,
    /// The units of everything handed out.
    pub units_to: UnitSystem,
    /// The step to be judged; `None` is the largest there is.
    pub step: Option<i64>,
    /// The standard rule of the integration points, where points.csv gives no coordinates.
    pub point_rule: Option<String>,
}

impl Default for Reading {
    /// The exchange format, in one system of units.
    fn default() -> Self {
        Self {
            columns: ColumnNames::default(),
            conventions: Conventions::default(),
            units_from: UnitSystem::si(),
            units_to: UnitSystem::si(),
            step: None,
            point_rule: None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_default_is_the_exchange_format_and_every_change_is_visible() {
        let usual = Conventions::default();
        assert_eq!(
            usual.describe(),
            "stress: cauchy, tension positive; shear: tensor components; p: mean of the normal stresses, \
             compression positive; angles: radians"
        );
        let others = [
            Conventions {
                stress: StressMeasure::Kirchhoff,
                ..usual
            },
            Conventions {
                pressure: PressureKind::Multiplier,
                ..usual
            },
            Conventions {
                pressure_sign: PressureSign::TensionPositive,
                ..usual
            },
            Conventions {
                shear: Shear::Engineering,
                ..usual
            },
            Conventions {
                angle: AngleUnit::Degrees,
                ..usual
            },
        ];
        for other in others {
            assert_ne!(other.describe(), usual.describe());
        }
    }
}
