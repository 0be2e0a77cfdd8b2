"""Compare written result sets with Lame's solution of the linear-elastic tube in plane strain.

Independent of the finite-element code: reads the CSV files. Called by `make_results.py --verify`.

Exact solution, A and B the radii, q = pressure A^2 / (B^2 - A^2):

    u(r) = (1 + nu) q / E (B^2 / r + (1 - 2 nu) r)
    sigma_rr = q (1 - B^2 / r^2),    sigma_tt = q (1 + B^2 / r^2),    sigma_zz = 2 nu q

Gauss points of straight-sided elements may lie a little inside the bore; the formulas are evaluated there as they stand.
"""

import csv
import gzip
from pathlib import Path

import numpy as np

from make_results import INNER_PRESSURE, INNER_RADIUS as A, MATERIALS, OUTER_RADIUS as B, YOUNGS_MODULUS as E

Q = INNER_PRESSURE * A**2 / (B**2 - A**2)


def radial_displacement(r, nu):
    return (1 + nu) * Q / E * (B**2 / r + (1 - 2 * nu) * r)


def stresses(r, nu):
    """Principal stresses rr, tt, zz."""
    return Q * (1 - B**2 / r**2), Q * (1 + B**2 / r**2), np.full_like(r, 2 * nu * Q)


def strain_energy(nu):
    """Of the quarter ring: half the work of the pressure on the bore."""
    return 0.5 * INNER_PRESSURE * radial_displacement(A, nu) * 0.5 * np.pi * A


def read_table(folder, name):
    """Rows of a CSV table as dictionaries."""
    plain = folder / f"{name}.csv"
    path = plain if plain.exists() else folder / f"{name}.csv.gz"
    with (gzip.open if path.suffix == ".gz" else open)(path, "rt", encoding="utf-8") as lines:
        return list(csv.DictReader(line for line in lines if not line.startswith("#")))


def column(rows, name):
    return np.array([float(row[name]) for row in rows])


def displacement_error(folder, nu):
    """Relative L2 error of the displacement, 4x4 Gauss points an element."""
    nodes, elements = read_table(folder, "nodes"), read_table(folder, "elements")
    place = {row["node"]: i for i, row in enumerate(nodes)}
    connectivity = np.array([[place[row[f"n{i}"]] for i in range(1, 5)] for row in elements])
    X = np.array([column(nodes, "X"), column(nodes, "Y")])[:, connectivity]
    u = np.array([column(nodes, "ux"), column(nodes, "uy")])[:, connectivity]
    squared_error = squared_exact = 0.0
    points, weights = np.polynomial.legendre.leggauss(4)
    for xi, w_xi in zip(points, weights):
        for eta, w_eta in zip(points, weights):
            a, b = np.array([-1, 1, 1, -1]), np.array([-1, -1, 1, 1])        # corners in the order of the format
            N = (1 + a * xi) * (1 + b * eta) / 4
            (x_xi, y_xi), (x_eta, y_eta) = X @ (a * (1 + b * eta) / 4), X @ (b * (1 + a * xi) / 4)
            weight = w_xi * w_eta * (x_xi * y_eta - y_xi * x_eta)
            x = X @ N
            r = np.hypot(*x)
            wanted = radial_displacement(r, nu) * x / r
            squared_error += np.sum(weight * np.sum((u @ N - wanted) ** 2, axis=0))
            squared_exact += np.sum(weight * np.sum(wanted**2, axis=0))
    return np.sqrt(squared_error / squared_exact)


def errors(folder, nu):
    """All relative errors of one result set."""
    rows = read_table(folder, "points")
    X, Y, weight = (column(rows, name) for name in ("X", "Y", "weight"))
    r = np.hypot(X, Y)
    c, s = X / r, Y / r
    rr, tt, zz = stresses(r, nu)
    wanted = {"sxx": rr * c * c + tt * s * s, "syy": rr * s * s + tt * c * c, "szz": zz, "sxy": (rr - tt) * c * s}
    times = {"sxx": 1, "syy": 1, "szz": 1, "sxy": 2}                         # sxy = syx counts twice

    def norm(values):
        return np.sqrt(np.sum(weight * values**2))
    stress = np.sqrt(sum(n * norm(column(rows, k) - wanted[k]) ** 2 for k, n in times.items())
                     / sum(n * norm(wanted[k]) ** 2 for k, n in times.items()))
    p = -(rr + tt + zz) / 3

    nodes = read_table(folder, "nodes")
    X, Y, ux, uy = (column(nodes, name) for name in ("X", "Y", "ux", "uy"))
    R = np.hypot(X, Y)
    bore = R < A * (1 + 1e-9)
    u_bore = np.mean(((ux * X + uy * Y) / R)[bore])
    totals = {row["quantity"]: float(row["value"]) for row in read_table(folder, "totals")}
    return {"displacement": displacement_error(folder, nu), "stress": stress,
            "pressure": norm(column(rows, "p") - p) / norm(p),
            "bore": abs(u_bore / radial_displacement(A, nu) - 1),
            "strain energy": abs(totals["strain_energy"] / strain_energy(nu) - 1),
            "residual": totals["residual"]}


def report(out, materials, levels):
    """Print errors of every level and the observed order of each pair of neighbouring levels."""
    for material in materials:
        nu = MATERIALS[material]
        print(f"\n{material}: bore displacement {radial_displacement(A, nu):.12g} mm")
        sets = [errors(Path(out) / material / f"level-{level}", nu) for level in levels]
        for name in sets[0]:
            values = [found[name] for found in sets]
            orders = [] if name == "residual" else [np.log2(a / b) for a, b in zip(values, values[1:])]
            print(f"  {name:15s}" + "".join(f"{v:11.2e}" for v in values)
                  + ("   orders " + " ".join(f"{o:6.2f}" for o in orders) if orders else ""))
