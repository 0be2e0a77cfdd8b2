"""Many-digit states, and the kinds of limit, of tubes of stiffening laws: Yeoh, Demiray.

Writes ``law_states.csv`` and ``law_limits.csv`` beside this script.

Route. Unknowns are the current inner radius ``a`` and the axial stretch ``lz``; every formula is the plain one in
principal stretches, at 32 digits, and every integral is taken over the reference radius R by mpmath's adaptive quadrature. No
logarithmic unknown, ``expm1``, ``log1p`` or panel rule is shared with the program under test.

    r^2 = a^2 + (R^2 - A^2)/lz   lt = r/R   lr = 1/(lt lz)   T_i = 2 l_i^2 W'(I1)
    Pi - Po = int (Tt - Tr) R/(lz r^2) dR     F = pi int (2 Tz - Tt - Tr) R/lz dR     energy = 2 pi int W R dR

W' is written by hand, and compared in each state with a central difference of W. A state is made from a wanted bore:
the pressure that gives it is rounded to a double and the state solved again for that double.
The kinds of limit come from a march in doubles with 192-point Gauss rules in R (``law_limits.csv``).
"""

import csv
from multiprocessing import Pool
from pathlib import Path

import numpy as np
from mpmath import mp, mpf, pi, log, exp, sqrt, nstr, quad
from scipy.optimize import brentq, minimize_scalar

mp.dps = 32
HERE = Path(__file__).parent

LAWS = {
    "Yeoh": (lambda J, p: p[0] * J + p[1] * J**2 + p[2] * J**3, lambda J, p: p[0] + 2 * p[1] * J + 3 * p[2] * J**2),
    "Demiray": (lambda J, p: p[0] / (2 * p[1]) * (exp(p[1] * J) - 1), lambda J, p: p[0] / 2 * exp(p[1] * J)),
}
NAMES = {"Yeoh": ("c10", "c20", "c30"), "Demiray": ("c", "b")}


class Tube:
    def __init__(self, A, B, law, constants):
        self.A, self.B, self.constants = mpf(A), mpf(B), [mpf(c) for c in constants]
        self.W, self.W1 = LAWS[law]

    def at(self, R, a, lz):
        """(r, lr, lt, Tr, Tt, Tz, W)"""
        r = sqrt(a**2 + (R**2 - self.A**2) / lz)
        lt = r / R
        lr = 1 / (lt * lz)
        J = lr**2 + lt**2 + lz**2 - 3
        w1 = 2 * self.W1(J, self.constants)
        return r, lr, lt, w1 * lr**2, w1 * lt**2, w1 * lz**2, self.W(J, self.constants)

    def over_wall(self, f, start=None):
        """Integral over R, in pieces that grow from the bore."""
        start = self.A if start is None else start
        pieces = [start + (self.B - start) * mpf(x) for x in ("0", "1e-5", "1e-4", "1e-3", "0.01", "0.04", "0.12", "0.35", "1")]
        return quad(f, pieces, method="gauss-legendre")

    def drop(self, a, lz, start=None):
        def f(R):
            r, _, _, tr, tt, _, _ = self.at(R, a, lz)
            return (tt - tr) * R / (lz * r**2)
        return self.over_wall(f, start)

    def reduced(self, a, lz):
        def f(R):
            _, _, _, tr, tt, tz, _ = self.at(R, a, lz)
            return (2 * tz - tt - tr) * R / lz
        return pi * self.over_wall(f)

    def energy(self, a, lz):
        return 2 * pi * self.over_wall(lambda R: self.at(R, a, lz)[6] * R)


def axial(tube, ends, a, lz, pressure):
    F = tube.reduced(a, lz)
    return F if ends == "closed" else F + pi * pressure * a**2


def newton(f, x, h=mpf(10) ** -15):
    """Secant steps with a difference slope, to 30 digits."""
    for _ in range(60):
        value = f(x)
        step = value / ((f(x * (1 + h)) - value) / (x * h))
        step = max(min(step, x / 20), -x / 20)
        x -= step
        if abs(step) < mpf(10) ** -14 * x:
            value = f(x)
            return x - value / ((f(x * (1 + h)) - value) / (x * h))
    raise ValueError("no convergence")


def solve(tube, ends, given, a):
    """(double pressure, a, lz) near the wanted bore."""
    if ends in ("plane-strain", "fixed-stretch"):
        lz = mpf(given or 1)
        P = float(tube.drop(a, lz))
        return P, newton(lambda v: tube.drop(v, lz) - mpf(P), a), lz
    # start: lz at the wanted bore
    lz = newton(lambda v: axial(tube, ends, a, v, tube.drop(a, v)), mpf(1))
    P = float(tube.drop(a, lz))
    h = mpf(10) ** -15
    for _ in range(12):
        def residual(a, lz):
            return tube.drop(a, lz) - mpf(P), axial(tube, ends, a, lz, mpf(P))
        r = residual(a, lz)
        ra, rl = residual(a * (1 + h), lz), residual(a, lz * (1 + h))
        j11, j21 = (ra[0] - r[0]) / (a * h), (ra[1] - r[1]) / (a * h)
        j12, j22 = (rl[0] - r[0]) / (lz * h), (rl[1] - r[1]) / (lz * h)
        det = j11 * j22 - j12 * j21
        da, dl = (r[0] * j22 - r[1] * j12) / det, (j11 * r[1] - j21 * r[0]) / det
        a, lz = a - da, lz - dl
        if abs(da) < mpf(10) ** -14 * a and abs(dl) < mpf(10) ** -14 * lz:
            return P, a, lz
    raise ValueError("state not solved")


COLUMNS = ["id", "material", "n1", "v1", "n2", "v2", "n3", "v3", "ends", "A", "B", "Pi", "given", "a", "u_a", "u_b", "lz",
           "axial_force", "strain_energy", "stt_a", "szz_a", "srr_m", "stt_m", "szz_m", "stt_b", "szz_b", "p_m", "W_a"]


def states():
    wanted = []
    soft, stiff = (0.5, -0.01, 0.0002), (0.2, 0.05, 0.01)
    for law, one, two in (("Yeoh", soft, stiff), ("Demiray", (1.0, 0.3), (44.2, 8.35))):
        # bores in units of A: for the second, harder law smaller ones
        for ends, given in (("plane-strain", None), ("fixed-stretch", 1.2), ("generalized-plane-strain", 0.0), ("closed", None)):
            for B, bore, constants in ((1.001, 1.02, one), (1.5, 1.3, two), (2.0, 1.2, one), (10.0, 1.35, two), (1.5, 1.00001, two)):
                if bore < 1.001 and ends == "fixed-stretch":
                    continue
                if ends == "fixed-stretch":
                    bore = bore * 0.95
                wanted.append((law, ends, given, 1.0, B, bore, constants))
        wanted.append((law, "plane-strain", None, 1.0, 2.0, 2.5, one))
        wanted.append((law, "closed", None, 3.0, 6.0, 1.45, two))
    with Pool(2) as pool:
        rows = pool.starmap(state, enumerate(wanted), chunksize=1)
    write("law_states.csv", COLUMNS, [row for row in rows if row])


def state(n, wanted):
    """One row of law_states.csv, checked."""
    law, ends, given, A, B, bore, constants = wanted
    name = f"{law}-{n + 1:03d}"
    tube = Tube(A, B, law, constants)
    try:
        P, a, lz = solve(tube, ends, given, mpf(bore) * tube.A)
    except ValueError as problem:
        print("  left out", name, ends, B, problem)
        return None
    middle = mpf(float(A + 0.5 * (B - A)))
    at_a, at_m, at_b = (tube.at(R, a, lz) for R in (tube.A, middle, tube.B))
    for s in (at_a, at_m, at_b):
        check_slope(tube, s, lz)
    srr_m = -tube.drop(a, lz, middle)
    stress = lambda s, srr: (srr + s[4] - s[3], srr + s[5] - s[3])
    stt_m, szz_m = stress(at_m, srr_m)
    N = tube.reduced(a, lz) + pi * mpf(P) * a**2
    if ends == "generalized-plane-strain":
        N = mpf(0)
    energy = tube.energy(a, lz)
    # the work of the pressure: dE/da at fixed lz = 2 pi a lz (Pi - Po)
    h = a * mpf(10) ** -10
    work = (tube.energy(a + h, lz) - tube.energy(a - h, lz)) / (2 * h) / (2 * pi * a * lz * mpf(P)) - 1
    # the difference quotient is good to h^2 of the third derivative
    assert abs(work) < mpf(10) ** -12, (name, nstr(work, 3))
    pairs = [x for pair in zip(NAMES[law], constants) for x in pair] + [""] * (6 - 2 * len(constants))
    out = [a, a - tube.A, at_b[0] - tube.B, lz, N, energy, *stress(at_a, -mpf(P)), srr_m, stt_m, szz_m,
           *stress(at_b, mpf(0)), -(srr_m + stt_m + szz_m) / 3, at_a[6]]
    return [name, law, *pairs, ends, A, B, repr(P), "" if given is None else given, *[nstr(x, 22) for x in out]]


def check_slope(tube, state, lz):
    """2 l^2 W'(I1) against a central difference of W in the hoop stretch."""
    _, lr, lt, _, tt, _, _ = state
    h = mpf(10) ** -13 * lt
    W = lambda t: tube.W(lr**2 + t**2 + lz**2 - 3, tube.constants)
    assert abs((W(lt + h) - W(lt - h)) / (2 * h) * lt / tt - 1) < mpf(10) ** -10


def write(file, columns, rows):
    with open(HERE / file, "w", newline="") as out:
        writer = csv.writer(out, lineterminator="\n")
        writer.writerow(columns)
        writer.writerows(rows)
    print(file, len(rows))


# ---------------------------------------------------------------- kinds of limit, in doubles

NUMPY = {
    "Yeoh": lambda J, p: p[0] + 2 * p[1] * J + 3 * p[2] * J**2,
    "Demiray": lambda J, p: p[0] / 2 * np.exp(p[1] * J),
}
NODES, WEIGHTS = np.polynomial.legendre.leggauss(24)


def integrals(A, B, law, p, a, lz):
    ends = A * (B / A) ** np.array([0, 1e-3, 1e-2, 0.05, 0.15, 0.3, 0.5, 0.75, 1])
    mid, half = (ends[1:] + ends[:-1]) / 2, (ends[1:] - ends[:-1]) / 2
    R = (mid[:, None] + half[:, None] * NODES).ravel()
    w = (half[:, None] * WEIGHTS).ravel()
    r2 = a**2 + (R**2 - A**2) / lz
    lt2 = r2 / R**2
    lr2 = 1 / (lt2 * lz**2)
    w1 = 2 * NUMPY[law](lt2 + lr2 + lz**2 - 3, p)
    P = np.sum(w * w1 * (lt2 - lr2) * R / (lz * r2))
    return P, np.pi * np.sum(w * w1 * (2 * lz**2 - lt2 - lr2) * R / lz)


def limits():
    rows = []
    cases = [("Yeoh", (0.5, -0.01, 0.0002)), ("Yeoh", (0.5, 0.0, 0.0)), ("Yeoh", (0.2, 0.05, 0.01)), ("Yeoh", (0.5, -0.002, 0.00002)),
             ("Demiray", (1.0, 0.01)), ("Demiray", (1.0, 0.3)), ("Demiray", (44.2, 8.35))]
    for law, p in cases:
        for B in (1.001, 1.5, 2.0, 10.0):
            for ends in ("plane-strain", "fixed-stretch", "generalized-plane-strain", "closed"):
                if law == "Yeoh" and p[1:] == (0.0, 0.0) and ends != "closed":
                    continue  # asymptotes: the neo-Hookean table has them
                top = march(1.0, B, law, p, ends)
                pairs = [x for pair in zip(NAMES[law], p) for x in pair] + [""] * (6 - 2 * len(p))
                kind = "none" if top is None else "maximum"
                rows.append([f"limit-{len(rows) + 1:03d}", law, *pairs, ends, 1.0, B, 1.2 if ends == "fixed-stretch" else "", kind,
                             "" if top is None else f"{top[0]:.10e}", "" if top is None else f"{top[1]:.5e}"])
    write("law_limits.csv", ["id", "material", "n1", "v1", "n2", "v2", "n3", "v3", "ends", "A", "B", "given", "kind", "Pi", "a"], rows)


def march(A, B, law, p, ends):
    """(P, a) at the first maximum while the bore grows by 1 % a step, or None up to overflow or 40 A."""
    last = [1.0]

    def state(a):
        if ends in ("plane-strain", "fixed-stretch"):
            return integrals(A, B, law, p, a, 1.2 if ends == "fixed-stretch" else 1.0)[0]

        def f(lz):
            P, F = integrals(A, B, law, p, a, lz)
            return F if ends == "closed" else F + np.pi * P * a**2
        for width in (0.01, 0.05):
            lo, hi = last[0] * (1 - width), last[0] * (1 + width)
            if f(lo) < 0 < f(hi):
                try:
                    last[0] = brentq(f, lo, hi, xtol=1e-15, rtol=1e-14)
                except ValueError:  # beyond the range of doubles
                    return np.nan
                return integrals(A, B, law, p, a, last[0])[0]
        return np.nan

    a, before = (A if ends != "fixed-stretch" else A / np.sqrt(1.2)), -1.0
    with np.errstate(all="ignore"):
        while a < 40 * A:
            P = state(a)
            if not np.isfinite(P):
                return None
            if P < before * (1 - 1e-12) and before > 0:
                found = minimize_scalar(lambda v: -state(v), bounds=(a / 1.01**2, a), method="bounded", options={"xatol": 1e-9 * a})
                return -found.fun, found.x
            before, a = P, a * 1.01
    return None


if __name__ == "__main__":
    limits()
    states()
