"""As much of JSON Schema as our schemas use; any other keyword is an error."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import Any

IS: dict[str, Callable[[Any], bool]] = {
    "object": lambda value: isinstance(value, dict),
    "array": lambda value: isinstance(value, list),
    "string": lambda value: isinstance(value, str),
    "boolean": lambda value: isinstance(value, bool),
    "null": lambda value: value is None,
    "integer": lambda value: isinstance(value, int) and not isinstance(value, bool),
    "number": lambda value: isinstance(value, int | float) and not isinstance(value, bool),
}
NOTES = {"$schema", "title", "description"}


def complaints(schema: Any, value: Any, path: str = "$") -> list[str]:
    """What is wrong with ``value``, each with its path."""
    found: list[str] = []
    for keyword, demand in schema.items():
        if keyword not in NOTES:
            found += RULES[keyword](demand, value, path, schema)
    return found


def wrong(is_wrong: bool, path: str, keyword: str, demand: Any) -> list[str]:
    return [f"{path}: {keyword} {demand}"] if is_wrong else []


def check_type(demand: Any, value: Any, path: str, schema: Any) -> list[str]:
    kinds = [demand] if isinstance(demand, str) else demand
    return wrong(not any(IS[kind](value) for kind in kinds), path, "type", demand)


def check_required(demand: Any, value: Any, path: str, schema: Any) -> list[str]:
    return [f"{path}.{key}: required" for key in demand if key not in value]


def check_properties(demand: Any, value: Any, path: str, schema: Any) -> list[str]:
    known = [key for key in demand if key in value]
    return [c for key in known for c in complaints(demand[key], value[key], f"{path}.{key}")]


def check_others(demand: Any, value: Any, path: str, schema: Any) -> list[str]:
    others = [key for key in value if key not in schema.get("properties", {})]
    return [c for key in others for c in complaints(demand, value[key], f"{path}.{key}")]


def check_items(demand: Any, value: Any, path: str, schema: Any) -> list[str]:
    return [c for i, item in enumerate(value) for c in complaints(demand, item, f"{path}[{i}]")]


RULES: dict[str, Callable[[Any, Any, str, Any], list[str]]] = {
    "type": check_type,
    "required": check_required,
    "properties": check_properties,
    "additionalProperties": check_others,
    "items": check_items,
    "const": lambda d, v, path, _: wrong(v != d, path, "const", d),
    "enum": lambda d, v, path, _: wrong(v not in d, path, "enum", d),
    "minItems": lambda d, v, path, _: wrong(len(v) < d, path, "minItems", d),
    "minimum": lambda d, v, path, _: wrong(IS["number"](v) and v < d, path, "minimum", d),
    "maximum": lambda d, v, path, _: wrong(IS["number"](v) and v > d, path, "maximum", d),
    "pattern": lambda d, v, path, _: wrong(
        isinstance(v, str) and not re.search(d, v), path, "pattern", d
    ),
}
