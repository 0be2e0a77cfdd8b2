//! An elastic-perfectly-plastic tube in plane strain under inner pressure, Tresca's yield condition, small strain.
//!
//! ```text
//! Y = yield stress      yields at P = Y (B-A)(B+A)/(2B^2), collapses at P = Y ln(B/A)
//! plastic radius c:  P/Y = ln(c/A) + z/2,  z = 1 - c^2/B^2;   as a root in z:  -ln(1-z) - z = 2 (ln(B/A) - P/Y)
//! plastic, R <= c:  srr = -P + Y ln(R/A)      stt = srr + Y      szz = nu (srr + stt): no plastic strain along the axis
//! elastic, R >= c:  srr = -K (B-R)(B+R)/(B^2 R^2)   stt = K (1/R^2 + 1/B^2)   K = Y c^2/2, or P A^2 B^2/((B-A)(B+A)) before yield
//! both:  u/R = (1+nu)(1-2nu)/E srr + 2 (1-nu^2) K/(E R^2)
//! unloaded: the Lame tube of the pressure P is taken away; with w = (c^2-A^2)/A^2, x = (c^2-R^2)/R^2, f(x) = x - ln(1+x):
//!   K = Y A^2 B^2/(2 (B-A)(B+A)) f(w) in the elastic formulas; plastic: srr + Y f(x)/2, stt + Y f(x)/2 - Y x. Nothing cancels
//! ```
//! Holds while srr <= szz <= stt where plastic: `P <= Y (1-nu)/(1-2nu)` at the bore, and `nu >= 0`; unloading stays elastic
//! while P is at most twice the yield pressure. Hill, The Mathematical Theory of Plasticity (1950), chapter V (from memory).

use super::{Radial, RingTotals, beyond, energy_density, finite, radii, total};
use crate::exact::catalogue::Entry;
use crate::exact::description::Description;
use crate::exact::given::{Form, Given, ParameterEntry, refuse};
use crate::exact::solution::{
    ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total,
};
use crate::exact::tube_entries::{INNER_RADIUS, MATERIAL, OUTER_RADIUS};
use crate::exact::tube_words::{Bore, TubeWords};
use crate::exact::{Body, Ends};
use crate::materials::{ElasticPlastic, LinearElastic, Material, MaterialKind};
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use crate::numerics::{GaussRule, find_root};
use std::f64::consts::PI;

const STAGES: &[&str] = &["loaded", "unloaded"];

pub(in crate::exact) const ENTRY: Entry = Entry {
    name: "elastic-plastic-tube",
    title: "Elastic-perfectly-plastic tube under inner pressure, Tresca, plane strain, small strain",
    parameters: &[
        INNER_RADIUS,
        OUTER_RADIUS,
        MATERIAL,
        ParameterEntry::required(
            "inner-pressure",
            Form::Number(Dimension::Stress),
            "pressure on the bore, 0 or more; of an unloaded tube the largest it has seen",
        )
        .load(),
        ParameterEntry::required(
            "stage",
            Form::Word(STAGES),
            "loaded: under the pressure; unloaded: after the pressure is taken away",
        ),
    ],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::ElasticPlastic],
    range: "nu >= 0; pressures below collapse, Y ln(B/A), and up to Y (1-nu)/(1-2nu), so that szz stays the middle principal stress; \
            unloaded: up to twice the yield pressure, so that it does not yield in reverse",
    sources: &["Hill, The Mathematical Theory of Plasticity (1950), chapter V (from memory)"],
    checks: &[
        "many-digit values, tests/oracles/library/elastic-plastic-tube",
        "equilibrium, compatibility, yield condition, continuity, walls, elastic change of volume, zero axial force when unloaded",
        "Tresca's collapse Y ln(B/A), not von Mises' 2/sqrt(3) Y ln(B/A)",
    ],
    build: |given| Ok(Box::new(PlasticTube::new(given)?)),
};

#[derive(Debug, Clone)]
struct PlasticTube {
    inner: f64,
    outer: f64,
    law: ElasticPlastic,
    pressure: f64,
    unloaded: bool,
    /// w of the header, 0 before yield, and (B^2-A^2)/A^2.
    front: f64,
    outer_place: f64,
    /// K of the header.
    decaying: f64,
    totals: Vec<Total>,
}

/// `-ln(1-z) - z`, f(-z) of the header, through an integral of a positive integrand where the closed form cancels.
fn log_excess(z: f64) -> f64 {
    if z.abs() < 0.3 {
        let rule = GaussRule::of(20);
        return z * z * rule.integrate(0.0, 1.0, |t| t / (1.0 - z * t));
    }
    -(-z).ln_1p() - z
}

impl PlasticTube {
    fn new(given: &Given) -> Result<Self, Refusal> {
        let (a, b) = radii(given, false)?;
        let Material::ElasticPlastic(law) = given.material()? else {
            let message = format!("it cannot be made of {}", given.material()?.name());
            return Err(refuse("material", message, "use elastic-perfectly-plastic"));
        };
        let unloaded = match given.text("stage") {
            Some("loaded") => false,
            Some("unloaded") => true,
            other => {
                let message = format!("stage is {}", other.unwrap_or("nothing"));
                return Err(refuse("stage", message, STAGES.join(" or ")));
            }
        };
        let squares = (b - a) * (b + a);
        let mut tube = Self {
            inner: a,
            outer: b,
            law: *law,
            pressure: given.finite("inner-pressure")?,
            unloaded,
            front: 0.0,
            outer_place: squares / (a * a),
            decaying: 0.0,
            totals: Vec::new(),
        };
        tube.check_range()?;
        let whole = a * a * (b * b / squares);
        tube.decaying = match (tube.is_plastic(), unloaded) {
            (false, false) => tube.pressure * whole,
            (false, true) => 0.0,
            (true, _) => {
                tube.front = tube.find_front()?;
                if unloaded {
                    0.5 * law.yield_stress * whole * log_excess(-tube.front)
                } else {
                    0.5 * law.yield_stress * tube.front_square()
                }
            }
        };
        tube.totals = finite(tube.all_totals())?;
        Ok(tube)
    }

    fn yield_pressure(&self) -> f64 {
        let (a, b) = (self.inner, self.outer);
        0.5 * self.law.yield_stress * ((b - a) / b) * ((b + a) / b)
    }

    /// Y ln(B/A), as -Y/2 ln(1 - (1 - A^2/B^2)).
    fn collapse_pressure(&self) -> f64 {
        -0.5 * self.law.yield_stress
            * (-2.0 * self.yield_pressure() / self.law.yield_stress).ln_1p()
    }

    fn is_plastic(&self) -> bool {
        self.pressure > self.yield_pressure()
    }

    fn check_range(&self) -> Result<(), Refusal> {
        let (pressure, nu) = (self.pressure, self.law.elastic.nu);
        let too_much = |what: &str, most: f64| {
            let message = format!("inner-pressure = {pressure} {what}");
            Err(refuse(
                "inner-pressure",
                message,
                format!("at most {most:.12e}"),
            ))
        };
        if pressure < 0.0 {
            let message = format!("inner-pressure = {pressure} must not be negative");
            return Err(refuse("inner-pressure", message, "0 or more"));
        }
        if nu < 0.0 {
            let message = format!(
                "nu = {nu}: with a negative Poisson's ratio szz does not stay between srr and stt, and the tube yields otherwise"
            );
            return Err(refuse("material", message, "nu >= 0"));
        }
        let collapse = self.collapse_pressure();
        if pressure >= collapse {
            let message = format!(
                "inner-pressure = {pressure} reaches the collapse pressure {collapse:.12e} = yield-stress x ln(B/A)"
            );
            return Err(refuse(
                "inner-pressure",
                message,
                format!("anything below {collapse:.12e}"),
            ));
        }
        // szz <= stt at the bore: nu (2 srr + Y) <= srr + Y at srr = -P
        let most = self.law.yield_stress * (1.0 - nu) / self.law.elastic.compressibility();
        if self.is_plastic() && pressure > most {
            return too_much(
                "makes szz the largest principal stress at the bore, where Tresca's flow has another direction",
                most,
            );
        }
        let most = 2.0 * self.yield_pressure();
        if self.unloaded && pressure > most {
            return too_much("yields in reverse at the bore when it is taken away", most);
        }
        Ok(())
    }

    /// w of the header: a root in w near first yield, in z near collapse, each where it does not cancel.
    fn find_front(&self) -> Result<f64, Refusal> {
        let place = self.outer_place;
        let stress = 0.5 * self.law.yield_stress;
        let over = (self.pressure - self.yield_pressure()) / stress;
        let left = (self.collapse_pressure() - self.pressure) / stress;
        let root = if over < left {
            let rise = |w: f64| w * place / (1.0 + place) - log_excess(-w) - over;
            find_root(0.0, place, rise)
        } else {
            let most = place / (1.0 + place);
            find_root(0.0, most, |z| log_excess(z) - left).map(|z| place - z * (1.0 + place))
        };
        root.map_err(|e| refuse("inner-pressure", format!("no plastic radius: {e}"), ""))
    }

    /// c^2.
    fn front_square(&self) -> f64 {
        self.inner * self.inner * (1.0 + self.front)
    }

    /// The state where R^2 is `square`, `inside` = R^2 - A^2 and `outside` = B^2 - R^2.
    fn at_place(&self, square: f64, inside: f64, outside: f64) -> Radial {
        let LinearElastic { e, nu } = self.law.elastic;
        let bb = self.outer * self.outer;
        let lame = |decaying: f64| {
            let falling = decaying * (outside / square) / bb;
            (-falling, 2.0 * decaying / bb + falling)
        };
        let (mut srr, mut stt) = lame(self.decaying);
        let (aa, strength) = (self.inner * self.inner, self.law.yield_stress);
        // (c^2 - R^2)/R^2
        let within = (aa * self.front - inside) / square;
        if within > 0.0 && self.unloaded {
            let push = 0.5 * strength * log_excess(-within);
            (srr, stt) = (srr + push, stt + push - strength * within);
        } else if within > 0.0 && self.is_plastic() {
            srr = -self.pressure + 0.5 * strength * (inside / aa).ln_1p();
            stt = srr + strength;
        }
        let volume = (1.0 + nu) * self.law.elastic.compressibility() / e;
        let hoop = volume * srr + 2.0 * (1.0 - nu) * (1.0 + nu) * self.decaying / (e * square);
        Radial {
            strains: [volume * (srr + stt) - hoop, hoop, 0.0],
            stress: [srr, stt, nu * (srr + stt)],
            ..Radial::default()
        }
    }

    fn all_totals(&self) -> Vec<Total> {
        let (a, b) = (self.inner, self.outer);
        let (aa, bb, squares) = (a * a, b * b, (b - a) * (b + a));
        let held = if self.unloaded { 0.0 } else { self.pressure };
        let radius = if self.is_plastic() {
            Ok(self.front_square().sqrt())
        } else {
            let first = self.yield_pressure();
            Err(format!(
                "nothing is plastic below the yield pressure {first:.6e}"
            ))
        };
        let mut list = RingTotals {
            inner: Some((a, self.at_place(aa, 0.0, squares).strains[1])),
            outer: (b, self.at_place(bb, squares, 0.0).strains[1]),
            axial_strain: Ok(0.0),
            // the integral of srr + stt is that of d(R^2 srr)/dR
            axial_force: 2.0 * PI * self.law.elastic.nu * held * aa,
            strain_energy: self.energy(),
        }
        .list();
        let whole = |name, value, dimension| total(name, value, dimension, Extent::Whole);
        list.push(whole("plastic_radius", radius, Dimension::Length));
        let first = Ok(self.yield_pressure());
        list.push(whole("yield_pressure", first, Dimension::Stress));
        let last = Ok(self.collapse_pressure());
        list.push(whole("collapse_pressure", last, Dimension::Stress));
        list
    }

    /// Recoverable energy per unit length: W over the plastic and the elastic zone, by panels in ln(R^2/A^2).
    fn energy(&self) -> f64 {
        let aa = self.inner * self.inner;
        let density = |x: f64| {
            let place = x.exp_m1();
            let square = aa * (1.0 + place);
            let state = self.at_place(square, aa * place, aa * (self.outer_place - place));
            let [srr, stt, szz] = state.stress;
            energy_density(&self.law.elastic, &SymTensor::diagonal(srr, stt, szz)) * square
        };
        let zone = |from: f64, to: f64| {
            let panels = (to - from).ceil().max(1.0);
            let each = (to - from) / panels;
            let sum: f64 = (0..panels as usize)
                .map(|i| from + i as f64 * each)
                .map(|start| GaussRule::of(16).integrate(start, start + each, density))
                .sum();
            PI * sum
        };
        let front = self.front.ln_1p();
        zone(0.0, front) + zone(front, self.outer_place.ln_1p())
    }
}

impl ExactSolution for PlasticTube {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let (radius, a, b) = (point.radius(), self.inner, self.outer);
        let inside = beyond(point, a, false);
        if !(inside > -0.75 * a * a && radius.is_finite() && point.z.is_finite()) {
            let message = format!("the tube's formulas have no value at reference radius {radius}");
            return Err(refuse("", message, format!("the wall is {a} <= R <= {b}")));
        }
        let outside = -beyond(point, b, false);
        let radial = self.at_place(radius * radius, inside, outside);
        radial.state(point, &self.law.elastic)
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        Body::Tube {
            inner: self.inner,
            outer: self.outer,
        }
    }

    fn bound(&self) -> ErrorBound {
        // a load within a share g of collapse leaves the plastic radius eps/sqrt(g), and the strains as much
        let collapse = self.collapse_pressure();
        let gap = (collapse - self.pressure) / collapse;
        let loose = 1e-15 / gap.max(f64::EPSILON).sqrt();
        // what is left after unloading is a difference: of the size of the pressure beyond yield
        let beyond = self.pressure - self.yield_pressure();
        let left = if self.unloaded && self.is_plastic() {
            5e-15 * self.pressure / beyond
        } else {
            0.0
        };
        let loose = (loose + left).min(1.0);
        ErrorBound {
            displacement: 5e-15 + loose,
            stress: 5e-15 + loose,
            totals: 5e-15 + loose,
        }
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::SmallStrain
    }

    fn method(&self) -> String {
        "closed form, plastic radius by a bracketed root".to_string()
    }

    fn load_stress(&self) -> f64 {
        self.pressure
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let words = TubeWords {
            inner: self.inner,
            outer: self.outer,
            ends: Ends::PlaneStrain,
            bore: Bore::Pressure,
            inner_pressure: self.pressure,
            outer_pressure: 0.0,
            kinematics: Kinematics::SmallStrain,
            dead: false,
        };
        let mut description = words.description("tube", units);
        if self.unloaded {
            description.load = format!(
                "{} {} on the bore, then none: residual state",
                self.pressure, units.stress.name
            );
        }
        description.modelling.push(
            "Tresca's yield condition (von Mises gives other stresses and a collapse pressure 2/sqrt(3) times as large), no \
             hardening, flow at constant volume; the strain energy is that of the elastic strain, without what plastic flow has \
             used up"
                .to_string(),
        );
        description.sketch = description.sketch.filter(|_| !self.unloaded);
        description
    }
}

#[cfg(test)]
#[path = "elastic_plastic_tube_tests.rs"]
mod tests;
