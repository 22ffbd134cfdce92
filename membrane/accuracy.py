"""The error of a solve, estimated from a second one of a lower degree on the same mesh."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from membrane.pitch import CENTS_PER_EIGENVALUE, CENTS_PER_OCTAVE
from membrane.records.bracket import ESTIMATED, Bracket
from membrane.records.modes import Modes

ROUNDING = 1e-8
"""Cents below which an estimate says nothing: the rounding of graded meshes."""


def estimate(fine: Modes, coarse: Modes, reason: str) -> Bracket:
    """The two solves' distance, up and down, which is nearly all the coarser one's error.

    The finer solve is closer to the truth wherever the elements converge, so the estimate
    is pessimistic: by orders of magnitude for smooth modes, by a factor of one to three at
    corners, where only the mesh and not the degree helps.

    reason : why nothing better is known
    """
    known = coarse.frequencies[: len(fine.eigenvalues)]
    moving = fine.frequencies > 0.0
    cents = np.zeros(len(moving))
    apart = CENTS_PER_OCTAVE * np.log2(fine.frequencies[moving] / known[moving])
    cents[moving] = np.maximum(np.abs(apart), ROUNDING)
    spread = np.exp(cents / CENTS_PER_EIGENVALUE)
    return Bracket(fine.eigenvalues / spread, fine.eigenvalues * spread, ESTIMATED, reason)


def widened(known: Bracket, modes: Modes, others: Modes) -> Bracket:
    """Estimates for coefficients that break across triangles, from the modes on two meshes.

    There the error comes from the quadrature and is as good as random: every frequency may
    be off by twice the largest distance between the two meshes.
    """
    count = min(len(modes.frequencies), len(others.frequencies))
    one, other = modes.frequencies[:count], others.frequencies[:count]
    moving = (one > 0.0) & (other > 0.0)
    apart = CENTS_PER_OCTAVE * np.abs(np.log2(one[moving] / other[moving]))
    spread = np.exp(2.0 * apart.max(initial=0.0) / CENTS_PER_EIGENVALUE)
    return replace(known, low=known.low / spread, high=known.high * spread)
