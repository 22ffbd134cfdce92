"""Lines on the head: what a wire, a hoop or a seam adds, and where the head is slit."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from membrane.records.study import Edge, LineLoad, Slit
from membrane.study.edges import EDGE_KEYS, read_edge
from membrane.study.layers import read_name
from membrane.study.shapes import Kinds, read_shape
from membrane.study.table import Table
from membrane.units import VaryingLineDensity, VaryingLineStiffness

_LOADS = ("line_density", "line_stiffness")
_LIPS = ("left", "right")


@dataclass(frozen=True)
class _Loads:
    line_density: VaryingLineDensity = 0.0
    line_stiffness: VaryingLineStiffness = 0.0


def read_line_load(table: Table, base: Path) -> LineLoad | None:
    """One of the line loads."""
    name = read_name(table)
    line = read_shape(table, ("name", *_LOADS), base, Kinds.ANY)
    given = table.only(_LOADS)
    loads = table.read(_Loads, given)
    if not given:
        table.refuse("", "changes nothing; give line_density or line_stiffness.")
    if name is None or line is None or loads is None:
        return None
    return LineLoad(name, line, loads.line_density, loads.line_stiffness)


def read_slit(table: Table, base: Path, own: dict[str, Edge]) -> Slit | None:
    """One of the slits; the edges at its lips go into ``own``.

    The slit's support, stiffness and mass hold for both lips; a table ``left`` or
    ``right`` stands instead of them for one.
    """
    name = read_name(table)
    line = read_shape(table, ("name", *EDGE_KEYS, *_LIPS), base, Kinds.OPEN)
    both = read_edge(table, table.only(EDGE_KEYS))
    lips = [_lip(table, side, both) for side in _LIPS]
    if name is None or line is None:
        return None
    slit = Slit(name, line)
    own.update({lip: edge or Edge() for lip, edge in zip(slit.lips, lips, strict=True)})
    return slit


def _lip(table: Table, side: str, both: Edge | None) -> Edge | None:
    if side not in table.keys:
        return both
    inner = table.table(side)
    return None if inner is None else read_edge(inner, inner.keys)
