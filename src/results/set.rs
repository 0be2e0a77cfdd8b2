//! A result set: all tables of one folder, at one step.

use super::conventions::{Conventions, Reading};
use super::elements::{self, Elements, RawElements};
use super::files::{InputFile, Parts, TableName, discover, shown_in};
use super::frame::{ModelKind, PositionColumns};
use super::header::check_mapping;
use super::log::Log;
use super::nodes::{self, Nodes};
use super::points::{self, Model, PointSource};
use super::steps::{StepFilter, check_step, listed, steps_of};
use super::table::Table;
use super::totals::{self, Totals};
use crate::input::{Finding, Place, Weight};
use std::collections::BTreeSet;
use std::path::Path;
use std::sync::Arc;

/// One run of one case on one mesh.
#[derive(Debug)]
pub struct ResultSet {
    shown: String,
    kind: ModelKind,
    conventions: Conventions,
    nodes: Option<Arc<Nodes>>,
    elements: Option<Arc<Elements>>,
    points: Option<PointSource>,
    totals: Option<Totals>,
    step: Option<i64>,
    steps: Vec<i64>,
    remarks: Vec<Finding>,
    inputs: Vec<InputFile>,
}

/// Findings of everything that is read, table by table.
#[derive(Default)]
struct Findings {
    refused: bool,
    list: Vec<Finding>,
}

impl Findings {
    fn close(&mut self, log: Log, file: &str) {
        match log.finish(file) {
            Ok(remarks) => self.list.extend(remarks),
            Err(findings) => {
                self.refused = true;
                self.list.extend(findings);
            }
        }
    }
}

/// The tables whose headers could be read.
struct Tables {
    nodes: Option<Table>,
    elements: Option<Table>,
    points: Option<Table>,
    totals: Option<Table>,
}

impl ResultSet {
    /// Reads a folder. `shown` is the folder as reports name it. All findings come at once where possible.
    pub fn open(folder: &Path, shown: &str, reading: &Reading) -> Result<ResultSet, Vec<Finding>> {
        let mut findings = Findings::default();
        let mut log = Log::new();
        let parts = discover(folder, shown, &mut log);
        if parts.iter().all(Vec::is_empty) && !log.is_refused() {
            let what = "there is no nodes.csv, elements.csv, points.csv or totals.csv";
            log.add(Finding::refused("missing-table", Place::file(shown), what));
        }
        let fatal = log.is_refused();
        findings.close(log, shown);
        if fatal {
            return Err(findings.list);
        }
        let tables = open_tables(parts, reading, shown, &mut findings);
        Self::read(tables, shown, reading, findings)
    }

    fn read(
        mut tables: Tables,
        shown: &str,
        reading: &Reading,
        mut findings: Findings,
    ) -> Result<ResultSet, Vec<Finding>> {
        let mut inputs = Vec::new();
        let mut log = Log::new();
        let (step, steps) = choose_step(&mut tables, reading, &mut log);
        findings.close(log, shown);

        let mut log = Log::new();
        let mut raw = None;
        if let Some(table) = &mut tables.elements {
            let (read, files) = elements::read(table, &mut log);
            raw = read;
            inputs.extend(files);
        }
        let dimension = raw.as_ref().and_then(|raw| raw.dimension(&mut log));
        let elements_refused = log.is_refused();
        findings.close(log, &file_of(&tables.elements, shown));

        let mut log = Log::new();
        let mut position = None;
        if let Some(table) = &mut tables.nodes {
            position = PositionColumns::resolve(&mut table.header, &mut log);
        }
        let seen = position.or_else(|| peek_position(tables.points.as_mut()));
        let kind = seen.map_or(ModelKind::Planar, |p| p.kind(dimension));
        let mut nodes = None;
        if let Some(table) = &mut tables.nodes {
            check_kind(table, position, kind, dimension, &mut log);
            let filter = StepFilter::new(table.header.find("step", &mut log), step);
            let (read, files) = nodes::read(table, position, kind, &filter, reading, &mut log);
            nodes = read;
            inputs.extend(files);
        }
        let nodes_refused = log.is_refused();
        findings.close(log, &file_of(&tables.nodes, shown));

        let mut log = Log::new();
        let file = file_of(&tables.elements, shown);
        let elements = match (raw, &nodes) {
            (Some(raw), Some(nodes)) if !elements_refused && !nodes_refused => {
                Some(connect(raw, nodes, kind, &mut log))
            }
            (Some(_), None) if tables.nodes.is_none() => {
                let what = format!("{file} is there, but not nodes.csv");
                log.add(Finding::refused(
                    "missing-table",
                    Place::file(shown_in(shown, "nodes.csv")),
                    what,
                ));
                None
            }
            _ => None,
        };
        findings.close(log, &file);

        let mut log = Log::new();
        let mut totals = None;
        if let Some(table) = &mut tables.totals {
            let filter = StepFilter::new(table.header.find("step", &mut log), step);
            let (read, files) = totals::read(table, kind, &filter, reading, &mut log);
            totals = read;
            inputs.extend(files);
        }
        findings.close(log, &file_of(&tables.totals, shown));

        let (nodes, elements) = (nodes.map(Arc::new), elements.map(Arc::new));
        let mut log = Log::new();
        let file = file_of(&tables.points, shown);
        let mut points = None;
        if let Some(table) = tables.points
            && (elements.is_some() || tables.elements.is_none())
        {
            let model = Model {
                kind,
                step,
                elements: elements.clone(),
                nodes: nodes.clone(),
            };
            points = points::open(table, model, reading, &mut log);
        }
        findings.close(log, &file);
        if findings.refused {
            return Err(findings.list);
        }
        Ok(ResultSet {
            shown: shown.to_string(),
            kind,
            conventions: reading.conventions,
            nodes,
            elements,
            points,
            totals,
            step,
            steps: steps.into_iter().collect(),
            remarks: findings.list,
            inputs,
        })
    }

    /// The folder as reports name it.
    pub fn shown(&self) -> &str {
        &self.shown
    }

    /// Planar, solid or axisymmetric.
    pub fn kind(&self) -> ModelKind {
        self.kind
    }

    /// The conventions the files were read by.
    pub fn conventions(&self) -> &Conventions {
        &self.conventions
    }

    /// The nodes, where there is a nodes.csv.
    pub fn nodes(&self) -> Option<&Nodes> {
        self.nodes.as_deref()
    }

    /// The mesh, where there is an elements.csv.
    pub fn elements(&self) -> Option<&Elements> {
        self.elements.as_deref()
    }

    /// The integration points, where there is a points.csv.
    pub fn points(&self) -> Option<&PointSource> {
        self.points.as_ref()
    }

    /// The totals, where there is a totals.csv.
    pub fn totals(&self) -> Option<&Totals> {
        self.totals.as_ref()
    }

    /// The step that is judged; `None` when no table has steps.
    pub fn step(&self) -> Option<i64> {
        self.step
    }

    /// Every step found outside points.csv (or in it, where no other table has steps), ascending.
    pub fn steps(&self) -> &[i64] {
        &self.steps
    }

    /// Notes and cautions of reading; those about points come with each pass over them.
    pub fn remarks(&self) -> &[Finding] {
        &self.remarks
    }

    /// The files that were read, by name. Those of the points are in it once a pass has gone through.
    pub fn inputs(&self) -> Vec<InputFile> {
        let mut all = self.inputs.clone();
        all.extend(
            self.points
                .as_ref()
                .and_then(PointSource::inputs)
                .unwrap_or_default(),
        );
        all.sort_by(|a, b| a.name.cmp(&b.name));
        all
    }
}

fn file_of(table: &Option<Table>, shown: &str) -> String {
    table.as_ref().map_or(shown, |t| t.shown()).to_string()
}

fn open_tables(
    parts: [Parts; 4],
    reading: &Reading,
    shown: &str,
    findings: &mut Findings,
) -> Tables {
    let [nodes, elements, points, totals] = parts;
    let mut open = |name: TableName, parts: Parts| {
        let mut log = Log::new();
        let file = parts
            .first()
            .map_or(shown, |p| p.shown.as_str())
            .to_string();
        let table = Table::open(name, parts, &reading.columns, &mut log);
        findings.close(log, &file);
        table
    };
    let tables = Tables {
        nodes: open(TableName::Nodes, nodes),
        elements: open(TableName::Elements, elements),
        points: open(TableName::Points, points),
        totals: open(TableName::Totals, totals),
    };
    let all = [
        &tables.nodes,
        &tables.elements,
        &tables.points,
        &tables.totals,
    ];
    let headers: Vec<_> = all.into_iter().flatten().map(|t| &t.header).collect();
    let mut log = Log::new();
    check_mapping(&reading.columns, &headers, shown, &mut log);
    findings.close(log, shown);
    tables
}

/// The position columns of the points, without findings: those come up when the points are opened.
fn peek_position(points: Option<&mut Table>) -> Option<PositionColumns> {
    let mut ignored = Log::new();
    PositionColumns::resolve(&mut points?.header, &mut ignored)
}

fn check_kind(
    table: &mut Table,
    position: Option<PositionColumns>,
    kind: ModelKind,
    dimension: Option<usize>,
    log: &mut Log,
) {
    let Some(position) = position else { return };
    if kind == ModelKind::Axisymmetric && dimension == Some(3) {
        let what = "R and Z without Theta, in a mesh of three dimensions";
        let place = Place::file(table.shown()).line(table.header.line);
        log.add(Finding::refused("model-kind", place, what).hint("give Theta as well, or X, Y, Z"));
    }
    if kind == ModelKind::Solid && !position.has_z() {
        log.add(table.header.missing("Z"));
    }
}

/// The mesh on its nodes; a flat mesh must lie in one plane.
fn connect(raw: RawElements, nodes: &Nodes, kind: ModelKind, log: &mut Log) -> Elements {
    let elements = raw.resolve(nodes, kind, log);
    if kind == ModelKind::Planar && !log.is_refused() {
        let slack = 1e-9 * nodes.extent();
        let first = nodes.positions.first().map_or(0.0, |x| x[2]);
        for (i, position) in nodes.positions.iter().enumerate() {
            if (position[2] - first).abs() > slack {
                let what = format!(
                    "Z is {} here and {first} at node {}",
                    position[2], nodes.ids[0]
                );
                let hint = "elements of two dimensions stand for a section; a shell is not judged";
                log.add(Finding::refused("flat-mesh", nodes.place(i).field("Z"), what).hint(hint));
            }
        }
    }
    elements
}

/// The step to be judged and every step found.
fn choose_step(
    tables: &mut Tables,
    reading: &Reading,
    log: &mut Log,
) -> (Option<i64>, BTreeSet<i64>) {
    let mut stepped: Vec<(String, BTreeSet<i64>)> = Vec::new();
    for table in [&mut tables.nodes, &mut tables.totals]
        .into_iter()
        .flatten()
    {
        if let Some(steps) = steps_of(table, log) {
            stepped.push((table.shown().to_string(), steps));
        }
    }
    let nodes_stepped = tables
        .nodes
        .as_ref()
        .is_some_and(|t| t.header.peek("step").is_some());
    if let Some(table) = &mut tables.points
        && !nodes_stepped
        && let Some(steps) = steps_of(table, log)
    {
        stepped.push((table.shown().to_string(), steps));
    }
    let all: BTreeSet<i64> = stepped
        .iter()
        .flat_map(|(_, steps)| steps)
        .copied()
        .collect();
    let Some(step) = reading.step.or(all.last().copied()) else {
        return (None, all);
    };
    if stepped.is_empty() {
        let file = file_of(&tables.nodes, "");
        let what = format!("step {step} is to be judged, but no table has a column \"step\"");
        log.add(Finding::refused(
            "step-found",
            Place::file(file).field("step"),
            what,
        ));
    }
    for (file, steps) in &stepped {
        check_step(file, steps, step, log);
    }
    if all.len() > 1 {
        let last = all.last() == Some(&step);
        let fields = [&tables.nodes, &tables.points];
        let mut with_steps = fields.into_iter().flatten().map(|t| t.header.peek("step"));
        let fields_stepped = with_steps.any(|column| column.is_some());
        for table in [&tables.nodes, &tables.points, &tables.totals]
            .into_iter()
            .flatten()
        {
            if table.header.peek("step").is_some() {
                continue;
            }
            let remark_only = last && (table.name == TableName::Totals || !fields_stepped);
            let weight = if remark_only {
                Weight::Caution
            } else {
                Weight::Refused
            };
            let what = format!(
                "other tables have the steps {}, this one has no step column",
                listed(&all)
            );
            let place = Place::file(table.shown()).field("step");
            let hint = "add the column, or export one step only";
            log.add(Finding::new(weight, "ambiguous-step", place, what).hint(hint));
        }
    }
    (Some(step), all)
}
