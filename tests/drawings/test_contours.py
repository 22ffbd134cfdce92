"""The outline is the contour around all others; the others go by name."""

import numpy as np
import pytest

from membrane.drawings.contours import chosen, contours, labels, outline
from membrane.drawings.crossings import check_not_flat
from membrane.drawings.join import joined
from membrane.drawings.pieces import Arc, Line
from membrane.drawings.sketch import WHOLE, Stroke
from membrane.errors import DrawingError


def circle(name, centre, radius):
    return Stroke(name, Arc.circle(centre, radius, 0.0, 2 * np.pi), (name,))


def found(*strokes, **regions):
    groups = {WHOLE: joined(strokes, 1e-6)}
    return contours(groups | {name: joined(those, 1e-6) for name, those in regions.items()})


HEAD = circle("head", 0j, 1.0)


def test_area_and_nesting():
    every = found(circle("patch", 0.5j, 0.2), HEAD, circle("port", -0.5j, 0.1))
    outer = outline(every)
    assert outer.edges == ("head",)
    assert outer.area == pytest.approx(np.pi, rel=1e-3)
    assert chosen(every, "port").area == pytest.approx(np.pi * 0.01, rel=1e-3)


def test_contours_that_touch_the_outline_lie_within_it():
    corners = [-1 - 1j, 1 - 1j, 1 + 1j, -1 + 1j]
    box = [
        Stroke("box", Line(a, b)) for a, b in zip(corners, corners[1:] + corners[:1], strict=True)
    ]
    half = [-1 - 1j, 0 - 1j, 0 + 1j, -1 + 1j]
    left = [Stroke("left", Line(a, b)) for a, b in zip(half, half[1:] + half[:1], strict=True)]
    assert outline(found(*left, *box)).edges == ("box",)


def test_contours_side_by_side():
    every = found(HEAD, circle("other", 3 + 0j, 0.5))
    with pytest.raises(DrawingError, match=r"2 contours side by side, head, other; .* = \"head\""):
        outline(every)


def test_equal_names_are_numbered():
    every = found(HEAD, circle("dot", 0.5j, 0.1), circle("dot", -0.5j, 0.2))
    assert list(labels(every)) == ["head", "dot.1", "dot.2"]
    assert chosen(every, "dot.2").area == pytest.approx(np.pi * 0.04, rel=1e-3)


@pytest.mark.parametrize(
    ("name", "sentence"),
    [("haed", 'no contour "haed"; did you mean "head"'), ("zebra", "known are head, rim")],
)
def test_an_unknown_name(name, sentence):
    with pytest.raises(DrawingError, match=sentence):
        chosen(found(HEAD, circle("", 0j, 0.1)), name)


def test_a_region_comes_before_a_boundary_of_its_name():
    every = found(circle("1", 0j, 1.0), **{"1": [circle("", 0j, 0.5), circle("", 0j, 0.2)]})
    assert chosen(every, "1").area == pytest.approx(np.pi / 4, rel=1e-3)
    assert outline(every).area == pytest.approx(np.pi, rel=1e-3)


def test_a_contour_without_area_is_flat():
    ends = (0j, 1 + 0j), (0j, 0.5 + 1e-13j), (0.5 + 1e-13j, 1 + 0j)
    (seam,) = found(*(Stroke("", Line(*pair)) for pair in ends))
    assert seam.is_flat
    with pytest.raises(DrawingError, match="encloses no area"):
        check_not_flat(seam)
    assert not outline(found(HEAD)).is_flat


def test_no_contour_at_all():
    with pytest.raises(DrawingError, match="no closed contour"):
        outline(found())
