//! Meshes that resolve a state: which panels are too wide, where fibres begin to act, and moving a state to another mesh.

use super::integrals::{BORE, EXTRA, STRETCH};
use super::mesh::{Mesh, Panel};
use super::states::{Bore, NodeState, Place};
use super::system::states;
use crate::materials::Compressible;
use crate::numerics::find_root;
use nalgebra::DVector;

/// The unknowns on another mesh of the same wall.
pub(super) fn transfer(from: &Mesh, y: &DVector<f64>, to: &Mesh) -> DVector<f64> {
    let values = &y.as_slice()[..from.len()];
    let n = to.len();
    DVector::from_fn(n + EXTRA, |i, _| match to.nodes.get(i) {
        Some(node) => from.value(values, node.x, node.layer),
        None => y[from.len() + i - n],
    })
}

/// Panels whose last Legendre coefficients of Lam, stt-srr, szz-srr or f are not below `tail` of the largest of them all,
/// and the worst share.
pub(super) fn coarse_panels(mesh: &Mesh, y: &DVector<f64>, tail: f64) -> (Vec<usize>, f64) {
    let Some(states) = states(mesh, y) else {
        return (Vec::new(), f64::INFINITY);
    };
    let list = |pick: fn(&NodeState) -> f64| states.iter().map(pick).collect::<Vec<_>>();
    let all = [
        y.as_slice()[..mesh.len()].to_vec(),
        list(|s| s.hoop.value),
        list(|s| s.axial.value),
        list(|s| s.push.value),
    ];
    let loss = states.iter().fold(0.0_f64, |m, s| m.max(s.loss));
    let largest = all.iter().flatten().fold(0.0_f64, |m, v| m.max(v.abs()));
    if largest == 0.0 {
        return (Vec::new(), 0.0);
    }
    let share = |p: usize| {
        all.iter()
            .fold(0.0_f64, |m, values| m.max(mesh.tail(values, p)))
            / largest
    };
    let shares: Vec<f64> = (0..mesh.panels.len()).map(share).collect();
    let coarse = |p: &usize| shares[*p] > tail * (1.0 + loss);
    let worst = shares.iter().fold(0.0_f64, |m, s| m.max(*s));
    ((0..shares.len()).filter(coarse).collect(), worst)
}

/// The panels with those of the list cut in the middle.
pub(super) fn halved(panels: &[Panel], which: &[usize]) -> Vec<Panel> {
    let parts = panels.iter().enumerate().flat_map(|(i, panel)| {
        if which.contains(&i) {
            panel.cut(0.5 * (panel.from + panel.to)).to_vec()
        } else {
            vec![*panel]
        }
    });
    parts.collect()
}

/// The panels cut at places of their layers; cuts that fall on an end are left out.
pub(super) fn cut_at(panels: &[Panel], cuts: &[(usize, f64)]) -> Vec<Panel> {
    let mut parts = Vec::with_capacity(panels.len() + cuts.len());
    for panel in panels {
        let mut rest = *panel;
        for (_, x) in cuts.iter().filter(|(layer, _)| *layer == panel.layer) {
            // slivers have no nodes to speak of
            let least = 1e-12 * (rest.to - rest.from);
            if *x > rest.from + least && *x < rest.to - least {
                let [before, after] = rest.cut(*x);
                parts.push(before);
                rest = after;
            }
        }
        parts.push(rest);
    }
    parts
}

/// Places where a law has a kink, ascending in each layer.
pub(super) fn kinks(mesh: &Mesh, y: &DVector<f64>) -> Vec<(usize, f64)> {
    let mut found = Vec::new();
    for (layer, l) in mesh.wall.layers.iter().enumerate() {
        let Compressible::Split { law, .. } = &l.law else {
            continue;
        };
        let count = law.kinks(y[mesh.len() + STRETCH]).len();
        let first = found.len();
        for which in 0..count {
            found.extend(
                crossings(mesh, y, layer, which)
                    .into_iter()
                    .map(|x| (layer, x)),
            );
        }
        found[first..].sort_by(|a, b| a.1.total_cmp(&b.1));
    }
    found
}

/// Places in a layer where d passes its `which`-th kink.
fn crossings(mesh: &Mesh, y: &DVector<f64>, layer: usize, which: usize) -> Vec<f64> {
    let Some(states) = states(mesh, y) else {
        return Vec::new();
    };
    let grown: Vec<f64> = states.iter().map(|s| s.grown).collect();
    let lam = &y.as_slice()[..mesh.len()];
    let wall = &mesh.wall;
    let law = &wall.layers[layer].law;
    let mut places = Vec::new();
    let mut before: Option<(f64, f64)> = None;
    let of_layer = mesh
        .panels
        .iter()
        .enumerate()
        .filter(|(_, p)| p.layer == layer);
    for (p, panel) in of_layer {
        let above = |x: f64| {
            let t = panel.local(x);
            let swell = wall.swell(x);
            let place = Place {
                s: 1.0 + swell,
                swell,
                grown: mesh.rule.value(mesh.part(&grown, p), t),
                bore: Bore::of(y[mesh.len() + BORE]),
                e: y[mesh.len() + STRETCH],
                lam: mesh.rule.value(mesh.part(lam, p), t),
            };
            let motion = place.motion(wall.shape, law.volume_modulus());
            match law {
                Compressible::Split { law, .. } => {
                    let kink = law.kinks(motion.e - motion.log_volume / 3.0);
                    kink.get(which).map_or(f64::NAN, |k| motion.d - k)
                }
                Compressible::Coupled(_) => f64::NAN,
            }
        };
        let width = panel.to - panel.from;
        let steps = 24;
        for i in 0..=steps {
            let x = if i == steps {
                panel.to
            } else {
                panel.from + width * f64::from(i) / f64::from(steps)
            };
            let value = above(x);
            match before {
                // both sides of a panel's end: the kink is there
                Some((b, v)) if b == x && v * value <= 0.0 && (v != 0.0 || value != 0.0) => {
                    places.push(x)
                }
                Some((b, v)) if b < x && v * value < 0.0 => {
                    places.extend(find_root(b, x, above).ok())
                }
                _ => {}
            }
            before = Some((x, value));
        }
    }
    places
}
