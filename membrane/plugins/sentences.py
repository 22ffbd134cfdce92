"""From a pydantic error to a key's path and a sentence."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from membrane.wording import either, shown

_EXPECTED = {
    "string_type": "expected a text",
    "int_type": "expected a whole number",
    "int_from_float": "expected a whole number",
    "float_type": "expected a number",
    "bool_type": "expected true or false",
    "tuple_type": "expected a list",
    "list_type": "expected a list",
    "dict_type": "expected a table",
    "dataclass_type": "expected a table",
}


def sentence(key: str, error: Mapping[str, Any]) -> tuple[str, str]:
    """Full path below ``key`` and one sentence, from an item of ``ValidationError.errors()``."""
    inner = getattr(error.get("ctx", {}).get("error"), "key", "")
    return path(key, (*error["loc"], inner) if inner else error["loc"]), _sentence(error)


def path(key: str, inner: tuple[int | str, ...]) -> str:
    """``corners`` and (2, 0) give ``corners[3][1]``: places are counted from 1."""
    steps = (f"[{step + 1}]" if isinstance(step, int) else f".{step}" for step in inner)
    return key + "".join(steps)


def _sentence(error: Mapping[str, Any]) -> str:
    kind, given, context = error["type"], error["input"], error.get("ctx", {})
    if kind == "value_error":
        return str(context["error"])
    if kind == "enum" or kind == "literal_error":
        return f"expected {_choices(context['expected'])}, got {shown(given)}."
    if kind == "missing":
        return "is missing; give it a value."
    if kind == "too_long":
        return f"expected {context['max_length']} entries, got {context['actual_length']}."
    if kind == "too_short":
        least, had = context["min_length"], context["actual_length"]
        return f"expected at least {least} entries, got {had}."
    expected = _EXPECTED.get(kind) or _worded(error["msg"])
    return f"{expected}, got {shown(given)}."


def _choices(expected: str) -> str:
    """Pydantic's "'a', 'b' or 'c'" in double quotes."""
    return either(part for part in expected.split("'")[1::2])


def _worded(message: str) -> str:
    """Pydantic's "Input should be ..." as "expected ..."."""
    worded = message.removeprefix("Input should be ")
    return f"expected {worded}" if worded != message else message[0].lower() + message[1:]
