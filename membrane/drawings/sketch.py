"""What a reader takes from a file: curves with their names, before any are joined."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from membrane.drawings.pieces import Affine, Piece

WHOLE = ""
"""The group of strokes that the outline is sought in."""


@dataclass(frozen=True)
class Stroke:
    """One curve of a drawing.

    name : of its layer, its own or its boundary tag; "" where it has none
    layers : every name by which it can be chosen: its own and those of its groups
    """

    name: str
    piece: Piece
    layers: tuple[str, ...] = ()

    def mapped(self, affine: Affine) -> Stroke:
        """The same stroke elsewhere."""
        return Stroke(self.name, self.piece.mapped(affine), self.layers)


@dataclass(frozen=True)
class Sketch:
    """The curves of a file, in its own unit, y pointing up.

    groups : strokes to be joined with each other; WHOLE and, in a mesh, each region by name
    unit : metres of one drawing unit, None where the file does not say
    exact : ends that meet are the same numbers, so that no gap needs a tolerance
    notes : sentences on what was left out or changed
    """

    groups: Mapping[str, tuple[Stroke, ...]]
    unit: float | None = None
    exact: bool = False
    notes: tuple[str, ...] = ()
