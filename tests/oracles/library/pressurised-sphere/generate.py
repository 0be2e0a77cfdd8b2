"""Many-digit states of the pressurised incompressible sphere, on all branches. Writes suite.yaml and values.csv.

Route. The unknown is the current bore radius a. At a current radius r
    R = (A^3 + r^3 - a^3)^(1/3)     l = ((R/r)^2, r/R, r/R)     T_i = l_i dW/dl_i from the plain energy
    d srr/dr = 2 (Tt - Tr)/r, srr(b) = -Po      energy = int W 4 pi R^2 dR
integrated over the current wall by Gauss panels at 50 digits. The curve P(a) = Pi - Po is scanned in doubles from deep
compression to a bore 40 times A (or the lock); its turning points cut it into monotone pieces and each crossing of the load is a
branch, counted along the bore: 1 is the piece that starts at zero load, 2 and 3 are the next pieces.
limit_pressure is the first maximum of Pi - Po, where there is one, by the root of dP/da; given for cases without outer pressure.
Confirmed in each state: dE/da = 4 pi a^2 (Pi - Po), and a second Gauss rule.
"""

import sys
from decimal import Decimal
from pathlib import Path

import numpy as np

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_laws import InDoubles, Suite, build, check_laws, gauss, mp, mpf, num, sqrt  # noqa: E402

MATERIALS = {
    "neo": ("neo-Hookean", {"mu": "0.4"}),
    "mooney": ("Mooney-Rivlin", {"c10": "0.18", "c01": "0.018"}),
    "mooney-weak": ("Mooney-Rivlin", {"c10": "0.19", "c01": "0.009"}),
    "treloar": ("Ogden", {"mu": ["0.63", "0.0012", "-0.01"], "alpha": ["1.3", "5", "-2"]}),
    "gent": ("Gent", {"mu": "0.4", "Jm": "30"}),
    "gent-wide": ("Gent", {"mu": "0.25", "Jm": "97.2"}),
    "chain": ("Arruda-Boyce", {"mu": "0.3", "N": "8"}),
    "chain-long": ("Arruda-Boyce", {"mu": "0.27", "N": "26.5"}),
}
LAW = build(MATERIALS)
SLOW = {"chain": ("1.5", "10"), "chain-long": ("1.001", "2")}
SIZES = {"1.001": ("10", "10.01"), "1.5": ("10", "15"), "2": ("5", "10"), "10": ("1", "10")}
COARSE, FINE = (32, mpf("1.25")), (44, mpf("1.15"))


class Sphere:
    def __init__(self, A, B, law, double=False):
        self.A, self.B, self.law = (float(A), float(B), InDoubles(law)) if double else (A, B, law)

    def outer(self, a):
        return self.current(self.B, a)

    def current(self, R, a):
        third = 1 / 3 if isinstance(a, float) else mpf(1) / 3
        return (a**3 + R**3 - self.A**3) ** third

    def stretches(self, r, a):
        third = 1 / 3 if isinstance(a, float) else mpf(1) / 3
        R = (self.A**3 + (r**3 - a**3)) ** third
        return ((R / r) ** 2, r / R, r / R)

    def panels(self, a, start, accuracy):
        n, ratio = accuracy
        cuts, R = {start, self.B}, start
        while R * ratio < self.B:
            R = R * ratio
            cuts.add(R)
        if self.law.locks and not isinstance(a, float):
            cuts |= {self.A + (self.B - self.A) * mpf(2) ** -k for k in range(2, 16)}
        cuts = sorted(c for c in cuts if c >= start)
        return n, list(zip(cuts, cuts[1:]))

    def drop(self, a, start=None, accuracy=COARSE):
        double = isinstance(a, float)
        n, panels = self.panels(a, self.A if start is None else start, (16, 1.5) if double else accuracy)
        total = 0
        for lo, hi in panels:
            for r, w in gauss(self.current(lo, a), self.current(hi, a), n):
                T = self.law.products(self.stretches(r, a))
                total += (np.sum if double else mpf)(2 * w * (T[1] - T[0]) / r)
        return total

    def energy(self, a, accuracy=COARSE):
        n, panels = self.panels(a, self.A, accuracy)
        total = mpf(0)
        for lo, hi in panels:
            for R, w in gauss(lo, hi, n):
                lt = self.current(R, a) / R
                total += w * 4 * mp.pi * R**2 * self.law.energy((lt**-2, lt, lt))
        return total

    def stress(self, R, a, Po):
        srr = -Po - (self.drop(a, R) if R < self.B else 0)
        T = self.law.products(self.stretches(self.current(R, a), a))
        return srr, srr + T[1] - T[0]


def secant(f, x0, x1, digits):
    f0, f1 = f(x0), f(x1)
    for _ in range(80):
        if f1 == f0 or abs(x1 - x0) <= mpf(10) ** -digits * abs(x1):
            return x1
        x0, x1, f0 = x1, x1 - f1 * (x1 - x0) / (f1 - f0), f1
        f1 = f(x1)
    raise AssertionError("secant")


class Curve:
    """P(a) scanned in doubles: the monotone pieces from the one that holds the unloaded state."""

    def __init__(self, sphere):
        self.sphere, double = sphere, Sphere(sphere.A, sphere.B, sphere.law, True)
        self.a, self.P = [], []
        for a in np.exp(np.arange(-1.0, np.log(40), 0.002)) * double.A:
            with np.errstate(all="ignore"):
                P = double.drop(float(a))
            if np.isfinite(P):
                self.a.append(float(a))
                self.P.append(P)
            elif a > double.A:
                break
        self.double = double
        turns = [i for i in range(1, len(self.P) - 1) if (self.P[i] - self.P[i - 1]) * (self.P[i + 1] - self.P[i]) < 0]
        self.pieces = list(zip([0] + turns, turns + [len(self.P) - 1]))
        zero = next(i for i, (lo, hi) in enumerate(self.pieces) if self.a[lo] < double.A <= self.a[hi])
        self.pieces, self.turns = self.pieces[zero:], turns[zero:]

    def extremum(self, i):
        """Bore of the turning point near the sample i: root of dP/da."""
        h = mpf(10) ** -14
        slope = lambda a: (self.sphere.drop(a * (1 + h)) - self.sphere.drop(a * (1 - h))) / (2 * h * a)
        a = secant(slope, mpf(self.a[i]), mpf(self.a[i]) * (1 + mpf(10) ** -6), 16)
        assert self.a[i - 1] < a < self.a[i + 1]
        return a

    def first_maximum(self):
        return self.sphere.drop(self.extremum(self.turns[0])) if self.turns else None

    def branches(self, load):
        """Bores at Pi - Po = load, one for each monotone piece that reaches it, in order."""
        found = []
        for lo, hi in self.pieces:
            for i in range(lo, hi):
                if (self.P[i] - float(load)) * (self.P[i + 1] - float(load)) <= 0:
                    a = secant(lambda a: self.sphere.drop(a) - load, mpf(self.a[i]), mpf(self.a[i + 1]), 42)
                    assert self.a[i] * (1 - 1e-9) < a < self.a[i + 1] * (1 + 1e-9)
                    found.append(a)
                    break
        return found


def confirm(sphere, a, drop):
    h = mpf(10) ** -15
    slope = (sphere.energy(a * (1 + h)) - sphere.energy(a * (1 - h))) / (2 * h * a)
    size = abs(sphere.stress(sphere.A, a, mpf(0))[1]) + abs(drop)
    assert abs(slope - 4 * mp.pi * a**2 * drop) < mpf(10) ** -19 * size * a**2, "dE/da"
    assert abs(sphere.drop(a, None, FINE) - drop) < mpf(10) ** -28 * size, "rule"
    E = sphere.energy(a)
    assert abs(sphere.energy(a, FINE) - E) < mpf(10) ** -26 * E, "rule, energy"


def along(radius, direction):
    return tuple(format((Decimal(radius) * Decimal(c)).normalize(), "f") for c in direction)


def write_state(suite, id, size, sphere, a, Po):
    A, B = size
    mid = format((Decimal(A) + Decimal(B)) / 2, "f")
    for name, point in (("A", ("0", "0", A)), ("mid", along(mid, ("0.48", "0.6", "0.64"))), ("B", (B, "0", "0"))):
        x = [num(c) for c in point]
        R = sqrt(x[0] ** 2 + x[1] ** 2 + x[2] ** 2)
        r, n = sphere.current(R, a), [c / R for c in x]
        srr, stt = sphere.stress(R, a, Po)
        values = [("u_r", r - R), ("srr", srr), ("stt", stt), ("p", -(srr + 2 * stt) / 3)]
        if name == "mid":
            cartesian = lambda i, j: (srr - stt) * n[i] * n[j] + (stt if i == j else 0)
            values += [("ux", (r - R) * n[0]), ("uz", (r - R) * n[2]), ("sxx", cartesian(0, 0)), ("sxy", cartesian(0, 1)),
                       ("syz", cartesian(1, 2)), ("szx", cartesian(2, 0)), ("lambda_t", r / R), ("lambda_r", (R / r) ** 2),
                       ("W", sphere.law.energy(((R / r) ** 2, r / R, r / R)))]
        for q, v in values:
            suite.value(id, q, v, point)
    for q, v in (("inner_radius", a), ("outer_radius", sphere.outer(a)), ("strain_energy", sphere.energy(a)),
                 ("enclosed_volume", mp.pi * 4 / 3 * a**3)):
        suite.value(id, q, v)


def four(x):
    return format(Decimal(f"{float(x):.4g}"), "f")


def loads(curve):
    """Displayed loads: on the way up, near the first maximum, and in the middle of the fold where there are three branches."""
    top = curve.P[curve.turns[0]] if curve.turns else None
    small = 4e-6 if curve.double.B / curve.double.A > 1.01 else 4e-9
    chosen = [("small", four(small))]
    if top is None:
        start = np.searchsorted(curve.a, 1.4 * curve.double.A)
        return chosen + [("up", four(curve.P[start]))]
    chosen.append(("up", four(0.6 * top)))
    if len(curve.turns) > 1:
        bottom = curve.P[curve.turns[1]]
        chosen.append(("fold", four(bottom + 0.5 * (top - bottom))))
    else:
        chosen.append(("top", four(0.995 * top)))
    return chosen


def main():
    check_laws(LAW)
    suite = Suite("library-pressurised-sphere", HERE, MATERIALS, "Oracle cases: pressurised sphere, all branches.")
    for m, law in LAW.items():
        for ratio, size in SIZES.items():
            if ratio not in SLOW.get(m, SIZES):
                continue
            sphere = Sphere(num(size[0]), num(size[1]), law)
            curve = Curve(sphere)
            limit = curve.first_maximum()
            print(m, ratio, "turns", [round(curve.a[i] / curve.double.A, 3) for i in curve.turns], limit and mp.nstr(limit, 6), flush=True)
            cases = [(name, text, None) for name, text in loads(curve)]
            if ratio in ("1.5", "10"):
                cases += [("crushed", None, four(curve.P[np.searchsorted(curve.a, 0.75 * curve.double.A)] * -1)),
                          ("both", four(0.05 + float(loads(curve)[1][1])), "0.05")]
            for name, inner, outer in cases:
                Pi, Po = num(inner or "0"), num(outer or "0")
                for branch, a in enumerate(curve.branches(Pi - Po), 1):
                    if branch > 1 and name == "small":
                        break
                    id = f"{m}-{ratio}-{name}-{branch}"
                    confirm(sphere, a, sphere.drop(a))
                    problem = {"inner-radius": size[0], "outer-radius": size[1], "material": m}
                    problem |= ({"inner-pressure": inner} if inner else {}) | ({"outer-pressure": outer} if outer else {})
                    suite.case(id, "pressurised-sphere", problem | ({"branch": branch} if branch > 1 else {}))
                    write_state(suite, id, size, sphere, a, Po)
                    if limit is not None and outer is None:
                        suite.value(id, "limit_pressure", limit)
                    print("  ", id, inner, outer, "a/A", mp.nstr(a / sphere.A, 6), flush=True)
    suite.write()


if __name__ == "__main__":
    main()
