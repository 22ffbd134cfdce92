"""Curves joined end to end into closed contours, small gaps closed on the way."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

import numpy as np

from membrane.drawings.parts import parts
from membrane.drawings.pieces import Line, fitted
from membrane.drawings.sketch import Stroke
from membrane.errors import DrawingError

_ROUNDING = 1e-9
"""Gaps below this share of the drawing's size are rounding, and not worth a note."""

_STRAIGHT = 1e-7
"""Radians by which two straight strokes may differ in direction and still be one."""

_SAMPLES = np.linspace(0.0, 1.0, 9)


@dataclass(frozen=True)
class Gap:
    """A gap that was closed: its width and place, in the drawing's numbers."""

    width: float
    place: complex


@dataclass(frozen=True)
class Loop:
    """Strokes that follow each other end to start, all the way round."""

    strokes: tuple[Stroke, ...]
    gaps: tuple[Gap, ...]


def joined(strokes: Iterable[Stroke], tolerance: float) -> tuple[Loop, ...]:
    """The closed loops that strokes make, in the order drawn.

    tolerance : widest gap that is closed, metres
    Raises DrawingError where an end is left open, or more than two curves meet.
    """
    pieces = _without_doubles(_whole(strokes, tolerance), tolerance)
    partner = _partners(pieces, tolerance)
    loops, used = [], set[int]()
    for first in range(len(pieces)):
        if first not in used:
            ends = _walk(2 * first, partner)
            used.update(end // 2 for end in ends)
            loops.append(_loop(pieces, partner, ends))
    return tuple(loops)


def _whole(strokes: Iterable[Stroke], tolerance: float) -> list[Stroke]:
    """The strokes in parts, without those that are no more than a dot."""
    found = [replace(s, piece=part) for s in strokes for part in parts(s.piece, tolerance)]
    return [
        s
        for s in found
        if np.ptp(s.piece.at(_SAMPLES).real) > tolerance
        or np.ptp(s.piece.at(_SAMPLES).imag) > tolerance
    ]


def _without_doubles(strokes: list[Stroke], tolerance: float) -> list[Stroke]:
    """A curve that was drawn twice on one layer counts once."""
    kept: dict[tuple[object, ...], list[Stroke]] = defaultdict(list)
    found = []
    for stroke in strokes:
        middle = complex(stroke.piece.at(np.array(0.5)))
        cell = (stroke.name, *(round(v / (4 * tolerance)) for v in (middle.real, middle.imag)))
        if not any(_same(stroke, other, tolerance) for other in kept[cell]):
            kept[cell].append(stroke)
            found.append(stroke)
    return found


def _same(one: Stroke, other: Stroke, tolerance: float) -> bool:
    mine, theirs = one.piece.at(_SAMPLES), other.piece.at(_SAMPLES)
    return bool(min(abs(mine - theirs).max(), abs(mine - theirs[::-1]).max()) <= tolerance)


def _ends(strokes: Sequence[Stroke]) -> list[complex]:
    """Start and end of each stroke: end k belongs to stroke k // 2."""
    return [z for stroke in strokes for z in (stroke.piece.start, stroke.piece.end)]


def _partners(strokes: Sequence[Stroke], tolerance: float) -> dict[int, int]:
    """For each end the one that it is joined to."""
    places = _ends(strokes)
    partner: dict[int, int] = {}
    alone = []
    for meeting in _meetings(places, tolerance):
        for here in _by_layer(strokes, meeting):
            if len(here) == 1:
                alone += here
            elif len(here) > 2:
                raise DrawingError(
                    f"{len(here)} curves meet at {said(places[here[0]])}; an outline runs on from "
                    "curve to curve, so put what does not belong to it on another layer."
                )
            else:
                partner[here[0]], partner[here[1]] = here[1], here[0]
    if alone:
        raise DrawingError(_open(places, alone, tolerance))
    return partner


def _meetings(places: Sequence[complex], tolerance: float) -> list[list[int]]:
    """Ends grouped by where they lie, those within the tolerance together."""
    from scipy.sparse import coo_array
    from scipy.sparse.csgraph import connected_components
    from scipy.spatial import KDTree

    if not places:
        return []
    plane = np.stack([np.real(places), np.imag(places)], axis=1)
    pairs = KDTree(plane).query_pairs(tolerance, output_type="ndarray")
    near = coo_array((np.ones(len(pairs)), tuple(pairs.T)), shape=(len(places),) * 2)
    count, group = connected_components(near, directed=False)
    return [np.nonzero(group == k)[0].tolist() for k in range(count)]


def _by_layer(strokes: Sequence[Stroke], meeting: list[int]) -> list[list[int]]:
    """Where contours touch, the ends of each layer belong together."""
    if len(meeting) <= 2:
        return [meeting]
    layers: dict[str, list[int]] = defaultdict(list)
    for end in meeting:
        layers[strokes[end // 2].name].append(end)
    alone = all(len(ends) == 2 for ends in layers.values())
    return list(layers.values()) if alone else [meeting]


def _open(places: Sequence[complex], alone: list[int], tolerance: float) -> str:
    """The sentence about the narrowest gap that is too wide."""
    here = np.array([places[end] for end in alone])
    apart = abs(here[:, None] - here[None, :]) + np.diag(np.full(len(here), np.inf))
    one, other = np.unravel_index(int(np.argmin(apart)), apart.shape)
    more = f" (the narrowest of {len(alone) // 2} gaps)" if len(alone) > 2 else ""
    return (
        f"the curves do not close: from {said(here[one])} to {said(here[other])} a gap of "
        f"{1e3 * apart[one, other]:.4g} mm is left{more}, wider than the tolerance of "
        f"{1e3 * tolerance:.4g} mm; close it, raise the tolerance, or choose the layers to read."
    )


def said(place: complex) -> str:
    """A place in a sentence, in millimetres."""
    x, y = (round(1e3 * float(value), 6) + 0.0 for value in (place.real, place.imag))
    return f"x = {x:g} mm, y = {y:g} mm"


def _walk(start: int, partner: dict[int, int]) -> list[int]:
    """The ends at which the strokes of a loop are entered, in turn."""
    ends = [start]
    while (following := partner[ends[-1] ^ 1]) != start:
        ends.append(following)
    return ends


def _loop(strokes: Sequence[Stroke], partner: dict[int, int], ends: list[int]) -> Loop:
    """The strokes all run one way, with their ends moved onto each other."""
    places = _ends(strokes)
    size = max(abs(places[end] - places[ends[0]]) for end in ends)
    turned = []
    gaps = []
    for end in ends:
        stroke = strokes[end // 2]
        width = abs(places[end] - places[partner[end]])
        if width > _ROUNDING * size:
            gaps.append(Gap(width, places[end]))
        turned.append(replace(stroke, piece=stroke.piece.reversed()) if end % 2 else stroke)
    corners = [0.5 * (places[end] + places[partner[end]]) for end in ends]
    moved = [
        replace(stroke, piece=fitted(stroke.piece, start, stop))
        for stroke, start, stop in zip(turned, corners, corners[1:] + corners[:1], strict=True)
    ]
    return Loop(tuple(_merged(moved)), tuple(gaps))


def _merged(strokes: Sequence[Stroke]) -> list[Stroke]:
    """Straight strokes of one name that run on in one direction, as one."""
    first = next((k for k in range(len(strokes)) if not _runs_on(strokes[k - 1], strokes[k])), 0)
    found: list[Stroke] = []
    for stroke in (*strokes[first:], *strokes[:first]):
        if found and _runs_on(found[-1], stroke):
            whole = Line(found[-1].piece.start, stroke.piece.end)
            found[-1] = replace(stroke, piece=whole)
        else:
            found.append(stroke)
    return found


def _runs_on(one: Stroke, other: Stroke) -> bool:
    if not (isinstance(one.piece, Line) and isinstance(other.piece, Line)):
        return False
    before, after = one.piece.end - one.piece.start, other.piece.end - other.piece.start
    turn = np.angle(after / before)
    return one.name == other.name and abs(float(turn)) <= _STRAIGHT
