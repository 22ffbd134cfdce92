"""Solving a study with defaults, and how far off its eigenvalues are."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

import numpy as np
from scipy.optimize import brentq

from membrane import run, study_from
from membrane.records.arrays import Floats

HEAD = {"areal_density": 1.0, "tension": 1.0}
DISC = {"shape": "disc", "diameter": 2.0}
FREE = {"support": "free"}


def eigenvalues(outline: dict[str, Any], **more: Any) -> Floats:
    """The twenty lowest, of a study with no mesh or degree option."""
    spectrum = run(study_from({"outline": outline, "head": HEAD, **more}))
    assert spectrum.complete
    assert spectrum.mesh_facts["accuracy_met"]
    return spectrum.modes.eigenvalues[:20]


def error(found: Floats, exact: Sequence[float]) -> float:
    """Largest relative error; absolute where the exact value is 0."""
    known = np.sort(np.array(exact))[: len(found)]
    assert len(known) == len(found) >= 20
    return float((np.abs(found - known) / np.where(known > 0.0, known, 1.0)).max())


def roots(f: Callable[[Any], Any], low: float, high: float, samples: int = 6000) -> list[float]:
    """All roots of a smooth function that no sampling step holds two of."""
    at = np.linspace(low, high, samples)
    values = f(at)
    changes = np.nonzero(np.sign(values[1:]) != np.sign(values[:-1]))[0]
    return [brentq(f, at[k], at[k + 1], xtol=1e-14, rtol=1e-14) for k in changes]
