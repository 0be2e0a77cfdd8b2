//! A linear-elastic tube with steady heat conduction through its wall, temperatures measured from the stress-free state.
//!
//! ```text
//! y = (R-A)(R+A)/A^2   Y = y(B)   L = ln(1+Y)   m(v) = int_0^1 ln(1+v t) dt      T = Ti - (Ti-To) ln(1+y)/L
//! mean of T over the section: Tm = Ti - (Ti-To) m(Y)/L       T - Tm = (Ti-To) (m(Y) - ln(1+y))/L
//! srr = -F y/(2(1+y)) (m(Y) - m(y))/L      srr + stt = S = -F (m(Y) - ln(1+y))/L
//! plane stress: F = E al (Ti-To), szz = 0;    else F = E al (Ti-To)/(1-nu), szz = s0 + S, s0 = E (ez - al Tm) = N/area
//! ett = al Tm - (1+nu) srr/E - nu s0/E      err = al Tm + (1+nu)/(1-nu) al (T-Tm) + (1+nu) srr/E - nu s0/E
//! ```
//! In plane stress `1/(1-nu)` falls away from err, s0 = 0 and ezz = al Tm + (1+nu) al (T-Tm). `m` and differences of it are
//! integrals of positive integrands where the closed forms cancel (numerics.md 7). Timoshenko & Goodier, Theory of Elasticity,
//! 3rd ed. (1970), sections 150 and 151 (from memory).

use super::{Radial, RingTotals, beyond, ends_among, finite, hooke, radii};
use crate::exact::catalogue::Entry;
use crate::exact::description::Description;
use crate::exact::given::{Form, Given, ParameterEntry, refuse};
use crate::exact::solution::{ErrorBound, ExactSolution, Kinematics, Refusal, State, Total};
use crate::exact::tube_entries::{INNER_RADIUS, MATERIAL, OUTER_RADIUS, ends};
use crate::exact::tube_words::{Bore, TubeWords};
use crate::exact::{Body, Ends};
use crate::materials::{LinearElastic, MaterialKind};
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use crate::numerics::GaussRule;
use std::f64::consts::PI;

const ENDS: &[&str] = &[
    Ends::NAMES[0],
    Ends::NAMES[1],
    Ends::NAMES[2],
    Ends::NAMES[4],
];

const fn temperature(name: &'static str, meaning: &'static str) -> ParameterEntry {
    ParameterEntry::required(name, Form::Number(Dimension::None), meaning).load()
}

pub(in crate::exact) const ENTRY: Entry = Entry {
    name: "heated-tube",
    title: "Linear-elastic tube with steady heat conduction through its wall, small strain",
    parameters: &[
        INNER_RADIUS,
        OUTER_RADIUS,
        MATERIAL,
        ParameterEntry::required(
            "expansion",
            Form::Number(Dimension::None),
            "coefficient of linear thermal expansion, per degree of the temperatures",
        ),
        temperature(
            "inner-temperature",
            "temperature of the bore above the stress-free one",
        ),
        temperature(
            "outer-temperature",
            "temperature of the outer wall above the stress-free one",
        ),
        ends(ENDS),
    ],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::LinearElastic],
    range: "any 0 < inner-radius < outer-radius, -1 < nu <= 0.5; conductivity, E, nu and expansion the same at all temperatures",
    sources: &[
        "Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), sections 150-151 (from memory)",
    ],
    checks: &[
        "many-digit values, tests/oracles/library/heated-tube, walls from 1e-4 to 9 inner radii",
        "equilibrium, Hooke's law, compatibility, free walls and axial force",
        "agrees with the textbook's logarithms where they do not cancel; smooth over walls from 1e-1 to 1e-6",
    ],
    build: |given| Ok(Box::new(HeatedTube::new(given)?)),
};

#[derive(Debug, Clone)]
struct HeatedTube {
    law: LinearElastic,
    expansion: f64,
    temperatures: [f64; 2],
    /// Y, L and m(Y) of the header.
    outer_place: f64,
    log: f64,
    outer_mean: f64,
    /// s0 of the header.
    even_stress: f64,
    axial_strain: f64,
    totals: Vec<Total>,
    words: TubeWords,
}

/// `m(v) = int_0^1 ln(1 + v t) dt = ((1+v) ln(1+v) - v)/v`.
fn mean_log(v: f64) -> f64 {
    if v <= 1.0 {
        return GaussRule::of(16).integrate(0.0, 1.0, |t| (v * t).ln_1p());
    }
    ((1.0 + v) * v.ln_1p() - v) / v
}

/// `m(to) - m(from)`.
fn mean_log_gap(from: f64, to: f64) -> f64 {
    let rule = GaussRule::of(16);
    if to <= 1.0 {
        return rule.integrate(0.0, 1.0, |t| ((to - from) * t / (1.0 + from * t)).ln_1p());
    }
    if (to - from).abs() < 0.5 * (1.0 + from) {
        // m'(v) = (v - ln(1+v))/v^2, far enough from zero
        return rule.integrate(from, to, |v| (v - v.ln_1p()) / (v * v));
    }
    mean_log(to) - mean_log(from)
}

impl HeatedTube {
    fn new(given: &Given) -> Result<Self, Refusal> {
        let (a, b) = radii(given, false)?;
        let law = hooke(given.material()?)?;
        let ends = ends_among(given, ENDS)?;
        let expansion = given.finite("expansion")?;
        let temperatures = [
            given.finite("inner-temperature")?,
            given.finite("outer-temperature")?,
        ];
        let squares = (b - a) * (b + a);
        let outer_place = squares / (a * a);
        let mut tube = Self {
            law,
            expansion,
            temperatures,
            outer_place,
            log: outer_place.ln_1p(),
            outer_mean: mean_log(outer_place),
            even_stress: 0.0,
            axial_strain: 0.0,
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
        let swelling = expansion * tube.mean_temperature();
        (tube.even_stress, tube.axial_strain) = match ends {
            Ends::PlaneStrain => (-law.e * swelling, 0.0),
            Ends::GeneralizedPlaneStrain { axial_force } => {
                let stress = axial_force / (PI * squares);
                (stress, swelling + stress / law.e)
            }
            _ => (0.0, swelling),
        };
        tube.totals = finite(tube.all_totals())?;
        Ok(tube)
    }

    fn mean_temperature(&self) -> f64 {
        let [inner, outer] = self.temperatures;
        // shares of both walls, because one minus the other cancels where they have opposite signs
        let share = self.outer_mean / self.log;
        inner * (1.0 - share) + outer * share
    }

    fn plane_stress(&self) -> bool {
        self.words.ends == Ends::PlaneStress
    }

    /// The state at the place `y` of the header.
    fn at_place(&self, y: f64) -> Radial {
        let (e, nu) = (self.law.e, self.law.nu);
        let drop = self.temperatures[0] - self.temperatures[1];
        let excess = self.expansion * drop * (self.outer_mean - y.ln_1p()) / self.log;
        let gap = y / (2.0 * (1.0 + y)) * mean_log_gap(y, self.outer_place) / self.log;
        let hold = if self.plane_stress() {
            1.0
        } else {
            1.0 / (1.0 - nu)
        };
        let srr = -e * hold * self.expansion * drop * gap;
        let sum = -e * hold * excess;
        let swelling = self.expansion * self.mean_temperature();
        let even = swelling - nu * self.even_stress / e;
        let bend = (1.0 + nu) * srr / e;
        let swell = (1.0 + nu) * hold * excess;
        let (szz, axial) = if self.plane_stress() {
            (0.0, swelling + swell)
        } else {
            (self.even_stress + sum, self.axial_strain)
        };
        Radial {
            strains: [even + swell + bend, even - bend, axial],
            stress: [srr, sum - srr, szz],
            axial_slope: 0.0,
            heat: swelling + excess,
        }
    }

    fn all_totals(&self) -> Vec<Total> {
        let (a, b) = (self.words.inner, self.words.outer);
        let area = PI * (b - a) * (b + a);
        let axial_strain = match self.words.ends {
            Ends::PlaneStress => {
                Err("the thickness strain varies with the temperature".to_string())
            }
            _ => Ok(self.axial_strain),
        };
        RingTotals {
            inner: Some((a, self.at_place(0.0).strains[1])),
            outer: (b, self.at_place(self.outer_place).strains[1]),
            axial_strain,
            axial_force: match self.words.ends {
                Ends::GeneralizedPlaneStrain { axial_force } => axial_force,
                _ => self.even_stress * area,
            },
            strain_energy: self.energy(),
        }
        .list()
    }

    /// Integral of W over the section, in x = ln(1+y), by panels no longer than one.
    fn energy(&self) -> f64 {
        let panels = self.log.ceil().max(1.0);
        let density = |x: f64| {
            let [srr, stt, szz] = self.at_place(x.exp_m1()).stress;
            super::energy_density(&self.law, &SymTensor::diagonal(srr, stt, szz)) * x.exp()
        };
        let width = self.log / panels;
        let sum: f64 = (0..panels as usize)
            .map(|i| {
                let from = i as f64 * width;
                GaussRule::of(20).integrate(from, from + width, density)
            })
            .sum();
        sum * PI * self.words.inner.powi(2)
    }
}

impl ExactSolution for HeatedTube {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let (radius, a) = (point.radius(), self.words.inner);
        // beyond the wall the logarithms are continued, down to half the bore
        let y = beyond(point, a, false) / (a * a);
        if !(y > -0.75 && y.is_finite() && point.z.is_finite()) {
            let message = format!("the tube's formulas have no value at reference radius {radius}");
            let hint = format!("the wall is {a} <= R <= {}", self.words.outer);
            return Err(refuse("", message, hint));
        }
        let mut radial = self.at_place(y);
        if self.plane_stress() {
            let drop = self.temperatures[0] - self.temperatures[1];
            // dT/dR = -2 (Ti-To)/(L R)
            radial.axial_slope =
                -2.0 * (1.0 + self.law.nu) * self.expansion * drop / (self.log * radius);
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
        "closed form, means of the logarithm by 16 Gauss points in thin walls".to_string()
    }

    fn load_stress(&self) -> f64 {
        let drop = self.temperatures[0] - self.temperatures[1];
        self.law.e * (self.expansion * drop).abs() + self.even_stress.abs()
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let mut description = self.words.description("tube", units);
        let [inner, outer] = self.temperatures;
        description.load = format!(
            "{inner} degrees at the bore, {outer} degrees at the outer wall, steady conduction; expansion {} per degree",
            self.expansion
        );
        description.modelling.push(
            "give the temperature T(R) = Ti - (Ti - To) ln(R/A)/ln(B/A) exactly or solve for it; the strain energy is that of \
             the elastic strain"
                .to_string(),
        );
        if self.plane_stress() {
            let note = super::Plane::Stress.modelling();
            description.modelling.push(note.to_string());
            description.totals.retain(|name| *name != "axial_stretch");
        }
        description.sketch = None;
        description
    }
}

#[cfg(test)]
#[path = "heated_tube_tests.rs"]
mod tests;
