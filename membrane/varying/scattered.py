"""A smooth function through scattered points of a CSV file with columns x, y, value."""

from __future__ import annotations

import csv
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import numpy as np

from membrane.records.arrays import Floats
from membrane.records.function import Rule
from membrane.wording import shown

COLUMNS = ("x", "y", "value")
FEWEST = 3


def through_points(file: Path, nearest_outside: bool) -> Rule:
    """A function with a continuous slope through the points of a file.

    P. Alfeld, Comput. Aided Geom. Des. 1 (1984) 169 (from memory): cubic on a triangulation
    after Clough and Tocher; a plane through the points comes out exactly.

    nearest_outside : whether a place outside the points' convex hull has the value of
        the hull's nearest place; else it has none (nan)
    Raises ValueError with a sentence where the file is not sound.
    """
    from scipy.interpolate import CloughTocher2DInterpolator
    from scipy.spatial import ConvexHull, QhullError

    x, y, values = _table(file)
    points = np.stack([x, y], axis=1)
    if len(np.unique(points, axis=0)) < len(points):
        raise ValueError(f"{file} gives two values at one place; leave one of them out.")
    try:
        corners = points[ConvexHull(points).vertices]
    except QhullError:
        raise ValueError(f"the points of {file} lie on one line; give points around it.") from None
    # the slopes at the points come from an iteration, which by default stops early
    smooth: Any = CloughTocher2DInterpolator(points, values, tol=1e-13, maxiter=10000)

    def rule(x: Floats, y: Floats) -> Floats:
        places = np.stack([x, y], axis=1)
        found: Floats = smooth(places)
        outside = np.isnan(found)
        if nearest_outside and outside.any():
            found[outside] = smooth(_onto(corners, places[outside]))
        return found

    return rule


def _table(file: Path) -> Floats:
    """(3, n): x and y in metres, and the values."""
    try:
        with file.open(encoding="utf-8-sig", newline="") as lines:
            rows = list(_rows(file, csv.reader(lines)))
    except FileNotFoundError:
        raise ValueError(f"there is no file {file}; its path starts from the study file.") from None
    except (OSError, UnicodeDecodeError, csv.Error) as failure:
        raise ValueError(f"{file} cannot be read as a CSV file ({failure}).") from None
    if len(rows) < FEWEST:
        raise ValueError(f"{file} holds {len(rows)} points; give {FEWEST} or more.")
    return np.array(rows).T


def _rows(file: Path, reader: Any) -> Iterator[list[float]]:
    for cells in reader:
        if not cells or (reader.line_num == 1 and _heads(cells)):
            continue
        try:
            row = [float(cell) for cell in cells]
        except ValueError:
            row = []
        if len(row) != len(COLUMNS) or not np.isfinite(row).all():
            line = shown(",".join(cells))
            raise ValueError(
                f"line {reader.line_num} of {file} is {line}; expected three numbers x, y, value."
            )
        yield row


def _heads(cells: list[str]) -> bool:
    return tuple(cell.strip().lower() for cell in cells) == COLUMNS


def _onto(corners: Floats, places: Floats) -> Floats:
    """The nearest places (n, 2) of a convex polygon (m, 2) to places outside it."""
    middle = corners.mean(axis=0)
    start, way = corners, np.roll(corners, -1, axis=0) - corners
    along = np.einsum("nmd,md->nm", places[:, None] - start, way) / (way**2).sum(axis=1)
    feet = start + np.clip(along, 0.0, 1.0)[:, :, None] * way
    nearest = np.argmin(((places[:, None] - feet) ** 2).sum(axis=2), axis=1)
    on_hull = feet[np.arange(len(places)), nearest]
    # a hair inwards, so that rounding leaves no place outside
    return np.asarray(on_hull + 1e-9 * (middle - on_hull))
