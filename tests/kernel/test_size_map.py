"""The least over all samples is found without looking at all of them."""

import numpy as np
import pytest

from membrane.kernel.size_map import SizeMap


def scattered(count):
    rng = np.random.default_rng(1)
    return SizeMap(rng.uniform(-1, 1, (2, count)), rng.uniform(0.01, 1.0, count), 0.7)


def least(sizes, x, y):
    px, py = sizes.points
    return (sizes.sizes + sizes.growth * np.hypot(px - x, py - y)).min()


@pytest.mark.parametrize("count", [1, 5, 300, 3000])
def test_the_least_over_all_samples(count):
    sizes = scattered(count)
    for x, y in np.random.default_rng(2).uniform(-1, 1, (200, 2)):
        assert sizes.at(x, y) == pytest.approx(least(sizes, x, y), rel=1e-12)


def test_many_samples_in_one_place():
    sizes = SizeMap(np.zeros((2, 50)), np.linspace(1.0, 2.0, 50), 0.7)
    assert sizes.at(0.0, 0.0) == 1.0
    assert sizes.at(3.0, 4.0) == pytest.approx(4.5)


def test_dropping_overruled_samples_changes_no_size():
    whole = scattered(300)
    thin = whole.thinned()
    assert thin.sizes.size < 200
    for x, y in np.random.default_rng(3).uniform(-1, 1, (200, 2)):
        assert thin.at(x, y) == pytest.approx(least(whole, x, y), rel=1e-5)


def test_sizes_are_shorter_in_one_place_and_nowhere_else():
    sizes = SizeMap(np.zeros((2, 1)), np.ones(1), 0.5)
    shorter = sizes.shortened(np.array([[2.0], [0.0]]), 0.7)
    assert shorter.at(2.0, 0.0) == pytest.approx(1.4)
    assert shorter.at(-2.0, 0.0) == pytest.approx(2.0)
    assert shorter.at(0.0, 0.0) == 1.0


def test_a_cap_overrules_what_is_longer_and_nothing_else():
    whole = scattered(300)
    capped = whole.capped(0.05)
    assert 0 < capped.sizes.size < 300
    for x, y in np.random.default_rng(5).uniform(-1, 1, (200, 2)):
        assert capped.at(x, y) == pytest.approx(min(0.05, least(whole, x, y)), rel=1e-12)
    assert whole.capped(1e-9).at(0.0, 0.0) == 1e-9


def test_the_least_of_all_sizes():
    assert scattered(300).least == scattered(300).sizes.min()
    assert scattered(300).capped(1e-9).least == 1e-9
