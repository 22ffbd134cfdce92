"""The first guess at the mesh follows the physics."""

from math import pi

import numpy as np
import pytest
from scipy.special import jn_zeros

from membrane.mesh.resolution import Resolution, _weyl, first_resolution, region_sizes
from membrane.records.study import ModesWanted
from tests import zoo


def test_weyl_guesses_the_disc():
    """Against j_{m,n}, DLMF 10.21; the two-term law is asymptotic."""
    zeros = sorted(z for m in range(40) for z in list(jn_zeros(m, 20)) * (1 if m == 0 else 2))
    with zoo.drawn(zoo.DISC) as (_, _, outline, membrane):
        for count in (5, 20, 100):
            assert abs(_weyl(outline, membrane, count) / zeros[count - 1] - 1) < 0.12


def test_heavy_regions_get_smaller_triangles():
    with zoo.drawn(zoo.PATCHED) as (_, study, outline, membrane):
        sizes = region_sizes(outline, membrane, study.modes, 3.0)
    assert abs(sizes["head"] / sizes["paste"] - 9.77**0.5) < 1e-12


def test_up_to_sets_the_wave_number():
    with zoo.drawn(zoo.DISC) as (_, _, outline, membrane):
        sizes = region_sizes(outline, membrane, ModesWanted(up_to=1 / pi), 3.0)
    assert abs(sizes["head"] - 1.5) < 1e-12


@pytest.mark.parametrize("accuracy", [1.0, 0.01, 1e-5])
def test_more_accuracy_needs_no_lower_degree(accuracy):
    loose, tight = (first_resolution(ModesWanted(accuracy=a)) for a in (accuracy, accuracy / 1e3))
    assert loose.degree <= tight.degree
    assert loose.tolerance > tight.tolerance


def test_degree_can_be_set():
    assert first_resolution(ModesWanted(degree=5)).degree == 5


def test_finer_is_finer():
    start = Resolution(6, 2.0, 1e-6)
    for excess in (1.01, 10.0, 1e6):
        after = start.finer(excess)
        assert after.phase < start.phase
        assert after.tolerance < start.tolerance
    assert np.isfinite(start.finer(1e300).phase)


def test_the_degree_rises_unless_it_is_set():
    assert Resolution(6, 2.0, 1e-6).finer(3.0).degree == 8
    assert Resolution(12, 2.0, 1e-6).finer(3.0).degree == 12
    assert Resolution(6, 2.0, 1e-6, degree_is_free=False).finer(3.0).degree == 6
