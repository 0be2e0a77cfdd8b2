"""Tubes with steady heat conduction through the wall.

Route: the field equation in u_r integrated numerically, see ../radial_linear.py; two discretisations agree to 22 digits.
Temperatures are measured from the stress-free state. W and strain_energy are elastic: s_i (e_i - alpha T)/2, so a
freely heated body stores none. uz = ezz Z is not given in plane stress.
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
    ends, force = case.ends()
    radii = case.num("inner-radius"), case.num("outer-radius")
    layer = Layer(*radii, case.material()[1], ends == "plane-stress", case.num("expansion"))
    heat = case.num("inner-temperature"), case.num("outer-temperature")
    return Problem([layer], 1, end=ends, force=force, heat=heat)


if __name__ == "__main__":
    values = Values()
    write_cases(values, read_cases(HERE), build)
    values.write(HERE)
