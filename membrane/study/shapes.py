"""A shape: an outline plugin or a script, its own options, and where it is put."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import Any

from membrane import plugins
from membrane.errors import PluginError
from membrane.records.study import Shape
from membrane.study.table import Table
from membrane.units import Angle, Point
from membrane.wording import shown

_OWN_KEYS = ("shape", "script", "at", "rotate")


@dataclass(frozen=True)
class _Which:
    shape: str | None = None
    script: str | None = None

    def __post_init__(self) -> None:
        if self.shape is not None and self.script is not None:
            raise ValueError("give either shape or script, not both.")
        if self.shape is None and self.script is None:
            raise ValueError('has no shape; give shape = "disc" or script = "my_outline.py".')


@dataclass(frozen=True)
class _Where:
    at: Point = (0.0, 0.0)
    rotate: Angle = 0.0


def read_shape(table: Table, besides: tuple[str, ...], base: Path) -> Shape | None:
    """The shape of a table whose keys ``besides`` belong to something else.

    base : the folder that the paths of scripts and files start from
    """
    which = table.read(_Which, table.only(("shape", "script")))
    where = table.read(_Where, table.only(("at", "rotate")))
    name = None if which is None else _plugin(table, which, base)
    if name is None:
        return None
    others = (*_OWN_KEYS, *besides)
    try:
        module = plugins.load("outline", name)
        options = table.read(module.Options, table.without(*others), others, base)
    except PluginError as error:
        table.refuse(_key(which), str(error))
        return None
    if where is None or options is None:
        return None
    return Shape(name, options, where.at, where.rotate)


def edge_names(shape: Shape) -> tuple[str, ...]:
    """Names of the edges of a shape, from its plugin."""
    module: Any = plugins.load("outline", shape.plugin)
    return tuple(module.edges(shape.options))


def _key(which: _Which | None) -> str:
    return "script" if which is not None and which.script is not None else "shape"


def _plugin(table: Table, which: _Which, base: Path) -> str | None:
    """Registered name, or whole path of the script."""
    if which.script is not None:
        return _script(table, which.script, base)
    return which.shape or ""


def _script(table: Table, script: str, base: Path) -> str | None:
    path = (base / Path(script).expanduser()).resolve()
    if path.suffix != ".py":
        table.refuse(
            "script", f"expected a Python file such as my_outline.py, got {shown(script)}."
        )
        return None
    if not path.is_file():
        table.refuse("script", f"there is no file {path}; its path starts from the study file.")
        return None
    table.resolved["script"] = str(path)
    return str(path)
