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

    face : its kernel surface, None for an open line
    edges : edge name -> loose copies of its curves, which later cuts leave whole
    slits : names of the left and the right lip -> a loose copy of the slit's curve
    notes : what the plugin has to say about the shape
    """

    shape: Shape
    face: int | None
    edges: Mapping[str, tuple[int, ...]]
    slits: Mapping[tuple[str, str], tuple[int, ...]]
    notes: tuple[str, ...] = ()

    @property
    def surface(self) -> int:
        """The face of a shape that is no open line."""
        if self.face is None:
            raise OutlineError(
                f"The shape {self.shape.plugin} encloses no area; "
                "use it for line loads and slits only."
            )
        return self.face

    @property
    def border(self) -> tuple[int, ...]:
        """The copies of all its edges, in their order."""
        return tuple(curve for curves in self.edges.values() for curve in curves)


def place(kernel: Kernel, shape: Shape) -> Placed:
    """Draw a shape, turn it about its own origin, and shift it."""
    drawing = _drawing(kernel, shape)
    face = None if drawing.surface is None else _tag(drawing.surface, 2, shape.plugin)
    edges, slits = {}, {}
    for name, drawn in drawing.edges.items():
        curves = [_tag(curve, 1, shape.plugin) for curve in drawn]
        if not curves and face is not None:
            curves = kernel.border(face)
        edges[name] = tuple(kernel.copies(curves))
    for lips in drawing.slits:
        curve = _tag(lips.curve, 1, shape.plugin)
        slits[lips.left, lips.right] = tuple(kernel.copies([curve]))
    loose = [curve for some in (edges, slits) for curves in some.values() for curve in curves]
    kernel.place(face, loose, shape.rotate, shape.at)
    return Placed(shape, face, edges, slits, drawing.notes)


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
    promised, drawn = tuple(module.edges(shape.options)), drawing.names
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
