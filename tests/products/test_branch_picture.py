"""The picture of branches: what is drawn, and that each format can be read back."""

import numpy as np
import pytest

from membrane.products.branch_picture import End, curve, numbers, together, write_branches
from membrane.records.diagram import Diagram, Panel

PLACES = np.array([1.0, 2.0, 3.0, 4.0])
FREQUENCIES = np.array([[10.0, 20.0], [11.0, 15.0], [9.0, 12.0], [8.0, 13.0]])
BRANCHES = np.array([[1, 2], [1, 2], [2, 1], [3, 1]])
PANEL = Panel("", FREQUENCIES, BRANCHES, ((2, 4.0),))


def test_a_branch_changes_its_rank_at_a_crossing():
    places, frequencies = curve(PANEL, PLACES, 1)
    np.testing.assert_array_equal(places, PLACES)
    np.testing.assert_array_equal(frequencies, [10.0, 11.0, 12.0, 13.0])


def test_a_branch_ends_where_it_is_lost_and_begins_where_it_comes_in():
    np.testing.assert_array_equal(curve(PANEL, PLACES, 2)[0], [1.0, 2.0, 3.0])
    np.testing.assert_array_equal(curve(PANEL, PLACES, 3)[1], [8.0])


def test_no_line_where_a_branch_is_away():
    away = Panel("", FREQUENCIES, np.array([[1, 2], [1, 2], [1, 3], [1, 2]]))
    np.testing.assert_array_equal(curve(away, PLACES, 2)[1], [20.0, 15.0, np.nan, 13.0])


def test_ends_that_would_hide_each_other_are_named_together():
    ends = [End(1.0, 20.0, (3,)), End(1.0, 10.0, (1,)), End(1.0, 10.1, (2,)), End(2.0, 20.1, (4,))]
    named = [end.branches for end in together(ends, 0.2)]
    assert named == [(1, 2), (3,), (4,)]


def test_numbers_that_follow_each_other_are_named_by_their_ends():
    assert numbers((3, 2)) == "2, 3"
    assert numbers((10, 7, 8, 9, 12)) == "7–10, 12"


@pytest.mark.parametrize(
    ("suffix", "magic"), [("png", b"\x89PNG"), ("svg", b"<?xml"), ("pdf", b"%PDF")]
)
def test_formats(tmp_path, suffix, magic):
    diagram = Diagram("A head", "density, kg/m²", PLACES, (PANEL,), logarithmic=True)
    file = tmp_path / f"branches.{suffix}"
    write_branches(diagram, file)
    assert file.read_bytes().startswith(magic)


def test_small_multiples_name_their_own_number(tmp_path):
    panels = tuple(Panel(f"tension {n} N/m", FREQUENCIES, BRANCHES) for n in range(1, 4))
    file = tmp_path / "branches.svg"
    write_branches(Diagram("A head", "density", PLACES, panels), file)
    text = file.read_text()
    assert all(f"<!-- {panel.title} -->" in text for panel in panels)
