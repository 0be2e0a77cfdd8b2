"""End-loaded cantilever strips, small strain: 0 <= X <= L, |Y| <= c, depth 2c, root at X = 0.

Stress (end load F per unit thickness, positive downwards, on the face X = L):  I = 2 c^3/3
    sxx = F (L - X) Y/I      sxy = -F (c^2 - Y^2)/(2 I)      syy = 0
so that the top (Y > 0) is pulled; the edges Y = +-c are free; the face X = L carries the parabolic shear only; the root
carries the reaction with the same parabola. Route for the displacement: Cesaro's integral, see ../plane_strip.py.
Root: slope-of-axis u = v = dv/dX = 0 at (0, 0); slope-of-section u = v = du/dY = 0 at (0, 0); three-points u = 0 at
(0, +c) and (0, -c), v = 0 at (0, 0). uz is not given. strain_energy is per unit thickness, and is compared with
the work of the tractions.
"""

import sys
from pathlib import Path

from mpmath import mp, mpf

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from case_values import Values, read_cases, small  # noqa: E402
from plane_strip import Strip, gauss  # noqa: E402

mp.dps = 40


def strip_of(case):
    L, c, F = case.num("length"), case.num("depth") / 2, case.num("end-load")
    inertia = 2 * c**3 / 3

    def stress(x, y):
        return F * (L - x) * y / inertia, mpf(0), -F * (c**2 - y**2) / (2 * inertia)

    return Strip(case, stress), L, c, F


def root(kind, c):
    def conditions(u):
        origin = u(mpf(0), mpf(0))
        if kind == "slope-of-axis":
            return origin + [mp.diff(lambda x: u(x, mpf(0))[1], 0)]
        if kind == "slope-of-section":
            return origin + [mp.diff(lambda y: u(mpf(0), y)[0], 0)]
        return [u(mpf(0), c)[0], u(mpf(0), -c)[0], origin[1]]

    return conditions


def work(strip, L, c):
    """Half the work of the tractions on both end faces: Clapeyron."""
    def face(x, sign):
        def density(t):
            y = c * (2 * t - 1)
            s, u = strip.stress(x, y), strip.displacement(x, y)
            return sign * (s[0] * u[0] + s[2] * u[1])

        return 2 * c * gauss(density)

    return (face(L, 1) + face(mpf(0), -1)) / 2


if __name__ == "__main__":
    values = Values()
    for case in read_cases(HERE):
        strip, L, c, F = strip_of(case)
        held = strip.fix(root(case.problem["root"], c))
        left = strip.check(L / 3, c / 5)
        load = 2 * c * gauss(lambda t: strip.stress(L, c * (2 * t - 1))[2]) + F
        energy = strip.energy(mpf(0), L, c)
        off = abs(work(strip, L, c) / energy - 1)
        tip = mp.nstr(strip.displacement(L, mpf(0))[1], 8)
        print(f"{case.id}: field equations {small(left)}, root {small(held)}, work {small(off)}, tip {tip}")
        assert max(left, held, abs(load), off) < mpf(10) ** -26, case.id
        values.add(case.id, "strain_energy", energy)
        for fx, fy in ((0, 0), (0, 1), (0, -0.5), (0.25, 0.4), (0.5, -1), (0.75, 0), (1, 0), (1, 1), (1, -0.6)):
            point = (float(L) * fx, float(c) * fy, 0.0)
            values.add_all(case.id, strip.rows(point), point)
    values.write(HERE)
