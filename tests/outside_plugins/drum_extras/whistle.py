"""The frequencies an octave (or more) up, one a line, for whistling along."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from membrane.records.spectrum import Spectrum


@dataclass(frozen=True)
class Options:
    """How many octaves up."""

    octaves: int = 1


def write(spectrum: Spectrum, folder: Path, options: Options) -> None:
    raised = (2.0**options.octaves * float(hertz) for hertz in spectrum.frequencies)
    (folder / "whistle.txt").write_text("".join(f"{hertz!r}\n" for hertz in raised))
