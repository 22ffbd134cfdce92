"""Edges split into parts, against the whole edge and against mode matching."""

from __future__ import annotations

import pytest

from tests.reference.mixed_side import MixedSide
from tests.reference.solve import DISC, FREE, eigenvalues, error

pytestmark = pytest.mark.slow

LUGS = [
    {"edge": "rim", "name": "lugs", "from": "-5 deg", "to": "5 deg", "repeat": 6},
    {"edge": "rim", "name": "gap", "from": "10 deg", "to": "21 deg"},
]


@pytest.mark.parametrize(
    "edge", [FREE, {"support": "fixed"}, {"support": "elastic", "stiffness": 3.0, "mass": 0.2}]
)
def test_parts_held_alike_change_nothing(edge):
    parts = eigenvalues(DISC, edge_parts=LUGS, edges=dict.fromkeys(("rim", "lugs", "gap"), edge))
    assert error(parts, eigenvalues(DISC, edges={"rim": edge})) < 1e-9


@pytest.mark.parametrize("near_origin", ["fixed", "free"])
def test_a_half_free_side(near_origin):
    """All twenty modes, each against the matrix that is singular at the eigenvalue."""
    elsewhere = {"fixed": "free", "free": "fixed"}[near_origin]
    found = eigenvalues(
        {"shape": "rectangle", "width": 1.0, "height": 0.8},
        edge_parts=[{"edge": "left", "name": "low", "from": "0.4 m", "to": "0.8 m"}],
        edges={"low": {"support": near_origin}, "left": {"support": elsewhere}},
    )
    side = MixedSide(1.0, 0.8, near_origin)
    assert error(found, [side.eigenvalue(value) for value in found]) < 1e-9


def test_an_edge_elastic_free_and_fixed_by_turns():
    """No closed form: the shortest study against one that asks for a thousandth of the error."""
    parts = [
        {"edge": "rim", "name": "sprung", "from": "0 deg", "to": "90 deg"},
        {"edge": "rim", "name": "loose", "from": "90 deg", "to": "200 deg"},
    ]
    edges = {"sprung": {"support": "elastic", "stiffness": 4.0, "mass": 0.3}, "loose": FREE}
    keys = {"edge_parts": parts, "edges": edges}
    finer = eigenvalues(DISC, **keys, modes={"accuracy": 1e-5})
    assert error(eigenvalues(DISC, **keys), finer) < 2e-9
