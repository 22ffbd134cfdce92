"""Meshes of other programs: the boundary of their flat cells, with its tags."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Iterator, Mapping
from contextlib import redirect_stderr, redirect_stdout
from dataclasses import dataclass
from io import StringIO
from pathlib import Path
from typing import Any

import numpy as np

from membrane.drawings.pieces import Bezier, Line, Points
from membrane.drawings.sketch import WHOLE, Sketch, Stroke
from membrane.errors import DrawingError

FLAT = {"triangle": 3, "triangle6": 3, "triangle7": 3, "quad": 4, "quad8": 4, "quad9": 4}
"""Cells that are understood, and how many corners each has."""

_LINES = ("line", "line3")
_NO_MATTER = ("vertex", *_LINES)
_TAGS_OF_GMSH = "gmsh:physical"
_NEAR = 1e-9


@dataclass(frozen=True)
class _Cell:
    """A flat cell: its number from 1, corners, nodes between the corners, and tags."""

    number: int
    corners: tuple[int, ...]
    middles: tuple[int, ...]
    tags: tuple[str, ...]

    def sides(self) -> Iterator[tuple[int, int, int]]:
        """Corner, next corner and the node between them, -1 where there is none."""
        nexts = (*self.corners[1:], self.corners[0])
        yield from zip(self.corners, nexts, self.middles or (-1,) * len(nexts), strict=True)


def endings() -> frozenset[str]:
    """Endings of the files that meshio reads."""
    import meshio

    return frozenset(meshio.extension_to_filetypes)


def read(path: Path) -> Sketch:
    """The boundary of a mesh, and of each of its tagged regions.

    Raises DrawingError for a mesh that cannot be read, or is no sound flat mesh.
    """
    mesh = _load(path)
    try:
        cells = list(_cells(mesh))
        points = _flat_points(mesh, cells)
        _check_nodes(points, cells)
        _check_cells(points, cells)
        strokes = _Boundaries(points, _side_names(mesh)).of(cells)
    except _UnsoundError as reason:
        raise DrawingError(f"{path.name} {reason}.") from None
    curved = any(isinstance(stroke.piece, Bezier) for stroke in strokes[WHOLE])
    notes = ("took the boundary's sides with a middle node as parabolas",) if curved else ()
    return Sketch(strokes, unit=None, exact=True, notes=notes)


class _UnsoundError(Exception):
    """What is wrong with a mesh, to be said after the name of its file."""


def _load(path: Path) -> Any:
    import meshio

    said = StringIO()
    try:
        with redirect_stdout(said), redirect_stderr(said):
            return meshio.read(path)
    except (Exception, SystemExit) as failure:  # meshio's readers raise anything, or exit
        reason = said.getvalue().strip().splitlines()[:1] or [str(failure)]
        raise DrawingError(
            f"{path.name} cannot be read as a mesh ({reason[0].rstrip('.')}); export it again."
        ) from failure


def _cells(mesh: Any) -> Iterator[_Cell]:
    """The flat cells of a mesh, numbered as the file lists them."""
    kinds = {block.type for block in mesh.cells}
    strange = sorted(kinds - FLAT.keys() - set(_NO_MATTER))
    if strange:
        raise _UnsoundError(
            f"has {' and '.join(strange)} cells; give a flat mesh of triangles or quads "
            "of order 1 or 2"
        )
    if not kinds & FLAT.keys():
        raise _UnsoundError("has no triangles or quads; save the surface's cells too")
    number = 0
    for place, block in enumerate(mesh.cells):
        corners = FLAT.get(block.type)
        if corners is None:
            continue
        tags = _tags(mesh, place)
        for k, nodes in enumerate(block.data.tolist()):
            number += 1
            yield _Cell(
                number, tuple(nodes[:corners]), tuple(nodes[corners : 2 * corners]), tags[k]
            )


def _tags(mesh: Any, place: int) -> list[tuple[str, ...]]:
    """Names of the sets, and numbers of the tags, of each cell of a block, as declared."""
    block = mesh.cells[place]
    found: list[dict[str, None]] = [{} for _ in block.data]
    for name, members in mesh.cell_sets.items():
        inside = members[place] if not name.startswith("gmsh:") else None
        for k in [] if inside is None else np.asarray(inside, dtype=np.int64).tolist():
            found[k][name] = None
    dim = 1 if block.type in _LINES else 2
    names = {(int(tag), int(d)): name for name, (tag, d) in _fields(mesh)}
    for array in _tag_arrays(mesh):
        for k, tag in enumerate(np.asarray(mesh.cell_data[array][place]).tolist()):
            if tag != 0:
                found[k][names.get((tag, dim), str(tag))] = None
    return [tuple(tags) for tags in found]


def _fields(mesh: Any) -> Iterator[tuple[str, Any]]:
    """Names of gmsh's physical groups, each with its number and dimension."""
    yield from ((name, v) for name, v in mesh.field_data.items() if np.size(v) == 2)


def _tag_arrays(mesh: Any) -> list[str]:
    """Cell data that number regions: whole numbers, fewer than there are cells."""
    if _TAGS_OF_GMSH in mesh.cell_data:
        return [_TAGS_OF_GMSH]
    cells = sum(len(block.data) for block in mesh.cells)
    found = []
    for name, arrays in mesh.cell_data.items():
        plain = all(np.ndim(a) == 1 and np.issubdtype(a.dtype, np.integer) for a in arrays)
        if plain and not name.startswith("gmsh:") and len(np.unique(np.hstack(arrays))) < cells:
            found.append(name)
    return found


def _flat_points(mesh: Any, cells: Iterable[_Cell]) -> Points:
    points = np.asarray(mesh.points, dtype=float)
    used = sorted({node for cell in cells for node in (*cell.corners, *cell.middles)})
    if not np.isfinite(points[used]).all():
        raise _UnsoundError("has nodes whose coordinates are no numbers; export it again")
    size = np.ptp(points[used, :2], axis=0).max()
    heights = points[used, 2] if points.shape[1] > 2 else np.zeros(1)
    if np.ptp(heights) > _NEAR * size:
        raise _UnsoundError(
            f"is not flat: its nodes lie between z = {heights.min():g} and "
            f"z = {heights.max():g}; a head lies in the xy plane"
        )
    return np.asarray(points[:, 0] + 1j * points[:, 1])


def _check_nodes(points: Points, cells: Iterable[_Cell]) -> None:
    from scipy.spatial import KDTree

    used = np.array(sorted({node for cell in cells for node in (*cell.corners, *cell.middles)}))
    places = np.stack([points[used].real, points[used].imag], axis=1)
    pairs = KDTree(places).query_pairs(_NEAR * float(np.ptp(places, axis=0).max()))
    for one, other in sorted(pairs)[:1]:
        x, y = places[one]
        raise _UnsoundError(
            f"has the nodes {used[one] + 1} and {used[other] + 1} on one place, "
            f"x = {x:g}, y = {y:g}; merge its duplicate nodes"
        )


def _check_cells(points: Points, cells: list[_Cell]) -> None:
    """Every corner of every cell must open the same way round."""
    turns = {cell.number: _turns(points[list(cell.corners)]) for cell in cells}
    most = np.sign(sum(np.sign(t).sum() for t in turns.values())) or 1.0
    for cell in cells:
        if not (most * turns[cell.number] > 0.0).all():
            x, y = _place(points[list(cell.corners)].mean())
            raise _UnsoundError(
                f"has an inverted or flat cell, number {cell.number} at x = {x:g}, y = {y:g}; "
                "repair the mesh"
            )


def _turns(corners: Points) -> Any:
    """Twice the signed area at each corner."""
    leaving = np.roll(corners, -1) - corners
    return np.imag(np.conj(np.roll(leaving, 1)) * leaving)


def _place(point: complex) -> tuple[float, float]:
    return float(point.real), float(point.imag)


def _side_names(mesh: Any) -> Mapping[frozenset[int], str]:
    """Names of tagged sides, by their two corners.

    Of several names the first: declared sets come before whole blocks of elements.
    """
    names: dict[frozenset[int], str] = {}
    for place, block in enumerate(mesh.cells):
        if block.type in _LINES:
            for nodes, tags in zip(block.data.tolist(), _tags(mesh, place), strict=True):
                if tags:
                    names.setdefault(frozenset(nodes[:2]), tags[0])
    return names | _names_of_node_sets(mesh, names)


def _names_of_node_sets(
    mesh: Any, taken: Mapping[frozenset[int], str]
) -> dict[frozenset[int], str]:
    """A side whose corners are both in a set of nodes bears the set's name."""
    names: dict[frozenset[int], str] = {}
    for name, members in mesh.point_sets.items():
        inside = set(np.asarray(members, dtype=np.int64).ravel().tolist())
        for block in mesh.cells:
            corners = FLAT.get(block.type, 0)
            for nodes in block.data[:, :corners].tolist():
                for side in zip(nodes, nodes[1:] + nodes[:1], strict=True):
                    if inside.issuperset(side) and frozenset(side) not in taken:
                        names.setdefault(frozenset(side), name)
    return names


@dataclass(frozen=True)
class _Boundaries:
    points: Points
    names: Mapping[frozenset[int], str]

    def of(self, cells: list[_Cell]) -> dict[str, tuple[Stroke, ...]]:
        """The boundary of all cells, and of those of each tag."""
        groups = defaultdict(list)
        for cell in cells:
            for tag in cell.tags:
                groups[tag].append(cell)
        return {WHOLE: self._around(cells), **{t: self._around(c) for t, c in groups.items()}}

    def _around(self, cells: list[_Cell]) -> tuple[Stroke, ...]:
        beside: dict[frozenset[int], list[tuple[int, int, int]]] = defaultdict(list)
        for cell in cells:
            for side in cell.sides():
                beside[frozenset(side[:2])].append(side)
        for sides in beside.values():
            if len(sides) > 2:
                x, y = _place(self.points[sides[0][0]])
                raise _UnsoundError(
                    f"has a side that {len(sides)} cells share, at x = {x:g}, y = {y:g}; "
                    "a head is a single layer of cells"
                )
        return tuple(self._stroke(*sides[0]) for sides in beside.values() if len(sides) == 1)

    def _stroke(self, start: int, end: int, middle: int) -> Stroke:
        name = self.names.get(frozenset((start, end)), "")
        a, b = complex(self.points[start]), complex(self.points[end])
        if middle < 0:
            return Stroke(name, Line(a, b), (name,))
        bow = complex(self.points[middle]) - 0.5 * (a + b)
        if abs(bow) <= 1e-12 * abs(b - a):
            return Stroke(name, Line(a, b), (name,))
        return Stroke(name, Bezier((a, 0.5 * (a + b) + 2.0 * bow, b)), (name,))
