//! Shape functions at all points of a rule, computed once and kept flat.

use super::{Rule, Shape};

/// Values and gradients of a shape at the points of a rule, point by point.
#[derive(Debug, Clone)]
pub struct ShapeTable {
    pub shape: Shape,
    pub rule: Rule,
    values: Vec<f64>,
    gradients: Vec<[f64; 3]>,
}

impl ShapeTable {
    /// Evaluates the shape at every point of the rule.
    pub fn new(shape: Shape, rule: Rule) -> Self {
        let nodes = shape.node_count();
        let mut values = vec![0.0; nodes * rule.len()];
        let mut gradients = vec![[0.0; 3]; nodes * rule.len()];
        for (q, &xi) in rule.points.iter().enumerate() {
            shape.values(xi, &mut values[q * nodes..(q + 1) * nodes]);
            shape.gradients(xi, &mut gradients[q * nodes..(q + 1) * nodes]);
        }
        Self {
            shape,
            rule,
            values,
            gradients,
        }
    }

    /// With [`Rule::of_degree`].
    pub fn of_degree(shape: Shape, degree: usize) -> Self {
        Self::new(shape, Rule::of_degree(shape, degree))
    }

    /// Number of points.
    pub fn len(&self) -> usize {
        self.rule.len()
    }

    /// True if there are no points.
    pub fn is_empty(&self) -> bool {
        self.rule.is_empty()
    }

    /// Shape functions at point `q`, one a node.
    pub fn values(&self, q: usize) -> &[f64] {
        let nodes = self.shape.node_count();
        &self.values[q * nodes..(q + 1) * nodes]
    }

    /// Gradients at point `q`: `[i][j]` = dN_i / dxi_j.
    pub fn gradients(&self, q: usize) -> &[[f64; 3]] {
        let nodes = self.shape.node_count();
        &self.gradients[q * nodes..(q + 1) * nodes]
    }
}
