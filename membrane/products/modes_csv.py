"""modes.csv: the table of modes with all digits, for spreadsheets and scripts."""

from __future__ import annotations

import csv
from dataclasses import dataclass
from pathlib import Path

from membrane.products.rows import row
from membrane.records.spectrum import Spectrum

FILE = "modes.csv"


@dataclass(frozen=True)
class Options:
    """None: the columns are those of summary.json."""


def write(spectrum: Spectrum, folder: Path, options: Options) -> None:
    """Write modes.csv: one row per mode, an empty field where there is no value."""
    rows = [row(partial) for partial in spectrum.partials]
    with open(folder / FILE, "w", newline="", encoding="utf-8") as file:
        writer = csv.DictWriter(file, fieldnames=list(rows[0]))
        writer.writeheader()
        writer.writerows(rows)
