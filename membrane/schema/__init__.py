"""The JSON schemas of what a run writes, by name and version."""

from __future__ import annotations

import json
from importlib.resources import files
from typing import Any

SUMMARY = "summary-1"
"""The schema of summary.json; a new number where a reader of the old one would fail."""


def load(name: str) -> dict[str, Any]:
    """A schema (JSON Schema, draft 2020-12) by its name, such as ``SUMMARY``."""
    text = files(__name__).joinpath(f"{name}.json").read_text(encoding="utf-8")
    schema: dict[str, Any] = json.loads(text)
    return schema
