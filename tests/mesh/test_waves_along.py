"""Triangles beside heavy lines are as small as the waves along them are short."""

import numpy as np
import pytest

from membrane.mesh.waves_along import curve_sizes
from membrane.records.study import ModesWanted
from tests import zoo


def ring(**loads):
    return {**zoo.DISC, "line_loads": [{"name": "r", "shape": "disc", "diameter": 1.0, **loads}]}


def sizes(keys, wanted):
    with zoo.drawn(keys) as (_, _, outline, membrane):
        return list(curve_sizes(outline, membrane, wanted, 1.0).values())


def test_the_wave_along_a_straight_line_of_mass():
    """Put u = exp(-a |d|) cos(k s) in: 2 a = mu w^2 and k^2 = w^2 + a^2; here w = 2, mu = 1."""
    decay, omega = 2.0, 2.0
    expected = 1.0 / np.sqrt(omega**2 + decay**2 + decay**2)
    wanted = ModesWanted(up_to=omega / (2 * np.pi))
    assert sizes(ring(line_density=1.0), wanted) == pytest.approx([expected])


def test_an_edge_has_one_side_only():
    heavy = {**zoo.DISC, "edges": {"rim": {"support": "free", "mass": 0.5}}}
    wanted = ModesWanted(up_to=1.0 / np.pi)
    assert sizes(heavy, wanted) == pytest.approx(sizes(ring(line_density=1.0), wanted))


def test_without_mass_nothing_is_asked():
    assert sizes(ring(line_stiffness=9.0), ModesWanted()) == []


def test_many_modes_along_one_line_are_no_shorter_than_it_holds():
    """Of twenty modes none has more than twenty half waves around a very heavy ring."""
    (size,) = sizes(ring(line_density=1e3), ModesWanted(count=20))
    assert 1.0 / size == pytest.approx(np.sqrt(2.0) * 20.0, rel=0.1)
