//! Structured meshes of a sector of a tube, in every shape of the exchange format.
//!
//! Cells are counted in radius, angle and length; nodes are told apart by their place on a grid of twice as many
//! steps, so that a middle node is the mean of its corners there. Written for the tests: shares nothing with the
//! product but the tables of node orders.

use std::collections::BTreeMap;
use std::f64::consts::PI;
use truebore::elements::Shape;

/// What to mesh.
#[derive(Debug, Clone, Copy)]
pub struct Sector {
    pub shape: Shape,
    /// Cells in radius, angle and length; the third is ignored in two dimensions.
    pub cells: [usize; 3],
    pub inner: f64,
    pub outer: f64,
    /// Of the whole turn.
    pub share: f64,
    pub length: f64,
    /// Middle nodes on chords instead of on the circles.
    pub straight: bool,
    /// A half section in R and Z; `cells[2]` counts along Z, `shape` is of two dimensions.
    pub axisymmetric: bool,
}

impl Sector {
    /// A quarter with as many cells in radius as in angle.
    pub fn quarter(shape: Shape, inner: f64, outer: f64, cells: usize) -> Self {
        Self {
            shape,
            cells: [cells, cells, cells.div_ceil(2)],
            inner,
            outer,
            share: 0.25,
            length: 0.5 * (outer - inner),
            straight: false,
            axisymmetric: false,
        }
    }
}

/// Nodes in space (`[R, 0, Z]` where axisymmetric) and elements as indices into them.
#[derive(Debug, Clone)]
pub struct Mesh {
    pub sector: Sector,
    pub nodes: Vec<[f64; 3]>,
    pub elements: Vec<Vec<usize>>,
}

/// A place on the grid: twice the steps in radius, angle and length.
type Place = [usize; 3];

/// Corners of the elements a cell is cut into, in the order of a cube's corners.
fn parts(shape: Shape) -> &'static [&'static [usize]] {
    match shape {
        Shape::Tri3 | Shape::Tri6 => &[&[0, 1, 2], &[0, 2, 3]],
        Shape::Quad4 | Shape::Quad8 | Shape::Quad9 => &[&[0, 1, 2, 3]],
        Shape::Tet4 | Shape::Tet10 => &[
            &[0, 1, 2, 6],
            &[0, 2, 3, 6],
            &[0, 3, 7, 6],
            &[0, 7, 4, 6],
            &[0, 4, 5, 6],
            &[0, 5, 1, 6],
        ],
        Shape::Hex8 | Shape::Hex20 | Shape::Hex27 => &[&[0, 1, 2, 3, 4, 5, 6, 7]],
        Shape::Wedge6 | Shape::Wedge15 => &[&[0, 1, 2, 4, 5, 6], &[0, 2, 3, 4, 6, 7]],
    }
}

/// Corners of a cube by their steps in radius, angle and length.
const CUBE: [Place; 8] = [
    [0, 0, 0],
    [1, 0, 0],
    [1, 1, 0],
    [0, 1, 0],
    [0, 0, 1],
    [1, 0, 1],
    [1, 1, 1],
    [0, 1, 1],
];

impl Mesh {
    pub fn of(sector: Sector) -> Self {
        let mut mesh = Self {
            sector,
            nodes: Vec::new(),
            elements: Vec::new(),
        };
        let mut known = BTreeMap::new();
        let flat = sector.shape.dimension() == 2;
        // the second direction of a flat mesh is the angle, or the length of an axisymmetric one
        let layers = if flat { 1 } else { sector.cells[2] };
        let across = sector.cells[if sector.axisymmetric { 2 } else { 1 }];
        for k in 0..layers {
            for j in 0..across {
                for i in 0..sector.cells[0] {
                    for part in parts(sector.shape) {
                        let corners: Vec<Place> = part
                            .iter()
                            .map(|&c| {
                                let [a, b, c] = CUBE[c];
                                [2 * (i + a), 2 * (j + b), 2 * (k + c)]
                            })
                            .collect();
                        mesh.add(&corners, &mut known);
                    }
                }
            }
        }
        mesh
    }

    fn add(&mut self, corners: &[Place], known: &mut BTreeMap<Place, usize>) {
        let mut places = corners.to_vec();
        let mut positions: Vec<[f64; 3]> = corners.iter().map(|p| self.position(*p)).collect();
        for (_, of) in self.sector.shape.mid_nodes() {
            let place: Place = std::array::from_fn(|axis| {
                of.iter().map(|&c| places[c][axis]).sum::<usize>() / of.len()
            });
            let chord = std::array::from_fn(|axis| {
                of.iter().map(|&c| positions[c][axis]).sum::<f64>() / of.len() as f64
            });
            places.push(place);
            positions.push(if self.sector.straight {
                chord
            } else {
                self.position(place)
            });
        }
        let turn = 2 * self.sector.cells[1];
        let element = places
            .into_iter()
            .zip(positions)
            .map(|(mut place, position)| {
                if self.sector.share == 1.0 && !self.sector.axisymmetric {
                    place[1] %= turn;
                }
                *known.entry(place).or_insert_with(|| {
                    self.nodes.push(position);
                    self.nodes.len() - 1
                })
            })
            .collect();
        self.elements.push(element);
    }

    fn position(&self, [i, j, k]: Place) -> [f64; 3] {
        let s = &self.sector;
        let part = |steps: usize, cells: usize| steps as f64 / (2 * cells) as f64;
        let radius = s.inner + (s.outer - s.inner) * part(i, s.cells[0]);
        if s.axisymmetric {
            return [radius, 0.0, s.length * part(j, s.cells[2])];
        }
        let angle = 2.0 * PI * s.share * part(j, s.cells[1]);
        let z = if s.shape.dimension() == 2 {
            0.0
        } else {
            s.length * part(k, s.cells[2])
        };
        [radius * angle.cos(), radius * angle.sin(), z]
    }
}
