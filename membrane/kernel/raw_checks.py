"""What a raw mesh must be: upright triangles that cover the outline and meet its curves."""

from __future__ import annotations

from typing import Protocol

import numpy as np

from membrane.errors import MeshError
from membrane.records.arrays import Floats
from membrane.records.outline import Outline
from membrane.records.raw_mesh import RawMesh

JOINED = 1e-9
"""How far a vertex may lie off its curve, as a share of the outline's size."""


class Curves(Protocol):
    """What is asked of the kernel: curves as functions of a parameter."""

    def evaluate(self, curve: int, parameters: Floats) -> Floats: ...


def check_raw(kernel: Curves, raw: RawMesh, outline: Outline) -> None:
    """Raise MeshError where a raw mesh is not sound."""
    if not np.all(raw.areas > 0.0):
        raise MeshError("gmsh made a triangle that is turned over or flat.")
    if not 0.5 < raw.areas.sum() / outline.area < 1.5:
        raise MeshError("The triangles do not cover the outline.")
    for curve in outline.curves:
        mine = raw.segment_curve == curve.tag
        exact = kernel.evaluate(curve.tag, raw.segment_parameters[:, mine])
        off = np.abs(exact - raw.vertices[:, raw.segments[:, mine].ravel()]).max()
        if off > JOINED * np.sqrt(outline.area):
            raise MeshError(f"Curves that should meet are {off:.1e} m apart.")
