"""Compute the result sets of the suite `dosing-pump-hose` with scikit-fem.

Invented scenario: the silicone or filled-rubber wall of a dosing-pump hose, inflated by its own pumping pressure.
One quarter of the ring is modelled, with symmetry on X = 0 and on Y = 0.

Continuum problem
-----------------
F = [F2 0; 0 lz] with the in-plane part F2 = I + du/dX and one axial stretch lz for the whole section. With D = det F2
and cof F2 = [[F22, -F21], [-F12, F11]], the Mooney-Rivlin energy per reference volume is

    W = c10 (I1 - 3) + c01 (I2 - 3),    I1 = F2:F2 + lz^2,    I2 = D^2 + lz^2 F2:F2

(neo-Hookean: c10 = mu / 2, c01 = 0). The material is incompressible, J = lz D = 1, with the multiplier m. Find u, m
(and lz, if the section is free to change its length) so that for all test functions v, q:

    int P2 : grad v dA + pressure lz int_bore (cof F2 N) . v dS = 0     follower pressure: acts on the deformed wall
    int q (lz D - 1) dA                                         = 0     incompressibility
    int P33 dA                                                  = 0     no net axial force (generalized plane strain)

    P2  = dW/dF2 - m lz cof F2 = 2 c10 F2 + 2 c01 (D cof F2 + lz^2 F2) - m lz cof F2
    P33 = dW/dlz - m D         = 2 c10 lz + 2 c01 lz F2:F2             - m D

All integrals are over the reference section. Plane strain fixes lz = 1; int P33 dA is then the axial reaction.

Discretisation
--------------
Taylor-Hood: quad9 displacement, continuous quad4 multiplier, 3x3 Gauss points, isoparametric geometry with all nodes
on true circles. Newton's method with the full consistent tangent, in equal load steps, down to round-off.
"""

import argparse
import gzip
import itertools
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from scipy.sparse import bmat, csc_matrix
from scipy.sparse.linalg import splu
from skfem import (Basis, BilinearForm, ElementQuad1, ElementQuad2, ElementVector, FacetBasis, LinearForm, MeshQuad,
                   MeshQuad2)
from skfem.helpers import ddot, dot, grad, mul

HERE = Path(__file__).resolve().parent

INNER_RADIUS = 8.0                            # mm
OUTER_RADII = (10, 12, 16)                    # mm
INNER_PRESSURE = 0.03                         # MPa
MATERIALS = {                                 # name -> (c10, c01) in MPa
    "soft": (0.20, 0.0),                      # neo-Hookean, mu = 2 c10 = 0.40
    "filled": (0.15, 0.05),                   # Mooney-Rivlin
}
ENDS = ("plane-strain", "generalized-plane-strain")
LEVELS = (1, 2, 3, 4)                         # each level halves the elements of the one before in both directions
COARSEST = {10: (1, 4), 12: (1, 2), 16: (2, 2)}             # outer radius -> elements (radial, hoop) at level 1
LOAD_STEPS = 5
NEWTON_TOLERANCE = 1e-12                      # residual over applied load
CASES_WITH_HISTORY = ("plane-strain-soft-12",)              # these carry every load step, the others the last one
PLAIN_TEXT_LEVELS = (1, 2)                    # finer levels are written as .csv.gz


@dataclass(frozen=True)
class Case:
    """One wall: how its ends are held, its material, its outer radius."""

    ends: str
    material: str
    outer_radius: int

    @property
    def name(self):
        return f"{self.ends}-{self.material}-{self.outer_radius}"


def all_cases():
    """The twelve cases of the suite, in a fixed order."""
    return [Case(*values) for values in itertools.product(ENDS, MATERIALS, OUTER_RADII)]


# ---------------------------------------------------------------------------------------------------------------------
# Geometry


def quarter_ring(inner, outer, n_radial, n_hoop):
    """Mesh of quad9 elements on a quarter ring, with the corner, mid-side and centre nodes on true circles."""
    radii = np.linspace(inner, outer, n_radial + 1)
    angles = np.linspace(0.0, 1.0, n_hoop + 1)                       # as fractions of the right angle
    rectangle = MeshQuad2.from_mesh(MeshQuad.init_tensor(radii, angles))
    radius, fraction = rectangle.doflocs
    angle = 0.5 * np.pi * fraction
    x, y = radius * np.cos(angle), radius * np.sin(angle)
    x[fraction == 1.0] = 0.0                                         # cos(pi/2) is 6e-17 in floating point
    return MeshQuad2(np.array([x, y]), rectangle.t)


# ---------------------------------------------------------------------------------------------------------------------
# Weak form: `w` carries the current F2 ("F"), multiplier ("m") and the constants c10, c01, lz, pressure


def cof(A):
    """Cofactor of a field of 2x2 matrices; linear in A."""
    return np.array([[A[1, 1], -A[1, 0]], [-A[0, 1], A[0, 0]]])


def det(A):
    return A[0, 0] * A[1, 1] - A[0, 1] * A[1, 0]


def in_plane_stress(F, m, w):
    """P2, the in-plane part of the first Piola-Kirchhoff stress."""
    lz = w["lz"]
    return 2 * w["c10"] * F + 2 * w["c01"] * (det(F) * cof(F) + lz**2 * F) - m * lz * cof(F)


def axial_stress(F, m, w):
    """P33, the axial component of the first Piola-Kirchhoff stress."""
    return 2 * w["c10"] * w["lz"] + 2 * w["c01"] * w["lz"] * ddot(F, F) - m * det(F)


def energy(F, w):
    """Strain energy per reference volume."""
    lz, squares = w["lz"], ddot(F, F)
    return w["c10"] * (squares + lz**2 - 3) + w["c01"] * (det(F) ** 2 + lz**2 * squares - 3)


# Residuals

@LinearForm
def equilibrium(v, w):
    return ddot(in_plane_stress(w["F"], w["m"], w), grad(v))


@LinearForm
def incompressibility(q, w):
    return -q * (w["lz"] * det(w["F"]) - 1.0)


@LinearForm
def bore_pressure(v, w):
    return w["pressure"] * w["lz"] * dot(mul(cof(w["F"]), w.n), v)


# Derivatives: with respect to u (direction H = grad du), to the multiplier, and to lz

@BilinearForm
def equilibrium_u(du, v, w):
    F, H, lz = w["F"], grad(du), w["lz"]
    dP = (2 * (w["c10"] + w["c01"] * lz**2) * H
          + 2 * w["c01"] * (ddot(cof(F), H) * cof(F) + det(F) * cof(H))
          - w["m"] * lz * cof(H))
    return ddot(dP, grad(v))


@BilinearForm
def incompressibility_u(du, q, w):
    """Its transpose is the derivative of the equilibrium with respect to the multiplier."""
    return -q * w["lz"] * ddot(cof(w["F"]), grad(du))


@BilinearForm
def bore_pressure_u(du, v, w):
    return w["pressure"] * w["lz"] * dot(mul(cof(grad(du)), w.n), v)


@LinearForm
def equilibrium_lz(v, w):
    """Also the derivative of int P33 dA with respect to u."""
    F = w["F"]
    return ddot(4 * w["c01"] * w["lz"] * F - w["m"] * cof(F), grad(v))


@LinearForm
def bore_pressure_lz(v, w):
    return w["pressure"] * dot(mul(cof(w["F"]), w.n), v)


@LinearForm
def incompressibility_lz(q, w):
    """Also the derivative of int P33 dA with respect to the multiplier."""
    return -q * det(w["F"])


# ---------------------------------------------------------------------------------------------------------------------
# Solution


class Wall:
    """The discrete problem of one case on one mesh. State: u, m (nodal values) and lz."""

    def __init__(self, case, level):
        self.case = case
        self.free_length = case.ends == "generalized-plane-strain"
        self.c10, self.c01 = MATERIALS[case.material]
        n_radial, n_hoop = (n * 2 ** (level - 1) for n in COARSEST[case.outer_radius])
        mesh = quarter_ring(INNER_RADIUS, float(case.outer_radius), n_radial, n_hoop)
        # 3x3 Gauss points integrate order 5 in each direction
        self.displacement = Basis(mesh, ElementVector(ElementQuad2()), intorder=5)
        self.multiplier = self.displacement.with_element(ElementQuad1())
        # bore edges: both end nodes at the inner radius
        at_bore = np.hypot(*mesh.p) < INNER_RADIUS * (1 + 1e-9)
        bore = np.flatnonzero(at_bore[mesh.facets].all(axis=0))
        assert len(bore) == n_hoop
        self.bore = FacetBasis(mesh, ElementVector(ElementQuad2()), facets=bore, intorder=5)
        # symmetry: u_x = 0 on X = 0, u_y = 0 on Y = 0 (entries of doflocs are repeated for the two components)
        location = self.displacement.doflocs
        dofs = self.displacement.element_dofs
        is_x = np.zeros(self.displacement.N, dtype=bool)
        is_x[dofs[0::2]] = True
        held = np.where(is_x, location[0] == 0.0, location[1] == 0.0)
        self.free = np.flatnonzero(~held)
        # start: undeformed and free of stress, dW/dF2 = m I
        self.u = self.displacement.zeros()
        self.m = np.full(self.multiplier.N, 2 * self.c10 + 4 * self.c01)
        self.lz = 1.0
        self.pressure = 0.0

    def fields(self):
        """Constants and the current F2 and multiplier at the quadrature points of the section and of the bore."""
        constants = dict(c10=self.c10, c01=self.c01, lz=self.lz, pressure=self.pressure)
        identity = np.eye(2)[:, :, None, None]
        inside = dict(constants, F=identity + self.displacement.interpolate(self.u).grad,
                      m=np.asarray(self.multiplier.interpolate(self.m)))
        on_bore = dict(constants, F=identity + self.bore.interpolate(self.u).grad)
        return inside, on_bore

    def residual(self):
        """Residual vectors (u, m, lz) and the norm of the applied load."""
        inside, on_bore = self.fields()
        load = bore_pressure.assemble(self.bore, **on_bore)[self.free]
        r_u = equilibrium.assemble(self.displacement, **inside)[self.free] + load
        r_m = incompressibility.assemble(self.multiplier, **inside)
        r_lz = np.array([self.axial_force()]) if self.free_length else np.zeros(0)
        return (r_u, r_m, r_lz), np.linalg.norm(load)

    def tangent(self):
        """Consistent tangent. Not symmetric with a free length: the pressure does no work on lz."""
        inside, on_bore = self.fields()
        free = self.free
        K_uu = (equilibrium_u.assemble(self.displacement, **inside) + bore_pressure_u.assemble(self.bore, **on_bore))
        K_mu = incompressibility_u.assemble(self.displacement, self.multiplier, **inside)[:, free]
        blocks = [[K_uu[free][:, free], K_mu.T], [K_mu, None]]
        if self.free_length:
            e_lz = equilibrium_lz.assemble(self.displacement, **inside)[free]
            b_lz = bore_pressure_lz.assemble(self.bore, **on_bore)[free]
            m_lz = incompressibility_lz.assemble(self.multiplier, **inside)
            F = inside["F"]
            axial = np.sum((2 * self.c10 + 2 * self.c01 * ddot(F, F)) * self.displacement.dx)
            blocks[0].append(csc_matrix(e_lz + b_lz).T)
            blocks[1].append(csc_matrix(m_lz).T)
            blocks.append([csc_matrix(e_lz), csc_matrix(m_lz), csc_matrix([[axial]])])
        return bmat(blocks, format="csc")

    def axial_force(self):
        """int P33 dA over the modelled quarter."""
        inside, _ = self.fields()
        return np.sum(axial_stress(inside["F"], inside["m"], inside) * self.displacement.dx)

    def solve(self, pressure, most=20):
        """Newton's method at one pressure. Returns the number of iterations and the residual over the load.

        Once the tolerance is met, one more iteration takes the residual down to round-off.
        """
        self.pressure = pressure
        converged = False
        for iteration in range(most + 1):
            parts, load = self.residual()
            r = np.concatenate(parts)
            size = np.linalg.norm(r) / load
            if converged:
                return iteration, size
            converged = size < NEWTON_TOLERANCE
            step = splu(self.tangent()).solve(-r)
            n_u, n_m = len(self.free), self.multiplier.N
            self.u[self.free] += step[:n_u]
            self.m += step[n_u:n_u + n_m]
            self.lz += step[n_u + n_m:].sum()          # empty, thus zero, in plane strain
        raise RuntimeError(f"{self.case.name}: no convergence at pressure {pressure}, residual {size:.1e}")

    # Results in the neutral format

    def nodes(self):
        """Columns node, X, Y, ux, uy; quad9 connectivity in the order of VTK's biquadratic quadrilateral.

        scikit-fem orders an element's nodes as corners, mid-sides 01 12 23 30, centre: the same order, but these
        meshes run clockwise (hoop direction first), so that it is turned round to have a positive Jacobian.
        """
        dofs = self.displacement.element_dofs               # rows: ux, uy of node 1, ux, uy of node 2, ...
        ux_dofs, first = np.unique(dofs[0::2], return_index=True)
        uy_dofs = dofs[1::2].ravel()[first]
        xy = self.displacement.doflocs[:, ux_dofs]
        number = np.arange(1, len(ux_dofs) + 1)
        counterclockwise = [0, 3, 2, 1, 7, 6, 5, 4, 8]
        connectivity = np.searchsorted(ux_dofs, dofs[0::2]).T[:, counterclockwise] + 1
        return [number, xy[0], xy[1], self.u[ux_dofs], self.u[uy_dofs]], connectivity

    def points(self):
        """Columns element, point, X, Y, weight, sxx, syy, szz, sxy, p, J, W at the 3x3 Gauss points."""
        inside, _ = self.fields()
        F, m = inside["F"], inside["m"]
        J = self.lz * det(F)
        # Cauchy stress: sigma = P F^T / J
        s = np.einsum("ik...,jk...->ij...", in_plane_stress(F, m, inside), F) / J
        szz = axial_stress(F, m, inside) * self.lz / J
        p = -(s[0, 0] + s[1, 1] + szz) / 3                   # hydrostatic pressure, not the multiplier
        x = self.displacement.global_coordinates().value
        n_elements, n_points = J.shape
        element = np.repeat(np.arange(1, n_elements + 1), n_points)
        point = np.tile(np.arange(1, n_points + 1), n_elements)
        values = [x[0], x[1], self.displacement.dx, s[0, 0], s[1, 1], szz, s[0, 1], p, J, energy(F, inside)]
        return [element, point] + [v.ravel() for v in values]

    def totals(self, iterations, residual):
        """Numbers of the modelled quarter, per unit reference length."""
        inside, _ = self.fields()
        F, dA = inside["F"], self.displacement.dx
        return {
            "strain_energy": np.sum(energy(F, inside) * dA),
            "axial_stretch": self.lz,
            "axial_force": self.axial_force(),
            "volume_reference": np.sum(dA),
            "volume_current": np.sum(self.lz * det(F) * dA),
            "load_factor": self.pressure / INNER_PRESSURE,
            "iterations": iterations,
            "residual": residual,
        }


# ---------------------------------------------------------------------------------------------------------------------
# Files


def write_table(path, compress, title, header, rows):
    """Write one CSV table; gzip without time and file name, so that equal numbers make equal bytes."""
    lines = [f"# {title}", ",".join(header)]
    lines += [",".join(v if isinstance(v, str) else f"{v:.17g}" for v in row) for row in rows]
    data = ("\n".join(lines) + "\n").encode()
    if compress:
        with open(path.with_name(path.name + ".gz"), "wb") as out:
            with gzip.GzipFile(filename="", mode="wb", compresslevel=9, fileobj=out, mtime=0) as zipped:
                zipped.write(data)
    else:
        path.write_bytes(data)


def make(case, level, out):
    """Solve one case on one mesh and write its result set. Returns the folder."""
    wall = Wall(case, level)
    history = case.name in CASES_WITH_HISTORY
    node_rows, point_rows, total_rows = [], [], []
    for step in range(1, LOAD_STEPS + 1):
        iterations, residual = wall.solve(INNER_PRESSURE * step / LOAD_STEPS)
        if not history and step < LOAD_STEPS:
            continue
        columns, connectivity = wall.nodes()
        label = (step,) if history else ()
        node_rows += [row + label for row in zip(*columns)]
        point_rows += [row + label for row in zip(*wall.points())]
        total_rows += [row + label for row in wall.totals(iterations, residual).items()]
    element_rows = [(e, "quad9", *nodes) for e, nodes in enumerate(connectivity, start=1)]

    folder = Path(out) / case.name / f"level-{level}"
    folder.mkdir(parents=True, exist_ok=True)
    for old in folder.glob("*.csv*"):
        old.unlink()
    compress = level not in PLAIN_TEXT_LEVELS
    title = (f"Invented scenario: dosing-pump hose, {case.name}, level {level}; "
             "lengths mm, stresses MPa; scikit-fem 11.0.0")
    step_column = ["step"] if history else []
    write_table(folder / "nodes.csv", compress, title, ["node", "X", "Y", "ux", "uy"] + step_column, node_rows)
    write_table(folder / "elements.csv", compress, title,
                ["element", "shape"] + [f"n{i}" for i in range(1, 10)], element_rows)
    write_table(folder / "points.csv", compress, title,
                ["element", "point", "X", "Y", "weight", "sxx", "syy", "szz", "sxy", "p", "J", "W"] + step_column,
                point_rows)
    write_table(folder / "totals.csv", False, title, ["quantity", "value"] + step_column, total_rows)
    return folder


def main():
    names = {case.name: case for case in all_cases()}
    parser = argparse.ArgumentParser(description="Compute the result sets of the suite dosing-pump-hose.")
    parser.add_argument("--out", type=Path, default=HERE / "results", help="folder for the result sets")
    parser.add_argument("--levels", type=int, nargs="+", choices=LEVELS, default=LEVELS)
    parser.add_argument("--cases", nargs="+", choices=list(names), default=list(names), metavar="CASE",
                        help="such as plane-strain-soft-12")
    parser.add_argument("--verify", action="store_true",
                        help="compare the written files with the exact solution and print errors and orders")
    arguments = parser.parse_args()
    for name in arguments.cases:
        for level in arguments.levels:
            make(names[name], level, arguments.out)
        print(f"{name}: levels {' '.join(map(str, arguments.levels))} written", flush=True)
    if arguments.verify:
        import check_results
        check_results.report(arguments.out, [names[name] for name in arguments.cases], arguments.levels)


if __name__ == "__main__":
    main()
