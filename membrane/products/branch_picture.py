"""Frequencies against a swept number, each branch in its colour, crossings and all."""

from __future__ import annotations

from math import ceil, sqrt
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from membrane.records.arrays import Floats
from membrane.records.diagram import Diagram, Panel

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

ONE, MULTIPLE = (8.0, 6.0), (4.0, 3.2)
"""Inches of a panel that stands alone, and of one among several."""

COLOURS = "tab20"
DASHES = ("-", "--", ":")
"""Branches beyond the colours take the next dash."""

DPI = 100


def write_branches(diagram: Diagram, file: Path, dpi: int = DPI) -> None:
    """Draw a diagram into a PNG, SVG or PDF file; several panels share their scales."""
    figure, panels = _laid_out(diagram)
    for axes, panel in zip(panels, diagram.panels, strict=True):
        _draw(axes, panel, diagram)
    figure.suptitle(diagram.title)
    figure.savefig(file, dpi=dpi)


def _laid_out(diagram: Diagram) -> tuple[Figure, list[Axes]]:
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.figure import Figure

    count = len(diagram.panels)
    columns = ceil(sqrt(count))
    rows = ceil(count / columns)
    width, height = ONE if count == 1 else MULTIPLE
    figure = Figure(figsize=(columns * width, rows * height), layout="constrained")
    FigureCanvasAgg(figure)
    grid = figure.subplots(rows, columns, sharex=True, sharey=True, squeeze=False).ravel()
    for axes in grid[count:]:
        axes.axis("off")
    figure.supxlabel(diagram.label)
    figure.supylabel("frequency, Hz")
    return figure, list(grid[:count])


def _draw(axes: Any, panel: Panel, diagram: Diagram) -> None:
    for branch in np.unique(panel.branches[panel.branches > 0]):
        places, frequencies = curve(panel, diagram.places, int(branch))
        style: dict[str, Any] = {"color": _colour(int(branch)), "linestyle": _dash(int(branch))}
        axes.plot(places, frequencies, linewidth=1.2, marker=".", markersize=3, **style)
        _name(axes, int(branch), places, frequencies)
        if any(lost == branch for lost, _ in panel.lost):
            axes.plot(places[-1], frequencies[-1], marker="x", color=_colour(int(branch)))
    axes.set_title(panel.title, fontsize="medium")
    if diagram.logarithmic:
        axes.set_xscale("log")


def curve(panel: Panel, places: Floats, branch: int) -> tuple[Floats, Floats]:
    """Places and frequencies of one branch; NaN where it is away, so that no line is drawn."""
    on = panel.branches == branch
    there = on.any(axis=1)
    first, last = np.flatnonzero(there)[[0, -1]]
    frequencies = np.where(there, np.where(on, panel.frequencies, 0.0).sum(axis=1), np.nan)
    return places[first : last + 1], frequencies[first : last + 1]


def _name(axes: Any, branch: int, places: Floats, frequencies: Floats) -> None:
    """The branch's number at both its ends."""
    ends = ((0, -6, "right"), (-1, 6, "left"))
    for end, off, side in ends[: len(places)]:
        axes.annotate(
            str(branch),
            (places[end], frequencies[end]),
            (off, 0),
            textcoords="offset points",
            ha=side,
            va="center",
            fontsize=7,
            color=_colour(branch),
        )


def _colour(branch: int) -> Any:
    from matplotlib import colormaps

    return colormaps[COLOURS]((branch - 1) % 20)


def _dash(branch: int) -> str:
    return DASHES[(branch - 1) // 20 % len(DASHES)]
