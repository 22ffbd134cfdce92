"""Singular corners are found, and their strength is the textbook's."""

import numpy as np
import pytest

from membrane.mesh.corners import corners
from membrane.mesh.resolution import region_sizes
from tests import zoo


def found(keys):
    """Place (x, y) -> exponent of every singular corner of a study."""
    with zoo.drawn(keys) as (kernel, study, outline, membrane):
        sizes = region_sizes(outline, membrane, study.modes, 3.0)
        raw = kernel.triangulate(outline, sizes)
        singular = corners(kernel, outline, membrane, raw)
    return {tuple(np.round(raw.vertices[:, c.vertex], 9) + 0.0): c.exponent for c in singular}


def sector(degrees, **edges):
    outline = {"shape": "sector", "radius": 1.0, "angle": f"{degrees} deg"}
    return {"outline": outline, "head": zoo.HEAD, "edges": edges}


def regular(sides):
    return {**zoo.DISC, "outline": {"shape": "regular_polygon", "sides": sides, "radius": 1.0}}


@pytest.mark.parametrize("keys", [zoo.DISC, zoo.SQUARE, zoo.PATCHED, regular(3)])
def test_smooth_heads_have_none(keys):
    """pi/w is whole at 90 and 60 degrees between straight sides held alike."""
    assert found(keys) == {}


def test_the_reentrant_corner_of_the_l_shape():
    """2/3 at an opening of 270 degrees: Grisvard 1985."""
    singular = found(zoo.L_SHAPE)
    assert list(singular) == [(0.0, 0.0)]
    assert abs(singular[0.0, 0.0] - 2 / 3) < 1e-9


@pytest.mark.parametrize(("sides", "opening"), [(5, 108), (8, 135)])
def test_every_corner_of_a_regular_polygon(sides, opening):
    singular = found(regular(sides))
    assert len(singular) == sides
    assert max(abs(e - 180 / opening) for e in singular.values()) < 1e-9


def test_hexagon_corners_are_one_and_a_half():
    assert set(np.round(list(found(regular(6)).values()), 9)) == {1.5}


@pytest.mark.parametrize(
    ("degrees", "free", "exponent"),
    [(270, (), 2 / 3), (350, (), 180 / 350), (120, ("start",), 0.75), (120, (), 1.5)],
)
def test_apex_of_a_sector(degrees, free, exponent):
    singular = found(sector(degrees, **{name: {"support": "free"} for name in free}))
    assert abs(singular[0.0, 0.0] - exponent) < 1e-9


def test_mixed_right_angle_is_smooth_but_a_straight_change_is_not():
    free_side = {**zoo.SQUARE, "edges": {"top": {"support": "free"}}}
    assert found(free_side) == {}
    corners = [[0, 0], [1, 0], [2, 0], [2, 1], [0, 1]]
    half_free = {
        "outline": {"shape": "polygon", "corners": corners},
        "head": zoo.HEAD,
        "edges": {"side1": {"support": "free"}},
    }
    assert found(half_free) == {(1.0, 0.0): 0.5}


def test_woven_tension_measures_the_angle_in_its_own_metric():
    """diag(1, 3) takes the 60 degree corner at (0, 0) to 45 degrees: atan(sqrt 3/sqrt 3)."""
    triangle = {"shape": "polygon", "corners": [[0, 0], [1, 0], [0.5, 0.75**0.5]]}
    woven = {"areal_density": 1.0, "tension": {"xx": 1.0, "xy": 0.0, "yy": 3.0}}
    singular = found({"outline": triangle, "head": woven})
    assert (0.0, 0.0) not in singular  # 180/45 is whole
    assert found({"outline": triangle, "head": {**woven, "tension": {"xx": 1, "xy": 0, "yy": 2}}})


def test_junction_of_straight_and_curved_sides():
    """A stadium's curvature jumps where arc meets straight: r^2 log r, one order weaker."""
    stadium = {"shape": "stadium", "straight": 2.0, "width": 2.0}
    singular = found({"outline": stadium, "head": zoo.HEAD})
    assert len(singular) == 4
    assert set(np.round(list(singular.values()), 6)) == {2.0}


FIVE_WAVES = {"shape": "fourier", "mean_radius": 1.0, "harmonics": [[5, 0.3, 0.1]]}
UNEVEN = {"shape": "spline", "points": [[1, 0], [0.2, 0.3], [0, 1], [-1, 0.1], [0, -1]]}


@pytest.mark.parametrize("outline", [FIVE_WAVES, UNEVEN])
def test_pieces_of_one_smooth_curve_meet_without_a_corner(outline):
    """Through inflections too, where the curvature is next to nothing."""
    assert found({"outline": outline, "head": zoo.HEAD}) == {}


def test_patch_corners_inside_the_head():
    patch = {"name": "square", "shape": "rectangle", "width": 0.4, "height": 0.4}
    heavy = found({**zoo.DISC, "patches": [{**patch, "added_density": 2.0}]})
    tight = found({**zoo.DISC, "patches": [{**patch, "tension": 2.0}]})
    assert sorted(heavy.values()) == [2.0] * 4
    assert sorted(tight.values()) == [0.5] * 4


ROUND = {"edge": "rim", "name": "part", "from": "20 deg", "to": "80 deg"}


@pytest.mark.parametrize(
    ("part", "rim", "exponent"),
    [
        ({"support": "free"}, {}, 0.5),
        ({"support": "elastic", "stiffness": 2.0}, {}, 0.5),
        ({"support": "elastic", "stiffness": 2.0}, {"support": "free"}, 1.0),
        ({"support": "free", "mass": 2.0}, {"support": "free"}, 1.0),
    ],
)
def test_where_supports_change_along_a_smooth_rim(part, rim, exponent):
    """1/2 between fixed and moving; r log r where only the springs or the mass jump."""
    singular = found({**zoo.DISC, "edge_parts": [ROUND], "edges": {"part": part, "rim": rim}})
    places = {(np.cos(a), np.sin(a)) for a in np.radians([20.0, 80.0])}
    assert {tuple(np.round(p, 9)) for p in places} == set(singular)
    assert list(singular.values()) == pytest.approx([exponent] * 2)


def test_parts_held_alike_leave_the_rim_smooth():
    free = {"support": "free", "mass": 1.0}
    assert found({**zoo.DISC, "edge_parts": [ROUND], "edges": {"part": free, "rim": free}}) == {}


@pytest.mark.parametrize(
    ("left", "right", "exponent"),
    [("fixed", "fixed", 0.5), ("free", "free", 0.5), ("free", "fixed", 0.25)],
)
def test_tips_of_a_slit(left, right, exponent):
    """pi/w and pi/2w at an opening of 360 degrees."""
    slit = {"name": "cut", "points": [[-0.3, 0.1], [0.4, 0.1]]}
    slit |= {"left": {"support": left}, "right": {"support": right}}
    assert found({**zoo.DISC, "slits": [slit]}) == pytest.approx(
        {(-0.3, 0.1): exponent, (0.4, 0.1): exponent}
    )


def wire(name, *points):
    return {"name": name, "shape": "polyline", "points": list(points), "line_density": 0.2}


def test_a_line_load_ends_bends_and_crosses():
    """Half lines of charge have r log r where they end; two that go straight on cancel it."""
    bent = found({**zoo.SQUARE, "line_loads": [wire("w", [0.2, 0.2], [0.6, 0.3], [0.5, 0.8])]})
    assert bent == {(0.2, 0.2): 1.0, (0.6, 0.3): 1.0, (0.5, 0.8): 1.0}
    level, upright = wire("level", [0.2, 0.5], [0.8, 0.5]), wire("upright", [0.5, 0.0], [0.5, 1.0])
    crossing = found({**zoo.SQUARE, "line_loads": [level, upright]})
    assert crossing == {
        **{(0.2, 0.5): 1.0, (0.8, 0.5): 1.0, (0.5, 0.5): 2.0},
        **{(0.5, 0.0): 2.0, (0.5, 1.0): 2.0},
    }


def test_a_straight_joint_of_a_line_load_is_no_corner():
    straight = wire("w", [0.5, 0.0], [0.5, 0.4], [0.5, 1.0])
    assert (0.5, 0.4) not in found({**zoo.SQUARE, "line_loads": [straight]})


def test_woven_tension_keeps_a_crossing_in_balance():
    woven = {"areal_density": 1.0, "tension": {"xx": 1.0, "xy": 0.4, "yy": 3.0}}
    loads = [wire("a", [0.3, 0.3], [0.7, 0.6]), wire("b", [0.5, 0.2], [0.5, 0.9])]
    crossing = found({**zoo.SQUARE, "head": woven, "line_loads": loads})
    inner = [exponent for (x, y), exponent in crossing.items() if 0 < x < 1 and 0 < y < 1]
    assert sorted(inner) == [1.0] * 4 + [2.0]
