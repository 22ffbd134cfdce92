"""Branches of small made-up paths, and of heads whose modes have names."""

import numpy as np
import pytest
from scipy.stats import ortho_group

from membrane.branches import Lost, Shapes, follow, follow_grid
from membrane.eigensolvers import shift_invert
from membrane.pencil import assemble
from membrane.reduced import prepare
from tests import zoo
from tests.branches import exact
from tests.reduced import heads

SIZE, COUNT, GUARDS = 12, 4, 4
AXES = ortho_group.rvs(SIZE, random_state=1)


def made_up(values, axes=AXES):
    """The lowest modes of a matrix with these eigenvalues; the mass is 1."""
    order = np.argsort(values)[: COUNT + GUARDS]
    return Shapes(np.asarray(values)[order], axes[:, order], np.eye(SIZE))


def crossing(s):
    """The second value rises through the third and the fourth."""
    values = np.arange(1.0, SIZE + 1.0)
    values[1] += 3.0 * s
    shapes = made_up(values)
    if s == 1.0 / 3.0:  # a solver's answer where two are equal
        turn = np.array([[0.8, -0.6], [0.6, 0.8]])
        return shapes.turned(slice(1, 3), turn)
    return shapes


@pytest.mark.parametrize("places", [2, 4, 7, 31])
def test_a_branch_goes_through_crossings(places):
    found = follow(crossing, np.linspace(0.0, 0.9, places), COUNT)
    assert found.branches[0].tolist() == [1, 2, 3, 4]
    assert found.branches[-1].tolist() == [1, 3, 4, 2]
    assert found.lost == ()


def test_and_through_a_place_where_two_are_equal():
    found = follow(crossing, np.array([0.0, 1.0 / 3.0, 0.5]), COUNT)
    assert sorted(found.branches[1].tolist()) == [1, 2, 3, 4]
    assert found.branches[2].tolist() == [1, 3, 2, 4]


def test_it_goes_both_ways():
    found = follow(crossing, np.linspace(0.9, 0.0, 5), COUNT)
    assert found.branches[-1].tolist() == [1, 4, 2, 3]


def test_a_veering_is_followed_where_it_is_wide():
    """Two modes that change places smoothly keep their order: nothing crosses."""

    def veering(s):
        angle = np.pi / 2 * s
        axes = AXES.copy()
        turn = np.array([[np.cos(angle), -np.sin(angle)], [np.sin(angle), np.cos(angle)]])
        axes[:, 1:3] = axes[:, 1:3] @ turn
        return made_up(np.arange(1.0, SIZE + 1.0), axes)

    assert follow(veering, np.array([0.0, 1.0]), COUNT).branches[-1].tolist() == [1, 2, 3, 4]


def test_a_lost_branch_is_said_to_be_lost():
    def jumping(s):
        axes = AXES.copy()
        if s > 0.5:
            axes[:, [2, -1]] = axes[:, [-1, 2]]
        return made_up(np.arange(1.0, SIZE + 1.0), axes)

    found = follow(jumping, np.array([0.0, 0.4, 0.8]), COUNT)
    assert found.branches[1].tolist() == [1, 2, 3, 4]
    assert found.branches[2].tolist() == [1, 2, COUNT + GUARDS + 1, 4]
    assert found.lost == (Lost(3, 0.8),)


def wrong_names(found, places, names_at, modes_at, count, near=2e-5):
    """Modes whose branch bears, at its other places, the name of another exact curve."""
    names, wrong = {}, 0
    for place, row in zip(places, found.branches, strict=True):
        values = modes_at(place).eigenvalues[:count]
        curves = names_at(place, 1.2 * values[-1])
        for value, branch in zip(values, row, strict=True):
            hits = {name for name, curve in curves.items() if abs(curve / value - 1) < near}
            assert hits, f"no exact value is near {value} at {place}"
            kept = names.get(branch, hits) & hits
            wrong += not kept
            names[branch] = kept or hits
    return wrong


def full_modes(pencil, numbers, count):
    at = pencil.at(numbers)
    return Shapes(*shift_invert.solve(at.K, at.M, count + GUARDS, 0.0), at.M)


@pytest.fixture(scope="module")
def woven():
    """An ellipse of half-axes sqrt(s) and 1/sqrt(s), drawn onto the disc."""
    head = {"areal_density": 1.0, "tension": {"along": 1.0, "across": 1.0}}
    ready = zoo.prepared({**zoo.DISC, "head": head}, 6, 3.0, 1e-6)
    return assemble(ready.membrane, ready.mesh, 6)


def stretched(aspect):
    return {"head.tension.along": 1.0 / aspect, "head.tension.across": aspect}


@pytest.mark.slow
def test_ellipse_from_a_disc_to_twice_as_long_as_wide(woven):
    """Against the Mathieu functions' names (DLMF 28.20): no wrong branch among 20 modes."""
    places = np.linspace(1.0, 2.0, 21)

    def modes_at(aspect):
        return full_modes(woven, stretched(aspect), 20)

    found = follow(modes_at, places, 20)
    kept = type(found)(found.branches[1:], found.lost)  # the disc has no focal distance
    assert found.lost == ()
    assert wrong_names(kept, places[1:], exact.ellipse, modes_at, 20) == 0
    assert (found.branches[-1] != np.arange(1, 21)).sum() > 10


@pytest.mark.slow
def test_disc_whose_centre_grows_heavy():
    """Against the Bessel functions' names: no wrong branch among 20 modes."""
    patch = {"name": "paste", "shape": "disc", "diameter": 0.9, "areal_density": 1.0}
    ready = zoo.prepared({**zoo.DISC, "patches": [patch]}, 6, 3.0, 1e-6)
    pencil = assemble(ready.membrane, ready.mesh, 6)
    places = np.linspace(0.5, 6.0, 12)

    def modes_at(density):
        return full_modes(pencil, {"patches.paste.areal_density": density}, 20)

    def names_at(density, most):
        return exact.heavy_centre(density, 0.45, most)

    found = follow(modes_at, places, 20)
    assert found.lost == ()
    assert wrong_names(found, places, names_at, modes_at, 20) == 0
    assert (found.branches[-1] != np.arange(1, 21)).sum() > 10


def test_a_grid_by_a_reduced_model():
    """No branch changes with the density of the whole head."""
    pencil = heads.pencil({**heads.LOADED, "patches": [], "edges": {}})
    first, second = np.linspace(1.0, 1.6, 4), np.array([1.0, 2.0])
    keys = ["head.tension.along", "head.tension.across", "head.areal_density"]
    points = np.array([[1 / a, a, d] for d in second for a in np.linspace(1.0, 1.6, 13)])
    model = prepare(pencil, keys, points, 8, 0.01, heads.full)

    def modes_at(aspect, density):
        return Shapes(*model.modes_at(np.array([1 / aspect, aspect, density]), 8 + GUARDS))

    found = follow_grid(modes_at, [first, second], 8)
    light, heavy = found[(0,)], found[(1,)]
    np.testing.assert_array_equal(light.branches, heavy.branches)
    assert (
        wrong_names(
            type(light)(heavy.branches[1:], ()),
            first[1:],
            exact.ellipse,
            lambda aspect: modes_at(aspect, 1.0),
            8,
            near=1e-3,  # on a coarse mesh
        )
        == 0
    )
