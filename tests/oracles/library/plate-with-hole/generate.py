"""Circular hole in an infinite plate under remote tension S along X, small strain.

Route: complex potentials phi = S z/4 + sum a_k z^-k, psi = -S z/2 + sum b_k z^-k, k = 1..6. The coefficients are found
numerically from zero traction, phi + z conj(phi') + conj(psi) = 0, at points of the rim (least squares), not typed in.
    sxx + syy = 4 Re phi'    syy - sxx + 2 i sxy = 2 (conj(z) phi'' + psi')
    2 mu (ux + i uy) = kappa phi - z conj(phi') - conj(psi)     kappa = (3 - nu)/(1 + nu) | 3 - 4 nu
Displacement: symmetric about X and Y, so no rigid motion is left to choose. Verified in each case by mp.diff: equilibrium,
Hooke's law between the displacement gradient and the stress, and the rim at points that were not used.
Plane strain: szz = nu (sxx + syy), uz = 0. Plane stress: uz is not given. W is the energy density.
"""

import sys
from pathlib import Path

from mpmath import mp, mpf, mpc, matrix, lu_solve, pi, cos, sin, sqrt, conj, expj

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from case_values import Values, exact, number, read_cases, small  # noqa: E402

mp.dps = 50
TERMS = 6


class Plate:
    def __init__(self, case):
        self.a, self.S = case.num("hole-radius"), case.num("tension")
        self.E, self.nu = [number(case.material()[1][k]) for k in ("E", "nu")]
        self.flat = case.problem["state"] == "plane-stress"
        self.mu = self.E / (2 * (1 + self.nu))
        self.kappa = (3 - self.nu) / (1 + self.nu) if self.flat else 3 - 4 * self.nu
        self.c = [mpf(0)] * (2 * TERMS)
        self.c = self.rim_fit()

    def potentials(self, z, c=None):
        """phi, phi', phi'', psi, psi' for the coefficients (scaled by powers of a)."""
        c = self.c if c is None else c
        S, a = self.S, self.a
        value = [S * z / 4, S / 4, mpf(0), -S * z / 2, -S / 2]
        for k in range(1, TERMS + 1):
            p, q, w = c[k - 1], c[TERMS + k - 1], (a / z) ** k
            value[0] += p * w
            value[1] -= k * p * w / z
            value[2] += k * (k + 1) * p * w / z**2
            value[3] += q * w
            value[4] -= k * q * w / z
        return value

    def rim(self, angle, c):
        z = self.a * expj(angle)
        phi, phi1, _, psi, _ = self.potentials(z, c)
        return phi + z * conj(phi1) + conj(psi)

    def rim_fit(self):
        """Real coefficients by least squares from 4 TERMS points of the rim."""
        n, angles = 2 * TERMS, [pi * (2 * i + 1) / 37 for i in range(4 * TERMS)]
        zero = [mpf(0)] * n
        units = [[mpf(int(i == k)) for i in range(n)] for k in range(n)]
        base = [self.rim(t, zero) for t in angles]
        columns = [[self.rim(t, u) - b for t, b in zip(angles, base)] for u in units]
        rows, right = [], []
        for i in range(len(angles)):
            for part in ("real", "imag"):
                rows.append([getattr(mpc(col[i]), part) for col in columns])
                right.append(-getattr(mpc(base[i]), part))
        return list(lu_solve(matrix(rows), matrix(right)))

    def stress(self, x, y):
        """sxx, syy, sxy"""
        z = mpc(x, y)
        _, phi1, phi2, _, psi1 = self.potentials(z)
        total, twice = 4 * mpc(phi1).real, 2 * (conj(z) * phi2 + psi1)
        return [(total - twice.real) / 2, (total + twice.real) / 2, twice.imag / 2]

    def displacement(self, x, y):
        z = mpc(x, y)
        phi, phi1, _, psi, _ = self.potentials(z)
        return (self.kappa * phi - z * conj(phi1) - conj(psi)) / (2 * self.mu)

    def strain(self, s):
        """exx, eyy, exy from Hooke's law."""
        szz = self.axial(s)
        return [(s[0] - self.nu * (s[1] + szz)) / self.E, (s[1] - self.nu * (s[0] + szz)) / self.E, s[2] / (2 * self.mu)]

    def axial(self, s):
        return mpf(0) if self.flat else self.nu * (s[0] + s[1])

    def check(self, x, y):
        """Equilibrium, Hooke's law and rim, relative to S and S/E."""
        def d(i, order):
            return mp.diff(lambda p, q: self.stress(p, q)[i], (x, y), order)
        def du(part, order):
            return mp.diff(lambda p, q: getattr(self.displacement(p, q), part), (x, y), order)
        left = [d(0, (1, 0)) + d(2, (0, 1)), d(2, (1, 0)) + d(1, (0, 1))]
        found = [du("real", (1, 0)), du("imag", (0, 1)), (du("real", (0, 1)) + du("imag", (1, 0))) / 2]
        hooke = [self.E * (p - q) for p, q in zip(found, self.strain(self.stress(x, y)))]
        rim = []
        for t in (mpf("0.3"), mpf(2), mpf(4)):
            n = (cos(t), sin(t))
            s = self.stress(self.a * n[0], self.a * n[1])
            rim += [s[0] * n[0] + s[2] * n[1], s[2] * n[0] + s[1] * n[1]]
        return max(abs(v) for v in left + hooke + rim) / abs(self.S)

    def rows(self, point):
        x, y, _ = exact(point)
        s, u, nu = self.stress(x, y), self.displacement(x, y), self.nu
        szz, e = self.axial(s), self.strain(s)
        W = (s[0] * e[0] + s[1] * e[1]) / 2 + s[2] * e[2]
        named = {"ux": u.real, "uy": u.imag, "sxx": s[0], "syy": s[1], "szz": szz, "sxy": s[2]}
        r = sqrt(x**2 + y**2)
        c, d = x / r, y / r
        polar = {
            "srr": s[0] * c**2 + s[1] * d**2 + 2 * s[2] * c * d,
            "stt": s[0] * d**2 + s[1] * c**2 - 2 * s[2] * c * d,
            "srt": (s[1] - s[0]) * c * d + s[2] * (c**2 - d**2),
            "u_r": u.real * c + u.imag * d,
        }
        return named | polar | {"p": -(s[0] + s[1] + szz) / 3, "W": W}


if __name__ == "__main__":
    values = Values()
    for case in read_cases(HERE):
        plate, a = Plate(case), float(case.num("hole-radius"))
        left = plate.check(plate.a * mpf("1.3"), plate.a * mpf("0.9"))
        print(f"{case.id}: field equations {small(left)}", flush=True)
        assert left < mpf(10) ** -30
        for x, y in ((1, 0), (0, 1), (0.7072, 0.7072), (-1.3, 0.9), (2.5, -4.1), (0.01, 1.001)):
            point = (x * a, y * a, 0.0)
            values.add_all(case.id, plate.rows(point), point)
    values.write(HERE)
