"""Repeatable signs, and repeatable shapes within a cluster."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Floats, Ints
from membrane.records.pencil import Pencil


def oriented(pencil: Pencil, vectors: Floats, clusters: Ints) -> Floats:
    """The same modes, (n_free, n), free of the solver's arbitrary signs and rotations.

    Within a cluster the shapes are those that are extreme in the energy weighted by
    exp(x), which is even in y: on a head symmetric about the x axis they come out
    symmetric and antisymmetric. The sign makes the mean weighted by exp(x + y/3) positive.
    """
    x, y = _unit_coordinates(pencil)
    chosen = vectors.copy()
    numbers, sizes = np.unique(clusters, return_counts=True)
    together = np.isin(clusters, numbers[sizes > 1])
    members = vectors[:, together]
    energy = members.T @ (pencil.M @ (np.exp(x)[:, None] * members))
    for number in numbers[sizes > 1]:
        these = np.nonzero(clusters[together] == number)[0]
        _, turn = np.linalg.eigh((energy + energy.T)[np.ix_(these, these)])
        chosen[:, clusters == number] = members[:, these] @ turn[:, ::-1]
    means = (pencil.M @ np.exp(x + y / 3)) @ chosen
    return np.asarray(chosen * np.where(means < 0.0, -1.0, 1.0))


def _unit_coordinates(pencil: Pencil) -> Floats:
    """(2, n_free), the dofs' places over the head's half width, about its middle."""
    places = pencil.space.locations[:, pencil.space.free]
    low, high = places.min(axis=1), places.max(axis=1)
    return np.asarray((places - (low + high)[:, None] / 2) / (np.max(high - low) / 2))
