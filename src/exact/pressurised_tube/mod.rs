//! An incompressible hyperelastic tube of one or more bonded layers under pressure, at finite strain.
//!
//! The wall stays a tube: `r^2 = a^2 + (R^2 - A^2)/lz`, `z = lz Z`, whatever its layers are made of. Equilibrium and the
//! end condition are two equations for the bore and the axial stretch (`equations`, `balance`); their states are followed
//! from the unloaded tube (`start`, `path`), solved at the given loads (`solve`) and evaluated at points (`wall_fields`).
//! Sources: Rivlin, Phil. Trans. R. Soc. A 242 (1949) 173; Ogden, Non-Linear Elastic Deformations (1984),
//! section 5.3 (from memory). Pressures of any sign; axial force positive in tension.

mod balance;
mod bound;
mod equations;
mod grading;
mod limit;
mod path;
mod problem;
mod solve;
mod start;
mod term;
mod wall;
mod wall_fields;

pub use grading::Grading;
pub use limit::Limit;
pub use problem::{Drive, Layer, TubeProblem};

use super::body::Body;
use super::description::Description;
use super::parameters::{Parameters, refuse};
use super::solution::{ErrorBound, ExactSolution, Extent, Kinematics, Refusal, State, Total};
use super::tube_words::{Bore, TubeWords, layers_in_words};
use crate::mechanics::{Dimension, Point, UnitSystem};
use limit::rounded;
use wall::Wall;
use wall_fields::Fields;

/// A solution whose own bound exceeds this is none.
const USELESS: f64 = 1e-2;

/// The parameter that drives the bore.
fn driven(problem: &TubeProblem) -> &'static str {
    match problem.drive {
        Drive::InnerPressure(_) => "inner-pressure",
        Drive::InnerWallStretch(_) => "inner-wall-stretch",
        Drive::EnclosedVolume(_) => "enclosed-volume",
    }
}

fn words(problem: &TubeProblem, solved: &solve::Solved) -> TubeWords {
    let (bore, inner_pressure) = match problem.drive {
        Drive::InnerPressure(pressure) => (Bore::Pressure, pressure),
        Drive::InnerWallStretch(stretch) => (Bore::Stretch(stretch), solved.stated),
        Drive::EnclosedVolume(volume) => (Bore::Volume(volume), solved.stated),
    };
    TubeWords {
        inner: problem.inner_radius,
        outer: problem.outer_radius(),
        ends: problem.ends,
        bore,
        inner_pressure,
        outer_pressure: problem.outer_pressure,
        kinematics: Kinematics::Finite,
        dead: problem.dead,
    }
}

/// The tube, solved.
#[derive(Debug, Clone)]
pub struct PressurisedTube {
    fields: Fields,
    totals: Vec<Total>,
    body: Body,
    bound: ErrorBound,
    limit: Limit,
    /// Whether a prescribed bore holds it beyond the limit of the pressure.
    beyond: bool,
    words: TubeWords,
    /// Outer radii of the layers, from the bore outwards.
    layers: Vec<f64>,
    grading: Grading,
}

impl PressurisedTube {
    /// Solves the homogeneous tube; refuses loads beyond the limit of the first branch.
    pub fn new(given: &Parameters) -> Result<Self, Refusal> {
        Self::solve(&TubeProblem::homogeneous(given)?)
    }

    /// Solves a tube of bonded layers. A pressure beyond the limit of the first branch is refused. A prescribed bore may lie
    /// beyond the maximum of the pressure: it is held there, and the pressure is what it needs.
    ///
    /// # Errors
    /// When the problem describes no tube, or no state on the branch from the unloaded tube has these loads.
    pub fn solve(problem: &TubeProblem) -> Result<Self, Refusal> {
        problem.check()?;
        let wall = Wall::new(problem);
        let solved = solve::solve(&wall, problem)?;
        let fields = Fields::new(wall.clone(), solved.g, solved.e, solved.outer)?;
        let totals = bound::totals_of(problem, &wall, &solved);
        let bound = bound::bound_of(problem, &wall, &fields, &solved, &totals)?;
        let worst = bound.displacement.max(bound.stress).max(bound.totals);
        if worst.is_nan() || worst >= USELESS {
            let message =
                "this state is within round-off of a limit or of a lock: no digit of it is sure";
            let hint = "stay further below it";
            return Err(refuse(driven(problem), message.to_string(), hint));
        }
        let mut totals = totals.list();
        if !matches!(problem.drive, Drive::InnerPressure(_)) {
            totals.push(Total {
                name: "inner_pressure",
                value: Ok(solved.stated),
                dimension: Dimension::Stress,
                extent: Extent::Whole,
            });
        }
        if totals
            .iter()
            .any(|t| matches!(t.value, Ok(v) if !v.is_finite()))
        {
            let message = "the numbers of this tube exceed the range of a double";
            return Err(refuse("", message.to_string(), "choose other units"));
        }
        Ok(Self {
            fields,
            totals,
            body: Body::Tube {
                inner: wall.inner,
                outer: wall.outer,
            },
            bound,
            limit: solved.limit,
            beyond: solved.beyond,
            words: words(problem, &solved),
            layers: problem.layers.iter().map(|l| l.outer_radius).collect(),
            grading: problem.layers[0].grading.clone(),
        })
    }

    /// The limit of the inner pressure at the given outer pressure and ends.
    pub fn limit(&self) -> &Limit {
        &self.limit
    }

    /// Whether the state lies beyond the maximum of the inner pressure, held by its prescribed bore.
    pub fn beyond_limit(&self) -> bool {
        self.beyond
    }
}

impl ExactSolution for PressurisedTube {
    /// At a radius between two layers, the inner one's hoop and axial stress.
    fn at(&self, point: Point) -> Result<State, Refusal> {
        self.fields.at(point)
    }

    fn interfaces(&self) -> Vec<f64> {
        let between = self.layers.split_last();
        between.map_or_else(Vec::new, |(_, between)| between.to_vec())
    }

    fn totals(&self) -> &[Total] {
        &self.totals
    }

    fn body(&self) -> Body {
        self.body
    }

    fn bound(&self) -> ErrorBound {
        self.bound
    }

    fn kinematics(&self) -> Kinematics {
        Kinematics::Finite
    }

    fn description(&self, units: &UnitSystem) -> Description {
        let length = units.length.name;
        let body = match (self.layers.as_slice(), &self.grading) {
            ([_], Grading::None) | ([_, _, ..], _) => layers_in_words(&self.layers, length),
            (_, grading) => format!("graded tube ({})", grading.in_words(length)),
        };
        self.words.description(&body, units)
    }

    fn load_stress(&self) -> f64 {
        self.words.inner_pressure.abs() + self.words.outer_pressure.abs()
    }

    fn method(&self) -> String {
        let pressure = if self.words.dead {
            "inner pressure per reference area"
        } else {
            "inner pressure"
        };
        let mut notes = match self.limit {
            Limit::Maximum { inner_pressure, .. } => {
                format!("maximum of the {pressure} {}", rounded(inner_pressure, 10))
            }
            Limit::Asymptote { inner_pressure } => {
                format!(
                    "asymptote of the {pressure} {}",
                    rounded(inner_pressure, 10)
                )
            }
            Limit::None { .. } | Limit::NotFound { .. } => {
                self.limit.pressure().err().unwrap_or_default()
            }
        };
        if self.beyond {
            notes += "; this state lies beyond it, held by the prescribed bore: under pressure alone it is unstable";
        }
        if self.layers.len() > 1 {
            notes += "; at an interface the stresses are those of the inner layer";
        }
        format!(
            "equilibrium and end condition as Gauss integrals over the wall, solved by Newton's method on the branch \
             from the unloaded tube; stated bound on the relative error: displacement {:.1e}, stress {:.1e}, totals \
             {:.1e}; {notes}",
            self.bound.displacement, self.bound.stress, self.bound.totals
        )
    }
}

#[cfg(test)]
mod tests;
