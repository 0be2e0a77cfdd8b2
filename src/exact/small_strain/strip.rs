//! Linear-elastic strips at small strain: a cantilever with an end load, and pure bending.
//!
//! ```text
//! I = 2 c^3/3 with depth 2c      E', nu', of the plane (mod.rs)      G = E/(2(1+nu))
//! cantilever, 0 <= X <= L, end load F downwards at X = L:   sxx = F (L-X) Y/I      sxy = -F (c-Y)(c+Y)/(2I)
//!   u = F/(E'I) [X (2L-X) Y/2 + (2+nu') Y^3/6] + d Y      v = -F/(E'I) [nu' (L-X) Y^2/2 + X^2 (3L-X)/6] + e X
//!   d + e = -F c^2/(2GI);   root at (0,0), u = v = 0 and   slope-of-axis: e = 0;   slope-of-section: d = 0;
//!   three-points, u(0, +-c) = 0: d = -F c^2 (2+nu')/(6 E'I)
//! pure bending, -L/2 <= X <= L/2, moment M about +Z at X = L/2:   sxx = -M Y/I     u = -M X Y/(E'I)   v = M (X^2 + nu' Y^2)/(2E'I)
//! ```
//! Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), sections 20 and 21 (from memory).

use super::{Field, Plane, energy_total, finite, hooke, total};
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

const LENGTH: ParameterEntry = ParameterEntry::required(
    "length",
    Form::Number(Dimension::Length),
    "length of the strip along X",
);
const DEPTH: ParameterEntry = ParameterEntry::required(
    "depth",
    Form::Number(Dimension::Length),
    "depth of the strip along Y, |Y| <= depth/2",
);
const ROOTS: &[&str] = &["slope-of-axis", "slope-of-section", "three-points"];

pub(in crate::exact) const CANTILEVER: Entry = Entry {
    name: "cantilever-strip",
    title: "Linear-elastic cantilever strip with an end load, small strain",
    parameters: &[
        LENGTH,
        DEPTH,
        ParameterEntry::required(
            "end-load",
            Form::Number(Dimension::ForcePerLength),
            "per unit thickness, downwards (-Y) at X = length, as a parabola of shear",
        )
        .load(),
        MATERIAL,
        Plane::ENTRY,
        ParameterEntry::required(
            "root",
            Form::Word(ROOTS),
            "what holds (0, 0) besides u = v = 0: dv/dX = 0 (slope-of-axis), du/dY = 0 (slope-of-section), \
             or u = 0 at (0, depth/2) and (0, -depth/2) (three-points)",
        ),
    ],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::LinearElastic],
    range: "any length and depth; the root section warps, so it is held at points only and carries its exact tractions",
    sources: &[
        "Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 21 (from memory)",
    ],
    checks: &[
        "many-digit values, tests/oracles/library/cantilever-strip",
        "equilibrium, Hooke's law, compatibility, free edges, end load, root conditions, work of the end tractions",
    ],
    build: |given| Ok(Box::new(Strip::cantilever(given)?)),
};

pub(in crate::exact) const PURE_BENDING: Entry = Entry {
    name: "pure-bending",
    title: "Linear-elastic strip in pure bending, small strain",
    parameters: &[
        LENGTH,
        DEPTH,
        ParameterEntry::required(
            "moment",
            Form::Number(Dimension::MomentPerLength),
            "per unit thickness, about +Z on the face X = length/2: positive presses the top, Y > 0",
        )
        .load(),
        MATERIAL,
        Plane::ENTRY,
    ],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::LinearElastic],
    range: "any length and depth; u = v = 0 and no rotation at the origin, the middle of the strip",
    sources: &["Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 20 (from memory)"],
    checks: &[
        "many-digit values, tests/oracles/library/pure-bending",
        "equilibrium, Hooke's law, compatibility, free edges, moment, energy = moment x angle/2",
    ],
    build: |given| Ok(Box::new(Strip::bending(given)?)),
};

#[derive(Debug, Clone, Copy, PartialEq)]
enum Load {
    /// End load and the constants d and e of the header.
    End {
        force: f64,
        section: f64,
        axis: f64,
        root: &'static str,
    },
    Moment(f64),
}

#[derive(Debug, Clone)]
struct Strip {
    length: f64,
    /// c of the header.
    half: f64,
    law: LinearElastic,
    plane: Plane,
    load: Load,
    totals: Vec<Total>,
}

impl Strip {
    fn of(given: &Given) -> Result<Self, Refusal> {
        Ok(Self {
            length: given.positive("length")?,
            half: 0.5 * given.positive("depth")?,
            law: hooke(given.material()?)?,
            plane: Plane::of(given)?,
            load: Load::Moment(0.0),
            totals: Vec::new(),
        })
    }

    fn cantilever(given: &Given) -> Result<Self, Refusal> {
        let mut strip = Self::of(given)?;
        let force = given.finite("end-load")?;
        let word = given.text("root").unwrap_or("nothing");
        let Some(root) = ROOTS.iter().find(|r| **r == word) else {
            let hint = ROOTS.join(", ");
            return Err(refuse("root", format!("root is {word}"), hint));
        };
        let c = strip.half;
        // F c^2/(2 G I)
        let shear = 0.75 * force / (strip.law.shear_modulus() * c);
        let poisson = strip.plane.poisson(&strip.law);
        let (section, axis) = match *root {
            "slope-of-axis" => (-shear, 0.0),
            "slope-of-section" => (0.0, -shear),
            _ => {
                let bent = force / (strip.plane.young(&strip.law) * c);
                // e = -F c^2 (4 + 5 nu')/(6 E'I), because E'/G = 2 (1 + nu')
                (
                    -0.25 * bent * (2.0 + poisson),
                    -0.25 * bent * (4.0 + 5.0 * poisson),
                )
            }
        };
        strip.load = Load::End {
            force,
            section,
            axis,
            root,
        };
        let (length, inertia) = (strip.length, strip.inertia());
        let bending = length.powi(3) / (6.0 * strip.plane.young(&strip.law) * inertia);
        let shearing = 0.3 * length / (strip.law.shear_modulus() * c);
        let tip = force * length.powi(3) / (3.0 * strip.plane.young(&strip.law) * inertia);
        strip.totals = finite(vec![
            total(
                "tip_deflection",
                Ok(tip - axis * length),
                Dimension::Length,
                Extent::Whole,
            ),
            energy_total(force * force * (bending + shearing)),
        ])?;
        Ok(strip)
    }

    fn bending(given: &Given) -> Result<Self, Refusal> {
        let mut strip = Self::of(given)?;
        let moment = given.finite("moment")?;
        strip.load = Load::Moment(moment);
        let curvature = moment / (strip.plane.young(&strip.law) * strip.inertia());
        let whole = |name, value, dimension| total(name, Ok(value), dimension, Extent::Whole);
        strip.totals = finite(vec![
            whole("bending_moment", moment, Dimension::MomentPerLength),
            whole("curvature", curvature, Dimension::PerLength),
            energy_total(0.5 * moment * curvature * strip.length),
        ])?;
        Ok(strip)
    }

    fn inertia(&self) -> f64 {
        2.0 / 3.0 * self.half.powi(3)
    }

    /// sxx, sxy.
    fn stress(&self, x: f64, y: f64) -> (f64, f64) {
        let inertia = self.inertia();
        match self.load {
            Load::Moment(moment) => (-moment * y / inertia, 0.0),
            Load::End { force, .. } => (
                force * (self.length - x) * y / inertia,
                -0.5 * force * (self.half - y) * (self.half + y) / inertia,
            ),
        }
    }

    /// u, v and the rotation (dv/dX - du/dY)/2.
    fn motion(&self, x: f64, y: f64) -> (f64, f64, f64) {
        let (length, poisson) = (self.length, self.plane.poisson(&self.law));
        let stiffness = self.plane.young(&self.law) * self.inertia();
        match self.load {
            Load::Moment(moment) => {
                let bent = moment / stiffness;
                let lift = 0.5 * bent * (x * x + poisson * y * y);
                (-bent * x * y, lift, bent * x)
            }
            Load::End {
                force,
                section,
                axis,
                ..
            } => {
                let bent = force / stiffness;
                let slope = 0.5 * x * (2.0 * length - x);
                let u = bent * y * (slope + (2.0 + poisson) * y * y / 6.0) + section * y;
                let sag = 0.5 * poisson * (length - x) * y * y + x * x * (3.0 * length - x) / 6.0;
                // dv/dX = bent (nu' Y^2/2 - slope) + e; du/dY = bent (slope + (2+nu') Y^2/2) + d
                let turn = 0.5 * (axis - section) - bent * (slope + 0.5 * y * y);
                (u, axis * x - bent * sag, turn)
            }
        }
    }
}

impl ExactSolution for Strip {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let Point { x, y, z } = point;
        let (sxx, sxy) = self.stress(x, y);
        let (szz, axial) = self.plane.across(&self.law, sxx);
        let stress = SymTensor {
            xy: sxy,
            ..SymTensor::diagonal(sxx, 0.0, szz)
        };
        let along = sxx / self.plane.young(&self.law);
        let across = -self.plane.poisson(&self.law) * along;
        let shear = 0.5 * sxy / self.law.shear_modulus();
        let (u, v, turn) = self.motion(x, y);
        let mut gradient = Matrix3::new(
            along,
            shear - turn,
            0.0,
            shear + turn,
            across,
            0.0,
            0.0,
            0.0,
            axial,
        );
        if self.plane == Plane::Stress {
            // sxx is bilinear
            let unit = -self.law.nu / self.law.e * z / self.inertia();
            let (by_x, by_y) = match self.load {
                Load::Moment(moment) => (0.0, -moment),
                Load::End { force, .. } => (-force * y, force * (self.length - x)),
            };
            gradient[(2, 0)] = unit * by_x;
            gradient[(2, 1)] = unit * by_y;
        }
        Field {
            displacement: Vector3::new(u, v, z * axial),
            gradient,
            strains: [along, across, axial],
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
        let (c, length) = (self.half, self.length);
        match self.load {
            Load::End { .. } => Body::Block {
                lower: [0.0, -c],
                upper: [length, c],
            },
            Load::Moment(_) => Body::Block {
                lower: [-0.5 * length, -c],
                upper: [0.5 * length, c],
            },
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

    /// Along the upper half depth, from end to end.
    fn line(&self) -> Line {
        let (c, length) = (self.half, self.length);
        let from = match self.load {
            Load::End { .. } => 0.0,
            Load::Moment(_) => -0.5 * length,
        };
        Line {
            from: Point::new(from, 0.5 * c, 0.0),
            to: Point::new(from + length, 0.5 * c, 0.0),
            columns: Line::CARTESIAN,
        }
    }

    fn load_stress(&self) -> f64 {
        match self.load {
            Load::End { force, .. } => {
                let bending = force.abs() * self.length * self.half / self.inertia();
                bending + force.abs() / self.half
            }
            Load::Moment(moment) => moment.abs() * self.half / self.inertia(),
        }
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let length = units.length.name;
        let (load, mut modelling) = match self.load {
            Load::End { force, root, .. } => (
                format!(
                    "{force} {} downwards at X = {} {length}, root: {root}",
                    units.name_of(Dimension::ForcePerLength),
                    self.length
                ),
                vec![
                    "X = length: the parabolic shear sxy of the exact solution; X = 0: its exact tractions or displacements. A \
                     clamped root is another problem"
                        .to_string(),
                    match root {
                        "slope-of-axis" => "u = v = 0 and dv/dX = 0 at the origin",
                        "slope-of-section" => "u = v = 0 and du/dY = 0 at the origin",
                        _ => "v = 0 at the origin, u = 0 at (0, depth/2), (0, 0) and (0, -depth/2)",
                    }
                    .to_string(),
                ],
            ),
            Load::Moment(moment) => (
                format!(
                    "moment {moment} {} at the ends",
                    units.name_of(Dimension::MomentPerLength)
                ),
                vec![
                    "both ends: the linear sxx of the exact solution; u = v = 0 and no rotation at the origin".to_string(),
                ],
            ),
        };
        modelling.push(self.plane.modelling().to_string());
        Description {
            body: format!(
                "strip, length {} {length}, depth {} {length}",
                self.length,
                2.0 * self.half
            ),
            load,
            ends: Some(self.plane.in_words().to_string()),
            modelling,
            totals: vec!["strain_energy", "load_factor"],
            sketch: None,
        }
    }
}

#[cfg(test)]
#[path = "strip_tests.rs"]
mod tests;
