"""Compare written result sets with the exact solution of the incompressible pressurised tube.

Independent of the finite-element code: reads the CSV files, numpy and scipy only. Called by `make_results.py --verify`.

Exact solution, r(R)^2 = a^2 + (R^2 - A^2) / lz, hoop stretch lt = r / R, radial stretch lr = 1 / (lt lz),
k = 2 (c10 + c01 lz^2):

    sigma_tt - sigma_rr = k (lt^2 - lr^2)
    sigma_rr(R)         = -(k / lz) [ln(lt / lb) + (lb^-2 - lt^-2) / (2 lz)],    lb = lt(B);    sigma_rr(A) = -pressure
    sigma_zz - sigma_rr = 2 c10 (lz^2 - lr^2) + 2 c01 (lr^-2 - lz^-2)

The bore stretch follows from the pressure, and lz (if free) from a vanishing net axial force int sigma_zz / lz dA.
"""

import csv
import gzip
from pathlib import Path

import numpy as np
from scipy.optimize import brentq

from make_results import INNER_PRESSURE, INNER_RADIUS, MATERIALS


class ExactTube:
    """The tube at the final pressure. Totals are those of the modelled quarter."""

    def __init__(self, case):
        self.A, self.B = INNER_RADIUS, float(case.outer_radius)
        self.c10, self.c01 = MATERIALS[case.material]
        self.lz = 1.0
        self.inflate()
        if case.ends == "generalized-plane-strain":
            def net_force(lz):
                self.lz = lz
                self.inflate()
                return self.axial_force()
            self.lz = brentq(net_force, 0.8, 1.1, xtol=1e-15, rtol=1e-15)
            self.inflate()

    def inflate(self):
        """Find the bore stretch that balances the pressure at the present lz: the branch that starts unloaded."""
        rest = self.lz ** -0.5

        def misfit(la):
            self.la = la
            return self.radial_stress(self.A) + INNER_PRESSURE
        self.la = brentq(misfit, rest, 1.5 * rest, xtol=1e-15, rtol=1e-15)

    def hoop_stretch(self, R):
        return np.sqrt((self.la * self.A) ** 2 + (R**2 - self.A**2) / self.lz) / R

    def radial_stress(self, R):
        lt, lb, lz = self.hoop_stretch(R), self.hoop_stretch(self.B), self.lz
        k = 2 * (self.c10 + self.c01 * lz**2)
        return -k / lz * (np.log(lt / lb) + (lb**-2 - lt**-2) / (2 * lz))

    def state(self, R):
        """Displacement, principal Cauchy stresses (rr, tt, zz) and energy at reference radius R."""
        lt, lz = self.hoop_stretch(R), self.lz
        lr = 1 / (lt * lz)
        rr = self.radial_stress(R)
        tt = rr + 2 * (self.c10 + self.c01 * lz**2) * (lt**2 - lr**2)
        zz = rr + 2 * self.c10 * (lz**2 - lr**2) + 2 * self.c01 * (lr**-2 - lz**-2)
        W = self.c10 * (lr**2 + lt**2 + lz**2 - 3) + self.c01 * (lr**-2 + lt**-2 + lz**-2 - 3)
        return (lt - 1) * R, rr, tt, zz, W

    def over_section(self, function):
        """Integral over the quarter section, by 40 Gauss points: round-off for these smooth integrands."""
        x, w = np.polynomial.legendre.leggauss(40)
        R = 0.5 * (self.A + self.B) + 0.5 * (self.B - self.A) * x
        return 0.5 * np.pi * np.sum(0.5 * (self.B - self.A) * w * R * function(R))

    def axial_force(self):
        return self.over_section(lambda R: self.state(R)[3]) / self.lz

    def strain_energy(self):
        return self.over_section(lambda R: self.state(R)[4])


def read_table(folder, name):
    """Rows of a CSV table as dictionaries; the last load step where there are several."""
    plain = folder / f"{name}.csv"
    path = plain if plain.exists() else folder / f"{name}.csv.gz"
    with (gzip.open if path.suffix == ".gz" else open)(path, "rt", encoding="utf-8") as lines:
        rows = list(csv.DictReader(line for line in lines if not line.startswith("#")))
    if rows and "step" in rows[0]:
        last = max(int(row["step"]) for row in rows)
        rows = [row for row in rows if int(row["step"]) == last]
    return rows


def column(rows, name):
    return np.array([float(row[name]) for row in rows])


def quad9(xi, eta):
    """Shape functions and derivatives of VTK's biquadratic quadrilateral on [-1, 1]^2."""
    def line(t):
        return np.array([t * (t - 1) / 2, 1 - t * t, t * (t + 1) / 2]), np.array([t - 0.5, -2 * t, t + 0.5])
    (a, da), (b, db) = line(xi), line(eta)
    order = [(0, 0), (2, 0), (2, 2), (0, 2), (1, 0), (2, 1), (1, 2), (0, 1), (1, 1)]
    return (np.array([a[i] * b[j] for i, j in order]), np.array([da[i] * b[j] for i, j in order]),
            np.array([a[i] * db[j] for i, j in order]))


def displacement_error(folder, exact):
    """Relative L2 error of the displacement, 5x5 Gauss points an element."""
    nodes, elements = read_table(folder, "nodes"), read_table(folder, "elements")
    place = {row["node"]: i for i, row in enumerate(nodes)}
    connectivity = np.array([[place[row[f"n{i}"]] for i in range(1, 10)] for row in elements])
    X = np.array([column(nodes, "X"), column(nodes, "Y")])[:, connectivity]
    u = np.array([column(nodes, "ux"), column(nodes, "uy")])[:, connectivity]
    squared_error = squared_exact = 0.0
    points, weights = np.polynomial.legendre.leggauss(5)
    for xi, w_xi in zip(points, weights):
        for eta, w_eta in zip(points, weights):
            N, N_xi, N_eta = quad9(xi, eta)
            (x_xi, y_xi), (x_eta, y_eta) = X @ N_xi, X @ N_eta
            jacobian = x_xi * y_eta - y_xi * x_eta
            x = X @ N
            R = np.hypot(*x)
            wanted = exact.state(R)[0] * x / R
            weight = w_xi * w_eta * jacobian
            squared_error += np.sum(weight * np.sum((u @ N - wanted) ** 2, axis=0))
            squared_exact += np.sum(weight * np.sum(wanted**2, axis=0))
    return np.sqrt(squared_error / squared_exact)


def point_errors(folder, exact):
    """Relative L2 errors of Cauchy stress, hydrostatic pressure and energy density; L2 mean of J - 1."""
    rows = read_table(folder, "points")
    X, Y, weight = (column(rows, name) for name in ("X", "Y", "weight"))
    R = np.hypot(X, Y)
    c, s = X / R, Y / R
    _, rr, tt, zz, W = exact.state(R)
    wanted = {"sxx": rr * c * c + tt * s * s, "syy": rr * s * s + tt * c * c, "szz": zz, "sxy": (rr - tt) * c * s}
    times = {"sxx": 1, "syy": 1, "szz": 1, "sxy": 2}                 # sxy = syx counts twice

    def norm(values):
        return np.sqrt(np.sum(weight * values**2))
    stress = np.sqrt(sum(n * norm(column(rows, k) - wanted[k]) ** 2 for k, n in times.items())
                     / sum(n * norm(wanted[k]) ** 2 for k, n in times.items()))
    p = -(rr + tt + zz) / 3
    return {"stress": stress, "pressure": norm(column(rows, "p") - p) / norm(p),
            "energy density": norm(column(rows, "W") - W) / norm(W),
            "volume ratio": norm(column(rows, "J") - 1) / norm(np.ones_like(W))}


def bore_error(folder, exact):
    """Relative error of the mean radial displacement of the nodes on the bore."""
    nodes = read_table(folder, "nodes")
    X, Y, ux, uy = (column(nodes, name) for name in ("X", "Y", "ux", "uy"))
    R = np.hypot(X, Y)
    bore = np.abs(R - exact.A) < 1e-9 * exact.A
    radial = ((ux * X + uy * Y) / R)[bore]
    return abs(radial.mean() / exact.state(exact.A)[0] - 1)


def errors(folder, exact):
    """All errors of one result set."""
    totals = {row["quantity"]: float(row["value"]) for row in read_table(folder, "totals")}
    found = {"displacement": displacement_error(folder, exact), **point_errors(folder, exact),
             "bore": bore_error(folder, exact),
             "strain energy": abs(totals["strain_energy"] / exact.strain_energy() - 1)}
    if exact.lz != 1.0:
        found["axial stretch"] = abs(totals["axial_stretch"] / exact.lz - 1)
    else:
        found["axial force"] = abs(totals["axial_force"] / exact.axial_force() - 1)
    found["residual"] = totals["residual"]
    return found


def report(out, cases, levels):
    """Print errors of every level and the observed order of each pair of neighbouring levels."""
    for case in cases:
        exact = ExactTube(case)
        print(f"\n{case.name}: bore displacement {exact.state(exact.A)[0]:.12g} mm, axial stretch {exact.lz:.12g}, "
              f"axial force {exact.axial_force():.3g} N")
        sets = [errors(Path(out) / case.name / f"level-{level}", exact) for level in levels]
        for name in sets[0]:
            values = [found[name] for found in sets]
            orders = [] if name == "residual" else [np.log2(a / b) for a, b in zip(values, values[1:])]
            print(f"  {name:15s}" + "".join(f"{v:11.2e}" for v in values)
                  + ("   orders " + " ".join(f"{o:6.2f}" for o in orders) if orders else ""))
