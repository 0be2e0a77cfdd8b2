"""Stresses and tangents of the laws, as arrays over quadrature points: F[i][k], P[i][k], A[i][k][j][l] = dP_ik/dF_jl."""

import numpy as np

ONE = np.eye(3)


def outer(a, b):
    """a_ik b_jl."""
    return np.einsum("ik...,jl...->ikjl...", a, b)


def crossed(a):
    """a_il a_jk: minus the derivative of F^-T, where a = F^-T."""
    return np.einsum("il...,jk...->ikjl...", a, a)


def unit(like):
    """delta_ij delta_kl at every point."""
    return np.einsum("ij,kl->ikjl", ONE, ONE)[..., None, None] * np.ones(like.shape)


def det(F):
    return np.linalg.det(np.moveaxis(F, (0, 1), (-2, -1)))


def inverse_transposed(F):
    return np.moveaxis(np.swapaxes(np.linalg.inv(np.moveaxis(F, (0, 1), (-2, -1))), -1, -2), (-2, -1), (0, 1))


def cauchy(P, F):
    return np.einsum("ik...,jk...->ij...", P, F) / det(F)


class NeoHookean:
    """W = mu/2 (J^(-2/3) I1 - 3) + K/2 (J - 1)^2; mu and K may differ from element to element."""

    def __init__(self, mu, K):
        self.mu, self.K = mu, K

    def energy(self, F):
        J, I1 = det(F), np.sum(F * F, axis=(0, 1))
        return 0.5 * self.mu * (J ** (-2 / 3) * I1 - 3) + 0.5 * self.K * (J - 1) ** 2

    def stress(self, F):
        J, I1, G = det(F), np.sum(F * F, axis=(0, 1)), inverse_transposed(F)
        return self.mu * J ** (-2 / 3) * (F - I1 / 3 * G) + self.K * (J - 1) * J * G

    def tangent(self, F):
        J, I1, G = det(F), np.sum(F * F, axis=(0, 1)), inverse_transposed(F)
        mu = self.mu * J ** (-2 / 3)
        shear = unit(J) - 2 / 3 * (outer(G, F) + outer(F, G)) + I1 / 3 * (crossed(G) + 2 / 3 * outer(G, G))
        return mu * shear + self.K * J * ((2 * J - 1) * outer(G, G) - (J - 1) * crossed(G))


class CoupledNeoHookean:
    """W = mu/2 (I1 - 3 - 2 ln J) + lambda/2 (ln J)^2."""

    def __init__(self, mu, lam):
        self.mu, self.lam = mu, lam

    def energy(self, F):
        log = np.log(det(F))
        return 0.5 * self.mu * (np.sum(F * F, axis=(0, 1)) - 3 - 2 * log) + 0.5 * self.lam * log**2

    def stress(self, F):
        return self.mu * F + (self.lam * np.log(det(F)) - self.mu) * inverse_transposed(F)

    def tangent(self, F):
        J, G = det(F), inverse_transposed(F)
        return self.mu * unit(J) + self.lam * outer(G, G) + (self.mu - self.lam * np.log(J)) * crossed(G)


class Hooke:
    """sigma = lambda tr(e) 1 + 2 mu e of the small strain e; in plane stress with what makes szz = 0."""

    def __init__(self, E, nu, plane_stress=False):
        self.E, self.nu, self.plane_stress = E, nu, plane_stress
        self.mu = E / (2 * (1 + nu))
        self.lam = E * nu / (1 - nu**2) if plane_stress else E * nu / ((1 + nu) * (1 - 2 * nu))

    def tangent(self, like):
        I = np.einsum
        A = self.lam * I("ik,jl->ikjl", ONE, ONE) + self.mu * (I("ij,kl->ikjl", ONE, ONE) + I("il,jk->ikjl", ONE, ONE))
        return A[..., None, None] * np.ones(like.shape)

    def fields(self, H, free_strain=0.0):
        """Stress, 1 + tr(total strain) and energy of the elastic strain; `free_strain` is that of a heated piece."""
        e = 0.5 * (H + np.swapaxes(H, 0, 1))
        own = ONE[:, :, None, None] * free_strain
        elastic = e - own
        if self.plane_stress:
            elastic[2, 2] = -self.nu / (1 - self.nu) * (elastic[0, 0] + elastic[1, 1])
            lam = self.E * self.nu / ((1 + self.nu) * (1 - 2 * self.nu))
        else:
            lam = self.lam
        stress = lam * np.trace(elastic) * ONE[:, :, None, None] + 2 * self.mu * elastic
        if self.plane_stress:
            stress[2, 2] = 0.0
        return stress, 1 + np.trace(elastic + own), 0.5 * np.sum(stress * elastic, axis=(0, 1))
