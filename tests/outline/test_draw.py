"""A study's outline: regions by the patches that cover them, edges and holes by name."""

import numpy as np
import pytest

from membrane.kernel import Kernel
from membrane.outline import draw
from tests.outline.studies import box, disc, shape, study

PI = np.pi


def drawn(*arguments):
    with Kernel.session() as kernel:
        return draw(kernel, study(*arguments))


def areas(outline):
    return {region.name: region.area for region in outline.regions}


def lens(distance, r, s):
    """Area shared by two circles.

    Source: the standard two-segment formula, from memory.
    """
    a = np.arccos((distance**2 + r**2 - s**2) / (2 * distance * r))
    b = np.arccos((distance**2 + s**2 - r**2) / (2 * distance * s))
    return r**2 * (a - np.sin(2 * a) / 2) + s**2 * (b - np.sin(2 * b) / 2)


def test_a_bare_head_is_one_region():
    outline = drawn(disc(2.0))
    assert [region.patches for region in outline.regions] == [()]
    assert areas(outline) == pytest.approx({"head": PI}, rel=1e-12)


def test_an_off_centre_patch_and_hole():
    outline = drawn(disc(2.0), {"paste": disc(0.4, 0.3, 0.2)}, {"port": disc(0.2, -0.5)})
    expected = {"head": PI * (1 - 0.04 - 0.01), "paste": PI * 0.04}
    assert areas(outline) == pytest.approx(expected, rel=1e-11)
    assert outline.edges == ("rim", "port")
    assert outline.edge_length("port") == pytest.approx(PI * 0.2, rel=1e-12)


def test_patches_over_patches_in_the_studys_order():
    patches = {"a": disc(1.0), "b": disc(0.7, 0.5), "c": disc(0.2)}
    outline = drawn(disc(2.0), patches)
    shared = lens(0.5, 0.5, 0.35)
    expected = {
        "head": PI - PI * 0.25 - PI * 0.35**2 + shared,
        "a": PI * 0.25 - shared - PI * 0.01,
        "b": PI * 0.35**2 - shared,
        "a+b": shared,
        "a+c": PI * 0.01,
    }
    assert areas(outline) == pytest.approx(expected, rel=1e-9)
    layered = {region.name: region.patches for region in outline.regions}
    assert layered["a+c"] == ("a", "c")


def test_a_later_patch_lies_over_an_earlier_one():
    outline = drawn(disc(2.0), {"z": disc(1.0), "a": disc(0.5)})
    assert [region.name for region in outline.regions] == ["head", "z", "z+a"]


def test_one_region_may_have_many_faces():
    outline = drawn(box(2.0, 1.0), {"stripe": box(0.2, 1.0, 0.9)})
    (head, stripe) = outline.regions
    assert (len(head.faces), len(stripe.faces)) == (2, 1)
    assert head.area == pytest.approx(1.8, rel=1e-12)


def test_a_patch_may_cover_the_whole_head():
    assert areas(drawn(disc(2.0), {"all": disc(2.0)})) == pytest.approx({"all": PI}, rel=1e-12)


def test_a_patch_may_share_a_part_of_the_rim():
    outline = drawn(box(2.0, 1.0), {"half": box(1.0, 1.0)})
    assert areas(outline) == pytest.approx({"head": 1.0, "half": 1.0}, rel=1e-12)
    lengths = {edge: outline.edge_length(edge) for edge in outline.edges}
    expected = {"left": 1.0, "right": 1.0, "bottom": 2.0, "top": 2.0}
    assert lengths == pytest.approx(expected, rel=1e-12)
    borders = [curve.length for curve in outline.curves if curve.edge is None]
    assert borders == pytest.approx([1.0], rel=1e-12)


def test_a_hole_inside_a_patch_and_one_across_its_border():
    holes = {"inner": disc(0.2), "across": disc(0.2, 0.5)}
    outline = drawn(disc(2.0), {"paste": disc(1.0)}, holes)
    bite = lens(0.5, 0.5, 0.1)
    expected = {
        "head": PI * 0.75 - (PI * 0.01 - bite),
        "paste": PI * 0.25 - PI * 0.01 - bite,
    }
    assert areas(outline) == pytest.approx(expected, rel=1e-9)
    assert outline.edge_length("across") == pytest.approx(PI * 0.2, rel=1e-9)


def test_a_hole_may_take_a_bite_out_of_a_side():
    outline = drawn(box(2.0, 1.0), {}, {"notch": box(0.2, 0.3, 0.5)})
    assert outline.edge_length("bottom") == pytest.approx(1.8, rel=1e-12)
    assert outline.edge_length("notch") == pytest.approx(0.8, rel=1e-12)
    assert outline.area == pytest.approx(1.94, rel=1e-12)


def test_shapes_turn_about_their_own_origin_and_are_then_moved():
    turned = shape("rectangle", (0.3, 0.1), PI / 2, width=0.4, height=0.2)
    with Kernel.session() as kernel:
        outline = draw(kernel, study(disc(2.0), {"bar": turned}))
        borders = [curve.tag for curve in outline.curves if curve.edge is None]
        points = np.hstack([kernel.evaluate(t, np.array(kernel.bounds(t))) for t in borders])
    np.testing.assert_allclose(points.min(axis=1), [0.1, 0.1], atol=1e-12)
    np.testing.assert_allclose(points.max(axis=1), [0.3, 0.5], atol=1e-12)


def test_the_outline_itself_may_be_turned_and_moved():
    turned = shape("rectangle", (1.0, 2.0), PI / 2, width=0.4, height=0.2)
    with Kernel.session() as kernel:
        outline = draw(kernel, study(turned))
        points = {
            curve.edge: kernel.evaluate(curve.tag, np.array(kernel.bounds(curve.tag)))
            for curve in outline.curves
        }
    assert outline.edges == ("left", "right", "bottom", "top")
    np.testing.assert_allclose(points["bottom"][0], 1.0, atol=1e-12)
    np.testing.assert_allclose(points["right"][1], 2.4, atol=1e-12)


@pytest.mark.parametrize("scale", [5e-5, 1e-4, 0.3, 100.0])
def test_cuts_are_exact_at_any_scale(scale):
    patches = {"a": disc(scale, 0.2 * scale), "b": box(0.3 * scale, 0.2 * scale, 0, 0, 0.5)}
    outline = drawn(disc(2 * scale), patches, {"port": disc(0.1 * scale, -0.6 * scale)})
    expected = PI * (1 - 0.0025) * scale**2
    assert outline.area == pytest.approx(expected, rel=1e-10)
    a = sum(region.area for region in outline.regions if "a" in region.patches)
    assert a == pytest.approx(PI * 0.25 * scale**2, rel=1e-10)


@pytest.mark.slow
def test_two_hundred_dots():
    rng = np.random.default_rng(0)
    places = []
    while len(places) < 200:
        x, y = rng.uniform(-1, 1, 2)
        clear = all(np.hypot(x - u, y - v) > 0.05 for u, v in places)
        if np.hypot(x, y) < 0.95 and clear:
            places.append((float(x), float(y)))
    outline = drawn(disc(2.0), {f"dot{k}": disc(0.04, *p) for k, p in enumerate(places)})
    assert len(outline.regions) == 201
    for region in outline.regions[1:]:
        assert region.area == pytest.approx(PI * 0.0004, rel=1e-9)
