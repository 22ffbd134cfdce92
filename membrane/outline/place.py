"""One shape drawn by its plugin and put in its place."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.plugins import load
from membrane.records.outline import Drawing
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
    drawing = _drawing(kernel, shape)
    face = _tag(drawing.surface, 2, shape.plugin)
    edges = {}
    for name, drawn in drawing.edges.items():
        curves = [_tag(curve, 1, shape.plugin) for curve in drawn] or kernel.border(face)
        edges[name] = tuple(kernel.copies(curves))
    loose = [curve for curves in edges.values() for curve in curves]
    kernel.place(face, loose, shape.rotate, shape.at)
    return Placed(face, edges, drawing.notes)


def _drawing(kernel: Kernel, shape: Shape) -> Drawing:
    """What the plugin draws, once it is known to be a drawing with the edges it promised."""
    module = load("outline", shape.plugin)
    try:
        drawing = module.build(kernel.geometry, shape.options)
    except Exception as failure:  # a plugin's code may raise anything at all
        raise OutlineError(
            f"The shape {shape.plugin} cannot be drawn ({type(failure).__name__}: {failure}); "
            "repair its build function or change its keys."
        ) from failure
    if not isinstance(drawing, Drawing):
        raise OutlineError(f"The shape {shape.plugin} must return a Drawing from build.")
    promised, drawn = tuple(module.edges(shape.options)), tuple(drawing.edges)
    if set(promised) != set(drawn):
        raise OutlineError(
            f"The shape {shape.plugin} draws the edges {', '.join(drawn)} but its function "
            f"edges names {', '.join(promised)}; make them agree."
        )
    return drawing


def _tag(drawn: Any, dim: int, plugin: str) -> int:
    """The kernel's tag of a pygmsh entity."""
    found, tag = getattr(drawn, "dim_tag", (None, 0))
    if found != dim:
        kind = "surface" if dim == 2 else "curve"
        raise OutlineError(f"The shape {plugin} hands back something that is not a {kind}.")
    return int(tag)
