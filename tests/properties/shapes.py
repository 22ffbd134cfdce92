"""Random heads: outlines of every kind, with patches and holes well inside them."""

from __future__ import annotations

from typing import Any

import numpy as np
from hypothesis import strategies as st

Keys = dict[str, Any]

MODES = {"count": 6}
HEAD = {"areal_density": 1.0, "tension": 1.0}


def numbers(low: float, high: float) -> st.SearchStrategy[float]:
    """Numbers of three digits, so that a failing example is readable."""
    return st.integers(round(1e3 * low), round(1e3 * high)).map(lambda n: n / 1e3)


@st.composite
def fouriers(draw: st.DrawFn) -> Keys:
    harmonics = [[k, draw(numbers(-0.3, 0.3)) / k, draw(numbers(-0.3, 0.3)) / k] for k in (2, 3)]
    return {"shape": "fourier", "mean_radius": 1.0, "harmonics": harmonics}


@st.composite
def polygons(draw: st.DrawFn) -> Keys:
    """A corner in each of five to seven equal sectors: never crossing, often reentrant."""
    count = draw(st.integers(5, 7))
    turns = [(k + draw(numbers(0.0, 0.5))) * 2 * np.pi / count for k in range(count)]
    radii = [draw(numbers(0.9, 1.4)) for _ in range(count)]
    corners = [
        [float(r * np.cos(t)), float(r * np.sin(t))] for t, r in zip(turns, radii, strict=True)
    ]
    return {"shape": "polygon", "corners": corners}


@st.composite
def ellipses(draw: st.DrawFn) -> Keys:
    return {"shape": "ellipse", "width": draw(numbers(1.0, 3.0)), "height": draw(numbers(1.0, 3.0))}


def outlines() -> st.SearchStrategy[Keys]:
    return st.one_of(fouriers(), polygons(), ellipses())


@st.composite
def patches(draw: st.DrawFn) -> list[Keys]:
    """Up to two, that may overlap, within 0.4 of the origin; every outline reaches 0.5."""
    found = []
    for name in draw(st.sampled_from([(), ("one",), ("one", "other")])):
        size, away = draw(numbers(0.1, 0.4)), draw(numbers(0.0, 0.15))
        turn = draw(numbers(0.0, 6.0))
        place = {"name": name, "at": [float(away * np.cos(turn)), float(away * np.sin(turn))]}
        load = {"added_density": draw(numbers(0.1, 3.0))}
        if draw(st.booleans()):
            found.append({**place, **load, "shape": "disc", "diameter": size})
            found[-1]["tension"] = draw(numbers(0.5, 2.0))
        else:
            box = {"shape": "rectangle", "width": size / 2, "height": size / 3}
            found.append({**place, **load, **box})
    return found


@st.composite
def holes(draw: st.DrawFn) -> list[Keys]:
    """One or none, beside all patches."""
    support = draw(st.sampled_from(["", "fixed", "free"]))
    hole = {"name": "port", "shape": "disc", "diameter": 0.06, "at": [-0.32, 0.32]}
    return [{**hole, "support": support}] if support else []


@st.composite
def heads(draw: st.DrawFn) -> Keys:
    """A study in units of about 1: outline, head, patches, a hole."""
    tension = {"xx": draw(numbers(0.5, 2.0)), "xy": draw(numbers(-0.3, 0.3)), "yy": 1.0}
    bedding = draw(st.sampled_from([0.0, 2.0]))
    return {
        "outline": draw(outlines()),
        "head": {"areal_density": draw(numbers(0.5, 2.0)), "tension": tension, "bedding": bedding},
        "patches": draw(patches()),
        "holes": draw(holes()),
        "modes": MODES,
    }
