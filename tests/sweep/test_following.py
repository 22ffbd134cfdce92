"""Branches of a sweep on modes that are made up: which point each belongs to, and what is lost."""

from __future__ import annotations

import numpy as np
import pytest

from membrane.branches import Shapes
from membrane.records.sweep import Pick
from membrane.sweep.solving import followed, following, why_not_followed

from .demo import DIAMETER, TENSION, axis, task

SIZE, COUNT = 10, 3


def made_up(values):
    order = np.argsort(values)[: COUNT + following.GUARDS]
    return Shapes(np.asarray(values)[order], np.eye(SIZE)[:, order], np.eye(SIZE))


def rising(solves, point, count):
    """The first value rises with the first axis past the second and the third."""
    values = np.arange(1.0, SIZE + 1.0)
    values[0] += point.values[0]
    return made_up(values)


def leaving(solves, point, count):
    """The second mode is gone from a second axis above 5 on, and another in its place."""
    shapes = made_up(np.arange(1.0, SIZE + 1.0))
    if point.values[-1] > 5.0:
        shapes.vectors[:, 1] = np.eye(SIZE)[:, -1]
    return shapes


def branches_of(monkeypatch, shapes_at, *axes):
    monkeypatch.setattr(following, "shapes_at", shapes_at)
    return followed(None, task(*axes).points, COUNT)


@pytest.mark.parametrize("values", [(0.1, 1.6, 2.7), (2.7, 0.1, 1.6), (1.6, 2.7, 0.1)])
def test_branches_go_from_end_to_end_whatever_the_order_of_the_values(monkeypatch, values):
    found = branches_of(monkeypatch, rising, axis("a", *values))
    at = dict(zip(values, found.numbers.tolist(), strict=True))
    assert at[min((0.1, 2.7), key=values.index)] == [1, 2, 3]
    path = [at[value] for value in (0.1, 1.6, 2.7)]
    renamed = [[at[0.1].index(branch) for branch in row] for row in path]
    assert renamed == [[0, 1, 2], [1, 0, 2], [1, 2, 0]]
    assert found.lost == ()


def test_the_second_axis_runs_fastest(monkeypatch):
    found = branches_of(monkeypatch, rising, axis("a", 0.1, 1.6), axis("b", 7.0, 8.0, 9.0))
    assert found.numbers.tolist() == [[1, 2, 3]] * 3 + [[2, 1, 3]] * 3


def test_a_third_axis_runs_faster_still(monkeypatch):
    axes = axis("a", 0.1, 1.6), axis("b", 7.0, 3.0, 5.0), axis("c", 3.0, 7.0)
    found = branches_of(monkeypatch, leaving, *axes)
    new = COUNT + following.GUARDS + 1
    assert found.numbers[:, 1].tolist() == [2, new] * 6
    assert found.lost == ((2, 2),)


def test_a_lost_branch_is_lost_at_its_point(monkeypatch):
    found = branches_of(monkeypatch, leaving, axis("a", 1.0, 3.0, 7.0))
    assert found.lost == ((2, 3),)
    assert found.numbers[:, 1].tolist() == [2, 2, COUNT + following.GUARDS + 1]


def test_also_on_the_way_along_the_second_axis(monkeypatch):
    found = branches_of(monkeypatch, leaving, axis("a", 1.0, 2.0), axis("b", 3.0, 7.0))
    new = COUNT + following.GUARDS + 1
    assert found.lost == ((2, 2),)
    assert found.numbers[:, 1].tolist() == [2, new, 2, new]


@pytest.mark.parametrize(
    ("axes", "others", "sentence"),
    [
        ([TENSION], {"pick": Pick.RANDOM, "count": 3}, 'not with pick = "random"'),
        ([TENSION], {"pick": Pick.TABLE}, 'not with pick = "table"'),
        ([DIAMETER], {"shaping": [True]}, "from mesh to mesh, as outline.diameter would"),
        ([TENSION, axis("b", 1.0)], {}, ""),
    ],
)
def test_where_there_is_no_following(axes, others, sentence):
    found = why_not_followed(task(*axes, **others).points)
    assert sentence in found
    assert bool(sentence) == bool(found)
