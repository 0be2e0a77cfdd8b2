//! An elastic-perfectly-plastic tube in plane strain under inner pressure, Tresca's yield condition, small strain.
//!
//! ```text
//! Y = yield stress      yields at P = Y (B-A)(B+A)/(2B^2), collapses at P = Y ln(B/A)
//! plastic radius c:  P/Y = ln(c/A) + z/2,  z = 1 - c^2/B^2;   as a root in z:  -ln(1-z) - z = 2 (ln(B/A) - P/Y)
//! plastic, R <= c:  srr = -P + Y ln(R/A)      stt = srr + Y      szz = nu (srr + stt): no plastic strain along the axis
//! elastic, R >= c:  srr = -K (B-R)(B+R)/(B^2 R^2)   stt = K (1/R^2 + 1/B^2)   K = Y c^2/2, or P A^2 B^2/((B-A)(B+A)) before yield
//! both:  u/R = (1+nu)(1-2nu)/E srr + 2 (1-nu^2) K/(E R^2)
//! unloaded: the Lame tube of the pressure P is taken away
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
    /// c^2, or A^2 before yield.
    front: f64,
    /// K of the header, and that of the elastic tube under the whole pressure.
    decaying: f64,
    elastic: f64,
    totals: Vec<Total>,
}

/// `-ln(1-z) - z`, through an integral of a positive integrand where the closed form cancels.
fn log_excess(z: f64) -> f64 {
    if z < 0.3 {
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
            front: a * a,
            decaying: 0.0,
            elastic: 0.0,
            totals: Vec::new(),
        };
        tube.elastic = tube.pressure * a * a * (b * b / squares);
        tube.decaying = tube.elastic;
        tube.check_range()?;
        if tube.is_plastic() {
            tube.front = b * b * (1.0 - tube.elastic_share()?);
            tube.decaying = 0.5 * law.yield_stress * tube.front;
        }
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

    /// z of the header.
    fn elastic_share(&self) -> Result<f64, Refusal> {
        let yields = 2.0 * self.yield_pressure() / self.law.yield_stress;
        let left = 2.0 * (self.collapse_pressure() - self.pressure) / self.law.yield_stress;
        // the plastic zone may be thinner than a double can tell
        if log_excess(yields) <= left {
            return Ok(yields);
        }
        find_root(0.0, yields, |z| log_excess(z) - left)
            .map_err(|e| refuse("inner-pressure", format!("no plastic radius: {e}"), ""))
    }

    /// The state where R^2 is `square`, `inside` = R^2 - A^2 and `outside` = B^2 - R^2.
    fn at_place(&self, square: f64, inside: f64, outside: f64) -> Radial {
        let LinearElastic { e, nu } = self.law.elastic;
        let bb = self.outer * self.outer;
        let lame = |decaying: f64| {
            let falling = decaying * (outside / square) / bb;
            (-falling, 2.0 * decaying / bb + falling)
        };
        let gone = if self.unloaded { self.elastic } else { 0.0 };
        let decaying = self.decaying - gone;
        let (mut srr, mut stt) = lame(decaying);
        if self.is_plastic() && square < self.front {
            let rise = 0.5 * (inside / (self.inner * self.inner)).ln_1p();
            let (radial, hoop) = lame(gone);
            let loaded = -self.pressure + self.law.yield_stress * rise;
            (srr, stt) = (loaded - radial, loaded + self.law.yield_stress - hoop);
        }
        let volume = (1.0 + nu) * self.law.elastic.compressibility() / e;
        let hoop = volume * srr + 2.0 * (1.0 - nu) * (1.0 + nu) * decaying / (e * square);
        Radial {
            strains: [volume * (srr + stt) - hoop, hoop, 0.0],
            stress: [srr, stt, nu * (srr + stt)],
            ..Radial::default()
        }
    }

    fn at_square(&self, square: f64) -> Radial {
        let (aa, bb) = (self.inner.powi(2), self.outer.powi(2));
        self.at_place(square, square - aa, bb - square)
    }

    fn all_totals(&self) -> Vec<Total> {
        let (a, b) = (self.inner, self.outer);
        let (aa, bb, squares) = (a * a, b * b, (b - a) * (b + a));
        let held = if self.unloaded { 0.0 } else { self.pressure };
        let radius = if self.is_plastic() {
            Ok(self.front.sqrt())
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

    /// Recoverable energy per unit length: W over the plastic and the elastic zone, by panels in ln R^2.
    fn energy(&self) -> f64 {
        let (aa, bb) = (self.inner.powi(2), self.outer.powi(2));
        let zone = |from: f64, to: f64| {
            let width = (to / from).ln();
            let panels = width.ceil().max(1.0);
            let each = width / panels;
            let density = |x: f64| {
                // kept inside the zone by force: its law must not change at the last bit
                let square = (from * x.exp()).clamp(from, to);
                let [srr, stt, szz] = self.at_square(square).stress;
                energy_density(&self.law.elastic, &SymTensor::diagonal(srr, stt, szz)) * square
            };
            let sum: f64 = (0..panels as usize)
                .map(|i| {
                    GaussRule::of(16).integrate(i as f64 * each, (i + 1) as f64 * each, density)
                })
                .sum();
            PI * sum
        };
        if self.front > aa {
            zone(aa, self.front) + zone(self.front, bb)
        } else {
            zone(aa, bb)
        }
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
        // a load within a share g of collapse leaves the plastic radius eps/sqrt(g) and the strains as much
        let gap = (self.collapse_pressure() - self.pressure) / self.collapse_pressure();
        let loose = 1e-15 / gap.max(f64::EPSILON).sqrt();
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
