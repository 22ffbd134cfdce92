"""Time and memory against size, each size in a process of its own."""

from __future__ import annotations

import json
import resource
import subprocess
import sys
from time import process_time

import numpy as np

from membrane.mesh import Resolution
from membrane.pencil import assemble
from scripts.benchmarks import ours
from scripts.benchmarks.heads import disc
from scripts.benchmarks.tables import Row

MODES = 20
DEGREE = 8
UNKNOWNS = (8_000, 16_000, 32_000, 64_000, 128_000, 256_000, 500_000)
QUICK = 3
"""How many of the sizes a quick run measures."""

EXPONENT, MEMORY = 1.25, 8.0
"""The most allowed: power of the unknowns, and GiB at the largest size."""

MEAN = 378.0
"""Unknowns of a mesh times the square of its phase, over the square of the degree."""


def measure(quick: bool) -> dict[str, list[Row]]:
    """One row a size, and the power of the unknowns that the time grows with."""
    rows = [_apart(size) for size in UNKNOWNS[: QUICK if quick else None]]
    sizes, seconds = (np.log([row[key] for row in rows]) for key in ("unknowns", "all, s"))
    fit: Row = {
        "exponent": float(np.polyfit(sizes, seconds, 1)[0]),
        "at most": EXPONENT,
        "GiB": rows[-1]["GiB"],
        "GiB at most": MEMORY,
    }
    return {"growth": rows, "growth with the unknowns": [fit]}


def _apart(unknowns: int) -> Row:
    command = [sys.executable, "-m", "scripts.benchmarks.growth", str(unknowns)]
    done = subprocess.run(command, check=True, capture_output=True, text=True)
    return json.loads(done.stdout)  # type: ignore[no-any-return]


def _row(unknowns: int) -> Row:
    phase = DEGREE * float(np.sqrt(MEAN / unknowns))
    start = process_time()
    membrane, mesh = ours.meshed(disc().keys, MODES, Resolution(DEGREE, phase, 1e-8))
    meshed = process_time()
    pencil = assemble(membrane, mesh, DEGREE)
    ours.summed_up(pencil)
    assembled = process_time()
    ours.modes(pencil, MODES)
    end = process_time()
    return {
        "unknowns": pencil.K.shape[0],
        "mesh, s": meshed - start,
        "assembly, s": assembled - meshed,
        "eigen stage, s": end - assembled,
        "all, s": end - start,
        "GiB": resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 2**20,
    }


if __name__ == "__main__":
    print(json.dumps(_row(int(sys.argv[1]))))
