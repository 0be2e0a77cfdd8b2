//! Numbers of the whole model: totals.csv.

use super::conventions::Reading;
use super::files::InputFile;
use super::frame::ModelKind;
use super::ids::Origin;
use super::log::Log;
use super::steps::StepFilter;
use super::table::{Next, Table};
use crate::input::{Finding, Place};
use crate::mechanics::Dimension;

/// One total.
#[derive(Debug, Clone, PartialEq)]
pub struct Total {
    pub quantity: String,
    /// In the units handed out, where the dimension is known.
    pub value: f64,
    /// `None` for a quantity of interest: its value is as it was written.
    pub dimension: Option<Dimension>,
    pub place: Place,
}

/// The totals of one step, in the order of their names.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Totals {
    pub list: Vec<Total>,
}

impl Totals {
    /// The total of that name.
    pub fn get(&self, quantity: &str) -> Option<&Total> {
        self.list.iter().find(|t| t.quantity == quantity)
    }
}

/// The dimension of a known quantity in a model.
pub fn dimension_of(quantity: &str, kind: ModelKind) -> Option<Dimension> {
    let planar = kind == ModelKind::Planar;
    match quantity {
        "strain_energy" | "external_work" | "torque" if planar => Some(Dimension::EnergyPerLength),
        "strain_energy" | "external_work" | "torque" => Some(Dimension::Energy),
        "axial_force" | "bending_moment" => Some(Dimension::Force),
        "enclosed_volume" if planar => Some(Dimension::Area),
        "enclosed_volume" => Some(Dimension::Volume),
        "volume_reference" | "volume_current" if planar => Some(Dimension::Area),
        "volume_reference" | "volume_current" => Some(Dimension::Volume),
        "axial_stretch" | "load_factor" | "iterations" => Some(Dimension::None),
        _ => None,
    }
}

/// Reads the table at one step.
pub(crate) fn read(
    table: &mut Table,
    kind: ModelKind,
    steps: &StepFilter,
    reading: &Reading,
    log: &mut Log,
) -> (Option<Totals>, Vec<InputFile>) {
    let (name, value) = (
        table.header.require("quantity", log),
        table.header.require("value", log),
    );
    table.header.note_unread(log);
    let (Some(name), Some(value)) = (name, value) else {
        return (None, Vec::new());
    };
    let mut list: Vec<(String, Origin, f64)> = Vec::new();
    let inputs = table.scan(log, &mut |row, log| {
        if !steps.wants(row, log) {
            return Next::More;
        }
        match std::str::from_utf8(row.text(name)) {
            Ok("") => log.add(Finding::refused(
                "empty-cell",
                row.place(name),
                "the quantity has no name",
            )),
            Ok(quantity) => {
                if let Some(number) = row.number(value, log) {
                    list.push((
                        quantity.to_string(),
                        Origin::new(row.part, row.line),
                        number,
                    ));
                }
            }
            Err(_) => log.add(Finding::refused(
                "utf-8",
                row.place(name),
                "the name is not UTF-8 text",
            )),
        }
        Next::More
    });
    let files = table.files();
    list.sort_by(|a, b| (&a.0, a.1).cmp(&(&b.0, b.1)));
    for pair in list.windows(2) {
        if pair[0].0 == pair[1].0 {
            let what = format!(
                "{} is listed again; first at {}",
                pair[1].0,
                pair[0].1.place(&files)
            );
            let place = pair[1].1.place(&files).field("quantity");
            log.add(Finding::refused("unique-quantities", place, what));
        }
    }
    let convert = |(quantity, origin, value): (String, Origin, f64)| {
        let dimension = dimension_of(&quantity, kind);
        let scale = dimension.map_or(1.0, |d| reading.units_from.factor_to(&reading.units_to, d));
        Total {
            quantity,
            value: value * scale,
            dimension,
            place: origin.place(&files),
        }
    };
    let list = list.into_iter().map(convert).collect();
    (Some(Totals { list }), inputs)
}
