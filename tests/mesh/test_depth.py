"""The power and the layers of a corner follow from its exponents."""

import numpy as np
import pytest

from membrane.mesh.corner import Term
from membrane.mesh.depth import RATIO, treatment


def treated(exponent, tolerance=1e-9, share=0.05, degree=8, exact=True):
    return treatment((Term(exponent, exact),), share, tolerance, degree)


@pytest.mark.parametrize(("exponent", "power"), [(1 / 2, 2), (2 / 3, 3), (1 / 3, 3), (1 / 4, 4)])
def test_a_fan_makes_the_exponent_whole(exponent, power):
    assert treated(exponent) == (power, min(power - 1, 2))


def test_a_power_above_the_degree_is_not_used():
    assert treated(1 / 4, degree=3)[0] <= 3


def test_layers_follow_the_energy_within_them():
    """It goes like r^(2 exponent): one layer more for each factor of the ratio to that power."""
    one_more = RATIO ** (2 * 0.53)
    layers = [treated(0.53, 1e-11 * one_more**k, degree=4, exact=False)[1] for k in range(4)]
    assert np.diff(layers).tolist() == [1, 1, 1]


def test_a_bound_on_the_exponent_is_not_taken_at_its_word():
    assert treated(0.5, exact=False)[1] > treated(0.5)[1]


def test_a_logarithm_at_a_whole_exponent_needs_a_layer_the_power_alone_none():
    assert treated(2.0) == (1, 0)
    assert treated(2.0, exact=False, tolerance=1e-10)[1] > 0


@pytest.mark.parametrize("share", [1e-4, 0.05])
def test_the_straighter_and_smaller_a_corner_the_fewer_its_layers(share):
    cuts = [treated(1.0 + off, share=share)[1] for off in (0.1, 1e-2, 1e-3, 1e-5)]
    assert cuts == sorted(cuts, reverse=True)
    assert cuts[0] > cuts[-1] == 0
    assert treated(0.55, share=share)[1] <= treated(0.55, share=2 * share)[1]


def test_the_worst_of_several_terms_decides():
    both = treatment((Term(2 / 3, True), Term(0.5)), 0.05, 1e-9, 8)
    assert both[1] >= treated(0.5, exact=False)[1]
