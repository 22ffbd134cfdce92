"""What a cut head must be: in one piece, and without slivers."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from itertools import combinations

import numpy as np

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.records.arrays import Floats
from membrane.records.outline import Curve

_SHARPEST = np.radians(1.0)
# How far along the shorter of two curves a sliver between them is looked for.
_SHARE = 0.05


def check_whole(kernel: Kernel, curves: Iterable[Curve], faces: Iterable[int]) -> None:
    """Raise OutlineError where the faces do not hang together along their curves."""
    piece = {face: {face} for face in faces}
    for curve in (curve for curve in curves if not curve.lips):
        beside = [face for face in kernel.neighbours(curve.tag) if face in piece]
        merged = set().union(*(piece[face] for face in beside))
        piece.update({face: merged for face in merged})
    pieces = {frozenset(together) for together in piece.values()}
    if len(pieces) > 1:
        raise OutlineError(
            f"The holes and slits cut the head into {len(pieces)} pieces; "
            "make them smaller, or study each piece on its own."
        )


def check_slivers(kernel: Kernel, curves: Iterable[Curve], faces: Iterable[int]) -> None:
    """Raise OutlineError where two curves that meet close a sliver of the head."""
    inside = tuple(faces)
    meeting: dict[int, list[_Ray]] = {}
    for curve in curves:
        for end, point in enumerate(kernel.ends(curve.tag)):
            meeting.setdefault(point, []).append(_ray(kernel, curve, end))
    for rays in meeting.values():
        for one, other in combinations(rays, 2):
            if one.angle_to(other) < _SHARPEST and _between(kernel, one, other, inside):
                raise OutlineError(_sentence(one, other))


@dataclass(frozen=True)
class _Ray:
    """A curve as it leaves one of its ends (0 first, 1 last): point and unit direction."""

    curve: Curve
    end: int
    point: Floats
    direction: Floats

    def angle_to(self, other: _Ray) -> float:
        (ux, uy), (vx, vy) = self.direction, other.direction
        return float(abs(np.arctan2(ux * vy - uy * vx, ux * vx + uy * vy)))


def _ray(kernel: Kernel, curve: Curve, end: int) -> _Ray:
    at = np.array([kernel.bounds(curve.tag)[end]])
    tangent = kernel.tangent(curve.tag, at)[:, 0] * (1 - 2 * end)
    point = kernel.evaluate(curve.tag, at)[:, 0]
    return _Ray(curve, end, point, tangent / np.hypot(*tangent))


def _between(kernel: Kernel, one: _Ray, other: _Ray, faces: Sequence[int]) -> bool:
    """Whether the head lies between two curves beside their common end."""
    reach = _SHARE * min(one.curve.length, other.curve.length)
    middle = 0.5 * (_along(kernel, one, reach) + _along(kernel, other, reach))
    return any(kernel.is_inside(face, middle) for face in faces)


def _along(kernel: Kernel, ray: _Ray, reach: float) -> Floats:
    bounds = kernel.bounds(ray.curve.tag)
    start, far = bounds[ray.end], bounds[1 - ray.end]
    at = start + (far - start) * reach / ray.curve.length
    return kernel.evaluate(ray.curve.tag, np.array([at]))[:, 0]


def _called(curve: Curve) -> str:
    return next(iter((*curve.edges, *curve.lines)), "the border of a patch")


def _sentence(one: _Ray, other: _Ray) -> str:
    names = " and ".join(_called(ray.curve) for ray in (one, other))
    x, y = (round(1e3 * float(value), 6) + 0.0 for value in one.point)
    return (
        f"Near x = {x:g} mm, y = {y:g} mm a sliver is left between {names}; "
        "move the shapes apart or let them overlap."
    )
