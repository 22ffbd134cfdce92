"""However a study is spoilt, it is either read or refused with sentences; nothing else."""

from __future__ import annotations

import copy
import json
import tomllib
from collections.abc import Iterator
from contextlib import suppress
from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from membrane.errors import StudyError
from membrane.study import study_from
from tests.study.test_reader import WHOLE

SOUND = tomllib.loads(WHOLE)

scalars = (
    st.none()
    | st.booleans()
    | st.integers()
    | st.floats()
    | st.text(max_size=6)
    | st.sampled_from(["1 m", "1 kg", "1 N/m", "disc", "rim", "head", "free", "x.py", "", "table"])
)
words = st.text(max_size=6) | st.sampled_from(
    ["name", "shape", "script", "at", "rim", "write", "formula", "support", "mass", "angle", "xx"]
)
varying = st.fixed_dictionaries(
    {"formula": st.text("xyr019.+*/^(), ", max_size=9) | st.sampled_from(["r", "1+x", "theta**2"])},
    optional={
        "unit": st.sampled_from(["kg/m^2", "N/m", "", "m"]),
        "kinks": st.lists(st.lists(st.floats(), max_size=2), max_size=2),
        "csv": st.text(max_size=3),
    },
)
values = st.recursive(
    scalars | varying,
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(words, inner, max_size=3),
    max_leaves=4,
)


def places(keys: Any, path: tuple = ()) -> Iterator[tuple]:
    """Paths of everything within plain data."""
    inner = keys.items() if isinstance(keys, dict) else enumerate(keys)
    for key, value in inner:
        yield (*path, key)
        if isinstance(value, dict | list):
            yield from places(value, (*path, key))


@st.composite
def spoilt(draw) -> dict[str, Any]:
    """The sound study with one to three things replaced, left out or added."""
    keys = copy.deepcopy(SOUND)
    for _ in range(draw(st.integers(1, 3))):
        *way, last = draw(st.sampled_from(list(places(keys)) or [("title",)]))
        table = keys
        for step in way:
            table = table[step]
        kind = draw(st.sampled_from(["replace", "leave out", "add"]))
        if kind == "leave out":
            table.pop(last, None) if isinstance(table, dict) else table.pop(last)
        elif kind == "add" and isinstance(table, dict):
            table[draw(words)] = draw(values)
        else:
            table[last] = draw(values)
    return keys


@settings(max_examples=300, deadline=None)
@given(spoilt())
def test_spoilt_studies(keys):
    before = repr(keys)
    with suppress(StudyError):
        study = study_from(keys)
        source = json.loads(json.dumps(study.source, allow_nan=False))
        assert study_from(source).source == study.source
    assert repr(keys) == before
