"""Many-digit states of extended and twisted cylinders, solid and hollow. Writes suite.yaml and values.csv.

Route. Motion r = r(R), theta = Theta + psi Z, z = lz Z, with R^2 = A^2 + lz (r^2 - a^2). In the axes (theta, z) the left
Cauchy-Green tensor is [[lt^2 + r^2 psi^2, r psi lz], [r psi lz, lz^2]], lt = r/R, and the radial stretch is R/(r lz). Its principal
stretches give T_i = l_i dW/dl_i of the plain energy, turned back to (theta, z). Then at 50 digits, by Gauss panels over r,
    d srr/dr = (stt - srr)/r, srr(b) = 0      N = int szz 2 pi r dr      torque = int stz 2 pi r^2 dr
Hollow: both walls free of traction, which fixes the bore a. The state is followed in doubles from rest, twist and load in proportion.
Confirmed in each state: dE/dpsi = torque, dE/dlz = N and (hollow) dE/da = 0, and a second Gauss rule.
"""

import sys
from decimal import Decimal
from pathlib import Path

import numpy as np

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_laws import InDoubles, Suite, build, check_laws, gauss, mp, mpf, num, sqrt, turned  # noqa: E402

MATERIALS = {
    "neo": ("neo-Hookean", {"mu": "0.4"}),
    "mooney": ("Mooney-Rivlin", {"c10": "0.15", "c01": "0.05"}),
    "treloar": ("Ogden", {"mu": ["0.63", "0.0012", "-0.01"], "alpha": ["1.3", "5", "-2"]}),
    "gent": ("Gent", {"mu": "0.4", "Jm": "8"}),
}
LAW = build(MATERIALS)
# (A, B, twist, "axial-stretch" or "axial-force", value)
LOADS = [
    ("0", "10", "0.000001", "axial-stretch", "1"), ("0", "10", "0.05", "axial-stretch", "1"), ("0", "5", "0.2", "axial-stretch", "1.3"),
    ("0", "10", "0.1", "axial-force", "0"), ("0", "2", "0.4", "axial-force", "1.5"),
    ("5", "10", "0.000001", "axial-force", "0"), ("5", "10", "0.08", "axial-stretch", "1"), ("8", "10", "0.12", "axial-force", "10"),
    ("1", "10", "0.1", "axial-stretch", "0.9"), ("10", "10.01", "0.05", "axial-force", "0"),
]
COARSE, FINE = (32, mpf("1.25")), (44, mpf("1.15"))


class Rod:
    def __init__(self, A, B, law, double=False):
        self.A, self.B, self.law = (float(A), float(B), InDoubles(law)) if double else (A, B, law)

    def current(self, R, a, lz):
        return sqrt(a**2 + (R**2 - self.A**2) / lz)

    def panels(self, a, start, accuracy):
        """Cuts that grow from a bore, even in a solid rod; crowded at the outer wall of a law that locks there."""
        n, ratio = accuracy
        if self.A == 0:
            cuts = {start} | {self.B * k / 5 for k in range(1, 6)}
        else:
            cuts, R = {start, self.B}, self.A
            while R * ratio < self.B:
                R = R * ratio
                cuts.add(R)
        if self.law.locks and not isinstance(a, float):
            cuts |= {self.B - (self.B - self.A) * mpf(2) ** -k for k in range(2, 8)}
        cuts = sorted(c for c in cuts if c >= start)
        return n, list(zip(cuts, cuts[1:]))

    def at(self, r, a, lz, psi):
        """(srr, stt, stz, szz, W) without the pressure, at a current radius."""
        R = sqrt(self.A**2 + lz * (r**2 - a**2))
        lt = 1 / sqrt(lz) if not isinstance(r, np.ndarray) and r == 0 else r / R
        tt, tz, zz, rr, W = turned(self.law, lt**2 + (r * psi) ** 2, r * psi * lz, lz**2, 1 / (lt * lz))
        return rr, tt, tz, zz, W

    def integrals(self, a, lz, psi, start=None, accuracy=COARSE):
        """int (stt - srr)/r dr, axial force, torque, energy, for srr(b) = 0."""
        double = isinstance(lz, float)
        n, panels = self.panels(lz if double else a, self.A if start is None else start, (16, 1.5) if double else accuracy)
        total, pi = (np.sum, np.pi) if double else (lambda x: x, mp.pi)
        drop = axial = torque = energy = 0
        for lo, hi in panels:
            for r, w in gauss(self.current(lo, a, lz), self.current(hi, a, lz), n):
                rr, tt, tz, zz, W = self.at(r, a, lz, psi)
                drop += total(w * (tt - rr) / r)
                axial += total(w * pi * r * (2 * (zz - rr) - (tt - rr)))
                torque += total(w * 2 * pi * r**2 * tz)
                energy += total(w * 2 * pi * r * lz * W)
        return drop, axial + pi * a**2 * drop, torque, energy

    def residual(self, x, psi, kind, value, t):
        """Unknowns lz and, hollow, the bore. srr at the bore is -drop."""
        lz, a = x[0], x[1] if len(x) > 1 else x[0] * 0
        drop, N, _, _ = self.integrals(a, lz, psi * t)
        goal = 1 + t * (value - 1)
        area = (np.pi if isinstance(lz, float) else mp.pi) * (self.B**2 - self.A**2)
        first = lz - goal if kind == "axial-stretch" else (N - t * value) / area
        return [first] + ([drop] if len(x) > 1 else [])


def newton(f, x, h, stop, solve):
    for _ in range(40):
        f0, n = f(x), len(x)
        columns = [[(u - v) / (h * x[i]) for u, v in zip(f([y * (1 + h) if j == i else y for j, y in enumerate(x)]), f0)] for i in range(n)]
        step = solve([[columns[i][k] for i in range(n)] for k in range(n)], f0)
        x = [y - s for y, s in zip(x, step)]
        if max(abs(s / y) for s, y in zip(step, x)) < stop:
            return x
    raise AssertionError("newton")


def state(A, B, law, psi, kind, value):
    """(a, lz): the march in doubles, then at working precision."""
    rough, exact = Rod(A, B, law, True), Rod(A, B, law)
    x = [1.0] if A == 0 else [1.0, float(A)]
    for t in np.linspace(0.04, 1, 25):
        f = lambda y: rough.residual(y, float(psi), kind, float(value), t)
        with np.errstate(all="ignore"):
            x = newton(f, x, 1e-7, 1e-8, lambda J, g: list(map(float, np.linalg.solve(np.array(J), np.array(g)))))
    f = lambda y: exact.residual(y, psi, kind, value, 1)
    x = newton(f, list(map(mpf, x)), mpf(10) ** -22, mpf(10) ** -38, lambda J, g: list(mp.lu_solve(mp.matrix(J), mp.matrix(g))))
    return (x[1] if A != 0 else mpf(0)), x[0]


def confirm(rod, a, lz, psi):
    drop, N, M, E = rod.integrals(a, lz, psi)
    h = mpf(10) ** -15
    slope = lambda da, dl, dp: (rod.integrals(a + da, lz + dl, psi + dp)[3] - rod.integrals(a - da, lz - dl, psi - dp)[3]) / (2 * h)
    small = mpf(10) ** -20 * (abs(M) / rod.B + abs(N))
    assert abs(slope(0, 0, h * psi) / psi - M) < small * rod.B, "dE/dpsi"
    assert abs(slope(0, h, 0) - N) < small + mpf(10) ** -28, ("dE/dlz", slope(0, h, 0), N)
    if rod.A != 0:
        assert abs(drop) < mpf(10) ** -36 and abs(slope(h * a, 0, 0)) < small * 10 + mpf(10) ** -28, "dE/da"
    fine = rod.integrals(a, lz, psi, None, FINE)
    assert abs(fine[2] - M) < mpf(10) ** -27 * abs(M) and abs(fine[3] - E) < mpf(10) ** -26 * E, "rule"
    assert abs(fine[1] - N) < mpf(10) ** -23 * (abs(M) * psi), "rule"


def write_point(suite, id, rod, a, lz, psi, point):
    X, Y, Z = (num(c) for c in point)
    R = sqrt(X**2 + Y**2)
    r = rod.current(R, a, lz)
    rr, tt, tz, zz, W = rod.at(r, a, lz, psi)
    srr = -rod.integrals(a, lz, psi, R)[0] if R < rod.B else mpf(0)
    stt, szz = srr + tt - rr, srr + zz - rr
    theta = mp.atan2(Y, X) + psi * Z
    c, s = mp.cos(theta), mp.sin(theta)
    values = [("srr", srr), ("stt", stt), ("szz", szz), ("stz", tz), ("p", -(srr + stt + szz) / 3), ("W", W),
              ("ux", r * c - X), ("uy", r * s - Y), ("uz", (lz - 1) * Z)]
    if Z == 0:
        values.append(("u_r", r - R))
    else:
        values += [("sxx", srr * c * c + stt * s * s), ("sxy", (srr - stt) * s * c), ("syz", tz * c), ("szx", -tz * s)]
    for q, v in values:
        suite.value(id, q, v, point)


def along(radius, x, y, z):
    return tuple(format((Decimal(radius) * Decimal(c)).normalize(), "f") for c in (x, y)) + (z,)


def main():
    check_laws(LAW)
    suite = Suite("library-torsion-extension", HERE, MATERIALS, "Oracle cases: extended and twisted cylinders.")
    for m, law in LAW.items():
        for i, (A, B, twist, kind, value) in enumerate(LOADS, 1):
            id, psi = f"{m}-{i:02d}-{'solid' if A == '0' else 'hollow'}", num(twist)
            rod = Rod(num(A), num(B), law)
            a, lz = state(num(A), num(B), law, psi, kind, num(value))
            confirm(rod, a, lz, psi)
            bore = {"inner-radius": A} if A != "0" else {}
            suite.case(id, "torsion-extension", bore | {"outer-radius": B, kind: value, "twist": twist, "material": m})
            mid = format((Decimal(A) + Decimal(B)) / 2, "f")
            for point in ((A, "0", "0"), along(mid, "0.6", "0.8", "3"), along(mid, "0.8", "-0.6", "0"), ("0", B, "0")):
                write_point(suite, id, rod, a, lz, psi, point)
            drop, N, M, E = rod.integrals(a, lz, psi)
            totals = [("axial_stretch", lz), ("axial_force", N), ("torque", M), ("strain_energy", E), ("outer_radius", rod.current(rod.B, a, lz))]
            for q, v in totals + ([("inner_radius", a)] if A != "0" else []):
                suite.value(id, q, v)
            print(id, "lz", mp.nstr(lz, 8), "a", mp.nstr(a, 8), "N", mp.nstr(N, 8), "M", mp.nstr(M, 8), flush=True)
    suite.write()


if __name__ == "__main__":
    main()
