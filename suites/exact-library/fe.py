"""What the cases of make_results.py share: meshes, weak forms, Newton's method and the tables of a result set.

Everything is written with 3x3 matrices H[i][k] = du_i/dX_k, also in two dimensions:

    plane           H = [[ux,X ux,Y 0] [uy,X uy,Y 0] [0 0 0]]
    axisymmetric    H = [[ur,R 0 ur,Z] [0 ur/R 0] [uz,R 0 uz,Z]]    and all integrals with the factor 2 pi R
    solid           H in full

so that one residual, int P : H(v) dV, and one tangent, int H(v) : A : H(du) dV, serve all of them.
"""

import gzip

import numpy as np
from scipy.sparse.linalg import splu
from skfem import (Basis, BilinearForm, ElementHex1, ElementHexS2, ElementQuad1, ElementQuad2, ElementQuadS2,
                   ElementVector, FacetBasis, LinearForm, MeshQuad, MeshQuad2)
from skfem.helpers import grad

CORNERS = [(0, 0), (1, 0), (1, 1), (0, 1)]
SIDES = [(0.5, 0), (1, 0.5), (0.5, 1), (0, 0.5)]


def at_height(points, z):
    return [(x, y, z) for x, y in points]


# the reference nodes of each shape, in the order of the open VTK file formats
VTK_NODES = {
    "quad8": CORNERS + SIDES,
    "quad9": CORNERS + SIDES + [(0.5, 0.5)],
    "hex8": at_height(CORNERS, 0) + at_height(CORNERS, 1),
    "hex20": (at_height(CORNERS, 0) + at_height(CORNERS, 1) + at_height(SIDES, 0) + at_height(SIDES, 1)
              + at_height(CORNERS, 0.5)),
}
ELEMENTS = {"quad8": ElementQuadS2, "quad9": ElementQuad2, "hex8": ElementHex1, "hex20": ElementHexS2}
# Gauss points: 3 per direction for quadratic elements, 2 for linear ones
ORDER = {"quad8": 5, "quad9": 5, "hex8": 3, "hex20": 5}


# ---------------------------------------------------------------------------------------------------------------------
# Meshes


def quad_mesh(shape, first, second, place):
    """Elements on a grid of two parameters, `place`d in the plane, mid-side nodes on the true curves.

    scikit-fem maps its quadratic meshes by nine nodes. The centre node of a quad8 is put where its eight nodes put it, so
    that the map is its own.
    """
    grid = MeshQuad2.from_mesh(MeshQuad.init_tensor(first, second))
    places = np.array(place(*grid.doflocs))
    if shape == "quad8":
        nodes = grid.dofs.element_dofs
        places[:, nodes[8]] = 0.5 * places[:, nodes[4:8]].sum(axis=1) - 0.25 * places[:, nodes[:4]].sum(axis=1)
    return MeshQuad2(places, grid.t)


def quarter_turn(radius, share):
    """Radius and share of the right angle to X and Y; exactly zero on the cuts."""
    angle = 0.5 * np.pi * share
    return np.where(share == 1.0, 0.0, radius * np.cos(angle)), radius * np.sin(angle)


def quarter_ring(shape, inner, outer, n_radial, n_hoop):
    """The quarter of a ring between the positive axes."""
    return quad_mesh(shape, np.linspace(inner, outer, n_radial + 1), np.linspace(0.0, 1.0, n_hoop + 1), quarter_turn)


# ---------------------------------------------------------------------------------------------------------------------
# Weak forms


def matrix(u, R, kind):
    """The 3x3 matrix H of a field."""
    g = grad(u)
    zero = np.zeros_like(g[0, 0])
    if kind == "plane":
        return np.array([[g[0, 0], g[0, 1], zero], [g[1, 0], g[1, 1], zero], [zero, zero, zero]])
    if kind == "axisymmetric":
        return np.array([[g[0, 0], zero, g[0, 1]], [zero, u[0] / R, zero], [g[1, 0], zero, g[1, 1]]])
    return np.array(g)


def factor(w, kind):
    return 2 * np.pi * w.x[0] if kind == "axisymmetric" else 1.0


class Model:
    """A mesh with its displacement element: unknowns, held values, forms, and the rows of its tables."""

    def __init__(self, mesh, shape, kind="plane"):
        self.mesh, self.shape, self.kind = mesh, shape, kind
        self.dim = mesh.dim()
        self.basis = Basis(mesh, ElementVector(ELEMENTS[shape]()), intorder=ORDER[shape])
        self.u = self.basis.zeros()
        self.held = np.zeros(self.basis.N, dtype=bool)
        self.component = np.zeros(self.basis.N, dtype=int)
        for i in range(self.dim):
            self.component[self.basis.element_dofs[i::self.dim]] = i
        self.place = self.basis.doflocs
        self.points = np.asarray(self.basis.global_coordinates().value)
        self.weights = self.basis.dx * (2 * np.pi * self.points[0] if kind == "axisymmetric" else 1.0)

    def hold(self, component, where, value=0.0):
        """Gives the displacement of one component where `where` is true; `value` for each unknown, or one."""
        chosen = (self.component == component) & where
        assert chosen.any()
        self.held |= chosen
        self.u[chosen] = value[chosen] if np.ndim(value) else value

    def side(self, on, order=5):
        """The boundary facets whose corners all satisfy `on(x)`."""
        boundary = self.mesh.boundary_facets()
        corners = self.mesh.facets[:, boundary]
        facets = boundary[on(self.mesh.p[:, corners]).all(axis=0)]
        assert len(facets) > 0
        return FacetBasis(self.mesh, ElementVector(ELEMENTS[self.shape]()), facets=facets, intorder=order)

    def H(self):
        """du_i/dX_k at the quadrature points."""
        field = self.basis.interpolate(self.u)
        return matrix(field, self.points[0], self.kind)

    def inner_force(self, P):
        form = LinearForm(lambda v, w: factor(w, self.kind) * np.einsum("ik...,ik...", w["P"], matrix(v, w.x[0], self.kind)))
        return form.assemble(self.basis, P=P)

    def stiffness(self, A):
        def density(u, v, w):
            dP = np.einsum("ikjl...,jl...->ik...", w["A"], matrix(u, w.x[0], self.kind))
            return factor(w, self.kind) * np.einsum("ik...,ik...", dP, matrix(v, w.x[0], self.kind))
        return BilinearForm(density).assemble(self.basis, A=A)

    def load(self, density, basis=None):
        """int density(w) . v over the body or over a side."""
        form = LinearForm(lambda v, w: factor(w, self.kind) * sum(d * v[i] for i, d in enumerate(density(w))))
        return form.assemble(basis or self.basis)

    def body_force(self, values):
        """The load of a body force given at the quadrature points."""
        form = LinearForm(lambda v, w: factor(w, self.kind) * np.einsum("i...,i...", w["b"], v))
        return form.assemble(self.basis, b=values)

    def solve_linear(self, K, load):
        """One step from the held values. Returns the residual over the load (or over the held values' force)."""
        free = ~self.held
        lift = K @ np.where(self.held, self.u, 0.0)
        right = (load - lift)[free]
        self.u[free] = splu(K[free][:, free].tocsc()).solve(right)
        return np.linalg.norm((K @ self.u - load)[free]) / np.linalg.norm(right)

    # Rows of the tables

    def nodes(self):
        """Node numbers, places and displacements, and the connectivity in VTK's order."""
        first = self.basis.element_dofs[0::self.dim]
        unique, at = np.unique(first, return_index=True)
        columns = [np.arange(1, len(unique) + 1), *self.place[:, unique]]
        columns += [self.u[self.basis.element_dofs[i::self.dim].ravel()[at]] for i in range(self.dim)]
        return columns, np.searchsorted(unique, first).T[:, self.vtk_order()] + 1

    def vtk_order(self):
        """Local nodes in VTK's order; mirrored where scikit-fem's own order would have a negative Jacobian."""
        own = [tuple(node) for node in ELEMENTS[self.shape]().doflocs]
        order = [own.index(tuple(map(float, node))) for node in VTK_NODES[self.shape]]
        corners = self.place[:, self.basis.element_dofs[0::self.dim][order, 0]].T
        sides = [corners[i] - corners[0] for i in (1, 3, 4)[:self.dim]]
        if np.linalg.det(np.array(sides)) > 0:
            return order
        names = [tuple(node) for node in VTK_NODES[self.shape]]
        return [order[names.index((y, x, *z))] for x, y, *z in names]

    def point_rows(self, stress, J, W):
        """Rows of points.csv from the Cauchy stress (3x3), det F and the energy density at the quadrature points."""
        pairs = {"plane": [(0, 0), (1, 1), (2, 2), (0, 1)], "axisymmetric": [(0, 0), (1, 1), (2, 2), (2, 0)],
                 "solid": [(0, 0), (1, 1), (2, 2), (0, 1), (1, 2), (2, 0)]}[self.kind]
        n_elements, n_points = self.weights.shape
        element = np.repeat(np.arange(1, n_elements + 1), n_points)
        point = np.tile(np.arange(1, n_points + 1), n_elements)
        pressure = -np.trace(stress) / 3
        fields = [*self.points, self.weights, *(stress[i, k] for i, k in pairs), pressure, J, W]
        return [element, point] + [np.asarray(f).ravel() for f in fields]


HEADERS = {
    "plane": ("X,Y", "ux,uy", "sxx,syy,szz,sxy"),
    "axisymmetric": ("R,Z", "ur,uz", "srr,stt,szz,szr"),
    "solid": ("X,Y,Z", "ux,uy,uz", "sxx,syy,szz,sxy,syz,szx"),
}


def newton(model, stress, tangent, load=None, start=None, tolerance=1e-12, most=25):
    """Newton's method; `stress(F)`, `tangent(F)` of the law, `load(model)` the outer force and its derivative.

    Once the tolerance is met, one more iteration takes the residual down to round-off. Returns iterations and residual,
    the latter over the largest inner force.
    """
    free = ~model.held
    converged = False
    for iteration in range(most + 1):
        F = np.eye(3)[:, :, None, None] + model.H()
        inner = model.inner_force(stress(F))
        outer, outer_u = load(model) if load else (np.zeros_like(inner), 0)
        r = (inner - outer)[free]
        size = np.abs(r).max() / max(np.abs(inner).max(), 1e-300)
        if converged:
            return iteration, size
        converged = iteration > 0 and size < tolerance
        K = model.stiffness(tangent(F)) - outer_u
        model.u[free] -= splu(K[free][:, free].tocsc()).solve(r)
    raise RuntimeError(f"no convergence, residual {size:.1e}")


# ---------------------------------------------------------------------------------------------------------------------
# Files


def write_table(path, compress, title, header, rows):
    """Write one CSV table; gzip without time and file name, so that equal numbers make equal bytes."""
    lines = [f"# {title}", header]
    lines += [",".join(v if isinstance(v, str) else f"{v:.17g}" for v in row) for row in rows]
    data = ("\n".join(lines) + "\n").encode()
    if compress:
        with open(path.with_name(path.name + ".gz"), "wb") as out:
            with gzip.GzipFile(filename="", mode="wb", compresslevel=9, fileobj=out, mtime=0) as zipped:
                zipped.write(data)
    else:
        path.write_bytes(data)


def write(folder, title, model, stress, J, W, totals, compress):
    """Writes the result set of a solved model."""
    folder.mkdir(parents=True, exist_ok=True)
    for old in folder.glob("*.csv*"):
        old.unlink()
    places, moves, stresses = HEADERS[model.kind]
    columns, connectivity = model.nodes()
    write_table(folder / "nodes.csv", compress, title, f"node,{places},{moves}", zip(*columns))
    names = ",".join(f"n{i}" for i in range(1, connectivity.shape[1] + 1))
    rows = [(e, model.shape, *nodes) for e, nodes in enumerate(connectivity, start=1)]
    write_table(folder / "elements.csv", compress, title, f"element,shape,{names}", rows)
    rows = zip(*model.point_rows(stress, J, W))
    write_table(folder / "points.csv", compress, title, f"element,point,{places},weight,{stresses},p,J,W", rows)
    totals = {"strain_energy": np.sum(W * model.weights), "load_factor": 1, **totals}
    write_table(folder / "totals.csv", False, title, "quantity,value", totals.items())
