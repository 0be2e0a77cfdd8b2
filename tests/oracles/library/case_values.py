"""Reads the cases of an oracle's suite.yaml and writes its values.csv; shared by the generate.py of the folders.

Every number of suite.yaml is taken as the double nearest to what is written there, then as that exact binary number.
Needs PyYAML and mpmath.
"""

import csv
from pathlib import Path

import yaml
from mpmath import mp, mpf, nstr

DIGITS = 26


def number(x):
    """The double nearest to the written decimal, exactly."""
    return mpf(float(x))


class Case:
    """One case: its id, the name and fields of its problem, and the materials of the suite."""

    def __init__(self, entry, materials):
        self.id = entry["id"]
        ((self.kind, self.problem),) = entry["problem"].items()
        self.materials = materials

    def num(self, key, default=0):
        return number(self.problem.get(key, default))

    def nums(self, key):
        return [number(x) for x in self.problem[key]]

    def material(self, key="material"):
        """(law, constants) of the material named under the key."""
        return self.law_of(self.problem[key])

    def law_of(self, name):
        ((law, constants),) = self.materials[name].items()
        return law, constants

    def ends(self):
        """(name, value or None) of the end condition."""
        ends = self.problem.get("ends")
        if not isinstance(ends, dict):
            return ends, None
        ((name, fields),) = ends.items()
        return name, number(next(iter(fields.values())))


def read_cases(folder):
    suite = yaml.safe_load((Path(folder) / "suite.yaml").read_text(encoding="utf-8"))
    return [Case(entry, suite["materials"]) for entry in suite["cases"]]


class Values:
    """Rows of values.csv. A point is a tuple of three doubles, or None for a total of the body."""

    def __init__(self):
        self.rows = []

    def add(self, case, quantity, value, point=None):
        place = ["", "", ""] if point is None else [repr(float(x)) for x in point]
        with mp.workdps(60):  # whatever the caller works with: mpf() and nstr() round to the working precision
            text = "0" if abs(value) < mpf(10) ** -28 else nstr(mpf(value), DIGITS)
        self.rows.append([case, quantity, *place, text])

    def add_all(self, case, named, point=None):
        for quantity, value in named.items():
            self.add(case, quantity, value, point)

    def write(self, folder):
        with open(Path(folder) / "values.csv", "w", newline="", encoding="utf-8") as out:
            writer = csv.writer(out, lineterminator="\n")
            writer.writerow("case quantity X Y Z value".split())
            writer.writerows(self.rows)
        print(f"{len(self.rows)} values")


def exact(point):
    return [mpf(float(x)) for x in point]


def agreement(first, second):
    """Largest difference between two lists of numbers, relative to the larger of each pair (or absolute near zero)."""
    worst = mpf(0)
    for x, y in zip(first, second, strict=True):
        size = max(abs(x), abs(y))
        worst = max(worst, abs(x - y) / size if size > mpf(10) ** -25 else abs(x - y))
    return worst


def small(x):
    """A short form of a residual for the log."""
    return mp.nstr(x, 2)
