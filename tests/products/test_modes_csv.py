"""modes.csv has the columns and the digits of summary.json."""

from __future__ import annotations

import csv
from pathlib import Path

from membrane.products import modes_csv
from membrane.products.summary import contents
from membrane.records.spectrum import Spectrum
from membrane.schema import SUMMARY, load


def test_it_is_the_summary_as_a_table(free: Spectrum, tmp_path: Path) -> None:
    modes_csv.write(free, tmp_path, modes_csv.Options())
    with open(tmp_path / "modes.csv", newline="") as file:
        rows = list(csv.DictReader(file))
    expected = [
        {key: "" if value is None else str(value) for key, value in mode.items()}
        for mode in contents(free)["modes"]
    ]
    assert rows == expected
    assert len(rows) >= 4
    assert [float(row["frequency_hz"]) for row in rows] == [p.frequency for p in free.partials]


def test_its_columns_are_those_of_the_schema(free: Spectrum, tmp_path: Path) -> None:
    modes_csv.write(free, tmp_path, modes_csv.Options())
    with open(tmp_path / "modes.csv", newline="") as file:
        columns = next(csv.reader(file))
    assert columns == load(SUMMARY)["properties"]["modes"]["items"]["required"]
