"""Brackets hold the exact values; each link, when broken, is noticed or widens them."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from membrane import bounds, run, study_from
from membrane.bounds import bracket, bracketed, gap
from membrane.errors import BracketError
from tests import zoo
from tests.bounds.heads import rectangles, solved

L_FIRST = 9.6397238440219
"""L. N. Trefethen & T. Betcke, Contemp. Math. 412 (2006) 297."""


def holds(found, exact):
    return np.all(found.low <= exact) and np.all(exact <= found.high)


@pytest.mark.slow
@settings(max_examples=25, deadline=None)
@given(rectangles(), st.integers(1, 8), st.sampled_from([1.8, 3.5, 6.0]))
def test_exact_values_of_random_rectangles(rectangle, count, phase):
    membrane, modes = solved(rectangle.keys, count + bounds.SPARE, 4, phase=phase)
    try:
        found = bracketed(membrane, modes, count, 1e-6)
    except BracketError:
        return
    assert found.label == "guaranteed"
    exact = rectangle.exact(count)
    slack = 1e-10 * np.maximum(exact, 1.0)
    assert np.all(found.low <= exact + slack)
    assert np.all(exact - slack <= found.high)


def test_a_missing_mode_is_noticed():
    membrane, modes = solved(zoo.SQUARE, 20)
    fewer = replace(
        modes,
        eigenvalues=np.delete(modes.eigenvalues, 4),
        vectors=np.delete(modes.vectors, 4, axis=1),
    )
    assert bracketed(membrane, modes, 8, 0.01).widest < 0.01
    with pytest.raises(BracketError, match="the count of modes does not close"):
        bracketed(membrane, fewer, 8, 0.01)


def test_a_limit_above_the_next_mode_is_refused(monkeypatch):
    """As if the solver had said that the next mode lies higher than it does."""
    membrane, modes = solved(zoo.SQUARE, 20)
    monkeypatch.setattr(gap, "MOST", 20_000)
    kept = gap.widest_gap(modes.eigenvalues, 8)
    values = modes.eigenvalues.copy()
    values[kept:] *= 3.0
    with pytest.raises(BracketError, match="does not close"):
        bracketed(membrane, replace(modes, eigenvalues=values), 8, 0.01)


def test_spoilt_modes_widen_the_bracket_and_stay_within_it():
    membrane, modes = solved(zoo.L_SHAPE, 20)
    noise = np.random.default_rng(5).standard_normal(modes.vectors.shape)
    noise[np.setdiff1d(np.arange(modes.space.dofs), modes.space.free)] = 0.0
    spoilt = replace(modes, vectors=modes.vectors + 2e-5 * noise)
    clean, wide = (bracketed(membrane, each, 5, 1e-4) for each in (modes, spoilt))
    assert wide.widest > 10 * clean.widest
    assert wide.low[0] <= L_FIRST <= wide.high[0]
    assert np.all(wide.low <= clean.low * (1 + 1e-9))


def test_an_unrefined_corner_widens_the_bracket():
    graded = bracketed(*solved(zoo.L_SHAPE, 20), 5, 1e-6)
    plain = bracketed(*solved(zoo.L_SHAPE, 20, tolerance=1.0), 5, 1e-6)
    assert plain.low[0] <= L_FIRST <= plain.high[0]
    assert graded.low[0] <= L_FIRST <= graded.high[0]
    assert plain.widest > 100 * graded.widest


def test_poor_fluxes_cost_width_and_no_validity(monkeypatch):
    membrane, modes = solved(zoo.SQUARE, 20)
    best = bracket.best_fluxes

    def worse(*arguments):
        return best(*arguments) * 1.001

    good = bracketed(membrane, modes, 5, 0.01)
    monkeypatch.setattr(bracket, "best_fluxes", worse)
    poor = bracketed(membrane, modes, 5, 0.01)
    assert poor.widest > 10 * good.widest
    exact = np.pi**2 * np.array([2.0, 5.0, 5.0, 8.0, 10.0])
    assert holds(good, exact)
    assert holds(poor, exact)


def test_a_mesh_far_from_its_outline_has_a_wide_bracket():
    membrane, modes = solved(zoo.DISC, 20)
    off = replace(modes.space.mesh, departure=1e-4)
    moved = replace(modes, space=replace(modes.space, mesh=off))
    wide = bracketed(membrane, moved, 5, 0.01)
    assert wide.widest > 2 * 3.9 * 1e-4 * 865
    few = np.where(np.arange(off.size) < 3, 1e-4, 0.0)
    local = replace(modes, space=replace(modes.space, mesh=replace(off, departure=few)))
    narrow = bracketed(membrane, local, 5, 0.01)
    assert 0.001 * wide.widest < narrow.widest < 0.3 * wide.widest
    far = replace(modes, space=replace(modes.space, mesh=replace(off, departure=0.1)))
    with pytest.raises(BracketError, match="departs too far"):
        bracketed(membrane, far, 5, 0.01)


def test_a_rigid_mode_is_known_exactly():
    free = {**zoo.DISC, "edges": {"rim": {"support": "free"}}}
    found = bracketed(*solved(free, 20), 3, 0.01)
    assert found.low[0] == found.high[0] == found.cents[0] == 0.0
    assert found.low[1] > 0.0


def test_what_is_not_proven_is_an_estimate_and_says_why():
    varying = {**zoo.DISC, "head": {"areal_density": {"formula": "1 + x"}, "tension": 1.0}}
    spectrum = run(study_from({**varying, "modes": {"count": 2}}))
    assert {partial.bracket for partial in spectrum.partials} == {"estimated"}
    assert "varies from place to place" in spectrum.notes[-1]


def test_no_bracket_on_request():
    spectrum = run(study_from({**zoo.SQUARE, "modes": {"count": 2, "bracket": False}}))
    assert {partial.bracket for partial in spectrum.partials} == {"estimated"}
    assert "bounds" not in spectrum.timings
    assert not spectrum.notes


@pytest.mark.slow
def test_the_smallest_triangles_at_corners_lose_no_digits():
    """At the tips of free slits and between supports along a bent rim; ever smaller ones."""
    slit = {"name": "cut", "points": [[0.0, -0.4], [0.3, -0.3]], "support": "free"}
    lugs = {"name": "lugs", "edge": "rim", "from": "-5 deg", "to": "5 deg", "repeat": 2}
    edges = {"rim": {"support": "free"}}
    keys = {**zoo.DISC, "slits": [slit], "edge_parts": [lugs], "edges": edges}
    for accuracy in (1e-2, 1e-4):
        spectrum = run(study_from({**keys, "modes": {"count": 6, "accuracy": accuracy}}))
        assert {partial.bracket for partial in spectrum.partials} == {"guaranteed"}
        assert spectrum.mesh_facts["accuracy_met"]
