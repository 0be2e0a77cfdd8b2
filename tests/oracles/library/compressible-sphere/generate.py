"""Many-digit states of compressible pressurised spheres at finite strain (first branch from zero load).

Route: shooting in displacement form, see ../compressible-tube/shooting.py. Each case is solved with 17 Gauss stages on
panels of ratio 1.3 and again with 22 stages on panels of ratio 1.4 (both shorter, if need be); the two must agree to
25 digits. Totals belong to the whole sphere.
"""

import sys
from multiprocessing import Pool
from pathlib import Path

HERE = Path(__file__).parent
sys.path[:0] = [str(HERE.parent), str(HERE.parent / "compressible-tube")]
from case_values import Values, read_cases  # noqa: E402
from shooting import run  # noqa: E402


def sphere(case):
    return run(case, 2, 42)


if __name__ == "__main__":
    values = Values()
    with Pool(2) as pool:
        for name, rows in pool.imap(sphere, read_cases(HERE)):
            for point, named in rows:
                values.add_all(name, named, point)
    values.write(HERE)
