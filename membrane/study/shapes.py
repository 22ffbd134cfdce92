"""A shape: an outline plugin or a script, its own options, and where it is put."""

from __future__ import annotations

from dataclasses import dataclass
from enum import Enum
from pathlib import Path
from typing import Any

from membrane import plugins
from membrane.errors import PluginError
from membrane.records.study import Shape
from membrane.study.table import Table
from membrane.units import Angle, Point
from membrane.wording import either, shown

_OWN_KEYS = ("shape", "script", "at", "rotate")
_HOLE = '"disc", with a hole in [[holes]]'
_POLYGON = '"regular_polygon", with its number of sides'
_CALLED = {
    **dict.fromkeys(("circle", "circular", "round", "disk"), '"disc"'),
    **dict.fromkeys(("square", "box", "oblong"), '"rectangle"'),
    **dict.fromkeys(("annulus", "ring", "donut", "doughnut"), _HOLE),
    **dict.fromkeys(("pentagon", "hexagon", "heptagon", "octagon", "decagon"), _POLYGON),
    **dict.fromkeys(("triangle", "trapezoid", "trapezium", "l_shape"), '"polygon"'),
    **dict.fromkeys(("oval", "elliptic", "elliptical"), '"ellipse"'),
    **dict.fromkeys(("wedge", "pie", "semicircle", "half_disc"), '"sector"'),
    **dict.fromkeys(("dxf", "svg", "drawing", "mesh"), '"file", with its path'),
}
"""What shapes of other names are called here."""

_OPEN_SHAPES = ("polyline", "arc")


class Kinds(Enum):
    """Which shapes will do at a place of the study."""

    CLOSED = "closed"
    ANY = "any"
    OPEN = "open"

    @property
    def usual(self) -> dict[str, str]:
        """The shape where none is named."""
        return {"shape": _OPEN_SHAPES[0]} if self is Kinds.OPEN else {}


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


def read_shape(
    table: Table, besides: tuple[str, ...], base: Path, kinds: Kinds = Kinds.CLOSED
) -> Shape | None:
    """The shape of a table whose keys ``besides`` belong to something else.

    base : the folder that the paths of scripts and files start from
    kinds : which shapes will do
    """
    given = table.only(("shape", "script"))
    which = table.read(_Which, given or kinds.usual)
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
    if not _will_do(table, which, module, options, kinds):
        return None
    if where is None or options is None:
        return None
    return Shape(name, options, where.at, where.rotate)


def _will_do(table: Table, which: _Which | None, module: Any, options: Any, kinds: Kinds) -> bool:
    is_open = getattr(module, "OPEN", False)
    if is_open and kinds is Kinds.CLOSED:
        table.refuse(_key(which), "encloses no area; it is for line loads and slits only.")
    elif kinds is Kinds.OPEN and not is_open:
        table.refuse(_key(which), f"a slit needs an open line: {either(_OPEN_SHAPES)}.")
    elif kinds is Kinds.OPEN and getattr(options, "closed", False):
        table.refuse("closed", "a slit that closes would cut a piece out; draw a hole instead.")
    else:
        return True
    return False


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
    name = which.shape or ""
    called = _CALLED.get(name.lower())
    if called is None or name in plugins.names("outline"):
        return name
    table.refuse("shape", f"there is no outline {shown(name)}; give shape = {called}.")
    return None


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
