"""Pieces as the kernel can take them: short arcs, and Béziers that never stand still."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise
from math import ceil, pi

import numpy as np

from membrane.drawings.pieces import Arc, Bezier, Line, Piece

_WIDEST = 2.0 * pi / 3.0
_WIDEST_OF_ELLIPSE = pi / 3.0
"""Radians; the kernel measures areas beside longer conics to no more than nine digits."""

_ROUND = 1e-12

_STANDS_STILL = 1e-9
"""How short a handle may be, as a share of the curve's size, to count as retracted."""

_HALVINGS = 9
"""How often at the most a Bézier is halved towards an end with a retracted handle."""

_WELL_ABOVE = 4.0


def parts(piece: Piece, tolerance: float) -> tuple[Piece, ...]:
    """The pieces that together are one piece, each open, and smooth by its own parameter.

    tolerance : ends that lie as close as this are one point
    """
    if isinstance(piece, Line):
        return (piece,)
    if isinstance(piece, Arc):
        widest = _WIDEST if piece.is_circle else _WIDEST_OF_ELLIPSE
        count = ceil(abs(piece.last - piece.first) / widest - 1e-9)
        shares = [k / count for k in range(count + 1)]
        return tuple(piece.between(s, t) for s, t in pairwise(shares))
    if _is_straight(piece):
        return (Line(piece.start, piece.end),)
    closed = abs(piece.end - piece.start) <= tolerance
    halves = (piece.between(0.0, 0.5), piece.between(0.5, 1.0)) if closed else (piece,)
    return tuple(part for half in halves for part in _moving(half, tolerance))


def _is_straight(piece: Bezier) -> bool:
    """Whether a Bézier runs along its chord, forwards only."""
    chord = piece.end - piece.start
    if chord == 0.0:
        return False
    shares = [(point - piece.start) / chord for point in piece.points]
    steps = np.diff([share.real for share in shares])
    return all(abs(share.imag) <= _ROUND for share in shares) and bool((steps >= -_ROUND).all())


def _moving(piece: Bezier, tolerance: float) -> Iterator[Piece]:
    """Where a handle is retracted the curve bends without limit: cut it towards that end.

    The inmost part, some thousandths of the whole or less, is taken as straight.
    """
    size = max(abs(point - piece.start) for point in piece.points)
    at_start = abs(piece.points[1] - piece.start) <= _STANDS_STILL * size
    at_end = abs(piece.points[-2] - piece.end) <= _STANDS_STILL * size
    near = _towards_start(piece, tolerance) if at_start else []
    far = _towards_start(piece.reversed(), tolerance) if at_end else []
    cuts = [0.0, *near, *(1.0 - cut for cut in reversed(far)), 1.0]
    if at_start and at_end:
        cuts = [*dict.fromkeys(cuts)]
    for s, t in pairwise(cuts):
        part = piece.between(s, t) if len(cuts) > 2 else piece
        still = (at_start and s == 0.0) or (at_end and t == 1.0)
        yield Line(part.start, part.end) if still else part


def _towards_start(piece: Bezier, tolerance: float) -> list[float]:
    """Rising parameters, each half the next, down to a part well above the tolerance."""
    cuts = [0.5]
    while len(cuts) < _HALVINGS:
        reach = abs(complex(piece.at(np.array(0.5 * cuts[-1]))) - piece.start)
        if reach <= _WELL_ABOVE * tolerance:
            break
        cuts.append(0.5 * cuts[-1])
    return cuts[::-1]
