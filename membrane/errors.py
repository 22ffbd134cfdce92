"""Every error that membrane raises on purpose.

    MembraneError                     exit code 1 on the command line
    ├── StudyError                    exit code 2: the study file is wrong
    │   └── NotAvailableYet           a key that a later version will bring
    ├── PluginError                   a plugin is missing, broken or named twice
    ├── OutlineError                  the shapes cannot be put together
    │   └── DrawingError              a drawing that holds no sound outline
    ├── MeshError                     no valid mesh could be made
    ├── SolveError                    the modes could not be found or counted
    ├── EngineError                   the processes of a sweep could not be had, or were lost
    └── OutputError                   a result could not be written or read

A message is one sentence that says what is wrong and what to do about it.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass


class MembraneError(Exception):
    """Base of all errors that have a sentence for the user."""

    exit_code = 1


@dataclass(frozen=True)
class Problem:
    """One thing wrong with a study: the key's full path and a sentence."""

    path: str
    sentence: str

    def __str__(self) -> str:
        return f"{self.path}: {self.sentence}" if self.path else self.sentence


class StudyError(MembraneError):
    """A study that cannot be run as written; holds every problem found in it."""

    exit_code = 2

    def __init__(self, problems: Sequence[Problem] | str) -> None:
        found = [Problem("", problems)] if isinstance(problems, str) else problems
        self.problems = tuple(found)
        super().__init__("\n".join(str(problem) for problem in self.problems))


class NotAvailableYet(StudyError):
    """A part of the study that this version knows of but cannot do."""


class PluginError(MembraneError):
    """A plugin that is missing, broken, or claimed by two packages."""

    exit_code = 2


class OutlineError(MembraneError):
    """Shapes that do not fit together: outside, overlapping, self-crossing."""

    exit_code = 2


class DrawingError(OutlineError, ValueError):
    """A drawing that cannot be read, or holds no sound outline.

    A ValueError as well, so that a study reports it as it does any wrong option.
    """


class MeshError(MembraneError):
    """A mesh that is invalid or cannot be made."""


class SolveError(MembraneError):
    """Modes that could not be found, or a count that did not close."""


class EngineError(MembraneError):
    """Processes of a sweep that could not be had, or were lost."""


class BracketError(MembraneError):
    """Why no bracket is guaranteed, as the end of a sentence; the run goes on with estimates."""


class OutputError(MembraneError):
    """A result that could not be written or read back."""
