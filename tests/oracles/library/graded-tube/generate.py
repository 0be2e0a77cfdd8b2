"""Many-digit states of pressurised tubes of graded stiffness. Writes suite.yaml and values.csv.

Route: ../finite_tube.py - integration of d srr/dr = (stt - srr)/r over the current wall at 50 digits, with stresses from the plain
energy, multiplied at the reference radius R by (R/A)^n, by exp(k (R - A)) or by the straight lines of a table. Each state is
confirmed by the two derivatives of the energy and by a second Gauss rule. The pressure is chosen near a wanted bore stretch and
rounded to four digits; first branch, followed from zero load. In a law with exponents or locks only the moduli are graded:
mu of Gent, c of Demiray, every mu of Ogden, c10 c20 c30 of Yeoh.
"""

import sys
from decimal import Decimal
from pathlib import Path

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_laws import Suite, build, check_laws, exp, mp, mpf, num  # noqa: E402
from finite_tube import Load, Wall, along, confirm, write_state  # noqa: E402

MATERIALS = {
    "neo": ("neo-Hookean", {"mu": "0.4"}),
    "mooney": ("Mooney-Rivlin", {"c10": "0.15", "c01": "0.05"}),
    "gent": ("Gent", {"mu": "0.4", "Jm": "20"}),
    "treloar": ("Ogden", {"mu": ["0.63", "0.0012", "-0.01"], "alpha": ["1.3", "5", "-2"]}),
    "yeoh": ("Yeoh", {"c10": "0.2", "c20": "-0.004", "c30": "0.0003"}),
    "demiray": ("Demiray", {"c": "0.05", "b": "0.8"}),
}
LAW = build(MATERIALS)
PS, GPS, CL = ("fixed", "1"), ("force", "0"), ("closed", None)
TABLE = {"R": ["5", "6", "7.5", "10"], "factor": ["1", "1.8", "0.6", "2.2"]}

# (material, A, B, grading, ends, bore stretch wanted, outer pressure or None)
CASES = [
    ("neo", "5", "10", {"power": "1.5"}, PS, 1.3, None), ("neo", "5", "10", {"power": "-2"}, CL, 1.25, None),
    ("neo", "5", "10", {"power": "0"}, GPS, 1.4, None), ("mooney", "8", "10", {"power": "3"}, GPS, 1.4, None),
    ("gent", "1", "10", {"power": "-0.5"}, CL, 1.8, "0.03"), ("yeoh", "10", "10.001", {"power": "2.5"}, CL, 1.15, None),
    ("treloar", "5", "10", {"power": "1"}, ("force", "20"), 1.3, None),
    ("neo", "5", "10", {"exponential": "0.3"}, PS, 1.00001, None), ("mooney", "5", "10", {"exponential": "-0.2"}, CL, 1.3, None),
    ("gent", "8", "10", {"exponential": "0.5"}, ("fixed", "1.3"), 1.5, None), ("treloar", "1", "10", {"exponential": "0.1"}, GPS, 1.5, None),
    ("demiray", "2.5", "3.4", {"exponential": "-1.2"}, CL, 1.3, "0.002"), ("yeoh", "8", "10", {"exponential": "0.7"}, ("force", "-10"), 1.3, None),
    ("neo", "5", "10", {"table": TABLE}, PS, 1.35, None), ("mooney", "5", "10", {"table": TABLE}, CL, 1.2, None),
    ("gent", "5", "10", {"table": TABLE}, GPS, 1.5, None), ("treloar", "5", "10", {"table": TABLE}, ("fixed", "0.9"), 1.2, "0.05"),
    ("demiray", "2.5", "3.4", {"table": {"R": ["2.5", "3", "3.4"], "factor": ["3", "1", "0.5"]}}, ("force", "0.2"), 1.3, None),
]


def four(x):
    return format(Decimal(f"{float(x):.4g}"), "f")


def factor_of(kind, value, A):
    def factor(R):
        real = mpf if isinstance(R, mpf) else float
        return (R / real(A)) ** real(value) if kind == "power" else exp(real(value) * (R - real(A)))
    return factor


def straight(R0, R1, f0, f1):
    def factor(R):
        real = mpf if isinstance(R, mpf) else float
        return real(f0) + real(f1 - f0) * (R - real(R0)) / real(R1 - R0)
    return factor


def wall_of(material, A, B, grading):
    (kind, value), = grading.items()
    if kind != "table":
        return Wall([(num(A), num(B), LAW[material], factor_of(kind, num(value), num(A)))])
    R, f = [num(x) for x in value["R"]], [num(x) for x in value["factor"]]
    return Wall([(R[i], R[i + 1], LAW[material], straight(R[i], R[i + 1], f[i], f[i + 1])) for i in range(len(R) - 1)])


def words(ends):
    table = {PS: "plane-strain", GPS: "generalized-plane-strain", CL: "closed"}
    key = "fixed-stretch" if ends[0] == "fixed" else "generalized-plane-strain"
    return table.get(ends) or {key: {"axial-stretch" if ends[0] == "fixed" else "axial-force": ends[1]}}


def run(suite, index, material, A, B, grading, ends, stretch, outer):
    wall = wall_of(material, A, B, grading)
    exact = (ends[0], None if ends[1] is None else num(ends[1]))
    Po = num(outer) if outer else mpf(0)
    probe = Load(wall, exact, ("stretch", mpf(1)), Po)
    a, lz = float(wall.A) * stretch, probe.start_stretch(float)
    for _ in range(3):
        lz = probe.axial_stretch(a, lz)
    text = four(probe.double_wall().loads(a, lz, float(Po))[0])
    load = Load(wall, exact, ("pressure", num(text)), Po)
    a, lz = load.solve()
    confirm(load, a, lz)
    id = f"{material}-{next(iter(grading))}-{index:02d}"
    problem = {"inner-radius": A, "outer-radius": B, "material": material, "grading": grading, "ends": words(ends), "inner-pressure": text}
    suite.case(id, "graded-tube", problem | ({"outer-pressure": outer} if outer else {}))
    mid = format((Decimal(A) + Decimal(B)) / 2, "f")
    write_state(suite, id, load, a, lz, {"A": (A, "0", "0"), "mid": along(mid, "0.6", "0.8"), "B": ("0", B, "0")})
    print(id, text, "a/A", mp.nstr(a / wall.A, 6), "lz", mp.nstr(lz, 6), flush=True)


if __name__ == "__main__":
    check_laws(LAW)
    suite = Suite("library-graded-tube", HERE, MATERIALS, "Oracle cases: pressurised tube of graded stiffness.")
    for index, case in enumerate(CASES, 1):
        run(suite, index, *case)
    suite.write()
