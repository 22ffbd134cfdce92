"""Options are read from a study's keys, strictly, and all that is wrong is said at once."""

from __future__ import annotations

from dataclasses import dataclass, field
from enum import Enum
from pathlib import Path

import pytest

from membrane.errors import PluginError, StudyError
from membrane.plugins.options import plain, read_options, unit_of
from membrane.units import Length, Point, PositiveLength


class Weave(Enum):
    PLAIN = "plain"
    TWILL = "twill"


@dataclass(frozen=True)
class Options:
    width: PositiveLength
    lugs: int = 6
    gap: Length | None = None
    corners: tuple[Point, ...] = ()
    weave: Weave = Weave.PLAIN
    open: bool = False
    label: str = ""
    share: float = 0.5
    names: list[str] = field(default_factory=list)
    drawing: Path | None = None


def problems(keys, kind=Options) -> list[str]:
    with pytest.raises(StudyError) as caught:
        read_options(kind, keys)
    return [str(problem) for problem in caught.value.problems]


def test_values_with_and_without_units():
    keys = {
        "width": "4 cm",
        "gap": 0.25,
        "corners": [["1 mm", 0], [1, 2]],
        "weave": "twill",
        "open": True,
        "names": ["a"],
        "drawing": "a.svg",
    }
    found = read_options(Options, keys)
    assert found == Options(
        width=0.04,
        gap=0.25,
        corners=((0.001, 0.0), (1.0, 2.0)),
        weave=Weave.TWILL,
        open=True,
        names=["a"],
        drawing=Path("a.svg"),
    )


def test_plain_data_reads_as_the_same_options():
    found = read_options(Options, {"width": 1, "corners": [[1, 2]], "weave": "twill"})
    assert plain(found)["weave"] == "twill"
    assert "gap" not in plain(found)
    assert read_options(Options, plain(found)) == found


def test_all_problems_come_at_once_and_in_order():
    assert problems({"lugs": "6", "widht": 1, "open": 1}) == [
        'widht: unknown key; did you mean "width"?',
        'width: is missing; give it a value such as "356 mm".',
        'lugs: expected a whole number, got "6".',
        "open: expected true or false, got 1.",
    ]


@pytest.mark.parametrize(
    ("keys", "said"),
    [
        ({"lugs": True}, "lugs: expected a whole number, got true."),
        ({"lugs": 6.5}, "lugs: expected a whole number, got 6.5."),
        ({"share": True}, "share: expected a number, got true."),
        ({"share": "0.5"}, 'share: expected a number, got "0.5".'),
        ({"label": 3}, "label: expected a text, got 3."),
        ({"names": "a"}, 'names: expected a list, got "a".'),
        ({"names": [1]}, "names[1]: expected a text, got 1."),
        ({"weave": "satin"}, 'weave: expected "plain" or "twill", got "satin".'),
        ({"gap": "1 s"}, 'gap: expected a length such as "356 mm", got "1 s".'),
        ({"corners": [[1]]}, "corners[1][2]: is missing; give it a value."),
        ({"corners": [[1, 2, 3]]}, "corners[1]: expected 2 entries, got 3."),
        ({"corners": [[1, "2"]]}, "corners[1][2]: "),
    ],
)
def test_each_wrong_value(keys, said):
    (found,) = problems({"width": 1, **keys})
    assert found.startswith(said)


def test_the_dataclass_may_refuse_what_does_not_fit_together():
    @dataclass(frozen=True)
    class Ring:
        outer: float
        inner: float

        def __post_init__(self) -> None:
            if self.inner >= self.outer:
                raise ValueError("a ring must be wider outside than inside.")

    assert problems({"outer": 1.0, "inner": 2.0}, Ring) == [
        "a ring must be wider outside than inside."
    ]


def test_options_must_be_a_dataclass_with_readable_types():
    with pytest.raises(PluginError, match="must be a frozen dataclass"):
        read_options(dict, {})

    @dataclass(frozen=True)
    class Strange:
        size: Lenght  # noqa: F821

    with pytest.raises(PluginError, match="cannot be read: name 'Lenght'"):
        read_options(Strange, {})


def test_units_of_fields():
    options = Options(width=1.0)
    assert unit_of(options, "width") == "m"
    assert unit_of(options, "gap") == "m"
    assert unit_of(options, "corners") == "m"
    assert unit_of(options, "lugs") == ""
