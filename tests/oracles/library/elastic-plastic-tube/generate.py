"""Many-digit states of elastic-perfectly-plastic tubes: Tresca, plane strain, inner pressure, small strain.

Route: numerical integration from the outer wall inwards (../gauss_ode.py), no closed solution.
  elastic   u' = (srr - lam u/r)/(lam + 2 mu),   srr' = (stt - srr)/r
  plastic   srr' = Y/r  (yield: stt - srr = Y),  u' + u/r = (1 + nu)(1 - 2 nu)(srr + stt)/E
The last line: flow on this face of the yield surface has no axial part and no volume, so szz = nu (srr + stt) and the
volume change is elastic. The plastic radius is found from srr(A) = -P; at B the elastic zone is free of traction.
Unloading is elastic: the elastic solution of the full pressure is taken away; the state is refused if any two principal
stresses then differ by more than Y (reverse yield).

Range. szz must stay between srr and stt. The upper bound is decisive at the bore: P <= Y (1 - nu)/(1 - 2 nu); up to collapse,
P = Y ln(B/A), hence ln(B/A) <= (1 - nu)/(1 - 2 nu). Asserted in each case at each point, and at the bore.
Totals: yield_pressure (bore begins to yield), collapse_pressure, plastic_radius (only when something is plastic).
"""

import sys
from pathlib import Path

from mpmath import mp, mpf, sqrt

HERE = Path(__file__).parent
sys.path.insert(0, str(HERE.parent))
from case_values import Values, agreement, exact, number, read_cases, small  # noqa: E402
from gauss_ode import integrate  # noqa: E402

mp.dps = 40


class Tube:
    def __init__(self, case, order):
        self.A, self.B, self.P = case.num("inner-radius"), case.num("outer-radius"), case.num("inner-pressure")
        constants = case.material()[1]
        self.E, self.nu, self.Y = [number(constants[k]) for k in ("E", "nu", "yield-stress")]
        self.lam = self.E * self.nu / ((1 + self.nu) * (1 - 2 * self.nu))
        self.whole = self.E * (1 - self.nu) / ((1 + self.nu) * (1 - 2 * self.nu))
        self.order, self.unloaded = order, case.problem["stage"] == "unloaded"

    def hoop(self, r, u, s):
        """Elastic hoop stress."""
        return self.lam * (s - self.lam * u / r) / self.whole + self.whole * u / r

    def elastic(self, r, y):
        u, s = y
        return [(s - self.lam * u / r) / self.whole, (self.hoop(r, u, s) - s) / r]

    def plastic(self, r, y):
        u, s = y
        return [(1 + self.nu) * (1 - 2 * self.nu) * (2 * s + self.Y) / self.E - u / r, self.Y / r]

    def go(self, f, start, stop, y):
        return integrate(f, start, stop, y, *self.order)[0] if start != stop else y

    def unit(self, r):
        """u, srr at r of the elastic solution with a free outer wall and u(B) = 1."""
        return self.go(self.elastic, self.B, r, [mpf(1), mpf(0)])

    def yielding_at(self, c):
        """u, srr at c when c just yields and all outside is elastic; and u(B)."""
        u, s = self.unit(c)
        scale = self.Y / (self.hoop(c, u, s) - s)
        return [scale * u, scale * s], scale

    def pressure(self, c):
        """Inner pressure that makes the wall plastic up to c."""
        y, _ = self.yielding_at(c)
        return -self.go(self.plastic, c, self.A, y)[1]

    def solve(self):
        self.yield_pressure = self.pressure(self.A)
        self.collapse_pressure = -self.go(self.plastic, self.B, self.A, [mpf(0), mpf(0)])[1]
        assert self.P < self.collapse_pressure
        self.elastic_scale = -self.P / self.unit(self.A)[1]
        self.c = self.A
        if self.P > self.yield_pressure:
            self.c = self.plastic_radius()
            self.at_c, self.scale = self.yielding_at(self.c)
        else:
            self.scale = self.elastic_scale

    def plastic_radius(self):
        """Secant steps from a proportional guess, to the last digits."""
        share = (self.P - self.yield_pressure) / (self.collapse_pressure - self.yield_pressure)
        c0 = self.A + (self.B - self.A) * share * mpf("0.8")
        c1 = c0 + (self.B - c0) / 20
        f0, f1 = self.pressure(c0) - self.P, self.pressure(c1) - self.P
        for _ in range(40):
            step = -f1 * (c1 - c0) / (f1 - f0)
            c0, f0, c1 = c1, f1, c1 + step
            if abs(step) < mpf(10) ** -28 * self.A:  # the next step would be 1e-45
                return c1
            f1 = self.pressure(c1) - self.P
        raise ArithmeticError("plastic radius")

    def loaded(self, r):
        """u, srr, stt."""
        if r >= self.c:
            u, s = [self.scale * x for x in self.unit(r)]
            return [u, s, self.hoop(r, u, s)]
        u, s = self.go(self.plastic, self.c, r, self.at_c)
        return [u, s, s + self.Y]

    def state(self, r):
        u, s, t = self.loaded(r)
        z = self.nu * (s + t)
        assert s - self.Y * mpf("1e-30") <= z <= t + self.Y * mpf("1e-30")
        if self.unloaded:
            v, w = [self.elastic_scale * x for x in self.unit(r)]
            u, s, t = u - v, s - w, t - self.elastic_scale * self.hoop(r, *self.unit(r))
            z = self.nu * (s + t)
            assert max(s, t, z) - min(s, t, z) < self.Y
        return {"u_r": u, "srr": s, "stt": t, "szz": z, "p": -(s + t + z) / 3}


def rows_of(case, order):
    tube = Tube(case, order)
    tube.solve()
    named = {"yield_pressure": tube.yield_pressure, "collapse_pressure": tube.collapse_pressure}
    if tube.c > tube.A:
        named["plastic_radius"] = tube.c
    rows = [(None, named)]
    for part in ("0", "0.125", "0.5", "0.875", "1"):
        R = tube.A + mpf(part) * (tube.B - tube.A)
        rows.append(((float(R), 0.0, 0.0), tube.state(mpf(float(R)))))
    point = [float((tube.A + tube.B) * mpf(x) / 2) for x in ("-0.6", "0.8")] + [0.0]
    X = exact(point)
    r = sqrt(X[0] ** 2 + X[1] ** 2)
    s, n = tube.state(r), [X[0] / r, X[1] / r]
    turned = {"ux": s["u_r"] * n[0], "uy": s["u_r"] * n[1], "sxy": (s["srr"] - s["stt"]) * n[0] * n[1]}
    turned |= {f"s{k}{k}": s["srr"] * m**2 + s["stt"] * (1 - m**2) for k, m in zip("xy", n)}
    rows.append((point, turned))
    return rows


if __name__ == "__main__":
    values = Values()
    for case in read_cases(HERE):
        first, second = rows_of(case, (17, 1.3)), rows_of(case, (22, 1.4))
        gap = max(agreement(a.values(), b.values()) for (_, a), (_, b) in zip(first, second))
        totals = {k: mp.nstr(v, 8) for k, v in second[0][1].items()}
        print(f"{case.id}: two discretisations {small(gap)} {totals}", flush=True)
        assert gap < mpf(10) ** -22, case.id
        for point, named in second:
            values.add_all(case.id, named, point)
    values.write(HERE)
