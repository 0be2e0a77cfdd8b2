//! Where a row is and how it moved: coordinates and displacements, Cartesian out.
//!
//! Cylindrical displacements and stresses are components along the radial, hoop and axial directions at the
//! row's reference position. An axisymmetric model (`R`, `Z`, no `Theta`) lies in the half plane Theta = 0:
//! its positions are `[R, 0, Z]`, its displacements `[ur, ut, uz]`, so that X is radial and Y is hoop.

use super::conventions::{AngleUnit, Conventions};
use super::header::Header;
use super::log::Log;
use super::table::Row;
use crate::input::Finding;

/// What a model is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum ModelKind {
    /// A section in the X-Y plane, per unit thickness.
    Planar,
    /// A body.
    Solid,
    /// A half section `[R, 0, Z]`, standing for the whole turn.
    Axisymmetric,
}

impl ModelKind {
    /// With its article, for messages.
    pub fn words(self) -> &'static str {
        match self {
            Self::Planar => "a plane",
            Self::Solid => "a solid",
            Self::Axisymmetric => "an axisymmetric",
        }
    }

    /// The word reports use.
    pub fn name(self) -> &'static str {
        match self {
            Self::Planar => "planar",
            Self::Solid => "solid",
            Self::Axisymmetric => "axisymmetric",
        }
    }

    /// The coordinates elements are mapped in: `[R, Z, 0]` for an axisymmetric position, else unchanged.
    pub fn in_plane(self, position: [f64; 3]) -> [f64; 3] {
        match self {
            Self::Axisymmetric => [position[0], position[2], 0.0],
            Self::Planar | Self::Solid => position,
        }
    }

    /// The inverse of [`Self::in_plane`].
    pub fn in_space(self, mapped: [f64; 3]) -> [f64; 3] {
        match self {
            Self::Axisymmetric => [mapped[0], 0.0, mapped[1]],
            Self::Planar | Self::Solid => mapped,
        }
    }
}

/// The columns that say where a row is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum PositionColumns {
    Cartesian {
        x: usize,
        y: usize,
        z: Option<usize>,
    },
    Cylindrical {
        r: usize,
        theta: usize,
        z: Option<usize>,
    },
    Meridian {
        r: usize,
        z: usize,
    },
}

/// A position with the direction of its radius.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Placed {
    pub position: [f64; 3],
    /// Cosine and sine of the angle from the X axis.
    pub direction: (f64, f64),
}

impl PositionColumns {
    /// True if any column of a position is there.
    pub fn any(header: &Header) -> bool {
        ["X", "Y", "R", "Theta"]
            .iter()
            .any(|c| header.peek(c).is_some())
    }

    /// Finds the columns; incomplete sets of them are findings.
    pub fn resolve(header: &mut Header, log: &mut Log) -> Option<Self> {
        let has = |header: &Header, name: &str| header.peek(name).is_some();
        let cartesian = has(header, "X") || has(header, "Y");
        if cartesian || !has(header, "R") {
            let (x, y) = (header.require("X", log), header.require("Y", log));
            let z = header.find("Z", log);
            return Some(Self::Cartesian { x: x?, y: y?, z });
        }
        let r = header.require("R", log);
        if has(header, "Theta") {
            let theta = header.require("Theta", log);
            let z = header.find("Z", log);
            return Some(Self::Cylindrical {
                r: r?,
                theta: theta?,
                z,
            });
        }
        let z = header.require("Z", log);
        Some(Self::Meridian { r: r?, z: z? })
    }

    pub fn has_z(self) -> bool {
        match self {
            Self::Cartesian { z, .. } | Self::Cylindrical { z, .. } => z.is_some(),
            Self::Meridian { .. } => true,
        }
    }

    /// The kind of model, given the dimension of its elements where that is known.
    pub fn kind(self, dimension: Option<usize>) -> ModelKind {
        match (self, dimension) {
            (Self::Meridian { .. }, _) => ModelKind::Axisymmetric,
            (_, Some(2)) => ModelKind::Planar,
            (_, Some(_)) => ModelKind::Solid,
            (_, None) if self.has_z() => ModelKind::Solid,
            _ => ModelKind::Planar,
        }
    }

    /// Reads a position; `scale` converts lengths.
    pub fn read(
        self,
        row: &Row,
        conventions: &Conventions,
        scale: f64,
        log: &mut Log,
    ) -> Option<Placed> {
        let mut length = |column: usize| row.number(column, log).map(|v| v * scale);
        match self {
            Self::Cartesian { x, y, z } => {
                let (x, y) = (length(x), length(y));
                let z = z.map_or(Some(0.0), length);
                let (x, y, z) = (x?, y?, z?);
                let radius = x.hypot(y);
                let direction = if radius > 0.0 {
                    (x / radius, y / radius)
                } else {
                    (1.0, 0.0)
                };
                Some(Placed {
                    position: [x, y, z],
                    direction,
                })
            }
            Self::Cylindrical { r, theta, z } => {
                let (radius, angle) = (length(r), row.number(theta, log));
                let z = z.map_or(Some(0.0), |z| row.number(z, log).map(|v| v * scale));
                let (radius, angle, z) = (radius?, angle?, z?);
                check_radius(row, r, radius, log)?;
                let direction = direction(angle, conventions.angle);
                let position = [radius * direction.0, radius * direction.1, z];
                Some(Placed {
                    position,
                    direction,
                })
            }
            Self::Meridian { r, z } => {
                let (radius, z) = (length(r), length(z));
                let (radius, z) = (radius?, z?);
                check_radius(row, r, radius, log)?;
                Some(Placed {
                    position: [radius, 0.0, z],
                    direction: (1.0, 0.0),
                })
            }
        }
    }
}

fn check_radius(row: &Row, column: usize, radius: f64, log: &mut Log) -> Option<()> {
    if radius < 0.0 {
        let what = format!("the radius is {radius}");
        log.add(Finding::refused("positive-radius", row.place(column), what));
        return None;
    }
    Some(())
}

/// Cosine and sine; quarter turns in degrees are exact.
fn direction(angle: f64, unit: AngleUnit) -> (f64, f64) {
    match unit {
        AngleUnit::Radians => (angle.cos(), angle.sin()),
        AngleUnit::Degrees => match angle.rem_euclid(360.0) {
            0.0 => (1.0, 0.0),
            90.0 => (0.0, 1.0),
            180.0 => (-1.0, 0.0),
            270.0 => (0.0, -1.0),
            rest => (rest.to_radians().cos(), rest.to_radians().sin()),
        },
    }
}

/// The columns that say how a node moved.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum DisplacementColumns {
    Cartesian {
        x: usize,
        y: usize,
        z: Option<usize>,
    },
    Cylindrical {
        r: usize,
        t: Option<usize>,
        z: Option<usize>,
    },
    /// Current coordinates.
    Current {
        x: usize,
        y: usize,
        z: Option<usize>,
    },
}

impl DisplacementColumns {
    /// Finds the columns, or says why there is no displacement. A set that is there in part is a finding.
    pub fn resolve(header: &mut Header, kind: ModelKind, log: &mut Log) -> Result<Self, String> {
        let axisymmetric = kind == ModelKind::Axisymmetric;
        let sets: &[[&str; 3]] = if axisymmetric {
            &[["ur", "ut", "uz"]]
        } else {
            &[["ux", "uy", "uz"], ["ur", "ut", "uz"], ["x", "y", "z"]]
        };
        let there =
            |header: &Header, set: &[&str; 3]| set[..2].iter().any(|c| header.peek(c).is_some());
        let Some(&[first, second, third]) = sets.iter().find(|set| there(header, set)) else {
            return Err(header.missing_reason(sets[0][0]));
        };
        let incomplete = || "the displacement is incomplete".to_string();
        let a = header.require(first, log).ok_or_else(incomplete);
        let b = if axisymmetric {
            Ok(header.find(second, log))
        } else {
            header.require(second, log).map(Some).ok_or_else(incomplete)
        };
        let c = if kind == ModelKind::Planar {
            Ok(header.find(third, log))
        } else {
            header.require(third, log).map(Some).ok_or_else(incomplete)
        };
        let (a, b, z) = (a?, b?, c?);
        match (first, b) {
            ("ur", t) => Ok(Self::Cylindrical { r: a, t, z }),
            ("ux", Some(y)) => Ok(Self::Cartesian { x: a, y, z }),
            (_, Some(y)) => Ok(Self::Current { x: a, y, z }),
            (_, None) => Err(incomplete()),
        }
    }

    /// Reads a displacement; `scale` converts lengths.
    pub fn read(self, row: &Row, placed: &Placed, scale: f64, log: &mut Log) -> Option<[f64; 3]> {
        let mut length = |column: usize| row.number(column, log).map(|v| v * scale);
        let mut three = |a: usize, b: Option<usize>, c: Option<usize>, missing: [f64; 2]| {
            let a = length(a);
            let b = b.map_or(Some(missing[0]), &mut length);
            let c = c.map_or(Some(missing[1]), &mut length);
            Some([a?, b?, c?])
        };
        match self {
            Self::Cartesian { x, y, z } => three(x, Some(y), z, [0.0; 2]),
            Self::Cylindrical { r, t, z } => {
                let [ur, ut, uz] = three(r, t, z, [0.0; 2])?;
                let (c, s) = placed.direction;
                Some([ur * c - ut * s, ur * s + ut * c, uz])
            }
            Self::Current { x, y, z } => {
                let from = placed.position;
                let at = three(x, Some(y), z, [from[1], from[2]])?;
                Some([at[0] - from[0], at[1] - from[1], at[2] - from[2]])
            }
        }
    }
}
