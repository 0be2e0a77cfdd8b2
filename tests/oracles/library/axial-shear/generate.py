"""Many-digit states of axial shear of a tube bonded to rigid cylinders. Writes suite.yaml and values.csv.

Route: ../finite_shear.py. r = R, z = Z + w(R), kappa = w'; szr(kappa) R = const. The law's shear curve is inverted point by point
and w integrated; the constant is found so that w(B) is the displacement. For neo-Hookean the displacement of that constant is
compared with its closed form.
"""

import sys
from pathlib import Path

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_shear import MATERIALS, run  # noqa: E402
from finite_laws import Suite  # noqa: E402

SIZES = [("5", "10", "0.00001"), ("5", "10", "3"), ("8", "10", "-2.5"), ("1", "10", "4"), ("10", "10.01", "0.012")]

if __name__ == "__main__":
    suite = Suite("library-axial-shear", HERE, MATERIALS, "Oracle cases: axial shear of a tube.")
    run(suite, "axial-shear", SIZES)
