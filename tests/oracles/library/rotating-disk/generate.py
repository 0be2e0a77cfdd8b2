"""Rotating disks, plane stress.

Route: the field equation in u_r integrated numerically, see ../radial_linear.py; two discretisations agree to 22 digits.
A solid disk starts from u = 0 at the centre, where the equation is regular. strain_energy is per unit thickness.
"""

import sys
from pathlib import Path

from mpmath import mp

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from case_values import Values, read_cases  # noqa: E402
from radial_linear import Layer, Problem, write_cases  # noqa: E402

mp.dps = 40


def build(case):
    radii = case.num("inner-radius"), case.num("outer-radius")
    layer = Layer(*radii, case.material()[1], True)
    return Problem([layer], 1, end="plane-stress", spin=case.num("density-speed-squared"))


if __name__ == "__main__":
    values = Values()
    write_cases(values, read_cases(HERE), build)
    values.write(HERE)
