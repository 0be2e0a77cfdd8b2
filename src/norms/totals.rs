//! Numbers of the whole model against the exact body's share of them.

use super::level::{Level, LevelMeasures};
use super::measured::Measured;
use crate::exact::Extent;
use crate::mechanics::Dimension;
use crate::results::ModelKind;

impl Level<'_> {
    pub(super) fn totals(&self, level: &mut LevelMeasures) {
        for (name, quantity) in [
            ("strain-energy", "strain_energy"),
            ("axial-stretch", "axial_stretch"),
            ("axial-force", "axial_force"),
            ("torque", "torque"),
            ("bending-moment", "bending_moment"),
            ("enclosed-volume", "enclosed_volume"),
        ] {
            level.measured.push(self.total(name, quantity));
        }
    }

    fn total(&self, name: &str, quantity: &str) -> Measured {
        let planar = self.set.kind() == ModelKind::Planar;
        let Some(exact) = self.exact.totals().iter().find(|t| t.name == quantity) else {
            return Measured::missing(name, "1", "the exact solution has no such total");
        };
        let dimension = match exact.dimension {
            Dimension::EnergyPerLength if !planar => Dimension::Energy,
            Dimension::Area if !planar => Dimension::Volume,
            other => other,
        };
        let unit = self.unit(dimension);
        let length = self.body.map(|body| body.axial_length);
        let scale = match (exact.extent, planar, length) {
            (Extent::Whole, _, _) => 1.0,
            (Extent::Section, _, _) | (Extent::SectionAndLength, true, _) => self.share,
            (Extent::SectionAndLength, false, Some(length)) => self.share * length,
            (Extent::SectionAndLength, false, None) => {
                return Measured::missing(
                    name,
                    &unit,
                    "the axial length is not known without nodes and elements",
                );
            }
        };
        let exact = match &exact.value {
            Ok(value) => value * scale,
            Err(why) => return Measured::missing(name, &unit, why),
        };
        let Some(totals) = self.set.totals() else {
            return Measured::missing(name, &unit, "there is no totals.csv");
        };
        match totals.get(quantity) {
            Some(total) => Measured::number(name, &unit, total.value, exact, None),
            None => Measured::missing(name, &unit, &format!("totals.csv has no `{quantity}`")),
        }
    }
}
