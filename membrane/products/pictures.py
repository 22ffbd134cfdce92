"""modes.png: every mode in one picture, with its nodal lines, name and pitch."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any, Literal

import numpy as np

from membrane.products.caution import CAUTION
from membrane.products.sheet import Sheet, lay_out
from membrane.records.arrays import Floats
from membrane.records.mesh import Mesh
from membrane.records.spectrum import Partial, Spectrum
from membrane.records.study import Support
from membrane.sides import inner_borders, lie_on, lie_on_lines
from membrane.subdivision import Subdivision, subdivide
from membrane.triangle import EDGES

if TYPE_CHECKING:
    from matplotlib.axes import Axes

STEM = "modes"
INK, PENCIL = "#1a1a1a", "#8c8c8c"
TRIANGLES_PER_INCH = 16
"""Of smooth colour, along the longest side of the mesh."""

MOST_PARTS = 32
LETTER = 0.6
"""Width of a letter of average text, as a share of its size; on the safe side."""

LEGEND = (
    "Black lines stay at rest; red and blue move against each other, each mode to its own scale. "
    "Grey: borders of patches, free edges."
)


@dataclass(frozen=True)
class Options:
    """How the picture is drawn.

    format : of the file
    colour_map : a diverging colour map of matplotlib; this one is safe for the colour-blind
    dpi : dots per inch, of the colours in svg and pdf too
    """

    format: Literal["png", "svg", "pdf"] = "png"
    colour_map: str = "RdBu_r"
    dpi: int = 100


def write(spectrum: Spectrum, folder: Path, options: Options) -> None:
    """Write the picture, small multiples of equal scale on one sheet."""
    from matplotlib.backends.backend_agg import FigureCanvasAgg
    from matplotlib.figure import Figure

    mesh = spectrum.modes.space.mesh
    sheet = lay_out(mesh.nodes.reshape(2, -1), len(spectrum.partials))
    divided = subdivide(mesh, _parts(mesh, sheet))
    positions = divided.positions(mesh)
    figure = Figure(figsize=sheet.inches, dpi=options.dpi)
    FigureCanvasAgg(figure)
    axes = figure.add_axes((0.0, 0.0, 1.0, 1.0))
    axes.set(xlim=(0.0, sheet.width), ylim=(-sheet.height, 0.0), aspect="equal")
    axes.axis("off")
    _draw_shapes(axes, spectrum, divided, positions, sheet, options.colour_map)
    _draw_edges(axes, spectrum, divided, positions, sheet)
    _draw_nodal_lines(axes, spectrum, sheet)
    _write_titles(axes, spectrum, sheet)
    light: dict[str, Any] = {"pil_kwargs": {"compress_level": 1}} if options.format == "png" else {}
    figure.savefig(folder / f"{STEM}.{options.format}", dpi=options.dpi, **light)


def _parts(mesh: Mesh, sheet: Sheet) -> int:
    """Lattice parts for triangles of a few dots, whatever the mesh."""
    corners = mesh.vertices[:, mesh.triangles]
    longest = max(np.hypot(*(corners[:, a] - corners[:, b])).max() for a, b in EDGES)
    inches = longest * sheet.inches[0] / sheet.width
    return int(np.clip(np.ceil(TRIANGLES_PER_INCH * inches), 2, MOST_PARTS))


def _draw_shapes(
    axes: Any,
    spectrum: Spectrum,
    divided: Subdivision,
    positions: Floats,
    sheet: Sheet,
    colour_map: str,
) -> None:
    """Every mode's displacement as smooth colour, each scaled to its own maximum."""
    from matplotlib.tri import Triangulation

    values = divided.values(spectrum.modes.space, spectrum.modes.vectors)
    values = values / np.abs(values).max(axis=0)
    count = values.shape[1]
    points = positions[:, None, :] + sheet.places[:, :, None]
    offsets = divided.count * np.arange(count)[:, None, None]
    triangles = (divided.triangles.T[None] + offsets).reshape(-1, 3)
    axes.tripcolor(
        Triangulation(points[0].ravel(), points[1].ravel(), triangles),
        values.T.ravel(),
        shading="gouraud",
        cmap=colour_map,
        vmin=-1.0,
        vmax=1.0,
        rasterized=True,
    )


def _draw_edges(
    axes: Axes, spectrum: Spectrum, divided: Subdivision, positions: Floats, sheet: Sheet
) -> None:
    """Held edges heavy, free edges light, line loads and borders of patches thin."""
    mesh, study = spectrum.modes.space.mesh, spectrum.study
    held = [name for name in mesh.edges if study.edge(name).support is not Support.FREE]
    free = [name for name in mesh.edges if name not in held]
    styles: list[tuple[Any, str, float]] = [
        (inner_borders(mesh), PENCIL, 0.5),
        (lie_on_lines(mesh), PENCIL, 0.7),
        (lie_on(mesh, free), PENCIL, 0.9),
        (lie_on(mesh, held), INK, 1.4),
    ]
    for on, colour, width in styles:
        lines = np.moveaxis(positions[:, divided.along(on)], 0, -1).swapaxes(0, 1)
        _add_lines(axes, _repeated(list(lines), sheet), colour, width)


def _draw_nodal_lines(axes: Axes, spectrum: Spectrum, sheet: Sheet) -> None:
    lines = [
        line.T + place
        for partial, place in zip(spectrum.partials, sheet.places.T, strict=True)
        for line in partial.nodal.lines
    ]
    _add_lines(axes, lines, INK, 0.8)


def _repeated(lines: list[Floats], sheet: Sheet) -> list[Floats]:
    return [line + place for place in sheet.places.T for line in lines]


def _add_lines(axes: Axes, lines: list[Floats], colour: str, width: float) -> None:
    from matplotlib.collections import LineCollection

    collection = LineCollection(lines, colors=colour, linewidths=width, capstyle="round")
    axes.add_collection(collection, autolim=False)


def _write_titles(axes: Axes, spectrum: Spectrum, sheet: Sheet) -> None:
    for partial, (x, y) in zip(spectrum.partials, sheet.titles.T, strict=True):
        first, second = _title(partial)
        style: dict[str, Any] = {"ha": "center", "color": INK}
        axes.text(x, y, first, va="bottom", fontsize=sheet.font, fontweight="bold", **style)
        axes.text(x, y, second, va="top", fontsize=0.85 * sheet.font, **style)
    title = spectrum.study.title or "Untitled"
    room = 72.0 * sheet.inches[0] * (1.0 - 2.0 * sheet.margin / sheet.width)
    font = min(12.0, room / (LETTER * len(title)))
    axes.text(sheet.margin, sheet.head_line, title, fontsize=font, va="center", color=INK)
    foot = f"{LEGEND}\n{CAUTION}"
    axes.text(sheet.margin, sheet.foot_line, foot, fontsize=6, va="center", color=PENCIL)


def _title(partial: Partial) -> tuple[str, str]:
    """The number, the (m,n) of a round head and the frequency; below, ratio and note."""
    nodal = partial.nodal
    named = nodal.diameters is not None
    name = f"  ({nodal.diameters},{nodal.circles})" if named else ""
    first = f"{partial.number}:{name}  {partial.frequency:.1f} Hz"
    return first, "    ".join(_pitch(partial))


def _pitch(partial: Partial) -> Iterator[str]:
    if partial.ratio is not None:
        yield f"× {partial.ratio:.3f}"
    if partial.note is not None and partial.note_cents is not None:
        yield f"{partial.note} {partial.note_cents:+.0f} cents"
