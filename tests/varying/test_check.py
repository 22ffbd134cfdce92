"""A varying coefficient is refused where it has no sound number, with the place and how much."""

from __future__ import annotations

import pytest

from membrane.errors import StudyError
from tests import zoo


def refusal(head=None, **more):
    keys = {**zoo.DISC, "head": {**zoo.HEAD, **(head or {})}, **more}
    with pytest.raises(StudyError) as caught, zoo.drawn(keys):
        pass
    return str(caught.value)


def by(formula):
    return {"formula": formula}


def test_a_density_that_is_negative_somewhere():
    said = refusal({"areal_density": {"formula": "1 - 2*r", "unit": "g/m^2"}})
    assert said.startswith("head.areal_density: expected a positive areal density everywhere, got ")
    worst = float(said.split("got ")[1].split()[0])
    assert -1e-3 < worst < -0.9e-3
    assert "kg/m^2 at x = " in said


def test_a_density_that_has_no_value_somewhere():
    said = refusal({"areal_density": by("log(x)")})
    assert "got no finite number at x = -" in said


def test_places_are_told_from_the_outlines_own_origin():
    outline = {**zoo.DISC["outline"], "at": [10.0, 0.0]}
    said = refusal({"areal_density": by("0.9 - x")}, outline=outline)
    assert 0.9 < float(said.split("x = ")[1].split()[0]) < 1.0


def test_a_tension_that_pushes_in_one_direction():
    said = refusal({"tension": {"xx": 1.0, "xy": by("2*x"), "yy": 1.0}})
    assert said.startswith("head.tension: a membrane must be under tension in every direction; at")


@pytest.mark.parametrize("key", ["xx", "yy"])
def test_a_component_that_must_be_positive(key):
    tension = {"xx": 1.0, "xy": 0.0, "yy": 1.0, key: by("x")}
    assert refusal({"tension": tension}).startswith(f"head.tension.{key}: expected a positive")


def test_beds_and_edges():
    assert refusal({"bedding": by("x")}).startswith("head.bedding: expected a bedding of zero or")
    rim = {"support": "elastic", "stiffness": by("cos(theta)")}
    assert refusal(edges={"rim": rim}).startswith("edges.rim.stiffness: expected a stiffness")


def test_an_edge_may_be_elastic_along_a_part_of_it():
    rim = {"support": "elastic", "stiffness": by("max(0, cos(theta))"), "mass": by("0*x")}
    with zoo.drawn({**zoo.DISC, "edges": {"rim": rim}}) as (_, _, _, membrane):
        assert not membrane.moves_rigidly


def test_only_what_is_under_the_patch_counts():
    patch = {"name": "half", "shape": "rectangle", "width": 0.5, "height": 0.5}
    keys = {**zoo.DISC, "patches": [{**patch, "areal_density": by("0.1 + x")}]}
    with zoo.drawn(keys) as (_, _, _, membrane):
        assert len(membrane.contributions) == 3
