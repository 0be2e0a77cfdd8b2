"""Many-digit homogeneous states of compressible laws.

Route: the energy as a plain function of F (../plain_energy.py); P = dW/dF by numerical differentiation at 40 digits, no
stress formula. A free stretch is the root of its own dW/dl; the root is then shown to be a minimum of W.
x = F X with the origin fixed. p = -tr(sigma)/3.
"""

import sys
from pathlib import Path

from mpmath import mp, mpf, diag, matrix

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from case_values import Values, exact, number, read_cases, small  # noqa: E402
from plain_energy import cauchy_stress, energy, stress_rows  # noqa: E402

mp.dps = 40
POINT = (0.7, -1.3, 2.1)
MODES = ("uniaxial", "equibiaxial", "planar", "simple-shear", "triaxial")


def with_free(mode, l, free):
    """Stretches of a mode, with the value of the free ones."""
    return {"uniaxial": [l, free, free], "equibiaxial": [l, l, free], "planar": [l, free, mpf(1)]}[mode]


def free_stretch(mode, l, material):
    def slope(free):
        return mp.diff(lambda x: energy(*material, diag(with_free(mode, l, x))), free)

    start = {"uniaxial": l ** mpf("-0.5"), "equibiaxial": l**-2, "planar": 1 / l}[mode]
    for _ in range(60):
        step = -slope(start) / mp.diff(slope, start)
        start += max(min(step, start / 5), -start / 5)
        if abs(step) < mpf(10) ** -38:
            assert mp.diff(slope, start) > 0
            return start
    raise ArithmeticError(mode)


def gradient(case):
    mode = next(m for m in MODES if m in case.problem)
    given = case.problem[mode]
    if mode == "simple-shear":
        return matrix([[1, number(given["shear"]), 0], [0, 1, 0], [0, 0, 1]]), []
    if mode == "triaxial":
        return diag([number(x) for x in given["stretches"]]), []
    l = number(given["stretch"])
    free = free_stretch(mode, l, case.material())
    return diag(with_free(mode, l, free)), {"uniaxial": [1, 2], "equibiaxial": [2], "planar": [1]}[mode]


if __name__ == "__main__":
    values = Values()
    for case in read_cases(HERE):
        F, free = gradient(case)
        X = matrix(exact(POINT))
        u, stress = F * X - X, cauchy_stress(case.material(), F)
        left = max([abs(stress[i, i]) for i in free] or [mpf(0)])
        assert left < mpf(10) ** -28 and abs(stress[0, 1] - stress[1, 0]) < mpf(10) ** -30, case.id
        print(f"{case.id}: traction left on free faces {small(left)}")
        for i in free:
            stress[i, i] = mpf(0)
        named = {"ux": u[0], "uy": u[1], "uz": u[2]} | stress_rows(stress)
        values.add_all(case.id, named | {"J": mp.det(F), "W": energy(*case.material(), F)}, POINT)
    values.write(HERE)
