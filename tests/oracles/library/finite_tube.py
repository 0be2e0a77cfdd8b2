"""A pressurised tube of one or more layers by direct integration over the CURRENT wall, shared by three oracle scripts.

Unknowns: the current bore radius a and the axial stretch lz. At a current radius r
    R = sqrt(A^2 + lz (r^2 - a^2))      l = (1/(lt lz), r/R, lz)      T_i = l_i dW/dl_i
    d srr/dr = (Tt - Tr)/r, srr(b) = -Po      szz = srr + Tz - Tr      N = int szz 2 pi r dr      energy = int W 2 pi R dR
Confirmed in each state, ``confirm``: the two derivatives of the energy are the loads' work,
    dE/da = 2 pi a lz (Pi - Po)      dE/dlz = N + pi Po (B^2 - A^2)/lz
and a second set of panels with more points. The first branch is followed from zero load in doubles, in small steps with all
loads in proportion, halved until the sign of the Jacobian's determinant does not change on the way.
"""

from decimal import Decimal

import numpy as np
from mpmath import mp, mpf

from finite_laws import InDoubles, gauss, num, sqrt

COARSE, FINE = (32, mpf("1.25")), (44, mpf("1.15"))
PI = mp.pi


class Wall:
    """Layers (R0, R1, law, factor); the factor multiplies the moduli at R and may be None."""

    def __init__(self, layers):
        self.layers = layers
        self.A, self.B = layers[0][0], layers[-1][1]

    def in_doubles(self):
        return Wall([(float(r0), float(r1), InDoubles(law), f) for r0, r1, law, f in self.layers])

    def outer(self, a, lz):
        return sqrt(a**2 + (self.B**2 - self.A**2) / lz)

    def current(self, R, a, lz):
        return sqrt(a**2 + (R**2 - self.A**2) / lz)

    def panels(self, a, lz, start, ratio):
        """(law, factor, R0, R1) from `start` outwards, growing from the inner edge of a layer that may lock."""
        for R0, R1, law, factor in self.layers:
            if R1 <= start:
                continue
            cuts, R = {max(R0, start), R1}, R0
            while R * ratio < R1:
                R = R * ratio
                cuts.add(R)
            if law.locks and not isinstance(R0, float):
                cuts |= {R0 + (R1 - R0) * mpf(2) ** -k for k in range(2, 16)}
            if hasattr(law, "switch_hoop_squared"):
                cuts |= self.switch(law, a, lz)
            cuts = sorted(c for c in cuts if max(R0, start) <= c <= R1)
            yield from ((law, factor, lo, hi) for lo, hi in zip(cuts, cuts[1:]))

    def switch(self, law, a, lz):
        """The radius where the fibres wake: lt^2 = 1/lz + (a^2 - A^2/lz)/R^2."""
        above, k = law.switch_hoop_squared(lz) - 1 / lz, a**2 - self.A**2 / lz
        return {sqrt(k / above)} if above != 0 and k / above > 0 else set()

    def at(self, r, a, lz, law, factor):
        """Reference radius, products T_i and energy at the current radius r."""
        R = sqrt(self.A**2 + lz * (r**2 - a**2))
        lt = r / R
        l = (1 / (lt * lz), lt, lz)
        f = factor(R) if factor else 1
        return R, [f * t for t in law.products(l)], l, f

    def integrals(self, a, lz, accuracy=COARSE, start=None, energy=False):
        """Pressure drop, int (Tz - Tr) 2 pi r dr, int (Tt - Tr) pi r dr and the energy from `start` to the outer wall."""
        drop = axial = hoop = W = 0
        double = isinstance(a, float)
        n, ratio = (16, 1.5) if double else accuracy
        pi = np.pi if double else PI
        total = np.sum if double else (lambda x: x)
        for law, factor, lo, hi in self.panels(a, lz, self.A if start is None else start, ratio):
            for r, w in gauss(self.current(lo, a, lz), self.current(hi, a, lz), n):
                R, T, l, f = self.at(r, a, lz, law, factor)
                drop += total(w * (T[1] - T[0]) / r)
                axial += total(w * 2 * pi * r * (T[2] - T[0]))
                hoop += total(w * pi * r * (T[1] - T[0]))
            if energy:
                for R, w in gauss(lo, hi, n):
                    lt = sqrt(a**2 + (R**2 - self.A**2) / lz) / R
                    W += w * 2 * pi * R * (factor(R) if factor else 1) * law.energy((1 / (lt * lz), lt, lz))
        return drop, axial, hoop, W

    def loads(self, a, lz, Po, accuracy=COARSE):
        """Inner pressure and the axial force on the wall; int srr 2 pi r dr by parts."""
        drop, axial, hoop, _ = self.integrals(a, lz, accuracy)
        pi = np.pi if isinstance(a, float) else PI
        Pi = Po + drop
        return Pi, axial - hoop + pi * (Pi * a**2 - Po * self.outer(a, lz) ** 2)

    def energy(self, a, lz, accuracy=COARSE):
        return self.integrals(a, lz, accuracy, energy=True)[3]

    def stress(self, R, a, lz, Po):
        """(srr, stt, szz) at a reference radius inside a layer or on a wall."""
        law, factor = next((law, f) for _, R1, law, f in self.layers if R <= R1)
        srr = -Po - (self.integrals(a, lz, start=R)[0] if R < self.B else 0)
        _, T, _, _ = self.at(self.current(R, a, lz), a, lz, law, factor)
        return srr, srr + T[1] - T[0], srr + T[2] - T[0]


class Load:
    """The conditions at load factor t. `inner` is (kind, value): pressure, stretch or volume."""

    def __init__(self, wall, ends, inner, Po=0, dead=False):
        self.wall, self.ends, self.inner, self.Po, self.dead = wall, ends, inner, Po, dead

    def residual(self, a, lz, t):
        double = isinstance(a, float)
        real = float if double else mpf
        pi = np.pi if double else PI
        wall = self.wall if not double else self.double_wall()
        A, B = wall.A, wall.B
        kind, value = self.inner
        q0 = t * real(self.Po)
        Po = q0 * B / (wall.outer(a, lz) * lz) if self.dead else q0
        Pi, N = wall.loads(a, lz, Po)
        if kind == "pressure":
            p0 = t * real(value)
            first = Pi - (p0 * A / (a * lz) if self.dead else p0)
        elif kind == "stretch":
            start = 1 / sqrt(self.start_stretch(real))
            first = a / A - start - t * (real(value) - start)
        else:
            first = a**2 * lz / A**2 - 1 - t * (real(value) / (pi * A**2) - 1)
        mode, given = self.ends
        if mode == "fixed":
            return first, lz - real(given)
        scale = pi * (B**2 - A**2)
        if mode == "force":
            return first, (N - t * real(given)) / scale
        push = pi * (p0 * A**2 - q0 * B**2) if self.dead else pi * (Pi * a**2 - Po * wall.outer(a, lz) ** 2)
        return first, (N - push) / scale

    def double_wall(self):
        if not hasattr(self, "_double"):
            self._double = self.wall.in_doubles()
        return self._double

    def start_stretch(self, real):
        return real(self.ends[1]) if self.ends[0] == "fixed" else real(1)

    def pressures(self, a, lz):
        Po = self.Po * self.wall.B / (self.wall.outer(a, lz) * lz) if self.dead else mpf(self.Po)
        return self.wall.loads(a, lz, Po)[0], Po

    # --- in doubles: follow the first branch
    def follow(self, steps=40):
        lz = self.start_stretch(float)
        x, t, dt, sign = np.array([float(self.wall.A) / np.sqrt(lz), lz]), 0.0, 1.0 / steps, 0
        while t < 1:
            dt = min(dt, 1 - t)
            y, det = self.newton_in_doubles(x, t + dt)
            if y is None or (sign and np.sign(det) != sign) or np.max(np.abs(np.log(y / x))) > 0.1:
                dt /= 2
                assert dt > 1e-7, f"lost at load factor {t}"
                continue
            x, t, sign, dt = y, (1.0 if t + dt > 1 - 1e-12 else t + dt), np.sign(det), min(dt * 1.5, 1.0 / steps)
        return x

    def newton_in_doubles(self, x, t):
        for _ in range(12):
            with np.errstate(all="ignore"):
                f = np.array(self.residual(float(x[0]), float(x[1]), t))
                J = np.empty((2, 2))
                for i in range(2):
                    h = 1e-6 * x[i]
                    e = np.eye(2)[i] * h
                    up, down = self.residual(*map(float, x + e), t), self.residual(*map(float, x - e), t)
                    J[:, i] = (np.array(up) - np.array(down)) / (2 * h)
            if not (np.all(np.isfinite(J)) and np.all(np.isfinite(f))):
                return None, 0
            step = np.linalg.solve(J, f)
            if np.max(np.abs(step / x)) > 0.3:
                return None, 0
            x = x - step
            if np.max(np.abs(step / x)) < 1e-11:
                return x, np.linalg.det(J)
        return (x, np.linalg.det(J)) if np.max(np.abs(step / x)) < 1e-8 else (None, 0)

    def solve(self):
        """(a, lz) to working precision, from the state the march has found."""
        return self.polish(*map(mpf, map(float, self.follow())))

    def polish(self, a, lz):
        h = mpf(10) ** -22
        f0 = self.residual(a, lz, 1)
        fa, fl = self.residual(a * (1 + h), lz, 1), self.residual(a, lz * (1 + h), 1)
        J = mp.matrix([[(fa[i] - f0[i]) / (a * h), (fl[i] - f0[i]) / (lz * h)] for i in range(2)])
        for _ in range(30):
            step = mp.lu_solve(J, mp.matrix(self.residual(a, lz, 1)))
            a, lz = a - step[0], lz - step[1]
            if max(abs(step[0] / a), abs(step[1])) < mpf(10) ** -40:
                return a, lz
        raise AssertionError("polish")

    # --- the first maximum of the pressure, axial condition held
    def axial_stretch(self, a, guess):
        """lz at a bore a: the second residual alone, by the secant rule."""
        if self.ends[0] == "fixed":
            return a * 0 + (float(self.ends[1]) if isinstance(a, float) else self.ends[1])
        double = isinstance(a, float)
        tolerance = 1e-13 if double else mpf(10) ** -42
        f = lambda lz: self.residual(a, lz, 1)[1]
        x0, x1 = guess, guess * (1 + (1e-5 if double else mpf(10) ** -12))
        f0, f1 = f(x0), f(x1)
        for _ in range(60):
            if f1 == f0:
                break
            x0, x1, f0 = x1, x1 - f1 * (x1 - x0) / (f1 - f0), f1
            if not 0 < x1 < 50:
                return float("nan")
            if abs(x1 - x0) < tolerance:
                break
            f1 = f(x1)
        return x1

    def limit(self):
        """First maximum of Pi along the bore (outer pressure and given force held), or None. Root of dPi/da.

        The march goes inwards first: a tube pulled by a force has a smaller bore before it is inflated.
        """
        wall = self.double_wall()
        lz, seen = self.start_stretch(float), []
        outwards = [(step, True) for step in range(-40, 300)]
        for step, counts in [(step, False) for step in range(0, -40, -1)] + outwards:
            a = float(np.exp(step / 100) * wall.A)
            with np.errstate(all="ignore"):
                lz = self.axial_stretch(a, lz)
                P = wall.loads(a, lz, float(self.Po))[0] if np.isfinite(lz) else np.nan
            if not counts:
                continue
            if not np.isfinite(P):
                return None
            seen.append((a, lz, P))
            if len(seen) > 2 and P < seen[-2][2]:
                return self.summit(seen[-3:])
        return None

    def summit(self, three):
        (x0, _, p0), (x1, lz, p1), (x2, _, p2) = three
        top = x1 - ((x1 - x0) ** 2 * (p1 - p2) - (x1 - x2) ** 2 * (p1 - p0)) / (2 * ((x1 - x0) * (p1 - p2) - (x1 - x2) * (p1 - p0)))
        state = {"lz": mpf(lz)}

        def P(a):
            state["lz"] = self.axial_stretch(a, state["lz"])
            return self.wall.loads(a, state["lz"], mpf(self.Po))[0]

        h = mpf(10) ** -14
        slope = lambda a: (P(a * (1 + h)) - P(a * (1 - h))) / (2 * h * a)
        a0, a1 = mpf(top), mpf(top) * (1 + mpf(10) ** -6)
        d0, d1 = slope(a0), slope(a1)
        while abs(a1 - a0) > mpf(10) ** -16 * a1:
            a0, a1, d0 = a1, a1 - d1 * (a1 - a0) / (d1 - d0), d1
            d1 = slope(a1)
        assert x0 < a1 < x2
        return P(a1)


def confirm(load, a, lz):
    """Energy derivatives and a finer rule; see the head of this file."""
    wall = load.wall
    Pi, Po = load.pressures(a, lz)
    N, h = wall.loads(a, lz, Po)[1], mpf(10) ** -15
    size, area = max(abs(t) for t in wall.stress(wall.A, a, lz, Po)) + abs(Pi) + abs(Po), PI * (wall.B**2 - wall.A**2)
    E = lambda u, v: wall.energy(a * (1 + u * h), lz * (1 + v * h))
    Ea, El = (E(1, 0) - E(-1, 0)) / (2 * h * a), (E(0, 1) - E(0, -1)) / (2 * h * lz)
    assert abs(Ea - 2 * PI * a * lz * (Pi - Po)) < mpf(10) ** -19 * size * wall.A, ("dE/da", Ea - 2 * PI * a * lz * (Pi - Po))
    assert abs(El - N - PI * Po * (wall.B**2 - wall.A**2) / lz) < mpf(10) ** -19 * size * area, "dE/dlz"
    Pf, Nf = wall.loads(a, lz, Po, FINE)
    assert abs(Pf - Pi) < mpf(10) ** -28 * size, ("rule", mp.nstr((Pf - Pi) / size, 3))
    assert abs(Nf - N) < mpf(10) ** -28 * size * area, ("rule", mp.nstr((Nf - N) / size / area, 3))
    E0, Ef = wall.energy(a, lz), wall.energy(a, lz, FINE)
    assert abs(E0 - Ef) < mpf(10) ** -26 * E0, "rule, energy"


def along(radius, x, y):
    """The point at a decimal radius in the direction (x, y), as decimals."""
    return tuple(format((Decimal(radius) * Decimal(c)).normalize(), "f") for c in (x, y)) + ("0",)


def write_state(suite, id, load, a, lz, points, extra="mid"):
    """Values at the points {name: (X, Y, Z)} and the totals; Cartesian components too at the point named `extra`."""
    wall = load.wall
    Pi, Po = load.pressures(a, lz)
    for name, point in points.items():
        X, Y = num(point[0]), num(point[1])
        R = sqrt(X**2 + Y**2)
        r = wall.current(R, a, lz)
        srr, stt, szz = wall.stress(R, a, lz, Po)
        for q, v in (("u_r", r - R), ("srr", srr), ("stt", stt), ("szz", szz), ("p", -(srr + stt + szz) / 3)):
            suite.value(id, q, v, point)
        if name == extra:
            c, s = X / R, Y / R
            law, f = next((law, f) for _, R1, law, f in wall.layers if R <= R1)
            W = law.energy((R / (r * lz), r / R, lz)) * (f(R) if f else 1)
            for q, v in (("ux", (r - R) * c), ("uy", (r - R) * s), ("sxx", srr * c * c + stt * s * s), ("sxy", (srr - stt) * c * s),
                         ("lambda_r", R / (r * lz)), ("lambda_t", r / R), ("lambda_z", lz), ("W", W)):
                suite.value(id, q, v, point)
    N = wall.loads(a, lz, Po)[1]
    for q, v in (("inner_radius", a), ("outer_radius", wall.outer(a, lz)), ("axial_stretch", lz), ("axial_force", N),
                 ("strain_energy", wall.energy(a, lz)), ("enclosed_volume", PI * a * a * lz)):
        suite.value(id, q, v)
