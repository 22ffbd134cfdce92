"""The registry: a plugin's name to its module, imported on first use."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from importlib.metadata import EntryPoint, entry_points
from types import MappingProxyType
from typing import Any

from membrane.errors import PluginError
from membrane.plugins.script import is_script, load_script
from membrane.plugins.source import first_sentence
from membrane.wording import unknown

OWN_PACKAGE = "membrane"

GROUPS: Mapping[str, str] = MappingProxyType(
    {
        "outline": "membrane.outlines",
        "term": "membrane.terms",
        "eigensolver": "membrane.eigensolvers",
        "product": "membrane.products",
    }
)
"""Kinds of plugin and the entry point group in which packages declare theirs."""

_OWN = {
    "outline": (
        "membrane.geometries",
        "disc ellipse rectangle polygon regular_polygon sector stadium rounded_rectangle spline"
        " fourier file",
    ),
    "term": ("membrane.terms", "tension areal_density bedding edge_stiffness edge_mass"),
    "eigensolver": ("membrane.eigensolvers", "shift_invert arpack_superlu dense"),
    "product": ("membrane.products", "summary modes_csv table vtu nodal_lines pictures"),
}
_NEEDS = {
    "outline": ("Options", "edges", "build"),
    "term": ("Options", "contribute"),
    "eigensolver": ("solve",),
    "product": ("Options", "write"),
}


@dataclass(frozen=True)
class Plugin:
    """A registered plugin.

    target : dotted path of its module
    package : name of the installed package that brings it
    """

    kind: str
    name: str
    target: str
    package: str


@lru_cache(maxsize=len(GROUPS))
def registered(kind: str) -> Mapping[str, Plugin]:
    """All plugins of a kind by name, read-only; none of them is imported.

    Raises PluginError where two packages claim one name.
    """
    found: dict[str, Plugin] = {}
    for plugin in (*_own(kind), *_installed(kind)):
        other = found.setdefault(plugin.name, plugin)
        if other != plugin:
            packages = f"{other.package} ({other.target}) and {plugin.package} ({plugin.target})"
            raise PluginError(
                f'The {kind} "{plugin.name}" is claimed by both {packages}; '
                "uninstall or rename one of them."
            )
    return MappingProxyType(found)


def names(kind: str) -> tuple[str, ...]:
    """Names of all plugins of a kind, our own first."""
    return tuple(registered(kind))


def find(kind: str, name: str) -> Plugin:
    """The plugin of that name, not imported. Raises PluginError for an unknown name."""
    known = registered(kind)
    if name not in known:
        raise PluginError(unknown(kind, name, tuple(known)))
    return known[name]


def package_of(kind: str, name: str) -> str:
    """The installed package that a plugin comes from."""
    return find(kind, name).package


def load(kind: str, name: str) -> Any:
    """The plugin's module; for an outline, ``name`` may be the path of a script.

    Raises PluginError, with one sentence, for a plugin that is unknown or broken.
    """
    if kind == "outline" and is_script(name):
        return _complete(kind, name, load_script(name))
    return _load_registered(find(kind, name))


def describe(kind: str, name: str) -> str:
    """The plugin's one-sentence help, read without running the plugin."""
    return first_sentence(find(kind, name).target)


def _own(kind: str) -> list[Plugin]:
    folder, listed = _OWN[kind]
    return [Plugin(kind, name, f"{folder}.{name}", OWN_PACKAGE) for name in listed.split()]


def _installed(kind: str) -> list[Plugin]:
    return [
        Plugin(kind, entry.name, entry.value, entry.dist.name if entry.dist else "unknown package")
        for entry in sorted(entry_points(group=GROUPS[kind]))
    ]


@lru_cache(maxsize=128)
def _load_registered(plugin: Plugin) -> Any:
    entry = EntryPoint(plugin.name, plugin.target, GROUPS[plugin.kind])
    try:
        module = entry.load()
    except Exception as failure:  # a stranger's module may raise anything at all
        raise PluginError(
            f'The {plugin.kind} "{plugin.name}" of {plugin.package} cannot be imported '
            f"({type(failure).__name__}: {failure}); repair or uninstall that package."
        ) from failure
    return _complete(plugin.kind, plugin.name, module)


def _complete(kind: str, name: str, module: Any) -> Any:
    lacking = [need for need in _NEEDS[kind] if not hasattr(module, need)]
    if lacking:
        raise PluginError(
            f'The {kind} "{name}" lacks {" and ".join(lacking)}; '
            f"a plugin of this kind must have {', '.join(_NEEDS[kind])}."
        )
    return module
