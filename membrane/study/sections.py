"""The sections of a study, each read by its own reader, put together."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import TypeVar

from membrane.records.study import Edge, Hole, Patch, Shape, Study
from membrane.study.edges import read_edges
from membrane.study.layers import read_head, read_hole, read_patch, refuse_name
from membrane.study.problems import NOT_YET
from membrane.study.shapes import edge_names, read_shape
from membrane.study.table import Table
from membrane.study.wanted import read_modes, read_products, read_terms
from membrane.wording import nearest

T = TypeVar("T")

_KNOWN = ("title", "outline", "patches", "holes", "head", "edges", "modes", "products", "terms")
_LATER = {"line_loads": "line loads are", "sweep": "sweeps are"}
_MISSING = {
    "outline": 'is missing; give the table [outline] with a shape, such as shape = "disc".',
    "head": "is missing; give the table [head] with areal_density and tension.",
}


@dataclass(frozen=True)
class _Title:
    title: str = ""


@dataclass(frozen=True)
class _Shapes:
    """The shapes of a study, and the edges that holes describe in their own tables."""

    outline: Shape | None
    patches: tuple[Patch, ...]
    holes: tuple[Hole, ...]
    own_edges: dict[str, Edge]

    @property
    def outline_edges(self) -> tuple[str, ...]:
        return edge_names(self.outline) if self.outline else ()


def read_sections(root: Table, base: Path) -> Study | None:
    """The whole study; None where a problem has been noted."""
    _refuse_unknown(root)
    title = root.read(_Title, root.only(("title",)))
    shapes = _read_shapes(root, base)
    edges = _read_edges(root, shapes)
    head = _section(root, "head", read_head)
    modes = _section(root, "modes", read_modes)
    products = _section(root, "products", read_products)
    terms = _section(root, "terms", read_terms)
    if not (title and shapes.outline and head and modes and products and terms is not None):
        return None
    return Study(
        title=title.title,
        outline=shapes.outline,
        head=head,
        patches=shapes.patches,
        holes=shapes.holes,
        edges=edges,
        modes=modes,
        products=products,
        terms=terms,
        source=root.resolved,
    )


def _refuse_unknown(root: Table) -> None:
    for key in root.without(*_KNOWN):
        if key in _LATER:
            root.refuse(key, f"{_LATER[key]} {NOT_YET}; leave the table out.")
        else:
            hint = nearest(key, _KNOWN)
            known = f"; known here are {', '.join(_KNOWN)}."
            root.refuse(key, f"unknown section{hint if hint != '.' else known}")


def _section(root: Table, key: str, read: Callable[[Table], T]) -> T | None:
    if key in _MISSING and key not in root.keys:
        root.refuse(key, _MISSING[key])
        return None
    table = root.table(key)
    return None if table is None else read(table)


def _read_shapes(root: Table, base: Path) -> _Shapes:
    outline = _section(root, "outline", lambda table: read_shape(table, (), base))
    patches, holes, own = [], [], {}
    names = dict.fromkeys(edge_names(outline) if outline else (), "an edge of the outline")
    for table in root.array("patches"):
        patch = read_patch(table, base)
        if patch is not None:
            refuse_name(table, patch.name, names, "a patch")
            patches.append(patch)
    for table in root.array("holes"):
        hole, edge = read_hole(table, base)
        if hole is not None:
            refuse_name(table, hole.name, names, "a hole")
            holes.append(hole)
        if hole is not None and edge is not None:
            own[hole.name] = edge
    return _Shapes(outline, tuple(patches), tuple(holes), own)


def _read_edges(root: Table, shapes: _Shapes) -> dict[str, Edge]:
    table = root.table("edges")
    if table is None:
        return {}
    holes = tuple(hole.name for hole in shapes.holes)
    known = (*shapes.outline_edges, *holes) if shapes.outline else None
    return read_edges(table, known, shapes.own_edges)
