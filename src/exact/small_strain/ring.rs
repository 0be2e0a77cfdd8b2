//! A Lame ring: linear-elastic, under inner and outer pressure, with uniform axial strain or free of axial stress.
//!
//! ```text
//! C = (Pi-Po) A^2/((B-A)(B+A)) - Po     D = (Pi-Po) A^2 B^2/((B-A)(B+A))     srr = C - D/R^2     stt = C + D/R^2
//! ett = al C + be D/R^2 - nu ez     al = (1+nu)(1-2nu)/E in plane strain, (1-nu)/E in plane stress     be = (1+nu)/E
//! ```
//! The difference of the pressures is kept beside them, because in a thin ring it decides the stress. Formulas and source as in
//! lame_tube.rs.

use super::{Radial, beyond};
use crate::materials::LinearElastic;
use crate::mechanics::Point;
use std::f64::consts::PI;

/// What holds a ring along the axis.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Axial {
    /// The uniform axial strain.
    Strain(f64),
    /// szz = 0.
    Free,
}

#[derive(Debug, Clone, Copy)]
pub(super) struct Ring {
    pub inner: f64,
    pub outer: f64,
    pub law: LinearElastic,
    pub inner_pressure: f64,
    pub outer_pressure: f64,
    /// `inner_pressure - outer_pressure`.
    pub difference: f64,
    pub axial: Axial,
}

/// Strain per unit of C and of D/R^2: al and be of the header.
pub(super) fn compliances(law: &LinearElastic, free: bool) -> (f64, f64) {
    let shear = (1.0 + law.nu) / law.e;
    if free {
        ((1.0 - law.nu) / law.e, shear)
    } else {
        (shear * law.compressibility(), shear)
    }
}

impl Ring {
    fn squares(&self) -> f64 {
        (self.outer - self.inner) * (self.outer + self.inner)
    }

    /// C of the header.
    pub fn constant(&self) -> f64 {
        self.difference * self.inner * self.inner / self.squares() - self.outer_pressure
    }

    /// D of the header, over `square`.
    fn decaying(&self, square: f64) -> f64 {
        let (a, b) = (self.inner, self.outer);
        self.difference * (a * a / self.squares()) * (b * b / square)
    }

    pub fn axial_stress(&self) -> f64 {
        match self.axial {
            Axial::Strain(ez) => self.law.e * ez + 2.0 * self.law.nu * self.constant(),
            Axial::Free => 0.0,
        }
    }

    pub fn axial_strain(&self) -> f64 {
        match self.axial {
            Axial::Strain(ez) => ez,
            Axial::Free => -2.0 * self.law.nu * self.constant() / self.law.e,
        }
    }

    /// (radial, hoop) strain where `D/R^2` is `shear`.
    fn strains(&self, shear: f64) -> (f64, f64) {
        let free = self.axial == Axial::Free;
        let (mean, apart) = compliances(&self.law, free);
        let across = if free {
            0.0
        } else {
            self.law.nu * self.axial_strain()
        };
        let even = mean * self.constant() - across;
        (even - apart * shear, even + apart * shear)
    }

    /// Hoop strain at a radius.
    pub fn hoop(&self, radius: f64) -> f64 {
        self.strains(self.decaying(radius * radius)).1
    }

    pub fn at(&self, point: Point) -> Radial {
        let (a, b) = (self.inner, self.outer);
        let radius = point.radius();
        let square = radius * radius;
        let inward = -self.inner_pressure * (a * a) * beyond(point, b, false);
        let outward = self.outer_pressure * (b * b) * beyond(point, a, false);
        let srr = -(inward + outward) / (square * self.squares());
        let (radial, hoop) = self.strains(self.decaying(square));
        Radial {
            strains: [radial, hoop, self.axial_strain()],
            stress: [srr, 2.0 * self.constant() - srr, self.axial_stress()],
            ..Radial::default()
        }
    }

    pub fn axial_force(&self) -> f64 {
        self.axial_stress() * PI * self.squares()
    }

    /// Strain energy per unit length, from the integral of `(D/R^2)^2` in closed form.
    pub fn energy(&self) -> f64 {
        let (constant, axial) = (self.constant(), self.axial_stress());
        let shear = self.decaying(self.inner * self.inner) * self.decaying(self.outer * self.outer);
        let even = (1.0 + self.law.nu) * (shear + (constant - axial).powi(2) / 3.0)
            + self.law.compressibility() * (2.0 * constant + axial).powi(2) / 6.0;
        even / self.law.e * PI * self.squares()
    }
}
