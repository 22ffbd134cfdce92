"""The outline: named regions and edges, cut into each other exactly."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

from membrane.records.arrays import Floats

HEAD = "head"


@dataclass(frozen=True)
class Lips:
    """A pygmsh curve that cuts the surface, and the edges on its two sides.

    left, right : edge names, as seen from the curve's first point to its last
    """

    curve: Any
    left: str
    right: str


@dataclass(frozen=True)
class Drawing:
    """What a geometry script hands back.

    surface : the pygmsh surface that the shape covers, None for an open line
    edges : edge name -> the pygmsh curves that make it; a name with no curves
        (an empty sequence) takes the whole boundary
    notes : sentences for the user on how the shape was come by
    slits : curves within the surface that cut it
    """

    surface: Any
    edges: Mapping[str, Sequence[Any]] = field(default_factory=dict)
    notes: tuple[str, ...] = ()
    slits: Sequence[Lips] = ()

    @property
    def names(self) -> tuple[str, ...]:
        """Names of all its edges, the lips of its slits included."""
        return (*self.edges, *(lip for slit in self.slits for lip in (slit.left, slit.right)))


@dataclass(frozen=True)
class Region:
    """A part of the head under the same patches.

    name : "head", or the patches from the lowest to the topmost joined by "+"; where lines
        of breaks part it, every piece after the first has its number too, as in "head.2"
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
    edge : name of the edge it belongs to, None within the head
    length : metres
    lines : names of the line loads that run along it
    lips : of a slit, the names of the edges to its left and right along its parameter
    """

    tag: int
    edge: str | None
    length: float
    lines: tuple[str, ...] = ()
    lips: tuple[str, str] | None = None

    @property
    def edges(self) -> tuple[str, ...]:
        """Names of the edges that run along it: none, one, or the two lips of a slit."""
        return self.lips or (() if self.edge is None else (self.edge,))


@dataclass(frozen=True)
class Samples:
    """Points spread over a region or along an edge or a line load.

    points : (2, n), metres
    weights : (n,), their shares of the area or the length, 1 together
    """

    points: Floats
    weights: Floats


@dataclass(frozen=True)
class Outline:
    """The cut outline as it stands in the open kernel session.

    notes : sentences for the user on how its shapes were come by
    samples : name of a region, an edge or a line load -> its samples; empty where no
        coefficient can vary
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
        return tuple(dict.fromkeys(name for curve in self.curves for name in curve.edges))

    @property
    def lines(self) -> tuple[str, ...]:
        """Names of the line loads."""
        return tuple(dict.fromkeys(name for curve in self.curves for name in curve.lines))

    def edge_length(self, name: str) -> float:
        """Length of all curves of that edge, metres."""
        return sum(curve.length for curve in self.curves if name in curve.edges)

    def line_length(self, name: str) -> float:
        """Length of a line load, metres."""
        return sum(curve.length for curve in self.curves if name in curve.lines)
