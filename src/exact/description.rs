//! A solution in words and in a picture, for reports and briefs, and the line its stations stand on.

use crate::mechanics::Point;

/// What a solution is, in the units of its suite.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Description {
    /// The reference body: `tube, inner radius 8 mm, outer radius 10 mm`.
    pub body: String,
    /// Loads or prescribed deformation.
    pub load: String,
    /// The end condition, where there is one.
    pub ends: Option<String>,
    /// How to model it, one line each: what the load acts on, how ends and cuts are held.
    pub modelling: Vec<String>,
    /// Totals worth exporting, in the exchange format's names.
    pub totals: Vec<&'static str>,
    pub sketch: Option<Sketch>,
}

/// A ring with pressures on its walls.
#[derive(Debug, Clone, PartialEq)]
pub struct Sketch {
    pub inner_radius: f64,
    pub outer_radius: f64,
    pub inner_pressure: f64,
    pub outer_pressure: f64,
    /// The end condition in two words.
    pub ends: &'static str,
}

/// The line that `exact --stations` runs along, and what it prints there.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Line {
    pub from: Point,
    pub to: Point,
    pub columns: &'static [&'static str],
}

impl Line {
    /// From `inner` to `outer` along the X axis.
    pub fn radial(inner: f64, outer: f64, columns: &'static [&'static str]) -> Self {
        Self {
            from: Point::new(inner, 0.0, 0.0),
            to: Point::new(outer, 0.0, 0.0),
            columns,
        }
    }

    /// Columns of a tube.
    pub const TUBE: &'static [&'static str] = &[
        "R", "r", "u_r", "lambda_r", "lambda_t", "lambda_z", "srr", "stt", "szz", "p", "J", "W",
    ];
    /// Columns of a sphere.
    pub const SPHERE: &'static [&'static str] = &[
        "R", "r", "u_r", "lambda_r", "lambda_t", "srr", "stt", "p", "J", "W",
    ];
    /// Columns of a body without an axis.
    pub const CARTESIAN: &'static [&'static str] = &[
        "X", "Y", "Z", "ux", "uy", "uz", "sxx", "syy", "szz", "sxy", "syz", "szx", "p", "J", "W",
    ];
}
