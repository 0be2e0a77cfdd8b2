"""Many-digit states of compressible tubes at finite strain: one layer and several.

Route: shooting in displacement form, see shooting.py beside this script. Each case is solved with 17 Gauss stages on
panels of ratio 1.3 and again with 22 stages on panels of ratio 1.4 (both shorter, if need be); the two must agree to
25 digits. Also checked: the penalty bias of the bore (isochoric neo-Hookean + K/2 (J-1)^2, A 1, B 2, incompressible inner
stretch 1.5).
"""

import sys
from multiprocessing import Pool
from pathlib import Path

from mpmath import mp, mpf

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from case_values import Case, Values, read_cases  # noqa: E402
from laws import Energy  # noqa: E402
from shooting import Body, Loads, newton, run  # noqa: E402

BIAS = {10: ("quadratic", "7.86e-2"), 100: ("quadratic", "7.87e-3"), 1000: ("quadratic", "7.88e-4"),
        10000: ("quadratic", "8.0e-5"), -100: ("log-squared", "7.91e-3")}


def tube(case):
    return run(case, 1, 42)


def penalty_bias():
    """Relative change of u(A) against the incompressible tube, to the three digits known before."""
    mp.dps = 30
    for ratio, (form, known) in BIAS.items():
        law = {"neo-Hookean": {"mu": 1, "volumetric": {form: {"K": abs(ratio)}}}}
        case = Case({"id": "bias", "problem": {"pressurised-tube": {
            "ends": "plane-strain", "inner-pressure": 0.428228409096502}}}, {})
        body = Body([mpf(1), mpf(2)], [Energy(*next(iter(law.items())))], 1, [])
        loads, x, memory = Loads(case, body), [mpf(1)], {}
        for i in range(1, 7):
            x = newton(loads, x, mpf(i) / 6, 10, 1.35, memory, mpf(10) ** -12)
        bias = (x[0] - mpf("1.5")) / mpf("0.5")
        print(f"penalty bias K/mu {abs(ratio)} {form}: {mp.nstr(bias, 6)}, known {known}")
        assert abs(bias / mpf(known) - 1) < mpf("0.02"), "the last known figure is a finite-element one"


if __name__ == "__main__":
    penalty_bias()
    values = Values()
    with Pool(2) as pool:
        for name, rows in pool.imap(tube, read_cases(HERE)):
            for point, named in rows:
                values.add_all(name, named, point)
    values.write(HERE)
