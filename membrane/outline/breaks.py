"""Curves along the jumps and kinks of varying coefficients, for the mesh to follow."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from math import cos, hypot, sin

import numpy as np

from membrane import plugins
from membrane.kernel import Kernel
from membrane.outline.copies import Copy
from membrane.outline.place import place
from membrane.records.breaks import Break, Circle, Place
from membrane.records.function import Function
from membrane.records.study import Shape

BEYOND = 1.1
"""How far a straight line reaches, in distances to the farthest corner of the head's box."""


def break_curves(
    kernel: Kernel, functions: Iterable[Function], rim: Sequence[Copy]
) -> Iterator[int]:
    """The kernel's curves along all lines of breaks, each once; they may leave the head.

    rim : loose copies of the outline's edges
    """
    lines = dict.fromkeys((line, f.origin) for f in functions for line in f.breaks)
    for line, origin in lines:
        yield from place(kernel, _shape(line, origin, _reach(line, origin, rim))).border


def _shape(line: Break, origin: Place, reach: float) -> Shape:
    """The line as a shape of its own."""
    if isinstance(line, Circle):
        disc = plugins.load("outline", "disc").Options(2 * line.radius)
        return Shape("disc", disc, _sum(line.centre, origin))
    ahead = reach * cos(line.angle), reach * sin(line.angle)
    back = (0.0, 0.0) if line.begins else (-ahead[0], -ahead[1])
    points = plugins.load("outline", "polyline").Options((back, ahead))
    return Shape("polyline", points, _sum(line.start, origin))


def _reach(line: Break, origin: Place, rim: Sequence[Copy]) -> float:
    """Metres from where a straight line starts to beyond the whole head."""
    if isinstance(line, Circle):
        return 0.0
    low = np.min([copy.low for copy in rim], axis=0) - origin - line.start
    high = np.max([copy.high for copy in rim], axis=0) - origin - line.start
    return BEYOND * hypot(*np.maximum(np.abs(low), np.abs(high)))


def _sum(one: Place, other: Place) -> Place:
    return one[0] + other[0], one[1] + other[1]
