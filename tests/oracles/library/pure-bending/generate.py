"""Strips in pure bending, small strain: -L/2 <= X <= L/2, |Y| <= depth/2, held at the origin without rotation.

Sign: the moment M (per unit thickness) on the face X = L/2 turns about +Z, M = -int Y sxx dY, so a positive moment presses
the top (Y > 0) and bends the ends upwards, v'' = M/(E I) > 0 in plane stress:  sxx = -M Y/I, I = depth^3/12.
Route for the displacement: Cesaro's integral, see ../plane_strip.py. uz is not given. Totals per unit thickness.
"""

import sys
from pathlib import Path

from mpmath import mp, mpf

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from case_values import Values, read_cases, small  # noqa: E402
from plane_strip import Strip, gauss  # noqa: E402

mp.dps = 40

if __name__ == "__main__":
    values = Values()
    for case in read_cases(HERE):
        L, c, M = case.num("length"), case.num("depth") / 2, case.num("moment")
        inertia = (2 * c) ** 3 / 12
        strip = Strip(case, lambda x, y: (-M * y / inertia, mpf(0), mpf(0)))
        left = strip.check(L / 3, c / 5)
        moment = 2 * c * gauss(lambda t: -c * (2 * t - 1) * strip.stress(L / 2, c * (2 * t - 1))[0])
        print(f"{case.id}: field equations {small(left)}, moment {small(abs(moment / M - 1))}")
        assert left < mpf(10) ** -26 and abs(moment / M - 1) < mpf(10) ** -30
        values.add_all(case.id, {"strain_energy": strip.energy(-L / 2, L / 2, c), "bending_moment": moment})
        for fx, fy in ((0, 1), (0.5, 0), (0.5, 1), (-0.5, -0.3), (0.125, -1), (-0.25, 0.5)):
            point = (float(L) * fx, float(c) * fy, 0.0)
            values.add_all(case.id, strip.rows(point), point)
    values.write(HERE)
