"""The last results, kept in a file with the machine and the versions they are from."""

from __future__ import annotations

import json
import os
import platform
from collections.abc import Mapping, Sequence
from datetime import date
from importlib.metadata import version
from pathlib import Path
from typing import Any

from scripts.benchmarks.tables import Row

FILE = Path(__file__).with_name("results.json")
PACKAGES = ("numpy", "scipy", "scikit-fem", "cvxopt", "gmsh", "ngsolve")


def kept() -> dict[str, Any]:
    """Section -> its last results."""
    return json.loads(FILE.read_text()) if FILE.exists() else {}


def keep(section: str, tables: Mapping[str, Sequence[Row]]) -> None:
    """Replace a section's results."""
    entry = {"date": str(date.today()), "machine": _machine(), "versions": _versions()}
    every = {**kept(), section: {**entry, "tables": dict(tables)}}
    FILE.write_text(json.dumps(every, indent=1) + "\n")


def _versions() -> dict[str, str]:
    return {"python": platform.python_version(), **{name: version(name) for name in PACKAGES}}


def _machine() -> str:
    return f"{_processor()}, {os.cpu_count()} cores, {platform.system()}, one thread used"


def _processor() -> str:
    cpuinfo = Path("/proc/cpuinfo")
    lines = cpuinfo.read_text().splitlines() if cpuinfo.exists() else []
    names = [line.split(":")[1].strip() for line in lines if line.startswith("model name")]
    return names[0] if names else platform.machine()
