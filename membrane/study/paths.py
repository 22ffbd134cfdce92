"""Paths of files that coefficients come from, made whole before anything is read."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any

from membrane.varying import is_varying


def located(keys: Mapping[str, Any], base: Path) -> dict[str, Any]:
    """The study's keys, with whole paths in every {csv = …} and {function = …}.

    base : the folder that paths start from
    A function without a script of its own is looked for in the outline's.
    """
    outline = keys.get("outline")
    script = outline.get("script") if isinstance(outline, Mapping) else None
    return {key: _located(value, base, script) for key, value in keys.items()}


def _located(value: Any, base: Path, script: Any) -> Any:
    if is_varying(value):
        return _with_paths(value, base, script)
    if isinstance(value, Mapping):
        return {key: _located(inner, base, script) for key, inner in value.items()}
    if isinstance(value, list | tuple):
        return [_located(inner, base, script) for inner in value]
    return value


def _with_paths(value: Mapping[str, Any], base: Path, script: Any) -> dict[str, Any]:
    found = dict(value)
    if "function" in found and script is not None:
        found.setdefault("script", script)
    for key in ("csv", "script"):
        if isinstance(found.get(key), str):
            found[key] = str((base / Path(found[key]).expanduser()).resolve())
    return found
