"""Radial motion of a compressible tube or sphere by shooting, at many digits. Used by compressible-tube and -sphere.

Displacement form. The only field is r(R). With principal stretches lr = r', lt = r/R (lz constant in a tube, a second
lt in a sphere) and the plain energy W(lr, lt, lz), P_i = dW/dl_i, equilibrium is

    d P_r/dR + n (P_r - P_t)/R = 0        n = 1 tube, 2 sphere

which gives r'' from r and r'. It is integrated by Gauss-Legendre collocation of s stages (order 2s) over panels that
grow with R. The slope at the inner wall, and its jump at an interface, follow from the radial stress there; Newton with
difference quotients at full precision finds the rest (bore or inner pressure, and axial stretch). There is no unknown
for J or the pressure: K/mu = 1e7 costs seven digits, and the working precision pays for them.

The laws are in laws.py.
"""

import sys
from pathlib import Path

from mpmath import mp, mpf, pi, sqrt, exp, matrix, lu_solve

sys.path.insert(0, str(Path(__file__).parents[1]))
from case_values import exact, agreement, small  # noqa: E402
from gauss_ode import panels, rule  # noqa: E402
from laws import Energy, law_check  # noqa: E402


def dot(a, b):
    return mp.fdot(zip(a, b))


# ---------------------------------------------------------------- the body


class Body:
    """Layers of a tube (dim 1) or sphere (dim 2), with the radii where values are wanted."""

    def __init__(self, radii, energies, dim, inside):
        """`inside`: radii within the layers where values are wanted."""
        self.radii, self.energies, self.dim = radii, energies, dim
        self.A, self.B = radii[0], radii[-1]
        self.stops = sorted(radii + inside)

    def stretches(self, lr, lt, lz):
        return [lr, lt, lt if self.dim == 2 else lz]

    def radial_stress(self, energy, lr, lt, lz):
        l = self.stretches(lr, lt, lz)
        _, T, M = energy.derivatives(l)
        J = l[0] * l[1] * l[2]
        return T[0] / J, (M[0][0] - T[0]) / J

    def slope(self, energy, lt, lz, stress, start):
        """lr at which the radial stress has the given value: Newton in ln lr."""
        lr = start
        for _ in range(200):
            s, ds = self.radial_stress(energy, lr, lt, lz)
            step = (stress - s) / ds
            step = max(min(step, mpf("0.3")), mpf("-0.3"))
            lr *= exp(step)
            if abs(step) < mpf(10) ** (-mp.dps + 12):
                return lr
        raise ArithmeticError("slope")

    def acceleration(self, energy, R, r, v, lz):
        """r'' from equilibrium."""
        l = self.stretches(v, r / R, lz)
        _, T, M = energy.derivatives(l)
        lt1 = (v - r / R) / R
        coupling = sum(M[0][1 : 1 + self.dim]) * lt1 / (l[0] * l[1])
        force = self.dim * (T[0] / l[0] - T[1] / l[1]) / R
        return -(force + coupling) * l[0] ** 2 / (M[0][0] - T[0])

    def march(self, a, slope, lz, s, ratio, guesses):
        """Integrates from the bore. Returns the states (layer, R, r, r') at both ends of every stretch between wanted
        radii, the radial stress at B, the axial force and the energy."""
        g = rule(s)
        states, force, stored = [], mpf(0), mpf(0)
        r, v, stops = a, slope, self.stops
        for layer, (lo, hi) in enumerate(zip(self.radii, self.radii[1:])):
            energy = self.energies[layer]
            if layer:
                inside, _ = self.radial_stress(self.energies[layer - 1], v, r / lo, lz)
                v = self.slope(energy, r / lo, lz, inside, v)
            for p, q in zip(stops, stops[1:]):
                if p < lo or q > hi:
                    continue
                states.append((layer, p, r, v))
                for R0, R1 in panels(p, q, ratio):
                    r, v, dF, dE = self._panel(energy, R0, R1 - R0, r, v, lz, g, guesses)
                    force, stored = force + dF, stored + dE
                states.append((layer, q, r, v))
        outer, _ = self.radial_stress(self.energies[-1], v, r / self.B, lz)
        return states, outer, force, stored

    def _panel(self, energy, R0, h, r0, v0, lz, g, guesses):
        s, key = len(g.x), (len(g.x), R0, h)
        c = guesses.get(key, [mpf(0)] * s)
        Rs = [R0 + h * x for x in g.x]
        last = None
        for _ in range(400):
            vs = [v0 + h * dot(row, c) for row in g.A]
            rs = [r0 + h * dot(row, vs) for row in g.A]
            new = [self.acceleration(energy, *args, lz) for args in zip(Rs, rs, vs)]
            change = max(abs(x - y) for x, y in zip(new, c)) * h
            c = new
            # down to round-off: with K/mu = 1e7 a slack here is 1e7 times larger in the stress
            if change < mpf(10) ** (1 - mp.dps) or (last and change >= last and change < mpf(10) ** (12 - mp.dps)):
                break
            last = change
        else:
            raise ArithmeticError("panel")
        guesses[key] = c
        vs = [v0 + h * dot(row, c) for row in g.A]
        rs = [r0 + h * dot(row, vs) for row in g.A]
        pulls, works = [], []
        for R, r, v in zip(Rs, rs, vs):
            l = self.stretches(v, r / R, lz)
            W, T, _ = energy.derivatives(l)
            pulls.append(2 * pi * T[2] / (l[0] * l[1] * l[2]) * r * v if self.dim == 1 else mpf(0))
            works.append(2 * pi * W * R if self.dim == 1 else 4 * pi * W * R**2)
        return r0 + h * dot(g.w, vs), v0 + h * dot(g.w, c), h * dot(g.w, pulls), h * dot(g.w, works)


# ---------------------------------------------------------------- loads and Newton


class Loads:
    """What is prescribed; `factor` scales it from nothing to the wanted load."""

    def __init__(self, case, body):
        self.body, self.case = body, case
        self.dead = case.problem.get("load") == "dead"
        self.Pi, self.Po = case.num("inner-pressure"), case.num("outer-pressure")
        self.stretch = "inner-wall-stretch" in case.problem
        self.volume = "enclosed-volume" in case.problem
        self.end, self.end_value = case.ends() if body.dim == 1 else ("sphere", None)
        self.free_length = self.end in ("closed", "generalized-plane-strain")

    def start(self):
        first = mpf(0) if self.stretch or self.volume else self.body.A
        return [first] + ([mpf(1)] if self.free_length else [])

    def motion(self, x, factor):
        """(a, lz, given inner pressure)."""
        lz = x[1] if self.free_length else mpf(1)
        if self.end == "fixed-stretch":
            lz = 1 + factor * (self.end_value - 1)
        if self.stretch:
            return self.body.A * (1 + factor * (self.case.num("inner-wall-stretch") - 1)), lz, x[0]
        if self.volume:
            own = pi * self.body.A**2
            return sqrt((own + factor * (self.case.num("enclosed-volume") - own)) / (pi * lz)), lz, x[0]
        return x[0], lz, factor * self.Pi

    def residual(self, x, factor, s, ratio, memory):
        body = self.body
        a, lz, inner = self.motion(x, factor)
        outer, lt = factor * self.Po, a / body.A
        true_inner = inner * body.A / (a * lz) if self.dead else inner
        guess = memory.get("slope", 1 / (lt * (lt if body.dim == 2 else lz)))
        slope = body.slope(body.energies[0], lt, lz, -true_inner, guess)
        memory["slope"] = slope
        states, srr, force, stored = body.march(a, slope, lz, s, ratio, memory)
        b = states[-1][2]
        true_outer = outer * body.B / (b * lz) if self.dead else outer
        out = [srr + true_outer]
        if self.end == "generalized-plane-strain":
            out.append(force - factor * self.end_value)
        if self.end == "closed":
            out.append(force - pi * ((inner * body.A**2 - outer * body.B**2) if self.dead else inner * a**2 - outer * b**2))
        return out, (states, force, stored, lz)


def jacobian(loads, x, factor, base, s, ratio, memory):
    """Difference quotients; their step is half the digits."""
    n, h = len(x), mpf(10) ** (-(mp.dps // 2))
    jac = matrix(n, n)
    for k in range(n):
        moved = list(x)
        moved[k] += h
        there, _ = loads.residual(moved, factor, s, ratio, memory)
        for i in range(n):
            jac[i, k] = (there[i] - base[i]) / h
    return jac


def newton(loads, x, factor, s, ratio, memory, tolerance, most=12):
    for _ in range(most):
        base, _ = loads.residual(x, factor, s, ratio, memory)
        step = lu_solve(jacobian(loads, x, factor, base, s, ratio, memory), -matrix(base))
        x = [p + q for p, q in zip(x, step)]
        if max(abs(q) for q in step) < tolerance:
            return x
    raise ArithmeticError("newton")


def polish(loads, x, s, ratio, jac):
    """Full digits from a start good to nine: steps with one matrix, each gaining about those nine digits again."""
    memory = {}
    for _ in range(15):
        base, outcome = loads.residual(x, mpf(1), s, ratio, memory)
        if jac is None:
            jac = jacobian(loads, x, mpf(1), base, s, ratio, memory)
        step = lu_solve(jac, -matrix(base))
        if max(abs(q) for q in step) < mpf(10) ** -30:
            return x, jac, outcome
        x = [p + q for p, q in zip(x, step)]
    raise ArithmeticError("polish")


ORDERS = ((17, 1.3), (22, 1.4))


def solve(loads, steps=6):
    """A function that gives the state by a discretisation of s stages and panels of that ratio."""
    x, memory, jac = loads.start(), {}, None
    with mp.workdps(30):
        for i in range(1, steps + 1):
            x = newton(loads, x, mpf(i) / steps, 8, 1.35, memory, mpf(10) ** -9)

    def at(s, ratio):
        nonlocal x, jac
        x, jac, outcome = polish(loads, x, s, ratio, jac)
        return outcome

    return at


# ---------------------------------------------------------------- values of a case


def inner_point(p, q, dim):
    """A point in the middle of a layer, off the axes; its radius is that of the doubles, not the rounded middle."""
    middle = (p + q) / 2
    ratios = ("0.6", "0.8", "0") if dim == 1 else ("0.48", "0.64", "0.6")
    point = [float(middle * mpf(x)) for x in ratios]
    return point if dim == 2 else [point[0], point[1], 1.5]


def radius(point, dim):
    return sqrt(sum(x**2 for x in exact(point)[: dim + 1]))


def layers_of(case):
    problem = case.problem
    if "radii" in problem:
        return case.nums("radii"), [Energy(*case.law_of(name)) for name in problem["materials"]]
    return [case.num("inner-radius"), case.num("outer-radius")], [Energy(*case.material())]


def polar(body, state, lz):
    """Stretches, stresses, J and W in the local axes."""
    layer, R, r, v = state
    l = body.stretches(v, r / R, lz)
    W, T, _ = body.energies[layer].derivatives(l)
    J = l[0] * l[1] * l[2]
    s = [t / J for t in T]
    named = {"u_r": r - R, "srr": s[0], "stt": s[1]}
    if body.dim == 1:
        named["szz"] = s[2]
    return named | {"p": -sum(s) / 3, "J": J, "W": W, "lambda_r": l[0], "lambda_t": l[1]}


def cartesian(body, state, lz, point):
    """Displacement and stress of a point off the axes."""
    X, named = exact(point), polar(body, state, lz)
    n = [x / radius(point, body.dim) for x in X[: body.dim + 1]] + [mpf(0)] * (2 - body.dim)
    srr, stt = named["srr"], named["stt"]
    tensor = {}
    for name, i, j in (("sxx", 0, 0), ("syy", 1, 1), ("sxy", 0, 1), ("szz", 2, 2), ("syz", 1, 2)):
        tensor[name] = (srr - stt) * n[i] * n[j] + (stt if i == j else 0)
    if body.dim == 1:
        tensor["szz"] = named["szz"]
        del tensor["syz"]
    u = [named["u_r"] * x for x in n]
    if body.dim == 1:
        u[2] = (lz - 1) * X[2]
    moved = dict(zip(("ux", "uy", "uz"), u))
    return moved | tensor | {k: named[k] for k in ("p", "J", "W", "lambda_r", "lambda_t")}


def totals(body, outcome):
    states, force, stored, lz = outcome
    named = {"inner_radius": states[0][2], "outer_radius": states[-1][2], "strain_energy": stored}
    if body.dim == 1:
        named |= {"axial_stretch": lz, "axial_force": force, "enclosed_volume": pi * states[0][2] ** 2 * lz}
    return named


def rows_of(case, body, points, outcome):
    """[(point or None, {quantity: value})]: both walls, a point inside each layer, continuous values at interfaces."""
    states, _, _, lz = outcome
    rows = [(None, totals(body, outcome))]
    for p, point in zip(states[1::4], points):
        rows.append((point, cartesian(body, p, lz, point)))
    walls = {0: states[0], len(body.radii) - 1: states[-1]}
    for i, R in enumerate(body.radii):
        state = walls.get(i) or next(s for s in states if s[1] == R)
        named = polar(body, state, lz)
        point = (0.0, float(R), 0.0) if i else (float(R), 0.0, 0.0)
        if i in walls:
            rows.append((point, {k: named[k] for k in named if not k.startswith("lambda")}))
        else:
            rows.append((point, {k: named[k] for k in ("u_r", "srr")}))
    return rows


def run(case, dim, digits):
    """Rows of one case, checked against the other discretisation."""
    mp.dps = digits
    radii, energies = layers_of(case)
    points = [inner_point(p, q, dim) for p, q in zip(radii, radii[1:])]
    body = Body(radii, energies, dim, [radius(p, dim) for p in points])
    laws = max(law_check(e) for e in energies)
    at = solve(Loads(case, body))
    for level in range(4):  # near a lock the solution has singular points close to the wall: shorter panels
        outcomes = [at(s, mpf(ratio) ** (mpf(1) / 2**level)) for s, ratio in ORDERS]
        first, second = [rows_of(case, body, points, o) for o in outcomes]
        gap = max(spread(a, b) for (_, a), (_, b) in zip(first, second))
        if gap < mpf(10) ** -25:
            break
    print(f"{case.id}: law {small(laws)}, two discretisations {small(gap)}, level {level}", flush=True)
    assert laws < mpf(10) ** -20 and gap < mpf(10) ** -25, case.id
    return case.id, second


def spread(a, b):
    return agreement(a.values(), b.values())
