"""Shared by the oracle scripts of the incompressible finite-strain entries: laws, Gauss rules, and the writers.

Every law is written as its textbook says, as an energy W(l1, l2, l3) of the principal stretches, with the products
T_i = l_i dW/dl_i by hand. ``check_laws`` compares the two by numerical differentiation at random stretches. Nothing is in
difference form: 50 digits stand in for care. The same functions take numpy arrays: the march from zero load is in doubles.
"""

import csv
import random

import numpy as np
from mpmath import mp, mpf

mp.dps = 50


def num(text):
    """The double nearest to a displayed decimal, exactly."""
    return mpf(float(text))


def either(name):
    of_mp, of_np = getattr(mp, name), getattr(np, name)
    return lambda x: of_np(x) if isinstance(x, (np.ndarray, float)) else of_mp(x)


log, exp, sqrt, sinh = (either(n) for n in ("log", "exp", "sqrt", "sinh"))


def inverse_langevin(x):
    """Solves coth b - 1/b = x. The start is Cohen's fraction; then Newton, in doubles first."""
    if isinstance(x, mpf):
        b, steps = mpf(float(inverse_langevin(np.array([float(x)]))[0])), 3
    else:
        b, steps = x * (3 - x * x) / (1 - x * x), 6
    for _ in range(steps):
        coth = 1 + 2 / (exp(2 * b) - 1)
        b = b - (coth - 1 / b - x) / (1 / (b * b) - coth * coth + 1)
    return b


class Invariant:
    """A law W(I1, I2): T_i = 2 (W1 l_i^2 - W2 / l_i^2)."""

    locks = False

    def energy(self, l):
        return self.w(*self.invariants(l))

    def invariants(self, l):
        return l[0] ** 2 + l[1] ** 2 + l[2] ** 2, l[0] ** -2 + l[1] ** -2 + l[2] ** -2

    def products(self, l):
        w1, w2 = self.slopes(*self.invariants(l))
        return [2 * (w1 * x**2 - w2 / x**2) for x in l]


class MooneyRivlin(Invariant):
    def __init__(self, c10, c01="0"):
        self.c10, self.c01 = num(c10), num(c01)

    def w(self, i1, i2):
        return self.c10 * (i1 - 3) + self.c01 * (i2 - 3)

    def slopes(self, i1, i2):
        return self.c10, self.c01


class NeoHookean(MooneyRivlin):
    def __init__(self, mu):
        self.c10, self.c01 = num(mu) / 2, mpf(0)


class Polynomial(Invariant):
    def __init__(self, terms):
        self.terms = [(i, j, num(c)) for i, j, c in terms]

    def w(self, i1, i2):
        return sum(c * (i1 - 3) ** i * (i2 - 3) ** j for i, j, c in self.terms)

    def slopes(self, i1, i2):
        x, y = i1 - 3, i2 - 3
        w1 = sum(c * i * x ** (i - 1) * y**j for i, j, c in self.terms if i > 0)
        w2 = sum(c * j * x**i * y ** (j - 1) for i, j, c in self.terms if j > 0)
        return w1, w2


class Yeoh(Polynomial):
    def __init__(self, c10, c20, c30):
        super().__init__([(1, 0, c10), (2, 0, c20), (3, 0, c30)])


class Demiray(Invariant):
    def __init__(self, c, b):
        self.c, self.b = num(c), num(b)

    def w(self, i1, i2):
        return self.c / (2 * self.b) * (exp(self.b * (i1 - 3)) - 1)

    def slopes(self, i1, i2):
        return self.c / 2 * exp(self.b * (i1 - 3)), 0


class Gent(Invariant):
    locks = True

    def __init__(self, mu, Jm):
        self.mu, self.Jm = num(mu), num(Jm)

    def w(self, i1, i2):
        return -self.mu * self.Jm / 2 * log(1 - (i1 - 3) / self.Jm)

    def slopes(self, i1, i2):
        gap = 1 - (i1 - 3) / self.Jm
        if isinstance(gap, np.ndarray):
            gap = np.where(gap > 0, gap, np.nan)
        elif gap <= 0:
            raise ValueError("beyond the lock")
        return self.mu / 2 / gap, 0


class ArrudaBoyce(Invariant):
    """W = mu N (x b + ln(b / sinh b)) - its value at rest; x = sqrt(I1 / (3 N)), b the inverse Langevin of x."""

    locks = True

    def __init__(self, mu, N):
        self.mu, self.N = num(mu), num(N)
        self.rest = mpf(0)
        self.rest = self.w(mpf(3), None)

    def w(self, i1, i2):
        x = sqrt(i1 / (3 * self.N))
        b = inverse_langevin(x)
        return self.mu * self.N * (x * b + log(b / sinh(b))) - self.rest

    def slopes(self, i1, i2):
        x = sqrt(i1 / (3 * self.N))
        if isinstance(x, np.ndarray):
            x = np.where(x < 1, x, np.nan)
        elif x >= 1:
            raise ValueError("beyond the lock")
        return self.mu * inverse_langevin(x) / (6 * x), 0


class ArrudaBoyceSeries(Invariant):
    C = [mpf(1) / 2, mpf(1) / 20, mpf(11) / 1050, mpf(19) / 7000, mpf(519) / 673750]

    def __init__(self, mu, N):
        self.mu, self.N = num(mu), num(N)

    def w(self, i1, i2):
        return self.mu * sum(c / self.N ** (n - 1) * (i1**n - 3**n) for n, c in enumerate(self.C, 1))

    def slopes(self, i1, i2):
        return self.mu * sum(c * n / self.N ** (n - 1) * i1 ** (n - 1) for n, c in enumerate(self.C, 1)), 0


class Ogden:
    locks = False

    def __init__(self, mu, alpha):
        self.terms = [(num(m), num(a)) for m, a in zip(mu, alpha)]

    def energy(self, l):
        return sum(m / a * (l[0] ** a + l[1] ** a + l[2] ** a - 3) for m, a in self.terms)

    def products(self, l):
        return [sum(m * x**a for m, a in self.terms) for x in l]


class TwoFibre:
    """Matrix mu; two families at +-beta from the hoop direction, silent in compression. Stretches (radial, hoop, axial)."""

    locks = False

    def __init__(self, mu, k1, k2, beta):
        self.mu, self.k1, self.k2 = num(mu), num(k1), num(k2)
        self.c2, self.s2 = mp.cos(num(beta)) ** 2, mp.sin(num(beta)) ** 2

    def excess(self, l):
        e = l[1] ** 2 * self.c2 + l[2] ** 2 * self.s2 - 1
        return np.maximum(e, 0) if isinstance(e, np.ndarray) else max(e, mpf(0))

    def energy(self, l):
        e = self.excess(l)
        return self.mu / 2 * (l[0] ** 2 + l[1] ** 2 + l[2] ** 2 - 3) + self.k1 / self.k2 * (exp(self.k2 * e * e) - 1)

    def products(self, l):
        e = self.excess(l)
        w4 = 4 * self.k1 * e * exp(self.k2 * e * e)
        return [self.mu * l[0] ** 2, self.mu * l[1] ** 2 + w4 * self.c2 * l[1] ** 2, self.mu * l[2] ** 2 + w4 * self.s2 * l[2] ** 2]

    def switch_hoop_squared(self, lz):
        """The hoop stretch, squared, at which the fibres wake."""
        return (1 - lz**2 * self.s2) / self.c2


LAWS = {
    "neo-Hookean": NeoHookean, "Mooney-Rivlin": MooneyRivlin, "Yeoh": Yeoh, "Demiray": Demiray, "Gent": Gent, "Ogden": Ogden,
    "Arruda-Boyce": ArrudaBoyce, "Arruda-Boyce-series": ArrudaBoyceSeries, "two-fibre": TwoFibre, "polynomial": Polynomial,
}


class InDoubles:
    """The same law with its constants as doubles, for the march."""

    def __init__(self, law):
        self.__class__ = type("Double" + type(law).__name__, (type(law),), {})
        self.__dict__ = {k: as_double(v) for k, v in law.__dict__.items()}
        if isinstance(law, ArrudaBoyceSeries):
            self.C = [float(c) for c in law.C]


def as_double(v):
    if isinstance(v, mpf):
        return float(v)
    if isinstance(v, list):
        return [tuple(float(x) if isinstance(x, mpf) else x for x in t) for t in v]
    return v


def build(materials):
    return {name: LAWS[kind](**constants) for name, (kind, constants) in materials.items()}


def check_laws(laws):
    """The hand derivatives against differences of the plain energy."""
    dice = random.Random(7)
    for name, law in laws.items():
        for _ in range(3):
            l = [mpf(dice.uniform(0.8, 1.25)) for _ in range(3)]
            for i, t in enumerate(law.products(l)):
                step = lambda h: law.energy([x + (h if j == i else 0) for j, x in enumerate(l)])
                h = mpf(10) ** -14
                slope = (8 * (step(h) - step(-h)) - step(2 * h) + step(-2 * h)) / (12 * h)
                assert abs(slope * l[i] - t) < mpf(10) ** -30, (name, i, slope * l[i], t)


def turned(law, p, q, s, third):
    """(t11, t12, t22, t33, W) without the pressure, where the left Cauchy-Green tensor is [[p, q], [q, s]] in the 1-2 plane.

    Principal stretches and axes by hand; then the law's products T_i, turned back. Isotropic laws only.
    """
    half, lean = (p + s) / 2, (p - s) / 2
    D = sqrt(lean**2 + q**2)
    l = (sqrt(half + D), sqrt(half - D), third)
    T = law.products(l)
    mean, radius = (T[0] + T[1]) / 2, (T[0] - T[1]) / 2
    if not isinstance(D, np.ndarray) and D == 0:
        return mean, 0 * mean, mean, T[2], law.energy(l)
    return mean + radius * lean / D, radius * q / D, mean - radius * lean / D, T[2], law.energy(l)


# --- Gauss rules -----------------------------------------------------------------------------------------------------

RULES = {}


def rule(n):
    """Gauss-Legendre on (-1, 1) by Newton on the recurrence, at working precision and a little more."""
    if n not in RULES:
        with mp.workdps(mp.dps + 10):
            x = [root(n, mp.cos(mp.pi * (i + mpf(3) / 4) / (n + mpf(1) / 2))) for i in range(n)]
            RULES[n] = [(+v, 2 / ((1 - v * v) * slope**2)) for v, slope in x]
    return RULES[n]


def root(n, x):
    for _ in range(8):
        p, q = mpf(1), mpf(0)
        for k in range(n):
            p, q = ((2 * k + 1) * x * p - k * q) / (k + 1), p
        slope = n * (x * p - q) / (x * x - 1)
        x -= p / slope
    return x, slope


DOUBLE = np.polynomial.legendre.leggauss(16)


def gauss(lo, hi, n):
    """(node, weight) pairs on (lo, hi); in doubles one pair of arrays."""
    mid, half = (lo + hi) / 2, (hi - lo) / 2
    if isinstance(lo, float):
        return [(mid + half * DOUBLE[0], half * DOUBLE[1])]
    return [(mid + half * x, half * w) for x, w in rule(n)]


# --- Writers ---------------------------------------------------------------------------------------------------------


def flow(value):
    """One value as YAML on one line."""
    if isinstance(value, dict):
        return "{ " + ", ".join(f"{k}: {flow(v)}" for k, v in value.items()) + " }"
    if isinstance(value, (list, tuple)):
        return "[" + ", ".join(flow(v) for v in value) + "]"
    return str(value)


def constants_flow(constants):
    if "terms" in constants:
        return flow({"terms": [{"i": i, "j": j, "c": c} for i, j, c in constants["terms"]]})
    return flow(constants)


class Suite:
    """Collects cases and values; writes suite.yaml and values.csv beside the script."""

    def __init__(self, name, folder, materials, note):
        self.name, self.folder, self.materials, self.note = name, folder, materials, note
        self.cases, self.rows = [], []

    def case(self, id, entry, problem):
        assert id not in [c[0] for c in self.cases], id
        self.cases.append((id, entry, problem))

    def value(self, id, quantity, value, point=("", "", "")):
        text = "0" if abs(value) < mpf(10) ** -38 else mp.nstr(mpf(value), 25, min_fixed=-3, max_fixed=6)
        self.rows.append((id, quantity, *point, text))

    def write(self):
        lines = [f"# {self.note}", "# Written by generate.py beside this file.", f"suite: {self.name}", "invented: true",
                 "units: { length: mm, stress: MPa }", "materials:"]
        lines += [f"  {m}: {{ {kind}: {constants_flow(c)} }}" for m, (kind, c) in self.materials.items()]
        lines.append("cases:")
        for id, entry, problem in self.cases:
            lines += [f"  - id: {id}", f"    problem: {{ {entry}: {flow(problem)} }}"]
        (self.folder / "suite.yaml").write_text("\n".join(lines) + "\n")
        with open(self.folder / "values.csv", "w", newline="") as f:
            out = csv.writer(f, lineterminator="\n")
            out.writerow(["case", "quantity", "X", "Y", "Z", "value"])
            out.writerows(self.rows)
        print(self.name, len(self.cases), "cases", len(self.rows), "values")
