"""The reduced model against full solves of the same pencil."""

import pickle

import numpy as np
import pytest

from membrane.errors import SolveError
from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.reduced import prepare
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
