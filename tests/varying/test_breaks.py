"""The lines along which a formula breaks, read from its text."""

from __future__ import annotations

from math import cos, pi, sin

import pytest

from membrane.records.breaks import Circle
from membrane.varying.breaks import breaks_of
from membrane.varying.formula import Formula


def breaks(text):
    return breaks_of(Formula.parsed(text))


def on_circle(x, y, radius):
    return [(x + radius * cos(a), y + radius * sin(a)) for a in (0.3, 2.0, 4.0)]


@pytest.mark.parametrize(
    ("formula", "places"),
    [
        ("where(r < 0.05, 2, 1)", on_circle(0, 0, 0.05)),
        ("where(0.3 > sqrt(x**2 + y**2), 2, 1)", on_circle(0, 0, 0.3)),
        ("where((x - 0.1)**2 + (y + 0.2)**2 < 0.04, 2, 1)", on_circle(0.1, -0.2, 0.2)),
        ("where(hypot(x - 0.1, y) <= 0.05, 2, 1)", on_circle(0.1, 0, 0.05)),
        ("1 + abs(x - 0.3)", [(0.3, -0.5), (0.3, 0.9)]),
        ("max(x, y)", [(0.5, 0.5), (-0.2, -0.2)]),
        ("min(2*x + y, 1, 3)", [(0.5, 0.0), (0.0, 3.0)]),
        ("sign(theta)", [(0.5, 0.0), (-0.5, 0.0)]),
        ("abs(cos(2*theta))", [(cos(a), sin(a)) for a in (pi / 4, 3 * pi / 4, -pi / 4)]),
        ("1 + theta**3", [(-0.5, 0.0)]),
    ],
)
def test_places_on_the_lines(formula, places):
    found = breaks(formula)
    assert not found.unknown
    for place in places:
        assert min(line.distance(place) for line in found.known) < 1e-14
    assert all(line.distance((0.777, 0.123)) > 1e-3 for line in found.known)


def test_a_band_has_two_borders_and_the_kink_of_the_absolute_value():
    radii = sorted(line.radius for line in breaks("where(abs(r - 0.5) < 0.1, 2, 1)").known)
    assert radii == pytest.approx([0.4, 0.5, 0.6], rel=1e-14)
    assert len(breaks("where(abs(r - 0.05) < 0.1, 2, 1)").known) == 2  # r = -0.05 is nowhere
    assert all(isinstance(line, Circle) for line in breaks("where(0.1 < r < 0.2, 1, 2)").known)


@pytest.mark.parametrize(
    "formula", ["1 + r", "abs(r)", "x*y", "cos(3*theta)", "where(r < -1, 2, 1)", "sin(theta)**2"]
)
def test_formulas_without_breaks(formula):
    assert breaks(formula).known == breaks(formula).unknown == ()


@pytest.mark.parametrize(
    ("formula", "line"),
    [("where(x*y < 0.1, 1, 2)", "x * y = 0.1"), ("abs(sin(9*x))", "sin(9 * x) = 0")],
)
def test_lines_of_another_kind_are_named(formula, line):
    assert breaks(formula).unknown == (line,)


def test_a_ray_ends_where_it_begins():
    (ray,) = breaks("1 + theta").known
    assert ray.distance((-0.3, 0.0)) < 1e-15
    assert ray.distance((0.3, 0.4)) == pytest.approx(0.5)
