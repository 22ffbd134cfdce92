"""gmsh's process state stays ours alone, curves are exact, meshes sound and repeatable."""

import os
import signal
import subprocess
import sys
from collections import Counter
from concurrent.futures import ThreadPoolExecutor
from dataclasses import fields
from pathlib import Path

import gmsh
import numpy as np
import pytest
from scipy.special import ellipe

from membrane.errors import MeshError
from membrane.kernel import Kernel
from membrane.kernel.sizes import Bend
from membrane.outline import draw
from membrane.records.outline import Curve, Outline, Region
from tests.outline.studies import box, disc, shape, study

LOADED = study(
    disc(2.0),
    {"paste": disc(0.9, 0.1, 0.2), "bar": box(0.8, 0.2, -0.5, -0.3, rotate=0.4)},
    {"port": shape("ellipse", (-0.5, 0.4), 0.3, width=0.3, height=0.2)},
)


def meshed(wanted, edge, bend=None):
    """Outline and raw mesh with one edge length for all regions."""
    with Kernel.session() as kernel:
        outline = draw(kernel, wanted)
        sizes = dict.fromkeys((region.name for region in outline.regions), edge)
        bends = () if bend is None else (bend,)
        return outline, kernel.triangulate(outline, sizes, *bends)


def same(one, other):
    return all(
        np.array_equal(getattr(one, field.name), getattr(other, field.name))
        for field in fields(one)
    )


def quality(raw):
    """4 sqrt(3) area / sum of squared sides: 1 for an equilateral triangle."""
    corners = raw.vertices[:, raw.triangles]
    squares = ((corners - corners[:, [1, 2, 0]]) ** 2).sum(axis=(0, 1))
    return 4.0 * np.sqrt(3.0) * raw.areas / squares


# Sessions


def test_threads_take_turns_and_make_the_same_mesh():
    with ThreadPoolExecutor(4) as pool:
        futures = [pool.submit(meshed, LOADED, 0.4) for _ in range(8)]
        raws = [future.result()[1] for future in futures]
    expected = meshed(LOADED, 0.4)[1]
    assert all(same(raw, expected) for raw in raws)


def test_sixty_sessions_make_the_same_mesh():
    first = meshed(study(disc(2.0)), 0.4)[1]
    for _ in range(60):
        assert same(meshed(study(disc(2.0)), 0.4)[1], first)


def test_signals_stay_as_they_were():
    before = signal.getsignal(signal.SIGINT)
    meshed(study(disc(2.0)), 0.5)
    assert signal.getsignal(signal.SIGINT) is before


def fail_inside():
    with Kernel.session():
        raise ZeroDivisionError


def test_a_session_ends_when_something_fails_in_it():
    with pytest.raises(ZeroDivisionError):
        fail_inside()
    assert not gmsh.isInitialized()
    meshed(study(disc(2.0)), 0.5)


def test_a_session_of_someone_else_is_left_alone():
    gmsh.initialize([], readConfigFiles=False, interruptible=False)
    try:
        with pytest.raises(MeshError, match="already open"), Kernel.session():
            pass
        assert gmsh.isInitialized()
    finally:
        gmsh.finalize()


def test_options_do_not_leak_from_one_session_to_the_next():
    expected = meshed(study(disc(2.0)), 0.4)[1]
    with Kernel.session():
        gmsh.option.setNumber("Mesh.Algorithm", 5)
        gmsh.option.setNumber("Mesh.MeshSizeFactor", 0.3)
        gmsh.option.setNumber("Mesh.RecombineAll", 1)
    assert same(meshed(study(disc(2.0)), 0.4)[1], expected)


COUNT = """
import gmsh
from tests.kernel.test_session import meshed, study, disc
print(meshed(study(disc(2.0)), 0.4)[1].size)
gmsh.initialize([], interruptible=False)
print(gmsh.option.getNumber("Mesh.MeshSizeFactor"))
"""


@pytest.mark.slow
def test_the_users_gmsh_settings_change_nothing(tmp_path):
    for name in (".gmshrc", ".gmsh-options"):
        (tmp_path / name).write_text("Mesh.MeshSizeFactor = 0.25;\n")
    run = subprocess.run(
        [sys.executable, "-c", COUNT],
        env={**os.environ, "HOME": str(tmp_path), "GMSH_HOME": str(tmp_path)},
        capture_output=True,
        text=True,
        check=True,
        cwd=Path(__file__).parents[2],
    )
    count, factor = run.stdout.split()[-2:]
    assert float(factor) == 0.25  # the settings are found, and would count
    assert int(count) == meshed(study(disc(2.0)), 0.4)[1].size


# Curves


def test_a_disc_is_an_exact_circle():
    with Kernel.session() as kernel:
        (rim,) = draw(kernel, study(disc(0.6, 0.1, -0.2))).curves
        t = np.linspace(*kernel.bounds(rim.tag), 101)
        (x, y), (dx, dy) = kernel.evaluate(rim.tag, t), kernel.tangent(rim.tag, t)
        curvature = kernel.curvature(rim.tag, t)
    x, y = x - 0.1, y + 0.2
    np.testing.assert_allclose(np.hypot(x, y) / 0.3, 1.0, atol=1e-14)
    np.testing.assert_allclose(x * dx + y * dy, 0.0, atol=1e-15)
    np.testing.assert_allclose(np.hypot(dx, dy), 0.3, rtol=1e-14)
    np.testing.assert_allclose(curvature, 1 / 0.3, rtol=1e-13)


def test_the_length_of_an_ellipse_is_exact():
    with Kernel.session() as kernel:
        outline = draw(kernel, study(shape("ellipse", width=1.0, height=5.0)))
    assert outline.edge_length("rim") == pytest.approx(4 * 2.5 * ellipe(1 - 0.04), rel=1e-9)


# Meshes


def test_segments_follow_their_curves():
    with Kernel.session() as kernel:
        outline = draw(kernel, LOADED)
        raw = kernel.triangulate(outline, {r.name: 0.4 for r in outline.regions})
        for curve in outline.curves:
            mine = raw.segment_curve == curve.tag
            for end in (0, 1):
                exact = kernel.evaluate(curve.tag, raw.segment_parameters[end, mine])
                met = raw.vertices[:, raw.segments[end, mine]]
                np.testing.assert_allclose(met, exact, rtol=0, atol=1e-12)
            steps = np.diff(raw.segment_parameters[:, mine], axis=0)
            first, last = kernel.bounds(curve.tag)
            assert np.all(steps > 0)
            assert steps.sum() == pytest.approx(last - first, rel=1e-12)


def test_a_segment_is_a_side_of_one_triangle_at_an_edge_and_of_two_inside():
    outline, raw = meshed(LOADED, 0.4)
    sides = Counter(
        tuple(sorted(pair))
        for i, j in ((0, 1), (1, 2), (2, 0))
        for pair in zip(raw.triangles[i].tolist(), raw.triangles[j].tolist(), strict=True)
    )
    expected = {curve.tag: 1 if curve.edge else 2 for curve in outline.curves}
    pairs = [tuple(sorted(pair)) for pair in raw.segments.T.tolist()]
    found = [sides.pop(pair) for pair in pairs]
    assert found == [expected[tag] for tag in raw.segment_curve.tolist()]
    assert set(sides.values()) == {2}  # no other side lies at an edge


def test_triangles_know_their_face():
    outline, raw = meshed(LOADED, 0.15)
    for region in outline.regions:
        straight = raw.areas[np.isin(raw.face, region.faces)].sum()
        assert straight == pytest.approx(region.area, rel=0.06)
    assert set(raw.face.tolist()) == {face for r in outline.regions for face in r.faces}


@pytest.mark.parametrize("clockwise", [False, True])
def test_triangles_run_counter_clockwise(clockwise):
    corners = ((0.0, 0.0), (1.0, 0.0), (0.2, 1.0))
    wanted = shape("polygon", corners=corners[::-1] if clockwise else corners)
    raw = meshed(study(wanted), 0.3)[1]
    assert np.all(raw.areas > 0)
    assert raw.areas.sum() == pytest.approx(0.5, rel=1e-12)


def test_each_region_gets_its_own_size():
    with Kernel.session() as kernel:
        outline = draw(kernel, study(disc(2.0), {"paste": disc(1.0)}))
        raw = kernel.triangulate(outline, {"head": 0.5, "paste": 0.1})
    sides = np.hypot(*(raw.vertices[:, raw.triangles] - raw.vertices[:, raw.triangles[[1, 2, 0]]]))
    in_paste = np.isin(raw.face, outline.regions[1].faces)
    assert sides[:, in_paste].max() < 0.2
    assert 0.3 < sides[:, ~in_paste].max() < 0.8


def test_a_circle_gets_the_segments_asked_for():
    for count in (6, 8, 24):
        assert meshed(study(disc(2.0)), 9.0, Bend(per_circle=count))[1].segments.shape[1] >= count


@pytest.mark.parametrize("radius", [1e-4, 0.3, 100.0])
def test_a_tiny_hole_costs_few_good_triangles_at_any_scale(radius):
    wanted = study(disc(2 * radius), {}, {"pin": disc(0.002 * radius, 0.2 * radius)})
    outline, raw = meshed(wanted, 0.5 * radius)
    assert outline.area == pytest.approx(np.pi * radius**2 * (1 - 1e-6), rel=1e-11)
    assert raw.size < 300
    assert quality(raw).min() > 0.5


def test_a_narrow_gap_is_filled_with_good_triangles():
    raw = meshed(study(disc(2.0), {}, {"port": disc(0.5, 0.749)}), 0.5)[1]
    assert raw.size < 400
    assert quality(raw).min() > 0.5


def test_what_gmsh_says_when_it_fails_reaches_the_user(monkeypatch):
    def fail(dim):
        raise Exception("edges intersect")

    monkeypatch.setattr(gmsh.model.mesh, "generate", fail)
    with pytest.raises(MeshError, match=r"could not cover .* edges intersect"):
        meshed(study(disc(2.0)), 0.5)


def test_a_vertex_off_its_curve_is_found(monkeypatch):
    exact = Kernel.evaluate

    def shifted(self, curve, parameters):
        return exact(self, curve, parameters) + 1e-6

    with Kernel.session() as kernel:
        outline = draw(kernel, study(disc(2.0)))
        monkeypatch.setattr(Kernel, "evaluate", shifted)
        with pytest.raises(MeshError, match=r"are 1.0e-06 m apart"):
            kernel.triangulate(outline, {"head": 0.5})


def test_an_interrupt_while_sizes_are_asked_for_is_not_lost(monkeypatch):
    def interrupted(self, x, y):
        raise KeyboardInterrupt

    with Kernel.session() as kernel:
        outline = draw(kernel, study(disc(2.0)))
        monkeypatch.setattr("membrane.kernel.sizes.SizeMap.at", interrupted)
        monkeypatch.setattr("membrane.kernel.sizes.SizeMap.thinned", lambda sizes: sizes)
        with pytest.raises(KeyboardInterrupt):
            kernel.triangulate(outline, {"head": 0.5})


def test_points_become_vertices_of_the_mesh_wherever_they_lie_on_a_face():
    """Inside, on the border between two faces, and on the rim; another lies off them."""
    places = [(0.25, 0.125), (0.5, 0.0), (0.0, 1.0)]
    with Kernel.session() as kernel:
        head, inner = (kernel.geometry.add_disk([0.0, 0.0], r)._id for r in (1.0, 0.5))
        covers = kernel.fragment([head, inner], [*places, (3.0, 0.0)])
        assert [len(cover) for cover in covers] == [2, 1]
        kernel.keep_only(covers[0])
        tags = sorted({tag for face in covers[0] for tag in kernel.border(face)})
        curves = tuple(Curve(tag, None, kernel.length(tag)) for tag in tags)
        outline = Outline((Region("head", (), tuple(covers[0]), np.pi),), curves)
        raw = kernel.triangulate(outline, {"head": 0.3})
    for place in places:
        assert np.hypot(*(raw.vertices.T - place).T).min() < 1e-12
    assert np.hypot(*raw.vertices).max() < 1.0 + 1e-12
    assert abs(raw.areas.sum() / np.pi - 1.0) < 0.05
