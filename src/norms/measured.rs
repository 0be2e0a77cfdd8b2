//! One measure of one mesh: its numbers, or the reasons why there are none.

use super::accumulate::{NoNorm, SquaredError};

/// One measure of one mesh.
#[derive(Debug, Clone, PartialEq)]
pub struct Measured {
    /// Name in the catalogue.
    pub measure: String,
    /// A pure number, or why there is none.
    pub relative: Result<f64, String>,
    /// In `unit`.
    pub absolute: Result<f64, String>,
    /// The computed number itself, for numbers at a place and totals.
    pub value: Option<f64>,
    /// What it is held against: the exact number, or the norm of the exact field.
    pub exact: Option<f64>,
    pub unit: String,
    pub place: Option<String>,
    /// What was compared.
    pub note: Option<String>,
}

impl Measured {
    pub(super) fn missing(measure: &str, unit: &str, why: &str) -> Self {
        Self {
            measure: measure.to_string(),
            relative: Err(why.to_string()),
            absolute: Err(why.to_string()),
            value: None,
            exact: None,
            unit: unit.to_string(),
            place: None,
            note: None,
        }
    }

    /// A computed number against an exact one.
    pub(super) fn number(
        measure: &str,
        unit: &str,
        computed: f64,
        exact: f64,
        place: Option<String>,
    ) -> Self {
        let error = (computed - exact).abs();
        let relative = if exact == 0.0 {
            Err(NoNorm::ExactIsZero.to_string())
        } else {
            Ok(error / exact.abs())
        };
        Self {
            measure: measure.to_string(),
            relative,
            absolute: Ok(error),
            value: Some(computed),
            exact: Some(exact),
            unit: unit.to_string(),
            place,
            note: None,
        }
    }

    pub(super) fn norm(measure: &str, unit: &str, norm: &SquaredError) -> Self {
        match norm.finish() {
            Err(why) => Self::missing(measure, unit, &why.to_string()),
            Ok(norm) => Self {
                relative: norm.relative().map_err(|why| why.to_string()),
                absolute: Ok(norm.absolute),
                exact: Some(norm.exact),
                ..Self::missing(measure, unit, "")
            },
        }
    }

    /// The root mean square of the same field.
    pub(super) fn root_mean_square(measure: &str, unit: &str, norm: &SquaredError) -> Self {
        match norm.finish() {
            Err(why) => Self::missing(measure, unit, &why.to_string()),
            Ok(norm) => {
                let (error, exact) = norm.root_mean_squares();
                Self {
                    relative: norm.relative().map_err(|why| why.to_string()),
                    absolute: Ok(error),
                    exact: Some(exact),
                    ..Self::missing(measure, unit, "")
                }
            }
        }
    }

    pub(super) fn noted(mut self, note: Option<String>) -> Self {
        self.note = note;
        self
    }
}
