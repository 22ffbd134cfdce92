"""A rectangle (0, a) x (0, b), three sides fixed, whose left side is partly fixed, partly free.

Derived here. In sines of y, a flux phi = u_x and a trace u along x = 0 are tied by
phi_n = -u_n gamma_n coth(gamma_n a), gamma_n^2 = (n pi/b)^2 - lambda. A flux that lives on
the fixed part 0 < y < c alone is a sum of T_{2k+1}(y/c)/(1 - (y/c)^2)^(1/2), and a trace
that lives on the free part 0 < y < c alone a sum of (1 - (y/c)^2)^(1/2) U_{2k+1}(y/c): odd
about y = 0, with the right singularity at c. Their sines are Bessel functions of n pi c/b
(DLMF 10.9.2 and 18.17). Eigenvalues are where the matrix that asks u = 0, or phi = 0, on
that same part is singular.
"""

from __future__ import annotations

from itertools import pairwise

import numpy as np
from scipy.optimize import brentq
from scipy.special import jv

BASIS = 14
SUMS = 2 ** np.arange(9, 15)


class MixedSide:
    """The half near y = 0 of the left side is of one kind, the other half of the other."""

    def __init__(self, width: float, height: float, near_origin: str) -> None:
        self.width = width
        self.kappa = np.pi / height * np.arange(1, SUMS[-1] + 1)
        self.fixed = near_origin == "fixed"
        orders = 2 * np.arange(BASIS)[:, None] + (1 if self.fixed else 2)
        self.sines = jv(orders, 0.5 * height * self.kappa)
        if not self.fixed:
            self.sines = self.sines / self.kappa

    def matrix(self, value: float) -> np.ndarray:
        """Symmetric; its sum over n, whose terms have period 4 up to powers of 1/n, is
        extrapolated by Richardson."""
        gamma = np.sqrt(self.kappa**2 - value + 0j)
        bend = gamma / np.tanh(gamma * self.width)
        weight = np.real(1 / bend if self.fixed else bend)
        terms = self.sines * weight
        table = [terms[:, :n] @ self.sines[:, :n].T for n in SUMS]
        for power in range(1, len(SUMS)):
            factor = 2.0**power
            table = [(factor * b - a) / (factor - 1) for a, b in pairwise(table)]
        return table[0]

    def eigenvalue(self, near: float, window: float = 1e-6) -> float:
        """The eigenvalue within a relative ``window``; ValueError where there is none."""

        def smallest(value: float) -> float:
            values = np.linalg.eigvalsh(self.matrix(value))
            return float(values[np.argmin(np.abs(values))])

        return float(brentq(smallest, near * (1 - window), near * (1 + window), xtol=1e-13))
