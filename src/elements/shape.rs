//! The shapes of the exchange format and their tables: node order, sides, middle nodes.
//!
//! Node order is that of the open VTK file formats (linear, quadratic, biquadratic and triquadratic cells):
//! corners, then edge middles, then face middles, then the centre. It was compared with the parametric
//! coordinates of VTK 9 (tests/oracles/elements).
//!
//! Wedges: the triangle of nodes 1 2 3, seen with the right hand rule, points towards nodes 4 5 6. That is what
//! VTK's parametric coordinates and nearly all solvers mean; the prose of its linear wedge says the opposite.

/// An element shape.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Shape {
    Tri3,
    Tri6,
    Quad4,
    Quad8,
    Quad9,
    Tet4,
    Tet10,
    Hex8,
    Hex20,
    Hex27,
    Wedge6,
    Wedge15,
}

/// The reference domain of a shape.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Domain {
    Triangle,
    Square,
    Tetrahedron,
    Cube,
    Wedge,
}

type Mids = &'static [(usize, &'static [usize])];
type Sides = &'static [&'static [usize]];

const TRIANGLE: [[f64; 3]; 3] = [[0.0, 0.0, 0.0], [1.0, 0.0, 0.0], [0.0, 1.0, 0.0]];
const SQUARE: [[f64; 3]; 4] = [
    [-1.0, -1.0, 0.0],
    [1.0, -1.0, 0.0],
    [1.0, 1.0, 0.0],
    [-1.0, 1.0, 0.0],
];
const TETRAHEDRON: [[f64; 3]; 4] = [
    [0.0, 0.0, 0.0],
    [1.0, 0.0, 0.0],
    [0.0, 1.0, 0.0],
    [0.0, 0.0, 1.0],
];
const CUBE: [[f64; 3]; 8] = [
    [-1.0, -1.0, -1.0],
    [1.0, -1.0, -1.0],
    [1.0, 1.0, -1.0],
    [-1.0, 1.0, -1.0],
    [-1.0, -1.0, 1.0],
    [1.0, -1.0, 1.0],
    [1.0, 1.0, 1.0],
    [-1.0, 1.0, 1.0],
];
const WEDGE: [[f64; 3]; 6] = [
    [0.0, 0.0, -1.0],
    [1.0, 0.0, -1.0],
    [0.0, 1.0, -1.0],
    [0.0, 0.0, 1.0],
    [1.0, 0.0, 1.0],
    [0.0, 1.0, 1.0],
];

const TRI6_MIDS: Mids = &[(3, &[0, 1]), (4, &[1, 2]), (5, &[2, 0])];
const QUAD8_MIDS: Mids = &[(4, &[0, 1]), (5, &[1, 2]), (6, &[2, 3]), (7, &[3, 0])];
const QUAD9_MIDS: Mids = &[
    (4, &[0, 1]),
    (5, &[1, 2]),
    (6, &[2, 3]),
    (7, &[3, 0]),
    (8, &[0, 1, 2, 3]),
];
const TET10_MIDS: Mids = &[
    (4, &[0, 1]),
    (5, &[1, 2]),
    (6, &[2, 0]),
    (7, &[0, 3]),
    (8, &[1, 3]),
    (9, &[2, 3]),
];
const HEX20_MIDS: Mids = &[
    (8, &[0, 1]),
    (9, &[1, 2]),
    (10, &[2, 3]),
    (11, &[3, 0]),
    (12, &[4, 5]),
    (13, &[5, 6]),
    (14, &[6, 7]),
    (15, &[7, 4]),
    (16, &[0, 4]),
    (17, &[1, 5]),
    (18, &[2, 6]),
    (19, &[3, 7]),
];
const HEX27_MIDS: Mids = &[
    (8, &[0, 1]),
    (9, &[1, 2]),
    (10, &[2, 3]),
    (11, &[3, 0]),
    (12, &[4, 5]),
    (13, &[5, 6]),
    (14, &[6, 7]),
    (15, &[7, 4]),
    (16, &[0, 4]),
    (17, &[1, 5]),
    (18, &[2, 6]),
    (19, &[3, 7]),
    (20, &[0, 4, 7, 3]),
    (21, &[1, 2, 6, 5]),
    (22, &[0, 1, 5, 4]),
    (23, &[3, 7, 6, 2]),
    (24, &[0, 3, 2, 1]),
    (25, &[4, 5, 6, 7]),
    (26, &[0, 1, 2, 3, 4, 5, 6, 7]),
];
const WEDGE15_MIDS: Mids = &[
    (6, &[0, 1]),
    (7, &[1, 2]),
    (8, &[2, 0]),
    (9, &[3, 4]),
    (10, &[4, 5]),
    (11, &[5, 3]),
    (12, &[0, 3]),
    (13, &[1, 4]),
    (14, &[2, 5]),
];

/// Corners, followed by the middle nodes as means of their corners.
const fn with_mids<const N: usize>(corners: &[[f64; 3]], mids: Mids) -> [[f64; 3]; N] {
    let mut nodes = [[0.0; 3]; N];
    let mut i = 0;
    while i < corners.len() {
        nodes[i] = corners[i];
        i += 1;
    }
    let mut m = 0;
    while m < mids.len() {
        let (node, of) = mids[m];
        let mut j = 0;
        while j < of.len() {
            let mut axis = 0;
            while axis < 3 {
                nodes[node][axis] += corners[of[j]][axis] / of.len() as f64;
                axis += 1;
            }
            j += 1;
        }
        m += 1;
    }
    nodes
}

static TRI6: [[f64; 3]; 6] = with_mids(&TRIANGLE, TRI6_MIDS);
static QUAD8: [[f64; 3]; 8] = with_mids(&SQUARE, QUAD8_MIDS);
static QUAD9: [[f64; 3]; 9] = with_mids(&SQUARE, QUAD9_MIDS);
static TET10: [[f64; 3]; 10] = with_mids(&TETRAHEDRON, TET10_MIDS);
static HEX20: [[f64; 3]; 20] = with_mids(&CUBE, HEX20_MIDS);
static HEX27: [[f64; 3]; 27] = with_mids(&CUBE, HEX27_MIDS);
static WEDGE15: [[f64; 3]; 15] = with_mids(&WEDGE, WEDGE15_MIDS);

const TRI3_SIDES: Sides = &[&[0, 1], &[1, 2], &[2, 0]];
const TRI6_SIDES: Sides = &[&[0, 1, 3], &[1, 2, 4], &[2, 0, 5]];
const QUAD4_SIDES: Sides = &[&[0, 1], &[1, 2], &[2, 3], &[3, 0]];
const QUAD8_SIDES: Sides = &[&[0, 1, 4], &[1, 2, 5], &[2, 3, 6], &[3, 0, 7]];
const TET4_SIDES: Sides = &[&[0, 1, 3], &[1, 2, 3], &[2, 0, 3], &[0, 2, 1]];
const TET10_SIDES: Sides = &[
    &[0, 1, 3, 4, 8, 7],
    &[1, 2, 3, 5, 9, 8],
    &[2, 0, 3, 6, 7, 9],
    &[0, 2, 1, 6, 5, 4],
];
const HEX8_SIDES: Sides = &[
    &[0, 4, 7, 3],
    &[1, 2, 6, 5],
    &[0, 1, 5, 4],
    &[3, 7, 6, 2],
    &[0, 3, 2, 1],
    &[4, 5, 6, 7],
];
const HEX20_SIDES: Sides = &[
    &[0, 4, 7, 3, 16, 15, 19, 11],
    &[1, 2, 6, 5, 9, 18, 13, 17],
    &[0, 1, 5, 4, 8, 17, 12, 16],
    &[3, 7, 6, 2, 19, 14, 18, 10],
    &[0, 3, 2, 1, 11, 10, 9, 8],
    &[4, 5, 6, 7, 12, 13, 14, 15],
];
const HEX27_SIDES: Sides = &[
    &[0, 4, 7, 3, 16, 15, 19, 11, 20],
    &[1, 2, 6, 5, 9, 18, 13, 17, 21],
    &[0, 1, 5, 4, 8, 17, 12, 16, 22],
    &[3, 7, 6, 2, 19, 14, 18, 10, 23],
    &[0, 3, 2, 1, 11, 10, 9, 8, 24],
    &[4, 5, 6, 7, 12, 13, 14, 15, 25],
];
const WEDGE6_SIDES: Sides = &[
    &[0, 2, 1],
    &[3, 4, 5],
    &[0, 1, 4, 3],
    &[1, 2, 5, 4],
    &[2, 0, 3, 5],
];
const WEDGE15_SIDES: Sides = &[
    &[0, 2, 1, 8, 7, 6],
    &[3, 4, 5, 9, 10, 11],
    &[0, 1, 4, 3, 6, 13, 9, 12],
    &[1, 2, 5, 4, 7, 14, 10, 13],
    &[2, 0, 3, 5, 8, 12, 11, 14],
];

impl Shape {
    /// Every shape, in the order of the exchange format.
    pub const ALL: [Shape; 12] = [
        Self::Tri3,
        Self::Tri6,
        Self::Quad4,
        Self::Quad8,
        Self::Quad9,
        Self::Tet4,
        Self::Tet10,
        Self::Hex8,
        Self::Hex20,
        Self::Hex27,
        Self::Wedge6,
        Self::Wedge15,
    ];

    /// The word of the exchange format, e.g. `quad9`.
    pub fn name(self) -> &'static str {
        match self {
            Self::Tri3 => "tri3",
            Self::Tri6 => "tri6",
            Self::Quad4 => "quad4",
            Self::Quad8 => "quad8",
            Self::Quad9 => "quad9",
            Self::Tet4 => "tet4",
            Self::Tet10 => "tet10",
            Self::Hex8 => "hex8",
            Self::Hex20 => "hex20",
            Self::Hex27 => "hex27",
            Self::Wedge6 => "wedge6",
            Self::Wedge15 => "wedge15",
        }
    }

    /// The shape of that name; exact spelling.
    pub fn from_name(name: &str) -> Option<Shape> {
        Self::ALL.into_iter().find(|shape| shape.name() == name)
    }

    pub(crate) fn domain(self) -> Domain {
        match self {
            Self::Tri3 | Self::Tri6 => Domain::Triangle,
            Self::Quad4 | Self::Quad8 | Self::Quad9 => Domain::Square,
            Self::Tet4 | Self::Tet10 => Domain::Tetrahedron,
            Self::Hex8 | Self::Hex20 | Self::Hex27 => Domain::Cube,
            Self::Wedge6 | Self::Wedge15 => Domain::Wedge,
        }
    }

    /// 2 or 3.
    pub fn dimension(self) -> usize {
        match self.domain() {
            Domain::Triangle | Domain::Square => 2,
            Domain::Tetrahedron | Domain::Cube | Domain::Wedge => 3,
        }
    }

    /// Number of nodes.
    pub fn node_count(self) -> usize {
        self.reference_nodes().len()
    }

    /// Number of corner nodes; they come first.
    pub fn corner_count(self) -> usize {
        self.corners().len()
    }

    /// Every polynomial of this total degree is interpolated exactly: 1 or 2.
    pub fn degree(self) -> usize {
        if self.mid_nodes().is_empty() { 1 } else { 2 }
    }

    fn corners(self) -> &'static [[f64; 3]] {
        match self.domain() {
            Domain::Triangle => &TRIANGLE,
            Domain::Square => &SQUARE,
            Domain::Tetrahedron => &TETRAHEDRON,
            Domain::Cube => &CUBE,
            Domain::Wedge => &WEDGE,
        }
    }

    /// Reference coordinates of the nodes; the third is 0 in two dimensions.
    pub fn reference_nodes(self) -> &'static [[f64; 3]] {
        match self {
            Self::Tri6 => &TRI6,
            Self::Quad8 => &QUAD8,
            Self::Quad9 => &QUAD9,
            Self::Tet10 => &TET10,
            Self::Hex20 => &HEX20,
            Self::Hex27 => &HEX27,
            Self::Wedge15 => &WEDGE15,
            Self::Tri3 | Self::Quad4 | Self::Tet4 | Self::Hex8 | Self::Wedge6 => self.corners(),
        }
    }

    /// Each node that is no corner, with the corners whose mean it is in the reference element.
    pub fn mid_nodes(self) -> &'static [(usize, &'static [usize])] {
        match self {
            Self::Tri6 => TRI6_MIDS,
            Self::Quad8 => QUAD8_MIDS,
            Self::Quad9 => QUAD9_MIDS,
            Self::Tet10 => TET10_MIDS,
            Self::Hex20 => HEX20_MIDS,
            Self::Hex27 => HEX27_MIDS,
            Self::Wedge15 => WEDGE15_MIDS,
            Self::Tri3 | Self::Quad4 | Self::Tet4 | Self::Hex8 | Self::Wedge6 => &[],
        }
    }

    /// Local nodes of each side (edge in 2D, face in 3D): corners first, counter-clockwise seen from outside
    /// (in 2D: with the body on the left), then the middle nodes.
    pub fn sides(self) -> &'static [&'static [usize]] {
        match self {
            Self::Tri3 => TRI3_SIDES,
            Self::Tri6 => TRI6_SIDES,
            Self::Quad4 => QUAD4_SIDES,
            Self::Quad8 | Self::Quad9 => QUAD8_SIDES,
            Self::Tet4 => TET4_SIDES,
            Self::Tet10 => TET10_SIDES,
            Self::Hex8 => HEX8_SIDES,
            Self::Hex20 => HEX20_SIDES,
            Self::Hex27 => HEX27_SIDES,
            Self::Wedge6 => WEDGE6_SIDES,
            Self::Wedge15 => WEDGE15_SIDES,
        }
    }

    /// Area or volume of the reference element.
    pub fn reference_measure(self) -> f64 {
        match self.domain() {
            Domain::Triangle => 0.5,
            Domain::Square => 4.0,
            Domain::Tetrahedron => 1.0 / 6.0,
            Domain::Cube => 8.0,
            Domain::Wedge => 1.0,
        }
    }

    /// The middle of the reference element.
    pub fn centre(self) -> [f64; 3] {
        match self.domain() {
            Domain::Triangle => [1.0 / 3.0, 1.0 / 3.0, 0.0],
            Domain::Square | Domain::Cube => [0.0; 3],
            Domain::Tetrahedron => [0.25; 3],
            Domain::Wedge => [1.0 / 3.0, 1.0 / 3.0, 0.0],
        }
    }

    /// True if `xi` is in the reference element, or outside by no more than `slack`. False for NaN.
    pub fn contains(self, xi: [f64; 3], slack: f64) -> bool {
        let [a, b, c] = xi;
        let in_interval = |t: f64| t.abs() <= 1.0 + slack;
        let in_triangle = a >= -slack && b >= -slack && a + b <= 1.0 + slack;
        match self.domain() {
            Domain::Triangle => in_triangle,
            Domain::Square => in_interval(a) && in_interval(b),
            Domain::Tetrahedron => {
                a >= -slack && b >= -slack && c >= -slack && a + b + c <= 1.0 + slack
            }
            Domain::Cube => in_interval(a) && in_interval(b) && in_interval(c),
            Domain::Wedge => in_triangle && in_interval(c),
        }
    }
}
