//! How the moduli of a layer vary with the reference radius.

use crate::exact::parameters::refuse;
use crate::exact::solution::Refusal;

/// The factor on all moduli of a law, as a function of the reference radius R; A is the bore of the whole tube.
#[derive(Debug, Clone, PartialEq, Default)]
pub enum Grading {
    /// The same everywhere.
    #[default]
    None,
    /// (R/A)^n.
    Power(f64),
    /// exp(k (R - A)). Unit of k: one over length.
    Exponential(f64),
    /// Straight lines through `(R, factor)`, which must reach over the whole layer.
    Table(Vec<(f64, f64)>),
}

/// The grading between two neighbouring breaks, where it is smooth.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Factor {
    One,
    Power(f64),
    /// k A.
    Exponential(f64),
    /// The factor at `radius`, and its slope by R.
    Line {
        radius: f64,
        at: f64,
        slope: f64,
    },
}

impl Factor {
    /// At X = ln(R/A), with the bore's radius A.
    pub fn at(&self, x: f64, bore: f64) -> f64 {
        match *self {
            Self::One => 1.0,
            Self::Power(n) => (n * x).exp(),
            Self::Exponential(k) => (k * x.exp_m1()).exp(),
            Self::Line { radius, at, slope } => at + slope * (bore * x.exp() - radius),
        }
    }

    /// |d ln f/dX|: how fine the panels must be.
    pub fn pace(&self, x: f64, bore: f64) -> f64 {
        match *self {
            Self::One => 0.0,
            Self::Power(n) => n.abs(),
            Self::Exponential(k) => (k * x.exp()).abs(),
            Self::Line { slope, .. } => (slope * bore * x.exp() / self.at(x, bore)).abs(),
        }
    }

    /// |ln f|: relative round-off of the factor in units of its own.
    pub fn loss(&self, x: f64) -> f64 {
        match *self {
            Self::One | Self::Line { .. } => 0.0,
            Self::Power(n) => (n * x).abs(),
            Self::Exponential(k) => (k * x.exp_m1()).abs(),
        }
    }
}

impl Grading {
    /// As reports print it; lengths in `unit`.
    pub(super) fn in_words(&self, unit: &str) -> String {
        match self {
            Self::None => "the same modulus everywhere".to_string(),
            Self::Power(n) => format!("moduli times (R/A)^{n}"),
            Self::Exponential(k) => format!("moduli times exp({k} (R - A)), R in {unit}"),
            Self::Table(rows) => format!("moduli by a table of {} radii", rows.len()),
        }
    }

    /// The smooth parts of the layer `from..to`: where each ends, and its factor.
    pub(super) fn parts(&self, from: f64, to: f64, bore: f64) -> Vec<(f64, Factor)> {
        let table = match self {
            Self::None => return vec![(to, Factor::One)],
            Self::Power(n) => return vec![(to, Factor::Power(*n))],
            Self::Exponential(k) => return vec![(to, Factor::Exponential(k * bore))],
            Self::Table(table) => table,
        };
        let mut parts = Vec::new();
        for ends in table.windows(2) {
            let [(left, low), (right, high)] = [ends[0], ends[1]];
            if right <= from || left >= to {
                continue;
            }
            let slope = (high - low) / (right - left);
            let line = Factor::Line {
                radius: left,
                at: low,
                slope,
            };
            parts.push((right.min(to), line));
        }
        parts
    }

    /// Refuses a grading that is not a positive number all over the layer `from..to`.
    pub(super) fn check(&self, from: f64, to: f64, bore: f64) -> Result<(), Refusal> {
        let wrong = |message: String, hint: &str| Err(refuse("grading", message, hint));
        if let Self::Table(table) = self {
            if table.len() < 2 {
                return wrong(
                    format!("a table of {} radii is no grading", table.len()),
                    "give at least two radii with their factors",
                );
            }
            if let Some(pair) = table.windows(2).find(|p| p[1].0 <= p[0].0) {
                let message = format!("radius {} of the table follows {}", pair[1].0, pair[0].0);
                return wrong(message, "list the radii in ascending order");
            }
            let (first, last) = (table[0].0, table[table.len() - 1].0);
            if !(first <= from && last >= to) {
                let message = format!(
                    "the table reaches from {first} to {last}, the layer from {from} to {to}"
                );
                return wrong(message, "give factors for the whole layer");
            }
            if let Some((radius, factor)) = table.iter().find(|t| !(t.1 > 0.0 && t.1.is_finite())) {
                let message = format!("the factor {factor} at radius {radius} must be positive");
                return wrong(message, "");
            }
        }
        let mut start = from;
        for (end, factor) in self.parts(from, to, bore) {
            for radius in [start, end] {
                let value = factor.at((radius / bore).ln(), bore);
                if !(value > 0.0 && value.is_finite()) {
                    let message = format!("the factor on the moduli is {value} at radius {radius}");
                    return wrong(message, "choose a weaker grading");
                }
            }
            start = end;
        }
        Ok(())
    }
}
