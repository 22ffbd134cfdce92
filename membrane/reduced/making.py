"""A reduced model on its way: its basis, what measures it, and how it grows."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from scipy.linalg import eigh

from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.arrays import Floats
from membrane.reduced.affine import Affine
from membrane.reduced.basis import Basis, Reference, directions, grown
from membrane.reduced.model import MORE, ReducedModel

COARSE = 3.0
"""Length outside the basis, over the root of the wanted relative accuracy, from which a
direction is kept at first."""

FINER = 4.0
"""How many times better than the wanted accuracy a point becomes that is worked on."""

REFINED = 3.0
"""How many times shorter each next length is."""

BEST = 1e-5
"""Length below which a direction is rounding, and no more is gained."""

NEGLIGIBLE = 1e-7
"""Share of the wanted relative accuracy that a residual may lose to save work."""


@dataclass(frozen=True)
class Making:
    """The model so far, its basis and the full pencil."""

    whole: Affine
    reference: Reference
    basis: Basis
    model: ReducedModel


def guards(count: int) -> int:
    """Modes followed beyond the wanted ones, so that none of these is missed."""
    return MORE + 2 + count // 4


def with_basis(making: Making, basis: Basis) -> Making:
    """The model in another basis."""
    first = len(making.whole.stiffness)
    negligible = NEGLIGIBLE * making.model.accuracy / CENTS_PER_EIGENVALUE
    model = replace(
        making.model,
        stiffness=basis.matrices[:first],
        mass=basis.matrices[first:],
        residual=_factor(basis.gram, negligible),
    )
    return replace(making, basis=basis, model=model)


def with_directions(making: Making, new: Floats) -> Making:
    """The model with new directions (n_free, m), as ``directions`` finds them."""
    return with_basis(making, grown(making.basis, making.whole, making.reference, new))


def with_modes(making: Making, point: Floats, vectors: Floats) -> Making:
    """The model with a point's modes (n_free, n), as finely as the accuracy there needs.

    One fineness for all would stall: a point may fail for directions just below it.
    """
    new, lengths = directions(making.basis, making.reference, weighted(making, vectors))
    apart = COARSE * np.sqrt(making.model.accuracy / CENTS_PER_EIGENVALUE)
    while new.shape[1]:
        take = np.count_nonzero(lengths > apart)
        if take:
            making = with_directions(making, new[:, :take])
            new, lengths = new[:, take:], lengths[take:]
        if apart < BEST or worst_cents(making, point[None])[0] <= making.model.accuracy / FINER:
            break
        apart /= REFINED
    return making


def weighted(making: Making, vectors: Floats) -> Floats:
    """Modes beyond the wanted ones count less: they need no accuracy of their own."""
    weight = np.ones(vectors.shape[1])
    weight[making.model.count + MORE :] = np.sqrt(making.model.accuracy / CENTS_PER_EIGENVALUE)
    return np.asarray(vectors * weight)


def worst_cents(making: Making, points: Floats) -> Floats:
    """(n,) the widest estimate at each point."""
    return np.asarray(making.model.answers(points).cents.max(axis=1))


def _factor(gram: Floats, negligible: float) -> Floats:
    """L (Q, r, N) with |sum of a_q L_q y|^2 = the Gram matrix's product of the a_q y."""
    matrices, size = gram.shape[:2]
    scale = 1.0 / np.sqrt(np.einsum("qiqi->q", gram))[:, None]
    square = (gram * scale[:, :, None, None] * scale).reshape(matrices * size, -1)
    values, vectors = eigh((square + square.T) / 2)
    kept = values > negligible * values[-1]
    factor = (vectors[:, kept] * np.sqrt(values[kept])).T.reshape(-1, matrices, size)
    return np.ascontiguousarray(np.moveaxis(factor / scale, 0, 1))
