"""Torsion of elliptic bars, small strain: semi-axis a along X, b along Y, twist t per length, positive about +Z.

    ux = -t Z Y     uy = t Z X     uz = w(X, Y)     szx = mu (w_X - t Y)     syz = mu (w_Y + t X)
Route: w is a sum of the harmonic polynomials Re z^k, Im z^k, k = 1..6, with coefficients from a least-squares fit of zero
traction at 40 points of the contour; neither the warping nor the torque is typed in. Torque and energy by quadrature
over the section. Checked: traction between the points, equilibrium by mp.diff, energy = t torque/2.
Totals per length: torque, strain_energy. No shift and no rotation of the middle of the section at the origin.
"""

import sys
from pathlib import Path

from mpmath import mp, mpf, mpc, matrix, lu_solve, pi, cos, sin

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from case_values import Values, exact, number, read_cases, small  # noqa: E402
from plane_strip import gauss  # noqa: E402

mp.dps = 50
TERMS = 6


class Bar:
    def __init__(self, case):
        (self.a, self.b), self.t = case.nums("semi-axes"), case.num("twist")
        E, nu = [number(case.material()[1][k]) for k in ("E", "nu")]
        self.mu = E / (2 * (1 + nu))
        self.scale = max(self.a, self.b)
        self.c = [mpf(0)] * (2 * TERMS)
        self.c = self.fit()

    def warping(self, x, y, c=None):
        """w, w_X, w_Y"""
        c, z = self.c if c is None else c, mpc(x, y) / self.scale
        w, d = mpc(0), mpc(0)
        for k in range(1, TERMS + 1):
            factor = mpc(c[2 * k - 2], -c[2 * k - 1])  # Re(factor z^k) = c Re z^k + c' Im z^k
            w += factor * z**k
            d += factor * k * z ** (k - 1) / self.scale
        return w.real, d.real, -d.imag

    def stress(self, x, y, c=None):
        """szx, syz"""
        _, wx, wy = self.warping(x, y, c)
        return self.mu * (wx - self.t * y), self.mu * (wy + self.t * x)

    def traction(self, angle, c=None):
        """On the contour, with a normal that is not of unit length."""
        x, y = self.a * cos(angle), self.b * sin(angle)
        s = self.stress(x, y, c)
        return s[0] * x / self.a**2 + s[1] * y / self.b**2

    def fit(self):
        n, angles = 2 * TERMS, [2 * pi * (i + mpf("0.37")) / 40 for i in range(40)]
        zero = [mpf(0)] * n
        base = [self.traction(t, zero) for t in angles]
        columns = [[self.traction(t, [mpf(int(i == k)) for i in range(n)]) - v for t, v in zip(angles, base)] for k in range(n)]
        rows = [[column[i] for column in columns] for i in range(len(angles))]
        return list(lu_solve(matrix(rows), -matrix(base)))

    def over_section(self, f):
        """Integral of a polynomial: Gauss in the radius, equal angles round it."""
        angles = [2 * pi * i / 24 for i in range(24)]

        def ring(q):
            return q * sum(f(self.a * q * cos(t), self.b * q * sin(t)) for t in angles) * 2 * pi / 24

        return self.a * self.b * gauss(ring)

    def density(self, x, y):
        return sum(s**2 for s in self.stress(x, y)) / (2 * self.mu)

    def torque(self):
        def moment(x, y):
            s = self.stress(x, y)
            return x * s[1] - y * s[0]

        return self.over_section(moment)

    def check(self):
        x, y = self.a / 3, self.b / 4
        size = abs(self.mu * self.t) * min(self.a, self.b)
        rim = max(abs(self.traction(mpf(t))) for t in ("0.1", "1.2", "2.9", "5")) * min(self.a, self.b) / size
        inside = mp.diff(lambda p: self.stress(p, y)[0], x) + mp.diff(lambda q: self.stress(x, q)[1], y)
        return max(rim, abs(inside) * min(self.a, self.b) / size)

    def rows(self, point):
        x, y, z = exact(point)
        w, (szx, syz) = self.warping(x, y)[0], self.stress(x, y)
        return {"ux": -self.t * z * y, "uy": self.t * z * x, "uz": w, "szx": szx, "syz": syz, "W": self.density(x, y)}


if __name__ == "__main__":
    values = Values()
    for case in read_cases(HERE):
        bar = Bar(case)
        torque, energy = bar.torque(), bar.over_section(bar.density)
        left, off = bar.check(), abs(energy / (bar.t * torque / 2) - 1)
        print(f"{case.id}: field equations {small(left)}, energy {small(off)}, torque {mp.nstr(torque, 8)}")
        assert max(left, off) < mpf(10) ** -28, case.id
        values.add_all(case.id, {"torque": torque, "strain_energy": energy})
        a, b = float(bar.a), float(bar.b)
        for point in ((a, 0.0, 0.0), (0.0, b, 3.0), (0.5 * a, 0.4 * b, 5.0), (-0.6 * a, 0.7 * b, -2.0), (-0.2 * a, -0.9 * b, 1.0)):
            values.add_all(case.id, bar.rows(point), point)
    values.write(HERE)
