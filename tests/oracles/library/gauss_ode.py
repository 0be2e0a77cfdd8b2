"""Initial-value problems y' = f(r, y) at many digits by Gauss-Legendre collocation (order 2s), fixed-point iteration."""

from mpmath import mp, mpf, pi, log, matrix, legendre


class Rule:
    """Gauss nodes on [0, 1], weights, and the integration matrix A_ij = int_0^(x_i) L_j."""

    def __init__(self, s):
        self.x = [(1 + self._root(s, i)) / 2 for i in range(s, 0, -1)]
        powers = matrix(s, s)
        for k in range(s):
            for j in range(s):
                powers[k, j] = self.x[j] ** k
        rights = matrix(s, s + 1)
        for k in range(s):
            for i in range(s):
                rights[k, i] = self.x[i] ** (k + 1) / (k + 1)
            rights[k, s] = mpf(1) / (k + 1)
        solved = powers**-1 * rights
        self.A = [[solved[j, i] for j in range(s)] for i in range(s)]
        self.w = [solved[j, s] for j in range(s)]

    @staticmethod
    def _root(s, i):
        x = mp.cos(pi * (i - mpf(1) / 4) / (s + mpf(1) / 2))
        for _ in range(100):
            p, q = legendre(s, x), legendre(s - 1, x)
            step = p * (x * x - 1) / (s * (x * p - q))
            x -= step
            if abs(step) < mpf(10) ** (3 - mp.dps):
                return x
        raise ArithmeticError("node")


RULES = {}


def rule(s):
    """The rule at the working precision; found with twice the digits, because the power basis loses half."""
    key = (s, mp.dps)
    if key not in RULES:
        with mp.workdps(2 * mp.dps + 20):
            RULES[key] = Rule(s)
    return RULES[key]


def panels(p, q, ratio):
    """Cuts between p and q (in either order) in geometric progression; one panel if it starts at zero."""
    if p == 0:
        return [(p, q)]
    n = max(1, int(mp.ceil(abs(log(q / p)) / log(mpf(ratio)))))
    cuts = [p * (q / p) ** (mpf(i) / n) for i in range(n)] + [q]
    return list(zip(cuts, cuts[1:]))


def integrate(f, start, stop, y, s=20, ratio=1.3, extra=None):
    """y at `stop` from y at `start`, and the integrals of extra(r, y) between them."""
    g, sums = rule(s), None
    for p, q in panels(start, stop, ratio):
        y, more = _panel(f, p, q - p, y, g, extra)
        sums = more if sums is None else [a + b for a, b in zip(sums, more)]
    return y, sums


def _panel(f, r0, h, y, g, extra):
    n = len(y)
    rs = [r0 + h * x for x in g.x]
    slopes = [f(r, y) for r in rs]
    last = None
    for _ in range(600):
        stages = _stages(y, h, slopes, g)
        new = [f(r, z) for r, z in zip(rs, stages)]
        size = max(abs(x) for z in new for x in z) + mpf(10) ** (-mp.dps)
        change = max(abs(a - b) for z, w in zip(new, slopes) for a, b in zip(z, w)) / size
        slopes = new
        if change < mpf(10) ** (1 - mp.dps) or (last and change >= last and change < mpf(10) ** (10 - mp.dps)):
            break
        last = change
    else:
        raise ArithmeticError("panel")
    columns = list(zip(*slopes))
    end = [y[k] + h * mp.fdot(zip(g.w, columns[k])) for k in range(n)]
    if extra is None:
        return end, []
    parts = zip(*[extra(r, z) for r, z in zip(rs, _stages(y, h, slopes, g))])
    return end, [h * mp.fdot(zip(g.w, part)) for part in parts]


def _stages(y, h, slopes, g):
    columns = list(zip(*slopes))
    return [[y[k] + h * mp.fdot(zip(row, c)) for k, c in enumerate(columns)] for row in g.A]
