"""Points by number: each known without the others, whatever the order of solving."""

from __future__ import annotations

from itertools import product

import numpy as np
import pytest

from membrane.records.sweep import Pick, Spacing, Sweep
from membrane.sweep.points import Points, study_data

from .demo import DIAMETER, TENSION, axis

SHAPE_FAST = Sweep(Pick.GRID, (TENSION, DIAMETER))


def test_a_grid_runs_through_the_last_axis_first():
    points = Points(SHAPE_FAST, (False, True))
    found = [points.point(n).values for n in range(1, 7)]
    assert found == list(product(TENSION.values, DIAMETER.values))


def test_points_of_one_mesh_are_solved_together():
    points = Points(SHAPE_FAST, (False, True))
    order = points.numbers(0, 6)
    assert sorted(order) == [1, 2, 3, 4, 5, 6]
    assert [points.mesh_of(points.point(n)) for n in order] == [(0.3,)] * 3 + [(0.4,)] * 3
    assert points.meshes == 2
    assert Points(SHAPE_FAST, (False, False)).meshes == 1
    assert np.array_equal(points.numbers(2, 5), order[2:5])


def test_a_table_with_equal_meshes_together():
    columns = axis("head.tension", 1.0, 2.0, 3.0, 4.0), axis("outline.diameter", 5.0, 6.0, 5.0, 6.0)
    points = Points(Sweep(Pick.TABLE, columns), (False, True))
    assert [points.point(n).values for n in (1, 2)] == [(1.0, 5.0), (2.0, 6.0)]
    assert points.numbers(0, 4).tolist() == [1, 3, 2, 4]
    assert points.meshes == 2


RANDOM = (
    axis("a", 2.0, 3.0, between=True),
    axis("b", 0.01, 100.0, between=True, spacing=Spacing.LOGARITHMIC),
    axis("c", 7.0, 8.0, 9.5),
    axis("d", 3, 5, between=True, whole=True),
)


def drawn(count, seed):
    points = Points(Sweep(Pick.RANDOM, RANDOM, count, seed), [False] * 4)
    return np.array([points.point(n).values for n in points.numbers(0, count)])


def test_random_points_fill_their_axes_evenly():
    a, b, c, d = drawn(4000, 1).T
    for share in (a - 2.0, np.log10(b) / 4 + 0.5):
        # Kolmogorov-Smirnov: 1.95 / sqrt(n) is passed once in a thousand times
        assert np.abs(np.sort(share) - np.arange(4000) / 4000).max() < 1.95 / np.sqrt(4000)
    for column, values in ((c, (7.0, 8.0, 9.5)), (d, (3, 4, 5))):
        assert set(column) == set(values)
        assert all(abs(np.mean(column == value) - 1 / 3) < 0.03 for value in values)
    assert abs(np.corrcoef([a, b, c, d]) - np.eye(4)).max() < 0.06


def test_a_random_point_does_not_depend_on_how_many_there_are():
    assert np.array_equal(drawn(5, 1), drawn(50, 1)[:5])
    assert not np.any(drawn(5, 1)[:, :2] == drawn(5, 2)[:, :2])


def test_random_points_stay_what_they_were():
    """As first drawn: a store is read by later versions too."""
    assert drawn(1, 0)[0].tolist() == pytest.approx(FIRST, rel=1e-15)


FIRST = [2.2118595440334574, 0.0728087007806879, 9.5, 4.0]


def test_values_take_their_places_in_the_study():
    source = {"head": {"tension": 1.0}, "sweep": {}, "outline": {"diameter": 2.0}}
    data = study_data(source, SHAPE_FAST.axes, (3.0, 4.0))
    assert data == {"head": {"tension": 3.0}, "outline": {"diameter": 4.0}}
    assert source["head"] == {"tension": 1.0}
