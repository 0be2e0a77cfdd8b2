"""Displacement of a plane strip from its stress field by Cesaro's line integral; used by cantilever-strip, pure-bending.

The stress is typed in (a polynomial, found from its Airy function) and checked: equilibrium, compatibility of the strain
(both by mp.diff) and tractions on the edges by the scripts. The displacement is not typed in:

    u_i(x) = u_i(0) + rotation + int_0^x [ e_ij + (x_k - s_k)(e_ij,k - e_kj,i) ] ds_j      along the straight line

with strain gradients by mp.diff and Gauss quadrature; then a rigid motion is added that meets the root conditions.
"""

from mpmath import mp, mpf, matrix

from case_values import exact, number


class Strip:
    """stress(x, y) -> (sxx, syy, sxy)"""

    def __init__(self, case, stress):
        self.E, self.nu = [number(case.material()[1][k]) for k in ("E", "nu")]
        self.flat = case.problem["state"] == "plane-stress"
        self.stress = stress
        self.rigid = (mpf(0), mpf(0), mpf(0))

    def axial(self, s):
        return mpf(0) if self.flat else self.nu * (s[0] + s[1])

    def strain(self, x, y):
        """exx, eyy, exy"""
        s = self.stress(x, y)
        szz = self.axial(s)
        shear = s[2] * (1 + self.nu) / self.E
        return (s[0] - self.nu * (s[1] + szz)) / self.E, (s[1] - self.nu * (s[0] + szz)) / self.E, shear

    def gradient(self, i, j, k, x, y):
        """e_ij,k"""
        part = {(0, 0): 0, (1, 1): 1}.get((i, j), 2)
        return mp.diff(lambda p, q: self.strain(p, q)[part], (x, y), (int(k == 0), int(k == 1)))

    def relative(self, x, y):
        """Displacement with u = 0 and no rotation at the origin."""
        target = (x, y)

        def integrand(t, i):
            s = (t * x, t * y)
            e = self.strain(*s)
            tensor = ((e[0], e[2]), (e[2], e[1]))
            total = mpf(0)
            for j in range(2):
                value = tensor[i][j]
                for k in range(2):
                    turn = self.gradient(i, j, k, *s) - self.gradient(k, j, i, *s)
                    value += (target[k] - s[k]) * turn
                total += value * target[j]
            return total

        return [gauss(lambda t, i=i: integrand(t, i)) for i in range(2)]

    def displacement(self, x, y):
        u, v = self.relative(x, y)
        a, b, w = self.rigid
        return [a - w * y + u, b + w * x + v]

    def fix(self, conditions):
        """conditions(displacement function) -> three numbers that shall vanish; the rigid motion (a, b, w) enters linearly."""
        def values(rigid):
            self.rigid = rigid
            return conditions(self.displacement)

        base = values((mpf(0), mpf(0), mpf(0)))
        jac = matrix(3, 3)
        for k in range(3):
            column = values(tuple(mpf(int(i == k)) for i in range(3)))
            for i in range(3):
                jac[i, k] = column[i] - base[i]
        self.rigid = tuple(mp.lu_solve(jac, -matrix(base)))
        return max(abs(v) for v in conditions(self.displacement))

    def check(self, x, y):
        """Equilibrium, compatibility and the displacement gradient against Hooke's strain, all relative."""
        def d(i, order):
            return mp.diff(lambda p, q: self.stress(p, q)[i], (x, y), order)

        def de(i, order):
            return mp.diff(lambda p, q: self.strain(p, q)[i], (x, y), order)

        def du(i, order):
            return mp.diff(lambda p, q: self.displacement(p, q)[i], (x, y), order)

        size = max(abs(v) for v in self.stress(x, y))
        left = [d(0, (1, 0)) + d(2, (0, 1)), d(2, (1, 0)) + d(1, (0, 1))]
        left.append(self.E * (de(0, (0, 2)) + de(1, (2, 0)) - 2 * de(2, (1, 1))))
        found = [du(0, (1, 0)), du(1, (0, 1)), (du(0, (0, 1)) + du(1, (1, 0))) / 2]
        left += [self.E * (p - q) for p, q in zip(found, self.strain(x, y))]
        return max(abs(v) for v in left) / size

    def density(self, x, y):
        s, e = self.stress(x, y), self.strain(x, y)
        return (s[0] * e[0] + s[1] * e[1]) / 2 + s[2] * e[2]

    def rows(self, point):
        x, y, _ = exact(point)
        s, u = self.stress(x, y), self.displacement(x, y)
        szz = self.axial(s)
        named = {"ux": u[0], "uy": u[1], "sxx": s[0], "syy": s[1], "szz": szz, "sxy": s[2]}
        return named | {"p": -(s[0] + s[1] + szz) / 3, "W": self.density(x, y)}

    def energy(self, x0, x1, c):
        """Per unit thickness, over |y| <= c."""
        def slice(x):
            return 2 * c * gauss(lambda t: self.density(x, c * (2 * t - 1)))

        return (x1 - x0) * gauss(lambda t: slice(x0 + t * (x1 - x0)))


GAUSS = {}


def gauss(f):
    """Integral over [0, 1] of a polynomial of degree up to nine: five Gauss points."""
    if mp.dps not in GAUSS:
        inner, outer = [mp.sqrt(5 + sign * 2 * mp.sqrt(mpf(10) / 7)) / 3 for sign in (-1, 1)]
        a, b = [(322 + sign * 13 * mp.sqrt(70)) / 900 for sign in (1, -1)]
        GAUSS[mp.dps] = [(mpf(0), mpf(128) / 225), (inner, a), (-inner, a), (outer, b), (-outer, b)]
    return sum(w * f((1 + x) / 2) for x, w in GAUSS[mp.dps]) / 2
