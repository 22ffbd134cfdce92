"""Kinks of varying coefficients become graded vertices of the mesh."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.mesh.kinks import OF_DENSITY, OF_JUMPING_TENSION, OF_TENSION
from tests import zoo
from tests.mesh.test_corners import found


def by(formula, *kinks):
    return {"formula": formula, "kinks": [list(kink) for kink in kinks]}


def on_disc(head, **more):
    return {**zoo.DISC, "head": {**zoo.HEAD, **head}, **more}


@pytest.mark.parametrize(
    ("head", "exponent"),
    [
        ({"areal_density": by("1 + r")}, OF_DENSITY),
        ({"bedding": by("r")}, OF_DENSITY),
        ({"tension": by("1 + r")}, OF_TENSION),
        ({"tension": by("2 + cos(2*theta)")}, OF_JUMPING_TENSION),
        ({"tension": by("1 + r"), "areal_density": by("1 + r")}, OF_TENSION),
    ],
)
def test_the_origin_of_a_formula_that_is_not_smooth_there(head, exponent):
    assert found(on_disc(head)) == {(0.0, 0.0): exponent}


def test_a_smooth_formula_has_none():
    assert found(on_disc({"areal_density": by("1 + r**2"), "tension": by("2 + x")})) == {}


def test_declared_kinks_inside_on_the_rim_and_off_the_head():
    places = {(0.25, 0.5): OF_DENSITY, (0.0, 1.0): OF_DENSITY}
    assert found(on_disc({"areal_density": by("1 + x", *places, (3.0, 0.0))})) == places


def test_kinks_move_with_the_outline():
    outline = {**zoo.DISC["outline"], "at": [0.5, 0.25]}
    assert found(on_disc({"areal_density": by("1 + r")}, outline=outline)) == {(0.5, 0.25): 1.0}


def test_a_kink_within_a_hole_or_on_a_patch_is_no_trouble():
    hole = {"name": "port", "shape": "disc", "diameter": 0.4}
    assert found(on_disc({"areal_density": by("r")}, holes=[hole])) == {}
    patch = {"name": "pad", "shape": "disc", "diameter": 0.5, "at": [0.25, 0.0]}
    patches = [{**patch, "added_density": by("1 + y")}]
    assert found(on_disc({"areal_density": by("1 + r")}, patches=patches)) == {(0.0, 0.0): 1.0}


def test_the_apex_of_a_sector_keeps_the_weaker_exponent():
    outline = {"shape": "sector", "radius": 1.0, "angle": "270 deg"}
    singular = found({"outline": outline, "head": {**zoo.HEAD, "areal_density": by("r")}})
    assert abs(singular[0.0, 0.0] - 2 / 3) < 1e-9


def test_whole_corners_of_a_varying_head_are_graded_weakly():
    square = {**zoo.SQUARE, "head": {**zoo.HEAD, "tension": by("1 + x*y")}}
    assert set(np.round(list(found(square).values()), 9)) == {4.0}
    square = {**zoo.SQUARE, "head": {**zoo.HEAD, "areal_density": by("1 + x*y")}}
    assert set(np.round(list(found(square).values()), 9)) == {5.0}
