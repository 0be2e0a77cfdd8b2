"""Many-digit states of a sector straightened to a block, plane strain. Writes suite.yaml and values.csv.

Route. x = c (R^2 - A^2)/2, y = Theta/c, z = Z: lx = c R, ly = 1/(c R); T_i = l_i dW/dl_i of the plain energy. Equilibrium in x makes sxx one
constant, zero by the free curved faces, whatever c: the scale c is fixed by the other condition of a pure moment, no resultant force
on the flat ends, int syy dx = 0 (50 digits, Gauss panels over x).
Moment = int syy x dx, per unit width: negative, since the image of the bore (x = 0) is in tension. Energy = angle int W R dR.
Confirmed in each state: dE/dc = 0 (the ends do no work as the length changes), and a second Gauss rule.
"""

import sys
from decimal import Decimal
from pathlib import Path

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_laws import Suite, build, check_laws, gauss, mp, mpf, num  # noqa: E402

MATERIALS = {
    "neo": ("neo-Hookean", {"mu": "0.4"}),
    "mooney": ("Mooney-Rivlin", {"c10": "0.15", "c01": "0.05"}),
    "treloar": ("Ogden", {"mu": ["0.63", "0.0012", "-0.01"], "alpha": ["1.3", "5", "-2"]}),
}
SHAPES = [("5", "10", "1"), ("8", "10", "2"), ("1", "4", "3"), ("100", "100.5", "0.1"), ("10", "12", "0.5")]


class Straight:
    def __init__(self, A, B, angle, law):
        self.A, self.B, self.angle, self.law = A, B, angle, law

    def integrals(self, c, n=32):
        """int syy dx, int syy x dx, int W R dR."""
        force = moment = W = mpf(0)
        depth = c * (self.B**2 - self.A**2) / 2
        for i in range(8):
            for x, w in gauss(depth * i / 8, depth * (i + 1) / 8, n):
                R = mp.sqrt(self.A**2 + 2 * x / c)
                l = (c * R, 1 / (c * R), mpf(1))
                T = self.law.products(l)
                force += w * (T[1] - T[0])
                moment += w * (T[1] - T[0]) * x
                W += w / c * self.law.energy(l)
        return force, moment, W

    def solve(self):
        x0 = 2 / (self.A + self.B)
        x1 = x0 * (1 + mpf("0.0001"))
        f0, f1 = self.integrals(x0)[0], self.integrals(x1)[0]
        for _ in range(60):
            if f1 == f0 or abs(x1 - x0) < mpf(10) ** -44 * x1:
                return x1
            x0, x1, f0 = x1, x1 - f1 * (x1 - x0) / (f1 - f0), f1
            f1 = self.integrals(x1)[0]
        raise AssertionError("solve")


def confirm(sector, c):
    h = mpf(10) ** -15
    force, M, W = sector.integrals(c)
    slope = (sector.integrals(c * (1 + h))[2] - sector.integrals(c * (1 - h))[2]) / (2 * h)
    assert abs(slope) < mpf(10) ** -20 * W and abs(force) < mpf(10) ** -36, ("dE/dc", slope, force)
    fine = sector.integrals(c, 44)
    assert abs(fine[1] / M - 1) < mpf(10) ** -28 and abs(fine[2] / W - 1) < mpf(10) ** -28, "rule"


def write_point(suite, id, sector, c, point):
    X, Y = num(point[0]), num(point[1])
    R2 = X**2 + Y**2
    R = mp.sqrt(R2)
    l = (c * R, 1 / (c * R), mpf(1))
    T = sector.law.products(l)
    syy, szz = T[1] - T[0], T[2] - T[0]
    for q, v in (("ux", c * (R2 - sector.A**2) / 2 - X), ("uy", mp.atan2(Y, X) / c - Y), ("sxx", mpf(0)), ("syy", syy), ("szz", szz),
                 ("sxy", mpf(0)), ("p", -(syy + szz) / 3), ("W", sector.law.energy(l))):
        suite.value(id, q, v, point)


def main():
    laws = build(MATERIALS)
    check_laws(laws)
    suite = Suite("library-straightened-sector", HERE, MATERIALS, "Oracle cases: a sector straightened to a block.")
    for m, law in laws.items():
        for i, (A, B, angle) in enumerate(SHAPES, 1):
            id, sector = f"{m}-{i:02d}", Straight(num(A), num(B), num(angle), law)
            c = sector.solve()
            confirm(sector, c)
            suite.case(id, "straightened-sector", {"inner-radius": A, "outer-radius": B, "angle": angle, "material": m})
            # a Pythagorean direction inside the half angle: (0.6, 0.8) is 0.93 rad, (0.96, 0.28) 0.28, (0.9996, 0.02..) for the thin one
            mid = (Decimal(A) + Decimal(B)) / 2
            pair = ("0.6", "-0.8") if float(angle) > 1.9 else ("0.96", "0.28") if float(angle) > 0.6 else ("1", "0.01")
            off = tuple(format((mid * Decimal(k)).normalize(), "f") for k in pair) + ("0",)
            for point in ((A, "0", "0"), off, (B, "0", "0")):
                write_point(suite, id, sector, c, point)
            force, M, W = sector.integrals(c)
            suite.value(id, "bending_moment", M)
            suite.value(id, "strain_energy", sector.angle * W)
            print(id, "c", mp.nstr(c, 10), "M", mp.nstr(M, 8), flush=True)
    suite.write()


if __name__ == "__main__":
    main()
