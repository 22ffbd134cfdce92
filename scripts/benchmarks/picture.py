"""The kept curves of accuracy against time as one picture."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path
from typing import Any

from scripts.benchmarks.tables import Row

FILE = Path(__file__).with_name("results.svg")
MARKS = ("o-", "s--", "^-", "x:")


def draw(points: Sequence[Row], file: Path = FILE) -> None:
    """One panel for each head and number of modes, one curve for each contestant."""
    import matplotlib

    matplotlib.use("svg")
    matplotlib.rcParams["svg.hashsalt"] = "bench"  # the same file from the same numbers
    from matplotlib import pyplot

    panels = list(dict.fromkeys((point["head"], point["modes"]) for point in points))
    figure, axes = pyplot.subplots(
        1, len(panels), figsize=(4.2 * len(panels), 3.6), squeeze=False, layout="constrained"
    )
    for axis, panel in zip(axes[0], panels, strict=True):
        _panel(axis, [point for point in points if (point["head"], point["modes"]) == panel])
        axis.set_title(f"{panel[0]}, {panel[1]} modes")
    axes[0][0].set_ylabel("CPU time, s")
    axes[0][0].legend(fontsize="small")
    figure.savefig(file, metadata={"Date": None})
    pyplot.close(figure)


def _panel(axis: Any, points: Sequence[Row]) -> None:
    names = dict.fromkeys(point["contestant"] for point in points)
    for name, mark in zip(names, MARKS, strict=False):
        own = [point for point in points if point["contestant"] == name]
        axis.loglog([p["error"] for p in own], [p["CPU, s"] for p in own], mark, label=name)
    axis.invert_xaxis()
    axis.grid(alpha=0.3)
    axis.set_xlabel("worst relative error of an eigenvalue")
