"""Full solves: right by a closed form, and the same whichever points came before."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.special import jn_zeros

from membrane import run, study_from
from membrane.sweep.points import Point
from membrane.sweep.solving import FullSolves, units_of
from membrane.sweep.task import task_of

from .demo import KEYS

SWEEP = {
    "axes": [
        {"key": "head.tension", "values": ["1 kN/m", "4 kN/m"]},
        {"key": "outline.diameter", "values": ["300 mm", "400 mm"]},
    ]
}
LOADED = KEYS | {
    "patches": [{"name": "paste", "shape": "disc", "diameter": 0.1, "added_density": 1.0}],
    "edges": {"rim": {"support": "elastic", "stiffness": 1e5}},
    "sweep": {
        "axes": [
            {"key": "patches.paste.added_density", "values": [0.0, 0.5, 4.0]},
            {"key": "edges.rim.stiffness", "values": [1e4, 1e6]},
            {"key": "patches.paste.at[1]", "values": [0.0, 0.02]},
        ]
    },
}


def answers(task, numbers):
    return {n: task.answering.answer(task.points.point(n)) for n in numbers}


def test_points_of_a_round_head_have_the_frequencies_of_bessel_zeros():
    """f = j / (pi d) sqrt(T / rho); Rayleigh, Theory of Sound, section 200 (from memory)."""
    task = task_of(study_from(KEYS | {"sweep": SWEEP}))
    assert task.points.shaping == (False, True)
    zeros = np.array([jn_zeros(0, 1)[0], *[jn_zeros(1, 1)[0]] * 2])
    for number, answer in answers(task, [1, 2, 3, 4]).items():
        tension, diameter = task.points.point(number).values
        exact = zeros / (np.pi * diameter) * np.sqrt(tension / 0.262)
        assert answer.frequencies == pytest.approx(exact, rel=1e-10)
        assert np.all(answer.error_cents < 0.005)


@pytest.mark.slow
def test_a_guaranteed_bracket_where_one_is_wanted():
    """Bessel zeros as above; every error is a bound, and within the accuracy."""
    axes = [{"key": "head.tension", "values": ["1 kN/m", "4 kN/m"]}]
    keys = KEYS | {"modes": {"count": 3, "accuracy": "1e-4 cent"}}
    task = task_of(study_from(keys | {"sweep": {"axes": axes, "bracket": True}}))
    zeros = np.array([jn_zeros(0, 1)[0], *[jn_zeros(1, 1)[0]] * 2])
    for number, answer in answers(task, [1, 2]).items():
        (tension,) = task.points.point(number).values
        exact = zeros / (np.pi * 0.356) * np.sqrt(tension / 0.262)
        off = 1200 * np.abs(np.log2(answer.frequencies / exact))
        assert answer.kind == "guaranteed"
        assert np.all(off <= answer.error_cents)
        assert np.all(answer.error_cents <= 1e-4)


@pytest.mark.slow
def test_answers_are_the_same_whatever_came_before():
    study = study_from(LOADED)
    numbers = list(range(1, 13))
    one = answers(task_of(study), numbers)
    other = answers(task_of(study), numbers[::-1])
    alone = answers(task_of(study), [8])
    for number in numbers:
        assert np.array_equal(one[number].frequencies, other[number].frequencies)
        assert np.array_equal(one[number].error_cents, other[number].error_cents)
    assert np.array_equal(one[8].frequencies, alone[8].frequencies)


@pytest.mark.slow
def test_points_agree_with_runs_of_their_own():
    task = task_of(study_from(LOADED))
    for number in (3, 12):
        density, stiffness, x = task.points.point(number).values
        patch = {"name": "paste", "shape": "disc", "diameter": 0.1, "added_density": density}
        keys = LOADED | {
            "patches": [patch | {"at": [x, 0.0]}],
            "edges": {"rim": {"support": "elastic", "stiffness": stiffness}},
        }
        alone = run(study_from({k: v for k, v in keys.items() if k != "sweep"}))
        found = task.answering.answer(task.points.point(number))
        assert found.frequencies == pytest.approx(alone.frequencies[:3], rel=1e-9)


def test_axes_have_units():
    axes = [
        {"key": "patches.paste.at[2]", "values": [0.0]},
        {"key": "patches.paste.added_density", "values": [1.0]},
        {"key": "head.tension", "values": [1.0]},
        {"key": "edges.rim.stiffness", "values": [1.0]},
        {"key": "modes.count", "values": [2]},
    ]
    found = units_of(study_from(LOADED | {"sweep": {"axes": axes}}))
    assert found == ["m", "kg/m^2", "N/m", "N/m^2", ""]


def test_a_point_outside_all_shapes_says_why():
    from membrane.errors import OutlineError

    task = task_of(study_from(LOADED))
    with pytest.raises(OutlineError, match="paste"):
        task.answering.answer(Point(1, (1.0, 1e5, 0.5)))


@pytest.mark.slow
def test_many_points_of_one_mesh_are_answered_by_a_reduced_model():
    """Full solves of the same points differ by no more than both errors together."""
    axes = [
        {"key": "patches.paste.added_density", "from": 0.1, "to": 3.0},
        {"key": "edges.rim.stiffness", "from": 1e4, "to": 1e6, "spacing": "logarithmic"},
    ]
    sweep = {"pick": "random", "count": 600, "axes": axes}
    keys = LOADED | {"sweep": sweep, "modes": {"count": 4, "accuracy": "0.1 cent"}}
    task = task_of(study_from(keys))
    full = FullSolves(task.answering.source, task.points)
    numbers = [1, 2, 3, 100, 600]
    found = answers(task, numbers)
    assert {answer.kind for answer in found.values()} == {"reduced"}
    assert sum(answer.solves for answer in found.values()) < 20
    for number, answer in found.items():
        exact = full.answer(task.points.point(number))
        off = 1200 * np.abs(np.log2(answer.frequencies / exact.frequencies))
        assert np.all(answer.error_cents <= 0.05)
        assert np.all(off <= answer.error_cents + exact.error_cents)
    again = answers(task_of(study_from(keys)), [600])
    assert np.array_equal(again[600].frequencies, found[600].frequencies)


@pytest.mark.slow
def test_a_number_that_does_more_than_scale_is_solved_in_full():
    tension = {"along": 3e3, "across": 2e3, "angle": 0.1}
    axes = [{"key": "head.tension.angle", "from": 0.0, "to": 1.0}]
    keys = KEYS | {"head": {"areal_density": 0.262, "tension": tension}}
    sweep = {"pick": "random", "count": 600, "axes": axes}
    task = task_of(study_from(keys | {"sweep": sweep}))
    assert task.points.meshes == 1
    assert task.answering.answer(task.points.point(1)).kind == "estimated"
