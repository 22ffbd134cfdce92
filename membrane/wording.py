"""How values, lists of names and near names are worded in messages."""

from __future__ import annotations

import json
from collections.abc import Iterable, Mapping, Sequence
from difflib import get_close_matches
from typing import Any

_LONGEST = 60


def shown(value: Any) -> str:
    """A value as the study file would write it, cut short where it is long."""
    if isinstance(value, Mapping):
        return "a table"
    if isinstance(value, Sequence) and not isinstance(value, str):
        return f"a list of {len(value)}"
    written = isinstance(value, str | bool)
    text = json.dumps(value, ensure_ascii=False) if written else str(value)
    return text if len(text) <= _LONGEST else text[:_LONGEST] + "…"


def nearest(name: str, known: Iterable[str]) -> str:
    """'; did you mean "disc"?' where a known name is near, else a full stop."""
    by_lower = {other.lower(): other for other in known}
    near = get_close_matches(name.lower(), by_lower, n=1, cutoff=0.6)
    return f'; did you mean "{by_lower[near[0]]}"?' if near else "."


def listed(names: Iterable[str], nothing: str = "none") -> str:
    """Names in the order given, with commas between."""
    return ", ".join(names) or nothing


def either(names: Iterable[str]) -> str:
    """'"fixed", "free" or "elastic"'."""
    *others, last = [shown(name) for name in names]
    return f"{', '.join(others)} or {last}" if others else last


def unknown(kind: str, name: str, known: Sequence[str]) -> str:
    """The sentence for a name that is not among the known ones of its kind."""
    hint = nearest(name, known)
    named = hint if hint != "." else f"; known are {listed(known)}."
    return f"there is no {kind} {shown(name)}{named}"
