"""Two rings shrunk on one another.

Route: the field equation in u_r integrated numerically, see ../radial_linear.py; two discretisations agree to 22 digits.
u_r jumps at the interface by the interference and is given away from it only; uz = ezz Z is not given in plane stress.
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
    radii, flat = case.nums("radii"), ends == "plane-stress"
    constants = [case.law_of(name)[1] for name in case.problem["materials"]]
    layers = [Layer(p, q, c, flat) for p, q, c in zip(radii, radii[1:], constants)]
    loads = case.num("inner-pressure"), case.num("outer-pressure")
    return Problem(layers, 1, *loads, ends, force, jump=case.num("radial-interference"))


if __name__ == "__main__":
    values = Values()
    write_cases(values, read_cases(HERE), build)
    values.write(HERE)
