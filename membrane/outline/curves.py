"""The curves of a cut head, each with the name of the edge it belongs to."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.outline.cut import Cut
from membrane.records.arrays import Floats
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
    copies = [_Copy(name, tag, *kernel.box(tag)) for name, tags in edges.items() for tag in tags]
    found = []
    for tag in sorted({tag for face in cut.patches for tag in kernel.border(face)}):
        found.append(Curve(tag, _edge(kernel, cut, copies, tag), kernel.length(tag)))
    order = {name: k for k, name in enumerate([*edges, *dict.fromkeys(cut.holes.values())])}
    _check_all(order, {curve.edge for curve in found})
    return tuple(sorted(found, key=lambda c: (order.get(c.edge or "", len(order)), c.tag)))


@dataclass(frozen=True)
class _Copy:
    """A named curve as it was before the cut, and the box around it."""

    edge: str
    tag: int
    low: Floats
    high: Floats

    def may_hold(self, points: Floats, slack: float) -> bool:
        low, high = self.low[:, None] - slack, self.high[:, None] + slack
        return bool(np.all((points >= low) & (points <= high)))


def _edge(kernel: Kernel, cut: Cut, copies: Sequence[_Copy], tag: int) -> str | None:
    faces = kernel.neighbours(tag)
    if sum(face in cut.patches for face in faces) == 2:
        return None
    for face in faces:
        if face in cut.holes:
            return cut.holes[face]
    return _nearest(kernel, copies, tag)


def _nearest(kernel: Kernel, copies: Sequence[_Copy], tag: int) -> str:
    first, last = kernel.bounds(tag)
    points = kernel.evaluate(tag, first + _SHARES * (last - first))
    slack = _NEAR * kernel.length(tag)
    near = [copy for copy in copies if copy.may_hold(points, slack)]
    distance, edge = min(
        ((kernel.distance(points, copy.tag), copy.edge) for copy in near), default=(np.inf, "")
    )
    if distance > slack:
        raise OutlineError(
            "A part of the outline's boundary has no name; "
            "the geometry script must name all of its edges."
        )
    return edge


def _check_all(names: Mapping[str, int], found: set[str | None]) -> None:
    for name in names:
        if name not in found:
            raise OutlineError(
                f"Nothing is left of the edge {name}; move or leave out what cuts it away."
            )
