//! The equations of the wall at given unknowns, with their exact derivatives, and Newton's method.
//!
//! Unknowns: Lam at every node, then g, e, Pi, Po (a pressure is an unknown of its own: what fixes it is an equation).
//! ```text
//! node i    srr(law) + Po + int_X^H f dX = 0             srr from the outer wall inwards
//! balance   int_0^H f dX = Pi - Po
//! axial     e given | F = 0 | N given                    sphere: none, e = 0
//! outer     Po, or its nominal value, is given
//! control   what is prescribed inside: g, the load, the stretch of the bore, or Pi = Po
//! ```

use super::integrals::{BORE, Conditions, EXTRA, INNER, Integrals, OUTER, STRETCH};
use super::mesh::Mesh;
use super::states::{Bore, NodeState, Place};
use nalgebra::{DMatrix, DVector, Dyn, LU};

/// Residuals, derivatives and node states at given unknowns.
pub(super) struct System {
    pub residual: DVector<f64>,
    pub jacobian: DMatrix<f64>,
    /// What the round-off of each residual is measured against.
    pub size: DVector<f64>,
    pub states: Vec<NodeState>,
}

/// Node states at the unknowns, or `None` where one is not finite.
pub(super) fn states(mesh: &Mesh, y: &DVector<f64>) -> Option<Vec<NodeState>> {
    let n = mesh.len();
    let shape = mesh.wall.shape;
    let growth = mesh.nodes.iter().enumerate().map(|(i, node)| {
        let modulus = mesh.law(node).volume_modulus();
        shape.power() * node.s * (y[i] / modulus).exp_m1()
    });
    let grown = &mesh.forward * DVector::from_iterator(n, growth);
    let bore = Bore::of(y[n + BORE]);
    let place = |i: usize| Place {
        s: mesh.nodes[i].s,
        swell: mesh.nodes[i].swell,
        grown: grown[i],
        bore,
        e: y[n + STRETCH],
        lam: y[i],
    };
    (0..n)
        .map(|i| place(i).state(shape, mesh.law(&mesh.nodes[i])))
        .collect()
}

/// All equations at `y`; `None` where a state is not finite.
pub(super) fn system(mesh: &Mesh, given: &Conditions, y: &DVector<f64>) -> Option<System> {
    let n = mesh.len();
    let states = states(mesh, y)?;
    let mut out = System {
        residual: DVector::zeros(n + EXTRA),
        jacobian: DMatrix::zeros(n + EXTRA, n + EXTRA),
        size: DVector::zeros(n + EXTRA),
        states: Vec::new(),
    };
    {
        let all = Integrals::new(mesh, y, &states);
        node_rows(&all, &mut out);
        let mut balance = all.balance();
        balance.value -= y[n + INNER] - y[n + OUTER];
        balance.size += y[n + INNER].abs() + y[n + OUTER].abs();
        balance.by[n + INNER] -= 1.0;
        balance.by[n + OUTER] += 1.0;
        let outer = (
            all.outer_load(given.dead).less(given.outer),
            mesh.wall.modulus(),
        );
        let rows = [
            (balance, mesh.wall.pressure_scale()),
            all.axial(given),
            outer,
            all.control(given),
        ];
        for (i, (row, scale)) in rows.into_iter().enumerate() {
            out.residual[n + i] = row.value / scale;
            out.size[n + i] = row.size / scale;
            out.jacobian.set_row(n + i, &(row.by / scale).transpose());
        }
    }
    out.states = states;
    Some(out)
}

/// The node equations, divided by the modulus.
fn node_rows(all: &Integrals, out: &mut System) {
    let mesh = all.mesh;
    let n = mesh.len();
    let scale = 1.0 / mesh.wall.modulus();
    let list =
        |pick: &dyn Fn(&NodeState) -> f64| DVector::from_iterator(n, all.states.iter().map(pick));
    let by_kap = list(&|s| s.push.by_kap);
    let outer = all.extra(OUTER);
    let behind = &mesh.backward * list(&|s| s.push.value);
    let behind_size = &mesh.backward * list(&|s| s.push.value.abs() * (1.0 + s.loss));
    let behind_by_kap = &mesh.backward * &by_kap;
    let behind_by_e = &mesh.backward * list(&|s| s.push.by_e);
    let mut carried = mesh.forward.clone();
    for mut column in carried.column_iter_mut() {
        column.component_mul_assign(&by_kap);
    }
    let through = &mesh.backward * carried;
    // column by column, as matrices are stored
    let radial_by_kap = list(&|s| s.radial.by_kap);
    for j in 0..n {
        let (growth, by_lam) = (scale * all.growth[j], scale * all.states[j].push.by_lam);
        let columns = [&mesh.forward, &through, &mesh.backward].map(|m| m.column(j));
        let [forward, through, backward] = columns;
        for i in 0..n {
            let kap = radial_by_kap[i] * forward[i] + through[i];
            out.jacobian[(i, j)] = kap * growth + backward[i] * by_lam;
        }
    }
    let swell = all.extra(BORE).exp();
    for (i, s) in all.states.iter().enumerate() {
        out.residual[i] = scale * (s.radial.value + outer + behind[i]);
        out.size[i] = scale * (s.size() + outer.abs() + behind_size[i].abs());
        out.jacobian[(i, i)] += scale * s.radial.by_lam;
        out.jacobian[(i, n + BORE)] = scale * (s.radial.by_kap + behind_by_kap[i]) * swell;
        out.jacobian[(i, n + STRETCH)] = scale * (s.radial.by_e + behind_by_e[i]);
        out.jacobian[(i, n + OUTER)] = scale;
    }
}

/// What Newton's method found: the unknowns, and the states and derivatives one tiny step before them.
pub(super) struct Found {
    pub y: DVector<f64>,
    pub states: Vec<NodeState>,
    pub lu: LU<f64, Dyn, Dyn>,
    pub steps: usize,
}

/// A step against the unknowns: pressures and Lam together, g and e together, each no smaller than what the strain of the
/// wall makes of the modulus, so that a zero among them is no trouble.
fn relative(mesh: &Mesh, step: &DVector<f64>, y: &DVector<f64>) -> f64 {
    let n = mesh.len();
    let (modulus, thin) = (mesh.wall.modulus(), mesh.wall.pressure_scale());
    let largest = |v: &DVector<f64>, places: std::ops::Range<usize>| {
        places.fold(0.0_f64, |m, i| m.max(v[i].abs()))
    };
    let [nodes, strains, loads] = [0..n, n + BORE..n + INNER, n + INNER..n + EXTRA];
    let load = largest(y, loads.clone());
    let strain = largest(y, strains.clone()).max(load / modulus);
    let stress = largest(y, nodes.clone()).max(modulus * strain);
    let ratio = |a: f64, b: f64| if a == 0.0 { 0.0 } else { a / b };
    ratio(largest(step, strains), strain)
        .max(ratio(largest(step, nodes), stress))
        .max(ratio(largest(step, loads), load.max(thin * strain)))
}

/// Newton's method from `y`, full steps, until a step is below `tolerance` of the unknowns, or, with a tolerance of zero,
/// until steps stop shrinking. `None` when it does not settle in a few steps or leaves the range of the law.
pub(super) fn newton(
    mesh: &Mesh,
    given: &Conditions,
    mut y: DVector<f64>,
    tolerance: f64,
) -> Option<Found> {
    const MOST_STEPS: usize = 9;
    let n = mesh.len();
    let mut last = f64::INFINITY;
    for steps in 1..=MOST_STEPS {
        let system = system(mesh, given, &y)?;
        let lu = system.jacobian.lu();
        let step = lu.solve(&system.residual)?;
        if !step.iter().all(|v| v.is_finite())
            || step[n + BORE].abs() + step[n + STRETCH].abs() > 1.0
        {
            return None;
        }
        let next = &y - &step;
        let size = relative(mesh, &step, &next);
        let stalled = size < 1e-8 && size >= 0.5 * last;
        if !stalled {
            y = next;
        }
        if size <= tolerance || stalled {
            return Some(Found {
                y,
                states: system.states,
                lu,
                steps,
            });
        }
        last = size;
    }
    None
}
