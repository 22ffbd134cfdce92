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

from scripts.benchmarks.picture import draw
from scripts.benchmarks.tables import Row, table_text

FILE = Path(__file__).with_name("results.json")
REPORT = FILE.with_suffix(".md")
PACKAGES = ("numpy", "scipy", "scikit-fem", "cvxopt", "gmsh", "ngsolve")


def kept() -> dict[str, Any]:
    """Section -> its last results."""
    return json.loads(FILE.read_text()) if FILE.exists() else {}


def keep(section: str, tables: Mapping[str, Sequence[Row]]) -> None:
    """Replace a section's results."""
    entry = {"date": str(date.today()), "machine": _machine(), "versions": _versions()}
    every = {**kept(), section: {**entry, "tables": dict(tables)}}
    FILE.write_text(json.dumps(every, indent=1) + "\n")
    REPORT.write_text(report(every))
    if "accuracy" in every:
        draw(every["accuracy"]["tables"]["curves"])


def report(every: Mapping[str, Any]) -> str:
    """All tables but the curves, which are drawn, as Markdown."""
    lines = ["# Last results of scripts/bench", "", "![Accuracy against time](results.svg)"]
    for name, entry in sorted(every.items()):
        versions = ", ".join(f"{package} {number}" for package, number in entry["versions"].items())
        lines += ["", f"## {name}", "", f"{entry['date']}, {entry['machine']}; {versions}."]
        for title, rows in entry["tables"].items():
            if title != "curves":
                lines += ["", f"{title}:", "", table_text(rows)]
    return "\n".join(lines) + "\n"


def _versions() -> dict[str, str]:
    return {"python": platform.python_version(), **{name: version(name) for name in PACKAGES}}


def _machine() -> str:
    return f"{_processor()}, {os.cpu_count()} cores, {platform.system()}, one thread used"


def _processor() -> str:
    cpuinfo = Path("/proc/cpuinfo")
    lines = cpuinfo.read_text().splitlines() if cpuinfo.exists() else []
    names = [line.split(":")[1].strip() for line in lines if line.startswith("model name")]
    return names[0] if names else platform.machine()
