"""Names of sweeps and points by their content, so that nothing is mixed up and nothing redone."""

from __future__ import annotations

import json
from collections.abc import Iterator, Mapping
from dataclasses import asdict
from hashlib import sha256
from pathlib import Path
from typing import Any

import membrane
from membrane.records.sweep import Sweep
from membrane.sweep.points import Point

_WITHOUT_EFFECT = ("title", "products", "sweep")
_FILES = ("script", "csv", "path")


def study_name(source: Mapping[str, Any]) -> str:
    """The name of what a sweep starts from: the study, its files and this program's version.

    source : the study's plain data in SI numbers
    """
    content = {key: value for key, value in source.items() if key not in _WITHOUT_EFFECT}
    files = {path: _digest(Path(path)) for path in sorted(set(_files(content)))}
    return _name([membrane.__version__, content, files])


def sweep_name(study: str, sweep: Sweep) -> str:
    """The name of a sweep over the study of that name."""
    return _name([study, asdict(sweep)])


def point_name(study: str, sweep: Sweep, point: Point) -> str:
    """The name of a point: the same in every sweep over one study that asks the same of it."""
    pairs = ((axis.key, value) for axis, value in zip(sweep.axes, point.values, strict=True))
    return _name([study, sweep.bracket, sorted(pairs)])


def _name(content: Any) -> str:
    return sha256(json.dumps(content, sort_keys=True).encode()).hexdigest()


def _files(value: Any) -> Iterator[str]:
    """Paths of files that the study is made of."""
    if isinstance(value, Mapping):
        for key, inner in value.items():
            if key in _FILES and isinstance(inner, str) and Path(inner).is_file():
                yield inner
            yield from _files(inner)
    elif isinstance(value, list | tuple):
        for inner in value:
            yield from _files(inner)


def _digest(file: Path) -> str:
    return sha256(file.read_bytes()).hexdigest()
