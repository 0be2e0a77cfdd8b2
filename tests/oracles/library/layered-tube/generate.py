"""Many-digit states of pressurised tubes of two and three layers. Writes suite.yaml and values.csv.

Route: ../finite_tube.py - integration of d srr/dr = (stt - srr)/r over the current wall, layer by layer, at 50 digits, with stresses
from the plain energy of each layer. Each state is confirmed by the two derivatives of the energy and by a second Gauss rule. The
pressure is chosen near a wanted bore stretch and rounded to four digits; first branch, followed from zero load. Points lie
inside the layers, at their middle, and on the two walls: at an interface stt has two values.
"""

import sys
from decimal import Decimal
from multiprocessing import Pool
from pathlib import Path

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_laws import Suite, build, check_laws, mp, mpf, num  # noqa: E402
from finite_tube import Load, Wall, along, confirm, write_state  # noqa: E402

MATERIALS = {
    "soft": ("neo-Hookean", {"mu": "0.1"}),
    "hard": ("neo-Hookean", {"mu": "1.7"}),
    "mooney": ("Mooney-Rivlin", {"c10": "0.15", "c01": "0.05"}),
    "gent": ("Gent", {"mu": "0.4", "Jm": "12"}),
    "treloar": ("Ogden", {"mu": ["0.63", "0.0012", "-0.01"], "alpha": ["1.3", "5", "-2"]}),
    "yeoh": ("Yeoh", {"c10": "0.2", "c20": "-0.004", "c30": "0.0003"}),
    "demiray": ("Demiray", {"c": "0.05", "b": "0.8"}),
    "artery": ("two-fibre", {"mu": "0.03", "k1": "0.05", "k2": "1.5", "beta": "0.5"}),
    "chain-series": ("Arruda-Boyce-series", {"mu": "0.3", "N": "8"}),
}
LAW = build(MATERIALS)
PS, GPS, CL = ("fixed", "1"), ("force", "0"), ("closed", None)

# (radii, materials, ends, bore stretch wanted, outer pressure or None)
CASES = [
    (["5", "7", "10"], ["soft", "hard"], PS, 1.2, None),
    (["5", "7", "10"], ["hard", "soft"], CL, 1.2, None),
    (["5", "7", "10"], ["soft", "soft"], GPS, 1.3, None),
    (["8", "9", "10"], ["gent", "mooney"], GPS, 1.4, None),
    (["8", "9", "10"], ["mooney", "gent"], CL, 1.5, "0.01"),
    (["1", "3", "10"], ["gent", "treloar"], PS, 2.5, None),
    (["1", "3", "10"], ["treloar", "soft"], ("fixed", "1.3"), 1.5, "0.02"),
    (["10", "10.0005", "10.001"], ["gent", "hard"], CL, 1.1, None),
    (["10", "10.0005", "10.001"], ["soft", "mooney"], PS, 1.00001, None),
    (["5", "7", "10"], ["artery", "soft"], ("force", "3"), 1.3, None),
    (["2.5", "3", "3.4"], ["artery", "demiray"], ("fixed", "1.4"), 1.25, None),
    (["5", "6", "8"], ["yeoh", "chain-series"], CL, 1.3, None),
    (["5", "6", "8"], ["chain-series", "gent"], ("force", "-5"), 1.3, None),
    (["5", "6", "8"], ["hard", "yeoh"], PS, 0.9, "0.5"),
    (["5", "6", "8", "10"], ["soft", "gent", "hard"], PS, 1.3, None),
    (["5", "6", "8", "10"], ["gent", "mooney", "soft"], CL, 1.6, None),
    (["5", "6", "8", "10"], ["treloar", "hard", "yeoh"], GPS, 1.25, "0.03"),
    (["8", "8.5", "9.5", "10"], ["gent", "soft", "gent"], ("fixed", "1.2"), 1.7, None),
    (["1", "1.5", "4", "10"], ["hard", "gent", "mooney"], ("force", "20"), 1.6, None),
    (["2.5", "2.8", "3.1", "3.4"], ["demiray", "artery", "soft"], CL, 1.2, None),
]


def four(x):
    return format(Decimal(f"{float(x):.4g}"), "f")


def words(ends):
    table = {PS: "plane-strain", GPS: "generalized-plane-strain", CL: "closed"}
    key = "fixed-stretch" if ends[0] == "fixed" else "generalized-plane-strain"
    return table.get(ends) or {key: {"axial-stretch" if ends[0] == "fixed" else "axial-force": ends[1]}}


def run(job):
    index, (radii, materials, ends, stretch, outer) = job
    wall = Wall([(num(r0), num(r1), LAW[m], None) for r0, r1, m in zip(radii, radii[1:], materials)])
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
    id = f"{'-'.join(materials)}-{index:02d}"
    one = Suite("one", HERE, {}, "")
    points = {"A": (radii[0], "0", "0")}
    for i, (r0, r1) in enumerate(zip(radii, radii[1:])):
        points[f"layer {i}"] = along(format((Decimal(r0) + Decimal(r1)) / 2, "f"), "-0.6" if i == 1 else "0.6", "0.8")
    points["B"] = ("0", radii[-1], "0")
    write_state(one, id, load, a, lz, points, "layer 1")
    problem = {"radii": radii, "materials": materials, "ends": words(ends), "inner-pressure": text}
    print(id, text, "a/A", mp.nstr(a / wall.A, 6), "lz", mp.nstr(lz, 6), flush=True)
    return id, problem | ({"outer-pressure": outer} if outer else {}), one.rows


if __name__ == "__main__":
    check_laws(LAW)
    suite = Suite("library-layered-tube", HERE, MATERIALS, "Oracle cases: pressurised tube of two and three layers.")
    with Pool(2) as pool:
        for id, problem, rows in pool.imap(run, list(enumerate(CASES, 1))):
            suite.case(id, "layered-tube", problem)
            suite.rows += rows
    suite.write()
