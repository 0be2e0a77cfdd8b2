//! The wall in its reference state, and its panels with collocation nodes.
//!
//! `X = ln(R/A)`, `s = (R/A)^n` with n = 2 for the tube and 3 for the sphere. Panels break at the interfaces of layers,
//! so that which law acts is a property of the panel and never a comparison of radii.

use crate::materials::Compressible;
use crate::numerics::Collocation;
use nalgebra::DMatrix;
use std::sync::Arc;

/// Widest panel in X: 1 + kap/s has its zeros at |Im X| = pi/2, so that 20 nodes miss 2e-15.
const PANEL: f64 = 1.2;

/// What closes on itself in the hoop direction.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Shape {
    Tube,
    Sphere,
}

impl Shape {
    /// n of the header.
    pub fn power(self) -> f64 {
        match self {
            Self::Tube => 2.0,
            Self::Sphere => 3.0,
        }
    }
}

/// One layer, between two places in X.
#[derive(Debug, Clone)]
pub(super) struct Layer {
    pub from: f64,
    pub to: f64,
    pub law: Compressible,
}

#[derive(Debug, Clone)]
pub(super) struct Wall {
    pub shape: Shape,
    pub inner: f64,
    pub outer: f64,
    pub layers: Vec<Layer>,
}

impl Wall {
    /// From the radius of the bore and the outer radius and law of each layer, in ascending order.
    pub fn new(shape: Shape, inner: f64, layers: &[(f64, Compressible)]) -> Self {
        let mut from = 0.0;
        let mut outer = inner;
        let mut all = Vec::with_capacity(layers.len());
        for (radius, law) in layers {
            outer = *radius;
            let to = ((outer - inner) / inner).ln_1p();
            let law = law.clone();
            all.push(Layer { from, to, law });
            from = to;
        }
        Self {
            shape,
            inner,
            outer,
            layers: all,
        }
    }

    /// H = ln(B/A).
    pub fn span(&self) -> f64 {
        self.layers.last().map_or(0.0, |l| l.to)
    }

    /// s - 1 at X.
    pub fn swell(&self, x: f64) -> f64 {
        (self.shape.power() * x).exp_m1()
    }

    /// The largest shear modulus: what stresses are scaled with.
    pub fn modulus(&self) -> f64 {
        let all = self.layers.iter().map(|l| l.law.shear_modulus());
        all.fold(0.0, f64::max)
    }

    /// What pressures are scaled with: a thin wall carries in proportion to its thickness.
    pub fn pressure_scale(&self) -> f64 {
        self.modulus() * self.span().min(1.0)
    }

    /// Panels of at most [`PANEL`], broken at the interfaces.
    pub fn panels(&self) -> Vec<Panel> {
        let mut panels = Vec::new();
        for (layer, l) in self.layers.iter().enumerate() {
            let count = ((l.to - l.from) / PANEL).ceil().max(1.0);
            let at = |i: f64| l.from + (l.to - l.from) * i / count;
            for i in 0..count as usize {
                let (from, to) = (at(i as f64), at(i as f64 + 1.0));
                panels.push(Panel { from, to, layer });
            }
        }
        panels
    }
}

/// A piece of one layer.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Panel {
    pub from: f64,
    pub to: f64,
    pub layer: usize,
}

impl Panel {
    /// X to -1..1.
    pub fn local(&self, x: f64) -> f64 {
        ((x - self.from) - (self.to - x)) / (self.to - self.from)
    }

    /// Both parts of a panel cut at `x`.
    pub fn cut(self, x: f64) -> [Self; 2] {
        [Self { to: x, ..self }, Self { from: x, ..self }]
    }
}

/// A collocation node.
#[derive(Debug, Clone, Copy)]
pub(super) struct Node {
    pub x: f64,
    pub s: f64,
    /// s - 1.
    pub swell: f64,
    /// Of the integral over the wall in X.
    pub weight: f64,
    pub layer: usize,
}

/// Nodes and integration matrices of the whole wall.
#[derive(Debug, Clone)]
pub(super) struct Mesh {
    pub wall: Arc<Wall>,
    pub rule: Arc<Collocation>,
    pub panels: Vec<Panel>,
    pub nodes: Vec<Node>,
    /// Row i: weights of the integral from the bore to node i.
    pub forward: DMatrix<f64>,
    /// Row i: weights of the integral from node i to the outer wall.
    pub backward: DMatrix<f64>,
}

impl Mesh {
    pub fn new(wall: &Arc<Wall>, rule: &Arc<Collocation>, panels: Vec<Panel>) -> Self {
        let n = rule.len();
        let mut nodes = Vec::with_capacity(n * panels.len());
        for panel in &panels {
            let half = 0.5 * (panel.to - panel.from);
            for (t, w) in rule.pairs() {
                let x = if *t < 0.0 {
                    panel.from + half * (1.0 + t)
                } else {
                    panel.to - half * (1.0 - t)
                };
                let swell = wall.swell(x);
                nodes.push(Node {
                    x,
                    s: 1.0 + swell,
                    swell,
                    weight: half * w,
                    layer: panel.layer,
                });
            }
        }
        let matrix = |within: &dyn Fn(usize, usize) -> f64,
                      whole: &dyn Fn(usize, usize) -> bool| {
            DMatrix::from_fn(nodes.len(), nodes.len(), |i, j| {
                let (here, there) = (i / n, j / n);
                if here == there {
                    let panel = &panels[here];
                    0.5 * (panel.to - panel.from) * within(i % n, j % n)
                } else if whole(here, there) {
                    nodes[j].weight
                } else {
                    0.0
                }
            })
        };
        let forward = matrix(&|i, j| rule.forward(i, j), &|here, there| there < here);
        let backward = matrix(&|i, j| rule.backward(i, j), &|here, there| there > here);
        Self {
            wall: wall.clone(),
            rule: rule.clone(),
            panels,
            nodes,
            forward,
            backward,
        }
    }

    /// Number of nodes.
    pub fn len(&self) -> usize {
        self.nodes.len()
    }

    /// The law at a node.
    pub fn law(&self, node: &Node) -> &Compressible {
        &self.wall.layers[node.layer].law
    }

    /// The share of nodal values that belongs to panel `p`.
    pub fn part<'a>(&self, values: &'a [f64], p: usize) -> &'a [f64] {
        let n = self.rule.len();
        &values[p * n..(p + 1) * n]
    }

    /// The interpolant of nodal values at `x` of a layer.
    pub fn value(&self, values: &[f64], x: f64, layer: usize) -> f64 {
        let of_layer = self
            .panels
            .iter()
            .enumerate()
            .filter(|(_, p)| p.layer == layer);
        let mut found = 0;
        for (i, panel) in of_layer {
            found = i;
            if x <= panel.to {
                break;
            }
        }
        let t = self.panels[found].local(x);
        self.rule.value(self.part(values, found), t)
    }

    /// The last Legendre coefficients of nodal values in panel `p`.
    pub fn tail(&self, values: &[f64], p: usize) -> f64 {
        self.rule.tail(self.part(values, p))
    }
}
