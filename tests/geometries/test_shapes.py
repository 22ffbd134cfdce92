"""Every built-in shape against closed forms, on the kernel's own curves."""

import numpy as np
import pytest
from scipy.special import ellipe

from membrane.kernel import Kernel
from membrane.outline import draw
from tests.outline.studies import shape, study

PI = np.pi
SHAPES = {
    "disc": (shape("disc", diameter=0.356), PI * 0.178**2, {"rim": PI * 0.356}),
    "wide ellipse": (
        shape("ellipse", width=1.0, height=0.6),
        PI * 0.5 * 0.3,
        {"rim": 2.0 * ellipe(1 - 0.36)},
    ),
    "tall ellipse": (
        shape("ellipse", width=0.6, height=1.0),
        PI * 0.5 * 0.3,
        {"rim": 2.0 * ellipe(1 - 0.36)},
    ),
    "rectangle": (
        shape("rectangle", width=0.4, height=0.3),
        0.12,
        {"left": 0.3, "right": 0.3, "bottom": 0.4, "top": 0.4},
    ),
    "polygon": (
        shape("polygon", corners=((0.0, 0.0), (3.0, 0.0), (3.0, 4.0))),
        6.0,
        {"side1": 3.0, "side2": 4.0, "side3": 5.0},
    ),
    "clockwise polygon": (
        shape("polygon", corners=((0.0, 0.0), (3.0, 4.0), (3.0, 0.0))),
        6.0,
        {"side1": 5.0, "side2": 4.0, "side3": 3.0},
    ),
    "L": (
        shape("polygon", corners=((0, 0), (1, 0), (1, 1), (-1, 1), (-1, -1), (0, -1))),
        3.0,
        {"side1": 1, "side2": 1, "side3": 2, "side4": 2, "side5": 1, "side6": 1},
    ),
    "hexagon": (
        shape("regular_polygon", sides=6, radius=0.2),
        1.5 * np.sqrt(3) * 0.04,
        {f"side{k}": 0.2 for k in range(1, 7)},
    ),
    "stadium": (
        shape("stadium", straight=0.5, width=0.3),
        0.15 + PI * 0.15**2,
        {"rim": 1.0 + PI * 0.3},
    ),
} | {
    f"sector of {degrees} deg": (
        shape("sector", radius=2.0, angle=np.radians(degrees)),
        2.0 * np.radians(degrees),
        {"arc": 2.0 * np.radians(degrees), "start": 2.0, "end": 2.0},
    )
    for degrees in (5, 90, 120, 180, 270, 359)
}


@pytest.mark.parametrize("name", SHAPES)
def test_area_and_edges(name):
    wanted, area, edges = SHAPES[name]
    with Kernel.session() as kernel:
        outline = draw(kernel, study(wanted))
    assert outline.area == pytest.approx(area, rel=1e-11)
    assert outline.edges == tuple(edges)
    for edge, length in edges.items():
        assert outline.edge_length(edge) == pytest.approx(length, rel=1e-11)


@pytest.mark.parametrize("name", SHAPES)
def test_the_plugin_names_the_edges_it_draws(name):
    from membrane.plugins import load

    wanted, _, edges = SHAPES[name]
    assert load("outline", wanted.plugin).edges(wanted.options) == tuple(edges)


def rim_points(wanted, edge):
    with Kernel.session() as kernel:
        outline = draw(kernel, study(wanted))
        tags = [curve.tag for curve in outline.curves if curve.edge == edge]
        return np.hstack([kernel.evaluate(t, np.linspace(*kernel.bounds(t), 60)) for t in tags])


@pytest.mark.parametrize("width", [0.3, 1.7])
def test_an_ellipse_is_exact_and_lies_as_asked(width):
    x, y = rim_points(shape("ellipse", width=width, height=0.8), "rim")
    np.testing.assert_allclose((2 * x / width) ** 2 + (y / 0.4) ** 2, 1.0, atol=1e-13)


def test_an_arc_of_a_sector_is_exact():
    x, y = rim_points(shape("sector", radius=2.0, angle=5.5), "arc")
    np.testing.assert_allclose(np.hypot(x, y), 2.0, rtol=1e-14)


def test_the_ends_of_a_stadium_are_exact():
    x, y = rim_points(shape("stadium", straight=0.5, width=0.3), "rim")
    beyond = np.maximum(np.abs(x) - 0.25, 0.0)
    np.testing.assert_allclose(np.hypot(beyond, y), 0.15, rtol=1e-13)


def test_a_side_of_a_polygon_starts_at_its_corner():
    corners = ((0.0, 0.0), (3.0, 4.0), (3.0, 0.0))
    for k in range(3):
        points = rim_points(shape("polygon", corners=corners), f"side{k + 1}")
        ends = {tuple(np.round(p, 12).tolist()) for p in points[:, [0, -1]].T}
        assert ends == {corners[k], corners[(k + 1) % 3]}


def test_a_regular_polygon_has_its_first_corner_on_x():
    points = rim_points(shape("regular_polygon", sides=5, radius=0.7), "side1")
    np.testing.assert_allclose(points[:, 0], [0.7, 0.0], atol=1e-15)
