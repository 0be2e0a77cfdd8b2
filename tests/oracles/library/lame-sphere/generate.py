"""Small-strain pressurised spheres.

Route: the field equation in u_r integrated numerically, see ../radial_linear.py; two discretisations agree to 22 digits.
strain_energy belongs to the whole sphere; stt is the hoop stress; J is not given in small strain.
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
    layer = Layer(case.num("inner-radius"), case.num("outer-radius"), case.material()[1], False)
    return Problem([layer], 2, case.num("inner-pressure"), case.num("outer-pressure"))


if __name__ == "__main__":
    values = Values()
    write_cases(values, read_cases(HERE), build)
    values.write(HERE)
