"""Many-digit states of the pressurised tube at small strain (linear elasticity).

Writes ``lame_states.csv`` (one row a state) and ``lame_points.csv`` (five stations a state) beside this script.

Route. The stress is  srr = C - D/r^2,  stt = C + D/r^2,  szz constant over the wall. C and D come from the two wall
pressures by a 2 x 2 linear system, szz from the end condition, strains from Hooke's law, u = r ett. No displacement
formula is typed in, and no form that avoids cancellation is used: 60 digits stand in for that.

Ends            plane-strain ezz = 0 | fixed-stretch ezz = stretch - 1 | generalized-plane-strain szz = N/area
                closed N = pi (Pi A^2 - Po B^2) | plane-stress szz = 0
Inputs are doubles, each taken as the exact binary number; also the Poisson ratio (0.4999 is not 4999/10000).
"""

import csv
from pathlib import Path

from mpmath import mp, mpf, pi, matrix, lu_solve, nstr, quad, exp, linspace, log

mp.dps = 60
DIGITS = 25
HERE = Path(__file__).parent

STATE_COLUMNS = "id ends E nu A B Pi Po given u_a u_b axial_strain axial_force strain_energy".split()
POINT_COLUMNS = "id R u_r srr stt szz p W".split()


class Lame:
    """Stress constants, axial stress and strain of one state."""

    def __init__(self, ends, E, nu, A, B, Pi, Po, given):
        self.E, self.nu, self.A, self.B, self.Pi, self.Po = map(mpf, (E, nu, A, B, Pi, Po))
        walls = matrix([[1, -self.A**-2], [1, -self.B**-2]])
        self.C, self.D = lu_solve(walls, matrix([-self.Pi, -self.Po]))
        area = pi * (self.B**2 - self.A**2)
        if ends in ("plane-strain", "fixed-stretch"):
            self.ezz = mpf(given) - 1 if ends == "fixed-stretch" else mpf(0)
            self.szz = self.E * self.ezz + 2 * self.nu * self.C
            self.force = self.szz * area
        else:
            force = {"closed": pi * (self.Pi * self.A**2 - self.Po * self.B**2), "plane-stress": mpf(0)}
            self.force = force[ends] if ends in force else mpf(given)
            self.szz = self.force / area
            self.ezz = (self.szz - 2 * self.nu * self.C) / self.E

    def at(self, r):
        """u_r, srr, stt, szz, p, W at the radius r."""
        srr, stt, szz = self.C - self.D / r**2, self.C + self.D / r**2, self.szz
        ett = (stt - self.nu * (srr + szz)) / self.E
        err = (srr - self.nu * (stt + szz)) / self.E
        W = (srr * err + stt * ett + szz * self.ezz) / 2
        return [r * ett, srr, stt, szz, -(srr + stt + szz) / 3, W]

    def energy(self):
        """Half the work of the loads per unit length of the full ring."""
        u = [self.at(r)[0] for r in (self.A, self.B)]
        return pi * (self.Pi * self.A * u[0] - self.Po * self.B * u[1]) + self.force * self.ezz / 2

    def check(self):
        """Relative departures: strain compatibility, wall pressures, energy and axial force by quadrature."""
        r, h = (self.A + self.B) / 2, self.A * mpf(10) ** -18
        slope = (self.at(r + h)[0] - self.at(r - h)[0]) / (2 * h)
        u, srr, stt, szz, _, _ = self.at(r)
        err = (srr - self.nu * (stt + szz)) / self.E
        size = (abs(srr) + abs(stt) + abs(szz)) / self.E
        load = max(abs(self.Pi), abs(self.Po), abs(self.E * self.ezz))
        panels = [exp(v) for v in linspace(log(self.A), log(self.B), int(log(self.B / self.A) / 0.4) + 2)]
        panels[0], panels[-1] = self.A, self.B
        stored = quad(lambda s: 2 * pi * s * self.at(s)[5], panels)
        return {
            "compatibility": abs(slope - err) / size,
            "walls": (abs(self.at(self.A)[1] + self.Pi) + abs(self.at(self.B)[1] + self.Po)) / load,
            "energy": abs(stored / self.energy() - 1),
        }


def states():
    """(id, ends, E, nu, A, B, Pi, Po, given)"""
    out = [(f"published-macneal-{nu}", "plane-strain", 1000.0, nu, 3.0, 9.0, 1.0, 0.0, None)
           for nu in (0.3, 0.49, 0.499, 0.4999, 0.49999, 0.5)]
    out.append(("published-lame-0.5", "plane-strain", 2e5, 0.5, 0.1, 0.2, 60.0, 0.0, None))
    inner = {1.0001: 1.0, 1.001: 0.75, 1.25: 8.0, 1.5: 0.002, 2: 1.0, 5: 3.0, 10: 0.4, 100: 0.1}
    ratios = [0.0, 0.3, 0.49, 0.4999, 0.5]
    pressures = [(0.01, 0.0), (0.0, 0.007), (0.02, 0.015), (-0.003, 0.0)]
    n = 0
    for i, (ratio, A) in enumerate(inner.items()):
        B = float(f"{A * ratio:.12g}")
        area = 3.141592653589793 * (B * B - A * A)
        for j, ends in enumerate(("plane-strain", "generalized-plane-strain", "closed", "fixed-stretch", "plane-stress")):
            for k in range(2):
                nu = ratios[(i + j + 3 * k) % 5]
                E = (1.0, 3.0, 2.4e6)[(i + j) % 3]
                scale = min(1.0, ratio - 1) * E
                Pi, Po = (float(nstr(mpf(v) * scale, 5)) for v in pressures[(i + 2 * j + k) % 4])
                given = None
                if ends == "generalized-plane-strain":
                    given = 0.0 if k == 0 else float(nstr(mpf(0.004) * E * area, 5))
                if ends == "fixed-stretch":
                    given = (1.001, 0.9995)[k]
                n += 1
                out.append((f"lame-{n:02d}", ends, E, nu, A, B, Pi, Po, given))
    return out


def text(x):
    """25 significant digits, or the shortest form of an input double, or nothing."""
    if x is None or isinstance(x, str):
        return x or ""
    return repr(x) if isinstance(x, float) else nstr(x, DIGITS, strip_zeros=False)


def write(name, columns, rows):
    with open(HERE / name, "w", newline="") as f:
        out = csv.writer(f, lineterminator="\n")
        out.writerow(columns)
        out.writerows([text(v) for v in row] for row in rows)
    print(f"{name}: {len(rows)} rows")


def main():
    rows, points, worst = [], [], {}
    for name, ends, E, nu, A, B, Pi, Po, given in states():
        s = Lame(ends, E, nu, A, B, Pi, Po, given)
        for what, error in s.check().items():
            worst[what] = max(worst.get(what, mpf(0)), error)
        noise = lambda v, size: mpf(0) if abs(v) < mpf(10) ** -45 * size else v
        load = abs(Pi) + abs(Po) + E * abs(s.ezz)
        rows.append([name, ends, E, nu, A, B, Pi, Po, given, s.at(s.A)[0], s.at(s.B)[0], noise(s.ezz, load / E),
                     noise(s.force, load * s.B**2), s.energy()])
        for R in [A] + [float(A + f * (B - A)) for f in (0.125, 0.5, 0.8)] + [B]:
            u, *stress, W = s.at(mpf(R))
            points.append([name, R, u, *(noise(v, load) for v in stress), W])
        if name.startswith("published"):
            print(f"  {name}: u(A) {nstr(s.at(s.A)[0], 16)}  u(B) {nstr(s.at(s.B)[0], 16)}")
    write("lame_states.csv", STATE_COLUMNS, rows)
    write("lame_points.csv", POINT_COLUMNS, points)
    for what, error in worst.items():
        print(f"  worst check {what:14s} {nstr(error, 3)}")


if __name__ == "__main__":
    main()
