"""Manufactured fields: Cauchy stress, J, W, body force and nominal tractions at points.

Route: everything by numerical differentiation at 40 digits. F = 1 + du/dX from the typed displacement, P = dW/dF from
the plain energy (../plain_energy.py), body force per reference volume b = -Div P (quantities bx by bz), nominal traction
t = P N on a plane of reference normal N (tx@1 0 0 and so on: force per reference area). The components are Cartesian
also where the displacement is written in R = sqrt(X^2 + Y^2) and Theta = atan2(Y, X). In small strain P is the stress
of the displacement gradient. Checked: global balance of a small cell (the tractions on six faces against the body
force, by quadrature).
"""

import sys
from pathlib import Path

from mpmath import mp, mpf, eye, matrix, sqrt, atan2

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from case_values import Values, exact, number, read_cases, small  # noqa: E402
from plain_energy import cauchy_stress, energy, nominal_stress, stress_rows  # noqa: E402

mp.dps = 40
POINTS = ((0.5, 0.25, 0.0), (1.2, -0.4, 0.3), (-0.7, 0.9, 1.1), (-0.3, -1.6, -0.8))
NORMALS = ("1 0 0", "0 1 0", "0 0 1", "0.6 0.8 0", "-1 0 0")
FUNCTIONS = {name: getattr(mp, name) for name in "sin cos tan exp sqrt sinh cosh tanh".split()}


class Field:
    def __init__(self, case):
        self.material = case.material()
        self.texts = [case.problem["displacement"][k].replace("^", "**") for k in "xyz"]
        self.constants = {k: number(v) for k, v in case.problem.get("constants", {}).items()}

    def displacement(self, X, i):
        names = dict(zip("XYZ", X)) | {"R": sqrt(X[0] ** 2 + X[1] ** 2), "Theta": atan2(X[1], X[0])}
        return mpf(eval(self.texts[i], {"__builtins__": {}}, names | self.constants | FUNCTIONS))

    def gradient(self, X):
        F = eye(3)
        for i in range(3):
            for j in range(3):
                order = tuple(int(k == j) for k in range(3))
                F[i, j] += mp.diff(lambda *x, i=i: self.displacement(x, i), tuple(X), order)
        return F

    def nominal(self, X):
        return nominal_stress(self.material, self.gradient(X))

    def body_force(self, X):
        h, b = mpf(10) ** -13, [mpf(0)] * 3
        for j in range(3):
            for i, d in enumerate(self._column_derivative(X, j, h)):
                b[i] -= d
        return b

    def _column_derivative(self, X, j, h):
        """dP_ij/dX_j, i = 1..3, by six-point differences at 100 digits: error h^6 = 1e-78, round-off far below."""
        with mp.workdps(100):
            weights = {1: mpf(45) / 60, 2: mpf(-9) / 60, 3: mpf(1) / 60}
            total = [mpf(0)] * 3
            for k, w in weights.items():
                for sign in (1, -1):
                    Y = list(X)
                    Y[j] += sign * k * h
                    P = self.nominal(Y)
                    total = [t + sign * w * P[i, j] / h for i, t in enumerate(total)]
        return total

    def cell_balance(self, X, side):
        """Sum of the forces on a small cube about X plus its body force, relative to the latter; 3-point Gauss rules,
        so of order side^6 (b varies over the cell)."""
        g = sqrt(mpf(3) / 5) * side / 2
        rule = [(-g, mpf(5) / 18), (mpf(0), mpf(8) / 18), (g, mpf(5) / 18)]
        total = [mpf(0)] * 3
        for axis in range(3):
            others = [k for k in range(3) if k != axis]
            for sign in (1, -1):
                for p, wp in rule:
                    for q, wq in rule:
                        Y = list(X)
                        Y[axis] += sign * side / 2
                        Y[others[0]] += p
                        Y[others[1]] += q
                        P = self.nominal(Y)
                        total = [t + sign * wp * wq * P[i, axis] / side for i, t in enumerate(total)]
        inside = [mpf(0)] * 3
        for d in [(p, q, r) for p in rule for q in rule for r in rule]:
            weight = d[0][1] * d[1][1] * d[2][1]
            b = self.body_force([x + e[0] for x, e in zip(X, d)])
            inside = [t + weight * y for t, y in zip(inside, b)]
        size = max(abs(x) for x in inside)
        return max(abs(x + y) for x, y in zip(total, inside)) / size


def rows(field, point):
    X = exact(point)
    F, P = field.gradient(X), field.nominal(X)
    named = {name: field.displacement(X, i) for i, name in enumerate(("ux", "uy", "uz"))}
    named |= stress_rows(cauchy_stress(field.material, F)) | {"W": energy(*field.material, F)}
    if field.material[0] != "linear-elastic":
        named["J"] = mp.det(F)
    named |= dict(zip(("bx", "by", "bz"), field.body_force(X)))
    for normal in NORMALS:
        t = P * matrix([number(x) for x in normal.split()])
        named |= {f"t{axis}@{normal}": t[i] for i, axis in enumerate("xyz")}
    return named


if __name__ == "__main__":
    values = Values()
    for case in read_cases(HERE):
        field = Field(case)
        for point in POINTS:
            values.add_all(case.id, rows(field, point), point)
        with mp.workdps(30):
            left = field.cell_balance(exact(POINTS[1]), mpf("0.01"))
        print(f"{case.id}: cell balance {small(left)}", flush=True)
        assert left < mpf(10) ** -9, case.id
    values.write(HERE)
