"""The heads that are measured, with their exact eigenvalues."""

from __future__ import annotations

import json
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq
from scipy.special import jn_zeros, jv, jvp, yv, yvp

Floats = NDArray[np.float64]

SPECTRA = Path(__file__).parents[2] / "tests" / "reference" / "spectra.json"
UNIT = {"areal_density": 1.0, "tension": 1.0}
DISC_OUTLINE = {"shape": "disc", "diameter": 2.0}
L_CORNERS = [[0, 0], [1, 0], [1, 1], [-1, 1], [-1, -1], [0, -1]]
CENTRE, DENSITY = 0.4, 9.765625
"""Radius and density of the heavy centre; the head's are 1."""

MOST = 60
"""Modes whose exact values are known of the two round heads."""


@dataclass(frozen=True)
class Head:
    """A head of unit tension and density, fixed all around.

    keys : of its study
    exact : its lowest eigenvalues in rising order, multiple ones repeated
    """

    name: str
    keys: dict[str, Any]
    exact: Floats


@cache
def disc() -> Head:
    """Eigenvalues are squares of the zeros of J_m (DLMF 10.21)."""
    zeros = [(m, jn_zeros(m, 20)) for m in range(20)]
    return Head("disc", {"outline": DISC_OUTLINE, "head": UNIT}, _round(zeros))


@cache
def l_shape() -> Head:
    """Three unit squares; there is no closed form, so values and source are those of SPECTRA."""
    known = json.loads(SPECTRA.read_text())["cases"]["lshape_fixed"]["values"]
    keys = {"outline": {"shape": "polygon", "corners": L_CORNERS}, "head": UNIT}
    return Head("L-shape", keys, np.array(known, dtype=float))


@cache
def heavy_centre() -> Head:
    """J_m within, a mix of J_m and Y_m that vanishes at the rim outside; both meet smoothly."""
    zeros = [(m, _zeros_of_heavy_centre(m)) for m in range(20)]
    patch = {"name": "centre", "shape": "disc", "diameter": 2 * CENTRE, "areal_density": DENSITY}
    keys = {"outline": DISC_OUTLINE, "head": UNIT, "patches": [patch]}
    return Head("heavy centre", keys, _round(zeros))


def _round(zeros: list[tuple[int, Any]]) -> Floats:
    """Eigenvalues of a round head: two modes for each wave number with diameters."""
    numbers = [k for m, of_m in zeros for k in of_m for _ in range(2 if m else 1)]
    return np.sort(np.array(numbers) ** 2)[:MOST]


def _mismatch(k: Any, m: int) -> Any:
    """The determinant of both solutions' values and slopes at the border of the centre."""
    inner, slow = k * np.sqrt(DENSITY) * CENTRE, np.sqrt(DENSITY)
    at = k * CENTRE
    outer = jv(m, at) * yv(m, k) - yv(m, at) * jv(m, k)
    slope = jvp(m, at) * yv(m, k) - yvp(m, at) * jv(m, k)
    return jv(m, inner) * slope - slow * jvp(m, inner) * outer


def _zeros_of_heavy_centre(m: int) -> list[float]:
    start = max(0.2, m / (CENTRE * np.sqrt(DENSITY)))  # no wave turns faster than its medium
    at = np.linspace(start, 12.0, 600)
    with np.errstate(all="ignore"):
        values = _mismatch(at, m)
    sound = np.isfinite(values[:-1]) & np.isfinite(values[1:])
    changes = np.nonzero(sound & (values[:-1] * values[1:] < 0))[0]
    return [brentq(_mismatch, at[c], at[c + 1], args=(m,), xtol=1e-15) for c in changes]


HEADS = {"disc": disc, "L-shape": l_shape, "heavy centre": heavy_centre}
