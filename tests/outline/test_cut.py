"""Shapes that do not fit together are refused in one sentence."""

import pytest

from membrane.errors import OutlineError
from membrane.kernel import Kernel
from membrane.outline import draw
from membrane.outline.cut import cut
from tests.outline.studies import box, disc, shape, study

DISC = disc(2.0)
BOX = box(2.0, 1.0)


@pytest.mark.parametrize(
    ("wanted", "sentence"),
    [
        (study(DISC, {"p": disc(0.1, 3.0)}), "The patch p lies wholly outside the outline"),
        (study(DISC, {}, {"h": disc(0.1, 3.0)}), "The hole h lies wholly outside the outline"),
        (
            study(BOX, {"p": box(1.0, 0.5, 1.5)}),
            r"The patch p reaches over the edge .* by 2.5e\+05 mm\^2 \(50.00% of it\)",
        ),
        (study(BOX, {}, {"h": box(0.2, 0.2, -0.1)}), "The hole h reaches over the edge"),
        (
            study(DISC, {}, {"g": box(0.2, 0.2), "h": box(0.2, 0.2, 0.1, 0.1)}),
            r"The holes g and h overlap by 1e\+04 mm\^2",
        ),
        (
            study(DISC, {"p": disc(0.2)}, {"h": disc(0.4)}),
            "Nothing is left of the patch p within h",
        ),
        (study(DISC, {}, {"h": DISC}), "The holes leave nothing of the head"),
        (study(disc(2e-5), {"p": disc(1e-5)}), "The outline is too small to be cut"),
    ],
)
def test_shapes_that_do_not_fit(wanted, sentence):
    with Kernel.session() as kernel, pytest.raises(OutlineError, match=sentence) as raised:
        draw(kernel, wanted)
    assert str(raised.value).endswith(".")


def test_a_small_head_that_is_not_cut_is_fine():
    with Kernel.session() as kernel:
        assert draw(kernel, study(disc(2e-5))).area == pytest.approx(3.14159265358979e-10)


def test_a_cut_that_loses_area_is_an_error(monkeypatch):
    with Kernel.session() as kernel:
        faces = [kernel.geometry.add_disk([0.0, 0.0], r)._id for r in (1.0, 0.5)]
        whole = kernel.fragment

        def losing(given, points):
            head, patch = whole(given, points)
            return [head, head - patch]

        monkeypatch.setattr(kernel, "fragment", losing)
        with pytest.raises(OutlineError, match="could not be cut by each other exactly"):
            cut(kernel, faces[0], {"p": faces[1]}, {})


def test_what_covers_each_face():
    with Kernel.session() as kernel:
        geometry = kernel.geometry
        faces = [geometry.add_disk([0.0, 0.0], r)._id for r in (1.0, 0.6, 0.4, 0.1)]
        pieces = cut(kernel, faces[0], {"a": faces[1], "b": faces[2]}, {"h": faces[3]})
    assert sorted(pieces.patches.values()) == [(), ("a",), ("a", "b")]
    assert list(pieces.holes.values()) == ["h"]


def test_an_ellipse_inside_by_a_hair_is_no_overhang():
    wanted = study(shape("ellipse", width=1.0, height=0.6), {"p": box(1.0, 0.1, -0.5, -0.05)})
    with Kernel.session() as kernel, pytest.raises(OutlineError, match="reaches over the edge"):
        draw(kernel, wanted)
