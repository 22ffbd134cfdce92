"""The command from its start to its files: wall time of a process that solves a small study."""

from __future__ import annotations

import re
import subprocess
import sys
from collections.abc import Sequence
from pathlib import Path
from statistics import median
from tempfile import TemporaryDirectory
from time import perf_counter

from scripts.benchmarks.tables import Row

STUDY = Path(__file__).parents[1] / "kettledrum_head.toml"
WRITTEN = 'write = ["table", "vtu"]'

WHOLE, AFTER_IMPORTS = 2.0, 0.4
"""Seconds that the process, and what comes after its imports, may take."""

LOADED = """
print(*(name for name, module in list(sys.modules.items())
        if getattr(module, "__spec__", None) and module.__spec__.name == name
        and name != "__main__"))
"""
"""Names what a run has imported."""

RUN = """
import sys
from contextlib import redirect_stdout
from importlib import import_module
from time import perf_counter
for name in sys.argv.pop().split():
    import_module(name)
start = perf_counter()
from membrane.cli import main
try:
    with redirect_stdout(sys.stderr):
        main()
except SystemExit as end:
    assert not end.code
print(perf_counter() - start)
"""
"""Runs the command in a process that has imported some names before the clock starts."""


def measure(quick: bool) -> dict[str, list[Row]]:
    """Medians, the first of each left out: it warms the machine's file cache."""
    times = 3 if quick else 9
    with TemporaryDirectory() as folder:
        study = Path(folder) / "study.toml"
        study.write_text(re.sub(r"write = .*", WRITTEN, STUDY.read_text()))
        arguments = ["run", str(study), "--out", str(Path(folder) / "out")]
        names = _output(RUN + LOADED, arguments, "").splitlines()[-1]
        after = median(float(_output(RUN, arguments, names)) for _ in range(times))
        whole = median([_wall(arguments) for _ in range(times)][1:])
    return {
        "membrane run on the kettledrum head": [
            {"part": "whole process", "wall, s": whole, "at most": WHOLE},
            {"part": "after the imports", "wall, s": after, "at most": AFTER_IMPORTS},
        ]
    }


def _wall(arguments: Sequence[str]) -> float:
    start = perf_counter()
    command = [sys.executable, "-m", "membrane", *arguments]
    subprocess.run(command, check=True, capture_output=True)
    return perf_counter() - start


def _output(code: str, arguments: Sequence[str], names: str) -> str:
    command = [sys.executable, "-c", code, *arguments, names]
    return subprocess.run(command, check=True, capture_output=True, text=True).stdout
