//! Integration points: points.csv, never held, handed out block by block.

use super::block::{MAX_POINT_NUMBER, NO_ELEMENT, PointBlock, Seen};
use super::channel::Channel;
use super::conventions::{PressureKind, PressureSign, Reading};
use super::elements::Elements;
use super::files::InputFile;
use super::frame::{ModelKind, Placed, PositionColumns};
use super::ids::Origin;
use super::log::Log;
use super::nodes::Nodes;
use super::steps::StepFilter;
use super::stress::{Components, GradientColumns, NoStress, StressPlan, matrix};
use super::table::{Next, Row, Table};
use crate::elements::{MAX_NODES, ShapeTable, map, standard_rule};
use crate::input::{Finding, Place, Weight};
use crate::mechanics::Dimension;
use std::sync::{Arc, Mutex, PoisonError};

/// Declared mean pressure and stress may differ by this share of the largest stress before a caution.
const MEAN_TOLERANCE: f64 = 1e-4;

/// Which quantities the points have, or why not.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct PointChannels {
    pub coordinates: Channel,
    pub weight: Channel,
    pub stress: Channel,
    /// The stress components given.
    pub components: Components,
    pub p: Channel,
    pub j: Channel,
    pub w: Channel,
    pub f: Channel,
}

/// What one pass over the points said.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Pass {
    /// Points of the step that is judged.
    pub points: u64,
    /// Notes and cautions.
    pub remarks: Vec<Finding>,
}

/// The points of a result set.
#[derive(Debug)]
pub struct PointSource {
    table: Table,
    plan: Plan,
    channels: PointChannels,
    elements: Option<Arc<Elements>>,
    nodes: Option<Arc<Nodes>>,
    remarks: Vec<Finding>,
    inputs: Mutex<Option<Vec<InputFile>>>,
}

#[derive(Debug)]
struct Plan {
    kind: ModelKind,
    reading: Reading,
    step: Option<i64>,
    step_column: Option<usize>,
    element: usize,
    point: usize,
    position: Option<PositionColumns>,
    /// The declared rule, where coordinates or weights come from it.
    tables: Vec<ShapeTable>,
    weight: Option<usize>,
    stress: Option<StressPlan>,
    p: Option<usize>,
    p_from_trace: bool,
    j: Option<usize>,
    w: Option<usize>,
    f: Option<GradientColumns>,
    scales: Scales,
}

#[derive(Debug, Clone, Copy)]
struct Scales {
    length: f64,
    weight: f64,
    stress: f64,
    pressure: f64,
    energy: f64,
}

/// What is known of the model before its points are read.
pub(crate) struct Model {
    pub kind: ModelKind,
    pub step: Option<i64>,
    pub elements: Option<Arc<Elements>>,
    pub nodes: Option<Arc<Nodes>>,
}

/// Prepares the points; findings about columns go to the log.
pub(crate) fn open(
    mut table: Table,
    model: Model,
    reading: &Reading,
    log: &mut Log,
) -> Option<PointSource> {
    let (kind, conventions) = (model.kind, &reading.conventions);
    let header = &mut table.header;
    let element = header.require("element", log);
    let point = header.require("point", log);
    let step_column = header.find("step", log);
    let any = PositionColumns::any(header);
    let tables = match &reading.point_rule {
        Some(rule) => shape_tables(
            rule,
            model.elements.as_deref(),
            any,
            header.file.as_str(),
            log,
        ),
        None => Vec::new(),
    };
    let position = if any || tables.is_empty() {
        PositionColumns::resolve(header, log)
    } else {
        None
    };
    if let Some(position) = position {
        let meridian = matches!(position, PositionColumns::Meridian { .. });
        if meridian != (kind == ModelKind::Axisymmetric) {
            let what = format!("the coordinates do not fit a model that is {}", kind.name());
            let hint =
                "use R, Z in every table of an axisymmetric model, and in no table of another";
            log.add(
                Finding::refused(
                    "model-kind",
                    Place::file(&header.file).line(header.line),
                    what,
                )
                .hint(hint),
            );
        } else if kind == ModelKind::Solid && !position.has_z() {
            header.require("Z", log);
        }
    }
    let rule_used = |what: &str| {
        let rule = reading.point_rule.as_deref().unwrap_or_default();
        Channel::Computed(format!("{what} of the rule {rule}"))
    };
    let weight = header.find("weight", log);
    let f = GradientColumns::resolve(header, kind, log);
    let j = header.find("J", log);
    let w = header.find("W", log);
    let stress = StressPlan::resolve(header, kind, conventions, (&f, j.is_some()), log);
    let stress = stress.map_err(|why| match why {
        NoStress::NotGiven(why) => why,
        NoStress::NotConvertible(why) => {
            let place = Place::file(&header.file).line(header.line);
            let hint = "export Cauchy stress, or the columns named here";
            log.add(Finding::refused("stress-conversion", place, &why).hint(hint));
            why
        }
    });
    let components = stress.as_ref().map_or(Components::none(), |s| s.components);
    let p = header.find("p", log);
    let p_given = p.is_some() && conventions.pressure == PressureKind::Mean;
    let p_from_trace = !p_given && components.has_trace();
    let mut remarks = Vec::new();
    let p_channel = if p_given {
        Channel::Given
    } else if p_from_trace {
        if p.is_some() {
            let what = "p is declared as the multiplier of a mixed method; -tr(sigma)/3 of the stresses is used instead";
            let place = Place::file(&header.file).line(header.line).field("p");
            remarks.push(Finding::new(
                Weight::Note,
                "pressure-from-trace",
                place,
                what,
            ));
        }
        Channel::Computed("-tr(sigma)/3".to_string())
    } else if p.is_some() {
        Channel::Missing(format!(
            "{}: p is declared as the multiplier of a mixed method, and the normal stresses are not all given",
            header.file
        ))
    } else {
        Channel::Missing(header.missing_reason("p"))
    };
    let found = |column: Option<usize>, name: &str| match column {
        Some(_) => Channel::Given,
        None => Channel::Missing(header.missing_reason(name)),
    };
    let channels = PointChannels {
        coordinates: if position.is_some() {
            Channel::Given
        } else {
            rule_used("points")
        },
        weight: match weight {
            None if !tables.is_empty() => rule_used("weights"),
            _ => found(weight, "weight"),
        },
        stress: Channel::of(stress.as_ref().map(|_| ()).map_err(Clone::clone)),
        components,
        p: p_channel,
        j: match (j, &f) {
            (None, Ok(_)) => Channel::Computed("det F".to_string()),
            _ => found(j, "J"),
        },
        w: found(w, "W"),
        f: Channel::of(f.as_ref().map(|_| ()).map_err(Clone::clone)),
    };
    let mut notes = Log::new();
    header.note_unread(&mut notes);
    remarks.extend(notes.finish(&header.file).unwrap_or_default());
    if model.elements.is_none() {
        let what = "without elements.csv, repeated and missing points cannot be found";
        remarks.push(Finding::new(
            Weight::Caution,
            "missing-table",
            Place::file(&header.file),
            what,
        ));
    }
    if log.is_refused() {
        return None;
    }
    let scale = |dimension| reading.units_from.factor_to(&reading.units_to, dimension);
    let stress_scale = scale(Dimension::Stress);
    let plan = Plan {
        kind,
        reading: reading.clone(),
        step: model.step,
        step_column,
        element: element?,
        point: point?,
        position,
        tables,
        weight,
        stress: stress.ok(),
        p: p.filter(|_| p_given),
        p_from_trace,
        j,
        w,
        f: f.ok(),
        scales: Scales {
            length: scale(Dimension::Length),
            weight: scale(if kind == ModelKind::Planar {
                Dimension::Area
            } else {
                Dimension::Volume
            }),
            stress: stress_scale,
            pressure: match conventions.pressure_sign {
                PressureSign::CompressionPositive => stress_scale,
                PressureSign::TensionPositive => -stress_scale,
            },
            energy: scale(Dimension::EnergyDensity),
        },
    };
    Some(PointSource {
        table,
        plan,
        channels,
        elements: model.elements,
        nodes: model.nodes,
        remarks,
        inputs: Mutex::new(None),
    })
}

/// Shape functions at the points of the declared rule, one table a shape of the mesh.
fn shape_tables(
    rule: &str,
    elements: Option<&Elements>,
    coordinates: bool,
    file: &str,
    log: &mut Log,
) -> Vec<ShapeTable> {
    let Some(elements) = elements else {
        if !coordinates {
            let what = format!("the rule {rule} needs nodes.csv and elements.csv");
            log.add(Finding::refused("missing-table", Place::file(file), what));
        }
        return Vec::new();
    };
    let mut tables = Vec::new();
    for shape in elements.shapes_used() {
        match standard_rule(rule, shape) {
            Some(rule) => tables.push(ShapeTable::new(shape, rule)),
            None => {
                let names: Vec<&str> = crate::elements::STANDARD_RULES
                    .iter()
                    .filter(|(name, _)| standard_rule(name, shape).is_some())
                    .map(|(name, _)| *name)
                    .collect();
                let what = format!("there is no rule \"{rule}\" for a {}", shape.name());
                let finding = Finding::refused("standard-rule", Place::file(file), what);
                log.add(
                    finding
                        .expected(names.join(" "))
                        .hint("or export X, Y (and Z) and weight of each point"),
                );
            }
        }
    }
    tables
}

/// One row as it was understood.
struct Parsed {
    element: u32,
    element_id: i64,
    point: i64,
    position: [f64; 3],
    weight: f64,
    stress: [f64; 6],
    p: f64,
    j: f64,
    w: f64,
    f: [f64; 9],
}

impl PointSource {
    /// Which quantities there are.
    pub fn channels(&self) -> &PointChannels {
        &self.channels
    }

    /// The first file, as reports name it.
    pub fn file(&self) -> &str {
        self.table.shown()
    }

    /// The files that were read, once a pass has gone through to the end.
    pub fn inputs(&self) -> Option<Vec<InputFile>> {
        self.inputs
            .lock()
            .unwrap_or_else(PoisonError::into_inner)
            .clone()
    }

    /// Visits the points of the step that is judged, in the order of the files, at most `rows_per_block` at a
    /// time. A finding of the visitor ends the pass. After a broken row nothing more is visited, but the rest
    /// of the rows is still checked.
    pub fn for_each_block(
        &self,
        rows_per_block: usize,
        visit: &mut dyn FnMut(&PointBlock) -> Result<(), Finding>,
    ) -> Result<Pass, Vec<Finding>> {
        let mut pass = Running::new(self);
        let mut log = Log::new();
        self.remarks.iter().for_each(|r| log.add(r.clone()));
        let full = rows_per_block.max(1);
        let mut stopped = false;
        let inputs = self.table.scan(&mut log, &mut |row, log| {
            if pass.take(row, log) && pass.block.len() >= full && !log.is_refused() {
                if let Err(finding) = visit(&pass.block) {
                    log.add(finding);
                    stopped = true;
                    return Next::Stop;
                }
                pass.block.clear();
            }
            Next::More
        });
        if !stopped && !log.is_refused() {
            pass.finish(&mut log);
            if !log.is_refused()
                && !pass.block.is_empty()
                && let Err(finding) = visit(&pass.block)
            {
                log.add(finding);
                stopped = true;
            }
        }
        if !stopped && !log.is_refused() {
            self.record(inputs, &mut log);
        }
        let points = pass.points;
        log.finish(self.file())
            .map(|remarks| Pass { points, remarks })
    }

    /// Keeps the hashes of the first pass and compares later passes with them.
    fn record(&self, inputs: Vec<InputFile>, log: &mut Log) {
        let mut kept = self.inputs.lock().unwrap_or_else(PoisonError::into_inner);
        match kept.as_ref() {
            None => *kept = Some(inputs),
            Some(before) => {
                for (old, new) in before.iter().zip(&inputs).filter(|(old, new)| old != new) {
                    let what = format!(
                        "{} bytes, then {} bytes: the file changed while it was read",
                        old.bytes, new.bytes
                    );
                    log.add(Finding::refused(
                        "file-changed",
                        Place::file(&new.name),
                        what,
                    ));
                }
            }
        }
    }
}

/// The state of a pass.
struct Running<'a> {
    source: &'a PointSource,
    plan: &'a Plan,
    steps: StepFilter,
    block: PointBlock,
    seen: Seen,
    points: u64,
    last_step: Option<i64>,
    /// Largest |p + tr(sigma)/3|, where, and the largest stress.
    mean_gap: (f64, Option<Place>),
    largest: f64,
    coords: [[f64; 3]; MAX_NODES],
    /// How far a point may be from where the declared rule has it.
    slack: f64,
}

impl<'a> Running<'a> {
    fn new(source: &'a PointSource) -> Self {
        let (plan, channels) = (&source.plan, &source.channels);
        let block = PointBlock {
            weight: channels.weight.is_available().then(Vec::new),
            stress: channels.stress.is_available().then(Vec::new),
            components: channels.components,
            p: channels.p.is_available().then(Vec::new),
            j: channels.j.is_available().then(Vec::new),
            w: channels.w.is_available().then(Vec::new),
            f: channels.f.is_available().then(Vec::new),
            files: source.table.files(),
            ..PointBlock::default()
        };
        Self {
            source,
            plan,
            steps: StepFilter::new(plan.step_column, plan.step),
            block,
            seen: Seen::new(source.elements.as_ref().map_or(0, |e| e.len())),
            points: 0,
            last_step: None,
            mean_gap: (0.0, None),
            largest: 0.0,
            coords: [[0.0; 3]; MAX_NODES],
            slack: source.nodes.as_ref().map_or(0.0, |n| 1e-6 * n.extent()),
        }
    }

    /// Reads one row into the block; false if it is not of the step or has findings.
    fn take(&mut self, row: &Row, log: &mut Log) -> bool {
        if let (Some(column), None) = (self.plan.step_column, self.plan.reading.step) {
            self.last_step = self.last_step.max(row.integer(column, log));
        }
        if !self.steps.wants(row, log) {
            return false;
        }
        self.points += 1;
        let Some(parsed) = self.parse(row, log) else {
            return false;
        };
        self.compare_mean(row, &parsed);
        let block = &mut self.block;
        block.element.push(parsed.element);
        block.element_id.push(parsed.element_id);
        block.point.push(parsed.point);
        block.position.push(parsed.position);
        block.origins.push(Origin::new(row.part, row.line));
        for (column, value) in [
            (&mut block.weight, parsed.weight),
            (&mut block.p, parsed.p),
            (&mut block.j, parsed.j),
            (&mut block.w, parsed.w),
        ] {
            if let Some(column) = column {
                column.push(value);
            }
        }
        if let Some(column) = &mut block.stress {
            column.push(parsed.stress);
        }
        if let Some(column) = &mut block.f {
            column.push(parsed.f);
        }
        true
    }

    fn parse(&mut self, row: &Row, log: &mut Log) -> Option<Parsed> {
        let plan = self.plan;
        let (element_id, point) = (row.integer(plan.element, log), row.integer(plan.point, log));
        let mut optional = |column: Option<usize>, scale: f64| match column {
            None => Some(f64::NAN),
            Some(column) => row.number(column, log).map(|v| v * scale),
        };
        let weight = optional(plan.weight, plan.scales.weight);
        let p = optional(plan.p, plan.scales.pressure);
        let j = optional(plan.j, 1.0);
        let w = optional(plan.w, plan.scales.energy);
        let f = plan
            .f
            .as_ref()
            .map_or(Some(None), |f| f.read(row, log).map(Some));
        let placed = plan.position.map_or(Some(None), |columns| {
            columns
                .read(row, &plan.reading.conventions, plan.scales.length, log)
                .map(Some)
        });
        let (element_id, point, f) = (element_id?, point?, f?);
        let element = self.identify(row, element_id, point, log)?;
        let (placed, computed) = match placed? {
            Some(placed) => (placed, None),
            None => {
                let (placed, weight) = self.from_rule(row, element, point, log)?;
                (placed, Some(weight))
            }
        };
        let weight = match (plan.weight, computed) {
            (None, Some(weight)) => weight,
            (None, None) if !plan.tables.is_empty() => {
                let (expected, weight) = self.from_rule(row, element, point, log)?;
                self.same_place(row, &placed, &expected, log)?;
                weight
            }
            _ => weight?,
        };
        if let Some(column) = plan.weight.filter(|_| weight <= 0.0) {
            let what = format!("the weight is {weight}");
            let hint = "a norm needs positive weights: export at the points of another rule";
            log.add(Finding::refused("positive-weight", row.place(column), what).hint(hint));
        }
        let mut j = j?;
        if let Some(column) = plan.j.filter(|_| j <= 0.0) {
            let what = format!("J is {j}");
            log.add(Finding::refused(
                "positive-volume-ratio",
                row.place(column),
                what,
            ));
            return None;
        }
        if plan.j.is_none()
            && let Some(f) = &f
        {
            j = matrix(f).determinant();
        }
        let stress = match &plan.stress {
            None => [f64::NAN; 6],
            Some(stress) => {
                let known_j = plan.j.map(|_| j);
                stress.read(
                    row,
                    placed.direction,
                    f.as_ref(),
                    known_j,
                    plan.scales.stress,
                    log,
                )?
            }
        };
        let p = if plan.p_from_trace {
            -(stress[0] + stress[1] + stress[2]) / 3.0
        } else {
            p?
        };
        Some(Parsed {
            element,
            element_id,
            point,
            position: placed.position,
            weight,
            stress,
            p,
            j,
            w: w?,
            f: f.unwrap_or([f64::NAN; 9]),
        })
    }

    /// The element's index; unknown elements and repeated points are findings.
    fn identify(&mut self, row: &Row, id: i64, point: i64, log: &mut Log) -> Option<u32> {
        let Some(elements) = &self.source.elements else {
            return Some(NO_ELEMENT);
        };
        let Some(element) = elements.find(id) else {
            let what = format!("there is no element {id} in {}", elements.file());
            log.add(Finding::refused(
                "unknown-element",
                row.place(self.plan.element),
                what,
            ));
            return None;
        };
        if !(0..=MAX_POINT_NUMBER).contains(&point) {
            let what = format!("the point number is {point}");
            let finding = Finding::refused("point-number-range", row.place(self.plan.point), what);
            log.add(finding.expected(format!(
                "a number from 0 to {MAX_POINT_NUMBER}, counted within each element"
            )));
            return None;
        }
        if !self.seen.mark(element, point as usize) {
            let what = format!("point {point} of element {id} is listed again");
            let hint = "export each point once, and give a step column if these are load steps";
            log.add(Finding::refused("unique-points", row.place(self.plan.point), what).hint(hint));
            return None;
        }
        Some(element as u32)
    }

    /// Position and weight from the declared rule; points are counted from 1.
    fn from_rule(
        &mut self,
        row: &Row,
        element: u32,
        point: i64,
        log: &mut Log,
    ) -> Option<(Placed, f64)> {
        let (elements, nodes) = (self.source.elements.as_ref()?, self.source.nodes.as_ref()?);
        let element = element as usize;
        let shape = elements.shapes[element];
        let table = self.plan.tables.iter().find(|t| t.shape == shape)?;
        let q = usize::try_from(point - 1).ok().filter(|&q| q < table.len());
        let Some(q) = q else {
            let what = format!("the point number is {point}");
            let finding = Finding::refused("point-number-range", row.place(self.plan.point), what);
            log.add(finding.expected(format!(
                "a number from 1 to {}, as the declared rule has",
                table.len()
            )));
            return None;
        };
        let count = elements.coordinates(element, nodes, &mut self.coords);
        let coords = &self.coords[..count];
        let kind = self.plan.kind;
        let position = kind.in_space(map::position(table.values(q), coords));
        let m = map::jacobian(shape.dimension(), table.gradients(q), coords);
        let mut weight = table.rule.weights[q] * map::determinant(&m);
        if kind == ModelKind::Axisymmetric {
            weight *= 2.0 * std::f64::consts::PI * position[0];
        }
        let place = crate::mechanics::Point::new(position[0], position[1], position[2]);
        Some((
            Placed {
                position,
                direction: place.direction(),
            },
            weight,
        ))
    }

    /// Weights taken from the declared rule need its points: a point elsewhere is a finding.
    fn same_place(
        &self,
        row: &Row,
        given: &Placed,
        expected: &Placed,
        log: &mut Log,
    ) -> Option<()> {
        let far = (0..3).any(|i| (given.position[i] - expected.position[i]).abs() > self.slack);
        if far {
            let what = format!("the point is at {:?}", given.position);
            let finding =
                Finding::refused("standard-rule", row.place(self.plan.point), what).expected(
                    format!("{:?}, where the declared rule has it", expected.position),
                );
            log.add(
                finding
                    .hint("export the column weight, or declare the rule whose points these are"),
            );
            return None;
        }
        Some(())
    }

    fn compare_mean(&mut self, row: &Row, parsed: &Parsed) {
        let (Some(column), true) = (self.plan.p, self.source.channels.components.has_trace())
        else {
            return;
        };
        let [a, b, c, ..] = parsed.stress;
        let gap = (parsed.p + (a + b + c) / 3.0).abs();
        self.largest = self
            .largest
            .max(a.abs())
            .max(b.abs())
            .max(c.abs())
            .max(parsed.p.abs());
        if gap > self.mean_gap.0 {
            self.mean_gap = (gap, Some(row.place(column)));
        }
    }

    /// What can only be said at the end.
    fn finish(&mut self, log: &mut Log) {
        if let Some(step) = self.plan.step {
            let place = || Place::file(self.source.file()).field("step");
            if self.points == 0 {
                log.add(Finding::refused(
                    "step-found",
                    place(),
                    format!("there is no step {step}"),
                ));
            } else if let Some(last) = self.last_step.filter(|&last| last > step) {
                let what =
                    format!("the steps go on to {last}, those of the other tables end at {step}");
                log.add(
                    Finding::refused("step-found", place(), what)
                        .hint("say in the suite which step is judged"),
                );
            }
        }
        if self.mean_gap.0 > MEAN_TOLERANCE * self.largest {
            let place = self.mean_gap.1.clone().unwrap_or_default();
            let what = format!(
                "p differs from -tr(sigma)/3 by up to {:.3e} (largest stress {:.3e})",
                self.mean_gap.0, self.largest
            );
            let hint = "check the sign of p, and whether it is the multiplier of a mixed method";
            log.add(Finding::new(Weight::Caution, "mean-pressure", place, what).hint(hint));
        }
    }
}
