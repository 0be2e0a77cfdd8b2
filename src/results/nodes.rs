//! Nodes: nodes.csv at the step to be judged.

use super::channel::Channel;
use super::conventions::{PressureKind, PressureSign, Reading};
use super::files::InputFile;
use super::frame::{DisplacementColumns, ModelKind, PositionColumns};
use super::ids::{IdIndex, Origin};
use super::log::Log;
use super::steps::StepFilter;
use super::stress::{Components, GradientColumns, NoStress, StressPlan};
use super::table::{Next, Table};
use crate::input::{Finding, Place, Weight};
use crate::mechanics::Dimension;

/// The nodes, in the order of their identifiers.
#[derive(Debug, Clone)]
pub struct Nodes {
    pub ids: Vec<i64>,
    /// Reference positions `[X, Y, Z]`; `[R, 0, Z]` in an axisymmetric model.
    pub positions: Vec<[f64; 3]>,
    /// Displacements in the same frame, where they are given.
    pub displacement: Option<Vec<[f64; 3]>>,
    pub displacement_channel: Channel,
    /// Hydrostatic pressure -tr(sigma)/3 at the nodes, compression positive.
    pub p: Option<Vec<f64>>,
    pub p_channel: Channel,
    /// Recovered Cauchy stress, Cartesian; components that are not given hold NaN.
    pub stress: Option<Vec<[f64; 6]>>,
    pub stress_components: Components,
    pub stress_channel: Channel,
    pub kind: ModelKind,
    origins: Vec<Origin>,
    files: Vec<String>,
    index: IdIndex,
}

impl Nodes {
    pub fn len(&self) -> usize {
        self.ids.len()
    }

    pub fn is_empty(&self) -> bool {
        self.ids.is_empty()
    }

    /// The index of a node.
    pub fn find(&self, id: i64) -> Option<usize> {
        self.index.find(id).map(|i| i as usize)
    }

    /// Where the node was read.
    pub fn place(&self, node: usize) -> Place {
        self.origins[node].place(&self.files)
    }

    /// The first file, as reports name it.
    pub fn file(&self) -> &str {
        self.files.first().map_or("", String::as_str)
    }

    /// The diagonal of the smallest box around all nodes.
    pub fn extent(&self) -> f64 {
        let mut sum = 0.0;
        for axis in 0..3 {
            let low = self
                .positions
                .iter()
                .fold(f64::INFINITY, |m, x| m.min(x[axis]));
            let high = self
                .positions
                .iter()
                .fold(f64::NEG_INFINITY, |m, x| m.max(x[axis]));
            if high > low {
                sum += (high - low) * (high - low);
            }
        }
        sum.sqrt()
    }
}

struct Record {
    id: i64,
    position: [f64; 3],
    displacement: [f64; 3],
    p: f64,
    stress: [f64; 6],
    origin: Origin,
}

/// Reads the table at one step.
pub(crate) fn read(
    table: &mut Table,
    position: Option<PositionColumns>,
    kind: ModelKind,
    steps: &StepFilter,
    reading: &Reading,
    log: &mut Log,
) -> (Option<Nodes>, Vec<InputFile>) {
    let header = &mut table.header;
    let conventions = &reading.conventions;
    let id = header.require("node", log);
    let movement = DisplacementColumns::resolve(header, kind, log);
    let f = GradientColumns::resolve(header, kind, log);
    let j = header.peek("J");
    let plan = StressPlan::resolve(header, kind, conventions, (&f, j.is_some()), log);
    let plan = plan.map_err(|why| match why {
        NoStress::NotGiven(why) | NoStress::NotConvertible(why) => why,
    });
    let j = plan
        .as_ref()
        .ok()
        .filter(|p| p.needs_f())
        .and_then(|_| header.find("J", log));
    let f = f
        .ok()
        .filter(|_| plan.as_ref().is_ok_and(StressPlan::needs_f));
    let components = plan.as_ref().map_or(Components::none(), |p| p.components);
    let p = match (conventions.pressure, header.find("p", log)) {
        (PressureKind::Mean, Some(column)) => Ok(column),
        (PressureKind::Mean, None) => Err(header.missing_reason("p")),
        (PressureKind::Multiplier, _) => Err(format!(
            "{}: p is declared as the multiplier of a mixed method, which is not -tr(sigma)/3",
            header.file
        )),
    };
    let from_trace = p.is_err() && components.has_trace();
    header.note_unread(log);
    let (Some(id), Some(position)) = (id, position) else {
        return (None, Vec::new());
    };
    let scale = |dimension| reading.units_from.factor_to(&reading.units_to, dimension);
    let (length, stress_scale) = (scale(Dimension::Length), scale(Dimension::Stress));
    let sign = match conventions.pressure_sign {
        PressureSign::CompressionPositive => stress_scale,
        PressureSign::TensionPositive => -stress_scale,
    };
    let mut records: Vec<Record> = Vec::new();
    let inputs = table.scan(log, &mut |row, log| {
        if !steps.wants(row, log) {
            return Next::More;
        }
        let id = row.integer(id, log);
        let placed = position.read(row, conventions, length, log);
        let p = p
            .as_ref()
            .map_or(Some(f64::NAN), |&c| row.number(c, log).map(|p| p * sign));
        let j = j.map_or(Some(None), |c| row.number(c, log).map(Some));
        let f = f
            .as_ref()
            .map_or(Some(None), |f| f.read(row, log).map(Some));
        let Some(placed) = placed else {
            return Next::More;
        };
        let moved = movement
            .as_ref()
            .map_or(Some([f64::NAN; 3]), |m| m.read(row, &placed, length, log));
        let (Some(f), Some(j)) = (f, j) else {
            return Next::More;
        };
        let stress = plan.as_ref().map_or(Some([f64::NAN; 6]), |plan| {
            plan.read(row, placed.direction, f.as_ref(), j, stress_scale, log)
        });
        if let (Some(id), Some(displacement), Some(p), Some(stress)) = (id, moved, p, stress) {
            let p = if from_trace {
                -(stress[0] + stress[1] + stress[2]) / 3.0
            } else {
                p
            };
            let origin = Origin::new(row.part, row.line);
            records.push(Record {
                id,
                position: placed.position,
                displacement,
                p,
                stress,
                origin,
            });
        }
        Next::More
    });
    let files = table.files();
    records.sort_by_key(|r| (r.id, r.origin));
    for pair in records.windows(2) {
        if pair[0].id == pair[1].id {
            let first = pair[0].origin.place(&files);
            let what = format!("node {} is listed again; first at {first}", pair[1].id);
            let place = pair[1].origin.place(&files).field("node");
            log.add(Finding::refused("unique-node-ids", place, what));
        }
    }
    if from_trace && conventions.pressure == PressureKind::Multiplier {
        let what = "p is taken as -tr(sigma)/3 of the stresses given";
        log.add(Finding::new(
            Weight::Note,
            "pressure-from-trace",
            Place::file(table.shown()),
            what,
        ));
    }
    let ids: Vec<i64> = records.iter().map(|r| r.id).collect();
    let p_channel = match &p {
        _ if from_trace => Channel::Computed("-tr(sigma)/3".to_string()),
        Ok(_) => Channel::Given,
        Err(why) => Channel::Missing(why.clone()),
    };
    let column =
        |there: bool, value: fn(&Record) -> f64| there.then(|| records.iter().map(value).collect());
    let index = if log.is_refused() {
        IdIndex::Sorted(ids.clone())
    } else {
        IdIndex::new(&ids)
    };
    let nodes = Nodes {
        index,
        positions: records.iter().map(|r| r.position).collect(),
        displacement: movement
            .is_ok()
            .then(|| records.iter().map(|r| r.displacement).collect()),
        displacement_channel: Channel::of(movement.map(|_| ())),
        p: column(p.is_ok() || from_trace, |r| r.p),
        p_channel,
        stress: plan
            .is_ok()
            .then(|| records.iter().map(|r| r.stress).collect()),
        stress_components: components,
        stress_channel: Channel::of(plan.map(|_| ())),
        kind,
        origins: records.iter().map(|r| r.origin).collect(),
        files,
        ids,
    };
    (Some(nodes), inputs)
}
