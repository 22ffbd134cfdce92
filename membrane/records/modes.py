"""The modes: eigenpairs on their curved mesh, to be evaluated anywhere on the head."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from membrane.records.arrays import Floats, Ints
from membrane.records.pencil import Space


@dataclass(frozen=True)
class Modes:
    """Mass-normalised modes in rising order, with repeatable signs.

    eigenvalues : (n,), (rad/s)^2; a rigid mode is exactly 0
    vectors : (n_dofs, n), kg^(-1/2), held dofs included
    clusters : (n,), a number shared by equal eigenvalues, from 1
    complete : True only if an inertia count proved that none is missing
    """

    space: Space
    eigenvalues: Floats
    vectors: Floats
    clusters: Ints
    complete: bool

    @property
    def frequencies(self) -> Floats:
        """(n,), Hz."""
        return np.sqrt(np.maximum(self.eigenvalues, 0.0)) / (2.0 * np.pi)

    def at(self, points: ArrayLike) -> Floats:
        """Displacement of every mode at ``points`` (2, m) metres: (n, m).

        NaN where a point is not on the head.
        """
        from membrane.evaluate import values_at

        return values_at(self.space, self.vectors, np.asarray(points, dtype=float))

    def gradients_at(self, points: ArrayLike) -> Floats:
        """Slope of every mode at ``points`` (2, m) metres: (2, n, m), per metre."""
        from membrane.evaluate import gradients_at

        return gradients_at(self.space, self.vectors, np.asarray(points, dtype=float))
