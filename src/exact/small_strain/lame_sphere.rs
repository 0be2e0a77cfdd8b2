//! A linear-elastic hollow sphere under inner and outer pressure, at small strain (Lame).
//!
//! ```text
//! V = B^3 - A^3 = (B-A)(A^2+AB+B^2)     C = (Pi-Po) A^3/V - Po     D = (Pi-Po) A^3 B^3/V
//! srr = C - D/R^3 = -[Pi A^3 (B^3-R^3) + Po B^3 (R^3-A^3)]/(R^3 V)     stt = (3 C - srr)/2
//! E ett = (1-2nu) C + (1+nu)/2 D/R^3     E err = (1-2nu) C - (1+nu) D/R^3     W = [3(1+nu)/4 (D/R^3)^2 + 3(1-2nu)/2 C^2]/E
//! ```
//! Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 136 (from memory).

use super::{Field, beyond, finite, hooke, radii, total};
use crate::exact::Body;
use crate::exact::catalogue::Entry;
use crate::exact::description::Description;
use crate::exact::given::{Given, refuse};
use crate::exact::solution::{
    ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total,
};
use crate::exact::tube_entries::{
    INNER_PRESSURE, INNER_RADIUS, MATERIAL, OUTER_PRESSURE, OUTER_RADIUS,
};
use crate::exact::tube_words::pressures;
use crate::materials::{LinearElastic, MaterialKind};
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use nalgebra::{Matrix3, Vector3};
use std::f64::consts::PI;

pub(in crate::exact) const ENTRY: Entry = Entry {
    name: "lame-sphere",
    title: "Linear-elastic hollow sphere under inner and outer pressure, small strain",
    parameters: &[
        INNER_RADIUS,
        OUTER_RADIUS,
        MATERIAL,
        INNER_PRESSURE,
        OUTER_PRESSURE,
    ],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::LinearElastic],
    range: "any 0 < inner-radius < outer-radius, -1 < nu <= 0.5; linear in the loads",
    sources: &[
        "Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 136 (from memory)",
    ],
    checks: &[
        "many-digit values, tests/oracles/library/lame-sphere",
        "equilibrium, Hooke's law, compatibility, boundary tractions and work of the loads",
    ],
    build: |given| Ok(Box::new(LameSphere::new(given)?)),
};

/// The sphere with its constants.
#[derive(Debug, Clone)]
struct LameSphere {
    inner: f64,
    outer: f64,
    law: LinearElastic,
    inner_pressure: f64,
    outer_pressure: f64,
    totals: Vec<Total>,
}

impl LameSphere {
    fn new(given: &Given) -> Result<Self, Refusal> {
        let (inner, outer) = radii(given, false)?;
        let mut sphere = Self {
            inner,
            outer,
            law: hooke(given.material()?)?,
            inner_pressure: given.finite_or("inner-pressure", 0.0)?,
            outer_pressure: given.finite_or("outer-pressure", 0.0)?,
            totals: Vec::new(),
        };
        sphere.totals = finite(sphere.all_totals())?;
        Ok(sphere)
    }

    /// V of the header.
    fn cubes(&self) -> f64 {
        let (a, b) = (self.inner, self.outer);
        (b - a) * (a * a + a * b + b * b)
    }

    /// C of the header.
    fn constant(&self) -> f64 {
        (self.inner_pressure - self.outer_pressure) * (self.inner.powi(3) / self.cubes())
            - self.outer_pressure
    }

    /// D/R^3 of the header.
    fn decaying(&self, radius: f64) -> f64 {
        let share = self.inner.powi(3) / self.cubes() * (self.outer / radius).powi(3);
        (self.inner_pressure - self.outer_pressure) * share
    }

    /// (radial, hoop) strain.
    fn strains(&self, radius: f64) -> (f64, f64) {
        let even = self.law.compressibility() * self.constant();
        let shear = (1.0 + self.law.nu) * self.decaying(radius);
        (
            (even - shear) / self.law.e,
            (even + 0.5 * shear) / self.law.e,
        )
    }

    fn all_totals(&self) -> Vec<Total> {
        let deformed = |radius: f64| radius + radius * self.strains(radius).1;
        let (a, b) = (deformed(self.inner), deformed(self.outer));
        // integral of 4 pi R^2 (D/R^3)^2 = 4/3 pi V D/A^3 D/B^3
        let shear = self.decaying(self.inner) * self.decaying(self.outer);
        let density = 0.75 * (1.0 + self.law.nu) * shear
            + 1.5 * self.law.compressibility() * self.constant().powi(2);
        let energy = density / self.law.e * 4.0 / 3.0 * PI * self.cubes();
        let inside = 4.0 / 3.0 * PI * a.powi(3);
        vec![
            total("inner_radius", Ok(a), Dimension::Length, Extent::Whole),
            total("outer_radius", Ok(b), Dimension::Length, Extent::Whole),
            total(
                "strain_energy",
                Ok(energy),
                Dimension::Energy,
                Extent::Section,
            ),
            total(
                "enclosed_volume",
                Ok(inside),
                Dimension::Volume,
                Extent::Section,
            ),
        ]
    }

    /// R^3 - radius^3, from the difference of the squares.
    fn cube_beyond(point: Point, at: f64, radius: f64) -> f64 {
        let gap = beyond(point, radius, true) / (at + radius);
        gap * (at * at + at * radius + radius * radius)
    }
}

impl ExactSolution for LameSphere {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let (a, b) = (self.inner, self.outer);
        let radius = self.body().radius(&point);
        if !(radius > 0.0 && radius.is_finite()) {
            let message =
                format!("the sphere's formulas have no value at reference radius {radius}");
            return Err(refuse("", message, format!("the wall is {a} <= R <= {b}")));
        }
        let inward = -self.inner_pressure * a.powi(3) * Self::cube_beyond(point, radius, b);
        let outward = self.outer_pressure * b.powi(3) * Self::cube_beyond(point, radius, a);
        let srr = -(inward + outward) / (radius.powi(3) * self.cubes());
        let stt = 0.5 * (3.0 * self.constant() - srr);
        let (radial, hoop) = self.strains(radius);
        let normal = Vector3::new(point.x, point.y, point.z) / radius;
        let spread = |along: f64, across: f64| {
            Matrix3::identity() * across + normal * normal.transpose() * (along - across)
        };
        Field {
            displacement: Vector3::new(point.x, point.y, point.z) * hoop,
            gradient: spread(radial, hoop),
            strains: [radial, hoop, hoop],
            stress: SymTensor::symmetric_part(&spread(srr, stt)),
            local_stress: SymTensor::diagonal(srr, stt, stt),
            heat: 0.0,
        }
        .complete(&self.law)
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        Body::Sphere {
            inner: self.inner,
            outer: self.outer,
        }
    }

    fn bound(&self) -> ErrorBound {
        super::closed_form()
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::SmallStrain
    }

    fn method(&self) -> String {
        "closed form".to_string()
    }

    fn load_stress(&self) -> f64 {
        self.inner_pressure.abs() + self.outer_pressure.abs()
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let length = units.length.name;
        let walls = [
            ("bore", self.inner_pressure),
            ("outer wall", self.outer_pressure),
        ];
        let load = match pressures(walls, units) {
            none if none.is_empty() => "no pressure".to_string(),
            loaded => format!("{loaded}, on the undeformed wall"),
        };
        Description {
            body: format!(
                "hollow sphere, inner radius {} {length}, outer radius {} {length}",
                self.inner, self.outer
            ),
            load,
            ends: None,
            modelling: vec![
                "small-strain kinematics".to_string(),
                "any part cut by planes through the centre: no displacement normal to a cut"
                    .to_string(),
                "axisymmetric: the section of the sphere in a plane through the axis".to_string(),
            ],
            totals: vec!["strain_energy", "load_factor"],
            sketch: None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::super::field_tests::{Check, number, steel};
    use super::*;
    use crate::exact::build;
    use proptest::prelude::*;

    fn sphere(a: f64, b: f64, law: LinearElastic, pi: f64, po: f64) -> Box<dyn ExactSolution> {
        let given = Given::default()
            .number("inner-radius", a)
            .number("outer-radius", b)
            .with("material", steel(law))
            .number("inner-pressure", pi)
            .number("outer-pressure", po);
        build("lame-sphere", given).unwrap()
    }

    proptest! {
        // Stress, strain, displacement and energy are written apart: any wrong factor is red (tried: (1+nu)/2 -> 1+nu in ett,
        // 3/4 -> 3/2 in the energy).
        #[test]
        fn random_spheres_obey_every_equation(
            thickness in -3.0..1.5_f64, nu in -0.9..0.5_f64, pi in -1.0..1.0_f64, po in -1.0..1.0_f64, place in 0.0..1.0_f64,
        ) {
            let (a, b) = (1.5, 1.5 * (1.0 + 10f64.powf(thickness)));
            let law = LinearElastic { e: 100.0, nu };
            let sphere = sphere(a, b, law, pi, po);
            let r = a + place * (b - a);
            let point = Point::new(0.48 * r, -0.64 * r, 0.6 * r);
            Check::of(sphere.as_ref(), law).at(point, 0.01 * (b - a).min(r));
            let at = |r: f64| sphere.at(Point::new(0.0, 0.0, r)).unwrap();
            prop_assert!((at(a).local_stress.xx + pi).abs() < 1e-15);
            prop_assert!((at(b).local_stress.xx + po).abs() < 1e-15);
            let work = 2.0 * PI * (pi * a * a * at(a).displacement.z - po * b * b * at(b).displacement.z);
            let scale = pi.abs().max(po.abs()).powi(2) / law.e * b.powi(4) / (b - a);
            prop_assert!((number(sphere.as_ref(), "strain_energy") - work).abs() < 1e-13 * scale);
        }
    }

    // Thin: stt = p R/(2 h). Red when the sphere takes the tube's hoop stress p R/h.
    #[test]
    fn thin_spheres_carry_half_the_hoop_stress_of_thin_tubes() {
        let law = LinearElastic { e: 2e5, nu: 0.3 };
        for h in [1e-2, 1e-3, 1e-4, 1e-5, 1e-6] {
            let sphere = sphere(1.0 - 0.5 * h, 1.0 + 0.5 * h, law, 1.0, 0.0);
            let stt = sphere
                .at(Point::new(0.0, 1.0, 0.0))
                .unwrap()
                .local_stress
                .yy;
            assert!((stt * 2.0 * h - 1.0).abs() < 1.1 * h, "{h} {stt}");
        }
    }

    #[test]
    fn what_is_no_sphere_is_refused() {
        let given = |a: f64, b: f64| {
            Given::default()
                .number("inner-radius", a)
                .number("outer-radius", b)
                .with("material", steel(LinearElastic { e: 1.0, nu: 0.3 }))
        };
        assert_eq!(
            build("lame-sphere", given(2.0, 2.0)).unwrap_err().parameter,
            "outer-radius"
        );
        assert_eq!(
            build("lame-sphere", given(0.0, 2.0)).unwrap_err().parameter,
            "inner-radius"
        );
        let centre = build("lame-sphere", given(1.0, 2.0))
            .unwrap()
            .at(Point::new(0.0, 0.0, 0.0));
        assert!(centre.unwrap_err().message.contains("no value"));
    }
}
