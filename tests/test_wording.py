"""Near names are offered, and values are shown as a study would write them."""

import pytest

from membrane.wording import either, listed, nearest, shown, unknown


def test_a_near_name_is_offered_whatever_its_case():
    assert nearest("Disk", ["disc", "ellipse"]) == '; did you mean "disc"?'
    assert nearest("zebra", ["disc", "ellipse"]) == "."


def test_known_names_are_listed_where_none_is_near():
    assert unknown("term", "x", ["sand"]) == 'there is no term "x"; known are sand.'
    assert unknown("term", "x", []) == 'there is no term "x"; known are none.'
    assert listed([]) == "none"


def test_choices():
    assert either(["a"]) == '"a"'
    assert either(["a", "b", "c"]) == '"a", "b" or "c"'


@pytest.mark.parametrize(
    ("value", "text"),
    [
        ("3 µm", '"3 µm"'),
        (True, "true"),
        (2.5, "2.5"),
        ([1, 2], "a list of 2"),
        ({}, "a table"),
        ("x" * 99, '"' + "x" * 59 + "…"),
    ],
)
def test_values(value, text):
    assert shown(value) == text
