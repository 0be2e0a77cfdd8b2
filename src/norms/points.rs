//! Norms over integration points, judged as they stream by: memory grows with the walls, not with points.csv.

use super::accumulate::SquaredError;
use super::model;
use crate::exact::{ExactSolution, State};
use crate::input::Finding;
use crate::numerics::sum::CompensatedSum;
use crate::results::{Components, ModelKind, Pass, PointBlock, PointSource};
use rayon::prelude::*;

/// Rows that are read at once, and rows that one task judges. Part of the definition of the sums' last bit.
const READ: usize = 8192;
const BLOCK: usize = 512;

/// What one pass over the points gives. A quantity that is not exported stays empty.
#[derive(Debug, Clone, Default)]
pub struct PointNorms {
    pub stress: SquaredError,
    pub pressure: SquaredError,
    /// Of J, against the size of the exact J - 1.
    pub volume_change: SquaredError,
    /// Of J, against the size of the exact J: what remains where the exact volume does not change.
    pub volume_ratio: SquaredError,
    pub energy_density: SquaredError,
    pub points: u64,
    /// Sum of the weights.
    pub weight: CompensatedSum,
    /// Points outside the exact body, and the largest distance.
    pub outside: u64,
    pub outside_distance: f64,
    pub no_value: Option<String>,
    /// Points of the watched elements, by element and point number.
    pub kept: Vec<KeptPoint>,
}

/// A point that is needed after the pass: near a wall, at mid-wall, or on the profile.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct KeptPoint {
    /// Index of the element.
    pub element: u32,
    pub point: i64,
    pub radius: f64,
    pub theta: f64,
    /// Radial, hoop and axial Cauchy stress; NaN where it is not exported.
    pub computed: [f64; 3],
    pub exact: [f64; 3],
}

impl PointNorms {
    /// The norm of J and what it is relative to: where the exact volume changes, an error is judged by that change.
    pub fn volume(&self) -> (&SquaredError, &'static str) {
        match self.volume_change.finish() {
            Ok(norm) if norm.exact > 0.0 => (&self.volume_change, "relative to J - 1"),
            _ => (&self.volume_ratio, "relative to J = 1"),
        }
    }

    fn merge(&mut self, later: Self) {
        self.stress.merge(&later.stress);
        self.pressure.merge(&later.pressure);
        self.volume_change.merge(&later.volume_change);
        self.volume_ratio.merge(&later.volume_ratio);
        self.energy_density.merge(&later.energy_density);
        self.points += later.points;
        self.weight.merge(&later.weight);
        self.outside += later.outside;
        self.outside_distance = self.outside_distance.max(later.outside_distance);
        if self.no_value.is_none() {
            self.no_value = later.no_value;
        }
        self.kept.extend(later.kept);
    }
}

/// Why the exported components are not enough for a norm of stress, or `None`.
pub fn missing_components(kind: ModelKind, components: Components) -> Option<String> {
    let needed: &[usize] = match kind {
        ModelKind::Planar => &[0, 1, 3],
        ModelKind::Axisymmetric => &[0, 1, 2, 5],
        ModelKind::Solid => &[0, 1, 2, 3, 4, 5],
    };
    let missing: Vec<_> = needed
        .iter()
        .filter(|&&i| !components.has(i))
        .map(|&i| Components::NAMES[i])
        .collect();
    (!missing.is_empty())
        .then(|| format!("stress components {} are not exported", missing.join(", ")))
}

/// Reads and judges all points in one pass. `watched` says, by element index, which points to keep; `also` sees
/// every block, so that other checks need no pass of their own.
///
/// # Errors
/// What the reader finds wrong in the table.
pub fn point_norms(
    source: &PointSource,
    exact: &dyn ExactSolution,
    watched: &[bool],
    also: &mut dyn FnMut(&PointBlock),
) -> Result<(PointNorms, Pass), Vec<Finding>> {
    let mut whole = PointNorms::default();
    let pass = source.for_each_block(READ, &mut |block| {
        also(block);
        let rows: Vec<usize> = (0..block.len()).collect();
        let parts: Vec<PointNorms> = rows
            .par_chunks(BLOCK)
            .map(|rows| judge_rows(block, rows, exact, watched))
            .collect();
        for part in parts {
            whole.merge(part);
        }
        Ok(())
    })?;
    whole.kept.sort_by_key(|kept| (kept.element, kept.point));
    Ok((whole, pass))
}

fn judge_rows(
    block: &PointBlock,
    rows: &[usize],
    exact: &dyn ExactSolution,
    watched: &[bool],
) -> PointNorms {
    let mut norms = PointNorms::default();
    for &row in rows {
        let point = model::point(block.position[row]);
        norms.points += 1;
        norms
            .weight
            .add(block.weight.as_ref().map_or(0.0, |weights| weights[row]));
        let outside = exact.body().outside(&point);
        if outside > 0.0 {
            norms.outside += 1;
            norms.outside_distance = norms.outside_distance.max(outside);
        }
        match exact.at(point) {
            Ok(state) => {
                add_row(&mut norms, block, row, &state);
                if watched.get(block.element[row] as usize) == Some(&true) {
                    norms.kept.push(kept(block, row, exact, &state));
                }
            }
            Err(refusal) => {
                norms.no_value.get_or_insert_with(|| {
                    format!("integration point at R = {}: {refusal}", point.radius())
                });
            }
        }
    }
    norms
}

fn add_row(norms: &mut PointNorms, block: &PointBlock, row: usize, state: &State) {
    // without weights there is no norm, and the reader says why
    let Some(weight) = block.weight.as_ref().map(|weights| weights[row]) else {
        return;
    };
    if let Some(stress) = &block.stress {
        let (distance, size) =
            stress_squares(&stress[row], &state.stress.to_array(), block.components);
        norms.stress.add(weight, distance, size);
    }
    if let Some(j) = &block.j {
        let change = state.volume_ratio - 1.0;
        let miss = j[row] - state.volume_ratio;
        norms
            .volume_change
            .add(weight, miss * miss, change * change);
    }
    let scalars = [
        (&block.p, state.pressure, &mut norms.pressure),
        (&block.j, state.volume_ratio, &mut norms.volume_ratio),
        (&block.w, state.energy_density, &mut norms.energy_density),
    ];
    for (computed, exact, norm) in scalars {
        if let Some(computed) = computed {
            let miss = computed[row] - exact;
            norm.add(weight, miss * miss, exact * exact);
        }
    }
}

/// (|s - e|^2, |e|^2) over the exported components; a shear stands for two entries of the tensor.
pub fn stress_squares(computed: &[f64; 6], exact: &[f64; 6], components: Components) -> (f64, f64) {
    let mut sums = (0.0, 0.0);
    for i in (0..6).filter(|&i| components.has(i)) {
        let count = if i < 3 { 1.0 } else { 2.0 };
        let miss = computed[i] - exact[i];
        sums.0 += count * miss * miss;
        sums.1 += count * exact[i] * exact[i];
    }
    sums
}

fn kept(block: &PointBlock, row: usize, exact: &dyn ExactSolution, state: &State) -> KeptPoint {
    let body = exact.body();
    let point = model::point(block.position[row]);
    let computed = match &block.stress {
        None => [f64::NAN; 3],
        Some(stress) => {
            let at = model::place_of_axes(exact, point, state);
            model::local_normal_stress(&body, stress[row], at, &state.local_stress)
        }
    };
    KeptPoint {
        element: block.element[row],
        point: block.point[row],
        radius: body.radius(&point),
        theta: point.theta(),
        computed,
        exact: [
            state.local_stress.xx,
            state.local_stress.yy,
            state.local_stress.zz,
        ],
    }
}
