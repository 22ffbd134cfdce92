"""A pencil at other numbers is the one that is assembled for them."""

from copy import deepcopy

import pytest

from membrane.errors import SolveError
from membrane.pencil import assemble
from tests import zoo

WOVEN = {
    **zoo.DISC,
    "head": {"areal_density": 1.0, "tension": {"along": 2.0, "across": 3.0, "angle": 0.4}},
    "patches": [{"name": "paste", "shape": "disc", "diameter": 0.8, "areal_density": 4.0}],
    "edges": {"rim": {"support": "elastic", "stiffness": 5.0, "mass": 0.5}},
}
OTHER = {
    "head.tension.across": 7.0,
    "patches.paste.areal_density": 0.5,
    "edges.rim.stiffness": 50.0,
}


def other_study():
    keys = deepcopy(WOVEN)
    keys["head"]["tension"]["across"] = 7.0
    keys["patches"][0]["areal_density"] = 0.5
    keys["edges"]["rim"]["stiffness"] = 50.0
    return keys


@pytest.fixture(scope="module")
def woven():
    return zoo.prepared(WOVEN, degree=3)


@pytest.mark.parametrize("side", ["K", "M"])
def test_other_numbers_are_those_of_a_new_assembly(woven, side):
    moved = assemble(woven.membrane, woven.mesh, 3).at(OTHER)
    with zoo.drawn(other_study()) as (_, _, _, membrane):
        anew = assemble(membrane, woven.mesh, 3)
    expected = getattr(anew, side)
    assert abs(getattr(moved, side) - expected).max() <= 1e-14 * abs(expected).max()


def test_numbers_can_be_moved_again_and_back(woven):
    pencil = assemble(woven.membrane, woven.mesh, 3)
    back = (
        pencil.at(OTHER)
        .at({key: 1.0 for key in OTHER})
        .at({part.key: part.scale for part in (*pencil.stiffness, *pencil.mass)})
    )
    assert abs(back.K - pencil.K).max() <= 1e-14 * abs(pencil.K).max()
    assert back.pattern is pencil.at(OTHER).pattern


def test_a_key_that_scales_nothing_is_refused(woven):
    pencil = assemble(woven.membrane, woven.mesh, 3)
    with pytest.raises(SolveError, match=r"scaled by outline.diameter"):
        pencil.at({"outline.diameter": 1.0})


def test_without_its_springs_the_head_moves_rigidly(woven):
    pencil = assemble(woven.membrane, woven.mesh, 3)
    assert not pencil.moves_rigidly
    assert pencil.at({"edges.rim.stiffness": 0.0}).moves_rigidly


def test_a_held_head_never_moves_rigidly():
    ready = zoo.prepared(zoo.DISC, degree=3)
    assert not assemble(ready.membrane, ready.mesh, 3).at({"head.tension": 2.0}).moves_rigidly
