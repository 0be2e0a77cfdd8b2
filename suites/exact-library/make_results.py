"""Compute the result sets of the suite `exact-library` with scikit-fem.

Invented scenario: parts of the dosing-pump family. Each case is solved on meshes that halve the elements of the one
before, and written in the neutral exchange format. The numbers of a case stand here and in suite.yaml; they must agree.

The case `pad` needs the body force of its stated displacement: it is asked of the built truebore binary, at the
integration points of each mesh (`--truebore`, otherwise target/release/truebore of this repository). All other cases
use nothing but the loads of their problem.
"""

import argparse
import csv
import subprocess
import tempfile
from pathlib import Path

import numpy as np
from scipy.sparse.linalg import splu
from skfem import Basis, BilinearForm, ElementQuadS2, LinearForm, MeshHex
from skfem.helpers import dot, grad, mul

import fe
from laws import CoupledNeoHookean, Hooke, NeoHookean, cauchy, det

HERE = Path(__file__).resolve().parent
LEVELS = (1, 2, 3)
LOAD_STEPS = 4


def half_elements(level):
    """Elements across a wall: 2, 4, 8."""
    return 2 ** level


# ---------------------------------------------------------------------------------------------------------------------
# Finite strain


def follower_pressure(pressure, bore):
    """Pressure on the deformed bore in plane strain: -p cof(F) N over the reference side, and its derivative."""
    def cof(A):
        return np.array([[A[1, 1], -A[1, 0]], [-A[0, 1], A[0, 0]]])

    def load(model):
        F = np.eye(2)[:, :, None, None] + bore.interpolate(model.u).grad
        force = LinearForm(lambda v, w: -pressure * dot(mul(cof(w["F"]), w.n), v))
        slope = BilinearForm(lambda u, v, w: -pressure * dot(mul(cof(grad(u)), w.n), v))
        return force.assemble(bore, F=F), slope.assemble(bore)
    return load


def finished(model, law, iterations, residual):
    """Stress, J, W and totals of a solved model at finite strain."""
    F = np.eye(3)[:, :, None, None] + model.H()
    return model, cauchy(law.stress(F), F), det(F), law.energy(F), dict(iterations=iterations, residual=residual)


def inflated_ring(inner, outer, n_radial, law_at, pressure):
    """A quarter ring in plane strain; `law_at(R)` the law at the middle of an element."""
    model = fe.Model(fe.quarter_ring("quad9", inner, outer, n_radial, 2 * n_radial), "quad9")
    model.hold(0, model.place[0] == 0.0)
    model.hold(1, model.place[1] == 0.0)
    middle = np.hypot(*model.points).mean(axis=1, keepdims=True)
    law = law_at(middle)
    bore = model.side(lambda x: np.hypot(*x) < inner * (1 + 1e-9))
    for step in range(1, LOAD_STEPS + 1):
        load = follower_pressure(pressure * step / LOAD_STEPS, bore)
        done = fe.newton(model, law.stress, law.tangent, load)
    return finished(model, law, *done)


def hose_liner(level, _):
    """pressurised-tube, nearly incompressible: K/mu = 50."""
    return inflated_ring(8.0, 12.0, half_elements(level), lambda R: NeoHookean(0.4, 20.0), 0.03)


def lined_hose(level, _):
    """layered-tube: a soft liner in a stiff cover, bonded at R = 10; element sides lie on the interface."""
    def law(R):
        return NeoHookean(np.where(R < 10.0, 0.4, 1.2), np.where(R < 10.0, 20.0, 60.0))
    return inflated_ring(8.0, 12.0, half_elements(level), law, 0.05)


def pad(level, ask):
    """stated-field: a distorted pad in plane strain, held at its displacement all round, under the body force."""
    n = 3 * 2 ** (level - 1)
    def place(a, b):
        bump = np.sin(np.pi * a) * np.sin(np.pi * b)
        return 10 * a + 1.0 * bump, 10 * b - 0.8 * bump
    sides = np.linspace(0.0, 1.0, n + 1)
    model = fe.Model(fe.quad_mesh("quad9", sides, sides, place), "quad9")
    on_side = (np.abs(model.place - 5).max(axis=0) > 5 - 1e-9)
    exact = ask("pad", "points", model.place, ("ux", "uy"))
    force = ask("pad", "loads", model.points.reshape(2, -1), ("bx", "by")).reshape(model.points.shape)
    law = CoupledNeoHookean(0.5, 2.0)
    outer = model.body_force(force)
    for step in range(1, LOAD_STEPS + 1):                    # the steps on the way are only a path to the last one
        share = step / LOAD_STEPS
        for i in (0, 1):
            model.hold(i, on_side, share * exact[i])
        done = fe.newton(model, law.stress, law.tangent, lambda _: (share * outer, 0))
    return finished(model, law, *done)


def bulb_rod(level, _):
    """homogeneous, uniaxial: a patch test on distorted hex8 elements; sides free, the end pulled."""
    sides = np.linspace(0.0, 1.0, 4)
    mesh = MeshHex.init_tensor(sides, sides, sides)
    x = mesh.p.copy()
    inside = np.sin(np.pi * x[0]) * np.sin(np.pi * x[1]) * np.sin(np.pi * x[2])
    slide = np.sin(np.pi * x) * np.cos(2.0 * x[[1, 2, 0]] + 1.0)        # zero across each face, so that faces stay plane
    places = 6.0 * (x + 0.12 * inside + 0.08 * slide)
    model = fe.Model(MeshHex(places, mesh.t), "hex8", "solid")
    law = NeoHookean(0.4, 4.0)
    near = 1e-9
    for i in range(3):
        model.hold(i, np.abs(model.place[i]) < near)
    for step in range(1, 2 * LOAD_STEPS + 1):
        model.hold(0, np.abs(model.place[0] - 6.0) < near, 0.3 * 6.0 * step / (2 * LOAD_STEPS))
        done = fe.newton(model, law.stress, law.tangent, tolerance=1e-11)
    return finished(model, law, *done)


# ---------------------------------------------------------------------------------------------------------------------
# Small strain


def solved(model, law, load, free_strain=0.0):
    """Solves a linear model; stress, J, W and totals."""
    residual = model.solve_linear(model.stiffness(law.tangent(model.weights)), load)
    stress, J, W = law.fields(model.H(), free_strain)
    return model, stress, J, W, dict(residual=residual)


def bulb(level, _):
    """lame-sphere: the upper half of a hollow sphere, axisymmetric."""
    n = half_elements(level)
    model = fe.Model(fe.quarter_ring("quad9", 8.0, 12.0, n, 2 * n), "quad9", "axisymmetric")
    model.hold(0, model.place[0] == 0.0)
    model.hold(1, model.place[1] == 0.0)
    bore = model.side(lambda x: np.hypot(*x) < 8.0 * (1 + 1e-9))
    load = model.load(lambda w: [-0.03 * w.n[0], -0.03 * w.n[1]], bore)
    return solved(model, Hooke(3.5, 0.4), load)


def ring_in_plane_stress(inner, outer, level):
    n = half_elements(level)
    model = fe.Model(fe.quarter_ring("quad8", inner, outer, n, 2 * n), "quad8")
    model.hold(0, model.place[0] == 0.0)
    model.hold(1, model.place[1] == 0.0)
    return model


def conducted(model, inner, outer, at_bore, outside):
    """Steady temperature on the same quad8 mesh, at the integration points of the model."""
    basis = Basis(model.mesh, ElementQuadS2(), intorder=5)
    K = BilinearForm(lambda u, v, w: dot(grad(u), grad(v))).assemble(basis)
    radius = np.hypot(*basis.doflocs)
    T = np.where(radius < inner * (1 + 1e-9), at_bore, np.where(radius > outer * (1 - 1e-9), outside, 0.0))
    free = (radius > inner * (1 + 1e-9)) & (radius < outer * (1 - 1e-9))
    T[free] = splu(K[free][:, free].tocsc()).solve(-(K[free] @ T))
    return np.asarray(basis.interpolate(T))


def valve_sleeve(level, _):
    """heated-tube, plane stress: hot bore, cool outside; the temperature is solved for on the same mesh."""
    law, expansion = Hooke(210000.0, 0.3, plane_stress=True), 1.2e-5
    model = ring_in_plane_stress(10.0, 20.0, level)
    free_strain = expansion * conducted(model, 10.0, 20.0, 150.0, 20.0)
    # in the plane, sigma = C (e - free strain 1)
    stress = law.E / (1 - law.nu) * free_strain
    load = model.inner_force(np.eye(3)[:, :, None, None] * stress)
    return solved(model, law, load, free_strain)


def drive_disk(level, _):
    """rotating-disk: body force rho omega^2 R outwards."""
    model = ring_in_plane_stress(20.0, 60.0, level)
    return solved(model, Hooke(105000.0, 0.34, plane_stress=True), model.body_force(0.02 * model.points))


def valve_tongue(level, _):
    """cantilever-strip: exact tractions on both ends; held at three points of the root."""
    length, half, end_load = 48.0, 6.0, 2.0
    n = half_elements(level)
    along, across = np.linspace(0, length, 2 * n + 1), np.linspace(-half, half, n + 1)
    model = fe.Model(fe.quad_mesh("quad8", along, across, lambda x, y: (x, y)), "quad8")
    second_moment = 2 * half**3 / 3
    def shear(w):
        return -end_load * (half**2 - w.x[1] ** 2) / (2 * second_moment)
    end = model.side(lambda x: x[0] > length - 1e-9)
    root = model.side(lambda x: x[0] < 1e-9)
    load = model.load(lambda w: [0 * w.x[0], shear(w)], end)
    load += model.load(lambda w: [-end_load * length * w.x[1] / second_moment, -shear(w)], root)
    at_root = np.abs(model.place[0]) < 1e-9
    model.hold(0, at_root & (np.abs(np.abs(model.place[1]) - half) < 1e-9))
    model.hold(1, at_root & (np.abs(model.place[1]) < 1e-9))
    return solved(model, Hooke(3.5, 0.4, plane_stress=True), load)


# ---------------------------------------------------------------------------------------------------------------------

CASES = {
    "hose-liner": (hose_liner, LEVELS),
    "lined-hose": (lined_hose, LEVELS),
    "pad": (pad, LEVELS),
    "bulb-rod": (bulb_rod, (1,)),
    "bulb": (bulb, LEVELS),
    "valve-sleeve": (valve_sleeve, LEVELS),
    "drive-disk": (drive_disk, LEVELS),
    "valve-tongue": (valve_tongue, LEVELS),
}


def asker(binary):
    """Asks the built binary for the exact solution of a case of suite.yaml at given places."""
    def ask(case, what, places, columns):
        with tempfile.TemporaryDirectory() as folder:
            table = Path(folder) / "places.csv"
            rows = [",".join(f"{v:.17g}" for v in place) for place in places.T]
            table.write_text("\n".join(["X,Y", *rows]) + "\n")
            call = [binary, "exact", HERE / "suite.yaml", "--case", case, f"--{what}", table]
            said = subprocess.run(call, check=True, capture_output=True, text=True).stdout
        answer = list(csv.DictReader(said.splitlines()))
        return np.array([[float(row[column]) for row in answer] for column in columns])
    return ask


def main():
    parser = argparse.ArgumentParser(description="Compute the result sets of the suite exact-library.")
    parser.add_argument("--out", type=Path, default=HERE / "results", help="folder for the result sets")
    parser.add_argument("--cases", nargs="+", choices=list(CASES), default=list(CASES), metavar="CASE")
    parser.add_argument("--truebore", default=HERE.parents[1] / "target/release/truebore", help="the built binary")
    arguments = parser.parse_args()
    for name in arguments.cases:
        make, levels = CASES[name]
        for level in levels:
            model, *fields = make(level, asker(arguments.truebore))
            title = f"Invented scenario: exact-library, {name}, level {level}; lengths mm, stresses MPa; scikit-fem 11.0.0"
            fe.write(arguments.out / name / f"level-{level}", title, model, *fields, compress=level > 1)
            print(f"{name} level {level}: residual {fields[-1]['residual']:.1e}", flush=True)


if __name__ == "__main__":
    main()
