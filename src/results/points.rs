//! Integration points: points.csv, never held, handed out block by block.

use super::block::PointBlock;
use super::channel::Channel;
use super::conventions::{PressureKind, PressureSign, Reading};
use super::elements::Elements;
use super::files::InputFile;
use super::frame::{ModelKind, PositionColumns};
use super::log::Log;
use super::nodes::Nodes;
use super::pass::Running;
use super::stress::{Components, GradientColumns, NoStress, StressPlan};
use super::table::{Next, Table};
use crate::elements::{ShapeTable, standard_rule};
use crate::input::{Finding, Place, Weight};
use crate::mechanics::Dimension;
use std::sync::{Arc, Mutex, PoisonError};

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
    pub(super) table: Table,
    pub(super) plan: Plan,
    pub(super) channels: PointChannels,
    pub(super) elements: Option<Arc<Elements>>,
    pub(super) nodes: Option<Arc<Nodes>>,
    remarks: Vec<Finding>,
    inputs: Mutex<Option<Vec<InputFile>>>,
}

#[derive(Debug)]
pub(super) struct Plan {
    pub kind: ModelKind,
    pub reading: Reading,
    pub step: Option<i64>,
    pub step_column: Option<usize>,
    pub element: usize,
    pub point: usize,
    pub position: Option<PositionColumns>,
    /// The declared rule, where coordinates or weights come from it.
    pub tables: Vec<ShapeTable>,
    pub weight: Option<usize>,
    pub stress: Option<StressPlan>,
    pub p: Option<usize>,
    pub p_from_trace: bool,
    pub j: Option<usize>,
    pub w: Option<usize>,
    pub f: Option<GradientColumns>,
    pub scales: Scales,
}

#[derive(Debug, Clone, Copy)]
pub(super) struct Scales {
    pub length: f64,
    pub weight: f64,
    pub stress: f64,
    pub pressure: f64,
    pub energy: f64,
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
        visit: &mut dyn FnMut(&PointBlock) -> Result<(), Box<Finding>>,
    ) -> Result<Pass, Vec<Finding>> {
        let mut pass = Running::new(self);
        let mut log = Log::new();
        self.remarks.iter().for_each(|r| log.add(r.clone()));
        let full = rows_per_block.max(1);
        let mut stopped = false;
        let inputs = self.table.scan(&mut log, &mut |row, log| {
            if pass.take(row, log) && pass.block.len() >= full && !log.is_refused() {
                if let Err(finding) = visit(&pass.block) {
                    log.add(*finding);
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
                log.add(*finding);
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
