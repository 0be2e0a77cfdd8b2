//! Single numbers that are known where no field is: a published value, a measured or tabulated curve.

use crate::mechanics::{Dimension, Point};
use crate::numerics::Monotone;

/// What is known.
#[derive(Debug, Clone, PartialEq)]
pub enum KnownQuantity {
    /// A number of the whole model, by its name in totals.csv.
    Total(String),
    /// Displacement along X, Y or Z (0, 1, 2) at a reference point.
    Displacement(usize, Point),
    /// Cauchy stress xx, yy, zz, xy, yz, zx (0 to 5) at a reference point.
    Stress(usize, Point),
}

/// Its value: one number, or a curve over another total of the same result set.
#[derive(Debug, Clone, PartialEq)]
pub enum Known {
    Number {
        value: f64,
        half_width: f64,
    },
    Curve {
        /// Name in totals.csv of what the curve is over.
        over: String,
        value: Monotone,
        half_width: Monotone,
    },
}

/// A known number with where it is from.
#[derive(Debug, Clone, PartialEq)]
pub struct KnownValue {
    pub id: String,
    pub quantity: KnownQuantity,
    pub known: Known,
    pub dimension: Dimension,
    pub source: String,
}

impl KnownQuantity {
    /// From its name (`ux`, `syy`, or a total) and a point.
    pub fn of(name: &str, point: Option<Point>) -> Result<Self, String> {
        const DISPLACEMENTS: [&str; 3] = ["ux", "uy", "uz"];
        const STRESSES: [&str; 6] = ["sxx", "syy", "szz", "sxy", "syz", "szx"];
        let index = |names: &[&str]| names.iter().position(|n| *n == name);
        let at = |make: fn(usize, Point) -> Self, i: usize| match point {
            Some(point) => Ok(make(i, point)),
            None => Err(format!(
                "{name} is known at a point only, which is not given"
            )),
        };
        if let Some(i) = index(&DISPLACEMENTS) {
            return at(Self::Displacement, i);
        }
        if let Some(i) = index(&STRESSES) {
            return at(Self::Stress, i);
        }
        Ok(Self::Total(name.to_string()))
    }

    /// What a displacement or a stress is measured in; of a total only its name tells.
    pub fn dimension(&self) -> Dimension {
        match self {
            Self::Displacement(..) => Dimension::Length,
            Self::Stress(..) => Dimension::Stress,
            Self::Total(name) => match name.as_str() {
                "inner_radius" | "outer_radius" => Dimension::Length,
                "axial_force" => Dimension::Force,
                "inner_pressure" | "outer_pressure" | "limit_pressure" => Dimension::Stress,
                _ => Dimension::None,
            },
        }
    }
}

impl Known {
    /// Value and half width, or why there is none: `totals` gives the numbers of the result set.
    pub fn at(&self, totals: impl Fn(&str) -> Option<f64>) -> Result<(f64, f64), String> {
        match self {
            Self::Number { value, half_width } => Ok((*value, *half_width)),
            Self::Curve {
                over,
                value,
                half_width,
            } => {
                let x = totals(over).ok_or(format!(
                    "totals.csv has no `{over}`, over which the reference is tabulated"
                ))?;
                let (low, high) = value.range();
                let outside = || {
                    format!("{over} = {x} is outside the table, which runs from {low} to {high}")
                };
                let value = value.value(x).ok_or_else(outside)?;
                Ok((value, half_width.value(x).unwrap_or(0.0)))
            }
        }
    }
}
