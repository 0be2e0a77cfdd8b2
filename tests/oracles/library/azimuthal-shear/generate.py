"""Many-digit states of azimuthal shear of a tube bonded to rigid cylinders. Writes suite.yaml and values.csv.

Route: ../finite_shear.py. r = R, theta = Theta + g(R), kappa = R g'; srt(kappa) R^2 = const. The law's shear curve is inverted point
by point and g integrated; the constant is found so that g(B) is the rotation. For neo-Hookean the rotation of that constant is
compared with its closed form.
"""

import sys
from pathlib import Path

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_shear import MATERIALS, run  # noqa: E402
from finite_laws import Suite  # noqa: E402

SIZES = [("5", "10", "0.000001"), ("5", "10", "0.3"), ("8", "10", "0.5"), ("1", "10", "1.2"), ("10", "10.01", "0.002")]

if __name__ == "__main__":
    suite = Suite("library-azimuthal-shear", HERE, MATERIALS, "Oracle cases: azimuthal shear of a tube.")
    run(suite, "azimuthal-shear", SIZES)
