"""The table fits 80 columns and says what a designer must know."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from membrane.products import table
from membrane.products.table import table_text
from membrane.records.spectrum import Spectrum


def row(text: str, number: int) -> list[str]:
    (found,) = [line for line in text.splitlines() if line.split()[:1] == [str(number)]]
    return found.split()


def test_it_fits_eighty_columns_without_escape_codes(patched: Spectrum, free: Spectrum) -> None:
    for text in (table_text(patched), table_text(free)):
        assert max(len(line) for line in text.splitlines()) <= 80
        assert "\x1b" not in text


def test_the_figures_of_a_row(patched: Spectrum) -> None:
    partial = patched.partials[0]
    cells = row(table_text(patched), 1)
    assert cells[1] == "(0,1)"
    assert float(cells[2]) == pytest.approx(partial.frequency, abs=6e-4)
    assert f"{partial.ratio:.4f}" in cells
    assert partial.note in cells
    assert cells[-1] == "1"


def test_equal_frequencies_are_joined(patched: Spectrum) -> None:
    text = table_text(patched)
    second, third = row(text, 2), row(text, 3)
    assert patched.partials[1].cluster == patched.partials[2].cluster
    assert "┐" in second
    assert "┘" in third
    assert "┐" not in row(text, 1)
    assert "Ratios are to mode 2" in text


def test_a_head_that_is_not_round_has_no_such_column(patched: Spectrum, free: Spectrum) -> None:
    assert "(m,n)" in table_text(patched)
    assert "(m,n)" not in table_text(free)


def test_a_rigid_mode_has_no_pitch(free: Spectrum) -> None:
    assert row(table_text(free), 1)[:2] == ["1", "0.000"]
    assert row(table_text(free), 1).count("–") >= 3


@pytest.mark.parametrize(
    ("change", "words"),
    [
        ({}, "solver missed no mode below"),
        ({"complete": False}, "Not shown to be complete"),
        ({"mesh_facts": {"accuracy_met": False}}, "accuracy asked for was not reached"),
    ],
)
def test_it_says_how_far_it_can_be_trusted(patched: Spectrum, change: dict, words: str) -> None:
    text = " ".join(table_text(replace(patched, **change)).split())
    assert words in text
    assert "± is guaranteed for the study as written." in text


def test_an_estimate_is_called_one(patched: Spectrum) -> None:
    rows = tuple(replace(partial, bracket="estimated") for partial in patched.partials)
    text = " ".join(table_text(replace(patched, partials=rows)).split())
    assert "an estimate from a second, coarser solve, not a proof" in text
    assert "guaranteed" not in text


def test_it_says_what_is_left_out_and_warns(patched: Spectrum) -> None:
    text = " ".join(table_text(patched).split())
    assert "the air" in text
    assert "Heads under tension burst and rims fail" in text
    assert "licensed practice" in text


def test_it_says_how_the_outline_was_come_by(patched: Spectrum) -> None:
    note = "head.dxf: closed 1 gap in the contour."
    assert note in table_text(replace(patched, notes=(note,)))
    assert "head.dxf" not in table_text(patched)


def test_a_bracket_is_never_understated(patched: Spectrum) -> None:
    widths = {0.00001: "<0.001", 0.0124: "0.007", 0.5: "0.25", 2.001: "1.01", None: "–"}
    for bracket, shown in widths.items():
        first = replace(patched.partials[0], bracket_cents=bracket)
        text = table_text(replace(patched, partials=(first,)))
        assert row(text, 1)[3] == shown


def test_the_file_is_what_is_printed(patched: Spectrum, tmp_path: Path) -> None:
    table.write(patched, tmp_path, table.Options())
    assert (tmp_path / "table.txt").read_text(encoding="utf-8") == table_text(patched)


def test_a_title_is_not_read_as_markup(patched: Spectrum) -> None:
    titled = replace(patched, study=replace(patched.study, title="[bold]loud[/bold]"))
    assert table_text(titled).startswith("[bold]loud[/bold]\n")
