"""Compute the result sets of the suite `locking-element` with scikit-fem.

Invented scenario: the elastic seat ring of a dosing pump, modelled with an element that is not fit for nearly
incompressible material. The results are deliberately bad for large Poisson's ratios: the suite shows that they are
found out. One quarter of the ring is modelled, with symmetry on X = 0 and on Y = 0.

Continuum problem: small-strain isotropic elasticity in plane strain under a dead pressure on the bore. Find u such that
for all test functions v

    int 2 mu eps(u):eps(v) + lambda div u div v dA + pressure int_bore N . v dS = 0
    mu = E / (2 (1 + nu)),    lambda = E nu / ((1 + nu) (1 - 2 nu))

Discretisation: quad4 displacement only, full 2x2 integration, straight sides. As nu tends to 1/2, lambda grows without
bound and forces div u = 0 at every one of the four points, which leaves almost no freedom to deform: volumetric locking.
"""

import argparse
import gzip
from pathlib import Path

import numpy as np
from scipy.sparse.linalg import splu
from skfem import Basis, BilinearForm, ElementQuad1, ElementVector, FacetBasis, LinearForm, MeshQuad
from skfem.helpers import ddot, div, dot, sym_grad

HERE = Path(__file__).resolve().parent

INNER_RADIUS, OUTER_RADIUS = 6.0, 12.0        # mm
YOUNGS_MODULUS = 1.2                          # MPa
INNER_PRESSURE = 0.05                         # MPa
MATERIALS = {"nu-030": 0.3, "nu-049": 0.49, "nu-0499": 0.499, "nu-04999": 0.4999, "nu-049999": 0.49999}
LEVELS = (1, 2, 3, 4)                         # each level halves the elements of the one before in both directions
COARSEST = (2, 3)                             # elements (radial, hoop) at level 1
PLAIN_TEXT_LEVELS = (1, 2)                    # finer levels are written as .csv.gz


def quarter_ring(n_radial, n_hoop):
    """Mesh of straight-sided quad4 elements on a quarter ring, nodes on true circles."""
    rectangle = MeshQuad.init_tensor(np.linspace(INNER_RADIUS, OUTER_RADIUS, n_radial + 1),
                                     np.linspace(0.0, 1.0, n_hoop + 1))
    radius, fraction = rectangle.p                                   # fraction of the right angle
    angle = 0.5 * np.pi * fraction
    x, y = radius * np.cos(angle), radius * np.sin(angle)
    x[fraction == 1.0] = 0.0                                         # cos(pi/2) is 6e-17 in floating point
    return MeshQuad(np.array([x, y]), rectangle.t)


@BilinearForm
def stiffness(u, v, w):
    return 2 * w["mu"] * ddot(sym_grad(u), sym_grad(v)) + w["lam"] * div(u) * div(v)


@LinearForm
def bore_load(v, w):
    """Virtual work of the pressure: it pushes against the outward normal of the body."""
    return -w["pressure"] * dot(w.n, v)


class Ring:
    """The solved problem of one Poisson's ratio on one mesh."""

    def __init__(self, nu, level):
        self.mu = YOUNGS_MODULUS / (2 * (1 + nu))
        self.lam = YOUNGS_MODULUS * nu / ((1 + nu) * (1 - 2 * nu))
        self.mesh = mesh = quarter_ring(*(n * 2 ** (level - 1) for n in COARSEST))
        element = ElementVector(ElementQuad1())
        self.basis = Basis(mesh, element, intorder=3)                # 2x2 Gauss points
        at_bore = np.hypot(*mesh.p) < INNER_RADIUS * (1 + 1e-9)
        bore = FacetBasis(mesh, element, facets=np.flatnonzero(at_bore[mesh.facets].all(axis=0)), intorder=3)
        K = stiffness.assemble(self.basis, mu=self.mu, lam=self.lam).tocsc()
        f = bore_load.assemble(bore, pressure=INNER_PRESSURE)
        # symmetry: u_x = 0 on X = 0, u_y = 0 on Y = 0
        ux, uy = self.basis.nodal_dofs
        held = np.concatenate([ux[mesh.p[0] == 0.0], uy[mesh.p[1] == 0.0]])
        free = np.setdiff1d(np.arange(self.basis.N), held)
        K, f = K[free][:, free], f[free]
        self.u = self.basis.zeros()
        self.u[free] = splu(K).solve(f)
        self.residual = np.linalg.norm(K @ self.u[free] - f) / np.linalg.norm(f)

    def nodes(self):
        """Columns node, X, Y, ux, uy."""
        ux, uy = self.basis.nodal_dofs
        return [np.arange(1, self.mesh.nvertices + 1), *self.mesh.p, self.u[ux], self.u[uy]]

    def fields(self):
        """Small strain, stress (xx, yy, zz, xy), div u and energy density at the Gauss points."""
        strain = np.asarray(sym_grad(self.basis.interpolate(self.u)))
        dilatation = strain[0, 0] + strain[1, 1]
        sxx = 2 * self.mu * strain[0, 0] + self.lam * dilatation
        syy = 2 * self.mu * strain[1, 1] + self.lam * dilatation
        szz = self.lam * dilatation
        sxy = 2 * self.mu * strain[0, 1]
        W = 0.5 * (sxx * strain[0, 0] + syy * strain[1, 1] + 2 * sxy * strain[0, 1])
        return (sxx, syy, szz, sxy), dilatation, W

    def points(self):
        """Columns element, point, X, Y, weight, sxx, syy, szz, sxy, p, J, W at the 2x2 Gauss points."""
        (sxx, syy, szz, sxy), dilatation, W = self.fields()
        n_elements, n_points = W.shape
        x = self.basis.global_coordinates().value
        values = [x[0], x[1], self.basis.dx, sxx, syy, szz, sxy, -(sxx + syy + szz) / 3, 1 + dilatation, W]
        return ([np.repeat(np.arange(1, n_elements + 1), n_points), np.tile(np.arange(1, n_points + 1), n_elements)]
                + [v.ravel() for v in values])

    def totals(self):
        """Numbers of the modelled quarter, per unit length."""
        (_, _, szz, _), dilatation, W = self.fields()
        dA = self.basis.dx
        return {"strain_energy": np.sum(W * dA), "axial_stretch": 1.0, "axial_force": np.sum(szz * dA),
                "volume_reference": np.sum(dA), "volume_current": np.sum((1 + dilatation) * dA),
                "load_factor": 1.0, "iterations": 1, "residual": self.residual}


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


def make(material, level, out):
    """Solve one case on one mesh and write its result set."""
    ring = Ring(MATERIALS[material], level)
    folder = Path(out) / material / f"level-{level}"
    folder.mkdir(parents=True, exist_ok=True)
    for old in folder.glob("*.csv*"):
        old.unlink()
    compress = level not in PLAIN_TEXT_LEVELS
    title = (f"Invented scenario: seat ring of a dosing pump, {material}, level {level}; "
             "lengths mm, stresses MPa; scikit-fem 11.0.0")
    write_table(folder / "nodes.csv", compress, title, ["node", "X", "Y", "ux", "uy"], zip(*ring.nodes()))
    write_table(folder / "elements.csv", compress, title, ["element", "shape", "n1", "n2", "n3", "n4"],
                # the mesh runs clockwise; the exchange format wants a positive Jacobian
                [(e, "quad4", *nodes[[0, 3, 2, 1]]) for e, nodes in enumerate(ring.mesh.t.T + 1, start=1)])
    write_table(folder / "points.csv", compress, title,
                ["element", "point", "X", "Y", "weight", "sxx", "syy", "szz", "sxy", "p", "J", "W"],
                zip(*ring.points()))
    write_table(folder / "totals.csv", False, title, ["quantity", "value"], ring.totals().items())


def main():
    parser = argparse.ArgumentParser(description="Compute the result sets of the suite locking-element.")
    parser.add_argument("--out", type=Path, default=HERE / "results", help="folder for the result sets")
    parser.add_argument("--levels", type=int, nargs="+", choices=LEVELS, default=LEVELS)
    parser.add_argument("--cases", nargs="+", choices=list(MATERIALS), default=list(MATERIALS), metavar="CASE",
                        help="such as nu-030")
    parser.add_argument("--verify", action="store_true",
                        help="compare the written files with the exact solution and print errors and orders")
    arguments = parser.parse_args()
    for material in arguments.cases:
        for level in arguments.levels:
            make(material, level, arguments.out)
        print(f"{material}: levels {' '.join(map(str, arguments.levels))} written", flush=True)
    if arguments.verify:
        import check_results
        check_results.report(arguments.out, arguments.cases, arguments.levels)


if __name__ == "__main__":
    main()
