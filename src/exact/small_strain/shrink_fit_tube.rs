//! Two linear-elastic rings, the outer one shrunk on the inner one, then loaded by pressures, at small strain.
//!
//! ```text
//! pc = contact pressure, ez = axial strain of both rings, nominal interface radius C, interference d = u2(C) - u1(C)
//! k1 = (al1 C^2 + be1 A^2)/S1   g1 = (al1+be1) A^2/S1   S1 = (C-A)(C+A)      (al, be: ring.rs)
//! k2 = (al2 C^2 + be2 B^2)/S2   g2 = (al2+be2) B^2/S2   S2 = (B-C)(B+C)
//! (k1+k2) pc - (nu2-nu1) ez = d/C + g1 Pi + g2 Po
//! 2 (nu2-nu1) C^2 pc + (E1 S1 + E2 S2) ez = N/pi - 2 nu1 Pi A^2 + 2 nu2 Po B^2
//! pc - Pi = [d/C + g2 Po + (nu2-nu1) ez - (al1+k2) Pi]/(k1+k2)      since g1 - k1 = -al1, so for Po with g2 - k2 = al2
//! ```
//! Each ring is a Lame ring: Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 28 (from memory).

use super::ring::{Axial, Ring, compliances};
use super::{RingTotals, beyond, ends_among, finite, hooke, in_order, total};
use crate::exact::catalogue::Entry;
use crate::exact::description::Description;
use crate::exact::given::{Form, Given, ParameterEntry, refuse};
use crate::exact::solution::{
    ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total,
};
use crate::exact::tube_entries::{INNER_PRESSURE, OUTER_PRESSURE, ends};
use crate::exact::tube_words::{Bore, TubeWords};
use crate::exact::{Body, Ends};
use crate::materials::{LinearElastic, MaterialKind};
use crate::mechanics::{Dimension, Point, UnitSystem};
use std::f64::consts::PI;

const ENDS: &[&str] = &[
    Ends::NAMES[0],
    Ends::NAMES[1],
    Ends::NAMES[2],
    Ends::NAMES[4],
];

pub(in crate::exact) const ENTRY: Entry = Entry {
    name: "shrink-fit-tube",
    title: "Two linear-elastic rings shrunk on one another, small strain",
    parameters: &[
        ParameterEntry::required(
            "radii",
            Form::Numbers(Dimension::Length),
            "[A, C, B]: bore, nominal interface, outer radius",
        ),
        ParameterEntry::required(
            "radial-interference",
            Form::Number(Dimension::Length),
            "outer radius of the inner ring minus bore of the outer ring, before assembly",
        )
        .load(),
        ParameterEntry::required("materials", Form::Materials, "[inner ring, outer ring]"),
        ends(ENDS),
        INNER_PRESSURE,
        OUTER_PRESSURE,
    ],
    kinematics: Kinematics::SmallStrain,
    material_kinds: &[MaterialKind::LinearElastic],
    range: "0 < A < C < B; interference zero or more and the rings in contact under all loads; no friction along the interface, \
            but one axial strain for both rings (plane stress: each ring its own)",
    sources: &[
        "Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), section 28 (from memory)",
    ],
    checks: &[
        "many-digit values, tests/oracles/library/shrink-fit-tube",
        "equilibrium, Hooke's law, compatibility in each ring; jump of u and continuity of srr at the interface",
        "two rings of one metal without interference are the lame-tube",
    ],
    build: |given| Ok(Box::new(ShrinkFit::new(given)?)),
};

#[derive(Debug, Clone)]
struct ShrinkFit {
    rings: [Ring; 2],
    interference: f64,
    totals: Vec<Total>,
    words: TubeWords,
}

/// What the contact pressure follows from.
struct Fit {
    radii: [f64; 3],
    interference: f64,
    laws: [LinearElastic; 2],
    ends: Ends,
    inner_pressure: f64,
    outer_pressure: f64,
}

impl Fit {
    fn of(given: &Given) -> Result<Self, Refusal> {
        let &[a, c, b] = given.numbers("radii")? else {
            let count = given.numbers("radii")?.len();
            let message = format!("radii has {count} numbers");
            return Err(refuse(
                "radii",
                message,
                "three: bore, interface, outer radius",
            ));
        };
        if a <= 0.0 {
            return Err(refuse(
                "radii",
                format!("the bore {a} must be positive"),
                "",
            ));
        }
        in_order("radii", a, c)?;
        in_order("radii", c, b)?;
        let [inner, outer] = given.material_list()? else {
            let message = format!("materials has {} names", given.material_list()?.len());
            return Err(refuse("materials", message, "two: inner ring, outer ring"));
        };
        let interference = given.finite("radial-interference")?;
        if interference < 0.0 {
            let message = format!("radial-interference = {interference} is a gap");
            return Err(refuse("radial-interference", message, "0 or more"));
        }
        Ok(Self {
            radii: [a, c, b],
            interference,
            laws: [hooke(inner)?, hooke(outer)?],
            ends: ends_among(given, ENDS)?,
            inner_pressure: given.finite_or("inner-pressure", 0.0)?,
            outer_pressure: given.finite_or("outer-pressure", 0.0)?,
        })
    }

    /// The rings in contact: the linear system of the header.
    fn rings(&self) -> Result<[Ring; 2], Refusal> {
        let [a, c, b] = self.radii;
        let (pi, po) = (self.inner_pressure, self.outer_pressure);
        let [one, two] = self.laws;
        let free = self.ends == Ends::PlaneStress;
        let ((al1, be1), (al2, be2)) = (compliances(&one, free), compliances(&two, free));
        let (s1, s2) = ((c - a) * (c + a), (b - c) * (b + c));
        let k1 = (al1 * c * c + be1 * a * a) / s1;
        let k2 = (al2 * c * c + be2 * b * b) / s2;
        let (g1, g2) = ((al1 + be1) * a * a / s1, (al2 + be2) * b * b / s2);
        let squeeze = self.interference / c;
        let apart = two.nu - one.nu;
        let outward = squeeze + g1 * pi + g2 * po;
        let stiff = one.e * s1 + two.e * s2;
        let ez = match self.axial_force() {
            Some(force) => {
                let pull = force / PI - 2.0 * one.nu * pi * a * a + 2.0 * two.nu * po * b * b;
                let determinant = (k1 + k2) * stiff + 2.0 * (apart * c).powi(2);
                ((k1 + k2) * pull - 2.0 * apart * c * c * outward) / determinant
            }
            None => 0.0,
        };
        let whole = k1 + k2;
        let drive = squeeze + apart * ez;
        let contact = (drive + g1 * pi + g2 * po) / whole;
        // written out, because in a thin ring the difference of its pressures decides
        let over_inner = (drive + g2 * po - (al1 + k2) * pi) / whole;
        let over_outer = (drive + g1 * pi + (al2 - k1) * po) / whole;
        // without any load the rings just touch
        if contact < 0.0 {
            let needed = self.interference - contact * whole * c;
            let message =
                format!("the rings come apart: the contact pressure would be {contact:.6e}");
            let hint =
                format!("under these loads they touch from an interference of {needed:.6e} on");
            return Err(refuse("radial-interference", message, hint));
        }
        let axial = if free { Axial::Free } else { Axial::Strain(ez) };
        let ring = |inner, outer, law, inner_pressure, outer_pressure, difference| Ring {
            inner,
            outer,
            law,
            inner_pressure,
            outer_pressure,
            difference,
            axial,
        };
        Ok([
            ring(a, c, one, pi, contact, -over_inner),
            ring(c, b, two, contact, po, over_outer),
        ])
    }

    /// Net axial force on both rings, where it is given.
    fn axial_force(&self) -> Option<f64> {
        let [a, _, b] = self.radii;
        match self.ends {
            Ends::Closed => {
                let push = self.inner_pressure * a * a - self.outer_pressure * b * b;
                Some(PI * push)
            }
            Ends::GeneralizedPlaneStrain { axial_force } => Some(axial_force),
            _ => None,
        }
    }
}

impl ShrinkFit {
    fn new(given: &Given) -> Result<Self, Refusal> {
        let fit = Fit::of(given)?;
        let mut tube = Self {
            rings: fit.rings()?,
            interference: fit.interference,
            totals: Vec::new(),
            words: TubeWords {
                inner: fit.radii[0],
                outer: fit.radii[2],
                ends: fit.ends,
                bore: Bore::Pressure,
                inner_pressure: fit.inner_pressure,
                outer_pressure: fit.outer_pressure,
                kinematics: Kinematics::SmallStrain,
                dead: false,
            },
        };
        tube.totals = finite(tube.all_totals(&fit))?;
        Ok(tube)
    }

    fn all_totals(&self, fit: &Fit) -> Vec<Total> {
        let [inner, outer] = &self.rings;
        let axial_strain = match fit.ends {
            Ends::PlaneStress => Err("each ring has a thickness strain of its own".to_string()),
            _ => Ok(inner.axial_strain()),
        };
        let force = inner.axial_force() + outer.axial_force();
        let mut list = RingTotals {
            inner: Some((inner.inner, inner.hoop(inner.inner))),
            outer: (outer.outer, outer.hoop(outer.outer)),
            axial_strain,
            axial_force: fit.axial_force().unwrap_or(force),
            strain_energy: inner.energy() + outer.energy(),
        }
        .list();
        let contact = Ok(outer.inner_pressure);
        list.push(total(
            "contact_pressure",
            contact,
            Dimension::Stress,
            Extent::Whole,
        ));
        list
    }
}

impl ExactSolution for ShrinkFit {
    /// On the interface itself the inner ring answers: u jumps there by the interference.
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let radius = point.radius();
        if !(radius > 0.0 && radius.is_finite() && point.z.is_finite()) {
            let message = format!("the rings' formulas have no value at reference radius {radius}");
            let (a, b) = (self.words.inner, self.words.outer);
            return Err(refuse("", message, format!("the wall is {a} <= R <= {b}")));
        }
        let [inner, outer] = &self.rings;
        let ring = if beyond(point, outer.inner, false) > 0.0 {
            outer
        } else {
            inner
        };
        ring.at(point).state(point, &ring.law)
    }

    fn interfaces(&self) -> Vec<f64> {
        vec![self.rings[1].inner]
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
        let contact = self.rings[1].inner_pressure;
        contact + self.words.inner_pressure.abs() + self.words.outer_pressure.abs()
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let length = units.length.name;
        let mut description = self.words.description("two rings", units);
        let interface = self.rings[1].inner;
        description.body += &format!(", interface at radius {interface} {length}");
        let fit = format!("radial interference {} {length}", self.interference);
        let pressures = std::mem::take(&mut description.load);
        description.load = match pressures.as_str() {
            "no pressure" => fit,
            _ => format!("{fit}; {pressures}"),
        };
        description.modelling.push(
            "mesh both rings to the nominal interface with nodes of their own on it; the outer ring's radial displacement exceeds the \
             inner ring's there by the interference; no friction"
                .to_string(),
        );
        if self.words.ends == Ends::PlaneStress {
            description.totals.retain(|name| *name != "axial_stretch");
        }
        description.sketch = None;
        description
    }
}

#[cfg(test)]
#[path = "shrink_fit_tube_tests.rs"]
mod tests;
