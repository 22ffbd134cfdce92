"""DXF files written by ezdxf: every kind of curve exact, layers, blocks, units, bad files."""

import numpy as np
import pytest

from membrane.drawings import dxf as reader
from membrane.drawings.pieces import Arc, Bezier, Line
from membrane.drawings.sketch import WHOLE
from membrane.errors import DrawingError

T = np.linspace(0.0, 1.0, 33)
RING = {"layer": "ring"}


def strokes(path):
    return reader.read(path).groups[WHOLE]


def points(path):
    return np.hstack([stroke.piece.at(T) for stroke in strokes(path)])


def test_lines_arcs_and_circles(dxf):
    def draw(space):
        space.add_line((1, 2), (3, 4), dxfattribs=RING)
        space.add_arc((1, 0), 2.0, 350.0, 80.0)
        space.add_circle((0, 5), 3.0)

    line, arc, circle = strokes(dxf(draw))
    assert (line.name, line.piece) == ("ring", Line(1 + 2j, 3 + 4j))
    assert arc.name == ""
    np.testing.assert_allclose(abs(arc.piece.at(T) - 1), 2.0, rtol=1e-14)
    assert np.degrees(np.angle(arc.piece.end - 1)) == pytest.approx(80.0)
    assert arc.piece.last - arc.piece.first == pytest.approx(np.pi / 2)
    np.testing.assert_allclose(abs(circle.piece.at(T) - 5j), 3.0, rtol=1e-14)


def test_an_ellipse(dxf):
    path = dxf(lambda space: space.add_ellipse((1, 2), (0, 3), 0.5, 0.0, np.pi))
    (ellipse,) = strokes(path)
    z = ellipse.piece.at(T) - (1 + 2j)
    np.testing.assert_allclose((z.real / 1.5) ** 2 + (z.imag / 3) ** 2, 1.0, rtol=1e-14)
    assert ellipse.piece.start == pytest.approx(1 + 5j)
    assert ellipse.piece.at(np.array([0.5]))[0].real < 1.0  # counter-clockwise from the top


def test_splines_are_ezdxfs_own_curves(dxf):
    controls, weights = [(0, 0), (1, 2), (3, 1), (4, -1), (6, 0)], [1.0, 2.0, 0.5, 1.0, 1.0]
    made = []

    def draw(space):
        made.append(space.add_open_spline(controls))
        made.append(space.add_rational_spline(controls, weights))

    found = strokes(dxf(draw))
    assert all(isinstance(stroke.piece, Bezier) for stroke in found)
    for spline, pieces in zip(made, (found[:2], found[2:]), strict=True):
        tool = spline.construction_tool()
        half = tool.max_t / 2
        for k, stroke in enumerate(pieces):
            exact = [complex(p.x, p.y) for p in tool.points(half * (k + T))]
            np.testing.assert_allclose(stroke.piece.at(T), exact, atol=1e-12)


def test_a_spline_by_its_fit_points_is_drawn_and_told(dxf):
    path = dxf(lambda space: space.add_spline([(0, 0), (1, 1), (2, 0)]))
    ends = [strokes(path)[0].piece.start, strokes(path)[-1].piece.end]
    assert ends == pytest.approx([0, 2])
    assert "1 splines smoothly through their fit points" in reader.read(path).notes[0]


@pytest.mark.parametrize("light", [True, False])
def test_bulged_polylines(dxf, light):
    corners = [(0, 0, 1.0), (2, 0, 0.0), (2, 3, -0.4)]

    def draw(space):
        add = space.add_lwpolyline if light else space.add_polyline2d
        add(corners, format="xyb", close=True)

    first, second, third = strokes(dxf(draw))
    np.testing.assert_allclose(abs(first.piece.at(T) - 1), 1.0, rtol=1e-14)
    assert second.piece == Line(2 + 0j, 2 + 3j)
    assert isinstance(third.piece, Arc)
    assert abs(third.piece.end) < 1e-14


def test_a_polyline_in_space_that_is_flat(dxf):
    found = strokes(dxf(lambda s: s.add_polyline3d([(0, 0, 2), (1, 0, 2), (0, 1, 2)], close=True)))
    assert [stroke.piece for stroke in found][1] == Line(1 + 0j, 1j)
    assert len(found) == 3


def test_a_curve_drawn_from_below_is_mirrored(dxf):
    below = {"extrusion": (0, 0, -1)}

    def draw(space):
        space.add_arc((1, 2), 1.0, 0.0, 90.0, dxfattribs=below)
        space.add_lwpolyline([(0, 0, 1), (2, 0, 0)], format="xyb", dxfattribs=below)

    arc, bow = strokes(dxf(draw))
    assert (arc.piece.start, arc.piece.end) == pytest.approx((-2 + 2j, -1 + 3j))
    assert bow.piece.at(np.array([0.5]))[0] == pytest.approx(-1 - 1j)


def test_blocks_are_taken_apart(dxf):
    def draw(space):
        block = space.doc.blocks.new("dot")
        block.add_circle((1, 0), 1.0)
        block.add_circle((1, 0), 0.5, dxfattribs={"layer": "own"})
        space.add_blockref("dot", (3, 3), dxfattribs={"layer": "dots", "xscale": 2, "rotation": 90})

    outer, inner = strokes(dxf(draw))
    assert (outer.name, inner.name) == ("dots", "own")
    z = outer.piece.at(T) - (3 + 5j)
    np.testing.assert_allclose((z.imag / 2) ** 2 + z.real**2, 1.0, rtol=1e-12)


def test_what_is_not_seen_or_no_curve(dxf):
    def draw(space):
        space.doc.layers.add("off").off()
        space.add_line((0, 0), (1, 1), dxfattribs={"layer": "off"})
        space.add_circle((0, 0), 1.0)
        space.add_hatch()
        space.add_text("drum")

    sketch = reader.read(dxf(draw))
    assert len(sketch.groups[WHOLE]) == 1
    assert sketch.notes == ("left out what is no curve: 1 HATCH", "left out the hidden layers off")


@pytest.mark.parametrize(("units", "metres"), [(4, 1e-3), (1, 0.0254), (6, 1.0), (0, None)])
def test_the_header_gives_the_unit(dxf, units, metres):
    assert reader.read(dxf(lambda space: space.add_circle((0, 0), 1), units)).unit == metres


def test_units_are_ezdxfs():
    from ezdxf import units

    known = {code: m for code, m in reader.METRES.items() if units.METER_FACTOR[code]}
    assert len(known) > 10
    for code, metres in known.items():
        assert units.conversion_factor(code, 6) == pytest.approx(metres, rel=1e-6)


def test_a_file_written_by_hand(files):
    (rim,) = strokes(files / "by_hand.dxf")
    np.testing.assert_allclose(abs(rim.piece.at(T)), 7.0, rtol=1e-14)


@pytest.mark.parametrize(
    "draw",
    [
        lambda space: space.add_line((0, 0, 0), (1, 0, 1)),
        lambda space: space.add_circle((0, 0), 1, dxfattribs={"extrusion": (1, 0, 0)}),
        lambda space: space.add_ellipse((0, 0), (1, 0, 1), 0.5),
    ],
)
def test_a_drawing_that_is_not_flat(dxf, draw):
    with pytest.raises(DrawingError, match=r"drawing.dxf is not flat: its curves lie between z ="):
        reader.read(dxf(draw))


@pytest.mark.parametrize(
    "text", ["", "0\nSECTION\n2\nENTITIES\n0\nCIR", "%PDF-1.4", "\xff\xfe\x00"]
)
def test_a_file_that_is_no_dxf(tmp_path, text):
    path = tmp_path / "broken.dxf"
    path.write_text(text, encoding="latin-1")
    with pytest.raises(DrawingError, match=r"broken.dxf cannot be read as DXF \(.*\); export"):
        reader.read(path)
