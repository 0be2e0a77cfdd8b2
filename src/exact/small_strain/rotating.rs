//! A linear-elastic disk or long cylinder that turns about its axis, at small strain; walls free.
//!
//! ```text
//! w = rho omega^2      disk: k = (3+nu)/8, d = (1-nu)/4     cylinder: k = (3-2nu)/(8(1-nu)), d = (1-2nu)/(4(1-nu))
//! srr = k w (R^2-A^2)(B^2-R^2)/R^2         solid: k w (B^2-R^2)
//! stt + srr = S = w [2k (A^2+B^2) - g R^2]      stt - srr = D = w [2k A^2 B^2/R^2 + d R^2]      g = 2k - d
//! disk: szz = 0       cylinder: szz = s0 + nu (S - mean S),  mean S = w (A^2+B^2)/2,  s0 = E ez + nu mean S = N/area
//! E err, E ett = h S -/+ (1+nu)/2 D - nu E ez      h = (1-nu)/2 in the disk, (1+nu)(1-2nu)/2 in the cylinder
//! ```
//! Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), sections 32 and 119 (from memory).

use super::{Plane, Radial, RingTotals, beyond, ends_among, finite, hooke, radii};
use crate::exact::catalogue::Entry;
use crate::exact::description::Description;
use crate::exact::given::{Form, Given, ParameterEntry, refuse};
use crate::exact::solution::{ErrorBound, ExactSolution, Kinematics, Refusal, State, Total};
use crate::exact::tube_entries::{MATERIAL, OUTER_RADIUS, ends};
use crate::exact::tube_words::{Bore, TubeWords};
use crate::exact::{Body, Ends};
use crate::materials::{LinearElastic, MaterialKind};
use crate::mechanics::{Dimension, Point, UnitSystem};
use crate::numerics::GaussRule;
use nalgebra::Vector3;
use std::f64::consts::PI;

const ENDS: &[&str] = &[Ends::NAMES[0], Ends::NAMES[1]];

const BORE: ParameterEntry = ParameterEntry::optional(
    "inner-radius",
    Form::Number(Dimension::Length),
    "0",
    "radius of the bore; 0 is a solid body",
);

const SPIN: ParameterEntry = ParameterEntry::required(
    "density-speed-squared",
    Form::Number(Dimension::StressPerLengthSquared),
    "density times angular speed squared: the body force is this times R, outwards",
)
.load();

const SOURCES: &[&str] = &[
    "Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), sections 32 and 119 (from memory)",
];

pub(in crate::exact) const DISK: Entry = Entry {
    name: "rotating-disk",
    title: "Thin linear-elastic disk turning about its axis, plane stress, small strain",
    parameters: &[BORE, OUTER_RADIUS, MATERIAL, SPIN],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::LinearElastic],
    range: "0 <= inner-radius < outer-radius, -1 < nu <= 0.5; generalised plane stress: a disk thin against its radius",
    sources: SOURCES,
    checks: &[
        "many-digit values, tests/oracles/library/rotating-disk",
        "equilibrium with the body force, Hooke's law, compatibility, free walls, work of the body force",
        "a pin hole doubles the stress of the centre",
    ],
    build: |given| Ok(Box::new(Rotating::new(given, Ends::PlaneStress)?)),
};

pub(in crate::exact) const CYLINDER: Entry = Entry {
    name: "rotating-cylinder",
    title: "Long linear-elastic cylinder turning about its axis, small strain",
    parameters: &[BORE, OUTER_RADIUS, MATERIAL, SPIN, ends(ENDS)],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::LinearElastic],
    range: "0 <= inner-radius < outer-radius, -1 < nu <= 0.5; away from the ends of a long cylinder",
    sources: SOURCES,
    checks: &[
        "many-digit values, tests/oracles/library/rotating-cylinder",
        "equilibrium with the body force, Hooke's law, compatibility, free walls, axial force, work of the body force",
    ],
    build: |given| Ok(Box::new(Rotating::new(given, ends_among(given, ENDS)?)?)),
};

#[derive(Debug, Clone)]
struct Rotating {
    law: LinearElastic,
    /// w of the header.
    spin: f64,
    /// k and d of the header.
    lead: f64,
    lean: f64,
    /// s0 of the header.
    even_stress: f64,
    axial_strain: f64,
    totals: Vec<Total>,
    words: TubeWords,
}

impl Rotating {
    fn new(given: &Given, ends: Ends) -> Result<Self, Refusal> {
        let (a, b) = radii(given, true)?;
        let law = hooke(given.material()?)?;
        let spin = given.finite("density-speed-squared")?;
        if spin < 0.0 {
            let message = format!("density-speed-squared = {spin} must not be negative");
            return Err(refuse("density-speed-squared", message, "0 or more"));
        }
        let nu = law.nu;
        let (lead, lean) = match ends {
            Ends::PlaneStress => ((3.0 + nu) / 8.0, (1.0 - nu) / 4.0),
            _ => (
                (3.0 - 2.0 * nu) / (8.0 * (1.0 - nu)),
                law.compressibility() / (4.0 * (1.0 - nu)),
            ),
        };
        let mean = 0.5 * spin * (a * a + b * b);
        let (even_stress, axial_strain) = match ends {
            Ends::PlaneStrain => (nu * mean, 0.0),
            Ends::GeneralizedPlaneStrain { axial_force } => {
                let stress = axial_force / (PI * (b - a) * (b + a));
                (stress, (stress - nu * mean) / law.e)
            }
            _ => (0.0, 0.0),
        };
        let mut body = Self {
            law,
            spin,
            lead,
            lean,
            even_stress,
            axial_strain,
            totals: Vec::new(),
            words: TubeWords {
                inner: a,
                outer: b,
                ends,
                bore: Bore::Pressure,
                inner_pressure: 0.0,
                outer_pressure: 0.0,
                kinematics: Kinematics::SmallStrain,
                dead: false,
            },
        };
        body.totals = finite(body.all_totals())?;
        Ok(body)
    }

    fn is_disk(&self) -> bool {
        self.words.ends == Ends::PlaneStress
    }

    /// S of the header at a square of the radius.
    fn sum(&self, square: f64) -> f64 {
        let (a, b) = (self.words.inner, self.words.outer);
        let falling = 2.0 * self.lead - self.lean;
        self.spin * (2.0 * self.lead * (a * a + b * b) - falling * square)
    }

    /// D of the header at a square of the radius.
    fn difference(&self, square: f64) -> f64 {
        let (a, b) = (self.words.inner, self.words.outer);
        let bore = if a > 0.0 {
            2.0 * self.lead * (a * a) * (b * b / square)
        } else {
            0.0
        };
        self.spin * (bore + self.lean * square)
    }

    /// szz; `inside` and `outside` are R^2 - A^2 and B^2 - R^2.
    fn axial_stress(&self, inside: f64, outside: f64) -> f64 {
        if self.is_disk() {
            return 0.0;
        }
        let swing = self.spin * (outside - inside) / (4.0 * (1.0 - self.law.nu));
        self.even_stress + self.law.nu * swing
    }

    /// The state where `R^2 - A^2`, `B^2 - R^2` and `R^2` are these.
    fn at_place(&self, inside: f64, outside: f64, square: f64) -> Radial {
        let (e, nu) = (self.law.e, self.law.nu);
        let (sum, difference) = (self.sum(square), self.difference(square));
        let share = if self.words.inner > 0.0 {
            inside / square
        } else {
            1.0
        };
        let srr = self.lead * self.spin * share * outside;
        let apart = 0.5 * (1.0 + nu) * difference / e;
        let (even, axial) = if self.is_disk() {
            (0.5 * (1.0 - nu) * sum / e, -nu * sum / e)
        } else {
            let even = 0.5 * (1.0 + nu) * self.law.compressibility() * sum / e;
            (even - nu * self.axial_strain, self.axial_strain)
        };
        Radial {
            strains: [even - apart, even + apart, axial],
            stress: [srr, sum - srr, self.axial_stress(inside, outside)],
            ..Radial::default()
        }
    }

    fn all_totals(&self) -> Vec<Total> {
        let (a, b) = (self.words.inner, self.words.outer);
        let squares = (b - a) * (b + a);
        let inner = (a > 0.0).then(|| (a, self.at_place(0.0, squares, a * a).strains[1]));
        let axial_strain = if self.is_disk() {
            Err("the thickness strain varies with the radius".to_string())
        } else {
            Ok(self.axial_strain)
        };
        RingTotals {
            inner,
            outer: (b, self.at_place(squares, 0.0, b * b).strains[1]),
            axial_strain,
            axial_force: match self.words.ends {
                Ends::GeneralizedPlaneStrain { axial_force } => axial_force,
                _ => self.even_stress * PI * squares,
            },
            strain_energy: self.energy(),
        }
        .list()
    }

    /// Integral of W over the section in q = R^2: that of D^2 in closed form, the rest is a polynomial of degree two.
    fn energy(&self) -> f64 {
        let (a, b) = (self.words.inner, self.words.outer);
        let (e, nu) = (self.law.e, self.law.nu);
        let squares = (b - a) * (b + a);
        let (aa, bb) = (a * a, b * b);
        let bore = 2.0 * self.lead;
        let turning = self.spin.powi(2)
            * squares
            * (bore * bore * aa * bb
                + 2.0 * bore * self.lean * aa * bb
                + self.lean * self.lean * (aa * aa + aa * bb + bb * bb) / 3.0);
        let rest = GaussRule::of(2).integrate(0.0, squares, |inside| {
            let axial = self.axial_stress(inside, squares - inside);
            let sum = self.sum(aa + inside);
            (1.0 + nu) * (0.5 * sum - axial).powi(2) / 3.0
                + self.law.compressibility() * (sum + axial).powi(2) / 6.0
        });
        PI * (0.25 * (1.0 + nu) * turning + rest) / e
    }
}

impl ExactSolution for Rotating {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let (radius, a, b) = (point.radius(), self.words.inner, self.words.outer);
        if !(radius.is_finite() && point.z.is_finite() && (radius > 0.0 || a == 0.0)) {
            let message = format!("the formulas have no value at reference radius {radius}");
            return Err(refuse("", message, format!("the body is {a} <= R <= {b}")));
        }
        let (inside, outside) = (beyond(point, a, false), -beyond(point, b, false));
        let mut radial = self.at_place(inside, outside, radius * radius);
        if self.is_disk() {
            // dS/dR = -(1 + nu) w R
            let nu = self.law.nu;
            radial.axial_slope = nu * (1.0 + nu) * self.spin * radius / self.law.e;
        }
        radial.state(point, &self.law)
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        Body::Tube {
            inner: self.words.inner,
            outer: self.words.outer,
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
        self.spin * self.words.outer.powi(2) + self.even_stress.abs()
    }

    fn body_force(&self, point: Point) -> Result<Vector3<f64>, Refusal> {
        Ok(Vector3::new(point.x, point.y, 0.0) * self.spin)
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let kind = if self.is_disk() { "disk" } else { "cylinder" };
        let mut description = self.words.description(kind, units);
        if self.words.inner == 0.0 {
            let (outer, length) = (self.words.outer, units.length.name);
            description.body = format!("solid {kind}, radius {outer} {length}");
        }
        let unit = units.name_of(Dimension::StressPerLengthSquared);
        description.load = format!(
            "turning about the axis, density x speed squared {} {unit}",
            self.spin
        );
        description.modelling.push(
            "body force: density x speed squared x R outwards, at the undeformed place; walls free"
                .to_string(),
        );
        if self.is_disk() {
            let note = Plane::Stress.modelling();
            description.modelling.push(note.to_string());
            description.totals.retain(|name| *name != "axial_stretch");
        }
        description.sketch = None;
        description
    }
}

#[cfg(test)]
#[path = "rotating_tests.rs"]
mod tests;
