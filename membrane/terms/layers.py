"""Which layer rules a region, where patches lie over the head and over each other."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from membrane.records.outline import HEAD, Outline
from membrane.records.study import Patch, Study


def ruled_regions(
    study: Study, outline: Outline, replaces: Callable[[Patch], bool]
) -> dict[str, tuple[str, ...]]:
    """Layer key -> names of the regions whose property that layer sets.

    The topmost patch that ``replaces`` the property rules; else the head does. Layers that
    rule nowhere are left out. Keys are "head" and "patches.<name>".
    """
    patches = {patch.name: patch for patch in study.patches}
    ruled: dict[str, list[str]] = {}
    for region in outline.regions:
        ruling = [name for name in region.patches if replaces(patches[name])]
        key = f"patches.{ruling[-1]}" if ruling else HEAD
        ruled.setdefault(key, []).append(region.name)
    return {key: tuple(names) for key, names in ruled.items()}


def layer(study: Study, key: str) -> Any:
    """The head or the patch that a layer key names."""
    if key == HEAD:
        return study.head
    name = key.removeprefix("patches.")
    return next(patch for patch in study.patches if patch.name == name)
