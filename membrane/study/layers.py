"""The layers of the head: the head itself, its patches, and the holes cut out of it."""

from __future__ import annotations

import re
from dataclasses import dataclass
from pathlib import Path

from membrane.records.outline import HEAD
from membrane.records.study import Edge, Head, Hole, Patch
from membrane.study.edges import EDGE_KEYS, read_edge
from membrane.study.shapes import read_shape
from membrane.study.table import Table
from membrane.study.tension import KEY, read_tension
from membrane.units import PositiveVaryingArealDensity, VaryingArealDensity, VaryingBedding
from membrane.wording import shown

_NAME = re.compile(r"\w[\w-]*")
_DENSITIES = ("areal_density", "added_density", "bedding")
_PATCH_KEYS = ("name", KEY, *_DENSITIES)


@dataclass(frozen=True)
class _HeadKeys:
    areal_density: PositiveVaryingArealDensity
    bedding: VaryingBedding = 0.0


@dataclass(frozen=True)
class _Name:
    name: str


@dataclass(frozen=True)
class _PatchKeys:
    areal_density: PositiveVaryingArealDensity | None = None
    added_density: VaryingArealDensity | None = None
    bedding: VaryingBedding | None = None

    def __post_init__(self) -> None:
        if self.areal_density is not None and self.added_density is not None:
            raise ValueError("give either areal_density or added_density, not both.")


def read_head(table: Table) -> Head | None:
    """The head's own table."""
    keys = table.read(_HeadKeys, table.without(KEY), (KEY,))
    if KEY not in table.keys:
        table.refuse(KEY, 'is missing; give it a value such as "3 kN/m".')
        return None
    tension = read_tension(table)
    if keys is None or tension is None:
        return None
    return Head(keys.areal_density, tension, keys.bedding)


def read_patch(table: Table, base: Path) -> Patch | None:
    """One of the patches."""
    name = read_name(table)
    shape = read_shape(table, _PATCH_KEYS, base)
    keys = table.read(_PatchKeys, table.only(_DENSITIES))
    tension = read_tension(table) if KEY in table.keys else None
    if not table.only((KEY, *_DENSITIES)):
        table.refuse("", "changes nothing; give areal_density, added_density, tension or bedding.")
    if name is None or shape is None or keys is None:
        return None
    return Patch(name, shape, keys.areal_density, keys.added_density, tension, keys.bedding)


def read_hole(table: Table, base: Path) -> tuple[Hole | None, Edge | None]:
    """One of the holes, and its edge where the hole's own table describes it."""
    name = read_name(table)
    shape = read_shape(table, ("name", *EDGE_KEYS), base)
    given = table.only(EDGE_KEYS)
    edge = read_edge(table, given) if given else None
    hole = None if name is None or shape is None else Hole(name, shape)
    return hole, edge


def read_name(table: Table) -> str | None:
    """The name of a patch or a hole."""
    keys = table.read(_Name, table.only(("name",)))
    if keys is not None and not _NAME.fullmatch(keys.name):
        given = shown(keys.name)
        table.refuse("name", f"expected a name of letters, digits, _ and -, got {given}.")
        return None
    return None if keys is None else keys.name


def refuse_name(table: Table, name: str, taken: dict[str, str], kind: str) -> None:
    """Note a name as taken by a ``kind``, and refuse one that something else has.

    taken : name -> what bears it
    """
    if name == HEAD:
        table.refuse("name", f'"{HEAD}" is the head itself; choose another name.')
    elif name in taken:
        table.refuse("name", f"{shown(name)} is the name of {taken[name]} already; choose another.")
    taken.setdefault(name, kind)
