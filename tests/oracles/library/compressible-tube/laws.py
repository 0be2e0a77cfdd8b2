"""Compressible laws in principal stretches: W and its first and second derivatives in ln l_i, written by hand.

`law_check` compares them with mp.diff of the energy written once more with J and the invariants of C.
"""

import sys
from pathlib import Path

from mpmath import mp, mpf, log, sqrt, exp

sys.path.insert(0, str(Path(__file__).parents[1]))
from case_values import number  # noqa: E402


class Energy:
    """W, T_i = dW/d ln l_i and M_ij = d2W/d ln l_i d ln l_j of a law read from a suite."""

    def __init__(self, law, constants):
        self.law = law
        self.constants = {k: v for k, v in constants.items() if k != "volumetric"}
        self.numbers = {
            k: [number(x) for x in v] if isinstance(v, list) else number(v) for k, v in self.constants.items()
        }
        volumetric = constants.get("volumetric")
        if volumetric:
            ((self.form, bulk),) = volumetric.items()
            self.K = number(bulk["K"])

    def derivatives(self, l):
        if self.law == "compressible-neo-Hookean":
            return self._coupled(l)
        J = l[0] * l[1] * l[2]
        bar = [x / mp.cbrt(J) for x in l]
        W, t, m = self._isochoric(bar)
        U, U1, U2 = self._volumetric(J)
        mean = sum(t) / 3
        rows = [sum(m[i]) / 3 for i in range(3)]
        whole = sum(rows) / 3
        T = [t[i] - mean + U1 for i in range(3)]
        M = [[m[i][j] - rows[i] - rows[j] + whole + U2 for j in range(3)] for i in range(3)]
        return W + U, T, M

    def _coupled(self, l):
        mu, lam = self.numbers["mu"], self.numbers["lambda"]
        L = log(l[0] * l[1] * l[2])
        W = mu / 2 * (sum(x**2 for x in l) - 3 - 2 * L) + lam / 2 * L**2
        T = [mu * (x**2 - 1) + lam * L for x in l]
        M = [[lam + (2 * mu * l[i] ** 2 if i == j else 0) for j in range(3)] for i in range(3)]
        return W, T, M

    def _isochoric(self, l):
        """Energy of stretches with product one, and its derivatives as if they were free."""
        n = self.numbers
        if self.law == "Ogden":
            W, t, d = mpf(0), [mpf(0)] * 3, [mpf(0)] * 3
            for mu, alpha in zip(n["mu"], n["alpha"]):
                powers = [x**alpha for x in l]
                W += mu / alpha * (sum(powers) - 3)
                t = [a + mu * p for a, p in zip(t, powers)]
                d = [a + mu * alpha * p for a, p in zip(d, powers)]
            return W, t, [[d[i] if i == j else mpf(0) for j in range(3)] for i in range(3)]
        squares = [x**2 for x in l]
        W, f1, f11, f2 = self._invariants(sum(squares) - 3, sum(1 / x for x in squares) - 3)
        t = [2 * f1 * x - 2 * f2 / x for x in squares]
        m = [[4 * f11 * x * y for y in squares] for x in squares]
        for i, x in enumerate(squares):
            m[i][i] += 4 * f1 * x + 4 * f2 / x
        return W, t, m

    def _invariants(self, i1, i2):
        """W, dW/dI1, d2W/dI1^2, dW/dI2 at I1 - 3 and I2 - 3."""
        n = self.numbers
        if self.law == "neo-Hookean":
            return n["mu"] / 2 * i1, n["mu"] / 2, mpf(0), mpf(0)
        if self.law == "Mooney-Rivlin":
            return n["c10"] * i1 + n["c01"] * i2, n["c10"], mpf(0), n["c01"]
        if self.law == "Gent":
            gap = 1 - i1 / n["Jm"]
            return -n["mu"] * n["Jm"] / 2 * log(gap), n["mu"] / 2 / gap, n["mu"] / 2 / gap**2 / n["Jm"], mpf(0)
        raise ValueError(self.law)

    def _volumetric(self, J):
        """U, dU/d ln J, d2U/d(ln J)^2."""
        K = self.K
        if self.form == "quadratic":
            return K / 2 * (J - 1) ** 2, K * J * (J - 1), K * J * (2 * J - 1)
        if self.form == "quadratic-log":
            return K / 4 * (J**2 - 1 - 2 * log(J)), K / 2 * (J**2 - 1), K * J**2
        if self.form == "log-squared":
            return K / 2 * log(J) ** 2, K * log(J), K
        if self.form == "linear-log":
            return K * (J - 1 - log(J)), K * (J - 1), K * J
        raise ValueError(self.form)

    def plain(self, l):
        """The energy once more, from J and tr C, tr C^2: shares no line with the derivatives."""
        C = [x**2 for x in l]
        J2 = C[0] * C[1] * C[2]
        I1, I2 = sum(C), (sum(C) ** 2 - sum(x**2 for x in C)) / 2
        n, J = self.numbers, sqrt(J2)
        if self.law == "compressible-neo-Hookean":
            return n["mu"] / 2 * (I1 - 3 - log(J2)) + n["lambda"] / 8 * log(J2) ** 2
        b1, b2 = I1 / J ** (mpf(2) / 3), I2 / J ** (mpf(4) / 3)
        U = {
            "quadratic": (J - 1) ** 2 / 2,
            "quadratic-log": (J2 - 1 - log(J2)) / 4,
            "log-squared": log(J2) ** 2 / 8,
            "linear-log": J - 1 - log(J2) / 2,
        }[self.form] * self.K
        if self.law == "neo-Hookean":
            return n["mu"] * (b1 - 3) / 2 + U
        if self.law == "Mooney-Rivlin":
            return n["c10"] * (b1 - 3) + n["c01"] * (b2 - 3) + U
        if self.law == "Gent":
            return -n["mu"] * n["Jm"] / 2 * log(1 - (b1 - 3) / n["Jm"]) + U
        terms = zip(n["mu"], n["alpha"])
        return sum(m / a * (sum((x / J ** (mpf(1) / 3)) ** a for x in l) - 3) for m, a in terms) + U


def law_check(energy):
    """Relative departure of W, T and M from mp.diff of the plain energy at one odd state."""
    l = [mpf("1.17"), mpf("0.91"), mpf("1.08")]
    W, T, M = energy.derivatives(l)
    scale = max(abs(x) for row in M for x in row)

    def at(*e):
        return energy.plain([x * exp(d) for x, d in zip(l, e)])

    worst = abs(W - energy.plain(l))
    for i in range(3):
        first = tuple(int(k == i) for k in range(3))
        worst = max(worst, abs(T[i] - mp.diff(at, (0, 0, 0), first)))
        for j in range(3):
            second = tuple(int(k == i) + int(k == j) for k in range(3))
            worst = max(worst, abs(M[i][j] - mp.diff(at, (0, 0, 0), second)))
    return worst / scale
