"""Many-digit states of the pressurised tube for the laws with an involved energy. Writes suite.yaml and values.csv.

Route: ../finite_tube.py - integration of d srr/dr = (stt - srr)/r over the current wall, at 50 digits, with stresses from
the plain energy W(l1, l2, l3); each state is confirmed by the two derivatives of the energy and by a second Gauss rule, and
each law by differences of its energy. A pressure is chosen near a wanted bore stretch, or as a share of the first maximum, rounded
to four digits, and the state is then solved for the double nearest to that decimal, on the branch followed from zero load.
limit_pressure: first maximum of the inner pressure along the bore, with a given axial force or stretch held and no outer pressure.
"""

import sys
from multiprocessing import Pool
from pathlib import Path

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from finite_laws import Suite, build, check_laws, mp, mpf, num  # noqa: E402
from finite_tube import Load, Wall, along, confirm, write_state  # noqa: E402
from decimal import Decimal  # noqa: E402

MATERIALS = {
    "gent": ("Gent", {"mu": "0.4", "Jm": "30"}),
    "gent-tight": ("Gent", {"mu": "0.25", "Jm": "2.5"}),
    "gent-wide": ("Gent", {"mu": "1.1", "Jm": "97.2"}),
    "treloar": ("Ogden", {"mu": ["0.63", "0.0012", "-0.01"], "alpha": ["1.3", "5", "-2"]}),
    "ogden-up": ("Ogden", {"mu": ["0.08"], "alpha": ["10"]}),
    "ogden-down": ("Ogden", {"mu": ["-0.08"], "alpha": ["-10"]}),
    "ogden-low": ("Ogden", {"mu": ["0.9"], "alpha": ["1.7"]}),
    "chain": ("Arruda-Boyce", {"mu": "0.3", "N": "8"}),
    "chain-long": ("Arruda-Boyce", {"mu": "0.27", "N": "26.5"}),
    "chain-series": ("Arruda-Boyce-series", {"mu": "0.3", "N": "8"}),
    "artery": ("two-fibre", {"mu": "0.03", "k1": "0.05", "k2": "1.5", "beta": "0.5"}),
    "steep-fibre": ("two-fibre", {"mu": "0.05", "k1": "0.08", "k2": "0.7", "beta": "1.0"}),
    "axial-fibre": ("two-fibre", {"mu": "0.05", "k1": "0.08", "k2": "2", "beta": "1.2"}),
    "poly": ("polynomial", {"terms": [(1, 0, "0.16"), (0, 1, "0.02"), (2, 0, "-0.002"), (1, 1, "0.004"), (3, 0, "0.0005")]}),
    "yeoh": ("Yeoh", {"c10": "0.2", "c20": "-0.004", "c30": "0.0003"}),
}
LAW = build(MATERIALS)
PS, GPS, CL = ("fixed", "1"), ("force", "0"), ("closed", None)


def fixed(l):
    return ("fixed", l)


def force(n):
    return ("force", n)


# (material, A, B, ends, how, value, outer pressure or None, dead)   how: near = pressure near this bore stretch
CASES = [
    ("gent", "5", "10", PS, "near", 1.3), ("gent", "8", "10", GPS, "near", 1.25), ("gent", "1", "10", CL, "near", 1.5),
    ("gent", "10", "10.001", CL, "near", 1.2), ("gent", "10", "10.001", PS, "near", 1.000001),
    ("gent-tight", "5", "10", PS, "stretch", "2.065"), ("gent-tight", "8", "10", CL, "near", 1.8),
    ("gent-tight", "1", "10", PS, "near", 2.05), ("gent-tight", "0.5", "1", force("0.3"), "near", 1.6),
    ("gent-wide", "8", "10", fixed("1.4"), "near", 1.35), ("gent-wide", "5", "10", force("25"), "volume", "250"),
    ("gent-wide", "10", "10.001", GPS, "stretch", "3.5"),
    ("treloar", "5", "10", PS, "near", 1.4), ("treloar", "8", "10", CL, "near", 1.3), ("treloar", "1", "10", GPS, "near", 1.7),
    ("treloar", "10", "10.001", CL, "stretch", "4.5"), ("treloar", "40", "50", fixed("1.25"), "near", 1.1, "0.02"),
    ("ogden-up", "5", "10", GPS, "near", 1.35), ("ogden-up", "8", "10", PS, "near", 1.6), ("ogden-up", "1", "10", CL, "stretch", "1.5"),
    ("ogden-down", "5", "10", CL, "near", 1.15), ("ogden-down", "8", "10", fixed("0.9"), "near", 1.2),
    ("ogden-down", "10", "10.001", force("-0.01"), "near", 1.05), ("ogden-low", "1", "10", PS, "near", 1.000001),
    ("ogden-low", "5", "10", CL, "given", "0.15", "0.05", True), ("treloar", "8", "10", PS, "given", "0.1", None, True),
    ("chain", "5", "10", PS, "near", 1.5), ("chain", "8", "10", CL, "near", 1.6), ("chain", "10", "10.001", GPS, "stretch", "2.4"),
    ("chain", "1", "10", fixed("1.5"), "near", 1.4), ("chain-long", "5", "10", force("40"), "near", 1.2),
    ("chain-long", "0.5", "1", CL, "given", "0.11", None, True), ("chain-long", "8", "10", PS, "near", 1.00001),
    ("chain-series", "5", "10", PS, "near", 1.5), ("chain-series", "8", "10", CL, "near", 1.4),
    ("chain-series", "1", "10", force("-12"), "near", 1.3), ("chain-series", "10", "10.001", fixed("1.1"), "near", 1.3),
    ("artery", "5", "10", fixed("1.2"), "near", 1.35), ("artery", "8", "10", CL, "near", 1.3), ("artery", "1", "10", PS, "near", 1.4),
    ("artery", "10", "10.001", GPS, "near", 1.15), ("artery", "2.5", "3.4", fixed("1.5"), "near", 1.2, "0.004"),
    ("steep-fibre", "5", "10", fixed("0.9"), "near", 1.4), ("steep-fibre", "5", "10", force("-4"), "near", 1.5),
    ("steep-fibre", "8", "10", force("6"), "near", 1.25), ("steep-fibre", "1", "10", GPS, "near", 1.5),
    ("axial-fibre", "5", "10", fixed("0.7"), "near", 1.3), ("axial-fibre", "8", "10", force("-9"), "near", 1.2),
    ("axial-fibre", "1", "10", fixed("0.9"), "volume", "4"),
    ("poly", "5", "10", PS, "near", 1.5), ("poly", "8", "10", CL, "near", 1.35), ("poly", "1", "10", GPS, "stretch", "1.8"),
    ("poly", "10", "10.001", fixed("1.3"), "near", 1.2), ("poly", "5", "10", force("30"), "given", "0.12", "0.03", True),
    ("yeoh", "5", "10", CL, "near", 1.25), ("yeoh", "8", "10", PS, "given", "0.09", None, True),
    ("yeoh", "1", "10", GPS, "near", 1.4, "0.05"), ("yeoh", "40", "50", force("200"), "volume", "8000"),
    # outer pressure alone, the bore shrinks
    ("gent", "5", "10", PS, "crush", 0.8), ("treloar", "8", "10", CL, "crush", 0.9), ("ogden-up", "5", "10", GPS, "crush", 0.85),
    ("chain", "1", "10", PS, "crush", 0.7), ("artery", "5", "10", fixed("1.1"), "crush", 0.8),
    # shares of the first maximum
    ("gent", "8", "10", CL, "share", "0.99"), ("gent", "5", "10", CL, "share", "0.999"), ("treloar", "10", "10.001", CL, "share", "0.98"),
    ("ogden-low", "8", "10", GPS, "share", "0.98"), ("gent-wide", "5", "10", CL, "share", "0.98"),
    ("ogden-low", "5", "10", force("60"), "share", "0.995"), ("gent-wide", "1", "10", CL, "share", "0.95"),
    ("gent-wide", "10", "10.001", CL, "share", "0.9999"), ("treloar", "5", "10", CL, "share", "0.99"),
    ("treloar", "8", "10", force("150"), "share", "0.95"), ("treloar", "8", "10", PS, "share", "0.98"), ("chain-long", "8", "10", CL, "share", "0.99"),
    ("chain-long", "5", "10", CL, "share", "0.97"), ("ogden-low", "8", "10", CL, "share", "0.99"), ("yeoh", "8", "10", CL, "share", "0.98"),
]
END_WORDS = {"fixed": "fixed-stretch", "force": "force", "closed": "closed"}


def four(x):
    return format(Decimal(f"{float(x):.4g}"), "f")


def choose(wall, ends, how, value, Po):
    """The displayed load: (kind, decimal), and the first maximum where it was asked for."""
    if how in ("stretch", "volume"):
        return (how, value), None
    if how == "given":
        return ("pressure", value), None
    probe = Load(wall, ends, ("stretch", mpf(1)), Po)
    if how == "share":
        limit = probe.limit()
        assert limit is not None, "no maximum"
        return ("pressure", four(limit * mpf(value))), limit
    a, lz = float(wall.A) * value, probe.start_stretch(float)
    for _ in range(3):
        lz = probe.axial_stretch(a, lz)
    drop = probe.double_wall().loads(a, lz, float(Po))[0] - float(Po)
    return (("outer", four(-drop)) if how == "crush" else ("pressure", four(drop + float(Po)))), None


def problem_of(material, A, B, ends, kind, text, outer, dead):
    words = {"fixed": {"fixed-stretch": {"axial-stretch": ends[1]}}, "force": {"generalized-plane-strain": {"axial-force": ends[1]}},
             "closed": "closed"}[ends[0]]
    words = {PS: "plane-strain", GPS: "generalized-plane-strain"}.get(ends, words)
    problem = {"inner-radius": A, "outer-radius": B, "ends": words, "material": material}
    name = {"pressure": "inner-pressure", "stretch": "inner-wall-stretch", "volume": "enclosed-volume"}.get(kind)
    if name:
        problem[name] = text
    if outer is not None:
        problem["outer-pressure"] = outer
    if dead:
        problem["load"] = "dead"
    return problem


def run(job):
    index, (material, A, B, ends, how, value, *rest) = job
    outer, dead = (rest + [None, False][len(rest):])[:2]
    wall = Wall([(num(A), num(B), LAW[material], None)])
    exact_ends = (ends[0], None if ends[1] is None else num(ends[1]))
    (kind, text), limit = choose(wall, exact_ends, how, value, num(outer) if outer else mpf(0))
    if kind == "outer":
        outer, inner = text, ("pressure", mpf(0))
    else:
        inner = (kind, num(text))
    id = f"{material}-{index:02d}-" + (END_WORDS[ends[0]] if ends not in (PS, GPS) else "plane-strain" if ends == PS else "free")
    try:
        load = Load(wall, exact_ends, inner, num(outer) if outer else mpf(0), dead)
        a, lz = load.solve()
        confirm(load, a, lz)
    except Exception as error:
        raise RuntimeError(f"{id} {text}: {error!r}")
    one = Suite("one", HERE, {}, "")
    mid = format((Decimal(A) + Decimal(B)) / 2, "f")
    points = {"A": (A, "0", "0"), "mid": along(mid, "0.6", "0.8"), "B": ("0", B, "0")}
    write_state(one, id, load, a, lz, points)
    if limit is not None:
        one.value(id, "limit_pressure", limit)
    wakes = sorted(float(r) for r in wall.switch(LAW[material], a, lz)) if "fibre" in material or material == "artery" else ""
    print(id, text, "a/A", mp.nstr(a / wall.A, 6), "lz", mp.nstr(lz, 6), wakes, flush=True)
    return id, problem_of(material, A, B, ends, kind, text, outer, dead), one.rows


if __name__ == "__main__":
    check_laws(LAW)
    suite = Suite("library-pressurised-tube", HERE, MATERIALS, "Oracle cases: pressurised tube, laws with an involved energy.")
    with Pool(2) as pool:
        for id, problem, rows in pool.imap(run, list(enumerate(CASES, 1))):
            suite.case(id, "pressurised-tube", problem)
            suite.rows += rows
    suite.write()
