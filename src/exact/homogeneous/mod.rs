//! One deformation gradient and one stress everywhere: the large-strain patch test, on any mesh.
//!
//! `uniform` has the states; here they are named, placed and described. Any text on large elastic deformations holds the formulas
//! (Ogden, Non-Linear Elastic Deformations (1984), chapter 4; from memory).

mod uniform;

use super::body::Body;
use super::catalogue::Entry;
use super::demands;
use super::description::{Description, Line};
use super::given::{Form, Given, ParameterEntry, refuse};
use super::solution::{ErrorBound, ExactSolution, Kinematics, Refusal, State, Total};
use super::tube_entries;
use crate::materials::{Material, MaterialKind};
use crate::mechanics::{Dimension, Point, UnitSystem};
use nalgebra::Vector3;
use uniform::{Mode, Uniform};

pub(super) const NAME: &str = "homogeneous";

const STRETCH: &[ParameterEntry] = &[ParameterEntry::required(
    "stretch",
    Form::Number(Dimension::None),
    "length over reference length; at small strain the strain is stretch - 1",
)];

const fn mode(
    name: &'static str,
    keys: &'static [ParameterEntry],
    meaning: &'static str,
) -> ParameterEntry {
    ParameterEntry::optional(name, Form::Block(keys), "", meaning)
}

pub(super) const ENTRY: Entry = Entry {
    name: NAME,
    title: "Homogeneous deformation of any body: patch test at finite or small strain",
    parameters: &[
        mode(
            "uniaxial",
            STRETCH,
            "stretch along X; Y and Z free of traction",
        ),
        mode(
            "equibiaxial",
            STRETCH,
            "the same stretch along X and Y; Z free of traction",
        ),
        mode(
            "planar",
            STRETCH,
            "stretch along X; Z held at its length, Y free of traction",
        ),
        mode(
            "simple-shear",
            &[ParameterEntry::required(
                "shear",
                Form::Number(Dimension::None),
                "amount of shear: x = X + shear Y",
            )],
            "x = X + shear Y; incompressible: szz = 0",
        ),
        mode(
            "triaxial",
            &[ParameterEntry::required(
                "stretches",
                Form::Numbers(Dimension::None),
                "stretches along X, Y and Z",
            )],
            "three stretches; incompressible: their product is 1, and szz = 0",
        ),
        tube_entries::MATERIAL,
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[
        MaterialKind::Incompressible,
        MaterialKind::Compressible,
        MaterialKind::LinearElastic,
    ],
    range: "any body and mesh; exactly one of the deformations; isotropic laws, up to their lock; the origin stays in place",
    sources: &["Ogden, Non-Linear Elastic Deformations (1984), chapter 4"],
    checks: &[
        "many-digit states, tests/oracles/library/homogeneous",
        "work: dW/dstretch of the printed energy = first Piola-Kirchhoff stress",
        "free directions carry no stress; compressible laws of large bulk modulus tend to the incompressible ones, small stretches to \
         Hooke's law",
    ],
    build: |given| Ok(Box::new(Homogeneous::new(given)?)),
};

/// The state with its words.
#[derive(Debug, Clone)]
pub struct Homogeneous {
    mode: Mode,
    state: Uniform,
    kinematics: Kinematics,
    /// The material preserves its volume, so that the pressure is free where nothing else fixes it.
    preserves_volume: bool,
}

impl Homogeneous {
    pub fn new(given: &Given) -> Result<Self, Refusal> {
        let mode = mode_of(given)?;
        let material = given.material()?;
        let why = "a direction of its own would shear it";
        let check = |isotropic, name| demands::isotropic(isotropic, name, NAME, why);
        let state = match material {
            Material::Incompressible(law) => {
                check(law.isotropic(), law.name())?;
                uniform::incompressible(law.as_ref(), mode)?
            }
            Material::Compressible(law) => {
                check(law.isotropic(), law.name())?;
                uniform::compressible(law, mode)?
            }
            Material::LinearElastic(law) => uniform::linear(law, mode)?,
            Material::ElasticPlastic(_) => {
                let message = format!(
                    "a homogeneous deformation of {} is not among the exact solutions",
                    material.name()
                );
                return Err(refuse("material", message, "use an elastic law"));
            }
        };
        if !(state.stress.is_finite() && state.energy.is_finite() && state.volume_ratio.is_finite())
        {
            let message = format!(
                "{} has no stress at this deformation: it is beyond the law's range",
                material.in_words()
            );
            return Err(refuse(
                word_of(mode),
                message,
                "choose a smaller deformation",
            ));
        }
        Ok(Self {
            mode,
            state,
            kinematics: match material {
                Material::LinearElastic(_) => Kinematics::SmallStrain,
                _ => Kinematics::Finite,
            },
            preserves_volume: material.bulk_modulus().is_infinite()
                || material.poisson_ratio() == 0.5,
        })
    }
}

/// As a suite writes it.
fn word_of(mode: Mode) -> &'static str {
    match mode {
        Mode::Uniaxial(_) => "uniaxial",
        Mode::Equibiaxial(_) => "equibiaxial",
        Mode::Planar(_) => "planar",
        Mode::Shear(_) => "simple-shear",
        Mode::Triaxial(_) => "triaxial",
    }
}

fn mode_of(given: &Given) -> Result<Mode, Refusal> {
    let words = [
        "uniaxial",
        "equibiaxial",
        "planar",
        "simple-shear",
        "triaxial",
    ];
    let found: Vec<_> = words
        .into_iter()
        .filter(|w| given.block(w).is_some())
        .collect();
    let [word] = found[..] else {
        let message = match found.len() {
            0 => "no deformation is given".to_string(),
            _ => format!("more than one deformation is given: {}", found.join(", ")),
        };
        return Err(refuse(
            "",
            message,
            format!("give one of {}", words.join(", ")),
        ));
    };
    let Some(block) = given.block(word) else {
        return Err(refuse("", format!("{word} is missing"), ""));
    };
    Ok(match word {
        "uniaxial" => Mode::Uniaxial(block.positive("stretch")?),
        "equibiaxial" => Mode::Equibiaxial(block.positive("stretch")?),
        "planar" => Mode::Planar(block.positive("stretch")?),
        "simple-shear" => Mode::Shear(block.finite("shear")?),
        _ => Mode::Triaxial(three(block)?),
    })
}

fn three(block: &Given) -> Result<[f64; 3], Refusal> {
    let list = block.numbers("stretches")?;
    let Ok(three) = <[f64; 3]>::try_from(list) else {
        let message = format!("stretches has {} numbers", list.len());
        return Err(refuse(
            "stretches",
            message,
            "three are wanted: along X, Y and Z",
        ));
    };
    if let Some(odd) = three.iter().find(|l| **l <= 0.0) {
        let message = format!("stretches holds {odd}, which is not positive");
        return Err(refuse("stretches", message, ""));
    }
    Ok(three)
}

impl ExactSolution for Homogeneous {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let place = Vector3::new(point.x, point.y, point.z);
        let state = &self.state;
        if !place.iter().all(|x| x.is_finite()) {
            let message = format!(
                "there is no value at X = {}, Y = {}, Z = {}",
                point.x, point.y, point.z
            );
            return Err(refuse("", message, ""));
        }
        Ok(State {
            displacement: state.gradient * place,
            displacement_gradient: state.gradient,
            stretches: state.stretches,
            stress: state.stress,
            local_stress: state.stress,
            pressure: -state.stress.trace() / 3.0,
            volume_ratio: state.volume_ratio,
            energy_density: state.energy,
        })
    }

    fn totals(&self) -> &[Total] {
        // all of them depend on the body, which is the mesh's
        &[]
    }

    fn body(&self) -> Body {
        Body::Free { hole: 0.0 }
    }

    fn bound(&self) -> ErrorBound {
        ErrorBound {
            displacement: self.state.error,
            stress: self.state.error,
            totals: self.state.error,
        }
    }

    fn kinematics(&self) -> Kinematics {
        self.kinematics
    }

    fn line(&self) -> Line {
        Line {
            from: Point::new(0.0, 0.0, 0.0),
            to: Point::new(1.0, 1.0, 1.0),
            columns: Line::CARTESIAN,
        }
    }

    fn load_stress(&self) -> f64 {
        let sizes = self.state.stress.to_array().map(f64::abs);
        sizes.into_iter().fold(0.0, f64::max)
    }

    fn method(&self) -> String {
        format!(
            "closed form, the free stretch of a compressible material by Newton's method; stated bound on the relative error {:.1e}",
            self.state.error
        )
    }

    fn description(&self, _units: &UnitSystem) -> Description {
        let (load, free) = match self.mode {
            Mode::Uniaxial(l) => (
                format!("stretched to {l} along X"),
                "Y and Z free of traction",
            ),
            Mode::Equibiaxial(l) => (
                format!("stretched to {l} along X and Y"),
                "Z free of traction",
            ),
            Mode::Planar(l) => (
                format!("stretched to {l} along X, held at its length along Z"),
                "Y free of traction",
            ),
            Mode::Shear(k) => (
                format!("simple shear x = X + {k} Y"),
                "every side carries the uniform stress",
            ),
            Mode::Triaxial([x, y, z]) => (
                format!("stretched to {x}, {y}, {z} along X, Y, Z"),
                "every side carries the uniform stress",
            ),
        };
        let mut modelling = vec![
            "any body and any mesh, distorted elements too; patch test: prescribe u = (F - I) X on the whole boundary, or on some sides with \
             the uniform traction on the others"
                .to_string(),
            "the origin stays in place, and no line along X turns".to_string(),
        ];
        if self.preserves_volume {
            modelling.push(
                "displacements on the whole boundary leave the pressure of an incompressible body free by a constant: let at least one side \
                 carry its traction"
                    .to_string(),
            );
        }
        Description {
            body: "any body".to_string(),
            load: format!("{load}; {free}"),
            ends: None,
            modelling,
            totals: Vec::new(),
            sketch: None,
        }
    }
}

#[cfg(test)]
mod tests;
