"""A plugin's one-sentence help, taken from its source without running it."""

from __future__ import annotations

import ast
from importlib.util import find_spec
from pathlib import Path

MISSING = "(cannot be read)"


def first_sentence(target: str) -> str:
    """First line of the docstring of the module at a dotted path."""
    source = _file(target.partition(":")[0])
    if source is None:
        return MISSING
    try:
        docstring = ast.get_docstring(ast.parse(source.read_bytes()))
    except (OSError, SyntaxError, ValueError):
        return MISSING
    return (docstring or "(has no docstring)").splitlines()[0]


def _file(module: str) -> Path | None:
    try:
        spec = find_spec(module)  # imports the packages around the module, not itself
    except Exception:  # those packages are a stranger's and may raise anything at all
        return None
    origin = Path(spec.origin) if spec is not None and spec.origin else None
    return origin if origin is not None and origin.suffix == ".py" else None
