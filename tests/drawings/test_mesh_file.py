"""Meshes of other programs: boundaries, tags, and what is refused with the reason."""

import numpy as np
import pytest

from membrane.drawings import mesh_file
from membrane.drawings.pieces import Bezier, Line
from membrane.drawings.sketch import WHOLE
from membrane.errors import DrawingError

SQUARE = np.array([[0, 0, 0], [1, 0, 0], [1, 1, 0], [0, 1, 0], [2, 0, 0], [2, 1, 0.0]])
TWO = [("triangle", np.array([[0, 1, 2], [0, 2, 3]]))]


def names(sketch, group=WHOLE):
    return sorted(stroke.name for stroke in sketch.groups[group])


def test_the_boundary_of_triangles(mesh):
    sketch = mesh_file.read(mesh(SQUARE, TWO))
    found = {frozenset((s.piece.start, s.piece.end)) for s in sketch.groups[WHOLE]}
    assert found == {frozenset(side) for side in [(0, 1), (1, 1 + 1j), (1 + 1j, 1j), (1j, 0)]}
    assert (sketch.unit, sketch.exact, sketch.notes) == (None, True, ())


def test_triangles_and_quads_together_with_numbered_regions(mesh):
    cells = [*TWO, ("quad", np.array([[1, 4, 5, 2]]))]
    regions = {"region": [np.array([5, 5]), np.array([9])]}
    sketch = mesh_file.read(mesh(SQUARE, cells, cell_data=regions))
    assert {group: len(those) for group, those in sketch.groups.items()} == {"": 6, "5": 4, "9": 4}


def test_cell_data_that_is_no_tag(mesh):
    data = {"number": [np.array([1, 2])], "stress": [np.array([1.0, 1.0])]}
    assert list(mesh_file.read(mesh(SQUARE, TWO, cell_data=data)).groups) == [WHOLE]


def test_gmshs_physical_groups(files):
    sketch = mesh_file.read(files / "l_shape.msh")
    assert sorted(sketch.groups) == ["", "paste", "skin"]
    assert set(names(sketch)) == {"top", "others"}


def test_sets_of_an_abaqus_file(files):
    sketch = mesh_file.read(files / "rectangle.inp")
    assert set(names(sketch)) == {"left", "right", "top", "bottom"}
    assert {"", "skin"} <= set(sketch.groups)


def test_sets_of_nodes_name_the_sides_between_them(mesh):
    sets = {"low": np.array([0, 1])}
    sketch = mesh_file.read(mesh(SQUARE, TWO, "mesh.inp", point_sets=sets))
    assert names(sketch) == ["", "", "", "low"]


def test_middle_nodes_are_kept_as_parabolas(files):
    sketch = mesh_file.read(files / "disc.vtu")
    assert "as parabolas" in sketch.notes[0]
    assert all(isinstance(stroke.piece, Bezier) for stroke in sketch.groups[WHOLE])
    for stroke in sketch.groups[WHOLE]:
        radii = abs(stroke.piece.at(np.array([0.0, 0.5, 1.0])))
        np.testing.assert_allclose(radii, 1.0, rtol=1e-11)
    assert sorted(sketch.groups) == ["", "7", "8"]


def test_a_straight_side_with_a_middle_node_is_a_line(mesh):
    points = np.array([[0, 0, 0], [1, 0, 0], [0, 1, 0], [0.5, 0, 0], [0.5, 0.5, 0], [0, 0.5, 0]])
    sketch = mesh_file.read(mesh(points, [("triangle6", np.array([[0, 1, 2, 3, 4, 5]]))]))
    assert all(isinstance(stroke.piece, Line) for stroke in sketch.groups[WHOLE])


RAISED = SQUARE + np.outer(np.arange(6) == 1, [0.0, 0.0, 0.2])
TWICE = np.vstack([SQUARE, SQUARE[0]])


@pytest.mark.parametrize(
    ("points", "cells", "sentence"),
    [
        (RAISED, TWO, "is not flat: its nodes lie between z = 0 and z = 0.2"),
        (SQUARE, [*TWO, ("tetra", np.array([[0, 1, 2, 4]]))], "has tetra cells; give a flat mesh"),
        (SQUARE, [("line", np.array([[0, 1]]))], "has no triangles or quads"),
        (
            TWICE,
            [("triangle", np.array([[0, 1, 2], [6, 2, 3]]))],
            "has the nodes 1 and 7 on one place, x = 0, y = 0; merge",
        ),
        (
            SQUARE,
            [("triangle", np.array([[0, 1, 2], [0, 3, 2], [1, 4, 5]]))],
            "inverted or flat cell, number 2 at x = 0.333333, y = 0.666667",
        ),
        (SQUARE, [("quad", np.array([[0, 2, 1, 3]]))], "inverted or flat cell, number 1"),
        (SQUARE, [("triangle", np.array([[0, 1, 4], [0, 1, 2]]))], "inverted or flat cell"),
        (
            SQUARE,
            [("triangle", np.array([[0, 1, 2], [0, 1, 3], [0, 1, 5]]))],
            "has a side that 3 cells share, at x = 0, y = 0",
        ),
        (SQUARE * np.nan, TWO, "has nodes whose coordinates are no numbers"),
    ],
)
def test_an_unsound_mesh(mesh, points, cells, sentence):
    with pytest.raises(DrawingError) as caught:
        mesh_file.read(mesh(points, cells))
    assert str(caught.value).startswith("mesh.vtk ")
    assert sentence in str(caught.value)
    assert str(caught.value).endswith(".")


def test_a_mesh_that_lies_the_other_way_round_is_fine(mesh):
    turned = [("triangle", np.array([[0, 2, 1], [0, 3, 2]]))]
    assert len(mesh_file.read(mesh(SQUARE, turned)).groups[WHOLE]) == 4


@pytest.mark.parametrize("name", ["broken.msh", "broken.vtu", "broken.inp", "broken.xdmf"])
def test_a_file_that_is_no_mesh(tmp_path, name, capfd):
    (tmp_path / name).write_text("nothing of the kind")
    with pytest.raises(DrawingError, match=rf"{name} (cannot be read|has no)"):
        mesh_file.read(tmp_path / name)
    assert capfd.readouterr() == ("", "")
