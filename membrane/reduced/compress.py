"""Fewer shapes for the same modes: those that modes at points of the sweep are made of."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Floats
from membrane.reduced.basis import turned
from membrane.reduced.making import Making, guards, weighted, with_basis, worst_cents


def compressed(making: Making, points: Floats, margin: float) -> Making:
    """The model in the least number of principal shapes that keeps its estimates.

    margin : of the wanted accuracy, that the estimates at points (n, n_keys) stay within
    """
    turn = _principal(making, points)
    wanted = max(margin * making.model.accuracy, worst_cents(making, points).max())
    enough, too_few = turn.shape[1], making.model.count
    best = making
    while enough - too_few > 1:
        size = (enough + too_few) // 2
        tried = with_basis(making, turned(making.basis, turn[:, :size]))
        if worst_cents(tried, points).max() <= wanted:
            enough, best = size, tried
        else:
            too_few = size
    return best


def _principal(making: Making, points: Floats) -> Floats:
    """(N, N) combinations of the shapes, the most used first."""
    count = making.model.count
    modes = [making.model.modes_at(p, count + guards(count))[1] for p in points]
    used, _, _ = np.linalg.svd(np.hstack([weighted(making, m) for m in modes]))
    return np.asarray(used)
