"""Eigenvalues in one dimension by polynomials, written apart from the program itself."""

from __future__ import annotations

from collections.abc import Callable
from itertools import pairwise

import numpy as np
from numpy.polynomial import Legendre
from scipy.linalg import eigh

Coefficient = Callable[[np.ndarray], np.ndarray]


def string(p: Coefficient, q: Coefficient, w: Coefficient, panels=(0.0, 1.0), size=40):
    """Eigenvalues of -(p u')' + q u = lambda w u, u = 0 at both ends.

    panels : the ends, and between them the places where a coefficient has a kink
    Rayleigh-Ritz with integrated Legendre polynomials on each panel and hats between.
    """
    nodes, weights = np.polynomial.legendre.leggauss(2 * size)
    blocks = []
    for start, stop in pairwise(panels):
        half = 0.5 * (stop - start)
        x = start + half * (nodes + 1)
        inner = [Legendre.basis(k).integ(lbnd=-1) for k in range(1, size)]
        blocks.append((x, half * weights, inner, half))
    values, slopes, points, dx = [], [], [], []
    ends = np.asarray(panels)
    for b, (x, weight, inner, half) in enumerate(blocks):
        rows = np.zeros((len(blocks) * (size - 1) + len(blocks) - 1, x.size))
        slope = np.zeros_like(rows)
        for k, f in enumerate(inner):
            rows[b * (size - 1) + k] = f(nodes)
            slope[b * (size - 1) + k] = f.deriv()(nodes) / half
        for k in range(1, len(blocks)):
            hat = np.eye(len(ends))[k]
            rows[len(blocks) * (size - 1) + k - 1] = np.interp(x, ends, hat)
            slope[len(blocks) * (size - 1) + k - 1] = (hat[b + 1] - hat[b]) / (2 * half)
        values.append(rows)
        slopes.append(slope)
        points.append(x)
        dx.append(weight)
    u, du, x, dx = (np.concatenate(part, axis=-1) for part in (values, slopes, points, dx))
    K = (du * (p(x) * dx)) @ du.T + (u * (q(x) * dx)) @ u.T
    M = (u * (w(x) * dx)) @ u.T
    return _lowest(K, M)


def disc(tension: Coefficient, density: Coefficient, count: int, size=36):
    """The ``count`` lowest eigenvalues of the fixed unit disc whose T and rho depend on r.

    For each m, -(r T u')'/r + m^2 T u/r^2 = lambda rho u by Rayleigh-Ritz with
    u = r^m (1 - r) P_k(2r - 1); every m > 0 counts twice.
    """
    nodes, weights = np.polynomial.legendre.leggauss(3 * size)
    r, dr = (nodes + 1) / 2, weights / 2
    T, rho = tension(r), density(r)
    found = []
    for m in range(60):
        bases = [(Legendre([-0.5, 0.5]) * -1) * Legendre.basis(k) for k in range(size)]
        u = np.array([r**m * f(nodes) for f in bases])
        du = np.array(
            [m * r ** max(m - 1, 0) * f(nodes) + r**m * 2 * f.deriv()(nodes) for f in bases]
        )
        # well-conditioned after orthonormalising in the weight of the mass
        _, triangle = np.linalg.qr((u * np.sqrt(rho * r * dr)).T)
        u, du = np.linalg.solve(triangle.T, u), np.linalg.solve(triangle.T, du)
        K = (du * (T * r * dr)) @ du.T + (u * (m**2 * T / r * dr)) @ u.T
        lowest = _lowest(K, np.eye(size))
        found += list(lowest[:count]) * (1 if m == 0 else 2)
        if m > 0 and lowest[0] > np.sort(found)[min(count, len(found)) - 1]:
            break
    return np.sort(found)[:count]


def _lowest(K, M):
    return eigh((K + K.T) / 2, (M + M.T) / 2, eigvals_only=True)
