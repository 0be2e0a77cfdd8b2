//! What the convergence plot draws: the curves of a case.

use super::svg::{BLUE, BROWN, INK, INK3, Shape};
use crate::verdict::outcome::{
    Bound, CaseOutcome, CriterionOutcome, Judged, Kind, LevelValue, MeasureSeries,
};

/// Series drawn when they are there; judged ones are added up to four.
const USUAL: [&str; 4] = [
    "displacement-L2",
    "stress-L2",
    "strain-energy-error",
    "pressure-L2",
];

/// One quantity: what is drawn of a series.
pub struct Curve<'a> {
    pub series: &'a MeasureSeries,
    pub colour: &'static str,
    pub shape: Shape,
    /// (h, error), coarsest first; only what a logarithm can show.
    pub points: Vec<(f64, f64)>,
    /// (h, limit) of the error criterion on it.
    pub limit: Option<(f64, f64)>,
}

/// The quantities of a case that can be drawn, at most four.
pub fn curves(case: &CaseOutcome) -> Vec<Curve<'_>> {
    let looks = [
        (BLUE, Shape::Circle),
        (BROWN, Shape::Square),
        (INK, Shape::Triangle),
        (INK3, Shape::Lozenge),
    ];
    let judged = case
        .criteria
        .iter()
        .filter(|c| c.judged != Judged::Value)
        .map(|c| c.measure.as_str());
    let mut out: Vec<Curve> = Vec::new();
    for measure in USUAL.into_iter().chain(judged) {
        let series = case
            .measures
            .iter()
            .find(|s| s.kind == Kind::Relative && s.measure == measure);
        let known = out.iter().any(|curve| curve.series.measure == measure);
        if let Some(series) = series.filter(|_| !known)
            && let Some(&(colour, shape)) = looks.get(out.len())
        {
            let points = points(case, series);
            let limit = limit(case, series);
            out.push(Curve {
                series,
                colour,
                shape,
                points,
                limit,
            });
        }
    }
    // a curve without a single mark would be a label without a curve
    out.retain(|curve| !curve.points.is_empty());
    out
}

fn points(case: &CaseOutcome, series: &MeasureSeries) -> Vec<(f64, f64)> {
    let pair = |value: &LevelValue| {
        let h = case
            .levels
            .iter()
            .find(|level| level.level == value.level)?
            .h?;
        value.value.filter(|v| *v > 0.0 && h > 0.0).map(|v| (h, v))
    };
    series.values.iter().filter_map(pair).collect()
}

fn limit(case: &CaseOutcome, series: &MeasureSeries) -> Option<(f64, f64)> {
    let judged = |c: &&CriterionOutcome| {
        c.judged == Judged::Error
            && c.bound == Bound::AtMost
            && c.measure == series.measure
            && c.limit > 0.0
    };
    let criterion = case.criteria.iter().find(judged)?;
    let level = case
        .levels
        .iter()
        .find(|level| Some(&level.level) == criterion.level.as_ref())?;
    Some((level.h.filter(|h| *h > 0.0)?, criterion.limit))
}

/// Height of a polyline at `px`, if it goes that far.
pub fn height_at(pixels: &[(f64, f64)], px: f64) -> Option<f64> {
    let pair = pixels
        .windows(2)
        .find(|pair| (pair[0].0..=pair[1].0).contains(&px))?;
    let share = (px - pair[0].0) / (pair[1].0 - pair[0].0);
    Some(pair[0].1 + share * (pair[1].1 - pair[0].1))
}
