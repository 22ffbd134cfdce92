"""One shape drawn by its plugin and put in its place."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.plugins import load
from membrane.records.study import Shape


@dataclass(frozen=True)
class Placed:
    """A drawn shape.

    face : its kernel surface
    edges : edge name -> loose copies of its curves, which later cuts leave whole
    notes : what the plugin has to say about the shape
    """

    face: int
    edges: Mapping[str, tuple[int, ...]]
    notes: tuple[str, ...] = ()


def place(kernel: Kernel, shape: Shape) -> Placed:
    """Draw a shape, turn it about its own origin, and shift it."""
    drawing = load("outline", shape.plugin).build(kernel.geometry, shape.options)
    face = _tag(drawing.surface, 2, shape.plugin)
    edges = {}
    for name, drawn in drawing.edges.items():
        curves = [_tag(curve, 1, shape.plugin) for curve in drawn] or kernel.border(face)
        edges[name] = tuple(kernel.copies(curves))
    loose = [curve for curves in edges.values() for curve in curves]
    kernel.place(face, loose, shape.rotate, shape.at)
    return Placed(face, edges, drawing.notes)


def _tag(drawn: Any, dim: int, plugin: str) -> int:
    """The kernel's tag of a pygmsh entity."""
    found, tag = getattr(drawn, "dim_tag", (None, 0))
    if found != dim:
        kind = "surface" if dim == 2 else "curve"
        raise OutlineError(f"The shape {plugin} hands back something that is not a {kind}.")
    return int(tag)
