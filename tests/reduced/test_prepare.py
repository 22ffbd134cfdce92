"""The reduced model against full solves of the same pencil."""

import pickle

import numpy as np
import pytest

from membrane.errors import SolveError
from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.reduced import Solved, prepare
from tests import zoo
from tests.reduced import heads

COUNT = 8


def check_against_full(pencil, model, points):
    """Never below the full model, and never further above it than said."""
    answers = model.answers(points)
    for point, values, cents in zip(points, answers.eigenvalues, answers.cents, strict=True):
        at = pencil.at(dict(zip(model.keys, point, strict=True)))
        exact = heads.full(at, model.count).eigenvalues[: model.count]
        moving = exact > 0.0
        np.testing.assert_array_equal(values[~moving], 0.0)
        off = CENTS_PER_EIGENVALUE * np.log(values[moving] / exact[moving])
        assert (off > -1e-6).all()
        assert (off <= cents[moving] + 1e-6).all()
    return answers


@pytest.fixture(scope="module")
def loaded():
    return heads.pencil(heads.LOADED)


@pytest.fixture(scope="module")
def one_number(loaded):
    points = heads.spread([0.5], [6.0], 40)
    keys = ["patches.paste.areal_density"]
    return points, prepare(loaded, keys, points, COUNT, 0.1, heads.full)


def test_every_point_is_within_its_estimate(loaded, one_number):
    points, model = one_number
    answers = check_against_full(loaded, model, points[:10])
    assert answers.met.all()
    assert model.answers(points).cents.max() <= 0.1
    assert model.solves < 10


def test_a_point_is_the_same_in_any_company(one_number):
    points, model = one_number
    together = model.answers(points)
    alone = model.answers(points[17:18])
    np.testing.assert_array_equal(alone.eigenvalues[0], together.eigenvalues[17])
    np.testing.assert_array_equal(alone.cents[0], together.cents[17])


def test_a_model_made_again_is_the_same_and_travels(loaded, one_number):
    points, model = one_number
    again = prepare(loaded, model.keys, points, COUNT, 0.1, heads.full)
    sent = pickle.loads(pickle.dumps(again))
    np.testing.assert_array_equal(
        sent.answers(points).eigenvalues, model.answers(points).eigenvalues
    )


def test_the_full_models_own_error_is_kept(one_number):
    np.testing.assert_array_equal(one_number[1].element_cents, 0.001)


def test_a_key_that_scales_nothing_is_refused(loaded):
    with pytest.raises(SolveError, match="scaled by nothing"):
        prepare(loaded, ["nothing"], np.ones((3, 1)), COUNT, 0.1, heads.full)


@pytest.mark.slow
def test_three_numbers_over_wide_ranges(loaded):
    keys = ["patches.paste.areal_density", "head.tension.across", "edges.rim.stiffness"]
    points = heads.spread([0.5, 0.7, 10.0], [6.0, 1.4, 1000.0], 60)
    model = prepare(loaded, keys, points, COUNT, 0.1, heads.full)
    assert check_against_full(loaded, model, points[::6]).met.all()
    others = heads.spread([0.5, 0.7, 10.0], [6.0, 1.4, 1000.0], 10, seed=2)
    check_against_full(loaded, model, others)


def test_a_free_head_keeps_its_rigid_mode():
    pencil = heads.pencil({**heads.LOADED, "edges": {"rim": {"support": "free", "mass": 0.2}}})
    keys = ["head.tension.along", "edges.rim.mass"]
    points = heads.spread([0.5, 0.1], [2.0, 1.0], 30)
    model = prepare(pencil, keys, points, COUNT, 0.1, heads.full)
    answers = check_against_full(pencil, model, points[:8])
    assert answers.met.all()
    assert (answers.eigenvalues[:, 1] > 0.0).all()


def test_springs_down_to_none(loaded):
    keys = ["edges.rim.stiffness"]
    points = np.linspace(0.0, 50.0, 26)[:, None]
    model = prepare(loaded, keys, points, COUNT, 0.1, heads.full)
    answers = check_against_full(loaded, model, points[[0, 1, 2, 13, 25]])
    assert answers.met.all()
    assert (answers.eigenvalues[1:, 0] > 0.0).all()


def test_a_mode_that_the_first_solve_misses_is_found(loaded):
    calls = []

    def forgetful(at, count):
        calls.append(at)
        solved = heads.full(at, count + 1)
        kept = np.delete(np.arange(count + 1), 3 if len(calls) == 1 else count)
        return Solved(solved.eigenvalues[kept], solved.vectors[:, kept], solved.cents[kept])

    points = heads.spread([2.0], [2.2], 20)
    model = prepare(loaded, ["patches.paste.areal_density"], points, COUNT, 0.1, forgetful)
    check_against_full(loaded, model, points[:4])


def test_a_number_that_takes_energy_away_is_refused():
    sheared = {"areal_density": 1.0, "tension": {"xx": 1.0, "yy": 1.0, "xy": 0.1}}
    pencil = heads.pencil({**zoo.DISC, "head": sheared})
    with pytest.raises(SolveError, match=r"head\.tension\.xy can take energy away"):
        prepare(pencil, ["head.tension.xy"], np.ones((3, 1)), COUNT, 0.1, heads.full)
    points = np.linspace(1.0, 2.0, 10)[:, None]
    model = prepare(pencil, ["head.tension.xx"], points, COUNT, 0.1, heads.full)
    check_against_full(pencil, model, points[:3])


def test_more_accuracy_takes_more_shapes(loaded, one_number):
    points, model = one_number
    finer = prepare(loaded, model.keys, points, COUNT, 1e-3, heads.full)
    assert check_against_full(loaded, finer, points[:5]).met.all()
    assert finer.size > model.size
