"""Energies of the library's compressible laws as plain functions of the deformation gradient, and stresses by mp.diff.

The energy uses det F and the invariants of C = F^T F (Ogden: its eigenvalues); no stress formula is typed in anywhere.
"""

from mpmath import mp, matrix, log, eye

from case_values import number


def volumetric_energy(form, K, J):
    return K * {
        "quadratic": lambda: (J - 1) ** 2 / 2,
        "quadratic-log": lambda: (J**2 - 1 - 2 * log(J)) / 4,
        "log-squared": lambda: log(J) ** 2 / 2,
        "linear-log": lambda: J - 1 - log(J),
    }[form]()


def energy(law, constants, F):
    """W per reference volume. For linear-elastic F - 1 is the displacement gradient of small strain."""
    n = {k: [number(x) for x in v] if isinstance(v, list) else number(v) for k, v in constants.items() if k != "volumetric"}
    if law == "linear-elastic":
        return small_strain_energy(n["E"], n["nu"], F)
    J, C = mp.det(F), F.T * F
    I1 = C[0, 0] + C[1, 1] + C[2, 2]
    if law == "compressible-neo-Hookean":
        return n["mu"] / 2 * (I1 - 3 - 2 * log(J)) + n["lambda"] / 2 * log(J) ** 2
    ((form, bulk),) = constants["volumetric"].items()
    U = volumetric_energy(form, number(bulk["K"]), J)
    bar = C / mp.cbrt(J) ** 2
    i1 = bar[0, 0] + bar[1, 1] + bar[2, 2]
    if law == "neo-Hookean":
        return n["mu"] / 2 * (i1 - 3) + U
    if law == "Mooney-Rivlin":
        square = bar * bar
        i2 = (i1**2 - square[0, 0] - square[1, 1] - square[2, 2]) / 2
        return n["c10"] * (i1 - 3) + n["c01"] * (i2 - 3) + U
    if law == "Gent":
        return -n["mu"] * n["Jm"] / 2 * log(1 - (i1 - 3) / n["Jm"]) + U
    if law == "Ogden":
        squares = mp.eigsy(bar, eigvals_only=True)
        return sum(m / a * (sum(x ** (a / 2) for x in squares) - 3) for m, a in zip(n["mu"], n["alpha"])) + U
    raise ValueError(law)


def small_strain_energy(E, nu, F):
    H = F - eye(3)
    strain = (H + H.T) / 2
    trace = strain[0, 0] + strain[1, 1] + strain[2, 2]
    lam, mu = E * nu / ((1 + nu) * (1 - 2 * nu)), E / (2 * (1 + nu))
    return lam / 2 * trace**2 + mu * sum(x**2 for x in strain)


def nominal_stress(material, F):
    """P = dW/dF, entry by entry."""
    P = matrix(3, 3)
    for i in range(3):
        for j in range(3):

            def moved(x, i=i, j=j):
                G = F.copy()
                G[i, j] = x
                return energy(*material, G)

            P[i, j] = mp.diff(moved, F[i, j])
    return P


def cauchy_stress(material, F):
    P = nominal_stress(material, F)
    return P if material[0] == "linear-elastic" else P * F.T / mp.det(F)


def stress_rows(s):
    named = {"sxx": s[0, 0], "syy": s[1, 1], "szz": s[2, 2], "sxy": s[0, 1], "syz": s[1, 2], "szx": s[2, 0]}
    return named | {"p": -(s[0, 0] + s[1, 1] + s[2, 2]) / 3}
