"""summary.json: the whole answer for other programs, by a versioned schema."""

from __future__ import annotations

import json
from collections.abc import Mapping
from dataclasses import dataclass
from importlib.metadata import PackageNotFoundError, version
from pathlib import Path
from platform import python_version
from typing import Any

from membrane.errors import OutputError
from membrane.products.caution import CAUTION, NOT_COVERED
from membrane.products.rows import row
from membrane.records.spectrum import Spectrum
from membrane.schema import SUMMARY

FILE = "summary.json"
PACKAGES = ("membrane", "numpy", "scipy", "scikit-fem", "gmsh")


@dataclass(frozen=True)
class Options:
    """None: the schema fixes what is written."""


def write(spectrum: Spectrum, folder: Path, options: Options) -> None:
    """Write summary.json as the schema shipped with this version says."""
    files = sorted({FILE, *(path.name for path in folder.iterdir())})
    found = {**contents(spectrum), "files": files}
    text = json.dumps(found, indent=2, allow_nan=False, ensure_ascii=False)
    (folder / FILE).write_text(text + "\n", encoding="utf-8")


def contents(spectrum: Spectrum) -> dict[str, Any]:
    """What summary.json holds, as plain data, but for the names of the files."""
    study = spectrum.study
    return {
        "schema": SUMMARY,
        "study": {**study.source, "title": study.title},
        "software": _software(),
        "mesh": {**_facts(spectrum.mesh_facts), "regions": list(_regions(spectrum))},
        "timings": dict(spectrum.timings),
        "complete": bool(spectrum.complete),
        "notes": [*spectrum.notes, NOT_COVERED],
        "caution": CAUTION,
        "modes": [row(partial) for partial in spectrum.partials],
    }


def read(folder: Path) -> dict[str, Any]:
    """The summary that a run left in ``folder``.

    Raises OutputError where there is none, or one that this version cannot read.
    """
    path = folder / FILE
    try:
        found: dict[str, Any] = json.loads(path.read_text(encoding="utf-8"))
    except FileNotFoundError:
        raise OutputError(f"{path} is missing; run the study with --out {folder} first.") from None
    except ValueError as failure:
        raise OutputError(f"{path} is not JSON ({failure}); run the study again.") from failure
    written = found.get("schema") if isinstance(found, dict) else None
    if written != SUMMARY:
        raise OutputError(
            f"{path} has the schema {written!r} and this version reads {SUMMARY!r}; "
            "run the study again."
        )
    return found


def _software() -> dict[str, str | None]:
    """Versions by name, read without importing the packages."""
    return {"python": python_version(), **{name: _version(name) for name in PACKAGES}}


def _version(name: str) -> str | None:
    try:
        return version(name)
    except PackageNotFoundError:
        return None


def _facts(facts: Mapping[str, Any]) -> dict[str, Any]:
    """The facts with numpy's numbers turned into Python's own."""
    return {name: getattr(fact, "item", lambda fact=fact: fact)() for name, fact in facts.items()}


def _regions(spectrum: Spectrum) -> tuple[str, ...]:
    """Names of the regions; modes.vtu counts them from 0."""
    return spectrum.modes.space.mesh.region_names
