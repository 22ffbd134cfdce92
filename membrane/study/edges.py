"""Edges: how the rim, its sides and the holes are held."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from membrane.records.study import Edge, Support
from membrane.study.table import Table
from membrane.units import PositiveVaryingLineStiffness, VaryingLineDensity
from membrane.wording import nearest, shown

EDGE_KEYS = ("support", "stiffness", "mass")


@dataclass(frozen=True)
class _EdgeKeys:
    support: Support = Support.FIXED
    stiffness: PositiveVaryingLineStiffness | None = None
    mass: VaryingLineDensity | None = None


def read_edge(table: Table, given: Mapping[str, Any]) -> Edge | None:
    """The edge that some keys of a table describe."""
    keys = table.read(_EdgeKeys, given)
    if keys is None or not _is_sensible(table, keys):
        return None
    return Edge(keys.support, keys.stiffness or 0.0, keys.mass or 0.0)


def read_edges(
    edges: Table, known: tuple[str, ...] | None, own: Mapping[str, Edge]
) -> dict[str, Edge]:
    """All edges of the head by name, those that the study leaves out being fixed.

    known : names of all edges; None where a broken outline leaves them unknown
    own : edges that holes describe in their own tables
    """
    found = {name: own.get(name, Edge()) for name in known or ()}
    for name, table in edges.tables():
        if name in own:
            edges.refuse(name, "is described in the hole's own table already; leave one out.")
        elif known is not None and name not in known:
            edges.refuse(name, _unknown(name, known))
        found[name] = read_edge(table, table.keys) or Edge()
    for name in (name for name in found if name not in own):
        edges.resolved.setdefault(name, {"support": str(Support.FIXED)})
    return found


def _is_sensible(table: Table, keys: _EdgeKeys) -> bool:
    if keys.support is Support.ELASTIC and keys.stiffness is None:
        table.refuse("stiffness", 'is missing; an elastic edge needs one, such as "2e4 N/m^2".')
    elif keys.support is not Support.ELASTIC and keys.stiffness is not None:
        table.refuse(
            "stiffness", f'does nothing on a {keys.support} edge; set support = "elastic".'
        )
    elif keys.support is Support.FIXED and keys.mass is not None:
        table.refuse("mass", "does nothing on a fixed edge, which does not move; leave it out.")
    else:
        return True
    return False


def _unknown(name: str, known: tuple[str, ...]) -> str:
    hint = nearest(name, known).removesuffix(".")
    return f"there is no edge {shown(name)}; the edges are {', '.join(known)}{hint or '.'}"
