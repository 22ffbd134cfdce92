"""Heads whose numbers are swept, and full solves of them."""

from __future__ import annotations

from typing import Any

import numpy as np

from membrane.eigensolvers import shift_invert
from membrane.modes import extract
from membrane.pencil import assemble
from membrane.records.pencil import Pencil
from membrane.reduced import Solved
from tests import zoo

LOADED: dict[str, Any] = {
    **zoo.DISC,
    "head": {"areal_density": 1.0, "tension": {"along": 1.0, "across": 1.0}},
    "patches": [{"name": "paste", "shape": "disc", "diameter": 0.9, "areal_density": 1.0}],
    "edges": {"rim": {"support": "elastic", "stiffness": 100.0}},
}


def pencil(keys: dict[str, Any], degree: int = 4) -> Pencil:
    ready = zoo.prepared(keys, degree, phase=5.0, tolerance=1e-4)
    return assemble(ready.membrane, ready.mesh, degree)


def full(at: Pencil, count: int) -> Solved:
    """A full solve, said to be right to 0.001 cent."""
    modes = extract(at, count, shift_invert.solve, 0.001)
    return Solved(modes.eigenvalues, modes.vectors[at.space.free], np.full(count, 0.001))


def spread(low: list[float], high: list[float], count: int, seed: int = 1) -> Any:
    """Points (count, n_keys), random and even in the logarithm."""
    even = np.random.default_rng(seed).random((count, len(low)))
    return np.exp(np.log(low) + (np.log(high) - np.log(low)) * even)
