//! From the typed text to a law, or to what is wrong with it as an energy.

use super::super::catalogue::Problem;
use super::super::incompressible::{Formula, IncompressibleLaw};
use super::{AT_REST, Form, Stated, VARIABLES};
use crate::materials::Material;
use crate::numerics::expression::{Difference, Expression, Names, unusable};
use std::f64::consts::FRAC_PI_2;

/// The angle that I4 needs.
const ANGLE: &str = "beta";
const PAGE: &str = "`truebore catalogue expressions` shows what can be written";

fn problem(parameter: impl Into<String>, message: String, hint: impl Into<String>) -> Problem {
    Problem {
        message,
        parameter: parameter.into(),
        hint: hint.into(),
    }
}

/// The law of an energy and its constants.
pub(super) fn build(text: &str, constants: &[(String, f64)]) -> Result<Material, Problem> {
    law(text, constants).map(Material::incompressible)
}

pub(super) fn law(text: &str, constants: &[(String, f64)]) -> Result<Stated, Problem> {
    for (i, (name, _)) in constants.iter().enumerate() {
        let twice = constants[..i].iter().any(|(earlier, _)| earlier == name);
        let twice = twice.then(|| "it is given twice".to_string());
        if let Some(reason) = unusable(name, &VARIABLES).or(twice) {
            let message = format!("\"{name}\" cannot be the name of a constant: {reason}");
            return Err(problem(at(name), message, "choose another name"));
        }
    }
    let differences = [0, 1, 2].map(|k| Difference {
        variable: k,
        less: AT_REST[k],
        value: k + VARIABLES.len(),
    });
    let names = Names {
        variables: &VARIABLES,
        constants,
        differences: &differences,
    };
    let energy = Expression::parse(text, names).map_err(|error| {
        let hint = match error.hint.as_str() {
            "" => PAGE.to_string(),
            hint => format!("{hint}; {PAGE}"),
        };
        problem("energy", format!("energy: {}", error.in_text(text)), hint)
    })?;
    let mut law = Stated {
        energy,
        constants: constants.to_vec(),
        form: Form::Stretches,
        modulus: 0.0,
    };
    law.form = form(&law)?;
    all_occur(&law)?;
    at_rest(&mut law)?;
    Ok(law)
}

/// Path of a constant.
fn at(name: &str) -> String {
    format!("constants.{name}")
}

/// What the energy is a function of.
fn form(law: &Stated) -> Result<Form, Problem> {
    let stretches = (3..6).any(|k| law.energy.uses(k));
    let fibres = law.has(2);
    let refuse = |message: &str, hint: &str| Err(problem("energy", message.to_string(), hint));
    if !stretches && !fibres && !law.has(0) && !law.has(1) {
        let message = "the energy does not depend on the deformation: none of I1, I2, I4, l1, l2, l3 is in it";
        return refuse(message, PAGE);
    }
    if stretches && fibres {
        return refuse(
            "the energy has both stretches and I4",
            "with I4 write the rest in I1 and I2",
        );
    }
    if stretches && law.energy.switches() > 0 {
        return refuse(
            "pos() of stretches cannot be used",
            "pos() may stand in an energy of I1, I2, I4",
        );
    }
    if stretches {
        return Ok(Form::Stretches);
    }
    let beta = law.constants.iter().find(|(name, _)| name == ANGLE);
    match (fibres, beta) {
        (false, _) => Ok(Form::Invariants {
            cos2: 0.0,
            sin2: 0.0,
        }),
        (true, None) => refuse(
            "I4 needs the angle of the fibres: beta is not among the constants",
            "constants: { beta: 40 deg }, from the hoop direction; I4 = lt^2 cos^2 beta + lz^2 sin^2 beta",
        ),
        (true, Some((_, beta))) if !(0.0..=FRAC_PI_2).contains(beta) => {
            let range = "0 <= beta <= pi/2 (90 deg)";
            let nearest = "an angle in rad, or in deg with its unit; fibres at +-beta are the same";
            let found = Problem::out_of_range(ANGLE, *beta, range, nearest);
            Err(Problem {
                parameter: at(ANGLE),
                ..found
            })
        }
        (true, Some((_, beta))) => Ok(Form::Invariants {
            cos2: beta.cos() * beta.cos(),
            sin2: beta.sin() * beta.sin(),
        }),
    }
}

/// A constant that does not occur is a slip of the pen, or an energy that lacks a term.
fn all_occur(law: &Stated) -> Result<(), Problem> {
    for (i, (name, _)) in law.constants.iter().enumerate() {
        let angle = name == ANGLE && law.has(2);
        if !angle && !law.energy.constants().contains(&i) {
            let message = format!("the constant {name} does not occur in the energy");
            return Err(problem(
                at(name),
                message,
                format!("remove {name}, or correct the energy"),
            ));
        }
    }
    Ok(())
}

/// Energy, stress and stiffness of the unstrained material.
fn at_rest(law: &mut Stated) -> Result<(), Problem> {
    let (stored, fibre): (f64, f64) = match law.form {
        Form::Stretches => {
            law.modulus = law.stiffness_at_rest();
            (law.of_logarithms(0.0, 0.0), 0.0)
        }
        Form::Invariants { .. } => {
            let [w1, w2, w4] = law.slopes([0.0; 3]);
            law.modulus = 2.0 * (w1 + w2);
            (law.typed([0.0; 3]), w4)
        }
    };
    let mu = law.modulus;
    let refuse = |message: String, hint: &str| Err(problem("energy", message, hint));
    let slopes = law.with_slopes(0.0, 0.0);
    if !stored.is_finite() || !mu.is_finite() {
        let message =
            format!("the energy of the unstrained material is {stored}, its shear modulus {mu}");
        return refuse(
            message,
            "both must be numbers; see that no root, logarithm or quotient is taken of 0",
        );
    }
    if mu <= 0.0 {
        let message =
            format!("the shear modulus of the unstrained material is {mu}, it must be positive");
        return refuse(message, modulus_hint(law));
    }
    if stored.abs() > 1e-12 * mu {
        let message = format!("the energy of the unstrained material is {stored}, it must be zero");
        return refuse(
            message,
            "I1 = I2 = 3, I4 = l1 = l2 = l3 = 1 there: subtract what is left, or see whether a term is wrong",
        );
    }
    if fibre.abs() > 1e-12 * mu {
        let message = format!(
            "dW/dI4 of the unstrained material is {fibre}: it would be under stress without a load"
        );
        return refuse(
            message,
            "terms of I4 must begin with the second power of I4 - 1",
        );
    }
    if !slopes.hoop.by_d.is_finite() {
        return refuse(
            "the stiffness of the unstrained material is not finite".to_string(),
            "see that no root is taken of I1 - 3",
        );
    }
    match law.asymmetry().filter(|_| law.form == Form::Stretches) {
        None => Ok(()),
        Some([(a, first), (b, other)]) => {
            let message = format!(
                "W({:.4}, {:.4}, {:.4}) = {first}, but W({:.4}, {:.4}, {:.4}) = {other}: an isotropic energy does not depend on the order of l1, l2, l3",
                a[0], a[1], a[2], b[0], b[1], b[2]
            );
            refuse(
                message,
                "give every stretch the same terms; fibres are written with I4",
            )
        }
    }
}

/// Where the stiffness was lost.
fn modulus_hint(law: &Stated) -> &'static str {
    if Formula::isotropic(law) {
        "of invariants it is 2 (dW/dI1 + dW/dI2) at I1 = I2 = 3; a term in I1 - 3 to the first power gives it"
    } else {
        "it is 2 (dW/dI1 + dW/dI2) at I1 = I2 = 3, without the fibres: add e.g. mu/2*(I1 - 3)"
    }
}
