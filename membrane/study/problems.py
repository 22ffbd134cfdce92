"""The problems of one study, collected and then raised together."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field

from membrane.errors import NotAvailableYet, Problem, StudyError

NOT_YET = "not available yet"


@dataclass
class Problems:
    """What has been found wrong so far, each place once."""

    found: list[Problem] = field(default_factory=list)

    def add(self, path: str, sentence: str) -> None:
        """Note a problem at a key's full path."""
        problem = Problem(path, sentence)
        if problem not in self.found:
            self.found.append(problem)

    def add_all(self, path: str, problems: Iterable[Problem]) -> None:
        """Note problems whose paths are relative to ``path``."""
        for problem in problems:
            self.add(joined(path, problem.path), problem.sentence)

    def raise_any(self) -> None:
        """Raise StudyError if there is any; NotAvailableYet if nothing else is wrong."""
        if not self.found:
            return
        not_yet = all(NOT_YET in problem.sentence for problem in self.found)
        raise (NotAvailableYet if not_yet else StudyError)(self.found)


def joined(path: str, key: str) -> str:
    """``patches.paste`` and ``at`` give ``patches.paste.at``."""
    return f"{path}.{key}" if path and key else path or key
