"""A part of a sweep: what one of several jobs works on, and its store."""

from __future__ import annotations

import re
from dataclasses import dataclass
from pathlib import Path

from membrane.errors import StudyError
from membrane.wording import shown

STORE = "sweep.sqlite"


@dataclass(frozen=True)
class Part:
    """Part ``number``, from 1, of ``among`` equal ones."""

    number: int
    among: int

    @classmethod
    def read(cls, text: str) -> Part:
        """The part that "3/16" means. Raises StudyError for anything else."""
        found = re.fullmatch(r"(\d{1,6})/(\d{1,6})", text)
        number, among = (int(group) for group in found.groups()) if found else (0, 0)
        if not 1 <= number <= among:
            raise StudyError(f'--part: expected a part such as "3/16", got {shown(text)}.')
        return cls(number, among)

    def of(self, size: int) -> tuple[int, int]:
        """Where the part begins and ends among ``size`` points in the order of solving."""
        return size * (self.number - 1) // self.among, size * self.number // self.among

    def file(self, folder: Path) -> Path:
        """The part's own store."""
        if self == WHOLE:
            return folder / STORE
        return folder / f"sweep-{self.number}-of-{self.among}.sqlite"


WHOLE = Part(1, 1)


def part_files(folder: Path) -> list[Path]:
    """The stores of all parts in a folder, by their names."""
    return sorted(folder.glob("sweep-*-of-*.sqlite"))
