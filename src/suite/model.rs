//! The suite as written: typed, complete, with places; nothing is looked up or computed here.

use super::quantity::Quantity;
use super::tree::Node;
use crate::mechanics::{StressMeasure, UnitSystem};

/// A value with its place and path in the YAML file.
#[derive(Debug, Clone, PartialEq)]
pub struct Placed<T> {
    pub value: T,
    pub line: u64,
    pub column: u64,
    pub path: String,
}

/// A whole suite.
#[derive(Debug, Clone, PartialEq)]
pub struct Suite {
    pub id: String,
    pub title: String,
    pub subject: Option<String>,
    /// Demo data of an invented scenario.
    pub invented: bool,
    pub units: UnitSystem,
    pub materials: Vec<MaterialEntry>,
    pub cases: Vec<CaseEntry>,
}

/// A named material: a law with its constants as written.
#[derive(Debug, Clone, PartialEq)]
pub struct MaterialEntry {
    pub name: String,
    pub law: Placed<String>,
    /// The block of its constants, read with the law at hand.
    pub constants: Option<Placed<Node>>,
}

/// A case before its lists are expanded.
#[derive(Debug, Clone, PartialEq)]
pub struct CaseEntry {
    pub id: Placed<String>,
    pub title: Option<String>,
    /// Name of the exact solution and the block of its parameters.
    pub problem: Placed<String>,
    pub parameters: Placed<Node>,
    /// What the results are held to besides the exact solution: `published`.
    pub reference: Option<Placed<String>>,
    /// The block under `element`.
    pub element: Option<Placed<Node>>,
    /// Modelled share of the section.
    pub section: Option<Placed<Quantity>>,
    pub axial_length: Option<Placed<Quantity>>,
    /// How far a node may lie off the body; a default from the wall thickness where it is not given.
    pub node_tolerance: Option<Placed<Quantity>>,
    /// Share of the stated loads that the result sets are at; 1 where it is not given.
    pub load_factor: Option<Placed<Quantity>>,
    /// Folder of a result set, with `{...}` to fill in.
    pub results: Option<Placed<String>>,
    pub levels: Vec<Placed<String>>,
    /// Mesh size of each level, where the user gives it.
    pub h: Vec<Placed<Quantity>>,
    pub accept: Vec<CriterionEntry>,
    pub expected_orders: Vec<(Placed<String>, Quantity)>,
    pub export: ExportEntry,
}

/// How the result sets of a case are written.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct ExportEntry {
    /// Units of the files, where they are not the suite's.
    pub units: Option<UnitSystem>,
    /// (table or empty, name in the exchange format, header in the files)
    pub columns: Vec<(String, String, Placed<String>)>,
    pub conventions: ConventionsEntry,
    pub point_rule: Option<Placed<String>>,
    pub step: Option<Placed<i64>>,
}

/// Declared conventions; what is `None` follows the exchange format.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct ConventionsEntry {
    pub stress: Option<StressMeasure>,
    /// The files' p is the multiplier of a mixed formulation.
    pub pressure_is_multiplier: Option<bool>,
    pub tension_positive_pressure: Option<bool>,
    pub engineering_shear: Option<bool>,
    pub degrees: Option<bool>,
}

/// What a criterion judges.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Subject {
    Error,
    Value,
    Order,
}

/// How its limit is set.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum LimitKind {
    AtMost,
    AtLeast,
    Within,
}

/// One line of `accept`.
#[derive(Debug, Clone, PartialEq)]
pub struct CriterionEntry {
    pub subject: Subject,
    pub measure: Placed<String>,
    pub kind: LimitKind,
    pub limit: Placed<Quantity>,
    pub level: Option<Placed<String>>,
    /// `by: fit`: judge the least-squares order over all levels instead of the finest pair.
    pub by_fit: bool,
}
