"""Whether a contour goes round once, without crossing itself."""

from __future__ import annotations

import numpy as np

from membrane.drawings.contours import Contour
from membrane.drawings.join import said
from membrane.drawings.pieces import Line, Piece, Points
from membrane.errors import DrawingError
from membrane.records.arrays import Floats

_PER_CURVE = 24
_FINER = 16
_DEPTH = 6


def check_simple(contour: Contour) -> None:
    """Raise DrawingError where a contour crosses itself."""
    pieces = [stroke.piece for stroke in contour.strokes]
    owner, low, high = _chords(pieces)
    start = np.array([complex(pieces[k].at(s)) for k, s in zip(owner, low, strict=True)])
    end = np.roll(start, -1)
    count = len(start)
    for one in range(count):
        last = count - 1 if one == 0 else count  # the first and the last chord are neighbours
        others = np.arange(one + 2, last)
        met = others[_cross(start[one], end[one], start[others], end[others])]
        for other in met:
            ends = (low[one], high[one]), (low[other], high[other])
            found = _closer(pieces[owner[one]], pieces[owner[other]], *ends, _DEPTH)
            if found is not None:
                raise DrawingError(
                    f"the contour crosses itself at {said(found)}; "
                    "draw an outline that goes round once."
                )


def check_not_flat(contour: Contour) -> None:
    """Raise DrawingError for a contour without area, such as a seam of a mesh."""
    if contour.is_flat:
        check_simple(contour)
        raise DrawingError(
            f"the contour at {said(contour.polygon[0])} encloses no area; "
            "leave it out, or repair it if it is a seam of a mesh."
        )


def _chords(pieces: list[Piece]) -> tuple[list[int], Floats, Floats]:
    """The pieces cut into short chords: number of the piece, and its parameter range."""
    counts = [1 if isinstance(piece, Line) else _PER_CURVE for piece in pieces]
    owner = [k for k, count in enumerate(counts) for _ in range(count)]
    low = np.hstack([np.arange(count) / count for count in counts])
    high = np.hstack([np.arange(1, count + 1) / count for count in counts])
    return owner, low, high


def _cross(a: complex | Points, b: complex | Points, c: Points, d: Points) -> Floats:
    """Whether the chord a b crosses or touches the chords c d (n,)."""

    def side(p: complex | Points, q: complex | Points, r: complex | Points) -> Floats:
        return np.asarray(np.imag(np.conj(q - p) * (r - p)))

    apart = side(a, b, c) * side(a, b, d), side(c, d, a) * side(c, d, b)
    return np.asarray((apart[0] <= 0.0) & (apart[1] <= 0.0) & ((apart[0] < 0.0) | (apart[1] < 0.0)))


def _closer(
    one: Piece, other: Piece, mine: tuple[float, float], theirs: tuple[float, float], depth: int
) -> complex | None:
    """The crossing within two parameter ranges, looked at more closely; None if it was none."""
    if isinstance(one, Line) and isinstance(other, Line):
        a, b, c, d = one.start, one.end, other.start, other.end
        share = np.imag((c - a) * np.conj(d - c)) / np.imag((b - a) * np.conj(d - c))
        return a + complex(share) * (b - a)
    s, t = np.linspace(*mine, _FINER + 1), np.linspace(*theirs, _FINER + 1)
    p, q = one.at(s), other.at(t)
    for k in range(_FINER):
        for m in np.nonzero(_cross(p[k], p[k + 1], q[:-1], q[1:]))[0]:
            if depth == 0:
                return complex(0.25 * (p[k] + p[k + 1] + q[m] + q[m + 1]))
            inner = (s[k], s[k + 1]), (t[m], t[m + 1])
            found = _closer(one, other, *inner, depth - 1)
            if found is not None:
                return found
    return None
