"""What every head obeys, on random heads.

The bars are the estimated intervals of the frequencies themselves, some 1e-4 cents wide.
"""

from __future__ import annotations

from copy import deepcopy
from typing import Any

import numpy as np
import pytest
from hypothesis import Phase, given, reject, settings
from hypothesis import strategies as st

from membrane import plugins, run, study_from
from membrane.errors import OutlineError
from tests.properties.shapes import (
    HEAD,
    MODES,
    Keys,
    heads,
    numbers,
    outlines,
)

pytestmark = pytest.mark.slow

# A failing example is shown as it was found: to make it simpler would take many solves.
few = settings(max_examples=4, phases=[Phase.explicit, Phase.generate])

LENGTHS = ("width", "height", "diameter", "mean_radius", "corners", "at")


class Solved:
    """Frequencies of the wanted modes, Hz, and the low and high ends of their intervals."""

    def __init__(self, keys: Keys) -> None:
        try:
            spectrum = run(study_from(keys))
        except OutlineError:
            reject()  # shapes that leave a sliver between them
        assert spectrum.complete
        rows = [(p.frequency, p.low, p.high) for p in spectrum.partials[: MODES["count"]]]
        self.frequencies, self.low, self.high = np.array(rows).T


def assert_same(one: Solved, other: Solved, factor: float = 1.0) -> None:
    """That the second is the first times a factor, as far as both are known."""
    spread = (one.high - one.low) * factor + other.high - other.low
    assert (np.abs(other.frequencies - factor * one.frequencies) <= spread).all()


def assert_not_lower(one: Solved, other: Solved) -> None:
    """That no mode of the first is lower than the same mode of the second."""
    assert (one.high >= other.low).all()


def parts(keys: Keys) -> list[Keys]:
    """The tables of a study that have a shape."""
    return [keys["outline"], *keys.get("patches", ()), *keys.get("holes", ())]


def changed(keys: Keys, **more: Any) -> Keys:
    return {**deepcopy(keys), **more}


# Scaling


def scaled(keys: Keys, factor: float) -> Keys:
    """The head with all lengths multiplied, on a bed that keeps its share."""
    new = deepcopy(keys)
    for part in parts(new):
        for key in LENGTHS:
            if key in part:
                part[key] = (factor * np.array(part[key])).tolist()
        if "harmonics" in part:
            part["harmonics"] = [[k, factor * a, factor * b] for k, a, b in part["harmonics"]]
    new["head"]["bedding"] /= factor**2
    return new


@few
@given(heads(), st.sampled_from([0.01, 0.178, 30.0]))
def test_frequencies_go_like_one_over_length(keys, factor):
    assert_same(Solved(keys), Solved(scaled(keys, factor)), 1 / factor)


@few
@given(heads(), st.sampled_from([0.262, 7.0]))
def test_frequencies_go_like_one_over_the_root_of_density(keys, factor):
    new = deepcopy(keys)
    new["head"]["areal_density"] *= factor
    for patch in new["patches"]:
        patch["added_density"] *= factor
    assert_same(Solved(keys), Solved(new), factor**-0.5)


@few
@given(heads(), st.sampled_from([0.01, 3000.0]))
def test_frequencies_go_like_the_root_of_tension(keys, factor):
    new = deepcopy(keys)
    new["head"]["tension"] = {k: factor * t for k, t in keys["head"]["tension"].items()}
    new["head"]["bedding"] *= factor
    for patch in new["patches"]:
        if "tension" in patch:
            patch["tension"] *= factor
    assert_same(Solved(keys), Solved(new), factor**0.5)


# Invariance


def turned(keys: Keys, angle: float, at: tuple[float, float]) -> Keys:
    """The whole head turned about the origin and then shifted."""
    new = deepcopy(keys)
    turn = np.array([[np.cos(angle), -np.sin(angle)], [np.sin(angle), np.cos(angle)]])
    for part in parts(new):
        part["at"] = (turn @ part.get("at", [0.0, 0.0]) + at).tolist()
        part["rotate"] = angle
    tension = keys["head"]["tension"]
    T = np.array([[tension["xx"], tension["xy"]], [tension["xy"], tension["yy"]]])
    T = turn @ T @ turn.T
    new["head"]["tension"] = {"xx": T[0, 0], "xy": T[0, 1], "yy": T[1, 1]}
    return new


@few
@given(heads(), numbers(-6.0, 6.0), numbers(-5.0, 5.0))
def test_a_head_sounds_the_same_turned_and_elsewhere(keys, angle, x):
    assert_same(Solved(keys), Solved(turned(keys, angle, (x, 0.7))))


# Monotony


@st.composite
def shrinking(draw: st.DrawFn) -> tuple[Keys, Keys]:
    """An outline and one inside it."""
    less = draw(numbers(0.001, 0.1))
    outline = draw(outlines())
    smaller = deepcopy(outline)
    if outline["shape"] == "polygon":  # star-shaped about the origin
        corner = draw(st.integers(0, len(outline["corners"]) - 1))
        smaller["corners"][corner] = [(1 - less) * x for x in outline["corners"][corner]]
    else:
        smaller["mean_radius" if outline["shape"] == "fourier" else "width"] -= less
    return outline, smaller


@few
@given(shrinking())
def test_a_smaller_outline_is_never_lower(pair):
    outline, smaller = pair
    keys = {"head": HEAD, "modes": MODES}
    whole, part = (Solved({**keys, "outline": one}) for one in (outline, smaller))
    assert_not_lower(part, whole)


@few
@given(heads(), numbers(0.02, 0.1))
def test_a_fixed_hole_never_lowers_a_mode(keys, size):
    hole = {"name": "pin", "shape": "disc", "diameter": size, "at": [0.3, -0.34]}
    assert_not_lower(Solved(changed(keys, holes=[*keys["holes"], hole])), Solved(keys))


SPOT = {"name": "spot", "shape": "disc", "diameter": 0.3, "at": [0.0, 0.05]}


@few
@given(heads(), numbers(0.001, 5.0))
def test_added_density_never_raises_a_mode(keys, density):
    spot = {**SPOT, "added_density": density}
    loaded = Solved(changed(keys, patches=[*keys["patches"], spot]))
    assert_not_lower(Solved(keys), loaded)


@few
@given(heads(), numbers(0.001, 5.0))
def test_a_bed_under_a_patch_never_lowers_a_mode(keys, more):
    bedding = keys["head"]["bedding"] + more
    bedded = Solved(changed(keys, patches=[*keys["patches"], {**SPOT, "bedding": bedding}]))
    assert_not_lower(bedded, Solved(keys))


# Edges


def held(keys: Keys, **edge: Any) -> Keys:
    """The head with all edges of its outline held in one way."""
    options = {name: value for name, value in keys["outline"].items() if name != "shape"}
    plugin = plugins.load("outline", keys["outline"]["shape"])
    return changed(keys, edges=dict.fromkeys(plugin.edges(plugin.Options(**options)), edge))


@few
@given(heads(), numbers(0.01, 100.0))
def test_an_elastic_edge_lies_between_free_and_fixed(keys, stiffness):
    free, fixed = (Solved(held(keys, support=support)) for support in ("free", "fixed"))
    elastic = Solved(held(keys, support="elastic", stiffness=stiffness))
    assert_not_lower(elastic, free)
    assert_not_lower(fixed, elastic)
    assert (fixed.low > free.high).all()


@few
@given(heads(), numbers(0.01, 2.0))
def test_mass_on_a_free_edge_never_raises_a_mode(keys, mass):
    bare, loaded = (Solved(held(keys, support="free", mass=m)) for m in (0.0, mass))
    assert_not_lower(bare, loaded)


@few
@given(heads(), numbers(0.1, 20.0), st.sampled_from(["fixed", "free"]))
def test_a_bed_shifts_every_eigenvalue_by_the_same(keys, bedding, support):
    """By bedding over density, exactly, where both are the same all over the head."""
    even = held(keys, support=support)
    even["patches"] = [patch for patch in even["patches"] if "tension" in patch]
    for patch in even["patches"]:
        del patch["added_density"]
    bedded = deepcopy(even)
    bedded["head"]["bedding"] += bedding
    before, after = ((2 * np.pi * Solved(k).frequencies) ** 2 for k in (even, bedded))
    shift = bedding / even["head"]["areal_density"]
    np.testing.assert_allclose(after - before, shift, atol=1e-9 * after.max())
