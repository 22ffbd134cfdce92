"""Pieces as the kernel can take them: short arcs, and Béziers that never stand still."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise
from math import ceil, pi

import numpy as np

from membrane.drawings.pieces import Arc, Bezier, Line, Piece

_WIDEST = 2.0 * pi / 3.0
_ROUND = 1e-12

_STANDS_STILL = 1e-9
"""How short a handle may be, as a share of the curve's size, to count as retracted."""

_HALVINGS = 9
"""How often a Bézier is halved towards an end with a retracted handle."""


def parts(piece: Piece, tolerance: float) -> tuple[Piece, ...]:
    """The pieces that together are one piece, each open, and smooth by its own parameter.

    tolerance : ends that lie as close as this are one point
    """
    if isinstance(piece, Line):
        return (piece,)
    if isinstance(piece, Arc):
        count = ceil(abs(piece.last - piece.first) / _WIDEST - 1e-9)
        shares = [k / count for k in range(count + 1)]
        return tuple(piece.between(s, t) for s, t in pairwise(shares))
    if _is_straight(piece):
        return (Line(piece.start, piece.end),)
    closed = abs(piece.end - piece.start) <= tolerance
    halves = (piece.between(0.0, 0.5), piece.between(0.5, 1.0)) if closed else (piece,)
    return tuple(part for half in halves for part in _moving(half))


def _is_straight(piece: Bezier) -> bool:
    """Whether a Bézier runs along its chord, forwards only."""
    chord = piece.end - piece.start
    if chord == 0.0:
        return False
    shares = [(point - piece.start) / chord for point in piece.points]
    steps = np.diff([share.real for share in shares])
    return all(abs(share.imag) <= _ROUND for share in shares) and bool((steps >= -_ROUND).all())


def _moving(piece: Bezier) -> Iterator[Piece]:
    """Where a handle is retracted the curve bends without limit: cut it towards that end.

    The inmost part, a millionth of the whole, is taken as straight.
    """
    size = max(abs(point - piece.start) for point in piece.points)
    at_start = abs(piece.points[1] - piece.start) <= _STANDS_STILL * size
    at_end = abs(piece.points[-2] - piece.end) <= _STANDS_STILL * size
    near = [0.5**k for k in range(_HALVINGS, 0, -1)]
    cuts = [0.0, *(near if at_start else ()), *((1.0 - c for c in near[-2::-1]) if at_end else ())]
    for s, t in pairwise([*dict.fromkeys([*cuts, 1.0])] if at_start or at_end else (0.0, 1.0)):
        part = piece.between(s, t) if (s, t) != (0.0, 1.0) else piece
        still = (at_start and s == 0.0) or (at_end and t == 1.0)
        yield Line(part.start, part.end) if still else part
