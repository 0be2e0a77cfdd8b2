"""Many-digit states and limits of the pressurised incompressible tube (finite strain).

Writes ``tube_states.csv``, ``tube_points.csv`` and ``tube_limits.csv`` beside this script.

Route. The unknowns are the current inner radius ``a`` and the axial stretch ``lz``; every formula is the plain
textbook one, with differences of nearly equal numbers left as they are. 80 digits make that harmless. Nothing here
uses logarithmic unknowns, ``expm1`` or ``log1p``, so the program under test shares no formula with its oracle.

Kinematics      r^2 = a^2 + (R^2 - A^2)/lz,  lt = r/R,  lr = R/(r lz)
Cauchy stress   s_i = -q + l_i dW/dl_i,  W = c10 (I1 - 3) + c01 (I2 - 3)
Equilibrium     d srr/dr = (stt - srr)/r,  srr(a) = -Pi,  srr(b) = -Po
Axial force     N = integral of szz over the deformed wall;  closed ends: N = pi (Pi a^2 - Po b^2)

Inputs are doubles: each is taken as the exact binary number, then everything else follows from it.
"""

import csv
from pathlib import Path

from mpmath import mp, mpf, pi, log, sqrt, nstr, quad, exp, linspace

mp.dps = 80
DIGITS = 25
HERE = Path(__file__).parent


class Tube:
    """Hollow tube of a neo-Hookean (c01 = 0) or Mooney-Rivlin material; all inputs are doubles."""

    def __init__(self, A, B, c10, c01=0.0):
        self.A, self.B = mpf(A), mpf(B)
        self.c10, self.c01 = mpf(c10), mpf(c01)

    def radius(self, R, a, lz):
        """Current radius of the material point R."""
        return sqrt(a**2 + (R**2 - self.A**2) / lz)

    def modulus(self, lz):
        """(stt - srr)/(lt^2 - lr^2): the shear modulus that the section feels at this axial stretch."""
        return 2 * (self.c10 + self.c01 * lz**2)

    def pressure_difference(self, a, lz):
        """Pi - Po in closed form."""
        return self._drop(self.A, a, lz)

    def _drop(self, R, a, lz):
        """Integral of (stt - srr)/r dr from the material point R to the outer wall."""
        lt = self.radius(R, a, lz) / R
        lb = self.radius(self.B, a, lz) / self.B
        return self.modulus(lz) / lz * (log(lt / lb) + (lb**-2 - lt**-2) / (2 * lz))

    def _sum_of_squares(self, a, lz):
        """Integral of (lt^2 + lr^2) r dr over the deformed wall."""
        A, B, b = self.A, self.B, self.radius(self.B, a, lz)
        swell = a**2 - A**2 / lz
        hoop = ((B**2 - A**2) / (2 * lz) + swell * log(B / A)) / lz
        radial = ((b**2 - a**2) / 2 - swell * log(b / a)) / lz
        return hoop + radial

    def reduced_force(self, a, lz):
        """pi times the integral of (2 szz - srr - stt) r dr; zero for closed ends."""
        wall = (self.B**2 - self.A**2) / (2 * lz)
        axial = (4 * self.c10 * lz**2 - 4 * self.c01 / lz**2) * wall
        return pi * (axial - 2 * (self.c10 - self.c01 * lz**2) * self._sum_of_squares(a, lz))

    def axial_force(self, a, lz, Pi, Po):
        """Integral of szz over the deformed wall."""
        b = self.radius(self.B, a, lz)
        return self.reduced_force(a, lz) + pi * (Pi * a**2 - Po * b**2)

    def energy(self, a, lz):
        """Strain energy of the full ring per unit reference length."""
        area = (self.B**2 - self.A**2) / 2
        constant = self.c10 * (lz**2 - 3) + self.c01 * (lz**-2 - 3)
        return 2 * pi * (constant * area + (self.c10 + self.c01 * lz**2) * lz * self._sum_of_squares(a, lz))

    def at(self, R, a, lz, Po):
        """Fields at the material point R, in the order of POINT_COLUMNS after R."""
        r = self.radius(R, a, lz)
        lt, lr = r / R, R / (r * lz)
        srr = -Po - self._drop(R, a, lz)
        stt = srr + 2 * self.c10 * (lt**2 - lr**2) - 2 * self.c01 * (lt**-2 - lr**-2)
        szz = srr + 2 * self.c10 * (lz**2 - lr**2) - 2 * self.c01 * (lz**-2 - lr**-2)
        W = self.c10 * (lr**2 + lt**2 + lz**2 - 3) + self.c01 * (lr**-2 + lt**-2 + lz**-2 - 3)
        return [r - R, lr, lt, srr, stt, szz, -(srr + stt + szz) / 3, W]


# ---------------------------------------------------------------- solving for the state

def derivative(f, x, h=mpf(10) ** -26):
    """Central difference; at 80 digits it is good to about 50."""
    return (f(x + h * abs(x)) - f(x - h * abs(x))) / (2 * h * abs(x))


def solve_state(tube, ends, Pi, Po, given):
    """(a, lz) on the first branch: all loads grow in proportion from zero, and the path may not pass a limit load.

    With a fixed stretch the tube is stretched first and pressurised then. Predictor and corrector steps in the load;
    no step may change a or lz by more than 2 %, and the determinant of the tangent must keep its sign all the way.
    """
    Pi, Po = mpf(Pi), mpf(Po)
    one_unknown = ends in ("plane-strain", "fixed-stretch")
    fixed = mpf(given) if ends == "fixed-stretch" else mpf(1)
    force = mpf(given) if ends == "generalized-plane-strain" else mpf(0)
    size = 2 * (tube.c10 + tube.c01)
    area = tube.B**2 - tube.A**2

    def residual(x, t):
        a, lz = x
        r1 = (tube.pressure_difference(a, lz) - t * (Pi - Po)) / (size * (tube.B - tube.A) / tube.B)
        if one_unknown:
            r2 = lz - fixed
        elif ends == "closed":
            r2 = tube.reduced_force(a, lz) / (size * area)
        else:
            r2 = (tube.axial_force(a, lz, t * Pi, t * Po) - t * force) / (size * area)
        return r1, r2

    def tangent(x, t):
        columns = []
        for i in range(2):
            h = mpf(10) ** -26 * x[i]
            up, down = list(x), list(x)
            up[i] += h
            down[i] -= h
            columns.append([(p - q) / (2 * h) for p, q in zip(residual(up, t), residual(down, t))])
        (a11, a21), (a12, a22) = columns
        return a11, a12, a21, a22, a11 * a22 - a12 * a21

    def solve(J, r):
        a11, a12, a21, a22, det = J
        return (r[0] * a22 - r[1] * a12) / det, (a11 * r[1] - a21 * r[0]) / det

    def correct(x, t):
        """Newton from x; None when it wanders off."""
        x, start = list(x), list(x)
        last = None
        for _ in range(60):
            if x[0] <= 0 or x[1] <= 0 or x[0] ** 2 + area / x[1] <= 0:
                return None
            step = solve(tangent(x, t), residual(x, t))
            x = [x[0] - step[0], x[1] - step[1]]
            if any(abs(p - q) > 0.05 * q for p, q in zip(x, start)):
                return None
            moved = max(abs(step[0] / x[0]), abs(step[1] / x[1]))
            if moved < mpf(10) ** -60 or (last is not None and moved < mpf(10) ** -45 and moved >= last):
                return x
            last = moved
        return None

    x = [tube.A / sqrt(fixed), fixed]
    t, sign, steps = mpf(0), None, 0
    while t < 1:
        J = tangent(x, t)
        sign = sign or (1 if J[4] > 0 else -1)
        h = mpf(10) ** -20
        dr = [(p - q) / h for p, q in zip(residual(x, t + h), residual(x, t))]
        rate = [-v for v in solve(J, dr)]
        speed = max(abs(rate[0] / x[0]), abs(rate[1] / x[1]), mpf(10) ** -30)
        dt = min(1 - t, mpf("0.02") / speed)
        while True:
            trial = correct([x[0] + dt * rate[0], x[1] + dt * rate[1]], t + dt)
            if trial is not None and tangent(trial, t + dt)[4] * sign > 0:
                break
            dt /= 2
            if dt < mpf(10) ** -14:
                raise ValueError(f"load beyond the limit of the first branch at load factor {nstr(t, 8)}")
        x, t, steps = trial, t + dt, steps + 1
    return x[0], x[1], steps


# ---------------------------------------------------------------- limits

def follow(tube, ends, Po, given, a_max=mpf(10) ** 4, growth=mpf("1.05")):
    """First maximum of the inner pressure while the bore grows; None when there is none up to a_max times A.

    Returns (Pi, a, lz) at the maximum, or (None, slope, Pi, lz) at the end of the march, where slope is
    d ln(Pi - Po) / d ln a.
    """
    Po = mpf(Po)

    def axial(a, lz):
        if ends == "closed":
            return tube.reduced_force(a, lz)
        Pi = Po + tube.pressure_difference(a, lz)
        return tube.axial_force(a, lz, Pi, Po) - mpf(given)

    def stretch(a, lz):
        """Axial stretch at this bore; Newton from a neighbouring one."""
        if ends in ("plane-strain", "fixed-stretch"):
            return lz
        for _ in range(80):
            step = axial(a, lz) / derivative(lambda v: axial(a, v), lz)
            step = max(min(step, lz / 4), -lz / 4)
            lz -= step
            if abs(step) < mpf(10) ** -55 * lz:
                return lz
        raise ValueError("axial equation not solved")

    def slope(a, lz):
        """d(Pi - Po)/da along the path."""
        pa = derivative(lambda v: tube.pressure_difference(v, lz), a)
        if ends in ("plane-strain", "fixed-stretch"):
            return pa
        pl = derivative(lambda v: tube.pressure_difference(a, v), lz)
        na = derivative(lambda v: axial(v, lz), a)
        nl = derivative(lambda v: axial(a, v), lz)
        return pa - pl * na / nl

    lz = mpf(given) if ends == "fixed-stretch" else mpf(1)
    a = tube.A / sqrt(lz)
    if ends == "generalized-plane-strain" and mpf(given) != 0:
        for _ in range(200):  # unpressurised and pulled: a^2 lz = A^2
            lz = stretch(a, lz)
            a = (a + tube.A / sqrt(lz)) / 2
        a = tube.A / sqrt(lz)
    a *= 1 + mpf(10) ** -6
    lz = stretch(a, lz)
    before = slope(a, lz)
    assert before > 0
    while a < a_max * tube.A:
        up = a * growth
        lz_up = stretch(up, lz)
        if slope(up, lz_up) < 0:
            lo, hi = a, up
            f_lo, f_hi = slope(lo, lz), slope(hi, lz_up)
            for i in range(400):  # false position with halving of the stale end (Illinois), 80 digits
                mid = (lo * f_hi - hi * f_lo) / (f_hi - f_lo)
                lz = stretch(mid, lz)
                f = slope(mid, lz)
                if f * f_hi < 0:
                    lo, f_lo = hi, f_hi
                else:
                    f_lo /= 2
                hi, f_hi = mid, f
                if abs(hi - lo) < mpf(10) ** -36 * hi or f == 0:
                    break
            return Po + tube.pressure_difference(hi, lz), hi, lz
        a, lz = up, lz_up
    dp = tube.pressure_difference(a, lz)
    return None, slope(a, lz) * a / dp, Po + dp, lz


# ---------------------------------------------------------------- checks by another route

def check_state(tube, a, lz, Pi, Po, N, energy):
    """Largest relative departure of four integrals done by quadrature and of two energy derivatives.

    The integrands take the stresses from principal stretches; the closed forms above are not used, but for srr inside
    the axial force, which the first two integrals check at the bore and at a point of the wall.
    """
    dps = mp.dps
    mp.dps = 50
    b = tube.radius(tube.B, a, lz)

    def stretches(r):
        R = sqrt(tube.A**2 + lz * (r**2 - a**2))
        return R / (r * lz), r / R

    def T(l):
        return 2 * tube.c10 * l**2 - 2 * tube.c01 * l**-2

    def hoop(r):
        lr, lt = stretches(r)
        return (T(lt) - T(lr)) / r

    def axial(r):
        lr, lt = stretches(r)
        R = sqrt(tube.A**2 + lz * (r**2 - a**2))
        return (-Po - tube._drop(R, a, lz) + T(lz) - T(lr)) * 2 * pi * r

    def stored(r):
        lr, lt = stretches(r)
        i1 = lr**2 + lt**2 + lz**2
        i2 = (lr * lt) ** 2 + (lt * lz) ** 2 + (lz * lr) ** 2
        return (tube.c10 * (i1 - 3) + tube.c01 * (i2 - 3)) * lz * 2 * pi * r

    n = int(log(b / a) / mpf("0.35")) + 2
    panels = [exp(v) for v in linspace(log(a), log(b), n)]
    panels[0], panels[-1] = a, b
    R_mid = (tube.A + tube.B) / 2
    r_mid = tube.radius(R_mid, a, lz)
    scale = max(abs(Pi), abs(Po), abs(T(lz) - T(1 / sqrt(lz))) * (b - a) / b, mpf(10) ** -30)
    errors = {"pressure": abs(quad(hoop, panels) - (Pi - Po)) / scale}
    errors["srr"] = abs(-Po - quad(hoop, [r_mid] + [v for v in panels if v > r_mid]) - tube.at(R_mid, a, lz, Po)[3]) / scale
    force_scale = max(abs(N), scale * pi * (b**2 - a**2))
    errors["axial force"] = abs(quad(axial, panels) - N) / force_scale
    errors["energy"] = abs(quad(stored, panels) / energy - 1) if energy else mpf(0)
    mp.dps = dps
    by_a = derivative(lambda v: tube.energy(v, lz), a)
    by_lz = derivative(lambda v: tube.energy(a, v), lz)
    errors["dE/da"] = abs(by_a - 2 * pi * a * lz * (Pi - Po)) / (2 * pi * a * lz * scale)
    errors["dE/dlz"] = abs(by_lz - N - Po * pi * (tube.B**2 - tube.A**2) / lz) / force_scale
    return errors


# ---------------------------------------------------------------- the list of states

def rounded(x, digits=4):
    """A short decimal near x, as a double."""
    return float(nstr(mpf(x), digits))


def states():
    """(id, ends, A, B, mu, c10, c01, Pi, Po, given); mu is None for Mooney-Rivlin."""
    out = []

    def add(name, ends, A, B, law, Pi, Po=0.0, given=None):
        mu, c10, c01 = (law[0], None, None) if len(law) == 1 else (None, law[0], law[1])
        out.append((name, ends, float(A), float(B), mu, c10, c01, float(Pi), float(Po), given))

    nh = (1.0,)
    # the published cases
    add("published-ps-1.5", "plane-strain", 1, 2, nh, 0.428228409096502)
    add("published-ps-2", "plane-strain", 1, 2, nh, 0.57405357230652)
    add("published-ps-thin", "plane-strain", 1, 1.25, nh, 0.16712733121266)
    add("published-ps-3-9", "plane-strain", 3, 9, nh, 0.287928548415375)
    add("published-fixed-1.2", "fixed-stretch", 1, 2, nh, 0.404359989535088, given=1.2)
    add("published-mr-ps", "plane-strain", 1, 2, (0.4, 0.1), 0.4282284090965)
    add("published-mr-1.2", "fixed-stretch", 1, 2, (0.4, 0.1), 0.43994366861418, given=1.2)
    for p in (0.1, 0.3, 0.5):
        add(f"published-closed-{p}", "closed", 1, 2, nh, p)
    add("published-oden", "plane-strain", 7, 18.625, (80.0, 20.0), 150)
    # a net over ratio, ends, law and size of the load
    inner = {1.0001: 1.0, 1.001: 0.75, 1.25: 8.0, 1.5: 0.002, 2: 1.0, 5: 3.0, 10: 0.4, 100: 0.1}
    strains = [1e-8, 1e-6, 1e-3]
    laws = {1.0: [(1.0,), (0.3, 0.2)], 1e6: [(4e5,), (1.5e5, 5e4)]}
    for i, (ratio, A) in enumerate(inner.items()):
        B = float(f"{A * ratio:.12g}")
        mu_nh, mr = laws[1e6 if ratio == 1.5 else 1.0]
        mu = mu_nh[0]
        wall = 1 - (A / B) ** 2
        full = mu * float(log(mpf(B) / mpf(A)))
        area = 3.141592653589793 * (B * B - A * A)
        e1, e2, e3 = (strains[(i + j) % 3] for j in range(3))
        tag = f"{ratio}".replace(".0", "") if ratio == 100 else f"{ratio}"
        add(f"ps-small-{tag}", "plane-strain", A, B, mu_nh, rounded(2 * mu * e1 * wall))
        add(f"ps-large-{tag}", "plane-strain", A, B, mr, rounded(0.8 * full * (mr[0] + mr[1]) * 2 / mu))
        add(f"ps-outer-{tag}", "plane-strain", A, B, mu_nh, 0, rounded(0.3 * full))
        add(f"closed-small-{tag}", "closed", A, B, mr, rounded(2 * mu * e2 * wall))
        add(f"closed-both-{tag}", "closed", A, B, mr, rounded(0.45 * full), rounded(0.2 * full))
        add(f"closed-outer-{tag}", "closed", A, B, mu_nh, rounded(0.05 * full), rounded(0.25 * full))
        add(f"gps-small-{tag}", "generalized-plane-strain", A, B, mu_nh, rounded(2 * mu * e3 * wall), given=0.0)
        add(f"gps-large-{tag}", "generalized-plane-strain", A, B, mu_nh if i % 2 else mr, rounded(0.85 * full), given=0.0)
        add(f"gps-pull-{tag}", "generalized-plane-strain", A, B, mr, rounded(0.3 * full), rounded(0.1 * full),
            given=rounded(0.4 * mu * area))
        add(f"gps-push-{tag}", "generalized-plane-strain", A, B, mu_nh, rounded(0.2 * full), given=rounded(-0.2 * mu * area))
        add(f"stretch-long-{tag}", "fixed-stretch", A, B, mr, rounded(0.5 * full), given=1.3)
        add(f"stretch-short-{tag}", "fixed-stretch", A, B, mu_nh, rounded(0.5 * full), rounded(0.1 * full), given=0.8)
        # close to the limit load
        for fraction in (0.9, 0.99, 0.9999):
            law = mu_nh if (i + round(fraction * 1000)) % 2 == 0 else (0.49 * mu, 0.01 * mu)
            tube = Tube(A, B, law[0] / 2 if len(law) == 1 else law[0], 0.0 if len(law) == 1 else law[1])
            top = follow(tube, "closed", 0, None)
            if top[0] is not None:
                add(f"closed-{fraction}-of-limit-{tag}", "closed", A, B, law, rounded(fraction * top[0], 12))
    # odd corners
    add("nothing-but-stretch", "fixed-stretch", 1, 2, (0.3, 0.2), 0, given=1.5)
    add("nothing-but-force", "generalized-plane-strain", 1, 2, (0.3, 0.2), 0, given=5.0)
    add("hydrostatic-closed", "closed", 1, 2, nh, 0.25, 0.25)
    add("hydrostatic-gps", "generalized-plane-strain", 1, 2, nh, 0.25, 0.25, given=0.0)
    add("collapse-deep", "plane-strain", 1, 2, nh, 0, 2.0)
    add("suction", "plane-strain", 1, 2, nh, -0.4)
    add("stretch-tiny", "fixed-stretch", 1, 2, nh, 1e-8, given=1.00000001)
    add("force-tiny", "generalized-plane-strain", 1, 2, (0.3, 0.2), 0, given=1e-7)
    add("ps-0.99-of-asymptote", "plane-strain", 1, 2, nh, 0.68621571)
    add("gps-0.95-of-asymptote", "generalized-plane-strain", 1, 2, nh, 1.019, given=0.0)
    return out


STATE_COLUMNS = ("id ends material mu c10 c01 A B Pi Po given a b u_a lz axial_force strain_energy").split()
POINT_COLUMNS = "id R u_r lambda_r lambda_t srr stt szz p W".split()
LIMIT_COLUMNS = "id ends material mu c10 c01 A B Po given kind Pi a lz".split()


def text(x):
    """25 significant digits, or the shortest form of an input double, or nothing."""
    if x is None:
        return ""
    if isinstance(x, (str, float)):
        return x if isinstance(x, str) else repr(x)
    return nstr(x, DIGITS, strip_zeros=False)


def write(name, columns, rows):
    with open(HERE / name, "w", newline="") as f:
        out = csv.writer(f, lineterminator="\n")
        out.writerow(columns)
        out.writerows([text(v) for v in row] for row in rows)
    print(f"{name}: {len(rows)} rows")


def make_states():
    rows, points, worst = [], [], {}
    for name, ends, A, B, mu, c10, c01, Pi, Po, given in states():
        tube = Tube(A, B, mpf(mu) / 2 if mu else c10, c01 or 0.0)
        a, lz, steps = solve_state(tube, ends, Pi, Po, given)
        N = tube.axial_force(a, lz, mpf(Pi), mpf(Po))
        energy = tube.energy(a, lz)
        for what, error in check_state(tube, a, lz, mpf(Pi), mpf(Po), N, energy).items():
            if error > worst.get(what, (mpf(-1),))[0]:
                worst[what] = (error, name)
        law = "neo-Hookean" if mu else "Mooney-Rivlin"
        # values that are zero in exact arithmetic are written as zero, not as 80-digit noise
        tiny = mpf(10) ** -50
        noise = lambda v, s: mpf(0) if abs(v) < tiny * s else v
        load = max(abs(Pi), abs(Po), 2 * float(tube.c10 + tube.c01) * abs(float(lz - 1)))
        rows.append([name, ends, law, mu, c10, c01, A, B, Pi, Po, given, a, tube.radius(tube.B, a, lz),
                     noise(a - tube.A, tube.A), lz, noise(N, max(load, 1e-30) * tube.B**2), noise(energy, tube.B**2)])
        for R in [A] + [float(A + f * (B - A)) for f in (0.125, 0.5, 0.8)] + [B]:
            u, lr, lt, *stress, W = tube.at(mpf(R), a, lz, mpf(Po))
            stress = [noise(s, load) for s in stress]
            points.append([name, R, noise(u, R), lr, lt, *stress, noise(W, 1)])
    write("tube_states.csv", STATE_COLUMNS, rows)
    write("tube_points.csv", POINT_COLUMNS, points)
    for what, (error, name) in worst.items():
        print(f"  worst check {what:12s} {nstr(error, 3):>10s}  ({name})")
    return rows


def make_limits():
    """Maxima by the march; asymptotes in closed form, each confirmed at a bore 10^9 times the reference one."""
    rows = []
    inner = {1.0001: 1.0, 1.001: 0.75, 1.25: 8.0, 1.5: 1.0, 2: 1.0, 5: 3.0, 10: 0.4, 100: 0.1}
    nh, mr, stiff = (None, None), (0.3, 0.2), (0.49, 0.01)
    wanted = []
    for ratio, A in inner.items():
        B = float(f"{A * ratio:.12g}")
        for law in (nh, mr, stiff):
            wanted.append(("closed", A, B, law, 0.0, None))
            wanted.append(("plane-strain", A, B, law, 0.0, None))
            wanted.append(("generalized-plane-strain", A, B, law, 0.0, 0.0))
            wanted.append(("fixed-stretch", A, B, law, 0.0, 1.3))
    wanted.append(("closed", 1.0, 2.0, nh, 0.25, None))
    wanted.append(("closed", 1.0, 2.0, mr, 0.25, None))
    wanted.append(("fixed-stretch", 1.0, 2.0, nh, 0.0, 0.7))
    wanted.append(("fixed-stretch", 1.0, 2.0, mr, 0.1, 0.7))
    for force in (-2.0, 2.0, 10.0):
        wanted.append(("generalized-plane-strain", 1.0, 2.0, nh, 0.0, force))
        wanted.append(("generalized-plane-strain", 1.0, 2.0, mr, 0.0, force))
    # closed Mooney-Rivlin tubes on either side of the condition for a maximum, see closed_limit_is_asymptote
    for B in (1.0001, 2.0, 100.0):
        for law in ((0.3, 0.15), (0.3, 0.19), (0.1, 0.4), (0.2, 0.25)):
            wanted.append(("closed", 1.0, B, law, 0.0, None))
    for n, (ends, A, B, (c10, c01), Po, given) in enumerate(wanted):
        tube = Tube(A, B, c10 or 0.5, c01 or 0.0)
        mu = None if c10 else 1.0
        law = "neo-Hookean" if mu else "Mooney-Rivlin"
        head = [f"limit-{n + 1:03d}", ends, law, mu, c10, c01, A, B, Po, given]
        found = follow(tube, ends, Po, given)
        if ends == "closed":
            assert closed_limit_is_asymptote(tube) == (found[0] is None), head
        if found[0] is not None:
            rows.append(head + ["maximum", *found])
            continue
        far = follow(tube, ends, Po, given, a_max=mpf(10) ** 9, growth=mpf("1.3"))
        if far[1] > mpf("1e-3"):
            print(f"  {head[0]} {ends} {law} c01={c01} B/A={B / A:g}: no limit, d ln P/d ln a -> {nstr(far[1], 8)}")
            rows.append(head + ["none", None, None, None])
            continue
        thickness = log(tube.B / tube.A)
        if ends == "generalized-plane-strain":
            lz = asymptotic_stretch(tube, mpf(given))
        elif ends == "closed":
            lz = sqrt(tube.c10 / tube.c01)
        else:
            lz = mpf(given or 1)
        limit = mpf(Po) + tube.modulus(lz) / lz * thickness
        gap = abs(far[2] / limit - 1)
        assert gap < mpf(10) ** -12, (head, nstr(gap, 5), nstr(far[2], 12), nstr(limit, 12))
        rows.append(head + ["asymptote", limit, "inf", lz])
    write("tube_limits.csv", LIMIT_COLUMNS, rows)
    return rows


def closed_limit_is_asymptote(tube):
    """True when the closed tube creeps up to its asymptote from below, False when it has a maximum first.

    Second-order expansion for a large bore. With l = sqrt(c10/c01), the stretch it tends to, and S = (B/A)^2, the pressure
    lies above its asymptote 4 sqrt(c10 c01) ln(B/A) when (S - 1)/(S + 1) (l^3 - l^-3)^2 > 2 ln(B/A). Then a maximum must
    have come before; that none comes before in the other case is what the march finds.
    """
    if tube.c01 == 0:
        return False
    l, S = sqrt(tube.c10 / tube.c01), (tube.B / tube.A) ** 2
    return (S - 1) / (S + 1) * (l**3 - l**-3) ** 2 <= 2 * log(tube.B / tube.A)


def asymptotic_stretch(tube, force):
    """Axial stretch of a neo-Hookean tube with a given axial force as the bore grows without bound.

    N lz^2 / (2 pi c10) tends to (B^2 - A^2) lz^3 + A^2 ln(B/A) - (B^2 - A^2)/2: one positive root, found by bisection.
    """
    area, thick = tube.B**2 - tube.A**2, tube.A**2 * log(tube.B / tube.A)
    f = lambda v: 2 * pi * tube.c10 * (area * v**3 + thick - area / 2) - force * v**2
    lo, hi = mpf(10) ** -6, mpf(1)
    while f(hi) < 0:
        hi *= 2
    for _ in range(270):
        mid = (lo + hi) / 2
        lo, hi = (mid, hi) if f(mid) < 0 else (lo, mid)
    return lo


def check_published():
    """Known values, printed with the difference in units of their last digit; and a load beyond the limit refused."""
    nh, mr = Tube(1.0, 2.0, 0.5), Tube(1.0, 2.0, 0.4, 0.1)
    one, lz = mpf(1), mpf("1.2")
    half = mpf("1.5")

    def closed(p):
        a, lz, _ = solve_state(nh, "closed", p, 0.0, None)
        return a, lz

    oden = Tube(7.0, 18.625, 80.0, 20.0)
    a_oden, _, _ = solve_state(oden, "plane-strain", 150.0, 0.0, None)
    p15, p12 = nh.pressure_difference(half, one), nh.pressure_difference(half, lz)
    known = [
        ("P, la 1.5", ".428228409096502", p15),
        ("b, la 1.5", "2.29128784748", nh.radius(mpf(2), half, one)),
        ("stt(A), la 1.5", "1.377327146459", nh.at(mpf(1), half, one, mpf(0))[4]),
        ("N, la 1.5", "1.968651099788", nh.axial_force(half, one, p15, mpf(0))),
        ("P, la 2", ".57405357230652", nh.pressure_difference(mpf(2), one)),
        ("N, la 2", "3.318138943506", nh.axial_force(mpf(2), one, nh.pressure_difference(mpf(2), one), mpf(0))),
        ("P, lz 1.2, la 1.5", ".404359989535088", p12),
        ("N, lz 1.2, la 1.5", "6.437883439616", nh.axial_force(half, lz, p12, mpf(0))),
        ("N - pi a^2 P, same", "3.579631101426", nh.axial_force(half, lz, p12, mpf(0)) - pi * half**2 * p12),
        ("P, B 1.25, la 1.5", ".16712733121266", Tube(1.0, 1.25, 0.5).pressure_difference(half, one)),
        ("P, A 3 B 9, la 1.2", ".287928548415375", Tube(3.0, 9.0, 0.5).pressure_difference(mpf("3.6"), one)),
        ("P, Mooney, lz 1", ".4282284090965", mr.pressure_difference(half, one)),
        ("P, Mooney, lz 1.2", ".43994366861418", mr.pressure_difference(half, lz)),
        ("closed .1 la", "1.07309641946", closed(0.1)[0]), ("closed .1 lz", "1.00088532583", closed(0.1)[1]),
        ("closed .3 la", "1.27865587859", closed(0.3)[0]), ("closed .3 lz", "1.01267625707", closed(0.3)[1]),
        ("closed .5 la", "1.7861467436", closed(0.5)[0]), ("closed .5 lz", "1.09683808911", closed(0.5)[1]),
        ("Oden u(A)", "7.181871426", a_oden - 7),
        ("Oden u(B)", "3.713668316", oden.radius(mpf("18.625"), a_oden, one) - mpf("18.625")),
        ("Oden srr(8.16)", "-121.634", oden.at(mpf("8.16"), a_oden, one, mpf(0))[3]),
        ("energy, la 1.5", nstr(pi * (half**2 - 1) * log(half / nh.radius(mpf(2), half, one) * 2), 20), nh.energy(half, one)),
    ]
    for name, value, found in known:
        last = mpf(10) ** -len(value.split(".")[1])
        print(f"  {name:20s} {value:>22s}  {nstr((found - mpf(value)) / last, 2):>7s} of the last digit")
        assert abs(found - mpf(value)) < 0.51 * last, name
    top = follow(nh, "closed", 0, None)[0]
    solve_state(nh, "closed", float(top * (1 - mpf("1e-9"))), 0.0, None)
    try:
        solve_state(nh, "closed", float(top * (1 + mpf("1e-9"))), 0.0, None)
    except ValueError as refusal:
        print(f"  limit load x (1 + 1e-9): {refusal}")
    else:
        raise AssertionError("a load beyond the limit was accepted")


if __name__ == "__main__":
    check_published()
    make_limits()
    make_states()
