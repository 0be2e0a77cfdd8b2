"""Writes the broken result sets of tests/broken_csv.rs: each is the folder `sound` with one thing broken."""

import gzip
import math
import pathlib
import shutil

HERE = pathlib.Path(__file__).parent
G = 1 / math.sqrt(3)

NODES = ["node,X,Y,ux,uy"] + [
    f"{1 + i + 3 * j},{i}.0,{j}.0,{0.01 * i},{-0.005 * j}" for j in range(2) for i in range(3)
]
ELEMENTS = ["element,shape,n1,n2,n3,n4", "1,quad4,1,2,5,4", "2,quad4,2,3,6,5"]
POINTS = ["element,point,X,Y,weight,sxx,syy,szz,sxy,p,J,W"]
for e in range(2):
    for k, (a, b) in enumerate([(-G, -G), (G, -G), (-G, G), (G, G)]):
        x, y = e + 0.5 * (1 + a), 0.5 * (1 + b)
        POINTS.append(f"{e + 1},{k + 1},{x!r},{y!r},0.25,3.0,-1.5,0.0,0.25,-0.5,1.0,0.125")
TOTALS = ["quantity,value", "strain_energy,0.25", "iterations,4"]
SOUND = {"nodes.csv": NODES, "elements.csv": ELEMENTS, "points.csv": POINTS, "totals.csv": TOTALS}


def text(lines):
    return "\n".join(lines) + "\n"


def write(name, change):
    """`change` gets the tables as lists of lines and returns extra files as bytes."""
    folder = HERE / name
    shutil.rmtree(folder, ignore_errors=True)
    folder.mkdir()
    tables = {file: list(lines) for file, lines in SOUND.items()}
    extra = change(tables) or {}
    for file, lines in tables.items():
        (folder / file).write_bytes(text(lines).encode())
    for file, data in extra.items():
        (folder / file).write_bytes(data)


def cell(file, line, column, value):
    """Replaces one cell; `line` counts from 1 with the header."""
    def change(tables):
        cells = tables[file][line - 1].split(",")
        cells[tables[file][0].split(",").index(column)] = value
        tables[file][line - 1] = ",".join(cells)
    return change


def header(file, old, new):
    def change(tables):
        names = tables[file][0].split(",")
        names[names.index(old)] = new
        tables[file][0] = ",".join(names)
    return change


def line(file, number, value):
    def change(tables):
        tables[file][number - 1] = value
    return change


def append(file, *values):
    def change(tables):
        tables[file].extend(values)
    return change


def without(file, column):
    def change(tables):
        at = tables[file][0].split(",").index(column)
        tables[file] = [",".join(c for i, c in enumerate(l.split(",")) if i != at) for l in tables[file]]
    return change


def remove(*files):
    def change(tables):
        for file in files:
            del tables[file]
    return change


def swap(file, a, b):
    def change(tables):
        tables[file][a - 1], tables[file][b - 1] = tables[file][b - 1], tables[file][a - 1]
    return change


def stepped(file, steps):
    def change(tables):
        head, *rows = tables[file]
        tables[file] = [head + ",step"] + [f"{r},{s}" for s in steps for r in rows]
    return change


def both(*changes):
    def change(tables):
        for one in changes:
            one(tables)
    return change


def parts(*names, second=None):
    """points.csv cut into files; `second` is another header for the second."""
    def change(tables):
        head, *rows = tables.pop("points.csv")
        half = len(rows) // 2
        pieces = [[head] + rows[:half], [second or head] + rows[half:]]
        return {name: text(piece).encode() for name, piece in zip(names, pieces)}
    return change


def replace_all(file, function):
    def change(tables):
        tables[file] = [function(l) for l in tables[file]]
    return change


ALL = {
    "sound": lambda tables: None,
    "nan-displacement": cell("nodes.csv", 4, "ux", "nan"),
    "infinite-stress": cell("points.csv", 3, "sxx", "-Infinity"),
    "overflow": cell("points.csv", 9, "W", "1e400"),
    "empty-needed-cell": cell("nodes.csv", 7, "uy", ""),
    "text-in-number": cell("nodes.csv", 2, "X", "free"),
    "fortran-exponent": cell("points.csv", 2, "syy", "1.0D-3"),
    "decimal-comma": cell("nodes.csv", 3, "X", '"1,0"'),
    "fractional-id": cell("nodes.csv", 5, "node", "4.0"),
    "huge-id": cell("nodes.csv", 5, "node", "18446744073709551616"),
    "ragged-row": append("nodes.csv", "7,3.0,0.0,0.0"),
    "comment-in-data": line("points.csv", 5, "# left out"),
    "unclosed-quote": line("elements.csv", 2, '1,quad4,1,2,5,"4'),
    "duplicate-node": append("nodes.csv", "3,2.0,0.0,0.0,0.0"),
    "duplicate-element": append("elements.csv", "2,quad4,2,3,6,5"),
    "duplicate-point": append("points.csv", POINTS[4]),
    "duplicate-total": append("totals.csv", "strain_energy,0.26"),
    "duplicate-column": header("nodes.csv", "uy", "ux"),
    "missing-column": header("nodes.csv", "Y", "Y_coord"),
    "half-displacement": without("nodes.csv", "uy"),
    "missing-weight-cell": cell("points.csv", 6, "weight", " "),
    "negative-weight": cell("points.csv", 6, "weight", "-0.25"),
    "negative-volume-ratio": cell("points.csv", 6, "J", "-1.0"),
    "unknown-node": cell("elements.csv", 3, "n3", "66"),
    "unknown-element": cell("points.csv", 8, "element", "3"),
    "unknown-shape": cell("elements.csv", 3, "shape", "QUAD4"),
    "later-shape": cell("elements.csv", 3, "shape", "pyramid5"),
    "missing-node": cell("elements.csv", 3, "n4", ""),
    "too-many-nodes": both(
        replace_all("elements.csv", lambda l: l + (",n5" if l.startswith("element") else ",")),
        cell("elements.csv", 3, "n5", "1"),
    ),
    "repeated-node": cell("elements.csv", 2, "n4", "5"),
    "mixed-dimensions": line("elements.csv", 3, "2,tet4,2,3,6,5"),
    "clockwise": line("elements.csv", 2, "1,quad4,1,4,5,2"),
    "overlapping": append("elements.csv", "3,quad4,1,2,5,4", "4,quad4,1,2,5,4"),
    "point-outside": cell("points.csv", 2, "X", "1.2"),
    "wrong-element": cell("points.csv", 6, "element", "1"),
    "point-number": cell("points.csv", 6, "point", "4096"),
    "element-gap": lambda tables: tables.update({"points.csv": POINTS[:5]}),
    "bare-weights": replace_all("points.csv", lambda l: l.replace(",0.25,3.0", ",1.0,3.0")),
    "lost-point": lambda tables: tables.update({"points.csv": POINTS[:-1]}),
    "shifted-weights": both(cell("points.csv", 2, "weight", "0.26"), cell("points.csv", 9, "weight", "0.24")),
    "wrong-pressure-sign": replace_all("points.csv", lambda l: l.replace(",-0.5,1.0", ",0.5,1.0")),
    "unused-node": append("nodes.csv", "99,5.0,5.0,0.0,0.0"),
    "coincident-node": both(append("nodes.csv", "7,1.0,1.0,0.0,0.0"), cell("elements.csv", 3, "n4", "7")),
    "semicolons": replace_all("nodes.csv", lambda l: l.replace(",", ";")),
    "empty-file": lambda tables: tables.update({"totals.csv": []}) or {"totals.csv": b""},
    "header-only": lambda tables: tables.update({"points.csv": POINTS[:1]}),
    "no-tables": lambda tables: tables.clear() or {"README.txt": b"nothing here\n"},
    "elements-without-nodes": remove("nodes.csv"),
    "both-plain-and-gz": lambda tables: {"nodes.csv.gz": gzip.compress(text(NODES).encode(), mtime=0)},
    "whole-and-parts": lambda tables: {"points.part-0001.csv": text(POINTS).encode()},
    "part-gap": parts("points.part-0001.csv", "points.part-0003.csv"),
    "part-header": parts("points.part-0001.csv", "points.part-0002.csv", second=POINTS[0].replace("syy,szz", "szz,syy")),
    "cut-gz": lambda tables: tables.pop("nodes.csv") and {
        "nodes.csv.gz": gzip.compress(text(NODES).encode(), mtime=0)[:-12]
    },
    "not-gz": lambda tables: tables.pop("nodes.csv") and {"nodes.csv.gz": text(NODES).encode()},
    "latin-1-header": lambda tables: tables.pop("nodes.csv") and {
        "nodes.csv": text([NODES[0] + ",\xe9t\xe9"] + [l + ",0" for l in NODES[1:]]).encode("latin-1")
    },
    "step-not-there": both(stepped("nodes.csv", [1, 2]), stepped("points.csv", [1])),
    "step-beyond": both(stepped("nodes.csv", [1, 2]), stepped("points.csv", [1, 2, 3])),
    "points-without-step": stepped("nodes.csv", [1, 2]),
    "bad-step": both(stepped("nodes.csv", [1, 2]), stepped("points.csv", [1, 2]), cell("nodes.csv", 4, "step", "end")),
    "piola-without-gradient": header("points.csv", "sxx", "P11"),
    "declared-header-missing": header("nodes.csv", "ux", "U_1"),
    "negative-radius": both(
        header("nodes.csv", "X", "R"), header("nodes.csv", "Y", "Z"), header("nodes.csv", "ux", "ur"),
        header("nodes.csv", "uy", "uz"), cell("nodes.csv", 2, "R", "-0.5"), remove("points.csv"),
    ),
    "mixed-frames": both(header("points.csv", "X", "R"), header("points.csv", "Y", "Z")),
    "shell": both(
        replace_all("nodes.csv", lambda l: l + (",Z" if l.startswith("node") else ",0.0")),
        cell("nodes.csv", 4, "Z", "0.5"),
    ),
    "unknown-rule": both(without("points.csv", "X"), without("points.csv", "Y")),
    "rule-point-zero": both(without("points.csv", "X"), without("points.csv", "Y"), cell("points.csv", 2, "point", "0")),
    "other-rule-order": both(without("points.csv", "weight"), swap("points.csv", 4, 5),
                             cell("points.csv", 4, "point", "3"), cell("points.csv", 5, "point", "4")),
    "nameless-total": cell("totals.csv", 2, "quantity", ""),
}

for name, change in ALL.items():
    write(name, change)
print(len(ALL), "folders")
