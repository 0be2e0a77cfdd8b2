//! The motion that carries the given loads: Newton's method along a path of loads from rest.

use super::section::{CHECK_POINTS, Integrals, Motion, POINTS, Section};
use crate::exact::demands::rounded;
use crate::exact::given::refuse;
use crate::exact::solution::Refusal;
use std::f64::consts::PI;

/// What is given about the length.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Axial {
    Stretch(f64),
    Force(f64),
}

/// What is given about the twist.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Turn {
    Twist(f64),
    Torque(f64),
}

/// Everything that is given.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Loads {
    pub axial: Axial,
    pub turn: Turn,
    /// Inner and outer pressure.
    pub walls: (f64, f64),
}

/// The motion with bounds on its three numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Solved {
    pub motion: Motion,
    pub error: Motion,
    pub integrals: Integrals,
}

/// Most steps of the path and of one Newton iteration.
const MOST_STEPS: usize = 300;
const MOST_CORRECTIONS: usize = 25;

impl Loads {
    fn scaled(&self, share: f64) -> Self {
        Self {
            axial: match self.axial {
                Axial::Stretch(e) => Axial::Stretch(share * e),
                Axial::Force(n) => Axial::Force(share * n),
            },
            turn: match self.turn {
                Turn::Twist(t) => Turn::Twist(share * t),
                Turn::Torque(m) => Turn::Torque(share * m),
            },
            walls: (share * self.walls.0, share * self.walls.1),
        }
    }
}

/// The equations at given loads, for the numbers of the motion that are not given.
struct Equations<'a> {
    section: &'a Section,
    loads: Loads,
}

impl Equations<'_> {
    /// Which of g, e, twist are unknown.
    fn unknown(&self) -> Vec<usize> {
        let mut list = Vec::new();
        if !self.section.solid() {
            list.push(0);
        }
        if matches!(self.loads.axial, Axial::Force(_)) {
            list.push(1);
        }
        if matches!(self.loads.turn, Turn::Torque(_)) {
            list.push(2);
        }
        list
    }

    /// The given numbers put in.
    fn with_given(&self, motion: Motion) -> Motion {
        let mut motion = motion;
        if let Axial::Stretch(e) = self.loads.axial {
            motion.e = e;
        }
        if let Turn::Twist(twist) = self.loads.turn {
            motion.twist = twist;
        }
        motion
    }

    /// Residuals in the order of the unknowns, and their sizes, both over the shear modulus.
    fn residuals(&self, motion: &Motion, all: &Integrals) -> Vec<(f64, f64)> {
        let section = self.section;
        let mu = section.law.shear_modulus();
        let area = PI * section.area_factor() * mu;
        let (pi, po) = self.loads.walls;
        let mut list = Vec::new();
        if !section.solid() {
            let off = all.drop.value - (pi - po);
            list.push((off / mu, (all.drop.size + pi.abs() + po.abs()) / mu));
        }
        if let Axial::Force(force) = self.loads.axial {
            let off = section.axial_force(motion, all, self.loads.walls) - force;
            let (a, b) = section.radii(motion);
            let walls = PI * (pi.abs() * a * a + po.abs() * b * b);
            list.push((off / area, (all.force.size + walls + force.abs()) / area));
        }
        if let Turn::Torque(torque) = self.loads.turn {
            let unit = area * section.outer;
            list.push((
                (all.torque.value - torque) / unit,
                (all.torque.size + torque.abs()) / unit,
            ));
        }
        list
    }

    fn at(&self, motion: &Motion, ends: &[f64]) -> Vec<f64> {
        let all = self.section.integrals(motion, ends, POINTS);
        self.residuals(motion, &all).iter().map(|r| r.0).collect()
    }

    /// Derivatives of the residuals by central differences: 11 digits, which is enough for Newton's method to end in round-off.
    fn jacobian(&self, motion: &Motion, ends: &[f64]) -> nalgebra::DMatrix<f64> {
        let unknown = self.unknown();
        let n = unknown.len();
        let mut matrix = nalgebra::DMatrix::zeros(n, n);
        for (column, &i) in unknown.iter().enumerate() {
            let h = 1e-5
                * if i == 2 {
                    1.0 / self.section.outer
                } else {
                    1.0
                };
            let up = self.at(&motion.moved(i, h), ends);
            let down = self.at(&motion.moved(i, -h), ends);
            for row in 0..n {
                matrix[(row, column)] = (up[row] - down[row]) / (2.0 * h);
            }
        }
        matrix
    }

    /// Newton's method from a guess; `None` when it does not settle.
    fn solve(&self, guess: Motion) -> Option<Motion> {
        let mut motion = self.with_given(guess);
        let unknown = self.unknown();
        if unknown.is_empty() {
            let ends = self.section.panels(&motion);
            let all = self.section.integrals(&motion, &ends, POINTS);
            return (all.energy.value.is_finite() && all.torque.value.is_finite())
                .then_some(motion);
        }
        let mut last = f64::INFINITY;
        let mut kept = None;
        for _ in 0..MOST_CORRECTIONS {
            let ends = self.section.panels(&motion);
            let residual = nalgebra::DVector::from_vec(self.at(&motion, &ends));
            if last > 1e-3 {
                kept = self.jacobian(&motion, &ends).lu().try_inverse();
            }
            let step = kept.as_ref()? * residual;
            let sizes = unknown.iter().zip(step.iter()).map(|(&i, s)| match i {
                2 => (s * self.section.outer).abs(),
                _ => s.abs(),
            });
            let size = sizes.fold(0.0, f64::max);
            if !size.is_finite() {
                return None;
            }
            if last < 1e-6 && size >= 0.25 * last {
                return Some(motion);
            }
            let share = (0.3 / size).min(1.0);
            for (&i, s) in unknown.iter().zip(step.iter()) {
                motion = motion.moved(i, -share * s);
            }
            if size == 0.0 {
                return Some(motion);
            }
            last = size;
        }
        None
    }
}

impl Motion {
    pub fn moved(mut self, i: usize, by: f64) -> Self {
        match i {
            0 => self.g += by,
            1 => self.e += by,
            _ => self.twist += by,
        }
        self
    }

    fn distance(&self, other: &Self, radius: f64) -> f64 {
        let turned = (self.twist - other.twist).abs() * radius;
        (self.g - other.g)
            .abs()
            .max((self.e - other.e).abs())
            .max(turned)
    }
}

/// The motion on the path of proportional loads from rest.
pub(super) fn solve(section: &Section, loads: &Loads) -> Result<Solved, Refusal> {
    let (mut here, mut done, mut step) = (Motion::default(), 0.0_f64, 1.0_f64);
    for _ in 0..MOST_STEPS {
        let share = (done + step).min(1.0);
        let equations = Equations {
            section,
            loads: loads.scaled(share),
        };
        // the path is short: a far state is one of another branch
        let near = |m: &Motion| {
            share - done < 1e-3
                || m.distance(&here, section.outer) <= 0.5
                || equations.unknown().is_empty()
        };
        match equations.solve(guess(&here, done, share)).filter(near) {
            Some(next) if share >= 1.0 => {
                return Ok(judged(
                    &Equations {
                        section,
                        loads: *loads,
                    },
                    next,
                ));
            }
            Some(next) => (here, done, step) = (next, share, 1.5 * step),
            None => step *= 0.5,
        }
        if step < 1e-6 {
            break;
        }
    }
    let message = format!(
        "the loads could be followed up to {} of themselves only: beyond it the law has no stress, or the cylinder no state",
        rounded(done, 6)
    );
    let parameter = match (loads.axial, loads.turn) {
        (_, Turn::Torque(_)) => "torque",
        (Axial::Force(_), Turn::Twist(0.0)) => "axial-force",
        (Axial::Stretch(_), Turn::Twist(0.0)) => "axial-stretch",
        _ => "twist",
    };
    Err(refuse(parameter, message, "reduce the loads in proportion"))
}

/// The last state, its unknowns grown in proportion to the load.
fn guess(here: &Motion, done: f64, share: f64) -> Motion {
    if done == 0.0 {
        return *here;
    }
    let grown = share / done;
    Motion {
        g: here.g * grown,
        e: here.e * grown,
        twist: here.twist * grown,
    }
}

/// Bounds on the unknowns: round-off and quadrature error of each equation through the inverse of the tangent.
fn judged(equations: &Equations, motion: Motion) -> Solved {
    let section = equations.section;
    let ends = section.panels(&motion);
    let all = section.integrals(&motion, &ends, POINTS);
    let check = section.integrals(&motion, &ends, CHECK_POINTS);
    let (first, second) = (
        equations.residuals(&motion, &all),
        equations.residuals(&motion, &check),
    );
    let unknown = equations.unknown();
    let inverse = equations.jacobian(&motion, &ends).try_inverse();
    let mut error = Motion::default();
    for (row, &i) in unknown.iter().enumerate() {
        let mut sum = 0.0;
        for (column, (one, two)) in first.iter().zip(&second).enumerate() {
            let eta = 2.0 * f64::EPSILON * one.1 + (one.0 - two.0).abs();
            sum += inverse
                .as_ref()
                .map_or(f64::INFINITY, |m| m[(row, column)].abs())
                * eta;
        }
        error = error.moved(i, sum);
    }
    Solved {
        motion,
        error,
        integrals: all,
    }
}
