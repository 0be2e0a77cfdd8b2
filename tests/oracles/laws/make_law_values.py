#!/usr/bin/env python3
"""Many-digit stress differences and energies of the incompressible laws: values.csv.

Second route: each law is the plain energy W(lr, lt, lz) of principal stretches, and T_i = l_i dW/dl_i is a central
difference of it at 100 digits. No difference form, no derivative by hand, no formula of truebore. Strains run from
1e-9 to where W is of order 1e10. Needs mpmath. Usage: make_law_values.py > values.csv
"""
from mpmath import mp, mpf, coth, exp, findroot, log, sin, cos, sinh, sqrt

mp.dps = 100
STEP = mpf(10) ** -30


def real(x):
    """The double nearest to a written decimal."""
    return mpf(float(x))


def invariants(l):
    return sum(x**2 for x in l), sum(x**-2 for x in l)


def langevin_inverse(x):
    start = x * (3 - x * x) / (1 - x * x)
    return findroot(lambda b: coth(b) - 1 / b - x, start)


def gent(l, mu, Jm):
    return -mu * Jm / 2 * log(1 - (invariants(l)[0] - 3) / Jm)


def demiray(l, c, b):
    return c / (2 * b) * (exp(b * (invariants(l)[0] - 3)) - 1)


def eight_chains(l, mu, N):
    def at(i1):
        x = sqrt(i1 / (3 * N))
        b = langevin_inverse(x)
        return mu * N * (x * b + log(b / sinh(b)))

    return at(invariants(l)[0]) - at(mpf(3))


def eight_chain_series(l, mu, N):
    i1 = invariants(l)[0]
    terms = [mpf(1) / 2, mpf(1) / 20, mpf(11) / 1050, mpf(19) / 7000, mpf(519) / 673750]
    return mu * sum(c / N**i * (i1 ** (i + 1) - 3 ** (i + 1)) for i, c in enumerate(terms))


def ogden(l, mu, alpha):
    return sum(m / a * (sum(x**a for x in l) - 3) for m, a in zip(mu, alpha))


def ogden_moduli(l, mu, alpha):
    return sum(2 * m / a**2 * (sum(x**a for x in l) - 3) for m, a in zip(mu, alpha))


def polynomial(l, **c):
    j1, j2 = (i - 3 for i in invariants(l))
    return sum(v * j1 ** int(k[1]) * j2 ** int(k[2]) for k, v in c.items())


def two_fibre(l, mu, k1, k2, beta):
    w = mu / 2 * (invariants(l)[0] - 3)
    for angle in (beta, -beta):
        fibre = (l[1] * cos(angle)) ** 2 + (l[2] * sin(angle)) ** 2
        if fibre > 1:
            w += k1 / (2 * k2) * (exp(k2 * (fibre - 1) ** 2) - 1)
    return w


LAWS = {
    "Gent": (gent, [dict(mu="0.4", Jm="97.2"), dict(mu="0.7", Jm="2.3")]),
    "Demiray": (demiray, [dict(c="0.4", b="8.35")]),
    "Arruda-Boyce": (eight_chains, [dict(mu="0.4", N="26.5"), dict(mu="0.7", N="1.3"), dict(mu="0.7", N="5")]),
    "Arruda-Boyce-series": (eight_chain_series, [dict(mu="0.4", N="26.5"), dict(mu="0.7", N="1.3")]),
    "Ogden": (ogden, [
        dict(mu=["6.3", "0.012", "-0.1"], alpha=["1.3", "5", "-2"]),
        dict(mu=["0.1", "-0.05"], alpha=["10", "-10"]),
        dict(mu=["2", "-0.2", "0.1"], alpha=["1", "2", "4"]),
    ]),
    "Ogden-moduli": (ogden_moduli, [dict(mu=["4.1", "0.03", "0.1"], alpha=["1.3", "5", "-2"])]),
    "Yeoh": (polynomial, [
        dict(c10="0.5", c20="-0.01", c30="0.001"),
        dict(c10="0.5", c20="-0.02", c30="0", c50="0.0001"),
    ]),
    "polynomial": (polynomial, [
        dict(c10="0.3", c01="0.2", c11="0.05", c02="0.01"),
        dict(c10="0.5", c20="-0.02", c30="0.001", c01="0.1"),
    ]),
    "two-fibre": (two_fibre, [
        dict(mu="0.4", k1="0.5", k2="0.8", beta="0.5"),
        dict(mu="0.3", k1="2.3", k2="0.7", beta="-1.08"),
    ]),
}

STATES = [
    ("1e-9", "0"), ("0", "-1e-9"), ("3e-8", "2e-8"), ("1e-6", "-4e-7"), ("-2e-5", "1e-5"), ("1e-3", "3e-4"),
    ("0.01", "0"), ("-0.05", "0.02"), ("0.3", "0.1"), ("0.2", "-0.2"), ("0.9", "0"), ("1.1", "0.3"),
    ("-0.7", "-0.2"), ("1.4", "-0.5"), ("0.001", "0.6"), ("2.5", "0.2"), ("-2.2", "0.4"), ("3.1", "-0.3"),
]


def numbers(value):
    return [real(v) for v in value] if isinstance(value, list) else real(value)


def text(value):
    return " ".join(value) if isinstance(value, list) else value


def state(law, constants, d, e):
    d, e = real(d), real(e)
    logs = [-(d + e) / 2, (d - e) / 2, e]
    given = {k: numbers(v) for k, v in constants.items()}

    def w(logs):
        return law([exp(x) for x in logs], **given)

    # the step stays on one side of a kink: it is 1e-20 of the smallest strain
    stress = []
    for i in range(3):
        up, down = list(logs), list(logs)
        up[i] += STEP
        down[i] -= STEP
        stress.append((w(up) - w(down)) / (2 * STEP))
    tr, tt, tz = stress
    return tt - tr, tz - tr, 2 * tz - tt - tr, w(logs)


def reachable(name, constants, d, e):
    d, e = real(d), real(e)
    i1 = sum(exp(2 * x) for x in (-(d + e) / 2, (d - e) / 2, e))
    if name == "Gent":
        return i1 - 3 < real(constants["Jm"]) * mpf("0.999")
    if name == "Arruda-Boyce":
        return i1 < 3 * real(constants["N"]) * mpf("0.999")
    if name == "Demiray":
        return real(constants["b"]) * (i1 - 3) < 100
    if name == "two-fibre":
        return i1 < 9
    return True


print("law,constants,d,e,hoop,axial,reduced,energy")
for name, (law, sets) in LAWS.items():
    for constants in sets:
        typed = "; ".join(f"{k} {text(v)}" for k, v in constants.items())
        for d, e in STATES:
            if not reachable(name, constants, d, e):
                continue
            values = state(law, constants, d, e)
            print(",".join([name, typed, d, e] + [mp.nstr(v, 22, min_fixed=1, max_fixed=0) for v in values]))
