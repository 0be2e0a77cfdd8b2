//! Structured meshes in every shape of the exchange format: a sector of a tube, or any grid of cells bent by a map, and
//! several of them put together.
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
    pub shape: Shape,
    pub axisymmetric: bool,
    /// Of the whole section.
    pub share: f64,
    pub length: f64,
    pub nodes: Vec<[f64; 3]>,
    pub elements: Vec<Vec<usize>>,
}

/// From a place on the unit cube to one in space.
pub type Bend<'a> = &'a dyn Fn([f64; 3]) -> [f64; 3];

/// Cells before they are bent.
struct Grid<'a> {
    cells: [usize; 3],
    bend: Bend<'a>,
    straight: bool,
    /// The second direction closes on itself.
    closed: bool,
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
        let bend = |[i, j, k]: [f64; 3]| {
            let radius = sector.inner + (sector.outer - sector.inner) * i;
            if sector.axisymmetric {
                return [radius, 0.0, sector.length * j];
            }
            let angle = 2.0 * PI * sector.share * j;
            let flat = sector.shape.dimension() == 2;
            let z = if flat { 0.0 } else { sector.length * k };
            [radius * angle.cos(), radius * angle.sin(), z]
        };
        let across = if sector.axisymmetric { 2 } else { 1 };
        let grid = Grid {
            cells: [sector.cells[0], sector.cells[across], sector.cells[2]],
            bend: &bend,
            straight: sector.straight,
            closed: sector.share == 1.0 && !sector.axisymmetric,
        };
        Self {
            axisymmetric: sector.axisymmetric,
            share: sector.share,
            length: sector.length,
            ..Self::gridded(sector.shape, &grid)
        }
    }

    /// Cells of the unit cube, or of the unit square, bent.
    pub fn bent(shape: Shape, cells: [usize; 3], bend: Bend) -> Self {
        let grid = Grid {
            cells,
            bend,
            straight: false,
            closed: false,
        };
        Self::gridded(shape, &grid)
    }

    fn gridded(shape: Shape, grid: &Grid) -> Self {
        let mut mesh = Self {
            shape,
            axisymmetric: false,
            share: 1.0,
            length: 1.0,
            nodes: Vec::new(),
            elements: Vec::new(),
        };
        let mut known = BTreeMap::new();
        // the second direction of a flat mesh is the angle, or the length of an axisymmetric one
        let layers = if shape.dimension() == 2 {
            1
        } else {
            grid.cells[2]
        };
        for k in 0..layers {
            for j in 0..grid.cells[1] {
                for i in 0..grid.cells[0] {
                    for part in parts(shape) {
                        let corners: Vec<Place> = part
                            .iter()
                            .map(|&c| {
                                let [a, b, c] = CUBE[c];
                                [2 * (i + a), 2 * (j + b), 2 * (k + c)]
                            })
                            .collect();
                        mesh.add(&corners, grid, &mut known);
                    }
                }
            }
        }
        mesh
    }

    fn add(&mut self, corners: &[Place], grid: &Grid, known: &mut BTreeMap<Place, usize>) {
        let position = |place: Place| {
            (grid.bend)(std::array::from_fn(|axis| {
                place[axis] as f64 / (2 * grid.cells[axis]) as f64
            }))
        };
        let mut places = corners.to_vec();
        let mut positions: Vec<[f64; 3]> = corners.iter().map(|p| position(*p)).collect();
        for (_, of) in self.shape.mid_nodes() {
            let place: Place = std::array::from_fn(|axis| {
                of.iter().map(|&c| places[c][axis]).sum::<usize>() / of.len()
            });
            let chord = std::array::from_fn(|axis| {
                of.iter().map(|&c| positions[c][axis]).sum::<f64>() / of.len() as f64
            });
            places.push(place);
            positions.push(if grid.straight {
                chord
            } else {
                position(place)
            });
        }
        let element = places
            .into_iter()
            .zip(positions)
            .map(|(mut place, position)| {
                if grid.closed {
                    place[1] %= 2 * grid.cells[1];
                }
                *known.entry(place).or_insert_with(|| {
                    self.nodes.push(position);
                    self.nodes.len() - 1
                })
            })
            .collect();
        self.elements.push(element);
    }

    /// Several meshes as one: nodes at the same place are the same node.
    pub fn joined(meshes: &[Mesh]) -> Self {
        let mut joined = Self {
            nodes: Vec::new(),
            elements: Vec::new(),
            ..meshes[0].clone()
        };
        let mut known: BTreeMap<[i64; 3], usize> = BTreeMap::new();
        for mesh in meshes {
            let places: Vec<usize> = mesh
                .nodes
                .iter()
                .map(|at| {
                    let key = at.map(|x| (x * 1e8).round() as i64);
                    *known.entry(key).or_insert_with(|| {
                        joined.nodes.push(*at);
                        joined.nodes.len() - 1
                    })
                })
                .collect();
            let elements = mesh.elements.iter();
            joined
                .elements
                .extend(elements.map(|nodes| nodes.iter().map(|&n| places[n]).collect::<Vec<_>>()));
        }
        joined
    }

    /// Several meshes in one file, each with nodes of its own.
    pub fn apart(meshes: &[Mesh]) -> Self {
        let mut whole = Self {
            nodes: Vec::new(),
            elements: Vec::new(),
            ..meshes[0].clone()
        };
        for mesh in meshes {
            let before = whole.nodes.len();
            let elements = mesh.elements.iter();
            whole
                .elements
                .extend(elements.map(|nodes| nodes.iter().map(|n| n + before).collect::<Vec<_>>()));
            whole.nodes.extend(&mesh.nodes);
        }
        whole
    }

    /// Without the elements whose mean place is refused, and without nodes that belong to none.
    pub fn keep(&self, wanted: impl Fn([f64; 3]) -> bool) -> Self {
        let mean = |nodes: &Vec<usize>| {
            let sum = |axis: usize| nodes.iter().map(|&n| self.nodes[n][axis]).sum::<f64>();
            std::array::from_fn(|axis| sum(axis) / nodes.len() as f64)
        };
        let kept: Vec<_> = self.elements.iter().filter(|e| wanted(mean(e))).collect();
        let mut place = BTreeMap::new();
        let mut nodes = Vec::new();
        let elements = kept.into_iter().map(|element| {
            let renumbered = element.iter().map(|&n| {
                *place.entry(n).or_insert_with(|| {
                    nodes.push(self.nodes[n]);
                    nodes.len() - 1
                })
            });
            renumbered.collect()
        });
        Self {
            elements: elements.collect(),
            nodes,
            ..self.clone()
        }
    }

    /// Every node moved.
    pub fn moved(mut self, to: impl Fn([f64; 3]) -> [f64; 3]) -> Self {
        self.nodes.iter_mut().for_each(|at| *at = to(*at));
        self
    }

    /// Declared as this share of the whole, and this long.
    pub fn with(mut self, share: f64, length: f64) -> Self {
        (self.share, self.length) = (share, length);
        self
    }
}
