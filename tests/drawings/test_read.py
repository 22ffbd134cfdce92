"""The right reader, unit, layers and tolerance; every failure in one sentence."""

import numpy as np
import pytest

from membrane.drawings import find_contour
from membrane.errors import DrawingError

PI = np.pi
ROUND = '<circle id="a" cx="40" cy="40" r="30"/>'


def area(found):
    return found.contour.area


def circle(space, radius=30.0, at=(0, 0), layer="a"):
    space.add_circle(at, radius, dxfattribs={"layer": layer})


def test_the_files_own_unit(dxf, svg):
    for path in (dxf(circle), svg(ROUND)):
        found = find_contour(path)
        assert area(found) == pytest.approx(PI * 0.03**2, rel=1e-3)
        assert found.contour.edges == ("a",)
        assert found.notes == ()


def test_a_stated_unit_comes_before_the_files_own_and_is_told(dxf):
    found = find_contour(dxf(circle), unit=0.0254)
    assert area(found) == pytest.approx(PI * (30 * 0.0254) ** 2, rel=1e-3)
    note = "drawing.dxf: took 25.4 mm for a unit, though the file says 1 mm."
    assert found.notes == (note,)
    assert find_contour(dxf(circle, units=0), unit=0.0254).notes == ()


def test_a_file_that_changes_is_read_again(dxf):
    import os

    path = dxf(circle)
    before = area(find_contour(path))
    dxf(lambda space: circle(space, 15.0))
    os.utime(path, (1, 1))
    assert area(find_contour(path)) == pytest.approx(before / 4, rel=1e-3)


def gap(space, width):
    arc = {"layer": "rim"}
    space.add_lwpolyline([(0, 0), (100, 0), (100, 80), (0, 80), (0, width)], dxfattribs=arc)


def test_gaps_up_to_the_tolerance(dxf):
    path = dxf(lambda space: gap(space, 0.009))
    (note,) = find_contour(path).notes
    assert note == (
        "drawing.dxf: closed 1 gap in the contour, the widest 0.009 mm at x = 0 mm, y = 0.009 mm."
    ) or note.endswith("the widest 0.009 mm at x = 0 mm, y = 0 mm.")
    wide = dxf(lambda space: gap(space, 0.5), name="wide.dxf")
    assert find_contour(wide, tolerance=1e-3).notes
    with pytest.raises(DrawingError, match=r"from x = 0 mm, y = 0(.5)? mm to .* 0.5 mm is left"):
        find_contour(wide)


def test_a_small_drawing_has_a_small_tolerance(dxf):
    """Ten thousandth of 0.1 mm is 10 nm."""
    path = dxf(lambda space: gap(space, 1.0), units=13)
    with pytest.raises(DrawingError, match="wider than the tolerance of 1e-05 mm"):
        find_contour(path)


def busy(space):
    circle(space, 30.0, layer="Rim")
    circle(space, 5.0, layer="Port")
    space.add_line((-40, 0), (40, 0), dxfattribs={"layer": "centre"})


def test_layers_are_chosen(dxf):
    path = dxf(busy)
    with pytest.raises(DrawingError, match="do not close"):
        find_contour(path)
    assert find_contour(path, layers=("Rim", "Port")).contour.edges == ("Rim",)
    assert find_contour(path, layers=("Rim", "Port"), contour="Port").contour.edges == ("Port",)


def two(space):
    circle(space, layer="head")
    circle(space, at=(100, 0), layer="shell")


def crossed(space):
    corners = [(0, 0), (10, 10), (10, 0), (0, 10)]
    space.add_lwpolyline(corners, close=True)


@pytest.mark.parametrize(
    ("draw", "options", "sentence"),
    [
        (two, {}, "has 2 contours side by side, head, shell; choose one, such as contour ="),
        (two, {"contour": "haed"}, 'has no contour "haed"; did you mean "head"?'),
        (two, {"contour": "zebra"}, 'has no contour "zebra"; known are head, shell.'),
        (two, {"layers": ("shel",)}, 'no curves on a layer "shel"; did you mean "shell"?'),
        (two, {"layers": ("zebra",)}, 'no curves on a layer "zebra"; known are head, shell.'),
        (crossed, {}, "the contour crosses itself at x = 5 mm, y = 5 mm; draw"),
        (lambda space: None, {}, "the drawing has no curves; draw the outline"),
        (lambda space: space.add_line((0, 0), (9, 0)), {}, "from x = 0 mm, y = 0 mm to x = 9 mm"),
    ],
)
def test_what_is_no_sound_contour(dxf, draw, options, sentence):
    with pytest.raises(DrawingError) as caught:
        find_contour(dxf(draw), **options)
    said = str(caught.value)
    assert sentence in said
    assert said.endswith((".", "?"))
    assert "\n" not in said
    assert ". " not in said


def test_a_unit_that_nobody_states(dxf, mesh, files):
    for path in (dxf(circle, units=0), files / "l_shape.msh"):
        with pytest.raises(
            DrawingError, match=rf'{path.name} does not say its unit .* unit = "mm"'
        ):
            find_contour(path)


def test_files_that_are_not_there_or_not_known(tmp_path):
    with pytest.raises(DrawingError, match="there is no file"):
        find_contour(tmp_path / "none.dxf")
    for name in ("head.dwg", "head.pdf", "head"):
        (tmp_path / name).write_text("")
        with pytest.raises(
            DrawingError, match=rf"of {name} is not known; known are .dxf, .svg and"
        ):
            find_contour(tmp_path / name)


def test_regions_of_a_mesh_by_name(files):
    found = find_contour(files / "l_shape.msh", unit=1.0, contour="paste")
    assert 0.24 < area(found) < PI * 0.09
    whole = find_contour(files / "l_shape.msh", unit=1.0)
    assert area(whole) == pytest.approx(3.0, rel=1e-12)
    assert len(whole.contour.strokes) == 6
