"""How the numbers of a sweep enter the pencil: a fixed part and one part for each key."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np

from membrane.cholesky import negative_count
from membrane.errors import SolveError
from membrane.records.arrays import Floats
from membrane.records.pencil import Part, Pencil

FIXED = -1
"""Stands for the column of a part that no key of the sweep scales."""

NEARLY = 1e-9
"""Negative energy, over a matrix's mean diagonal, that is still rounding."""


@dataclass(frozen=True)
class Weights:
    """What each matrix of a sum is multiplied by at a point of the sweep.

    columns : for each matrix its column of the point, ``FIXED`` where the factor is 1
    """

    columns: tuple[int, ...]

    def at(self, point: Floats) -> Floats:
        """(n_matrices,) at a point (n_keys,)."""
        return np.array([1.0 if c == FIXED else point[c] for c in self.columns])


@dataclass(frozen=True)
class Affine:
    """K(p) = K_0 + sum of p_k K_k and M(p) = M_0 + sum of p_k M_k.

    keys : of the study, one for each number p_k of a point
    stiffness, mass : sparse matrices on the free dofs, as ``*_weights`` numbers them
    """

    pencil: Pencil
    keys: tuple[str, ...]
    stiffness: tuple[Any, ...]
    mass: tuple[Any, ...]
    stiffness_weights: Weights
    mass_weights: Weights

    def at(self, point: Floats) -> Pencil:
        """The full pencil at a point (n_keys,), SI."""
        return self.pencil.at(dict(zip(self.keys, map(float, point), strict=True)))

    @property
    def matrices(self) -> tuple[Any, ...]:
        """Those of the stiffness, then those of the mass."""
        return (*self.stiffness, *self.mass)


def affine(pencil: Pencil, keys: Sequence[str]) -> Affine:
    """The pencil sorted by the keys that a sweep moves.

    Raises SolveError for a key that scales no part, or one whose stiffness or mass can be
    negative, as that of a shear tension can: no reduced model has bounds for it.
    """
    shared = pencil.at({key: 1.0 for key in keys})
    stiffness, stiffness_weights = _sorted(shared.stiffness, keys)
    mass, mass_weights = _sorted(shared.mass, keys)
    whole = Affine(shared, tuple(keys), stiffness, mass, stiffness_weights, mass_weights)
    _check_positive(whole)
    return whole


def _sorted(parts: tuple[Part, ...], keys: Sequence[str]) -> tuple[tuple[Any, ...], Weights]:
    groups: dict[int, list[Part]] = {}
    for part in parts:
        column = keys.index(part.key) if part.key in keys else FIXED
        groups.setdefault(column, []).append(part)
    return tuple(map(_total, groups.values())), Weights(tuple(groups))


def _total(parts: list[Part]) -> Any:
    scaled = [part.scale * part.matrix for part in parts]
    return sum(scaled[1:], scaled[0]).tocsc()


def _check_positive(whole: Affine) -> None:
    columns = (*whole.stiffness_weights.columns, *whole.mass_weights.columns)
    for column, matrix in zip(columns, whole.matrices, strict=True):
        if column != FIXED and not _is_positive(matrix):
            raise SolveError(
                f"{whole.keys[column]} can take energy away, and a reduced model has no bound "
                "for that; sweep it with full solves."
            )


def _is_positive(matrix: Any) -> bool:
    """Whether a symmetric matrix is positive semidefinite, to rounding."""
    from scipy.sparse import eye_array

    diagonal = matrix.diagonal()
    if diagonal.min() < 0.0 or diagonal.max() == 0.0:
        return False
    small = NEARLY * diagonal.max()
    return negative_count(matrix + small * eye_array(len(diagonal), format="csc")) == 0
