"""summary.json keeps its schema and gives every digit back."""

from __future__ import annotations

import json
from dataclasses import replace
from importlib.metadata import version
from pathlib import Path

import numpy as np
import pytest

from membrane.errors import OutputError
from membrane.products import summary
from membrane.products.caution import NOT_COVERED
from membrane.records.spectrum import Spectrum
from membrane.schema import SUMMARY, load
from tests.products.schema_checker import complaints


@pytest.fixture(params=["patched", "free"])
def spectrum(request: pytest.FixtureRequest) -> Spectrum:
    return request.getfixturevalue(request.param)


def test_it_keeps_its_schema(spectrum: Spectrum, tmp_path: Path) -> None:
    summary.write(spectrum, tmp_path, summary.Options())
    written = json.loads((tmp_path / "summary.json").read_text())
    assert complaints(load(SUMMARY), written) == []


@pytest.mark.parametrize(
    ("change", "complaint"),
    [
        (lambda s: s.pop("complete"), "complete"),
        (lambda s: s.update(complete="yes"), "complete"),
        (lambda s: s["modes"][0].pop("ratio"), "ratio"),
        (lambda s: s["modes"][0].update(number=0), "number"),
        (lambda s: s["modes"][0].update(frequency_hz=None), "frequency_hz"),
        (lambda s: s["modes"][0].update(note="H4"), "note"),
        (lambda s: s["modes"][0].update(bracket="sure"), "bracket"),
        (lambda s: s.update(schema="summary-0"), "schema"),
        (lambda s: s.update(modes=[]), "modes"),
    ],
)
def test_the_schema_refuses_what_is_wrong(patched: Spectrum, change, complaint: str) -> None:
    contents = json.loads(json.dumps({**summary.contents(patched), "files": []}))
    change(contents)
    found = complaints(load(SUMMARY), contents)
    assert len(found) == 1
    assert complaint in found[0]


def test_notes_are_handed_on_before_what_is_left_out(patched: Spectrum) -> None:
    noted = replace(patched, notes=("a.dxf: closed.",))
    assert summary.contents(noted)["notes"] == ["a.dxf: closed.", NOT_COVERED]


def test_every_digit_is_written(spectrum: Spectrum, tmp_path: Path) -> None:
    summary.write(spectrum, tmp_path, summary.Options())
    modes = summary.read(tmp_path)["modes"]
    assert len(modes) == len(spectrum.partials) >= 4
    for mode, partial in zip(modes, spectrum.partials, strict=True):
        assert mode["frequency_hz"] == partial.frequency
        assert mode["note_cents"] == partial.note_cents
        assert mode["nodal_length_m"] == partial.nodal.length
        assert mode["low_hz"] <= mode["frequency_hz"] <= mode["high_hz"]


def test_it_says_what_was_solved_and_with_what(patched: Spectrum, tmp_path: Path) -> None:
    summary.write(patched, tmp_path, summary.Options())
    found = summary.read(tmp_path)
    assert found["study"]["title"] == "Heavy centre"
    assert found["study"]["patches"][0]["name"] == "paste"
    assert found["software"]["scipy"] == version("scipy")
    assert found["mesh"]["regions"] == list(patched.modes.space.mesh.region_names)
    assert found["mesh"]["triangles"] == patched.modes.space.mesh.size
    assert found["timings"].keys() == patched.timings.keys()
    assert found["complete"] is True


def test_a_rigid_mode_has_no_note(free: Spectrum, tmp_path: Path) -> None:
    summary.write(free, tmp_path, summary.Options())
    first = summary.read(tmp_path)["modes"][0]
    assert first["frequency_hz"] == 0.0
    assert first["note"] is None
    assert first["bracket_cents"] is None


def test_numbers_of_numpy_are_written_as_numbers(patched: Spectrum, tmp_path: Path) -> None:
    facts = {**patched.mesh_facts, "triangles": np.int64(65), "accuracy_met": np.bool_(True)}
    summary.write(replace(patched, mesh_facts=facts), tmp_path, summary.Options())
    mesh = summary.read(tmp_path)["mesh"]
    assert (mesh["triangles"], mesh["accuracy_met"]) == (65, True)


@pytest.mark.parametrize("text", [None, "{", "[]", '{"schema": "summary-0"}'])
def test_what_cannot_be_read_is_said_in_one_sentence(tmp_path: Path, text: str | None) -> None:
    if text is not None:
        (tmp_path / "summary.json").write_text(text)
    with pytest.raises(OutputError, match=r"summary\.json .*run the study") as failure:
        summary.read(tmp_path)
    assert "\n" not in str(failure.value)
