//! A linear-elastic bar of elliptic or circular section twisted about its axis, at small strain (Saint-Venant).
//!
//! ```text
//! t = twist per length   m = (b-a)(b+a)/(a^2+b^2)
//! ux = -t Y Z   uy = t X Z   uz = t m X Y      szx = -2 G t a^2 Y/(a^2+b^2)   syz = 2 G t b^2 X/(a^2+b^2)
//! torque = pi G t a^3 b^3/(a^2+b^2)
//! ```
//! Saint-Venant (1855); Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 105 (from memory).

use super::{Field, energy_total, finite, hooke, total};
use crate::exact::Body;
use crate::exact::catalogue::Entry;
use crate::exact::description::{Description, Line};
use crate::exact::given::{Form, Given, ParameterEntry, refuse};
use crate::exact::solution::{
    ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total,
};
use crate::exact::tube_entries::MATERIAL;
use crate::materials::{LinearElastic, MaterialKind};
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use nalgebra::{Matrix3, Vector3};
use std::f64::consts::PI;

pub(in crate::exact) const ENTRY: Entry = Entry {
    name: "bar-torsion",
    title: "Linear-elastic bar of elliptic or circular section under torsion, small strain",
    parameters: &[
        ParameterEntry::required(
            "semi-axes",
            Form::Numbers(Dimension::Length),
            "[along X, along Y]; equal ones are a circle",
        ),
        ParameterEntry::required(
            "twist",
            Form::Number(Dimension::PerLength),
            "angle in rad per length along Z",
        )
        .load(),
        MATERIAL,
    ],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::LinearElastic],
    range: "any section; the angle between the ends must be small for the linearised rotation to mean anything",
    sources: &[
        "Saint-Venant (1855)",
        "Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 105 (from memory)",
    ],
    checks: &[
        "many-digit values, tests/oracles/library/bar-torsion",
        "equilibrium, Hooke's law, compatibility, free side, torque from the stresses, energy = torque x twist/2",
    ],
    build: |given| Ok(Box::new(BarTorsion::new(given)?)),
};

#[derive(Debug, Clone)]
struct BarTorsion {
    axes: [f64; 2],
    twist: f64,
    law: LinearElastic,
    totals: Vec<Total>,
}

impl BarTorsion {
    fn new(given: &Given) -> Result<Self, Refusal> {
        let &[a, b] = given.numbers("semi-axes")? else {
            let count = given.numbers("semi-axes")?.len();
            let message = format!("semi-axes has {count} numbers");
            return Err(refuse("semi-axes", message, "two: along X and along Y"));
        };
        if a <= 0.0 || b <= 0.0 {
            let message = format!("semi-axes {a}, {b} must be positive");
            return Err(refuse("semi-axes", message, ""));
        }
        let twist = given.finite("twist")?;
        let law = hooke(given.material()?)?;
        let torque =
            PI * law.shear_modulus() * twist * (a * b) * (a * b / (a * a + b * b)) * (a * b);
        let totals = finite(vec![
            total("torque", Ok(torque), Dimension::Torque, Extent::Section),
            energy_total(0.5 * torque * twist),
        ])?;
        Ok(Self {
            axes: [a, b],
            twist,
            law,
            totals,
        })
    }
}

impl ExactSolution for BarTorsion {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let ([a, b], t) = (self.axes, self.twist);
        let squares = a * a + b * b;
        let warp = t * (b - a) * (b + a) / squares;
        let Point { x, y, z } = point;
        let unit = 2.0 * self.law.shear_modulus() * t / squares;
        let stress = SymTensor {
            zx: -unit * a * a * y,
            yz: unit * b * b * x,
            ..SymTensor::default()
        };
        Field {
            displacement: Vector3::new(-t * y * z, t * x * z, warp * x * y),
            gradient: Matrix3::new(
                0.0,
                -t * z,
                -t * y,
                t * z,
                0.0,
                t * x,
                warp * y,
                warp * x,
                0.0,
            ),
            strains: [0.0; 3],
            stress,
            local_stress: stress,
            heat: 0.0,
        }
        .complete(&self.law)
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        let [a, b] = self.axes;
        Body::Ellipse { a, b }
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

    /// From the centre to the end of the longer axis, a little off it so that nothing vanishes.
    fn line(&self) -> Line {
        let [a, b] = self.axes;
        Line {
            from: Point::new(0.0, 0.0, 0.0),
            to: Point::new(0.6 * a, 0.8 * b, 0.0),
            columns: Line::CARTESIAN,
        }
    }

    fn load_stress(&self) -> f64 {
        let [a, b] = self.axes;
        self.law.shear_modulus() * self.twist.abs() * a.max(b)
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let ([a, b], length) = (self.axes, units.length.name);
        let body = if a == b {
            format!("bar of circular section, radius {a} {length}")
        } else {
            format!(
                "bar of elliptic section, semi-axes {a} {length} along X and {b} {length} along Y"
            )
        };
        Description {
            body,
            load: format!(
                "twisted by {} {} about Z",
                self.twist,
                units.name_of(Dimension::PerLength)
            ),
            ends: Some("free to warp alike in all sections".to_string()),
            modelling: vec![
                "solid; both end faces: exact displacements, or exact in-plane displacements with uz free but for one node at the \
                 axis; the side is free"
                    .to_string(),
                "the rotation is linearised: radii grow by (angle)^2/2 in the picture, not in the strains".to_string(),
            ],
            totals: vec!["strain_energy", "torque", "load_factor"],
            sketch: None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::super::field_tests::{Check, number, steel};
    use super::*;
    use crate::exact::{Value, build};
    use crate::numerics::GaussRule;
    use proptest::prelude::*;

    fn bar(a: f64, b: f64, law: LinearElastic) -> Box<dyn ExactSolution> {
        let given = Given::default()
            .with("semi-axes", Value::Numbers(vec![a, b]))
            .number("twist", 0.02)
            .with("material", steel(law));
        build("bar-torsion", given).unwrap()
    }

    proptest! {
        // Red when an axis is taken for the other, or the warping has the wrong sign.
        #[test]
        fn random_bars_obey_every_equation(
            a in 0.2..5.0_f64, b in 0.2..5.0_f64, nu in -0.9..0.5_f64, share in 0.1..0.99_f64, angle in -3.0..3.0_f64,
        ) {
            let law = LinearElastic { e: 80.0, nu };
            let bar = bar(a, b, law);
            let (c, s) = (angle.cos(), angle.sin());
            Check::of(bar.as_ref(), law).at(Point::new(share * a * c, share * b * s, 0.7), 0.01);
            // the side is free: normal (c/a, s/b)
            let side = bar.at(Point::new(a * c, b * s, 0.0)).unwrap().stress;
            prop_assert!((side.zx * c / a + side.yz * s / b).abs() < 1e-15 * (side.zx.abs() / a + side.yz.abs() / b));
            // torque and energy by integration over the ellipse
            let rule = GaussRule::of(20);
            let mut sums = [0.0, 0.0];
            for (r, w) in rule.on(0.0, 1.0) {
                for (phi, v) in rule.on(0.0, 2.0 * PI) {
                    let (x, y) = (a * r * phi.cos(), b * r * phi.sin());
                    let state = bar.at(Point::new(x, y, 0.0)).unwrap();
                    let area = w * v * r * a * b;
                    sums[0] += area * (x * state.stress.yz - y * state.stress.zx);
                    sums[1] += area * state.energy_density;
                }
            }
            prop_assert!((sums[0] / number(bar.as_ref(), "torque") - 1.0).abs() < 1e-12);
            prop_assert!((sums[1] / number(bar.as_ref(), "strain_energy") - 1.0).abs() < 1e-12);
        }
    }

    #[test]
    fn a_circle_does_not_warp_and_twists_by_its_polar_moment() {
        let law = LinearElastic { e: 80.0, nu: 0.25 };
        let round = bar(3.0, 3.0, law);
        let torque = 32.0 * PI / 2.0 * 81.0 * 0.02;
        assert!((number(round.as_ref(), "torque") / torque - 1.0).abs() < 1e-15);
        assert_eq!(
            round.at(Point::new(1.0, 2.0, 5.0)).unwrap().displacement.z,
            0.0
        );
        let refusal = build(
            "bar-torsion",
            Given::default()
                .with("semi-axes", Value::Numbers(vec![1.0]))
                .number("twist", 0.1)
                .with("material", steel(law)),
        );
        assert_eq!(refusal.unwrap_err().parameter, "semi-axes");
    }
}
