"""Plugins of the four kinds: outlines, terms, eigensolvers and products."""

from membrane.plugins.registry import (
    GROUPS,
    Plugin,
    describe,
    find,
    load,
    names,
    package_of,
    registered,
)

__all__ = ["GROUPS", "Plugin", "describe", "find", "load", "names", "package_of", "registered"]
