"""The modes of a coarser space on the same mesh, from those of a finer one."""

from __future__ import annotations

from typing import Any

import numpy as np
from scipy.linalg import eigh

from membrane.cholesky import factorised
from membrane.modes.rigid import rigid_mode, rigid_shift
from membrane.records.arrays import Floats
from membrane.records.modes import Modes
from membrane.records.pencil import Pencil, Space
from membrane.triangle import nodes, shapes


def coarser_modes(pencil: Pencil, fine: Modes) -> Modes:
    """What ``fine`` becomes in the space of ``pencil``, by one step of inverse iteration.

    The values are best in the span of the vectors, and so never below the pencil's own
    eigenvalues; the step leaves of the distance only its square.
    Raises SolveError where the stiffness is not positive definite.
    """
    shift = rigid_shift(pencil) if pencil.moves_rigidly else 0.0
    start = transferred(fine.space, fine.vectors, pencil.space)[pencil.space.free]
    inverse = factorised(pencil.shifted(shift))
    vectors = inverse(pencil.M @ start)
    if pencil.moves_rigidly:
        vectors[:, 0] = rigid_mode(pencil)
    values, vectors = _best(pencil.K, pencil.M, vectors)
    if pencil.moves_rigidly:
        values[0] = 0.0
    whole = np.zeros((pencil.space.dofs, len(values)))
    whole[pencil.space.free] = vectors
    return Modes(pencil.space, values, whole, fine.clusters, complete=False)


def transferred(space: Space, vectors: Floats, other: Space) -> Floats:
    """(n_dofs, n) the functions ``vectors`` at the nodes of another space on the same mesh."""
    phi, _ = shapes(nodes(other.degree), space.degree)
    moved = np.empty((other.dofs, vectors.shape[1]))
    moved[other.element_dofs] = np.tensordot(phi.T, vectors[space.element_dofs], axes=1)
    return moved


def _best(K: Any, M: Any, vectors: Floats) -> tuple[Floats, Floats]:
    vectors = vectors / np.sqrt(np.einsum("ij,ij->j", vectors, M @ vectors))
    stiffness, mass = vectors.T @ (K @ vectors), vectors.T @ (M @ vectors)
    values, mix = eigh((stiffness + stiffness.T) / 2, (mass + mass.T) / 2)
    return values, vectors @ mix
