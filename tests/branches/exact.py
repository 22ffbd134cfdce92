"""Exact eigenvalues, by name of mode, of heads that are swept."""

from __future__ import annotations

from typing import Any

import numpy as np
from scipy.interpolate import CubicSpline
from scipy.special import jv, jvp, yv, yvp

ORDERS = np.arange(12)
GRID, RUNGE_KUTTA = 400, 120
TERMS = 18


def named_roots(x: Any, rows: Any) -> dict[tuple[int, int], float]:
    """(row number, which root from 1) -> a root of smooth functions, sampled finely at x."""
    found = [CubicSpline(x, row).roots(extrapolate=False) for row in rows]
    return {(m, n): float(v) for m, row in enumerate(found) for n, v in enumerate(row, 1)}


def ellipse(aspect: float, most: float) -> dict[tuple[Any, ...], float]:
    """Fixed ellipse of half-axes sqrt(aspect) and 1/sqrt(aspect): (parity, m, n) -> lambda < most.

    lambda = 4 q / c^2 with half the focal distance c, where the radial Mathieu function of
    the characteristic value a_m(q) or b_m(q) is zero at the rim (DLMF 28.20).
    """
    a, b = np.sqrt(aspect), 1 / np.sqrt(aspect)
    c, rim = np.sqrt(a * a - b * b), np.arctanh(b / a)
    q = np.linspace(1e-9, most * c * c / 4, GRID)
    found = {}
    for parity in ("even", "odd"):
        rows = radial(parity, q, rim)
        first = int(parity == "odd")
        names = named_roots(q, rows / np.abs(rows).max(axis=1, keepdims=True))
        found.update({(parity, m + first, n): 4 * v / c**2 for (m, n), v in names.items()})
    return found


def characteristic(parity: str, m: int, q: Any) -> Any:
    """a_m(q) or b_m(q), as eigenvalues of the Fourier coefficients' recurrence (DLMF 28.4)."""
    first = m % 2 if m % 2 or parity == "even" else 2
    matrix = np.zeros((len(q), TERMS, TERMS))
    k = np.arange(TERMS)
    matrix[:, k, k] = (first + 2.0 * k) ** 2
    matrix[:, k[:-1], k[1:]] = matrix[:, k[1:], k[:-1]] = q[:, None]
    if first == 1:
        matrix[:, 0, 0] += q if parity == "even" else -q
    if first == 0:
        matrix[:, 0, 1] = matrix[:, 1, 0] = np.sqrt(2.0) * q
    return np.linalg.eigvalsh(matrix)[:, (m - first) // 2]


def radial(parity: str, q: Any, rim: float) -> Any:
    """y(rim) of y'' = (a - 2 q cosh 2 xi) y from the foci's line, a row for each order.

    By Runge and Kutta's rule of the fourth order.
    """
    orders = ORDERS + int(parity == "odd")
    a = np.array([characteristic(parity, int(m), q) for m in orders])
    y = np.stack([np.ones_like(a), np.zeros_like(a)])[:: 1 if parity == "even" else -1]
    h = rim / RUNGE_KUTTA

    def slope(xi: float, y: Any) -> Any:
        return np.stack([y[1], (a - 2 * q * np.cosh(2 * xi)) * y[0]])

    for i in range(RUNGE_KUTTA):
        one = slope(i * h, y)
        two = slope((i + 0.5) * h, y + h / 2 * one)
        three = slope((i + 0.5) * h, y + h / 2 * two)
        four = slope((i + 1) * h, y + h * three)
        y = y + h / 6 * (one + 2 * two + 2 * three + four)
    return y[0]


def heavy_centre(density: float, radius: float, most: float) -> dict[tuple[Any, ...], float]:
    """Fixed unit disc, density 1 and ``density`` within ``radius``: (m, n) -> lambda < most.

    J_m within; a mix of J_m and Y_m that vanishes at the rim outside; value and slope meet.
    """
    d, m = np.sqrt(density), ORDERS[:, None]
    k = np.linspace(0.5, np.sqrt(most), GRID)
    u = jv(m, k * radius) * yv(m, k) - yv(m, k * radius) * jv(m, k)
    slope = jvp(m, k * radius) * yv(m, k) - yvp(m, k * radius) * jv(m, k)
    inner = jv(m, d * k * radius)
    rows = slope * inner - d * jvp(m, d * k * radius) * u
    return {name: v * v for name, v in named_roots(k, rows).items()}
