//! An incompressible hyperelastic sphere under inner and outer pressure, at finite strain, on any of its branches.
//!
//! `r^3 = a^3 + R^3 - A^3`: one number, the bore, fixes the state. The pressure may pass a maximum and a minimum as the bore
//! grows (`curve`), so that up to three states belong to one pressure; which is meant is a parameter (`solve`).
//! Sources (from memory): Green & Zerna, Theoretical Elasticity (1954), section 3.10; Ogden, Non-Linear Elastic Deformations
//! (1984), section 5.3.

mod curve;
mod solve;

use super::body::Body;
use super::catalogue::Entry;
use super::compressible::{CompressibleSphere, CompressibleSphereProblem, Drive};
use super::demands;
use super::description::Description;
use super::given::{Form, Given, ParameterEntry, refuse};
use super::solution::{ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total};
use super::tube_entries;
use super::tube_words::pressures;
use crate::materials::{Compressible, Material, MaterialKind};
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use crate::numerics::{Resolution, RunningMean};
use curve::{CHECK_POINTS, Curve, POINTS};
use nalgebra::{Matrix3, Vector3};
use solve::{Branches, Solved};
use std::f64::consts::PI;

pub(super) const NAME: &str = "pressurised-sphere";

pub(super) const ENTRY: Entry = Entry {
    name: NAME,
    title: "Sphere under inner and outer pressure, finite strain; incompressible on all branches",
    parameters: &[
        tube_entries::INNER_RADIUS,
        tube_entries::OUTER_RADIUS,
        tube_entries::MATERIAL,
        tube_entries::INNER_PRESSURE,
        tube_entries::OUTER_PRESSURE,
        ParameterEntry::optional(
            "branch",
            Form::Number(Dimension::None),
            "1",
            "which of the states at these pressures: 1 from zero load, 2 beyond the first maximum, 3 beyond the minimum after it",
        ),
    ],
    kinematics: Kinematics::Finite,
    material_kinds: &[MaterialKind::Incompressible, MaterialKind::Compressible],
    range: "any 0 < inner-radius < outer-radius, checked for ratios from 1.001 to 100; bore stretches from 0.05 to 1000, or to \
            the lock of the law; pressures that the wanted branch reaches",
    sources: &[
        "Green & Zerna, Theoretical Elasticity (1954), section 3.10",
        "Ogden, Non-Linear Elastic Deformations (1984), section 5.3",
    ],
    checks: &[
        "many-digit solution of the textbook equations, tests/oracles/library/pressurised-sphere",
        "closed neo-Hookean form, its maximum at B/A = 2, thin-sphere limits",
        "energy derivative dE/da = 4 pi a^2 (Pi - Po), equilibrium, boundary tractions, sign of the slope on a dense grid",
    ],
    build: |given| match given.material()? {
        Material::Compressible(law) => compressible(given, law),
        _ => Ok(Box::new(PressurisedSphere::new(given)?)),
    },
};

/// With a finite bulk modulus the sphere is followed from zero load only.
fn compressible(given: &Given, law: &Compressible) -> Result<Box<dyn ExactSolution>, Refusal> {
    if branch_of(given)? != 1 {
        let message = "later branches are solved for incompressible spheres only";
        let hint = "leave `branch:` out, or take the law without `volumetric:`";
        return Err(refuse("branch", message.to_string(), hint));
    }
    let (inner_radius, outer) = demands::radii(given)?;
    let problem = CompressibleSphereProblem {
        inner_radius,
        layers: vec![(outer, law.clone())],
        drive: Drive::InnerPressure(given.finite_or("inner-pressure", 0.0)?),
        outer_pressure: given.finite_or("outer-pressure", 0.0)?,
    };
    Ok(Box::new(CompressibleSphere::solve(&problem)?))
}

/// The sphere, solved.
#[derive(Debug, Clone)]
pub struct PressurisedSphere {
    curve: Curve,
    loads: (f64, f64),
    /// d at the bore and at the outer wall.
    d: f64,
    outer_difference: f64,
    /// Mean of q from the outer wall on, in d - dB.
    mean: RunningMean,
    totals: Vec<Total>,
    bound: ErrorBound,
    branch: usize,
    turning_points: String,
}

impl PressurisedSphere {
    /// Solves the sphere; refuses pressures that the wanted branch does not reach.
    pub fn new(given: &Given) -> Result<Self, Refusal> {
        let (inner, outer) = demands::radii(given)?;
        let why = "a preferred direction would end the symmetry of the sphere";
        let law = demands::isotropic_law(given, NAME, why)?;
        let loads = (
            given.finite_or("inner-pressure", 0.0)?,
            given.finite_or("outer-pressure", 0.0)?,
        );
        let branch = branch_of(given)?;
        let curve = Curve::new(inner, outer, law);
        let branches = Branches::of(&curve);
        let solved = branches.solve(&curve, branch, loads)?;
        let mean = mean_of(&curve, solved.d).ok_or_else(|| {
            let message = "the stress in the wall varies too steeply to be tabled to round-off";
            refuse(
                "inner-pressure",
                message.to_string(),
                "choose a smaller load",
            )
        })?;
        let totals = demands::finite(totals_of(&curve, &solved, &branches, loads.1))?;
        let mut sphere = Self {
            loads,
            d: solved.d,
            outer_difference: curve.outer_difference(solved.d),
            mean,
            totals,
            bound: ErrorBound {
                displacement: 0.0,
                stress: 0.0,
                totals: 0.0,
            },
            branch,
            turning_points: branches.words(&curve, loads.1),
            curve,
        };
        sphere.bound = sphere.bound_of(&solved)?;
        Ok(sphere)
    }

    fn state(&self, radius: f64) -> Option<Local> {
        let place = self.curve.place(self.d, radius)?;
        let d = self.outer_difference + place;
        let law = self.curve.law.at(d, d / 3.0);
        let mean = self
            .mean
            .value(place, |x| self.curve.density(self.outer_difference + x));
        let radial = -self.loads.1 - place * mean;
        let known = radial.is_finite() && law.hoop.is_finite() && law.energy.is_finite();
        known.then_some(Local {
            d,
            radial,
            hoop: law.hoop,
            energy: law.energy,
        })
    }

    fn bound_of(&self, solved: &Solved) -> Result<ErrorBound, Refusal> {
        let round_off = 8.0 * f64::EPSILON;
        let (mut moved, mut stressed) = (
            (0.0_f64, 0.0_f64),
            (0.0_f64, self.loads.0.abs().max(self.loads.1.abs())),
        );
        for radius in [self.curve.inner, self.curve.outer] {
            let local = self.state(radius).ok_or_else(|| self.no_value(radius))?;
            let stretch = (local.d / 3.0).exp();
            // d(R) moves by e^(dA - d(R)) A^3/R^3 of what the bore's does
            let share = (self.d - local.d).exp() * (self.curve.inner / radius).powi(3);
            let d_error = share * solved.d_error;
            moved.0 = moved.0.max(radius * stretch * d_error / 3.0);
            moved.1 = moved.1.max((radius * (local.d / 3.0).exp_m1()).abs());
            let law = self.curve.law.with_slopes(local.d, local.d / 3.0).hoop;
            let lost = self.curve.law.hardening(local.d, local.d / 3.0).loss;
            let error = (law.by_d + law.by_e / 3.0).abs() * d_error
                + 4.0 * f64::EPSILON * lost * local.hoop.abs()
                + solved.p_error;
            stressed.0 = stressed.0.max(error);
            stressed.1 = stressed
                .1
                .max(local.radial.abs())
                .max((local.radial + local.hoop).abs());
        }
        let relative = |(error, size): (f64, f64)| if size == 0.0 { 0.0 } else { error / size };
        let energy = self.curve.energy(self.d, POINTS);
        let check = self.curve.energy(self.d, CHECK_POINTS);
        let volume = 4.0 / 3.0 * PI * self.curve.inner.powi(3) * self.d.exp();
        let work = (volume * (self.loads.0 - self.loads.1)).abs() * solved.d_error;
        Ok(ErrorBound {
            // a stretch changes by up to two thirds of what d does
            displacement: round_off + (2.0 * relative(moved)).max(solved.d_error),
            stress: round_off + relative(stressed),
            totals: round_off + solved.d_error + relative((work + (energy - check).abs(), energy)),
        })
    }

    fn no_value(&self, radius: f64) -> Refusal {
        let message = format!("the sphere's formulas have no value at reference radius {radius}");
        let (a, b) = (self.curve.inner, self.curve.outer);
        refuse("", message, format!("the wall is {a} <= R <= {b}"))
    }
}

/// Numbers at one radius.
#[derive(Debug, Clone, Copy)]
struct Local {
    d: f64,
    radial: f64,
    /// stt - srr.
    hoop: f64,
    energy: f64,
}

fn branch_of(given: &Given) -> Result<usize, Refusal> {
    let branch = given.finite_or("branch", 1.0)?;
    if branch < 1.0 || branch.fract() != 0.0 || branch > 1e3 {
        let message = format!("branch = {branch} is not one of 1, 2, 3, ...");
        return Err(refuse("branch", message, "1 is the branch from zero load"));
    }
    Ok(branch as usize)
}

fn mean_of(curve: &Curve, d: f64) -> Option<RunningMean> {
    let from = curve.outer_difference(d);
    let span = curve.span(d);
    let loss = |d: f64| curve.law.hardening(d, d / 3.0).loss;
    let wanted = Resolution {
        relative: 2e-15 + 2.0 * f64::EPSILON * loss(d).max(loss(from)),
        absolute: 0.0,
    };
    RunningMean::fit(0.0, span, wanted, |x| curve.density(from + x))
}

fn totals_of(
    curve: &Curve,
    solved: &Solved,
    branches: &Branches,
    outer_pressure: f64,
) -> Vec<Total> {
    let (length, whole) = (Dimension::Length, Extent::Whole);
    let outer = curve.outer * (curve.outer_difference(solved.d) / 3.0).exp();
    let volume = 4.0 / 3.0 * PI * curve.inner.powi(3) * solved.d.exp();
    let energy = curve.energy(solved.d, POINTS);
    vec![
        demands::total(
            "inner_radius",
            curve.inner * (solved.d / 3.0).exp(),
            length,
            whole,
        ),
        demands::total("outer_radius", outer, length, whole),
        demands::total("strain_energy", energy, Dimension::Energy, Extent::Section),
        demands::total(
            "enclosed_volume",
            volume,
            Dimension::Volume,
            Extent::Section,
        ),
        Total {
            name: "limit_pressure",
            value: branches.limit(curve, outer_pressure),
            dimension: Dimension::Stress,
            extent: whole,
        },
    ]
}

impl ExactSolution for PressurisedSphere {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let radius = point.distance(&Point::new(0.0, 0.0, 0.0));
        if !(radius > 0.0 && radius.is_finite()) {
            return Err(self.no_value(radius));
        }
        let local = self.state(radius).ok_or_else(|| self.no_value(radius))?;
        let place = Vector3::new(point.x, point.y, point.z);
        let outward = place / radius;
        let across = outward * outward.transpose();
        let (strain, radial) = ((local.d / 3.0).exp_m1(), (-2.0 / 3.0 * local.d).exp_m1());
        // expm1(er) - expm1(et) as one difference
        let apart = (local.d / 3.0).exp() * (-local.d).exp_m1();
        let hoop = local.radial + local.hoop;
        Ok(State {
            displacement: place * strain,
            displacement_gradient: Matrix3::identity() * strain + across * apart,
            stretches: [1.0 + radial, 1.0 + strain, 1.0 + strain],
            stress: SymTensor::symmetric_part(&(Matrix3::identity() * hoop - across * local.hoop)),
            local_stress: SymTensor::diagonal(local.radial, hoop, hoop),
            pressure: -(local.radial + local.hoop / 1.5),
            volume_ratio: 1.0,
            energy_density: local.energy,
        })
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        Body::Sphere {
            inner: self.curve.inner,
            outer: self.curve.outer,
        }
    }

    fn bound(&self) -> ErrorBound {
        self.bound
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::Finite
    }

    fn load_stress(&self) -> f64 {
        self.loads.0.abs() + self.loads.1.abs()
    }

    fn method(&self) -> String {
        format!(
            "equilibrium as a Gauss integral over ln(hoop/radial stretch), bracketed root on branch {}; {}; stated bound on the \
             relative error: displacement {:.1e}, stress {:.1e}, totals {:.1e}",
            self.branch,
            self.turning_points,
            self.bound.displacement,
            self.bound.stress,
            self.bound.totals
        )
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let length = units.length.name;
        let walls = [("bore", self.loads.0), ("outer wall", self.loads.1)];
        let load = match pressures(walls, units) {
            none if none.is_empty() => "no pressure".to_string(),
            loaded => format!("{loaded}, follows the deformed wall"),
        };
        let branch = match self.branch {
            1 => String::new(),
            n => format!("; branch {n} of the states at this pressure"),
        };
        let mut modelling = vec![
            "the load is normal to the deformed surface, per deformed area (a follower load)"
                .to_string(),
            "any part cut by planes through the centre: no displacement normal to a cut"
                .to_string(),
            "axisymmetric: the section of the sphere in a plane through the axis".to_string(),
        ];
        if self.branch > 1 {
            let note = "beyond the first maximum the pressure alone does not find the state: control the bore's displacement or the \
                        enclosed volume, and read the pressure";
            modelling.push(note.to_string());
        }
        Description {
            body: format!(
                "hollow sphere, inner radius {} {length}, outer radius {} {length}",
                self.curve.inner, self.curve.outer
            ),
            load: format!("{load}{branch}"),
            ends: None,
            modelling,
            totals: vec!["strain_energy", "load_factor"],
            sketch: None,
        }
    }
}

#[cfg(test)]
mod tests;
