"""The curves of a cut head, each with the name of the edge it belongs to."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.outline.cut import Cut
from membrane.records.outline import Curve

# Where along a curve its points are compared, as shares of its parameter range.
_SHARES = np.array([0.17, 0.5, 0.79])
_NEAR = 1e-6


def curves(kernel: Kernel, cut: Cut, edges: Mapping[str, tuple[int, ...]]) -> tuple[Curve, ...]:
    """Name every curve that bounds a remaining face: edges first, in their order.

    edges : name of an outline edge -> loose copies of its curves

    A curve between a remaining face and a hole bears the hole's name; a curve at one
    remaining face and nothing else, the name of the outline edge that it lies on. The
    kernel's own record of what became of a curve is not reliable after a cut.
    """
    found = []
    for tag in sorted({tag for face in cut.patches for tag in kernel.border(face)}):
        found.append(Curve(tag, _edge(kernel, cut, edges, tag), kernel.length(tag)))
    order = {name: k for k, name in enumerate([*edges, *dict.fromkeys(cut.holes.values())])}
    _check_all(order, {curve.edge for curve in found})
    return tuple(sorted(found, key=lambda c: (order.get(c.edge or "", len(order)), c.tag)))


def _edge(kernel: Kernel, cut: Cut, edges: Mapping[str, tuple[int, ...]], tag: int) -> str | None:
    faces = kernel.neighbours(tag)
    if sum(face in cut.patches for face in faces) == 2:
        return None
    for face in faces:
        if face in cut.holes:
            return cut.holes[face]
    return _nearest(kernel, edges, tag)


def _nearest(kernel: Kernel, edges: Mapping[str, tuple[int, ...]], tag: int) -> str:
    first, last = kernel.bounds(tag)
    points = kernel.evaluate(tag, first + _SHARES * (last - first))
    distances = {
        name: min(kernel.distance(points, copy) for copy in copies)
        for name, copies in edges.items()
    }
    name = min(distances, key=lambda name: distances[name])
    if distances[name] > _NEAR * kernel.length(tag):
        raise OutlineError(
            "A part of the outline's boundary has no name; "
            "the geometry script must name all of its edges."
        )
    return name


def _check_all(names: Mapping[str, int], found: set[str | None]) -> None:
    for name in names:
        if name not in found:
            raise OutlineError(
                f"Nothing is left of the edge {name}; move or leave out what cuts it away."
            )
