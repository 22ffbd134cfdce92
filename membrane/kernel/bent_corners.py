"""How the corners of a straight mesh change once its sides follow their curves."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Bools, Floats
from membrane.records.raw_mesh import RawMesh

# A corner between two segments of one smooth curve opens to a straight angle and
# spoils its triangle; so does one that its curved sides all but close.
_WIDEST = np.radians(160.0)
_LEAST_SHARE = 0.3


def spoilt(raw: RawMesh, tangents: Floats) -> Bools:
    """Which triangles (n_triangles,) have a corner that bends too far open or shut.

    tangents : (2, 2, n_segments): x and y, first and last end, along the curve
    """
    straight = _directions(raw)
    bent = _along_curves(raw, straight, tangents)
    before, after = _between(straight), _between(bent)
    wrong: Bools = ((after < _LEAST_SHARE * before) | (after > _WIDEST)).any(axis=0)
    return wrong


def _directions(raw: RawMesh) -> Floats:
    """(2, 3, 2, n_triangles): at each corner, towards the next corner and the one before."""
    corners = raw.vertices[:, raw.triangles]
    towards = [corners[:, [1, 2, 0]] - corners, corners[:, [2, 0, 1]] - corners]
    return np.stack(towards, axis=2)


def _along_curves(raw: RawMesh, straight: Floats, tangents: Floats) -> Floats:
    """The same directions, along the tangent where a side is a segment of a curve."""
    count = raw.vertices.shape[1]
    start, end = raw.segments
    keys = np.concatenate([start * count + end, end * count + start])
    leaving = np.concatenate([tangents[:, 0], -tangents[:, 1]], axis=1)
    order = np.argsort(keys)
    sides = np.stack([raw.triangles[[1, 2, 0]], raw.triangles[[2, 0, 1]]], axis=1)
    wanted = raw.triangles[:, None, :] * count + sides
    place = np.minimum(np.searchsorted(keys[order], wanted), keys.size - 1)
    on_curve: Bools = keys[order][place] == wanted
    return np.where(on_curve, leaving[:, order][:, place], straight)


def _between(directions: Floats) -> Floats:
    """Angles (3, n_triangles), -pi to pi, counter-clockwise from the first to the second."""
    (ux, vx), (uy, vy) = directions.transpose(0, 2, 1, 3)
    angles: Floats = np.arctan2(ux * vy - uy * vx, ux * vx + uy * vy)
    return angles
