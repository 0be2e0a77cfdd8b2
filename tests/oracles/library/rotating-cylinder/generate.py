"""Long rotating cylinders: plane strain, or uniform axial strain with a given axial force.

Route: the field equation in u_r integrated numerically, see ../radial_linear.py; two discretisations agree to 22 digits.
A solid cylinder starts from u = 0 on the axis, where the equation is regular.
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
    layer = Layer(*radii, case.material()[1], False)
    return Problem([layer], 1, end=ends, force=force, spin=case.num("density-speed-squared"))


if __name__ == "__main__":
    values = Values()
    write_cases(values, read_cases(HERE), build)
    values.write(HERE)
