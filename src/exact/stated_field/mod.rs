//! A displacement field stated by the user: a manufactured solution.
//!
//! `u(X)` is typed as expressions in X, Y, Z, R, Theta and named constants. F comes from dual numbers, the stress from the
//! declared law, the body force `b = -Div P` from exact second derivatives of u and the law's exact tangent, so that the
//! field is an exact solution under that body force and the tractions `P N` (both tabled by `exact --loads`).
//! Salari & Knupp, SAND2000-1444 (2000) (from memory). A law that preserves volume needs a field with det F = 1 and a stated
//! pressure `p = -tr(sigma)/3`:
//! ```text
//! J = 1:  tau = dev tau_law - p I,      Div P = Div P_law - F^-T grad p      (Div (J F^-T) = 0)
//! ```
//! where `P_law` is that of the law on the volume-preserving part of F.

mod hooke;

use super::body::Body;
use super::catalogue::Entry;
use super::description::{Description, Line};
use super::given::{Form, Given, ParameterEntry, Value, refuse};
use super::solution::{ErrorBound, ExactSolution, Kinematics, Refusal, State, Total};
use crate::materials::{
    Compressible, GeneralState, LinearElastic, Material, MaterialKind, SecondGradient, Volumetric,
    VolumetricForm,
};
use crate::mechanics::{Point, UnitSystem};
use crate::numerics::expression::{Expression, Names, unusable};
use hooke::{small_divergence, small_state, with_pressure};
use nalgebra::{Matrix3, Vector3};
use num_dual::{Dual2SVec64, DualNum};

const COMPONENTS: &[ParameterEntry] = &[
    ParameterEntry::required("x", Form::Expression, "displacement along X"),
    ParameterEntry::required("y", Form::Expression, "displacement along Y"),
    ParameterEntry::optional("z", Form::Expression, "0", "displacement along Z"),
];

pub(super) const ENTRY: Entry = Entry {
    name: "stated-field",
    title: "Displacement stated as expressions; body force and tractions that hold it in equilibrium",
    parameters: &[
        ParameterEntry::required(
            "displacement",
            Form::Block(COMPONENTS),
            "expressions in X, Y, Z, R, Theta and the constants (`truebore catalogue expressions`)",
        ),
        ParameterEntry::optional("constants", Form::Named, "", "names the expressions use"),
        ParameterEntry::optional(
            "pressure",
            Form::Expression,
            "",
            "p = -tr(sigma)/3 as an expression: for laws that preserve volume, and nu = 0.5, only",
        ),
        ParameterEntry::required(
            "material",
            Form::Material,
            "name of a material of the suite",
        ),
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[
        MaterialKind::Incompressible,
        MaterialKind::Compressible,
        MaterialKind::LinearElastic,
    ],
    range: "any field with J > 0 on the mesh; isotropic laws; the solver must apply the body force and the tractions, or the \
            displacement itself on the boundary",
    sources: &["Salari & Knupp, SAND2000-1444 (2000); Roache, J. Fluids Eng. 124 (2002) 4"],
    checks: &[
        "many-digit numerical differentiation of P(F), tests/oracles/library/stated-field",
        "the homogeneous states and the compressible tube typed as fields",
        "Div P against differences of P at random fields",
    ],
    build: |given| Ok(Box::new(StatedField::new(given)?)),
};

const VARIABLES: [&str; 5] = ["X", "Y", "Z", "R", "Theta"];

/// How far det F may be from 1 where the law preserves volume.
const VOLUME_SLACK: f64 = 1e-9;

/// How the stress follows from the displacement gradient.
#[derive(Debug, Clone)]
enum Law {
    Finite(Compressible),
    /// The law on the volume-preserving part, and the stated pressure.
    Preserving(Compressible, Expression),
    Hooke(LinearElastic),
    /// Hooke's law at nu = 0.5 with the stated pressure.
    HookePreserving(LinearElastic, Expression),
}

/// The stated field with its law.
#[derive(Debug, Clone)]
pub struct StatedField {
    displacement: [Expression; 3],
    constants: Vec<(String, f64)>,
    law: Law,
}

/// Value, gradient and second derivatives of one expression.
struct Jet {
    value: f64,
    gradient: Vector3<f64>,
    second: Matrix3<f64>,
}

fn jet(expression: &Expression, point: Point) -> Jet {
    let [x, y, z] = coordinates(point);
    let (r, theta) = ((x * x + y * y).sqrt(), y.atan2(x));
    let found = expression.evaluate(&[x, y, z, r, theta]);
    let first = found
        .v1
        .unwrap_generic(nalgebra::Const::<1>, nalgebra::Const::<3>);
    let second = found
        .v2
        .unwrap_generic(nalgebra::Const::<3>, nalgebra::Const::<3>);
    Jet {
        value: found.re,
        gradient: first.transpose(),
        second,
    }
}

/// X, Y and Z, each with its own direction of differentiation.
fn coordinates(point: Point) -> [Dual2SVec64<3>; 3] {
    let mut all = point.to_array().map(Dual2SVec64::<3>::from_re);
    for (i, coordinate) in all.iter_mut().enumerate() {
        *coordinate = coordinate.derivative(i);
    }
    all
}

impl StatedField {
    /// Reads the expressions.
    pub fn new(given: &Given) -> Result<Self, Refusal> {
        let constants = constants(given)?;
        let read = |text: &str, parameter: &'static str| {
            let names = Names {
                variables: &VARIABLES,
                constants: &constants,
                differences: &[],
            };
            Expression::parse(text, names).map_err(|e| {
                refuse(
                    parameter,
                    e.to_string(),
                    "`truebore catalogue expressions` is the grammar",
                )
            })
        };
        let block = given.block("displacement");
        let component = |name: &'static str| {
            let text = block.and_then(|b| b.text(name)).unwrap_or("0");
            read(text, name)
        };
        let pressure = match given.text("pressure") {
            Some(text) => Some(read(text, "pressure")?),
            None => None,
        };
        Ok(Self {
            displacement: [component("x")?, component("y")?, component("z")?],
            constants,
            law: law(given.material()?, pressure)?,
        })
    }

    fn jets(&self, point: Point) -> Result<[Jet; 3], Refusal> {
        let jets = self.displacement.each_ref().map(|e| jet(e, point));
        let sound = |j: &Jet| j.value.is_finite() && j.gradient.iter().all(|g| g.is_finite());
        if jets.iter().all(sound) {
            return Ok(jets);
        }
        Err(no_value(
            point,
            "the displacement or its gradient is not finite",
        ))
    }

    /// Volume ratio where it must be 1.
    fn preserved(&self, point: Point, change: f64) -> Result<(), Refusal> {
        if change.abs() <= VOLUME_SLACK {
            return Ok(());
        }
        let message =
            format!("the volume changes by {change:.3e} of itself, and the law preserves it");
        Err(no_value(point, &message))
    }
}

fn no_value(point: Point, why: &str) -> Refusal {
    let message = format!(
        "the stated field has no state at X = {}, Y = {}, Z = {}: {why}",
        point.x, point.y, point.z
    );
    refuse("displacement", message, "mend the expressions or the mesh")
}

fn constants(given: &Given) -> Result<Vec<(String, f64)>, Refusal> {
    let mut constants = Vec::new();
    for (name, value) in given.block("constants").into_iter().flat_map(Given::iter) {
        if let Some(why) = unusable(name, &VARIABLES) {
            let message = format!("`{name}` cannot be the name of a constant: {why}");
            return Err(refuse("constants", message, "choose another name"));
        }
        if let Value::Number(value) = value {
            constants.push((name.to_string(), *value));
        }
    }
    Ok(constants)
}

fn law(material: &Material, pressure: Option<Expression>) -> Result<Law, Refusal> {
    let needs = |pressure: Option<Expression>| {
        let message = "the law preserves volume, so that the field does not give the pressure";
        let hint = "state `pressure:` as an expression, or give the law a `volumetric:` part";
        pressure.ok_or_else(|| refuse("pressure", message.to_string(), hint))
    };
    let none = |pressure: Option<Expression>| match pressure {
        None => Ok(()),
        Some(_) => {
            let message = "the law gives the pressure, so that it cannot be stated as well";
            Err(refuse(
                "pressure",
                message.to_string(),
                "leave `pressure:` out",
            ))
        }
    };
    match material {
        Material::LinearElastic(law) if law.compressibility() == 0.0 => {
            Ok(Law::HookePreserving(*law, needs(pressure)?))
        }
        Material::LinearElastic(law) => none(pressure).map(|()| Law::Hooke(*law)),
        Material::Compressible(law) if law.isotropic() => {
            none(pressure).map(|()| Law::Finite(law.clone()))
        }
        Material::Incompressible(law) if law.isotropic() => {
            // on volume-preserving states only its change of shape counts: any small modulus will do
            let volumetric = Volumetric {
                form: VolumetricForm::LogSquared,
                bulk: 1e-3 * law.shear_modulus(),
            };
            let law = Compressible::Split {
                law: law.clone(),
                volumetric,
            };
            Ok(Law::Preserving(law, needs(pressure)?))
        }
        other => {
            let message = format!("a stated-field cannot be made of {}", other.in_words());
            Err(refuse("material", message, "use an isotropic law"))
        }
    }
}

impl ExactSolution for StatedField {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let jets = self.jets(point)?;
        let h = Matrix3::from_rows(&jets.each_ref().map(|j| j.gradient.transpose()));
        let displacement = Vector3::from(jets.each_ref().map(|j| j.value));
        let finite = |law: &Compressible, pressure: Option<&Expression>| {
            let why = "its volume is not positive, or the law has no value there";
            let found = GeneralState::at(law, &h).ok_or_else(|| no_value(point, why))?;
            let mut stress = found.stress();
            if let Some(pressure) = pressure {
                self.preserved(point, found.volume_ratio - 1.0)?;
                stress = with_pressure(stress, jet(pressure, point).value);
            }
            Ok(State {
                displacement,
                displacement_gradient: h,
                stretches: found.stretches(),
                stress,
                local_stress: stress,
                pressure: -stress.trace() / 3.0,
                volume_ratio: found.volume_ratio,
                energy_density: found.energy_density,
            })
        };
        let state = match &self.law {
            Law::Finite(law) => finite(law, None)?,
            Law::Preserving(law, pressure) => finite(law, Some(pressure))?,
            Law::Hooke(law) => small_state(law, displacement, h, None),
            Law::HookePreserving(law, pressure) => {
                self.preserved(point, h.trace())?;
                small_state(law, displacement, h, Some(jet(pressure, point).value))
            }
        };
        if !(state.stress.is_finite() && state.energy_density.is_finite()) {
            return Err(no_value(point, "the stress is not finite"));
        }
        Ok(state)
    }

    fn totals(&self) -> &[Total] {
        &[]
    }

    fn body(&self) -> Body {
        Body::Free { hole: 0.0 }
    }

    fn bound(&self) -> ErrorBound {
        // of the stress: round-off of the strain times the ratio of bulk to shear modulus; the factors were measured
        let stiff = match &self.law {
            Law::Finite(law) => law.bulk_modulus() / law.shear_modulus(),
            Law::Hooke(law) => 1.0 / law.compressibility(),
            Law::Preserving(..) | Law::HookePreserving(..) => 1.0,
        };
        ErrorBound {
            displacement: 32.0 * f64::EPSILON,
            stress: (64.0 + 8.0 * stiff) * f64::EPSILON,
            totals: 0.0,
        }
    }

    fn kinematics(&self) -> Kinematics {
        match self.law {
            Law::Finite(_) | Law::Preserving(..) => Kinematics::Finite,
            Law::Hooke(_) | Law::HookePreserving(..) => Kinematics::SmallStrain,
        }
    }

    fn method(&self) -> String {
        format!(
            "stated displacement, exact derivatives by dual numbers; stated bound on the relative error of the stress {:.1e}",
            self.bound().stress
        )
    }

    fn description(&self, _units: &UnitSystem) -> Description {
        let [x, y, z] = self.displacement.each_ref().map(Expression::text);
        let mut load = format!("displacement ux = {x}, uy = {y}, uz = {z}");
        if let Law::Preserving(_, pressure) | Law::HookePreserving(_, pressure) = &self.law {
            load += &format!("; pressure p = {}", pressure.text());
        }
        for (i, (name, value)) in self.constants.iter().enumerate() {
            let before = if i == 0 { "; with" } else { "," };
            load += &format!("{before} {name} = {value}");
        }
        Description {
            body: "what the mesh covers".to_string(),
            load,
            ends: None,
            modelling: vec![
                "apply the body force (per reference volume) and, on free faces, the tractions (per reference area) that \
                 `exact --loads` tables; on at least one face the displacement itself"
                    .to_string(),
                "slice: plane strain, where uz is zero".to_string(),
            ],
            totals: vec!["load_factor"],
            sketch: None,
        }
    }

    fn line(&self) -> Line {
        Line {
            from: Point::new(0.0, 0.0, 0.0),
            to: Point::new(1.0, 1.0, 0.0),
            columns: Line::CARTESIAN,
        }
    }

    fn body_force(&self, point: Point) -> Result<Vector3<f64>, Refusal> {
        let jets = self.jets(point)?;
        let h = Matrix3::from_rows(&jets.each_ref().map(|j| j.gradient.transpose()));
        let second: SecondGradient = jets.each_ref().map(|j| j.second);
        let slope = |pressure: &Expression| jet(pressure, point).gradient;
        let finite = |law: &Compressible| {
            let why = "its volume is not positive, or the law has no value there";
            GeneralState::at(law, &h)
                .map(|state| state.divergence(&second))
                .ok_or_else(|| no_value(point, why))
        };
        let divergence = match &self.law {
            Law::Finite(law) => finite(law)?,
            Law::Preserving(law, pressure) => {
                let inverse = (Matrix3::identity() + h).try_inverse();
                let inverse = inverse.ok_or_else(|| no_value(point, "F has no inverse"))?;
                finite(law)? - inverse.transpose() * slope(pressure)
            }
            Law::Hooke(law) => small_divergence(law, &second, None),
            Law::HookePreserving(law, pressure) => {
                small_divergence(law, &second, Some(slope(pressure)))
            }
        };
        if divergence.iter().all(|c| c.is_finite()) {
            Ok(-divergence)
        } else {
            Err(no_value(point, "the second derivatives are not finite"))
        }
    }
}

#[cfg(test)]
mod tests;
