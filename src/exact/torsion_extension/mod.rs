//! A solid or hollow circular cylinder, incompressible and isotropic, extended and twisted at finite strain.
//!
//! A universal solution: every isotropic incompressible law has it (Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173; Ericksen 1954,
//! family 3; from memory). `section` holds stresses and integrals, `solve` the motion at given loads.

mod entry;
mod section;
mod solve;

pub(super) use entry::ENTRY;

use super::body::Body;
use super::demands;
use super::description::{Description, Line};
use super::given::{Given, refuse};
use super::solution::{ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total};
use super::tube_words::pressures;
use crate::mechanics::{Dimension, Point, SymTensor, UnitSystem};
use crate::numerics::{Resolution, RunningMean};
use nalgebra::{Matrix3, Vector3};
use section::{POINTS, Section};
use solve::{Axial, Loads, Solved, Turn};

/// The cylinder, solved.
#[derive(Debug, Clone)]
pub struct TorsionExtension {
    section: Section,
    loads: Loads,
    solved: Solved,
    /// Mean of d srr/d(coordinate) from the outer wall on.
    rise: RunningMean,
    totals: Vec<Total>,
    bound: ErrorBound,
}

impl TorsionExtension {
    /// Solves the cylinder; refuses loads to which no state leads from rest.
    pub fn new(given: &Given) -> Result<Self, Refusal> {
        let (inner, outer) = demands::radii_or_solid(given)?;
        let why = "the twist would turn its preferred directions";
        let law = demands::isotropic_law(given, entry::NAME, why)?;
        let section = Section { inner, outer, law };
        let loads = entry::loads_of(given, section.solid())?;
        let solved = solve::solve(&section, &loads)?;
        let rise = rise_of(&section, &solved).ok_or_else(|| {
            let message = "the stress varies too steeply to be tabled to round-off";
            refuse("twist", message.to_string(), "choose a smaller load")
        })?;
        let totals = demands::finite(totals_of(&section, &loads, &solved))?;
        let bound = bound_of(&section, &loads, &solved);
        Ok(Self {
            section,
            loads,
            solved,
            rise,
            totals,
            bound,
        })
    }

    fn radial_stress(&self, radius: f64, t: f64) -> f64 {
        let motion = self.solved.motion;
        let away = self.section.off_outer(radius);
        if away == 0.0 {
            return -self.loads.walls.1;
        }
        -self.loads.walls.1 + away * self.rise.value(t, |t| self.section.rise(&motion, t))
    }

    fn no_value(&self, radius: f64) -> Refusal {
        let message = format!("the cylinder's formulas have no value at reference radius {radius}");
        let (a, b) = (self.section.inner, self.section.outer);
        refuse("", message, format!("the section is {a} <= R <= {b}"))
    }
}

fn rise_of(section: &Section, solved: &Solved) -> Option<RunningMean> {
    let (inner, outer) = section.span();
    let motion = solved.motion;
    let mut loss = 0.0_f64;
    let mut size = 0.0_f64;
    for i in 0..=8 {
        let local = section.local(&motion, inner + (outer - inner) * f64::from(i) / 8.0);
        loss = loss.max(section.law.hardening(local.split, local.radial_log).loss);
        size = size.max(local.hoop.abs()).max(local.axial.abs());
    }
    let wanted = Resolution {
        relative: 2e-15 + 2.0 * f64::EPSILON * loss,
        // near the axis stt - srr is the difference of two stresses of this size
        absolute: 4.0 * f64::EPSILON * size / (outer - inner),
    };
    RunningMean::fit(outer, inner, wanted, |t| section.rise(&motion, t))
}

fn totals_of(section: &Section, loads: &Loads, solved: &Solved) -> Vec<Total> {
    let (motion, all) = (&solved.motion, &solved.integrals);
    let (a, b) = section.radii(motion);
    let force = match loads.axial {
        Axial::Force(force) => force,
        Axial::Stretch(_) => section.axial_force(motion, all, loads.walls),
    };
    let torque = match loads.turn {
        Turn::Torque(torque) => torque,
        Turn::Twist(_) => all.torque.value,
    };
    let (length, whole) = (Dimension::Length, Extent::Whole);
    let mut list = vec![
        demands::total("outer_radius", b, length, whole),
        demands::total("axial_stretch", motion.e.exp(), Dimension::None, whole),
        demands::total("axial_force", force, Dimension::Force, Extent::Section),
        demands::total("torque", torque, Dimension::Torque, Extent::Section),
        demands::total("twist", motion.twist, Dimension::PerLength, whole),
        demands::total(
            "strain_energy",
            all.energy.value,
            Dimension::EnergyPerLength,
            Extent::SectionAndLength,
        ),
    ];
    if !section.solid() {
        list.insert(0, demands::total("inner_radius", a, length, whole));
    }
    list
}

/// Bounds relative to the largest number of its kind, from the errors of the unknowns by differences.
fn bound_of(section: &Section, loads: &Loads, solved: &Solved) -> ErrorBound {
    let (motion, all) = (solved.motion, solved.integrals);
    let ends = section.panels(&motion);
    let (inner, outer) = section.span();
    // stresses at both walls, then radii, then totals
    let numbers = |m: &section::Motion| {
        let (one, two) = (section.local(m, inner), section.local(m, outer));
        let (a, b) = section.radii(m);
        let sums = section.integrals(m, &ends, POINTS);
        let force = section.axial_force(m, &sums, loads.walls);
        [
            one.hoop,
            one.axial,
            one.turning,
            two.hoop,
            two.axial,
            two.turning,
            a,
            b,
            force,
            sums.torque.value,
            sums.energy.value,
        ]
    };
    let errors = [solved.error.g, solved.error.e, solved.error.twist];
    let here = numbers(&motion);
    let mut off = [0.0_f64; 11];
    for (i, error) in errors.into_iter().enumerate().filter(|(_, e)| *e > 0.0) {
        let h = 1e-5 / if i == 2 { section.outer } else { 1.0 };
        let (up, down) = (numbers(&motion.moved(i, h)), numbers(&motion.moved(i, -h)));
        for k in 0..off.len() {
            off[k] += ((up[k] - down[k]) / (2.0 * h)).abs() * error;
        }
    }
    let relative = |error: f64, size: f64| if size == 0.0 { 0.0 } else { error / size };
    let largest = |range: std::ops::Range<usize>, of: &[f64; 11]| {
        of[range].iter().fold(0.0_f64, |m, x| m.max(x.abs()))
    };
    let round_off = 16.0 * f64::EPSILON;
    let loss = section
        .law
        .hardening(
            section.local(&motion, outer).split,
            section.local(&motion, outer).radial_log,
        )
        .loss;
    let stress_size = largest(0..6, &here)
        .max(loads.walls.0.abs())
        .max(loads.walls.1.abs());
    let moved = (here[6] - section.inner)
        .abs()
        .max((here[7] - section.outer).abs());
    ErrorBound {
        displacement: round_off
            + relative(largest(6..8, &off), moved)
            + relative(errors[2], motion.twist.abs()),
        stress: round_off * (1.0 + loss) + relative(2.0 * largest(0..6, &off), stress_size),
        totals: round_off * (1.0 + loss)
            + errors[1]
            + relative(off[8], here[8].abs().max(all.force.size))
            + relative(off[9], here[9].abs())
            + relative(off[10], here[10].abs()),
    }
}

impl ExactSolution for TorsionExtension {
    fn at(&self, point: Point) -> Result<State, Refusal> {
        let radius = point.radius();
        if !(radius.is_finite() && point.z.is_finite()) {
            return Err(self.no_value(radius));
        }
        let t = self.section.coordinate(radius);
        let motion = &self.solved.motion;
        let local = self.section.local(motion, t);
        let srr = self.radial_stress(radius, t);
        if !(srr.is_finite() && local.hoop.is_finite() && local.energy.is_finite()) {
            return Err(self.no_value(radius));
        }
        let (c, s) = point.direction();
        let (sin, cos) = (motion.twist * point.z).sin_cos();
        // cos(phi) - 1 without cancellation
        let versed = -2.0 * (0.5 * motion.twist * point.z).sin().powi(2);
        let (hoop, radial, axial) = (
            local.hoop_log.exp_m1(),
            local.radial_log.exp_m1(),
            motion.e.exp_m1(),
        );
        let stretch = 1.0 + hoop;
        let turn = Matrix3::new(versed, -sin, 0.0, sin, versed, 0.0, 0.0, 0.0, 0.0);
        let strain = SymTensor::diagonal(radial, hoop, axial)
            .cylindrical_to_cartesian((c, s))
            .to_matrix();
        let (dc, ds) = (c * cos - s * sin, s * cos + c * sin);
        let shear = Vector3::new(-ds, dc, 0.0) * local.shear * Vector3::z().transpose();
        let along = hoop + stretch * versed;
        let stress = SymTensor {
            yz: local.turning,
            ..SymTensor::diagonal(srr, srr + local.hoop, srr + local.axial)
        };
        let half = 0.5 * local.split;
        let middle = -0.5 * local.radial_log;
        Ok(State {
            displacement: Vector3::new(
                point.x * along - point.y * stretch * sin,
                point.y * along + point.x * stretch * sin,
                point.z * axial,
            ),
            displacement_gradient: turn + strain + turn * strain + shear,
            stretches: [1.0 + radial, (middle + half).exp(), (middle - half).exp()],
            stress: stress.cylindrical_to_cartesian((dc, ds)),
            local_stress: stress,
            pressure: -(srr + (local.hoop + local.axial) / 3.0),
            volume_ratio: 1.0,
            energy_density: local.energy,
        })
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        Body::Tube {
            inner: self.section.inner,
            outer: self.section.outer,
        }
    }

    fn bound(&self) -> ErrorBound {
        self.bound
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::Finite
    }

    fn line(&self) -> Line {
        let columns = &["R", "r", "srr", "stt", "szz", "stz", "p", "W"];
        Line::radial(self.section.inner, self.section.outer, columns)
    }

    fn turns(&self) -> bool {
        true
    }

    fn load_stress(&self) -> f64 {
        let outer = self
            .section
            .local(&self.solved.motion, self.section.span().1);
        outer.turning.abs()
            + outer.axial.abs()
            + self.loads.walls.0.abs()
            + self.loads.walls.1.abs()
    }

    fn method(&self) -> String {
        let solved = match (self.loads.axial, self.loads.turn, self.section.solid()) {
            (Axial::Stretch(_), Turn::Twist(_), true) => "the motion is given",
            _ => "the motion by Newton's method on the path of proportional loads from rest",
        };
        format!(
            "stresses in closed form from the principal stretches, integrals over the section by Gauss's rule, {solved}; stated bound on \
             the relative error: displacement {:.1e}, stress {:.1e}, totals {:.1e}",
            self.bound.displacement, self.bound.stress, self.bound.totals
        )
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let length = units.length.name;
        let (a, b) = (self.section.inner, self.section.outer);
        let body = match self.section.solid() {
            true => format!("solid cylinder, radius {b} {length}"),
            false => {
                format!("hollow cylinder, inner radius {a} {length}, outer radius {b} {length}")
            }
        };
        let turn = match self.loads.turn {
            Turn::Twist(twist) => {
                format!("twisted by {twist} rad per {length} of reference length")
            }
            Turn::Torque(torque) => format!("torque {torque} {}", units.name_of(Dimension::Torque)),
        };
        let axial = match self.loads.axial {
            Axial::Stretch(e) => format!(
                "held at the axial stretch {}",
                demands::rounded(e.exp(), 15)
            ),
            Axial::Force(0.0) => "free to change its length, no net axial force".to_string(),
            Axial::Force(force) => format!(
                "net axial force {force} {}",
                units.name_of(Dimension::Force)
            ),
        };
        let walls = match pressures(
            [
                ("bore", self.loads.walls.0),
                ("outer wall", self.loads.walls.1),
            ],
            units,
        ) {
            none if none.is_empty() => "walls free of traction".to_string(),
            loaded => format!("{loaded}, follows the deformed wall"),
        };
        Description {
            body,
            load: format!("{turn}; {walls}"),
            ends: Some(axial),
            modelling: vec![
                "solid model of any length: at Z = 0 no turn about the axis and no axial displacement; at the other end every point turns about \
                 the axis by twist times length and moves axially by (stretch - 1) times length; at both ends it moves radially as the solution says"
                    .to_string(),
                "the end faces carry stresses that vary with the radius: prescribe displacements there, not a mean traction".to_string(),
                "a slice cannot be twisted: use a solid, or an axisymmetric element with torsion".to_string(),
            ],
            totals: vec!["strain_energy", "torque", "axial_force", "load_factor"],
            sketch: None,
        }
    }
}

#[cfg(test)]
mod tests;
