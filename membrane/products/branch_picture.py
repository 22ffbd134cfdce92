"""Frequencies against a swept number, each branch in its colour, crossings and all."""

from __future__ import annotations

from dataclasses import dataclass, replace
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

COLOURS = "tab10"
DASHES = ("-", "--", ":")
"""Branches beyond the colours take the next dash."""

NEAR = 0.012
"""Of the highest frequency: ends no further apart are named together."""

MARGIN = 0.16
"""Of a panel's width, on either side, for the branches' numbers."""

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
    for axes in grid[max(count - columns, 0) : count]:  # the lowest of each column
        axes.tick_params(labelbottom=True)
    figure.supxlabel(diagram.label)
    figure.supylabel("frequency, Hz")
    return figure, list(grid[:count])


def _draw(axes: Any, panel: Panel, diagram: Diagram) -> None:
    begins, ends = [], []
    for branch in np.unique(panel.branches[panel.branches > 0]).tolist():
        places, frequencies = curve(panel, diagram.places, branch)
        style: dict[str, Any] = {"color": _colour(branch), "linestyle": _dash(branch)}
        axes.plot(places, frequencies, linewidth=1.2, marker=".", markersize=3, **style)
        begins.append(End(places[0], frequencies[0], (branch,)))
        if len(places) > 1:
            ends.append(End(places[-1], frequencies[-1], (branch,)))
        if any(lost == branch for lost, _ in panel.lost):
            axes.plot(places[-1], frequencies[-1], marker="x", color=_colour(branch))
    apart = NEAR * float(np.nanmax(panel.frequencies, initial=0.0))
    for found, off, side in ((begins, -6, "right"), (ends, 6, "left")):
        for end in together(found, apart):
            _name(axes, end, off, side)
    axes.margins(x=MARGIN)
    axes.set_title(panel.title, fontsize="medium")
    if diagram.logarithmic:
        _logarithmic(axes)


def _logarithmic(axes: Any) -> None:
    from matplotlib.ticker import LogLocator, NullFormatter, StrMethodFormatter

    axes.set_xscale("log")
    axes.xaxis.set_major_locator(LogLocator(subs=(1.0, 2.0, 5.0)))
    axes.xaxis.set_major_formatter(StrMethodFormatter("{x:g}"))
    axes.xaxis.set_minor_formatter(NullFormatter())


def curve(panel: Panel, places: Floats, branch: int) -> tuple[Floats, Floats]:
    """Places and frequencies of one branch; NaN where it is away, so that no line is drawn."""
    on = panel.branches == branch
    there = on.any(axis=1)
    first, last = np.flatnonzero(there)[[0, -1]]
    frequencies = np.where(there, np.where(on, panel.frequencies, 0.0).sum(axis=1), np.nan)
    return places[first : last + 1], frequencies[first : last + 1]


@dataclass(frozen=True)
class End:
    """Where the lines of some branches begin or end."""

    place: float
    frequency: float
    branches: tuple[int, ...]


def together(ends: list[End], apart: float) -> list[End]:
    """One for those at one place whose frequencies are no further apart than that, Hz."""
    merged: list[End] = []
    for end in sorted(ends, key=lambda end: (end.place, end.frequency)):
        last = merged[-1] if merged else None
        if last and last.place == end.place and end.frequency - last.frequency <= apart:
            merged[-1] = replace(last, branches=(*last.branches, *end.branches))
        else:
            merged.append(end)
    return merged


def _name(axes: Any, end: End, off: float, side: str) -> None:
    """The branches' numbers beside an end."""
    axes.annotate(
        numbers(end.branches),
        (end.place, end.frequency),
        (off, 0),
        textcoords="offset points",
        ha=side,
        va="center",
        fontsize=7,
        color=_colour(max(end.branches)),  # the line on top
    )


def numbers(branches: tuple[int, ...]) -> str:
    """Numbers in rising order, those that follow each other as from-to: "2, 3", "7–10"."""
    runs: list[list[int]] = []
    for branch in sorted(branches):
        if runs and branch == runs[-1][-1] + 1:
            runs[-1].append(branch)
        else:
            runs.append([branch])
    words = [[f"{run[0]}–{run[-1]}"] if len(run) > 2 else map(str, run) for run in runs]
    return ", ".join(word for run in words for word in run)


def _colour(branch: int) -> Any:
    from matplotlib import colormaps

    return colormaps[COLOURS]((branch - 1) % 10)


def _dash(branch: int) -> str:
    return DASHES[(branch - 1) // 10 % len(DASHES)]
