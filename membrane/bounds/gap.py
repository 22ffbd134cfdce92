"""Where the bracketed modes end: at the widest gap of the spectrum, proven by the count."""

from __future__ import annotations

import numpy as np

from membrane.bounds.crouzeix_raviart import crouzeix_raviart, longest_along
from membrane.bounds.head import Head
from membrane.bounds.leaves import leaves
from membrane.errors import BracketError
from membrane.records.arrays import Floats

SPARE = 13
"""How many modes beyond the wanted ones the gap is looked for among."""

PLACES = (0.8, 0.6, 0.4)
"""Where in the gap the limit is tried, as shares of it: the higher, the sharper the bounds."""

STEP = 3.0
"""Longest side of the first leaves by the wave length's 2 pi-th part, at a gap of 1."""

FINER = 0.7
"""Ratio of the leaves' sides from one try to the next."""

TRIES = 6
"""How often: the last one's leaves lose a hundredth of the gap, where no side is bent."""

ROUNDING = 1e-9
"""By how much more than the limit is counted to, relative, for the rounding of the count."""

MOST = 300_000
"""Leaves beyond which the count is given up: it would take longer than all the rest."""


def widest_gap(values: Floats, count: int) -> int:
    """How many of the rising ``values``, at least ``count``, lie below their widest gap.

    Raises BracketError where nothing is known beyond the wanted ones.
    """
    if len(values) <= count:
        raise BracketError("the mesh carries no modes beyond the wanted ones")
    gaps = 1 - values[count - 1 : -1] / values[count:]
    return count + int(np.argmax(gaps))


def proven_limit(head: Head, highest: float, following: float, count: int) -> float:
    """A limit between two eigenvalues with proof that at most ``count`` lie at or below it.

    highest : upper bound on the eigenvalue number ``count``
    following : about the next one
    Raises BracketError where the count does not close.
    """
    gap = 1 - highest / following
    step = STEP * np.sqrt(max(gap, 1e-6) / following)
    for _ in range(TRIES):
        leaf = leaves(head, step, longest_along(head, following, step), MOST)
        if leaf is None:
            break
        discrete = crouzeix_raviart(head, leaf)
        for place in PLACES:
            limit = highest + place * (following - highest)
            if discrete.count(limit * (1 + ROUNDING)) == count:
                return limit
        step *= FINER
    raise BracketError("the count of modes does not close")
