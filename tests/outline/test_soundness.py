"""A head in pieces, and slivers between curves that touch, are refused."""

import numpy as np
import pytest

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.outline import draw
from tests.outline.studies import box, disc, shape, study


def drawn(*arguments):
    with Kernel.session() as kernel:
        return draw(kernel, study(*arguments))


def test_a_hole_that_cuts_the_head_in_two():
    with pytest.raises(OutlineError, match="cut the head into 2 pieces"):
        drawn(box(2.0, 1.0), {}, {"slot": box(0.2, 1.0, 0.5)})


def test_a_hole_that_cuts_only_a_patch_in_two_is_fine():
    outline = drawn(box(2.0, 1.0), {"bar": box(1.0, 0.2, 0.5, 0.4)}, {"h": box(0.1, 0.4, 0.9, 0.3)})
    assert outline.regions[1].area == pytest.approx(0.18, rel=1e-12)


@pytest.mark.parametrize(
    ("arguments", "names"),
    [
        ((disc(2.0), {}, {"port": disc(1.0, 0.5)}), "rim and port"),
        ((disc(2.0), {"paste": disc(1.0, 0.5)}), "rim and the border of a patch"),
        ((disc(2.0), {}, {"a": disc(0.5, 0.25), "b": disc(0.5, -0.25)}), "a and b"),
        ((shape("polygon", corners=((0, 0), (1, 0), (1, 0.001))),), "side1 and side3"),
    ],
)
def test_slivers(arguments, names):
    with pytest.raises(OutlineError, match=f"a sliver is left between {names}"):
        drawn(*arguments)


def test_a_narrow_slit_outside_the_head_is_no_sliver():
    outline = drawn(shape("sector", radius=1.0, angle=2 * np.pi - 0.001))
    assert outline.area == pytest.approx(np.pi - 0.0005, rel=1e-9)


def test_curves_that_run_on_smoothly_are_no_sliver():
    stadium = shape("stadium", straight=1.0, width=1.0)
    outline = drawn(stadium, {"middle": box(1.0, 1.0, -0.5, -0.5)})
    assert {r.name: r.area for r in outline.regions} == pytest.approx(
        {"head": np.pi / 4, "middle": 1.0}, rel=1e-12
    )
