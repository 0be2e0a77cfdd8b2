"""Small-strain rings and spheres whose only displacement is radial: the field equation solved numerically.

    d srr/dr + n (srr - stt)/r + rho omega^2 r = 0     n = 1 ring, 2 sphere
    s_i = lam tr(e) + 2 mu e_i - (3 lam + 2 mu) alpha T,   err = u', ett = u/r,   ezz uniform, or szz = 0
    (r T')' = 0                                         integrated with the rest

The equation for u'' is integrated by collocation (gauss_ode.py); the unknowns (u, u' at the inner end of each layer,
ezz, the heat flux) enter linearly, so the state is found by superposition. No closed solution (C - D/r^2, logarithms)
is used.
"""

from mpmath import mp, mpf, pi, matrix, lu_solve, sqrt

from case_values import agreement, exact, number, small
from gauss_ode import integrate, rule

ORDERS = ((17, 1.3), (22, 1.4))


class Layer:
    def __init__(self, lo, hi, constants, plane_stress, expansion=0):
        self.lo, self.hi, self.flat = lo, hi, plane_stress
        E, nu = number(constants["E"]), number(constants["nu"])
        self.lam, self.mu = E * nu / ((1 + nu) * (1 - 2 * nu)), E / (2 * (1 + nu))
        self.alpha = expansion
        self.beta = (3 * self.lam + 2 * self.mu) * expansion
        whole = self.lam + 2 * self.mu
        # stiffness and thermal stress of the radial equation, ezz eliminated in plane stress
        self.stiff = 4 * self.mu * (self.lam + self.mu) / whole if plane_stress else whole
        self.heat = 2 * self.mu * self.beta / whole if plane_stress else self.beta


class Problem:
    """radii: layer bounds; the rest as named. `jump`: u outside minus u inside at the interface."""

    def __init__(self, layers, n, inner=0, outer=0, end="plane-strain", force=None, spin=0, heat=None, jump=0):
        self.layers, self.n, self.Pi, self.Po = layers, n, mpf(inner), mpf(outer)
        self.end, self.spin, self.jump = end, mpf(spin), mpf(jump)
        self.heat = heat or (mpf(0), mpf(0))
        self.solid = layers[0].lo == 0
        self.free = end in ("closed", "generalized-plane-strain")
        self.N = force if end == "generalized-plane-strain" else mpf(0)
        if end == "closed":
            self.N = pi * (self.Pi * layers[0].lo ** 2 - self.Po * layers[-1].hi ** 2)

    def unknowns(self):
        return 2 * len(self.layers) + int(self.free) + int(self.heated()) - int(self.solid)

    def heated(self):
        return self.heat[0] != self.heat[1]

    def split(self, x):
        """(starts of u, u' per layer, ezz, heat flux r T')."""
        x = list(x)
        if self.solid:
            x = [mpf(0)] + x
        starts = [(x[2 * k], x[2 * k + 1]) for k in range(len(self.layers))]
        rest = x[2 * len(self.layers) :]
        ezz = rest.pop(0) if self.free else mpf(0)
        return starts, ezz, rest.pop(0) if self.heated() else mpf(0)

    def local(self, layer, r, u, v, T, ezz):
        """Strains, stresses and W."""
        et = u / r if r else v
        ez = et if self.n == 2 else ezz
        if layer.flat:
            ez = (layer.beta * T - layer.lam * (v + et)) / (layer.lam + 2 * layer.mu)
        e = [v, et, ez]
        s = [layer.lam * sum(e) + 2 * layer.mu * x - layer.beta * T for x in e]
        return e, s, sum(a * (b - layer.alpha * T) for a, b in zip(s, e)) / 2

    def march(self, x, stops, order):
        """States (layer, r, u, u', T, force so far, energy so far) at both ends of each piece between stops."""
        starts, ezz, flux = self.split(x)
        T, F, W, out = self.heat[0], mpf(0), mpf(0), []
        for layer, (u, v) in zip(self.layers, starts):

            def f(r, y, layer=layer):
                v1 = -self.n * (y[1] / r - y[0] / r**2) + (layer.heat * flux / r - self.spin * r) / layer.stiff
                return [y[1], v1] + ([flux / r] if self.heated() else [])

            def extra(r, y, layer=layer):
                temperature = y[2] if self.heated() else self.heat[0]
                _, s, w = self.local(layer, r, y[0], y[1], temperature, ezz)
                return [2 * pi * r * s[2], w * (2 * pi * r if self.n == 1 else 4 * pi * r**2)]

            y = [u, v] + ([T] if self.heated() else [])
            inside = [layer.lo] + ([layer.hi / 4] if self.solid else []) + [r for r in stops if layer.lo < r < layer.hi] + [layer.hi]
            for p, q in zip(inside, inside[1:]):
                out.append((layer, p, *y[:2], y[2] if self.heated() else T, F, W))
                if p == 0:
                    y, (dF, dW) = self.centre(layer, q, v, extra, order)
                else:
                    y, (dF, dW) = integrate(f, p, q, y, *order, extra)
                F, W = F + dF, W + dW
                out.append((layer, q, *y[:2], y[2] if self.heated() else T, F, W))
            T = y[2] if self.heated() else T
        return out

    def centre(self, layer, q, v, extra, order):
        """From the centre, where u'' + u'/r - u/r^2 is of the form 0/0: the power series u = v r + k r^3, which the equation
        makes exact with 8 k = -spin/stiff; force and energy by Gauss quadrature."""
        k = -self.spin / layer.stiff / 8
        g = rule(order[0])
        parts = zip(*[extra(q * x, [v * q * x + k * (q * x) ** 3, v + 3 * k * (q * x) ** 2]) for x in g.x])
        return [v * q + k * q**3, v + 3 * k * q**2], [q * mp.fdot(zip(g.w, part)) for part in parts]

    def residual(self, x, order):
        states = self.march(x, [], order)
        _, ezz, _ = self.split(x)
        radial = [self.local(layer, r, u, v, T, ezz)[1][0] for layer, r, u, v, T, _, _ in states]
        rows = [] if self.solid else [radial[0] + self.Pi]
        for k in interfaces(states):
            rows += [states[k + 1][2] - states[k][2] - self.jump, radial[k + 1] - radial[k]]
        rows.append(radial[-1] + self.Po)
        if self.free:
            rows.append(states[-1][5] - self.N)
        if self.heated():
            rows.append(states[-1][4] - self.heat[1])
        return rows

    def solve(self, stops, order):
        """(states, ezz): the residual is affine in the unknowns, so columns by unit vectors are exact."""
        n = self.unknowns()
        base = self.residual([mpf(0)] * n, order)
        jac = matrix(n, n)
        for k in range(n):
            column = self.residual([mpf(int(i == k)) for i in range(n)], order)
            for i in range(n):
                jac[i, k] = column[i] - base[i]
        x = lu_solve(jac, -matrix(base))
        return self.march(x, stops, order), self.split(x)[1]


def interfaces(states):
    """Places k in the list with states k and k + 1 on the two sides of an interface."""
    return [k for k in range(1, len(states) - 1, 2) if states[k][0] is not states[k + 1][0]]


# ---------------------------------------------------------------- rows


def inner_point(p, q, n):
    middle = (p + q) / 2
    ratios = ("0.6", "0.8", "0") if n == 1 else ("0.48", "0.64", "0.6")
    point = [float(middle * mpf(x)) for x in ratios]
    return point if n == 2 else [point[0], point[1], 1.5]


def radius(point, n):
    return sqrt(sum(x**2 for x in exact(point)[: n + 1]))


def polar_rows(problem, state, ezz):
    layer, r, u, v, T = state[:5]
    _, s, W = problem.local(layer, r, u, v, T, ezz)
    named = {"u_r": u, "srr": s[0], "stt": s[1]}
    if problem.n == 1:
        named["szz"] = s[2]
    return named | {"p": -sum(s) / 3, "W": W}


def cartesian_rows(problem, state, ezz, point):
    X, named = exact(point), polar_rows(problem, state, ezz)
    n = [x / radius(point, problem.n) for x in X[: problem.n + 1]]
    tensor = {}
    for i, a in enumerate("xyz"[: problem.n + 1]):
        for j, b in list(enumerate("xyz"[: problem.n + 1]))[i:]:
            name = "szx" if a + b == "xz" else f"s{a}{b}"
            tensor[name] = (named["srr"] - named["stt"]) * n[i] * n[j] + (named["stt"] if i == j else 0)
    moved = {f"u{a}": named["u_r"] * x for a, x in zip("xyz", n)}
    if problem.n == 1:
        tensor["szz"] = named["szz"]
        if not problem.layers[0].flat:
            moved["uz"] = ezz * X[2]
    return moved | tensor | {"p": named["p"], "W": named["W"]}


def rows_of(problem, order):
    """[(point or None, {quantity: value})]: both walls and a point in the middle of each layer, totals."""
    points = [inner_point(layer.lo, layer.hi, problem.n) for layer in problem.layers]
    states, ezz = problem.solve([radius(p, problem.n) for p in points], order)
    last = states[-1]
    named = {"outer_radius": last[1] + last[2], "strain_energy": last[6]}
    if not problem.solid:
        named["inner_radius"] = states[0][1] + states[0][2]
    if problem.n == 1 and not problem.layers[0].flat:
        named |= {"axial_stretch": 1 + ezz, "axial_force": last[5]}
    rows = [(None, named)]
    for p in points:
        state = next(s for s in states if s[1] == radius(p, problem.n))
        rows.append((p, cartesian_rows(problem, state, ezz, p)))
    rows.append(((float(states[0][1]), 0.0, 0.0), polar_rows(problem, states[0], ezz)))
    rows.append(((0.0, float(last[1]), 0.0), polar_rows(problem, last, ezz)))
    for state in [states[k] for k in interfaces(states)]:
        rows.append(((0.0, float(state[1]), 0.0), {"srr": polar_rows(problem, state, ezz)["srr"]}))
    return rows


def write_cases(values, cases, build):
    for case in cases:
        first, second = [rows_of(build(case), order) for order in ORDERS]
        gap = max(agreement(a.values(), b.values()) for (_, a), (_, b) in zip(first, second))
        print(f"{case.id}: two discretisations {small(gap)}", flush=True)
        assert gap < mpf(10) ** -22, case.id
        for point, named in second:
            values.add_all(case.id, named, point)
