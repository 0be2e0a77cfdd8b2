"""Norms of known errors on small curved and straight meshes, integrated by scikit-fem.

Writes one result set in the exchange format per mesh (``<mesh>/nodes.csv``, ``elements.csv``, ``points.csv``) and
``norm_values.csv`` beside this script.

Body    quarter of a ring, A = 1, B = 2; in 3D with axial length 0.5, axial stretch 1.
Exact   neo-Hookean tube in plane strain, mu = 1, Pi = 0.428228409096502 (inner stretch 1.5). Where a straight side
        cuts the bore or bulges inside it, the formula is continued.
Given   nodal displacement = exact + a smooth error of about 1e-2; at integration points Cauchy stress, p, J and W =
        exact + smooth errors, each field with its own, so that p is not -tr(sigma)/3 of the given stress.
Norms   displacement: integrals by Gauss or Gauss-Jacobi product rules of high order, twice, with two orders.
        Fields at points: sums over the given points with the given weights.

Everything is integrated twice by different code: by scikit-fem from its own mesh objects, and from the CSV files as
written, in VTK node order, with shape functions obtained by inverting a monomial matrix at the VTK nodes.
"""

import csv
import itertools
from pathlib import Path

import numpy as np
import skfem
from mpmath import findroot, log, mp, mpf
from scipy.special import roots_jacobi

HERE = Path(__file__).parent
A, B, MU, PI, HEIGHT = 1.0, 2.0, 1.0, 0.428228409096502, 0.5


# ---------------------------------------------------------------- the exact field

def inner_radius():
    """a with ln(la/lb) + (lb^-2 - la^-2)/2 = Pi/mu, solved at 40 digits."""
    mp.dps = 40

    def miss(a):
        lb = ((mpf(B) ** 2 + a**2 - mpf(A) ** 2) ** 0.5) / B
        return log(a / A / lb) + (lb**-2 - (a / A) ** -2) / 2 - mpf(PI) / MU

    return float(findroot(miss, mpf("1.5")))


BORE = inner_radius()


def exact_displacement(X):
    """u (dim, ...) at X (dim, ...); the axial component is zero."""
    R = np.hypot(X[0], X[1])
    lt = np.sqrt(BORE**2 - A**2 + R**2) / R
    u = np.zeros_like(X)
    u[:2] = (lt - 1) * X[:2]
    return u


def exact_gradient(X):
    """du/dX (dim, dim, ...); first index the component, second the direction."""
    dim = X.shape[0]
    R = np.hypot(X[0], X[1])
    lt = np.sqrt(BORE**2 - A**2 + R**2) / R
    er, et = np.array([X[0], X[1]]) / R, np.array([-X[1], X[0]]) / R
    G = np.zeros((dim, dim) + X.shape[1:])
    G[:2, :2] = np.einsum("i...,j...->ij...", er, er) / lt + np.einsum("i...,j...->ij...", et, et) * lt
    for i in range(2):
        G[i, i] -= 1
    return G


def exact_fields(X):
    """Dictionary of Cauchy stress components, p, J, W at X."""
    R = np.hypot(X[0], X[1])
    lt = np.sqrt(BORE**2 - A**2 + R**2) / R
    lb = np.sqrt(BORE**2 - A**2 + B**2) / B
    srr = -MU * (np.log(lt / lb) + (lb**-2 - lt**-2) / 2)
    stt = srr + MU * (lt**2 - lt**-2)
    szz = srr + MU * (1 - lt**-2)
    c, s = X[0] / R, X[1] / R
    out = {
        "sxx": srr * c * c + stt * s * s,
        "syy": srr * s * s + stt * c * c,
        "szz": szz,
        "sxy": (srr - stt) * s * c,
    }
    if len(X) == 3:
        out["syz"] = np.zeros_like(R)
        out["szx"] = np.zeros_like(R)
    out["p"] = -(srr + stt + szz) / 3
    out["J"] = np.ones_like(R)
    out["W"] = MU / 2 * (lt**2 + lt**-2 - 2)
    return out


# ---------------------------------------------------------------- the seeded errors

def seeded_displacement(X):
    """Smooth error of the nodal displacement, about 1e-2."""
    x, y = X[0], X[1]
    z = X[2] if len(X) == 3 else 0.0 * x
    parts = [
        0.010 * np.sin(2 * x + 1) * np.cos(3 * y + z),
        0.012 * np.cos(x - 2 * y) + 0.004 * x * z,
        0.008 * np.sin(3 * x * y) * (1 + z),
    ]
    return np.array(parts[: len(X)])


def seeded_fields(X):
    """Smooth errors of the fields at points, one pattern each."""
    x, y = X[0], X[1]
    z = X[2] if len(X) == 3 else 0.0 * x
    return {
        "sxx": 0.020 * np.sin(x + 2 * y + z),
        "syy": 0.015 * np.cos(2 * x - y),
        "szz": 0.010 * np.sin(3 * x * y),
        "sxy": 0.018 * np.cos(x + y - z),
        "syz": 0.007 * np.sin(2 * x + z),
        "szx": 0.006 * np.cos(y - 3 * z),
        "p": 0.012 * np.sin(2 * x) * np.cos(y),
        "J": 0.003 * np.cos(2 * x + y + z),
        "W": 0.005 * np.sin(x - 2 * y),
    }


# ---------------------------------------------------------------- the meshes

def ring(P):
    """Reference square or cube -> ring, distorted inside, true on the boundary."""
    s, t = P[0], P[1]
    z = P[2] if len(P) == 3 else 0.0 * s
    twist = 1 + 0.4 * z
    s2 = s + 0.06 * twist * np.sin(np.pi * s) * np.sin(2 * np.pi * t)
    t2 = t + 0.05 * twist * np.sin(2 * np.pi * s) * np.sin(np.pi * t)
    R, theta = A + (B - A) * s2, np.pi / 2 * t2
    X = [R * np.cos(theta), R * np.sin(theta)]
    if len(P) == 3:
        X.append(HEIGHT * (z + 0.08 * np.sin(np.pi * z) * np.cos(np.pi * s) * np.sin(2 * t)))
    X = np.array(X)
    X[np.abs(X) < 1e-15] = 0.0
    return X


def edges(lo, hi, n):
    return np.linspace(lo, hi, n + 1)


def build():
    """name -> (shape, skfem mesh in place, displacement element, number of VTK nodes)."""
    quad = skfem.MeshQuad1.init_tensor(edges(0, 1, 3), edges(0, 1, 4))
    tri = skfem.MeshTri1.init_tensor(edges(0, 1, 2), edges(0, 1, 4))
    hexa = skfem.MeshHex1.init_tensor(edges(0, 1, 2), edges(0, 1, 3), edges(0, 1, 2))
    tet = skfem.MeshTet1.init_tensor(edges(0, 1, 2), edges(0, 1, 3), edges(0, 1, 1))

    def placed(mesh):
        return type(mesh)(ring(mesh.doflocs), mesh.t)

    return {
        "tri3": ("tri3", placed(tri), skfem.ElementTriP1()),
        "tri6-curved": ("tri6", placed(skfem.MeshTri2.from_mesh(tri)), skfem.ElementTriP2()),
        "quad4": ("quad4", placed(quad), skfem.ElementQuad1()),
        "quad8-straight": ("quad8", placed(quad), skfem.ElementQuadS2()),
        "quad9-curved": ("quad9", placed(skfem.MeshQuad2.from_mesh(quad)), skfem.ElementQuad2()),
        "hex8": ("hex8", placed(hexa), skfem.ElementHex1()),
        "hex20-straight": ("hex20", placed(hexa), skfem.ElementHexS2()),
        "hex27-curved": ("hex27", placed(skfem.MeshHex2.from_mesh(hexa)), skfem.ElementHex2()),
        "tet10-curved": ("tet10", placed(skfem.MeshTet2.from_mesh(tet)), skfem.ElementTetP2()),
    }


# VTK nodes in the reference cell [0,1]^d or the unit simplex
def _mid(points, pairs):
    return [tuple((a + b) / 2 for a, b in zip(points[i], points[j])) for i, j in pairs]


TRI = [(0, 0), (1, 0), (0, 1)]
QUAD = [(0, 0), (1, 0), (1, 1), (0, 1)]
TET = [(0, 0, 0), (1, 0, 0), (0, 1, 0), (0, 0, 1)]
HEX = [(0, 0, 0), (1, 0, 0), (1, 1, 0), (0, 1, 0), (0, 0, 1), (1, 0, 1), (1, 1, 1), (0, 1, 1)]
QUAD_EDGES = [(0, 1), (1, 2), (2, 3), (3, 0)]
HEX_EDGES = QUAD_EDGES + [(4, 5), (5, 6), (6, 7), (7, 4)] + [(0, 4), (1, 5), (2, 6), (3, 7)]
HEX_FACES = [(0, 0.5, 0.5), (1, 0.5, 0.5), (0.5, 0, 0.5), (0.5, 1, 0.5), (0.5, 0.5, 0), (0.5, 0.5, 1)]
VTK = {
    "tri3": TRI,
    "tri6": TRI + _mid(TRI, [(0, 1), (1, 2), (2, 0)]),
    "quad4": QUAD,
    "quad8": QUAD + _mid(QUAD, QUAD_EDGES),
    "quad9": QUAD + _mid(QUAD, QUAD_EDGES) + [(0.5, 0.5)],
    "hex8": HEX,
    "hex20": HEX + _mid(HEX, HEX_EDGES),
    "hex27": HEX + _mid(HEX, HEX_EDGES) + HEX_FACES + [(0.5, 0.5, 0.5)],
    "tet10": TET + _mid(TET, [(0, 1), (1, 2), (2, 0), (0, 3), (1, 3), (2, 3)]),
}


def monomials(shape):
    """Exponents of the polynomial space of the element."""
    dim = len(VTK[shape][0])
    if shape in ("tri3", "tri6", "tet10"):
        degree = 1 if shape == "tri3" else 2
        return [e for e in itertools.product(range(degree + 1), repeat=dim) if sum(e) <= degree]
    if shape in ("quad8", "hex20"):  # serendipity: superlinear degree at most 2
        return [e for e in itertools.product(range(3), repeat=dim) if sum(k for k in e if k > 1) <= 2]
    degree = 1 if shape in ("quad4", "hex8") else 2
    return list(itertools.product(range(degree + 1), repeat=dim))


def shape_functions(shape, xi):
    """Values (node, point) and derivatives (node, direction, point) at reference points xi (dim, point)."""
    exponents = monomials(shape)
    nodes = np.array(VTK[shape], dtype=float).T
    power = lambda x, e: np.prod([x[d] ** e[d] for d in range(len(x))], axis=0)
    C = np.linalg.inv(np.array([power(nodes, e) for e in exponents]).T)  # monomial values at nodes, inverted
    values = np.array([power(xi, e) for e in exponents])
    slopes = []
    for d in range(len(xi)):
        row = []
        for e in exponents:
            lower = tuple(k - (i == d) for i, k in enumerate(e))
            row.append(e[d] * power(xi, lower) if e[d] else np.zeros(xi.shape[1]))
        slopes.append(row)
    return C.T @ values, np.einsum("mn,dmq->ndq", C, np.array(slopes))


def product_rule(shape, n):
    """Gauss (cells) or Gauss-Jacobi (simplices) rule with n points a direction, exact to degree 2n - 1."""
    def one(power):
        x, w = roots_jacobi(n, power, 0.0)
        return (x + 1) / 2, w / 2 ** (power + 1)

    if shape.startswith(("quad", "hex")):
        dim = 2 if shape.startswith("quad") else 3
        x, w = one(0)
        points = np.array(list(itertools.product(x, repeat=dim))).T
        weights = np.array([np.prod(c) for c in itertools.product(w, repeat=dim)])
        return points, weights
    if shape.startswith("tri"):
        (x, wx), (y, wy) = one(1), one(0)
        points = [(a, b * (1 - a)) for a in x for b in y]
        return np.array(points).T, np.array([p * q for p in wx for q in wy])
    (x, wx), (y, wy), (z, wz) = one(2), one(1), one(0)
    points = [(a, b * (1 - a), c * (1 - a) * (1 - b)) for a in x for b in y for c in z]
    return np.array(points).T, np.array([p * q * r for p in wx for q in wy for r in wz])


def point_rule(shape):
    """The customary integration rule of the element, for points.csv."""
    if shape in ("tri3", "tri6"):
        return np.array([[1, 4, 1], [1, 1, 4]]) / 6, np.full(3, 1 / 6)
    if shape == "tet10":
        far, near = (5 + 3 * 5**0.5) / 20, (5 - 5**0.5) / 20
        return np.full((3, 4), near) + (far - near) * np.array([[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1]]), np.full(4, 1 / 24)
    return product_rule(shape, 2 if shape in ("quad4", "hex8") else 3)


# ---------------------------------------------------------------- skfem side

def element_nodes(shape, mesh, element, basis):
    """Nodes (VTK order, element) as indices of the displacement basis; every cell positively oriented."""
    local = np.array(element.doflocs)
    vtk = np.array(VTK[shape], dtype=float)

    def order(coordinates):
        return [int(np.argmin(np.abs(local - c).sum(axis=1))) for c in coordinates]

    plain = order(vtk)
    swapped = order(vtk[:, [1, 0] + list(range(2, vtk.shape[1]))])
    assert sorted(plain) == sorted(swapped) == list(range(len(vtk)))
    centre = np.full((vtk.shape[1], 1), 0.25 if shape.startswith("t") else 0.5)
    det = mesh.mapping().detDF(centre)[:, 0]
    dofs = basis.dofs.element_dofs
    return np.where(det > 0, dofs[plain], dofs[swapped])


def displacement_norms_skfem(mesh, element, u, rule):
    basis = skfem.Basis(mesh, element, quadrature=rule)
    X = basis.global_coordinates().value
    dx = basis.dx
    dim = len(u)
    uh = [basis.interpolate(c) for c in u]
    exact, gradient = exact_displacement(X), exact_gradient(X)
    e0 = sum((uh[i].value - exact[i]) ** 2 for i in range(dim))
    e1 = sum((uh[i].grad[j] - gradient[i, j]) ** 2 for i in range(dim) for j in range(dim))
    nodal = [basis.interpolate(c) for c in exact_displacement(basis.doflocs)]
    n0 = sum((uh[i].value - nodal[i].value) ** 2 for i in range(dim))
    n1 = sum((uh[i].grad[j] - nodal[i].grad[j]) ** 2 for i in range(dim) for j in range(dim))
    total = lambda f: float(np.sum(f * dx))
    return {
        "L2": (total(e0), total((exact**2).sum(axis=0))),
        "H1": (total(e1), total((gradient**2).sum(axis=(0, 1)))),
        "L2-nodal": (total(n0), total(sum(f.value**2 for f in nodal))),
        "H1-nodal": (total(n1), total(sum((f.grad[j]) ** 2 for f in nodal for j in range(dim)))),
        "volume": (total(np.ones_like(dx)), 1.0),
    }


# ---------------------------------------------------------------- files

def write(path, columns, rows):
    path.parent.mkdir(exist_ok=True)
    with open(path, "w", newline="") as f:
        out = csv.writer(f, lineterminator="\n")
        out.writerow(columns)
        out.writerows([repr(float(v)) if isinstance(v, (float, np.floating)) else v for v in row] for row in rows)


def read(path):
    with open(path) as f:
        return list(csv.DictReader(f))


def axes(dim):
    return ["X", "Y", "Z"][:dim], ["ux", "uy", "uz"][:dim]


def write_result_set(name, shape, X, u, cells):
    """nodes.csv, elements.csv, points.csv."""
    dim = len(X)
    where, moved = axes(dim)
    write(HERE / name / "nodes.csv", ["node", *where, *moved], [[i + 1, *X[:, i], *u[:, i]] for i in range(X.shape[1])])
    write(HERE / name / "elements.csv", ["element", "shape", *(f"n{i + 1}" for i in range(len(cells)))],
          [[e + 1, shape, *(int(n) + 1 for n in cells[:, e])] for e in range(cells.shape[1])])
    xi, w = point_rule(shape)
    N, dN = shape_functions(shape, xi)
    rows = []
    for e in range(cells.shape[1]):
        corner = X[:, cells[:, e]]
        place = corner @ N
        det = np.linalg.det(np.einsum("in,ndq->qid", corner, dN))
        exact, seeded = exact_fields(place), seeded_fields(place)
        for q in range(len(w)):
            rows.append([e + 1, q + 1, *place[:, q], w[q] * det[q], *(exact[k][q] + seeded[k][q] for k in exact)])
    write(HERE / name / "points.csv", ["element", "point", *where, "weight", *exact_fields(X).keys()], rows)


def displacement_norms_files(name, n):
    """The same integrals from the files alone, with the monomial shape functions."""
    nodes, elements = read(HERE / name / "nodes.csv"), read(HERE / name / "elements.csv")
    shape = elements[0]["shape"]
    count, dim = len(VTK[shape]), len(VTK[shape][0])
    where, moved = axes(dim)
    at = {row["node"]: [float(row[k]) for k in where] for row in nodes}
    by = {row["node"]: [float(row[k]) for k in moved] for row in nodes}
    xi, w = product_rule(shape, n)
    N, dN = shape_functions(shape, xi)
    sums = dict.fromkeys(("L2", "H1", "volume"), (0.0, 0.0))
    for row in elements:
        ids = [row[f"n{i + 1}"] for i in range(count)]
        X, u = np.array([at[i] for i in ids]).T, np.array([by[i] for i in ids]).T
        F = np.einsum("in,ndq->qid", X, dN)
        det = np.linalg.det(F)
        assert det.min() > 0.05 * det.max(), (name, "badly shaped element", det.min() / det.max())
        dx = w * det
        slope = np.einsum("in,ndq,qdj->ijq", u, dN, np.linalg.inv(F))
        place = X @ N
        exact, gradient = exact_displacement(place), exact_gradient(place)
        adds = {
            "L2": ((u @ N - exact) ** 2).sum(axis=0) @ dx,
            "H1": ((slope - gradient) ** 2).sum(axis=(0, 1)) @ dx,
            "volume": dx.sum(),
        }
        size = {"L2": (exact**2).sum(axis=0) @ dx, "H1": (gradient**2).sum(axis=(0, 1)) @ dx, "volume": 0.0}
        sums = {k: (v[0] + float(adds[k]), v[1] + float(size[k])) for k, v in sums.items()}
    return sums


def point_norms(name, shear=2.0, weighted=True):
    """measure -> (squared error, squared exact) from points.csv."""
    rows = read(HERE / name / "points.csv")
    where = [k for k in ("X", "Y", "Z") if k in rows[0]]
    X = np.array([[float(r[k]) for r in rows] for k in where])
    w = np.array([float(r["weight"]) for r in rows]) if weighted else np.ones(len(rows))
    exact = exact_fields(X)
    given = {k: np.array([float(r[k]) for r in rows]) for k in exact}
    factor = {k: shear if k in ("sxy", "syz", "szx") else 1.0 for k in exact if k.startswith("s")}
    out = {"stress-L2": (
        float(sum(f * (w @ (given[k] - exact[k]) ** 2) for k, f in factor.items())),
        float(sum(f * (w @ exact[k] ** 2) for k, f in factor.items())),
    )}
    for measure, k in (("pressure-L2", "p"), ("volume-ratio-L2", "J"), ("energy-density-L2", "W")):
        out[measure] = (float(w @ (given[k] - exact[k]) ** 2), float(w @ exact[k] ** 2))
    out["volume-of-points"] = (float(w.sum()), 1.0)
    return out


# ---------------------------------------------------------------- the run

def main():
    values, worst_order, worst_files = [], 0.0, 0.0
    for name, (shape, mesh, element) in build().items():
        basis = skfem.Basis(mesh, element, intorder=2)
        X = basis.doflocs
        if shape in ("tri6", "quad9", "hex27", "tet10"):
            assert np.array_equal(X, mesh.doflocs), name
        cells = element_nodes(shape, mesh, element, basis)
        check_nodes(name, shape, X, cells)
        u = exact_displacement(X) + seeded_displacement(X)
        write_result_set(name, shape, X, u, cells)

        n = 14 if len(X) == 2 else 18
        found = displacement_norms_skfem(mesh, element, u, product_rule(shape, n))
        other = displacement_norms_skfem(mesh, element, u, product_rule(shape, n + 3))
        files = displacement_norms_files(name, n)
        change = max(abs(found[k][0] / other[k][0] - 1) for k in found)
        differ = max(abs(found[k][0] / files[k][0] - 1) for k in files)
        worst_order, worst_files = max(worst_order, change), max(worst_files, differ)
        print(f"{name:15s} {cells.shape[1]:3d} elements {X.shape[1]:4d} nodes"
              f"  two orders {change:.1e}  skfem against files {differ:.1e}")

        def both(measure, pair, prefix=""):
            values.append([name, measure, prefix + "relative", (pair[0] / pair[1]) ** 0.5])
            values.append([name, measure, prefix + "absolute", pair[0] ** 0.5])

        both("displacement-L2", found["L2"])
        both("displacement-H1", found["H1"])
        miss, size = (np.sqrt((f**2).sum(axis=0)).max() for f in (u - exact_displacement(X), exact_displacement(X)))
        values.append([name, "displacement-largest", "relative", miss / size])
        values.append([name, "displacement-largest", "absolute", miss])
        points = point_norms(name)
        values.append([name, "volume", "absolute", found["volume"][0]])
        values.append([name, "volume-of-points", "absolute", points.pop("volume-of-points")[0]])
        for measure, pair in points.items():
            both(measure, pair)
        if name in ("quad4", "hex8"):
            both("displacement-L2", found["L2-nodal"], "wrong-nodal-interpolation-")
            both("displacement-H1", found["H1-nodal"], "wrong-nodal-interpolation-")
            both("stress-L2", point_norms(name, shear=1.0)["stress-L2"], "wrong-shear-once-")
            for measure, pair in point_norms(name, weighted=False).items():
                if measure != "volume-of-points":
                    both(measure, pair, "wrong-weights-omitted-")
    write(HERE / "norm_values.csv", ["mesh", "measure", "kind", "value"], values)
    print(f"norm_values.csv: {len(values)} rows; worst change with order {worst_order:.1e}, files {worst_files:.1e}")


def check_nodes(name, shape, X, cells):
    """Mid-side nodes of straight meshes are chord midpoints; those of curved ones are near, but not all on, them."""
    vtk = [tuple(map(float, v)) for v in VTK[shape]]
    corners = [i for i, v in enumerate(vtk) if all(c in (0.0, 1.0) for c in v)]
    offset = 0.0
    for i, v in enumerate(vtk):
        if i in corners or sum(c == 0.5 for c in v) == 0:
            continue
        ends = [j for j in corners if all(c == 0.5 or c == vtk[j][k] for k, c in enumerate(v))]
        if shape.startswith("t"):  # simplex: the two corners whose mean is this node
            ends = next([a, b] for a, b in itertools.combinations(corners, 2)
                        if all((p + q) / 2 == c for p, q, c in zip(vtk[a], vtk[b], v)))
        if len(ends) != 2:
            continue  # face and body nodes
        chord = X[:, cells[ends]].mean(axis=1)
        offset = max(offset, float(np.abs(X[:, cells[i]] - chord).max()))
    if "straight" in name:
        assert offset < 1e-15, (name, offset)
    if "curved" in name:
        assert 1e-3 < offset < 0.2, (name, offset)


if __name__ == "__main__":
    main()
