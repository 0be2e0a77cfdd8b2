//! A block bent to a sector by end moments, plane strain, both curved faces free of traction.
//!
//! ```text
//! r^2 = ra^2 + 2 X/k, theta = k Y, k = angle/length     lt = k r, lr = 1/(k r), lz = 1     d = 2 ln(k r)
//! d srr/dr = (stt - srr)/r  =>  d srr/dd = T/2 = dW/dd  =>  srr = W(d) - W(face)        a closed form for every law
//! srr = 0 at both faces, W even:  d = -f at X = 0, +f at X = h,  e^f - e^-f = 2 k h  =>  f = asinh(k h)
//! moment = int stt r dr = 1/(2 k^2) int_0^f T sinh(d) dd       energy = (length/k) int_0^f W cosh(d) dd      per unit width
//! ```
//! The force over the section vanishes by itself. All terms of both integrals are of one sign.

use super::{CHECK_POINTS, POINTS, SOURCES, WHY_ISOTROPIC, bound_of, integral, reach};
use crate::exact::body::Body;
use crate::exact::catalogue::Entry;
use crate::exact::demands::{self, rounded};
use crate::exact::description::{Description, Line};
use crate::exact::given::{Form, Given, ParameterEntry, refuse};
use crate::exact::solution::{
    ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total,
};
use crate::exact::tube_entries;
use crate::materials::{IncompressibleLaw, MaterialKind};
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use nalgebra::{Matrix3, Vector3};
use std::f64::consts::PI;
use std::sync::Arc;

const NAME: &str = "bent-block";

pub(in crate::exact) const ENTRY: Entry = Entry {
    name: NAME,
    title: "Incompressible block bent to a sector by end moments, plane strain, finite strain",
    parameters: &[
        ParameterEntry::required(
            "thickness",
            Form::Number(Dimension::Length),
            "from the concave to the convex face, along X before bending",
        ),
        ParameterEntry::required(
            "length",
            Form::Number(Dimension::Length),
            "along Y before bending",
        ),
        ParameterEntry::required(
            "angle",
            Form::Number(Dimension::Angle),
            "angle of the bent sector, above 0 and up to a full turn",
        )
        .load(),
        tube_entries::MATERIAL,
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[MaterialKind::Incompressible],
    range: "any thickness and length, 0 < angle <= 2 pi, isotropic laws, up to the lock of the law at a face; creases of the concave \
            face, which appear from a face stretch of about 0.65 down, are not looked for",
    sources: SOURCES,
    checks: &[
        "many-digit solution of the textbook equations, tests/oracles/library/bent-block",
        "free faces, no force over the section, moment as the integral of the printed stresses",
        "energy derivative dE/dangle = moment",
    ],
    build: |given| Ok(Box::new(BentBlock::new(given)?)),
};

/// The block.
#[derive(Debug, Clone)]
pub struct BentBlock {
    thickness: f64,
    length: f64,
    angle: f64,
    law: Arc<dyn IncompressibleLaw>,
    /// Angle per reference length.
    bend: f64,
    /// W at the faces.
    face_energy: f64,
    totals: Vec<Total>,
    bound: ErrorBound,
}

impl BentBlock {
    pub fn new(given: &Given) -> Result<Self, Refusal> {
        let (thickness, length) = (given.positive("thickness")?, given.positive("length")?);
        let angle = given.positive("angle")?;
        if angle > 2.0 * PI {
            let message =
                format!("angle = {angle} is more than a full turn: the ends would overlap");
            return Err(refuse(
                "angle",
                message,
                "nearest admissible value: 6.283185307179586",
            ));
        }
        let law = demands::isotropic_law(given, NAME, WHY_ISOTROPIC)?;
        let bend = angle / length;
        let face = (bend * thickness).asinh();
        let most = reach(law.as_ref(), face);
        if most < face {
            let nearest = rounded(most.sinh() * length / thickness, 6);
            let message = format!(
                "angle = {angle} stretches the faces beyond what {} carries",
                law.name()
            );
            return Err(refuse(
                "angle",
                message,
                format!("nearest admissible value: {nearest}"),
            ));
        }
        let moment = |points| {
            let sum = integral((0.0, face), points, |d| law.at(d, 0.0).hoop * d.sinh());
            0.5 * sum / (bend * bend)
        };
        let energy = |points| {
            let sum = integral((0.0, face), points, |d| law.at(d, 0.0).energy * d.cosh());
            sum * length / bend
        };
        let (m, e) = (moment(POINTS), energy(POINTS));
        let quadrature = (moment(CHECK_POINTS) / m - 1.0)
            .abs()
            .max((energy(CHECK_POINTS) / e - 1.0).abs());
        let extent = Extent::SectionAndLength;
        let (radius, whole) = (Dimension::Length, Extent::Whole);
        let totals = vec![
            demands::total("inner_radius", (-0.5 * face).exp() / bend, radius, whole),
            demands::total("outer_radius", (0.5 * face).exp() / bend, radius, whole),
            demands::total("bending_moment", m, Dimension::MomentPerLength, extent),
            demands::total("strain_energy", e, Dimension::EnergyPerLength, extent),
        ];
        Ok(Self {
            thickness,
            length,
            angle,
            bend,
            face_energy: law.at(face, 0.0).energy,
            totals: demands::finite(totals)?,
            bound: bound_of(law.as_ref(), face, quadrature),
            law,
        })
    }

    /// d at a layer; NaN where the motion has no continuation.
    fn difference(&self, x: f64) -> f64 {
        let hk = self.bend * self.thickness;
        // e^-f - 1 + 2 k X about the middle of the block
        let middle = hk * hk / (1.0 + 1.0_f64.hypot(hk));
        (middle + self.bend * (2.0 * x - self.thickness)).ln_1p()
    }
}

impl ExactSolution for BentBlock {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let d = self.difference(point.x);
        let law = self.law.at(d, 0.0);
        let srr = law.energy - self.face_energy;
        let known = srr.is_finite() && law.hoop.is_finite() && law.axial.is_finite();
        if !(known && point.y.is_finite() && point.z.is_finite()) {
            let message = format!(
                "the block's formulas have no value at X = {}, Y = {}",
                point.x, point.y
            );
            let hint = format!("the block is 0 <= X <= {}", self.thickness);
            return Err(refuse("", message, hint));
        }
        let theta = self.bend * point.y;
        let (sin, cos) = theta.sin_cos();
        let versed = -2.0 * (0.5 * theta).sin().powi(2);
        let radius = (0.5 * d).exp() / self.bend;
        let (radial, hoop) = ((-0.5 * d).exp_m1(), (0.5 * d).exp_m1());
        let turn = Matrix3::new(versed, -sin, 0.0, sin, versed, 0.0, 0.0, 0.0, 0.0);
        let strain = Matrix3::from_diagonal(&Vector3::new(radial, hoop, 0.0));
        let stress = SymTensor::diagonal(srr, srr + law.hoop, srr + law.axial);
        Ok(State {
            displacement: Vector3::new(radius * cos - point.x, radius * sin - point.y, 0.0),
            displacement_gradient: turn + strain + turn * strain,
            stretches: [1.0 + radial, 1.0 + hoop, 1.0],
            stress: stress.cylindrical_to_cartesian((cos, sin)),
            local_stress: stress,
            pressure: -(srr + (law.hoop + law.axial) / 3.0),
            volume_ratio: 1.0,
            energy_density: law.energy,
        })
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        Body::Block {
            lower: [0.0, -0.5 * self.length],
            upper: [self.thickness, 0.5 * self.length],
        }
    }

    fn bound(&self) -> ErrorBound {
        self.bound
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::Finite
    }

    fn line(&self) -> Line {
        Line {
            from: Point::new(0.0, 0.0, 0.0),
            to: Point::new(self.thickness, 0.0, 0.0),
            columns: &[
                "X", "r", "lambda_r", "lambda_t", "srr", "stt", "szz", "p", "W",
            ],
        }
    }

    fn turns(&self) -> bool {
        true
    }

    fn load_stress(&self) -> f64 {
        self.law.at(self.difference(self.thickness), 0.0).hoop.abs()
    }

    fn method(&self) -> String {
        format!(
            "closed form; moment and energy by Gauss's rule; stated bound on the relative error: displacement {:.1e}, stress {:.1e}, totals \
             {:.1e}",
            self.bound.displacement, self.bound.stress, self.bound.totals
        )
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let length = units.length.name;
        Description {
            body: format!(
                "block, {} {length} thick (0 <= X), {} {length} long (along Y, centred)",
                self.thickness, self.length
            ),
            load: format!(
                "bent to a sector of {} rad by moments at the ends; curved faces free of traction",
                demands::rounded(self.angle, 12)
            ),
            ends: Some("plane strain: no displacement along Z".to_string()),
            modelling: vec![
                "the end faces Y = constant become radial planes: every point there turns with them and keeps to its exact radius; half of the \
                 block with a symmetry plane at Y = 0 will do"
                    .to_string(),
                "the bent block lies with its axis at the origin: X = 0 moves out to the inner radius".to_string(),
            ],
            totals: vec!["strain_energy", "bending_moment", "load_factor"],
            sketch: None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::given::Value;
    use crate::materials::{Demiray, Material, MooneyRivlin, NeoHookean};

    fn law(i: usize) -> Material {
        match i {
            0 => Material::incompressible(NeoHookean { mu: 1.0 }),
            1 => Material::incompressible(MooneyRivlin { c10: 0.3, c01: 0.2 }),
            _ => Material::incompressible(Demiray { c: 1.0, b: 0.5 }),
        }
    }

    fn block(h: f64, length: f64, angle: f64, material: Material) -> Result<BentBlock, Refusal> {
        let given = Given::default()
            .number("thickness", h)
            .number("length", length)
            .number("angle", angle)
            .with("material", Value::Material(material));
        BentBlock::new(&given)
    }

    fn total(block: &BentBlock, i: usize) -> f64 {
        block.totals()[i].value.clone().unwrap()
    }

    // Slender and little bent, mu = 1: moment 4 mu h^3 k/12 (plane strain, E/(1 - nu^2) = 4 mu). Red when a factor is wrong.
    #[test]
    fn a_slender_block_is_a_beam() {
        let beam = block(1.0, 100.0, 1e-3, law(0)).unwrap();
        let expected = 4.0 / 12.0 * 1e-5;
        assert!((total(&beam, 2) / expected - 1.0).abs() < 1e-9);
        let neo = block(2.0, 3.0, 2.5, law(0)).unwrap();
        assert_eq!(
            total(&neo, 2),
            total(&block(2.0, 3.0, 2.5, law(1)).unwrap(), 2),
            "c10 + c01 alone in plane strain"
        );
    }

    proptest::proptest! {
        // Free faces, equilibrium, no force and the moment over the section from printed stresses, dE/dangle = M, gradient of u.
        // Red when one of them is wrong anywhere (tried: face energy left out, sinh for cosh).
        #[test]
        fn random_blocks_are_in_equilibrium(
            h in 0.01..3.0_f64, length in 0.5..20.0_f64, angle in 0.01..6.2_f64, which in 0..3_usize, place in 0.05..0.95_f64, across in -0.5..0.5_f64,
        ) {
            let angle = angle.min(2.0 * length / h);
            let found = block(h, length, angle, law(which)).unwrap();
            let at = |x: f64, y: f64| found.at(Point::new(x, y, 0.2)).unwrap();
            let size = at(0.0, 0.0).local_stress.yy.abs().max(at(h, 0.0).local_stress.yy);
            for x in [0.0, h] {
                proptest::prop_assert!(at(x, 0.1).local_stress.xx.abs() < 1e-14 * size);
            }
            let (x, y) = (place * h, across * length);
            let state = at(x, y);
            let step = 1e-5 * h * place.min(1.0 - place);
            let radius = |x: f64| x + at(x, 0.0).displacement.x;
            let slope = (at(x + step, y).local_stress.xx - at(x - step, y).local_stress.xx) / (radius(x + step) - radius(x - step));
            let s = state.local_stress;
            proptest::prop_assert!((slope - (s.yy - s.xx) / radius(x)).abs() < 1e-5 * size / radius(0.0));
            for i in 0..2 {
                let (dx, dy) = if i == 0 { (step, 0.0) } else { (0.0, step) };
                let difference = (at(x + dx, y + dy).displacement - at(x - dx, y - dy).displacement) / (2.0 * step);
                let allowed = 1e-6 + 1e-15 * (radius(h) + length) / step;
                proptest::prop_assert!((difference - state.displacement_gradient.column(i)).norm() < allowed);
            }
            let rule = crate::numerics::GaussRule::of(40);
            // dr = lr dX
            let over = |f: &dyn Fn(f64, f64) -> f64| {
                let part = |i: f64| {
                    rule.integrate(h * (i / 8.0).powi(2), h * ((i + 1.0) / 8.0).powi(2), |x| {
                        let s = at(x, 0.0);
                        f(s.local_stress.yy, radius(x)) * s.stretches[0]
                    })
                };
                (0..8).map(|i| part(f64::from(i))).sum::<f64>()
            };
            let scale = size * (radius(h) - radius(0.0));
            proptest::prop_assert!(over(&|stt, _| stt).abs() < 1e-12 * scale, "force");
            proptest::prop_assert!((over(&|stt, r| stt * r) - total(&found, 2)).abs() < 1e-12 * scale * radius(h), "moment");
            let energy = |angle: f64| total(&block(h, length, angle, law(which)).unwrap(), 3);
            let turn = 1e-5 * angle;
            let slope = (energy(angle + turn) - energy(angle - turn)) / (2.0 * turn);
            proptest::prop_assert!((slope / total(&found, 2) - 1.0).abs() < 1e-6, "work");
        }
    }

    #[test]
    fn what_cannot_be_bent_is_refused() {
        let check = |found: Result<BentBlock, Refusal>, parameter: &str| {
            let refusal = found.unwrap_err();
            assert_eq!(refusal.parameter, parameter, "{refusal}");
        };
        check(block(1.0, 2.0, 7.0, law(0)), "angle");
        check(block(1.0, 2.0, 0.0, law(0)), "angle");
        check(block(-1.0, 2.0, 1.0, law(0)), "thickness");
        check(block(1.0, f64::NAN, 1.0, law(0)), "length");
        let stiff = Material::incompressible(Demiray { c: 1.0, b: 1e4 });
        let refusal = block(1.0, 1.0, 3.0, stiff.clone()).unwrap_err();
        let nearest: f64 = refusal
            .hint
            .split(' ')
            .next_back()
            .unwrap()
            .parse()
            .unwrap();
        assert!(
            block(1.0, 1.0, 0.9999 * nearest, stiff).is_ok(),
            "{refusal:?}"
        );
        let found = block(1.0, 2.0, 1.0, law(0)).unwrap();
        assert!(found.at(Point::new(-3.0, 0.0, 0.0)).is_err());
        assert!(found.at(Point::new(0.5, f64::NAN, 0.0)).is_err());
    }
}
