"""The sections of a study, each read by its own reader, put together."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import Any, TypeVar

from membrane.records.study import (
    Edge,
    EdgePart,
    Hole,
    LineLoad,
    Patch,
    Shape,
    Slit,
    Study,
)
from membrane.study.edges import read_edges
from membrane.study.layers import read_head, read_hole, read_patch, refuse_name
from membrane.study.lines import read_line_load, read_slit
from membrane.study.parts import read_edge_part
from membrane.study.shapes import edge_names, read_shape
from membrane.study.table import Table
from membrane.study.wanted import read_modes, read_products, read_terms
from membrane.wording import nearest

T = TypeVar("T")

SWEEP = "sweep"
"""The section that is read last: it names numbers of the others."""

_KNOWN = (
    *("title", "outline", "patches", "holes", "line_loads", "slits", "head", "edge_parts"),
    *("edges", "modes", "products", "terms", SWEEP),
)
_MISSING = {
    "outline": 'is missing; give the table [outline] with a shape, such as shape = "disc".',
    "head": "is missing; give the table [head] with areal_density and tension.",
}


@dataclass(frozen=True)
class _Title:
    title: str = ""


@dataclass(frozen=True)
class _Shapes:
    """The shapes of a study, and the edges that are described in a shape's own table."""

    outline: Shape | None
    patches: tuple[Patch, ...]
    holes: tuple[Hole, ...]
    loads: tuple[LineLoad, ...]
    slits: tuple[Slit, ...]
    parts: tuple[EdgePart, ...]
    own_edges: dict[str, Edge]

    @property
    def outline_edges(self) -> tuple[str, ...]:
        return edge_names(self.outline) if self.outline else ()

    @property
    def edges(self) -> tuple[str, ...]:
        lips = (lip for slit in self.slits for lip in slit.lips)
        parts = (part.name for part in self.parts)
        return (*self.outline_edges, *parts, *(hole.name for hole in self.holes), *lips)


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
        line_loads=shapes.loads,
        slits=shapes.slits,
        edge_parts=shapes.parts,
        edges=edges,
        modes=modes,
        products=products,
        terms=terms,
        source=root.resolved,
    )


def _refuse_unknown(root: Table) -> None:
    for key in root.without(*_KNOWN):
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
    taken = dict.fromkeys(edge_names(outline) if outline else (), "an edge of the outline")
    own: dict[str, Edge] = {}

    def read_all(key: str, kind: str, read: Callable[[Table], T | None]) -> tuple[T, ...]:
        found = []
        for table in root.array(key):
            item: Any = read(table)
            if item is not None:
                refuse_name(table, item.name, taken, kind)
                found.append(item)
        return tuple(found)

    patches = read_all("patches", "a patch", lambda table: read_patch(table, base))
    holes = read_all("holes", "a hole", lambda table: read_hole(table, base, own))
    loads = read_all("line_loads", "a line load", lambda table: read_line_load(table, base))
    slits = read_all("slits", "a slit", lambda table: read_slit(table, base, own))
    known = (*taken,) if outline else None
    edges = None if known is None else tuple(n for n in known if _is_edge(taken[n]))
    parts = read_all("edge_parts", "an edge part", lambda table: read_edge_part(table, edges))
    return _Shapes(outline, patches, holes, loads, slits, parts, own)


def _is_edge(kind: str) -> bool:
    return kind in ("an edge of the outline", "a hole")


def _read_edges(root: Table, shapes: _Shapes) -> dict[str, Edge]:
    table = root.table("edges")
    if table is None:
        return {}
    known = shapes.edges if shapes.outline else None
    return read_edges(table, known, shapes.own_edges)
