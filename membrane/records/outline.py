"""The outline: named regions and edges, cut into each other exactly."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

from membrane.records.arrays import Floats

HEAD = "head"


@dataclass(frozen=True)
class Drawing:
    """What a geometry script hands back.

    surface : the pygmsh surface that the shape covers
    edges : edge name -> the pygmsh curves that make it; a name with no curves
        (an empty sequence) takes the whole boundary
    notes : sentences for the user on how the shape was come by
    """

    surface: Any
    edges: Mapping[str, Sequence[Any]] = field(default_factory=dict)
    notes: tuple[str, ...] = ()


@dataclass(frozen=True)
class Region:
    """A part of the head under the same patches.

    name : "head", or the patches from the lowest to the topmost joined by "+"
    patches : names of the patches that cover it, lowest first
    faces : tags of the kernel's surfaces
    area : square metres
    """

    name: str
    patches: tuple[str, ...]
    faces: tuple[int, ...]
    area: float


@dataclass(frozen=True)
class Curve:
    """A kernel curve that the mesh follows.

    tag : the kernel's own
    edge : name of the edge it belongs to, None for the border of a patch
    length : metres
    """

    tag: int
    edge: str | None
    length: float


@dataclass(frozen=True)
class Samples:
    """Points spread over a region or along an edge.

    points : (2, n), metres
    weights : (n,), their shares of the area or the length, 1 together
    """

    points: Floats
    weights: Floats


@dataclass(frozen=True)
class Outline:
    """The cut outline as it stands in the open kernel session.

    notes : sentences for the user on how its shapes were come by
    samples : name of a region or an edge -> its samples; empty where no coefficient can vary
    """

    regions: tuple[Region, ...]
    curves: tuple[Curve, ...]
    notes: tuple[str, ...] = ()
    samples: Mapping[str, Samples] = field(default_factory=dict)

    @property
    def area(self) -> float:
        """Of all regions, square metres."""
        return sum(region.area for region in self.regions)

    @property
    def edges(self) -> tuple[str, ...]:
        """Names of the edges, in the order in which they were drawn."""
        return tuple(dict.fromkeys(c.edge for c in self.curves if c.edge is not None))

    def edge_length(self, name: str) -> float:
        """Length of all curves of that edge, metres."""
        return sum(curve.length for curve in self.curves if curve.edge == name)
