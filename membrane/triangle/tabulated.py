"""The shapes at points that come up again, worked out once for all meshes and matrices."""

from __future__ import annotations

from functools import lru_cache

import numpy as np

from membrane.records.arrays import Floats
from membrane.triangle.shapes import shapes


def tabulated(points: Floats, degree: int) -> tuple[Floats, Floats]:
    """``shapes(points, degree)``, not to be written to; points (2, n)."""
    return _tabulated(points.tobytes(), degree)


@lru_cache(maxsize=32)
def _tabulated(points: bytes, degree: int) -> tuple[Floats, Floats]:
    tables = shapes(np.frombuffer(points).reshape(2, -1), degree)
    for table in tables:
        table.flags.writeable = False
    return tables
