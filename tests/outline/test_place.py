"""A shape is drawn by its plugin, and what is not a shape is refused."""

from types import SimpleNamespace

import numpy as np
import pytest

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.outline import draw
from membrane.outline import place as place_module
from membrane.outline.place import place
from membrane.records.outline import Drawing
from membrane.records.study import Shape
from tests.outline.studies import box, shape, study


def test_loose_copies_move_with_the_face():
    with Kernel.session() as kernel:
        placed = place(kernel, box(0.4, 0.2, 0.3, 0.1, rotate=0.5))
        kernel.fragment([placed.face])
        for copies, own in zip(placed.edges.values(), (3, 1, 0, 2), strict=True):
            (copy,) = copies
            middle = kernel.evaluate(copy, np.array([np.mean(kernel.bounds(copy))]))
            assert kernel.distance(middle, kernel.border(placed.face)[own]) < 1e-12


@pytest.mark.parametrize(
    ("handed_back", "sentence"),
    [
        (lambda disk, point: Drawing(point, {"rim": ()}), "not a surface"),
        (lambda disk, point: Drawing([disk], {"rim": ()}), "not a surface"),
        (lambda disk, point: Drawing(disk, {"rim": [disk]}), "not a curve"),
        (lambda disk, point: disk, "must return a Drawing"),
        (lambda disk, point: disk.no_such_thing, r"cannot be drawn \(AttributeError"),
        (lambda disk, point: Drawing(disk, {"rmi": ()}), "edges rmi but its function edges names"),
    ],
)
def test_a_script_that_hands_back_the_wrong_thing(monkeypatch, handed_back, sentence):
    def build(geometry, options):
        return handed_back(geometry.add_disk([0.0, 0.0], 1.0), geometry.add_point([0.0, 0.0]))

    monkeypatch.setattr(
        place_module,
        "load",
        lambda kind, name: SimpleNamespace(build=build, edges=lambda options: ("rim",)),
    )
    with Kernel.session() as kernel, pytest.raises(OutlineError, match=sentence):
        place(kernel, shape("disc", diameter=1.0))


def keyhole(geometry, options):
    disk = geometry.add_disk([0.0, 0.0], 1.0)
    slot = geometry.add_rectangle([0.0, -0.5, 0.0], 2.0, 1.0)
    (surface,) = geometry.boolean_union([disk, slot])
    return Drawing(surface, {"rim": ()})


def ring(geometry, options):
    geometry.add_disk([5.0, 5.0], 0.5)  # left over, and no part of the outline
    whole, middle = geometry.add_disk([0.0, 0.0], 1.0), geometry.add_disk([0.0, 0.0], 0.5)
    (surface,) = geometry.boolean_difference(whole, middle)
    return Drawing(surface, {"rim": ()})


# The keyhole: a disc, and a box less its part in the disc, up to the chord at x = cos 30 deg.
KEYHOLE = 5 * np.pi / 6 + np.sqrt(3) / 4 + 2.0 - np.sqrt(3) / 2


@pytest.mark.parametrize(("build", "area"), [(keyhole, KEYHOLE), (ring, 0.75 * np.pi)])
def test_a_script_may_use_booleans(monkeypatch, build, area):
    monkeypatch.setattr(
        place_module,
        "load",
        lambda kind, name: SimpleNamespace(build=build, edges=lambda options: ("rim",)),
    )
    with Kernel.session() as kernel:
        outline = draw(kernel, study(Shape("own", None)))
        raw = kernel.triangulate(outline, {"head": 0.1})
    assert outline.area == pytest.approx(area, rel=1e-10)
    assert outline.edges == ("rim",)
    assert raw.areas.sum() == pytest.approx(area, rel=5e-3)
