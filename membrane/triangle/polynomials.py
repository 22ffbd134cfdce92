"""Orthonormal polynomials on the reference triangle (Dubiner 1991), with their slopes."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Floats
from membrane.triangle.jacobi import jacobi


def orthonormal(points: Floats, degree: int) -> tuple[Floats, Floats]:
    """All orthonormal polynomials up to a degree.

    M. Dubiner, J. Sci. Comput. 6 (1991) 345 (from memory): products of a Legendre polynomial,
    homogenised so that nothing divides by zero at the top vertex, and a Jacobi polynomial.

    points : (2, n) on the reference triangle
    returns : values (n_polynomials, n) and slopes (2, n_polynomials, n)
    """
    height = points[1]
    legendre, slopes = _homogenised_legendre(points, degree)
    values = np.empty(((degree + 1) * (degree + 2) // 2, height.size))
    gradients = np.empty((2, *values.shape))
    start = 0
    for i in range(degree + 1):
        j = np.arange(degree + 1 - i)
        these = slice(start, start + j.size)
        norm = np.sqrt((2 * i + 1) * (2 * i + 2 * j + 2))[:, None]
        factors, factor_slopes = jacobi(degree - i, 2 * i + 1, 0, 2 * height - 1)
        values[these] = norm * legendre[i] * factors
        gradients[:, these] = norm * slopes[i][:, None] * factors
        gradients[1, these] += 2 * norm * legendre[i] * factor_slopes
        start = these.stop
    return values, gradients


def _homogenised_legendre(points: Floats, degree: int) -> tuple[Floats, Floats]:
    """(1-y)^i P_i((2x + y - 1)/(1 - y)) by the three-term recurrence, with slopes."""
    x, y = points
    ones, zeros = np.ones_like(x), np.zeros_like(x)
    z, t2 = 2 * x + y - 1, (1 - y) ** 2
    z_slope = np.stack([2 * ones, ones])
    t2_slope = np.stack([zeros, -2 * (1 - y)])
    values, slopes = [ones, z], [np.stack([zeros, zeros]), z_slope]
    for i in range(1, degree):
        a, b = (2 * i + 1) / (i + 1), i / (i + 1)
        values.append(a * z * values[i] - b * t2 * values[i - 1])
        rise = a * (z_slope * values[i] + z * slopes[i])
        fall = b * (t2_slope * values[i - 1] + t2 * slopes[i - 1])
        slopes.append(rise - fall)
    return np.array(values[: degree + 1]), np.array(slopes[: degree + 1])
