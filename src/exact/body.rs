//! The body an exact solution fills in its reference state, and how far a point lies off it.

use crate::mechanics::Point;
use std::f64::consts::PI;

/// The body an exact solution fills in its reference state.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Body {
    /// `inner <= R <= outer` about the Z axis, any length along Z; `inner = 0` is a solid cylinder.
    Tube { inner: f64, outer: f64 },
    /// The part `|Theta| <= angle/2` of a tube.
    Sector { inner: f64, outer: f64, angle: f64 },
    /// `inner <= R <= outer` about the origin.
    Sphere { inner: f64, outer: f64 },
    /// `(X/a)^2 + (Y/b)^2 <= 1`, any length along Z.
    Ellipse { a: f64, b: f64 },
    /// A rectangle in X and Y, any length along Z.
    Block { lower: [f64; 2], upper: [f64; 2] },
    /// Whatever the mesh covers; nothing nearer to the Z axis than `hole`.
    Free { hole: f64 },
}

/// The coordinate that runs from one wall to the other.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Frame {
    /// R about the Z axis; local axes radial, hoop, axial.
    Cylindrical,
    /// R about the origin; local axes radial, hoop about Z, hoop along the meridian.
    Spherical,
    /// No walls; local axes X, Y, Z.
    Cartesian,
}

impl Body {
    pub fn frame(&self) -> Frame {
        match self {
            Self::Tube { .. } | Self::Sector { .. } => Frame::Cylindrical,
            Self::Free { hole } if *hole > 0.0 => Frame::Cylindrical,
            Self::Sphere { .. } => Frame::Spherical,
            Self::Ellipse { .. } | Self::Block { .. } | Self::Free { .. } => Frame::Cartesian,
        }
    }

    /// The coordinate from wall to wall: distance from the axis or from the centre. For an ellipse the one that is the same on
    /// its whole boundary, `sqrt(a b)` there.
    pub fn radius(&self, point: &Point) -> f64 {
        match self {
            Self::Sphere { .. } => point.distance(&Point::new(0.0, 0.0, 0.0)),
            Self::Ellipse { a, b } => (point.x / a).hypot(point.y / b) * (a * b).sqrt(),
            _ => point.radius(),
        }
    }

    /// Where the inner and the outer wall are in [`Self::radius`]; `None` where there is no such wall.
    pub fn walls(&self) -> (Option<f64>, Option<f64>) {
        let hole = |inner: f64| (inner > 0.0).then_some(inner);
        match self {
            Self::Tube { inner, outer }
            | Self::Sector { inner, outer, .. }
            | Self::Sphere { inner, outer } => (hole(*inner), Some(*outer)),
            Self::Ellipse { a, b } => (None, Some((a * b).sqrt())),
            Self::Block { .. } => (None, None),
            Self::Free { hole: inner } => (hole(*inner), None),
        }
    }

    /// From the inner wall, or the axis, to the outer wall; `None` where no line runs through a wall.
    pub fn span(&self) -> Option<(f64, f64)> {
        match self {
            Self::Ellipse { .. } => None,
            _ => self
                .walls()
                .1
                .map(|outer| (self.walls().0.unwrap_or(0.0), outer)),
        }
    }

    /// How far a point lies outside, zero inside.
    pub fn outside(&self, point: &Point) -> f64 {
        if let Self::Block { lower, upper } = self {
            let off = |x: f64, i: usize| (lower[i] - x).max(x - upper[i]).max(0.0);
            return off(point.x, 0).hypot(off(point.y, 1));
        }
        let radius = self.radius(point);
        let (inner, outer) = self.walls();
        let within = inner.map_or(0.0, |inner| inner - radius);
        let beyond = outer.map_or(0.0, |outer| radius - outer);
        let across = match self {
            // the distance from the half plane that bounds the sector
            Self::Sector { angle, .. } => {
                radius * (point.theta().abs() - 0.5 * angle).clamp(0.0, 1.0)
            }
            _ => 0.0,
        };
        within.max(beyond).max(across).max(0.0)
    }

    /// Area of the full section, of a sphere its volume; `None` where the mesh decides.
    pub fn section_area(&self) -> Option<f64> {
        match self {
            Self::Tube { inner, outer } => Some(PI * (outer - inner) * (outer + inner)),
            Self::Sector {
                inner,
                outer,
                angle,
            } => Some(0.5 * angle * (outer - inner) * (outer + inner)),
            Self::Sphere { inner, outer } => {
                let squares = outer * outer + outer * inner + inner * inner;
                Some(4.0 / 3.0 * PI * (outer - inner) * squares)
            }
            Self::Ellipse { a, b } => Some(PI * a * b),
            Self::Block { lower, upper } => Some((upper[0] - lower[0]) * (upper[1] - lower[1])),
            Self::Free { .. } => None,
        }
    }

    /// Whether it is a section drawn out along Z, so that its volume is area times length.
    pub fn is_prism(&self) -> bool {
        !matches!(self, Self::Sphere { .. })
    }

    /// The angle that the full section takes about the axis, where it is a turn or part of one and grows with the area; of an
    /// ellipse that of (X/a, Y/b).
    pub fn turn(&self) -> Option<f64> {
        match self {
            Self::Tube { .. } | Self::Ellipse { .. } => Some(2.0 * PI),
            Self::Sector { angle, .. } => Some(*angle),
            _ => None,
        }
    }

    /// Wall thickness, or the smallest width: what tolerances are measured against.
    pub fn thickness(&self) -> f64 {
        match self {
            Self::Tube { inner, outer }
            | Self::Sector { inner, outer, .. }
            | Self::Sphere { inner, outer } => outer - inner,
            Self::Ellipse { a, b } => 2.0 * a.min(*b),
            Self::Block { lower, upper } => (upper[0] - lower[0]).min(upper[1] - lower[1]),
            Self::Free { hole } => *hole,
        }
    }

    /// The largest coordinate in it: what single precision is measured against.
    pub fn extent(&self) -> f64 {
        match self {
            Self::Tube { outer, .. } | Self::Sector { outer, .. } | Self::Sphere { outer, .. } => {
                *outer
            }
            Self::Ellipse { a, b } => a.max(*b),
            Self::Block { lower, upper } => lower
                .iter()
                .chain(upper)
                .fold(0.0_f64, |m, x| m.max(x.abs())),
            Self::Free { hole } => *hole,
        }
    }

    /// A reference point of that [`Self::radius`], on the X axis.
    pub fn point_at(&self, radius: f64) -> Point {
        Point::new(radius, 0.0, 0.0)
    }

    /// Some point well inside.
    pub fn middle(&self) -> Point {
        match self {
            Self::Block { lower, upper } => {
                let at = |share: f64, i: usize| lower[i] + share * (upper[i] - lower[i]);
                Point::new(at(0.4, 0), at(0.6, 1), 0.0)
            }
            Self::Free { hole } => Point::new(1.5 * hole + 0.3, 0.7 * hole + 0.2, 0.1),
            Self::Ellipse { a, b } => Point::new(0.4 * a, 0.3 * b, 0.0),
            _ => {
                let (inner, outer) = self.span().unwrap_or((0.0, 1.0));
                self.point_at(0.5 * (inner + outer))
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Red when a body takes a wrong measure or a point on its boundary for one outside.
    #[test]
    fn measures_and_boundaries() {
        let tube = Body::Tube {
            inner: 1.0,
            outer: 2.0,
        };
        let half = Body::Sector {
            inner: 1.0,
            outer: 2.0,
            angle: PI,
        };
        let sphere = Body::Sphere {
            inner: 1.0,
            outer: 2.0,
        };
        assert_eq!(tube.section_area(), Some(3.0 * PI));
        assert_eq!(half.section_area(), Some(1.5 * PI));
        assert_eq!(sphere.section_area(), Some(4.0 / 3.0 * PI * 7.0));
        let at = Point::new(0.6 * 2.0, 0.0, 0.8 * 2.0);
        assert!(sphere.outside(&at) < 1e-15 && (sphere.radius(&at) - 2.0).abs() < 1e-15);
        assert!((tube.outside(&at)).abs() < 1e-15);
        assert!((half.outside(&Point::new(-1.5, 0.0, 0.0)) - 1.5).abs() < 1e-15);
        assert_eq!(half.outside(&Point::new(0.0, 1.5, 0.0)), 0.0);
        let block = Body::Block {
            lower: [0.0, -1.0],
            upper: [3.0, 1.0],
        };
        assert_eq!(block.section_area(), Some(6.0));
        assert_eq!(block.outside(&Point::new(6.0, 5.0, 9.0)), 5.0);
        let ellipse = Body::Ellipse { a: 4.0, b: 1.0 };
        assert_eq!(ellipse.radius(&Point::new(0.0, 1.0, 0.0)), 2.0);
        assert_eq!(ellipse.walls(), (None, Some(2.0)));
        assert_eq!(
            Body::Free { hole: 1.0 }.outside(&Point::new(0.5, 0.0, 7.0)),
            0.5
        );
    }
}
