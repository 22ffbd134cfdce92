"""Plugins of the four kinds: outlines, terms, eigensolvers and products."""

from membrane.plugins.registry import (
    GROUPS,
    OWN_PACKAGE,
    Plugin,
    describe,
    find,
    load,
    names,
    package_of,
    registered,
)

__all__ = [
    "GROUPS",
    "OWN_PACKAGE",
    "Plugin",
    "describe",
    "find",
    "load",
    "names",
    "package_of",
    "registered",
]
