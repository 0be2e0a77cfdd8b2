"""Azimuthal and axial shear of a tube held between rigid cylinders, shared by two oracle scripts.

Both are a simple shear of amount kappa(R) between the cylinders r = R, with lz = 1. With 1 the radial direction and 2 that of
the motion, the left Cauchy-Green tensor is [[1, kappa], [kappa, 1 + kappa^2]]; its principal stretches give T_i = l_i dW/dl_i of the
plain energy, turned back. Equilibrium along the motion: t12 R^m = C, m = 2 azimuthal, 1 axial. Across it, with the pressure fixed
by srr(B) = 0: d srr/dR = (stt - srr)/R. 50 digits; Gauss panels; kappa(C / R^m) by Newton at every node.
Confirmed in each state: dE/d(motion of the outer wall) = load, along C; the closed forms of neo-Hookean; a second Gauss rule.
"""

from decimal import Decimal

from finite_laws import build, check_laws, gauss, mp, mpf, num, turned

MATERIALS = {
    "neo": ("neo-Hookean", {"mu": "0.4"}),
    "mooney": ("Mooney-Rivlin", {"c10": "0.15", "c01": "0.05"}),
    "yeoh": ("Yeoh", {"c10": "0.2", "c20": "-0.004", "c30": "0.0003"}),
    "gent": ("Gent", {"mu": "0.4", "Jm": "8"}),
}
COARSE, FINE = (26, mpf("1.3")), (36, mpf("1.2"))


class Sheared:
    def __init__(self, A, B, law, power):
        self.A, self.B, self.law, self.power = A, B, law, power

    def curve(self, kappa):
        return turned(self.law, mpf(1), kappa, 1 + kappa**2, mpf(1))

    def amount(self, tau, guess):
        """kappa of a shear stress: Newton with a difference for the slope, which is exact enough to converge in a few steps."""
        k = guess
        for _ in range(60):
            t = self.curve(k)[1]
            h = mpf(10) ** -20 * (1 + abs(k))
            slope = (self.curve(k + h)[1] - t) / h
            step = (t - tau) / slope
            fresh = k - step
            while isinstance(self.law, MATERIALS_WITH_LOCK) and fresh**2 >= self.law.Jm:
                fresh = (fresh + k) / 2
            k = fresh
            if abs(step) < mpf(10) ** -42 * abs(k):
                return k
        raise AssertionError("amount")

    def integrals(self, C, start, end, accuracy=COARSE):
        """int kappa dR / R^(m-1), int (stt - srr)/R dR and the energy between two radii."""
        n, ratio = accuracy
        cuts, R = {start, end}, self.A
        while R * ratio < self.B:
            R = R * ratio
            if start < R < end:
                cuts.add(R)
        if self.law.locks and start < self.B:
            cuts |= {c for k in range(2, 8) if start < (c := self.A + (self.B - self.A) * mpf(2) ** -k) < end}
        cuts = sorted(cuts)
        motion = rise = energy = mpf(0)
        guess = mpf(0)
        for lo, hi in zip(cuts, cuts[1:]):
            for R, w in gauss(lo, hi, n):
                guess = k = self.amount(C / R**self.power, guess)
                rr, shear, along, across, W = self.curve(k)
                motion += w * k / R ** (self.power - 1)
                rise += w * ((along if self.power == 2 else across) - rr) / R
                energy += w * 2 * mp.pi * R * W
        return motion, rise, energy

    def solve(self, given):
        """C by the secant rule; the march is in the size of the motion, from the linear constant."""
        mu = self.curve(mpf(10) ** -20)[1] * mpf(10) ** 20
        linear = given * mu / ((1 / self.A**2 - 1 / self.B**2) / 2 if self.power == 2 else mp.log(self.B / self.A))
        f = lambda C: self.integrals(C, self.A, self.B)[0] - given
        x0, x1 = linear, linear * (1 + mpf(10) ** -8)
        f0, f1 = f(x0), f(x1)
        for _ in range(40):
            if f1 == f0 or abs(x1 - x0) < mpf(10) ** -36 * abs(x1):
                return x1
            x0, x1, f0 = x1, x1 - f1 * (x1 - x0) / (f1 - f0), f1
            f1 = f(x1)
        raise AssertionError("solve")


MATERIALS_WITH_LOCK = type(build({"gent": MATERIALS["gent"]})["gent"])


def confirm(tube, name, C, given):
    motion, _, E = tube.integrals(C, tube.A, tube.B)
    h = mpf(10) ** -15
    up, down = (tube.integrals(C * (1 + s * h), tube.A, tube.B) for s in (1, -1))
    load = (up[2] - down[2]) / (up[0] - down[0])
    assert abs(load / (2 * mp.pi * C) - 1) < mpf(10) ** -22, ("dE/dmotion", load, 2 * mp.pi * C)
    fine = tube.integrals(C, tube.A, tube.B, FINE)
    assert abs(fine[0] / given - 1) < mpf(10) ** -27 and abs(fine[2] / E - 1) < mpf(10) ** -26, "rule"
    if name in ("neo", "mooney"):
        mu = tube.law.c10 * 2 + tube.law.c01 * 2
        closed = C / mu * ((1 / tube.A**2 - 1 / tube.B**2) / 2 if tube.power == 2 else mp.log(tube.B / tube.A))
        assert abs(closed / given - 1) < mpf(10) ** -30, "closed form"


def write_point(suite, id, tube, C, point):
    X, Y, _ = (num(c) for c in point)
    R = mp.sqrt(X**2 + Y**2)
    k = tube.amount(C / R**tube.power, mpf(0))
    rr, shear, along, across, W = tube.curve(k)
    motion = tube.integrals(C, tube.A, R)[0] if R > tube.A else mpf(0)
    srr = -tube.integrals(C, R, tube.B)[1] if R < tube.B else mpf(0)
    stt, szz = (along, across) if tube.power == 2 else (across, along)
    stt, szz = srr + stt - rr, srr + szz - rr
    values = [("srr", srr), ("stt", stt), ("szz", szz), ("srt" if tube.power == 2 else "szr", shear), ("p", -(srr + stt + szz) / 3), ("W", W)]
    theta = mp.atan2(Y, X) + (motion if tube.power == 2 else 0)
    c, s = mp.cos(theta), mp.sin(theta)
    if tube.power == 2:
        values += [("ux", R * c - X), ("uy", R * s - Y), ("sxx", srr * c * c + stt * s * s - 2 * shear * s * c),
                   ("sxy", (srr - stt) * s * c + shear * (c * c - s * s))]
    else:
        values += [("uz", motion), ("syz", shear * s), ("szx", shear * c)]
    for q, v in values:
        suite.value(id, q, v, point)


def run(suite, entry, sizes):
    laws = build(MATERIALS)
    check_laws(laws)
    power, key, total = (2, "rotation", "torque") if entry == "azimuthal-shear" else (1, "displacement", "axial_shear_force")
    for m, law in laws.items():
        for i, (A, B, given) in enumerate(sizes, 1):
            id, tube = f"{m}-{i:02d}", Sheared(num(A), num(B), law, power)
            C = tube.solve(num(given))
            confirm(tube, m, C, num(given))
            suite.case(id, entry, {"inner-radius": A, "outer-radius": B, "material": m, key: given})
            mid = (Decimal(A) + Decimal(B)) / 2
            off = tuple(format((mid * Decimal(c)).normalize(), "f") for c in ("0.6", "0.8")) + ("0",)
            for point in ((A, "0", "0"), off, ("0", B, "0")):
                write_point(suite, id, tube, C, point)
            suite.value(id, total, 2 * mp.pi * C)
            suite.value(id, "strain_energy", tube.integrals(C, tube.A, tube.B)[2])
            print(id, mp.nstr(2 * mp.pi * C, 8), "kappa at A", mp.nstr(tube.amount(C / tube.A**power, mpf(0)), 6), flush=True)
    suite.write()
