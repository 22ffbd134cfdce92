"""The study: what the user asked for, validated, frozen and in SI units."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from enum import StrEnum
from typing import Any

import numpy as np

from membrane.records.arrays import Floats
from membrane.records.function import Amount, Function
from membrane.records.sweep import Sweep


class Support(StrEnum):
    """How an edge is held."""

    FIXED = "fixed"
    FREE = "free"
    ELASTIC = "elastic"


@dataclass(frozen=True)
class Shape:
    """A geometry plugin, its own parameters, and where the shape is put.

    plugin : registered name, or the path of a geometry script
    options : the plugin's frozen ``Options``
    at : (x, y), metres; the shape's own origin is moved there
    rotate : radians, counter-clockwise about the shape's own origin
    """

    plugin: str
    options: Any
    at: tuple[float, float] = (0.0, 0.0)
    rotate: float = 0.0


@dataclass(frozen=True)
class TensionPart:
    """One number of a tension and the unit tensor that it scales.

    key : the number's own key under ``tension`` ("" for a plain number)
    magnitude : N/m, over the head or the patch
    direction : (2, 2) symmetric, dimensionless
    """

    key: str
    magnitude: Amount
    direction: Floats


@dataclass(frozen=True)
class Tension:
    """A tension tensor, T = sum of magnitude x direction, N/m."""

    parts: tuple[TensionPart, ...]

    @classmethod
    def uniform(cls, tension: Amount) -> Tension:
        """The same tension in all directions, N/m."""
        return cls((TensionPart("", tension, np.eye(2)),))

    @classmethod
    def woven(cls, along: Amount, across: Amount, angle: float) -> Tension:
        """A woven head: ``along`` at ``angle`` (rad) from +x, ``across`` square to it."""
        warp = np.array([np.cos(angle), np.sin(angle)])
        weft = np.array([-np.sin(angle), np.cos(angle)])
        return cls(
            (
                TensionPart("along", along, np.outer(warp, warp)),
                TensionPart("across", across, np.outer(weft, weft)),
            )
        )

    @classmethod
    def full(cls, xx: Amount, xy: Amount, yy: Amount) -> Tension:
        """The tensor's own components, N/m."""
        return cls(
            (
                TensionPart("xx", xx, np.diag([1.0, 0.0])),
                TensionPart("xy", xy, np.array([[0.0, 1.0], [1.0, 0.0]])),
                TensionPart("yy", yy, np.diag([0.0, 1.0])),
            )
        )

    def tensor(self) -> Floats:
        """The (2, 2) tension tensor, N/m, without the parts that vary over the head."""
        pairs = ((part.magnitude, part.direction) for part in self.parts)
        constant = (n * direction for n, direction in pairs if not isinstance(n, Function))
        return np.asarray(sum(constant, np.zeros((2, 2))), dtype=float)


@dataclass(frozen=True)
class Patch:
    """A shape on the head with properties of its own; it becomes a region.

    ``areal_density`` (kg/m^2), ``tension`` and ``bedding`` (N/m^3) replace what lies
    below; ``added_density`` (kg/m^2) adds to it. A later patch lies over an earlier one.
    """

    name: str
    shape: Shape
    areal_density: Amount | None = None
    added_density: Amount | None = None
    tension: Tension | None = None
    bedding: Amount | None = None


@dataclass(frozen=True)
class Edge:
    """A named edge: its support, stiffness (N/m^2) and mass (kg/m)."""

    support: Support = Support.FIXED
    stiffness: Amount = 0.0
    mass: Amount = 0.0


@dataclass(frozen=True)
class Hole:
    """A shape cut out of the head; the new edge bears its name."""

    name: str
    shape: Shape


@dataclass(frozen=True)
class LineLoad:
    """A wire, a hoop or a seam: mass (kg/m) and stiffness (N/m^2) along a curve.

    line : an open shape, or a closed one whose whole border is meant
    """

    name: str
    line: Shape
    density: Amount = 0.0
    stiffness: Amount = 0.0


@dataclass(frozen=True)
class Slit:
    """A cut along an open line; what lies off the head cuts nothing.

    Its lips are the edges NAME.left and NAME.right, seen along the line.
    """

    name: str
    line: Shape

    @property
    def lips(self) -> tuple[str, str]:
        """Names of the edges to the left and to the right of the cut."""
        return f"{self.name}.left", f"{self.name}.right"


class Along(StrEnum):
    """How a place on an edge is given."""

    ANGLE = "angle"  # radians about the shape's own origin, from its own x axis
    LENGTH = "length"  # metres from the edge's first point, the way it is drawn
    CURVES = "curves"  # whole curves of the edge, counted from 1


@dataclass(frozen=True)
class EdgePart:
    """A stretch of an edge that is an edge of its own.

    start, stop : where it begins and ends; it runs the way that angle or length grows
    repeat : how many equally spaced stretches bear the name
    """

    name: str
    edge: str
    along: Along
    start: float
    stop: float
    repeat: int = 1


@dataclass(frozen=True)
class Head:
    """The head itself: areal density (kg/m^2), tension (N/m), bedding (N/m^3)."""

    areal_density: Amount
    tension: Tension
    bedding: Amount = 0.0


@dataclass(frozen=True)
class ModesWanted:
    """Which modes, how exactly, and how they are named.

    count : how many modes; ignored where ``up_to`` is given
    up_to : Hz; every mode up to this frequency
    accuracy : cents, from the low to the high end of a bracket
    bracket : whether guaranteed brackets are wanted; else they are estimates
    degree : of the finite elements; None lets the accuracy choose
    eigensolver : registered plugin name
    ratio_to : number of the mode that has ratio 1; None takes the first above 0 Hz
    reference_pitch : Hz of the note A4
    """

    count: int = 20
    up_to: float | None = None
    accuracy: float = 0.01
    bracket: bool = True
    degree: int | None = None
    eigensolver: str = "shift_invert"
    ratio_to: int | None = None
    reference_pitch: float = 440.0


@dataclass(frozen=True)
class ProductsWanted:
    """Names of the products to write, and the frozen options of each."""

    write: tuple[str, ...] = ("table", "vtu")
    options: Mapping[str, Any] = field(default_factory=dict)


@dataclass(frozen=True)
class Study:
    """A whole study. ``edges`` holds those of holes, slits and edge parts too.

    terms : frozen options of each further physical term, by plugin name
    source : the same study as plain data in the study file's own keys, SI numbers
    sweep : which of its numbers take further values
    """

    title: str
    outline: Shape
    head: Head
    patches: tuple[Patch, ...] = ()
    holes: tuple[Hole, ...] = ()
    line_loads: tuple[LineLoad, ...] = ()
    slits: tuple[Slit, ...] = ()
    edge_parts: tuple[EdgePart, ...] = ()
    edges: Mapping[str, Edge] = field(default_factory=dict)
    modes: ModesWanted = ModesWanted()
    products: ProductsWanted = ProductsWanted()
    terms: Mapping[str, Any] = field(default_factory=dict)
    source: Mapping[str, Any] = field(default_factory=dict)
    sweep: Sweep | None = None

    @property
    def functions(self) -> tuple[Function, ...]:
        """Every coefficient that varies over the head, about the outline's own origin."""
        layers: tuple[Head | Patch, ...] = (self.head, *self.patches)
        tensions = (layer.tension.parts for layer in layers if layer.tension is not None)
        amounts = (
            *(part.magnitude for parts in tensions for part in parts),
            *(layer.areal_density for layer in layers),
            *(layer.bedding for layer in layers),
            *(patch.added_density for patch in self.patches),
            *(edge.stiffness for edge in self.edges.values()),
            *(edge.mass for edge in self.edges.values()),
            *(load.density for load in self.line_loads),
            *(load.stiffness for load in self.line_loads),
        )
        found = (amount for amount in amounts if isinstance(amount, Function))
        return tuple(function.moved(self.outline.at) for function in found)

    def edge(self, name: str) -> Edge:
        """The edge of that name; an edge not mentioned is fixed."""
        return self.edges.get(name, Edge())
