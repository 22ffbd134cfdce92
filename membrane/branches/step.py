"""One step along a path: which mode continues which."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from scipy.optimize import linear_sum_assignment

from membrane.branches.shapes import Shapes, overlaps, turned_onto
from membrane.records.arrays import Bools, Floats, Ints

CAUGHT = 0.8
"""Share of a mode that the new ones must hold together; else it has left them."""

PAIRED = 0.5
"""Share of a mode that its own continuation must hold."""


@dataclass(frozen=True)
class Step:
    """From some modes to those a little further on.

    shapes : the new modes, their clusters turned onto the old ones
    partner : (m_old,) the mode that continues each old one, -1 for none
    alike : (m_old,) squared cosines with it
    """

    shapes: Shapes
    partner: Ints
    alike: Floats

    @property
    def lost(self) -> Bools:
        """(m_old,)"""
        return np.asarray(self.partner < 0)


def step(old: Shapes, new: Shapes, same: float) -> Step:
    """The assignment that keeps most of the old modes.

    same : relative distance below which eigenvalues are one cluster
    A mode that the new ones do not hold is lost, and never paired with something else.
    """
    new = turned_onto(old, new, same)
    shares = overlaps(old, new) ** 2
    rows, columns = linear_sum_assignment(-shares)
    partner = np.full(len(shares), -1, dtype=np.int64)
    partner[rows] = columns
    alike = np.zeros(len(shares))
    alike[rows] = shares[rows, columns]
    partner[(shares.sum(axis=1) < CAUGHT) | (alike < PAIRED)] = -1
    return Step(new, partner, alike)
