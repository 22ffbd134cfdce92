"""The sheet: where each mode and its title stand on the picture."""

from __future__ import annotations

from dataclasses import dataclass
from math import ceil

import numpy as np

from membrane.records.arrays import Floats

SHAPE = 1.4
"""Width over height of the sheet, about that of paper laid flat."""

GAP = 0.12
"""Between two heads, as a share of the larger side of a head."""

LARGEST, SMALLEST = 4.5, 1.35
"""Inches that a head with its gap may take."""


@dataclass(frozen=True)
class Sheet:
    """A grid of equal cells; lengths in metres of the head, y upwards from 0 at the top.

    inches : (width, height) of the paper
    width, height : of the sheet
    places : (2, n), what is added to a head's coordinates to put it into its cell
    titles : (2, n), the middle of each title
    head_line, foot_line : y of the line above all and of the line below all
    margin : left and right of these
    font : size of the titles, points
    """

    inches: tuple[float, float]
    width: float
    height: float
    places: Floats
    titles: Floats
    head_line: float
    foot_line: float
    margin: float
    font: float


def lay_out(positions: Floats, count: int) -> Sheet:
    """The sheet for ``count`` heads whose points are ``positions`` (2, n), metres."""
    low, high = positions.min(axis=1), positions.max(axis=1)
    size = high - low
    gap = GAP * size.max()
    cell_inches = float(np.clip(11.0 / np.sqrt(count), SMALLEST, LARGEST))
    metres_per_inch = (size.max() + gap) / cell_inches
    font = 5.0 + 1.6 * cell_inches
    title = 2.9 * font / 72.0 * metres_per_inch
    wide, high_cell = max(size[0] + gap, 1.05 * metres_per_inch), size[1] + gap + title
    columns = _columns(count, wide, high_cell)
    row, column = np.divmod(np.arange(count), columns)
    head_line = 0.4 * metres_per_inch
    width, height = columns * wide + gap, ceil(count / columns) * high_cell + 1.7 * head_line
    width = max(width, 6.5 * metres_per_inch)
    left = 0.5 * (width - columns * wide)
    centres = np.stack([left + (column + 0.5) * wide, -head_line - row * high_cell])
    middle = np.array([0.5 * (low[0] + high[0]), high[1]])
    drop = np.array([[0.0], [title]])
    return Sheet(
        inches=(width / metres_per_inch, height / metres_per_inch),
        width=float(width),
        height=float(height),
        places=centres - drop - middle[:, None],
        titles=centres - 0.52 * drop,
        head_line=-0.5 * head_line,
        foot_line=float(-height + 0.4 * head_line),
        margin=float(min(left + 0.5 * gap, 0.3 * metres_per_inch)),
        font=font,
    )


def _columns(count: int, wide: float, high: float) -> int:
    """The number of columns for a sheet near its wanted shape with few empty cells."""

    def badness(columns: int) -> float:
        rows = ceil(count / columns)
        shape = columns * wide / (rows * high)
        return float(abs(np.log(shape / SHAPE)) + 1.5 * np.log(rows * columns / count))

    return min(range(1, count + 1), key=badness)
