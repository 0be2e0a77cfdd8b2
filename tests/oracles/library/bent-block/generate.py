"""Many-digit states of a block bent to a sector, plane strain, curved faces free. Writes suite.yaml and values.csv.

Route. With k = angle/length: r^2 = ra^2 + 2 X/k, lt = k r, lr = 1/(k r), lz = 1; T_i = l_i dW/dl_i of the plain energy. At 50 digits, by
Gauss panels over r: d srr/dr = (stt - srr)/r from srr(ra) = 0, and ra is found so that srr(rb) = 0.
Moment = int stt r dr over the section, per unit width (the force over the section vanishes). Energy = length int W dX.
The signs: X = 0 is the concave face; a positive angle has a positive moment, tension at the convex face.
Confirmed in each state: dE/dangle = moment, no force over the section, ra rb k^2 = 1, and a second Gauss rule.
"""

import sys
from pathlib import Path

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_laws import Suite, build, check_laws, gauss, mp, mpf, num  # noqa: E402

MATERIALS = {
    "neo": ("neo-Hookean", {"mu": "0.4"}),
    "mooney": ("Mooney-Rivlin", {"c10": "0.15", "c01": "0.05"}),
    "treloar": ("Ogden", {"mu": ["0.63", "0.0012", "-0.01"], "alpha": ["1.3", "5", "-2"]}),
}
SHAPES = [("2", "20", "0.000001"), ("2", "20", "0.1"), ("2", "20", "1.5"), ("5", "20", "3"), ("10", "20", "3.1"), ("0.1", "30", "2"), ("8", "10", "1.25")]


class Bent:
    def __init__(self, thickness, length, angle, law):
        self.h, self.length, self.angle, self.k, self.law = thickness, length, angle, angle / length, law

    def radius(self, ra, X):
        return mp.sqrt(ra**2 + 2 * X / self.k)

    def over(self, ra, X, n=32):
        """int (stt - srr)/r dr, int (stt - srr) r dr from the concave face to X, and int W dX."""
        rise = lever = W = mpf(0)
        for i in range(8):
            lo, hi = self.radius(ra, X * i / 8), self.radius(ra, X * (i + 1) / 8)
            for r, w in gauss(lo, hi, n):
                l = (1 / (self.k * r), self.k * r, mpf(1))
                T = self.law.products(l)
                rise += w * (T[1] - T[0]) / r
                lever += w * (T[1] - T[0]) * r
                W += w * self.k * r * self.law.energy(l)
        return rise, lever, W

    def solve(self):
        """The bore: secant from the beam's r = 1/k at the middle of the block."""
        f = lambda ra: self.over(ra, self.h)[0]
        x0 = mp.sqrt(1 / self.k**2 - self.h / self.k) if self.k * self.h < mpf("0.9") else mpf("0.4") / self.k
        x1 = x0 * (1 + mpf("0.001"))
        f0, f1 = f(x0), f(x1)
        for _ in range(60):
            if f1 == f0 or abs(x1 - x0) < mpf(10) ** -44 * x1:
                return x1
            x0, x1, f0 = x1, abs(x1 - f1 * (x1 - x0) / (f1 - f0)), f1
            f1 = f(x1)
        raise AssertionError("solve")

    def moment(self, ra, n=32):
        """int stt r dr = int (stt - srr) r dr + int srr r dr; the last by parts, srr = 0 on both faces."""
        rise, lever, _ = self.over(ra, self.h, n)
        return lever / 2

    def stress(self, ra, X):
        srr = self.over(ra, X)[0]
        r = self.radius(ra, X)
        T = self.law.products((1 / (self.k * r), self.k * r, mpf(1)))
        return r, srr, srr + T[1] - T[0], srr + T[2] - T[0]


def confirm(bent, ra):
    M, h, rb = bent.moment(ra), mpf(10) ** -14, bent.radius(ra, bent.h)
    at = lambda s: Bent(bent.h, bent.length, bent.angle * (1 + s * h), bent.law)
    E = lambda b: b.length * b.over(b.solve(), b.h)[2]
    slope = (E(at(1)) - E(at(-1))) / (2 * h * bent.angle)
    assert abs(slope / M - 1) < mpf(10) ** -20, ("dE/dangle", slope, M)
    assert abs(ra * rb * bent.k**2 - 1) < mpf(10) ** -38, "ra rb"
    force = mpf(0)
    for r, w in gauss(ra, rb, 60):
        X = bent.k * (r**2 - ra**2) / 2
        force += w * bent.stress(ra, X)[2]
    assert abs(force) < mpf(10) ** -20 * abs(M) / bent.h, ("force", force)
    assert abs(bent.moment(ra, 44) / M - 1) < mpf(10) ** -28, "rule"


def main():
    laws = build(MATERIALS)
    check_laws(laws)
    suite = Suite("library-bent-block", HERE, MATERIALS, "Oracle cases: a block bent to a sector.")
    for m, law in laws.items():
        for i, (h, length, angle) in enumerate(SHAPES, 1):
            id, bent = f"{m}-{i:02d}", Bent(num(h), num(length), num(angle), law)
            ra = bent.solve()
            confirm(bent, ra)
            suite.case(id, "bent-block", {"thickness": h, "length": length, "angle": angle, "material": m})
            quarter = mp.nstr(num(length) / 4, 8).rstrip("0").rstrip(".")
            off = (mp.nstr(num(h) * mpf("0.3"), 8), quarter, "0")
            for point in (("0", "0", "0"), off, (h, "-" + quarter, "0")):
                X, Y = num(point[0]), num(point[1])
                r, srr, stt, szz = bent.stress(ra, X)
                c, s = mp.cos(bent.k * Y), mp.sin(bent.k * Y)
                for q, v in (("ux", r * c - X), ("uy", r * s - Y), ("srr", srr if X not in (0, bent.h) else mpf(0)), ("stt", stt), ("szz", szz),
                             ("p", -(srr + stt + szz) / 3), ("lambda_t", bent.k * r), ("sxx", srr * c * c + stt * s * s),
                             ("syy", srr * s * s + stt * c * c), ("sxy", (srr - stt) * s * c), ("W", law.energy((1 / (bent.k * r), bent.k * r, mpf(1))))):
                    suite.value(id, q, v, point)
            for q, v in (("inner_radius", ra), ("outer_radius", bent.radius(ra, bent.h)), ("bending_moment", bent.moment(ra)),
                         ("strain_energy", bent.length * bent.over(ra, bent.h)[2])):
                suite.value(id, q, v)
            print(id, "ra", mp.nstr(ra, 8), "M", mp.nstr(bent.moment(ra), 8), flush=True)
    suite.write()


if __name__ == "__main__":
    main()
