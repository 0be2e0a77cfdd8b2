//! The totals every tube answers, in the order reports print them.

use super::solution::{Extent, Total};
use crate::mechanics::Dimension;

/// Numbers of a whole tube; force for the full section, energy and volume per unit reference length.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct TubeTotals {
    pub inner_radius: f64,
    pub outer_radius: f64,
    pub axial_stretch: f64,
    pub axial_force: f64,
    pub strain_energy: f64,
    pub enclosed_volume: f64,
    pub limit_pressure: Result<f64, String>,
}

impl TubeTotals {
    /// As a list with dimensions and extents.
    pub fn list(self) -> Vec<Total> {
        let total = |name, value, dimension, extent| Total {
            name,
            value,
            dimension,
            extent,
        };
        vec![
            total(
                "inner_radius",
                Ok(self.inner_radius),
                Dimension::Length,
                Extent::Whole,
            ),
            total(
                "outer_radius",
                Ok(self.outer_radius),
                Dimension::Length,
                Extent::Whole,
            ),
            total(
                "axial_stretch",
                Ok(self.axial_stretch),
                Dimension::None,
                Extent::Whole,
            ),
            total(
                "axial_force",
                Ok(self.axial_force),
                Dimension::Force,
                Extent::Section,
            ),
            total(
                "strain_energy",
                Ok(self.strain_energy),
                Dimension::EnergyPerLength,
                Extent::SectionAndLength,
            ),
            total(
                "enclosed_volume",
                Ok(self.enclosed_volume),
                Dimension::Area,
                Extent::SectionAndLength,
            ),
            total(
                "limit_pressure",
                self.limit_pressure,
                Dimension::Stress,
                Extent::Whole,
            ),
        ]
    }
}
