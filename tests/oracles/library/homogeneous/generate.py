"""Many-digit homogeneous states of incompressible laws. Writes suite.yaml and values.csv.

Route: T_i = l_i dW/dl_i of the plain energy W(l1, l2, l3), which ``check_laws`` compares with differences of the energy; the stress
is T - T of the free direction. Simple shear x = X + g Y: the left Cauchy-Green tensor [[1 + g^2, g], [g, 1]] is taken to its principal
axes and back. Simple shear and triaxial: szz = 0. Triaxial stretches are powers of 2 and their product is exactly 1.
A second property in each state: the stress power. dW/d(stretch) = (its nominal stress), dW/dg = sxy, by differences of the energy.
"""

import sys
from pathlib import Path

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_laws import Suite, build, check_laws, mp, mpf, num, turned  # noqa: E402

MATERIALS = {
    "neo": ("neo-Hookean", {"mu": "0.4"}),
    "mooney": ("Mooney-Rivlin", {"c10": "0.15", "c01": "0.05"}),
    "yeoh": ("Yeoh", {"c10": "0.2", "c20": "-0.004", "c30": "0.0003"}),
    "treloar": ("Ogden", {"mu": ["0.63", "0.0012", "-0.01"], "alpha": ["1.3", "5", "-2"]}),
    "ogden-down": ("Ogden", {"mu": ["-0.08"], "alpha": ["-10"]}),
    "gent": ("Gent", {"mu": "0.4", "Jm": "30"}),
    "chain": ("Arruda-Boyce", {"mu": "0.3", "N": "8"}),
    "chain-series": ("Arruda-Boyce-series", {"mu": "0.3", "N": "8"}),
    "demiray": ("Demiray", {"c": "0.05", "b": "0.8"}),
    "poly": ("polynomial", {"terms": [(1, 0, "0.16"), (0, 1, "0.02"), (2, 0, "-0.002"), (1, 1, "0.004"), (3, 0, "0.0005")]}),
}
STATES = [
    ("uniaxial", "1.000001"), ("uniaxial", "0.6"), ("uniaxial", "3"), ("equibiaxial", "1.7"), ("equibiaxial", "0.999"),
    ("planar", "2.2"), ("planar", "0.9"), ("simple-shear", "0.000001"), ("simple-shear", "-0.4"), ("simple-shear", "2"),
    ("triaxial", ["2", "0.5", "1"]), ("triaxial", ["0.5", "0.5", "4"]),
]
POINTS = [("1", "0", "0"), ("0.6", "-0.8", "2")]


def stretches(kind, l):
    """(stretches, index of a free direction)."""
    return {"uniaxial": ((l, l ** mpf("-0.5"), l ** mpf("-0.5")), 2), "equibiaxial": ((l, l, l**-2), 2), "planar": ((l, 1 / l, mpf(1)), 1)}[kind]


def stretched(law, l, free):
    T = law.products(l)
    return {"sxx": T[0] - T[free], "syy": T[1] - T[free], "szz": T[2] - T[free], "sxy": mpf(0), "W": law.energy(l)}


def sheared(law, g):
    xx, xy, yy, zz, W = turned(law, 1 + g**2, g, mpf(1), mpf(1))
    return {"sxx": xx - zz, "syy": yy - zz, "szz": mpf(0), "sxy": xy, "W": W}


def confirm(law, kind, x, s):
    """dW along the path is the power of the stress."""
    h = mpf(10) ** -16
    if kind == "triaxial":
        return
    W = (lambda y: sheared(law, y)["W"]) if kind == "simple-shear" else (lambda y: law.energy(stretches(kind, y)[0]))
    slope = (W(x + h) - W(x - h)) / (2 * h)
    power = s["sxy"] if kind == "simple-shear" else (s["sxx"] + (s["syy"] if kind == "equibiaxial" else 0)) / x
    assert abs(slope - power) < mpf(10) ** -22 * abs(power), (kind, slope, power)


def state(law, kind, text):
    if kind == "triaxial":
        l = [num(x) for x in text]
        assert l[0] * l[1] * l[2] == 1
        return stretched(law, l, 2), [[l[0], 0, 0], [0, l[1], 0], [0, 0, l[2]]]
    x = num(text)
    if kind == "simple-shear":
        s, F = sheared(law, x), [[1, x, 0], [0, 1, 0], [0, 0, 1]]
    else:
        l, free = stretches(kind, x)
        s, F = stretched(law, l, free), [[l[0], 0, 0], [0, l[1], 0], [0, 0, l[2]]]
    confirm(law, kind, x, s)
    return s, F


def main():
    laws = build(MATERIALS)
    check_laws(laws)
    suite = Suite("library-homogeneous", HERE, MATERIALS, "Oracle cases: homogeneous states of incompressible laws.")
    for m, law in laws.items():
        for i, (kind, text) in enumerate(STATES, 1):
            if m == "demiray" and text in ("3", ["0.5", "0.5", "4"]):
                continue  # beyond any use of an exponential law
            id, key = f"{m}-{kind}-{i:02d}", {"simple-shear": "shear", "triaxial": "stretches"}.get(kind, "stretch")
            s, F = state(law, kind, text)
            suite.case(id, "homogeneous", {kind: {key: text}, "material": m})
            s["p"] = -(s["sxx"] + s["syy"] + s["szz"]) / 3
            for q, v in s.items():
                suite.value(id, q, v, POINTS[i % 2])
            X = [num(c) for c in POINTS[1]]
            for q, row, at in zip(("ux", "uy", "uz"), F, X):
                suite.value(id, q, sum(f * x for f, x in zip(row, X)) - at, POINTS[1])
    suite.write()


if __name__ == "__main__":
    main()
