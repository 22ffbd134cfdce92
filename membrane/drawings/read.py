"""From a file to one closed contour in metres: the right reader, the unit, the joining."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from importlib import import_module
from pathlib import Path
from typing import Any

import numpy as np

from membrane.drawings.contours import Contour, chosen, contours, outline
from membrane.drawings.crossings import check_not_flat, check_simple
from membrane.drawings.join import joined, said
from membrane.drawings.pieces import Affine
from membrane.drawings.sketch import Sketch, Stroke
from membrane.errors import DrawingError
from membrane.wording import listed, nearest, shown

TOLERANCE = 1e-5
"""Metres: gaps up to a hundredth of a millimetre are closed, if no tolerance is given …"""

SHARE = 1e-4
"""… and at the most this share of the drawing's size."""

_ROUNDING = 1e-12
_DRAWINGS = {".dxf": "dxf", ".svg": "svg"}
_COMMON_MESHES = (".msh", ".inp", ".vtu", ".vtk", ".xdmf", ".med", ".mesh", ".bdf", ".stl")


@dataclass(frozen=True)
class Found:
    """A contour that was sought in a file, and sentences on how it was come by."""

    contour: Contour
    notes: tuple[str, ...]


def find_contour(
    path: Path,
    unit: float | None = None,
    contour: str | None = None,
    layers: tuple[str, ...] = (),
    tolerance: float | None = None,
) -> Found:
    """The contour of that name, or the one around all others.

    unit : metres of a drawing unit; None takes what the file says
    layers : names of layers to look at; none for all
    tolerance : widest gap that is closed, metres

    Raises DrawingError, with one sentence, where there is no such sound contour.
    """
    try:
        changed = path.stat().st_mtime_ns
    except OSError:
        raise DrawingError(
            f"there is no file {path}; its path starts from the study file."
        ) from None
    return _find(path, changed, unit, contour, layers, tolerance)


@lru_cache(maxsize=256)
def _find(
    path: Path,
    changed: int,
    unit: float | None,
    name: str | None,
    layers: tuple[str, ...],
    tolerance: float | None,
) -> Found:
    every, notes = _all(path, changed, unit, layers, tolerance)
    contour = outline(every) if name is None else chosen(every, name)
    check_simple(contour)
    gaps = sorted(contour.gaps, key=lambda gap: -gap.width)
    closed = [
        f"closed {len(gaps)} gap{'s' * (len(gaps) > 1)} in the contour, the widest "
        f"{1e3 * gap.width:.3g} mm at {said(gap.place)}"
        for gap in gaps[:1]
    ]
    return Found(contour, tuple(f"{path.name}: {note}." for note in (*notes, *closed)))


@lru_cache(maxsize=16)
def _all(
    path: Path,
    changed: int,
    unit: float | None,
    layers: tuple[str, ...],
    tolerance: float | None,
) -> tuple[tuple[Contour, ...], tuple[str, ...]]:
    """All contours of a file in metres, and notes."""
    sketch = _sketch(path, changed)
    metres = unit or sketch.unit
    if metres is None:
        raise DrawingError(f'{path.name} does not say its unit of length; give unit = "mm".')
    groups = {
        group: _scaled(_on_layers(strokes, layers), metres)
        for group, strokes in sketch.groups.items()
    }
    size = _size([stroke for strokes in groups.values() for stroke in strokes])
    widest = _ROUNDING * size if sketch.exact else tolerance or min(TOLERANCE, SHARE * size)
    found = {group: joined(strokes, widest) for group, strokes in groups.items()}
    every = contours(found)
    for contour in every:
        check_not_flat(contour)
    return every, (*sketch.notes, *_overruled(unit, sketch.unit))


@lru_cache(maxsize=16)
def _sketch(path: Path, changed: int) -> Sketch:
    return _reader(path)(path)


def _reader(path: Path) -> Callable[[Path], Sketch]:
    """The reader for a file's ending; its package is imported by it alone."""
    ending = path.suffix.lower()
    name = _DRAWINGS.get(ending) or ("mesh_file" if ending in _mesh_endings() else None)
    if name is None:
        raise DrawingError(
            f"the ending of {path.name} is not known; known are .dxf, .svg and meshes such as "
            f"{listed(_COMMON_MESHES)}."
        )
    module: Any = import_module(f"membrane.drawings.{name}")
    read: Callable[[Path], Sketch] = module.read
    return read


def _mesh_endings() -> frozenset[str]:
    from membrane.drawings.mesh_file import endings

    return endings()


def _on_layers(strokes: Sequence[Stroke], layers: tuple[str, ...]) -> tuple[Stroke, ...]:
    known = dict.fromkeys(layer for stroke in strokes for layer in stroke.layers if layer)
    for layer in layers:
        if layer not in known:
            hint = nearest(layer, known)
            named = hint if hint != "." else f"; known are {listed(known)}."
            raise DrawingError(f"the drawing has no curves on a layer {shown(layer)}{named}")
    return tuple(s for s in strokes if not layers or not set(layers).isdisjoint(s.layers))


def _scaled(strokes: Sequence[Stroke], metres: float) -> tuple[Stroke, ...]:
    return tuple(stroke.mapped(Affine(p=metres)) for stroke in strokes)


def _size(strokes: Sequence[Stroke]) -> float:
    """Longer side of the box around all curves, metres."""
    if not strokes:
        raise DrawingError("the drawing has no curves; draw the outline with lines or curves.")
    points = np.hstack([stroke.piece.at(np.linspace(0.0, 1.0, 9)) for stroke in strokes])
    return float(max(np.ptp(points.real), np.ptp(points.imag)))


def _overruled(given: float | None, own: float | None) -> tuple[str, ...]:
    if given is None or own is None or abs(given - own) <= 1e-9 * own:
        return ()
    return (f"took {1e3 * given:g} mm for a unit, though the file says {1e3 * own:g} mm",)
