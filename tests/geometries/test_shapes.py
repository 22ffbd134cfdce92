"""Every built-in shape against closed forms, on the kernel's own curves."""

import numpy as np
import pytest
from scipy.integrate import quad
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
    "rounded rectangle": (
        shape("rounded_rectangle", width=0.4, height=0.3, radius=0.05),
        0.12 - (4 - PI) * 0.0025,
        {"rim": 1.4 - (8 - 2 * PI) * 0.05},
    ),
    "rounded square that is a disc": (
        shape("rounded_rectangle", width=0.4, height=0.4, radius=0.2),
        PI * 0.04,
        {"rim": PI * 0.4},
    ),
    "disc without harmonics": (shape("fourier", mean_radius=0.3), PI * 0.09, {"rim": PI * 0.6}),
    "limaçon": (  # r = 1 + a cos theta: perimeter 4 (1 + a) E(4a/(1 + a)^2)
        shape("fourier", mean_radius=1.0, harmonics=((1, 0.5, 0.0),)),
        PI * (1 + 0.5**2 / 2),
        {"rim": 6.0 * ellipe(2.0 / 1.5**2)},
    ),
    # x(s) = 1 - 3/2 s^2 + 1/2 s^3, y(s) = x(1 - s) over a quarter, solved by hand
    "spline through a square": (
        shape("spline", points=((1, 0), (0, 1), (-1, 0), (0, -1))),
        61 / 20,
        {"rim": 4 * quad(lambda s: np.hypot(1.5 * s * (s - 2), 1.5 * (1 - s * s)), 0, 1)[0]},
    ),
    "clockwise spline": (
        shape("spline", points=((0, -1), (-1, 0), (0, 1), (1, 0))),
        61 / 20,
        {"rim": 4 * quad(lambda s: np.hypot(1.5 * s * (s - 2), 1.5 * (1 - s * s)), 0, 1)[0]},
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


def test_the_corners_of_a_rounded_rectangle_are_exact():
    x, y = rim_points(shape("rounded_rectangle", width=0.4, height=0.3, radius=0.1), "rim")
    beyond = np.maximum(np.abs(x) - 0.1, 0.0), np.maximum(np.abs(y) - 0.05, 0.0)
    np.testing.assert_allclose(np.hypot(*beyond), 0.1, rtol=1e-13)


@pytest.mark.parametrize("highest", [1, 3, 8, 20])
def test_a_fourier_curve_is_followed_to_a_millionth_of_a_millionth(highest):
    a, b = 0.3 / highest, -0.2 / highest
    harmonics = ((1, 0.01, 0.0), (highest, a, b)) if highest > 1 else ((1, a, b),)
    x, y = rim_points(shape("fourier", mean_radius=1.0, harmonics=harmonics), "rim")
    theta = np.arctan2(y, x)
    r = 1.0 + sum(p * np.cos(k * theta) + q * np.sin(k * theta) for k, p, q in harmonics)
    np.testing.assert_allclose(np.hypot(x, y), r, rtol=2e-12)


UNEVEN = ((1.0, 0.0), (0.6, 0.5), (0.1, 0.9), (-1.0, 0.2), (-0.3, -0.2), (0.2, -0.8))


def test_a_spline_goes_through_its_points():
    x, y = rim_points(shape("spline", points=UNEVEN), "rim")
    for px, py in UNEVEN:
        assert np.hypot(x - px, y - py).min() < 1e-14


def test_a_spline_has_no_corner_and_no_jump_of_curvature():
    with Kernel.session() as kernel:
        tags = [curve.tag for curve in draw(kernel, study(shape("spline", points=UNEVEN))).curves]
        ends = [kernel.ends(tag) for tag in tags]
        at = {tag: np.array(kernel.bounds(tag)) for tag in tags}
        slope = {tag: kernel.tangent(tag, at[tag]) for tag in tags}
        bend = {tag: kernel.curvature(tag, at[tag]) for tag in tags}
    assert len(tags) == len(UNEVEN)
    for one, (_, stop) in zip(tags, ends, strict=True):
        other = next(tag for tag, (start, _) in zip(tags, ends, strict=True) if start == stop)
        (ux, uy), (vx, vy) = slope[one][:, 1], slope[other][:, 0]
        assert abs(ux * vy - uy * vx) < 1e-12 * np.hypot(ux, uy) * np.hypot(vx, vy)
        assert bend[one][1] == pytest.approx(bend[other][0], rel=1e-9)


def test_crowded_points_are_followed_by_few_pieces():
    """A cubic spline leaves a circle by h^4/384 (de Boor, A Practical Guide to Splines)."""
    theta = 2 * PI * np.arange(1000) / 1000
    points = tuple(map(tuple, np.array([np.cos(theta), np.sin(theta)]).T.tolist()))
    wanted = shape("spline", points=points)
    with Kernel.session() as kernel:
        assert len(draw(kernel, study(wanted)).curves) < 100
    x, y = rim_points(wanted, "rim")
    np.testing.assert_allclose(np.hypot(x, y), 1.0, atol=5e-10)


def test_a_side_of_a_polygon_starts_at_its_corner():
    corners = ((0.0, 0.0), (3.0, 4.0), (3.0, 0.0))
    for k in range(3):
        points = rim_points(shape("polygon", corners=corners), f"side{k + 1}")
        ends = {tuple(np.round(p, 12).tolist()) for p in points[:, [0, -1]].T}
        assert ends == {corners[k], corners[(k + 1) % 3]}


def test_a_regular_polygon_has_its_first_corner_on_x():
    points = rim_points(shape("regular_polygon", sides=5, radius=0.7), "side1")
    np.testing.assert_allclose(points[:, 0], [0.7, 0.0], atol=1e-15)
