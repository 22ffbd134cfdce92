"""Jacobi polynomials and Gauss's points for their weights.

In place of scipy.special, which takes longer to load than a small head to solve.
"""

from __future__ import annotations

from functools import cache
from math import factorial

import numpy as np

from membrane.records.arrays import Floats


def jacobi(degree: int, alpha: int, beta: int, x: Floats) -> tuple[Floats, Floats]:
    """P_n^(alpha, beta)(x) for n up to a degree, and their slopes; each (degree + 1, ...).

    By the three-term recurrence, DLMF 18.9.2.
    """
    values, slopes = (np.zeros((degree + 1, *x.shape)) for _ in range(2))
    values[0] = 1.0
    if degree > 0:
        values[1] = (alpha + 1) + (alpha + beta + 2) * (x - 1) / 2
        slopes[1] = (alpha + beta + 2) / 2
    for n in range(1, degree):
        c = 2 * n + alpha + beta
        common = 2 * (n + 1) * (n + alpha + beta + 1)
        rise = (c + 1) * (c + 2) / common
        line = rise * x + (alpha**2 - beta**2) * (c + 1) / (common * c)
        back = 2 * (n + alpha) * (n + beta) * (c + 2) / (common * c)
        values[n + 1] = line * values[n] - back * values[n - 1]
        slopes[n + 1] = rise * values[n] + line * slopes[n] - back * slopes[n - 1]
    return values, slopes


@cache
def gauss(count: int, alpha: int, beta: int) -> tuple[Floats, Floats]:
    """Points (count,) and weights of Gauss's rule on [-1, 1] for (1-x)^alpha (1+x)^beta.

    The points are the eigenvalues of the recurrence (G. H. Golub & J. H. Welsch, Math. Comp.
    23 (1969) 221, from memory), made exact by Newton's step. alpha + beta is at most 2.
    """
    n = np.arange(count)
    c = 2 * n + alpha + beta
    middle = np.divide(beta**2 - alpha**2, c * (c + 2), where=c > 0, out=np.zeros(count))
    n, c = n[1:], c[1:]
    squares = 4 * n * (n + alpha) * (n + beta) * (n + alpha + beta) / (c**2 * (c**2 - 1))
    side = np.sqrt(squares)
    points = np.linalg.eigvalsh(np.diag(middle) + np.diag(side, 1) + np.diag(side, -1))
    for _ in range(2):
        values, slopes = jacobi(count, alpha, beta, points)
        points = points - values[-1] / slopes[-1]
    _, slopes = jacobi(count, alpha, beta, points)
    weights = 1 / ((1 - points**2) * slopes[-1] ** 2)
    weights = weights * _mass(alpha, beta) / weights.sum()
    points.flags.writeable = weights.flags.writeable = False
    return points, weights


def _mass(alpha: int, beta: int) -> float:
    """The integral of the weight over [-1, 1]: 2^(a+b+1) a! b! / (a+b+1)!."""
    whole = alpha + beta + 1
    return 2.0**whole * factorial(alpha) * factorial(beta) / factorial(whole)
