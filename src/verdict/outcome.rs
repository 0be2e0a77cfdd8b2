//! The outcome of a run: everything reports, history and audit may know. Serialised as `outcome.json`.
//!
//! It carries no clock, host name or absolute path, and no NaN: a number that could not be had is `None`
//! beside its reason.

use super::Verdict;
use crate::input::Finding;
use serde::{Deserialize, Serialize};

/// The version of this record; raised when a reader of the old one would misread the new one.
pub const FORMAT: u32 = 1;

/// One run of `check` on one suite.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Outcome {
    pub format: u32,
    pub tool: String,
    pub tool_version: String,
    pub suite: SuiteRecord,
    pub verdict: Verdict,
    /// Number of cases by verdict.
    pub counts: Counts,
    /// In suite order.
    pub cases: Vec<CaseOutcome>,
    /// Every file read, the suite first, then in case and level order.
    pub inputs: Vec<InputRecord>,
}

/// The suite as it was judged.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct SuiteRecord {
    pub id: String,
    pub title: String,
    /// What is judged: solver, version, element, in the suite's words.
    pub subject: Option<String>,
    /// True for demo data of an invented scenario; every human-readable report says so.
    pub invented: bool,
    pub length_unit: String,
    pub stress_unit: String,
    /// File name without its folder.
    pub file: String,
    pub sha256: String,
}

/// How many of each verdict.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
pub struct Counts {
    pub fail: usize,
    pub inconclusive: usize,
    pub not_run: usize,
    pub pass: usize,
}

impl Counts {
    pub fn of(verdicts: impl IntoIterator<Item = Verdict>) -> Self {
        let mut counts = Self::default();
        for verdict in verdicts {
            match verdict {
                Verdict::Fail => counts.fail += 1,
                Verdict::Inconclusive => counts.inconclusive += 1,
                Verdict::NotRun => counts.not_run += 1,
                Verdict::Pass => counts.pass += 1,
            }
        }
        counts
    }

    pub fn get(&self, verdict: Verdict) -> usize {
        match verdict {
            Verdict::Fail => self.fail,
            Verdict::Inconclusive => self.inconclusive,
            Verdict::NotRun => self.not_run,
            Verdict::Pass => self.pass,
        }
    }

    pub fn total(&self) -> usize {
        self.fail + self.inconclusive + self.not_run + self.pass
    }
}

/// A file that was read.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct InputRecord {
    /// Relative to the suite's folder, `/` separated.
    pub file: String,
    /// Lower-case hexadecimal SHA-256 of the bytes on disk.
    pub sha256: String,
    pub bytes: u64,
    /// Data rows, header and comments not counted; `None` for the suite.
    pub rows: Option<u64>,
}

/// One case.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct CaseOutcome {
    pub id: String,
    pub title: String,
    pub verdict: Verdict,
    /// Why, in one sentence, when the case as a whole has no verdict of its criteria (no criteria, not run).
    pub reason: Option<String>,
    /// What the case means, as label and text: element, material, load, ends, section, exact solution.
    pub facts: Vec<Fact>,
    /// Conventions and column names the result sets were read with.
    pub declared: Vec<Fact>,
    /// What the section sketch draws.
    pub sketch: Option<Sketch>,
    pub reference: ReferenceRecord,
    pub criteria: Vec<CriterionOutcome>,
    /// Coarsest first.
    pub levels: Vec<LevelOutcome>,
    /// In catalogue order; every series has one entry a level.
    pub measures: Vec<MeasureSeries>,
    pub profile: Option<Profile>,
    /// What the checks of the result sets found, over all levels.
    pub findings: Vec<Finding>,
}

/// A label with its text.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Fact {
    pub label: String,
    pub text: String,
}

/// The exact solution behind a case.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct ReferenceRecord {
    /// Catalogue name, e.g. `pressurised-tube`.
    pub solution: String,
    /// How its numbers are obtained.
    pub method: String,
    /// Its own relative error bounds.
    pub displacement_bound: f64,
    pub stress_bound: f64,
    pub totals_bound: f64,
    /// Totals of the full section and unit length.
    pub totals: Vec<TotalRecord>,
}

#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct TotalRecord {
    pub name: String,
    pub value: Option<f64>,
    pub unit: String,
    /// Why there is no value.
    pub reason: Option<String>,
}

/// What a section sketch needs.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Sketch {
    pub inner_radius: f64,
    pub outer_radius: f64,
    pub inner_pressure: f64,
    pub outer_pressure: f64,
    /// Modelled share of the section, 0 to 1.
    pub share: f64,
    /// The end condition in words.
    pub ends: String,
}

/// How a limit is set.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Bound {
    AtMost,
    AtLeast,
    /// Not below theory by more than the limit.
    Within,
}

/// What is judged.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Judged {
    /// An error (relative where not said otherwise).
    Error,
    /// The value of a measure itself.
    Value,
    /// An observed order of convergence.
    Order,
}

/// One criterion, judged.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct CriterionOutcome {
    /// `error displacement-L2 at most 1e-4`, unique within the case.
    pub text: String,
    pub judged: Judged,
    pub measure: String,
    /// The measure in words for tables, e.g. "Displacement, L2".
    pub title: String,
    pub bound: Bound,
    pub limit: f64,
    /// "1e-4" or "0.1 %" as the suite wrote it.
    pub limit_text: String,
    /// For `Within`: the theoretical order.
    pub theory: Option<f64>,
    /// Unit of value and limit ("1" for relative errors and orders).
    pub unit: String,
    /// The level it was judged at (for orders: the finer of the pair).
    pub level: Option<String>,
    pub value: Option<f64>,
    /// Half width of what the value is uncertain by, in the value's unit.
    pub uncertainty: Option<f64>,
    /// value / limit (at most), limit / value (at least), shortfall / limit (within): 1 is the limit, above is beyond.
    pub ratio: Option<f64>,
    pub verdict: Verdict,
    /// One sentence fragment: the numbers compared, or why there is none.
    pub reason: String,
    /// Remarks that do not change the verdict, e.g. an order above theory.
    pub note: Option<String>,
}

/// One mesh of a case.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct LevelOutcome {
    pub level: String,
    /// Folder relative to the suite.
    pub folder: String,
    /// Why the level was not read.
    pub missing: Option<String>,
    /// The load step that was judged, where the tables have steps.
    pub step: Option<i64>,
    /// Mean element size (volume/elements)^(1/dimension), or as given.
    pub h: Option<f64>,
    /// 2 or 3.
    pub dimension: Option<u32>,
    pub nodes: u64,
    pub elements: u64,
    pub points: u64,
    /// e.g. "quad9".
    pub shapes: String,
    /// Meshed volume (area in a slice) and that of the exact body's share.
    pub volume: Option<f64>,
    pub exact_volume: Option<f64>,
    /// Quadrature points of the mesh outside the exact body, and the largest distance.
    pub outside_points: u64,
    pub quadrature_points: u64,
    pub outside_distance: f64,
    /// "curved" or "straight" mid-side nodes on the walls, "none" for linear elements.
    pub walls: String,
}

/// What kind of number a series holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Kind {
    Relative,
    Absolute,
    Value,
}

impl Kind {
    pub fn word(self) -> &'static str {
        match self {
            Self::Relative => "relative",
            Self::Absolute => "absolute",
            Self::Value => "value",
        }
    }
}

/// One measure over the levels.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct MeasureSeries {
    /// e.g. `displacement-L2`.
    pub measure: String,
    /// In words for tables and plots, e.g. "Displacement, L2".
    pub title: String,
    /// Short name for plot labels, at most 15 characters, e.g. "displacement".
    pub label: String,
    pub kind: Kind,
    pub unit: String,
    pub expected_order: Option<f64>,
    /// One a level, coarsest first.
    pub values: Vec<LevelValue>,
    /// Least-squares order over all levels with a number.
    pub fit: Option<OrderFit>,
    /// What was compared, e.g. "components xx yy zz xy".
    pub note: Option<String>,
}

/// One number of a series.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct LevelValue {
    pub level: String,
    pub value: Option<f64>,
    /// Why there is no value.
    pub reason: Option<String>,
    /// The exact value it is compared with (norm of the exact field for norms).
    pub exact: Option<f64>,
    /// Order against the next coarser level.
    pub observed_order: Option<f64>,
    /// Where the value was found, e.g. "node 17 at R 8.000, theta 45.0 deg".
    pub place: Option<String>,
}

/// A least-squares order.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct OrderFit {
    pub order: f64,
    /// Value of the fitted line at h = 1 (natural logarithm).
    pub log_constant: f64,
    /// `None` with fewer than three levels.
    pub standard_error: Option<f64>,
    /// Half width of the 95 % interval (Student t).
    pub half_width: Option<f64>,
    pub levels: u32,
}

/// Stress through the wall along one radius of the finest level.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Profile {
    pub level: String,
    pub unit: String,
    pub length_unit: String,
    pub inner_radius: f64,
    pub outer_radius: f64,
    /// Radii where elements meet, from inside to outside, walls included.
    pub element_borders: Vec<f64>,
    pub curves: Vec<ProfileCurve>,
}

/// One stress component of a profile.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct ProfileCurve {
    /// "hoop", "axial", "radial".
    pub name: String,
    /// Exact line as (R, stress).
    pub exact: Vec<(f64, f64)>,
    /// Computed values at integration points as (R, stress, computed minus exact).
    pub computed: Vec<(f64, f64, f64)>,
}
