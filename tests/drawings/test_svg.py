"""SVG files: exact shapes and paths, transforms, ids, units, and nothing from outside."""

import numpy as np
import pytest

from membrane.drawings import svg as reader
from membrane.drawings.pieces import Arc, Bezier, Line
from membrane.drawings.sketch import WHOLE
from membrane.errors import DrawingError

T = np.linspace(0.0, 1.0, 33)
BARE = ""


def strokes(path):
    return reader.read(path).groups[WHOLE]


def as_drawn(stroke):
    """Points of a stroke with y pointing down from the top of the page, 80 high."""
    z = stroke.piece.at(T)
    return z.real + 1j * (80 - z.imag)


def test_basic_shapes(svg):
    body = (
        '<circle id="a" cx="10" cy="20" r="5"/><ellipse id="b" cx="1" cy="2" rx="4" ry="3"/>'
        '<line id="c" x1="1" y1="2" x2="3" y2="4"/><polygon id="d" points="0,0 4,0 4,3"/>'
        '<polyline id="e" points="0 0 4 0 4 3"/><rect id="f" x="1" y="2" width="6" height="4"/>'
    )
    found = {}
    for stroke in strokes(svg(body)):
        found.setdefault(stroke.name, []).append(stroke)
    assert {name: len(those) for name, those in found.items()} == dict(a=1, b=1, c=1, d=3, e=2, f=4)
    np.testing.assert_allclose(abs(as_drawn(found["a"][0]) - (10 + 20j)), 5.0, rtol=1e-13)
    z = as_drawn(found["b"][0]) - (1 + 2j)
    np.testing.assert_allclose((z.real / 4) ** 2 + (z.imag / 3) ** 2, 1.0, rtol=1e-13)
    assert found["c"][0].piece == Line(1 + 78j, 3 + 76j)
    corners = np.hstack([as_drawn(stroke) for stroke in found["f"]])
    assert (corners.real.min(), corners.real.max()) == (1, 7)
    assert (corners.imag.min(), corners.imag.max()) == (2, 6)


@pytest.mark.parametrize(
    ("radii", "a", "b"), [('rx="2"', 2, 2), ('ry="1"', 1, 1), ('rx="2" ry="1"', 2, 1)]
)
def test_a_rounded_rectangle(svg, radii, a, b):
    found = strokes(svg(f'<rect width="10" height="6" {radii}/>'))
    assert [type(stroke.piece) for stroke in found] == [Line, Arc] * 4
    for one, other in zip(found, found[1:] + found[:1], strict=True):
        assert abs(one.piece.end - other.piece.start) < 1e-13
    sides = [abs(stroke.piece.end - stroke.piece.start) for stroke in found[::2]]
    assert sides == pytest.approx([10 - 2 * a, 6 - 2 * b] * 2)


ARCS = (
    "M 0 0 A 5 3 30 1 0 3 1 A 5 3 10 0 1 4 2 a 5 5 10 1 1 2 0 "
    "M 10 0 A 5 5 0 0 0 0 0 A 2 1 20 0 1 9 3"
)


def test_path_arcs_are_svgelements_own_and_end_exactly(svg):
    from svgelements import Arc as TheirArc
    from svgelements import Path

    theirs = [segment for segment in Path(ARCS) if isinstance(segment, TheirArc)]
    mine = strokes(svg(f'<path d="{ARCS}"/>'))
    for stroke, arc in zip(mine, theirs, strict=True):
        points = [complex(p.x, p.y) for p in map(arc.point, T)]
        np.testing.assert_allclose(as_drawn(stroke), points, atol=3e-7)
        ends = complex(arc.start.x, arc.start.y), complex(arc.end.x, arc.end.y)
        np.testing.assert_allclose(as_drawn(stroke)[[0, -1]], ends, atol=1e-13)


def test_two_half_arcs_make_one_circle_exactly(svg):
    found = strokes(svg('<path d="M 10 40 a 30 30 0 0 0 60 0 a 30 30 0 0 0 -60 0 z"/>'))
    for stroke in found:
        np.testing.assert_allclose(abs(as_drawn(stroke) - (40 + 40j)), 30.0, rtol=1e-14)


def test_beziers(svg):
    cubic, smooth, quadratic, line = strokes(
        svg('<path d="M 0 0 c 1 2 3 0 4 1 s 2 1 3 0 q 1 1 2 0 z"/>')
    )
    assert np.array(cubic.piece.points) == pytest.approx([80j, 1 + 78j, 3 + 80j, 4 + 79j])
    assert smooth.piece.points[1] == pytest.approx(5 + 78j)  # the last handle, mirrored
    assert isinstance(quadratic.piece, Bezier)
    assert len(quadratic.piece.points) == 3
    assert line.piece.end == 80j


def test_transforms_and_use(svg):
    body = (
        '<defs><circle id="dot" r="1"/></defs>'
        '<g transform="translate(10,20)"><g transform="rotate(90)">'
        '<use href="#dot" x="5" transform="scale(2 1)"/></g></g>'
    )
    (dot,) = strokes(svg(body))
    z = as_drawn(dot) - (10 + 30j)
    np.testing.assert_allclose(z.real**2 + (z.imag / 2) ** 2, 1.0, rtol=1e-13)
    assert dot.name == "dot"


def test_a_skewed_circle_stays_exact(svg):
    (skewed,) = strokes(svg('<circle r="3" transform="skewX(30)"/>'))
    z = as_drawn(skewed)
    back = z.real - np.tan(np.radians(30)) * z.imag + 1j * z.imag
    np.testing.assert_allclose(abs(back), 3.0, rtol=1e-14)


def test_names_come_from_ids_labels_and_groups(svg):
    label = 'xmlns:inkscape="http://www.inkscape.org/namespaces/inkscape" inkscape:label="Skin"'
    body = f'<g id="layer1" {label}><circle r="1"/><circle id="own" r="2"/></g><circle r="3"/>'
    grouped, own, bare = strokes(svg(body))
    assert (grouped.name, own.name, bare.name) == ("Skin", "own", "")
    assert own.layers == ("own", "Skin", "layer1")


def test_what_is_not_seen(svg):
    body = (
        '<g style="display: none"><circle r="1"/></g><circle r="2" display="none"/>'
        '<clipPath><circle r="3"/></clipPath><symbol id="s"><circle r="4"/></symbol><text>t</text>'
    )
    assert strokes(svg(body)) == ()


@pytest.mark.parametrize(
    ("page", "metres"),
    [
        ('width="100mm" viewBox="0 0 100 80"', 1e-3),
        ('width="10cm" height="8cm" viewBox="0 0 1000 800"', 1e-4),
        ('height="2in" viewBox="0,0,100,80"', 2 * 0.0254 / 80),
        ('width="3in"', 0.0254 / 96),
        ('width="100" viewBox="0 0 100 80"', None),
        ('width="100%" viewBox="0 0 100 80"', None),
        ('viewBox="0 0 100 80"', None),
        (BARE, None),
    ],
)
def test_the_page_gives_the_unit(svg, page, metres):
    unit = reader.read(svg("<circle r='1'/>", page)).unit
    assert unit == (metres if metres is None else pytest.approx(metres, rel=1e-15))


def test_lengths_inside_the_drawing(svg):
    """96 user units to the inch: CSS Values and Units."""
    (dot,) = strokes(svg('<circle cx="1in" r="25.4mm"/>'))
    np.testing.assert_allclose(abs(as_drawn(dot) - 96), 96.0, rtol=1e-14)


def test_the_origin_is_the_lower_left_corner_of_the_page(svg):
    page = 'viewBox="-50 -40 100 80"'
    (dot,) = strokes(svg('<circle r="3"/>', page))
    assert dot.piece.centre == 50 + 40j
    (dot,) = strokes(svg('<circle cy="7" r="3"/>', BARE))
    assert dot.piece.centre == -7j


def test_nothing_outside_the_file_is_looked_at(svg, tmp_path):
    secret = tmp_path / "secret.svg"
    secret.write_text('<svg xmlns="http://www.w3.org/2000/svg"><circle id="x" r="9"/></svg>')
    body = (
        f'<use href="{secret.as_uri()}#x"/><image href="http://127.0.0.1:9/x.png"/>'
        '<script>alert(1)</script><circle r="1"/>'
    )
    sketch = reader.read(svg(body))
    assert len(sketch.groups[WHOLE]) == 1
    assert sketch.notes == (
        "left out what is no curve: 1 image, 1 use of something outside the file",
    )


def test_entities_from_outside_are_not_read(tmp_path):
    (tmp_path / "secret.txt").write_text("hidden")
    path = tmp_path / "drawing.svg"
    path.write_text(
        f'<!DOCTYPE svg [<!ENTITY x SYSTEM "{(tmp_path / "secret.txt").as_uri()}">]>'
        '<svg xmlns="http://www.w3.org/2000/svg"><circle id="&x;" r="1"/></svg>'
    )
    with pytest.raises(DrawingError, match="cannot be read as SVG"):
        reader.read(path)


def test_a_drawing_that_uses_itself(svg):
    with pytest.raises(DrawingError, match="refer to themselves"):
        reader.read(svg('<g id="a"><use href="#a"/></g>'))


@pytest.mark.parametrize(
    "body", ["<circle r='1'", '<circle r="big"/>', '<circle r="1em"/>', '<polygon points="0 0 1"/>']
)
def test_a_file_that_is_no_svg(svg, body):
    with pytest.raises(DrawingError, match=r"drawing.svg cannot be read as SVG \(.*\); export"):
        reader.read(svg(body))
