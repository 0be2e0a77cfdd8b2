//! A reference (undeformed) point, in Cartesian coordinates, with its cylindrical reading about the Z axis.

/// A reference point `(X, Y, Z)`; a two-dimensional model has `Z = 0`. Unit: the suite's length.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    pub x: f64,
    pub y: f64,
    pub z: f64,
}

impl Point {
    pub const fn new(x: f64, y: f64, z: f64) -> Self {
        Self { x, y, z }
    }

    /// From cylindrical coordinates; `theta` in radians from the X axis.
    pub fn from_cylindrical(radius: f64, theta: f64, z: f64) -> Self {
        Self::new(radius * theta.cos(), radius * theta.sin(), z)
    }

    /// Distance from the Z axis.
    pub fn radius(&self) -> f64 {
        self.x.hypot(self.y)
    }

    /// Angle from the X axis, in radians, in (-pi, pi].
    pub fn theta(&self) -> f64 {
        self.y.atan2(self.x)
    }

    /// Cosine and sine of [`Self::theta`], from the coordinates themselves; (1, 0) on the axis.
    pub fn direction(&self) -> (f64, f64) {
        let radius = self.radius();
        if radius == 0.0 {
            (1.0, 0.0)
        } else {
            (self.x / radius, self.y / radius)
        }
    }

    /// Euclidean distance to another point.
    pub fn distance(&self, other: &Point) -> f64 {
        let plane = (self.x - other.x).hypot(self.y - other.y);
        plane.hypot(self.z - other.z)
    }

    /// The coordinates as an array `[X, Y, Z]`.
    pub fn to_array(self) -> [f64; 3] {
        [self.x, self.y, self.z]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn cylindrical_reading_returns_what_it_was_given() {
        let p = Point::from_cylindrical(3.0, 2.0, -1.0);
        assert!((p.radius() - 3.0).abs() < 1e-15);
        assert!((p.theta() - 2.0).abs() < 1e-15);
        let (c, s) = p.direction();
        assert!((c - 2.0_f64.cos()).abs() < 1e-15 && (s - 2.0_f64.sin()).abs() < 1e-15);
        assert_eq!(Point::new(0.0, 0.0, 1.0).direction(), (1.0, 0.0));
    }
}
