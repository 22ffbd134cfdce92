"""Pieces: points of nodal lines that know their place, and the segments between them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from membrane.records.arrays import Floats, Ints


@dataclass(frozen=True)
class Pieces:
    """Unjoined parts of nodal lines.

    keys : (4, n), equal for one and the same point; the first is the mode
    triangle : (n,), a mesh triangle that each point lies in
    reference : (2, n), its coordinates there
    segments : (2, m), pairs of points joined by a line
    """

    keys: Ints
    triangle: Ints
    reference: Floats
    segments: Ints

    @property
    def mode(self) -> Ints:
        """(n,)"""
        mode: Ints = self.keys[0]
        return mode


def merged(parts: Sequence[Pieces]) -> Pieces:
    """All pieces as one, each point once: as the first that has it says."""
    keys = np.hstack([part.keys for part in parts])
    starts = np.cumsum([0, *(part.keys.shape[1] for part in parts[:-1])])
    segments = np.hstack([p.segments + at for p, at in zip(parts, starts, strict=True)])
    keys, first, numbers = np.unique(keys, axis=1, return_index=True, return_inverse=True)
    return Pieces(
        keys=keys,
        triangle=np.concatenate([part.triangle for part in parts])[first],
        reference=np.hstack([part.reference for part in parts])[:, first],
        segments=numbers.ravel()[segments],
    )
