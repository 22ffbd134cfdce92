"""What is asked of a point, what comes back, and who may answer."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from time import perf_counter
from typing import Protocol

from membrane.errors import MembraneError, StudyError
from membrane.records.arrays import Floats
from membrane.sweep.points import Point


@dataclass(frozen=True)
class Answer:
    """The modes of one point.

    frequencies : (n,), Hz, rising
    error_cents : (n,), how far off each may be, up or down
    kind : what the errors are: "estimated", "guaranteed" and the like
    solves : full solves that were made for it
    """

    frequencies: Floats
    error_cents: Floats
    kind: str
    solves: int


@dataclass(frozen=True)
class Outcome:
    """What became of a point: an answer, or the sentence that says why there is none."""

    point: Point
    answer: Answer | None
    sentence: str
    seconds: float


class Answering(Protocol):
    """A way to answer points; it is sent to other processes and keeps what it may use again.

    The answer to a point must not depend on the points before it.
    """

    def answer(self, point: Point) -> Answer:
        """Raises MembraneError with its sentence where there is no answer."""
        ...


def outcome_of(point: Point, answering: Answering) -> Outcome:
    """The outcome of one point, whatever goes wrong there."""
    start = perf_counter()
    answer, sentence = None, ""
    try:
        answer = answering.answer(point)
    except MembraneError as failure:
        sentence = sentence_of(failure)
    except Exception as failure:  # one point of thousands must not end the others
        sentence = f"internal error ({type(failure).__name__}: {failure})."
    return Outcome(point, answer, sentence, perf_counter() - start)


def outcomes_of(points: Sequence[Point], answering: Answering) -> list[Outcome]:
    """The outcomes of some points, one after another."""
    return [outcome_of(point, answering) for point in points]


def sentence_of(failure: MembraneError) -> str:
    """All that a failure has to say, in one line."""
    told = failure.problems if isinstance(failure, StudyError) else (failure,)
    return " ".join(str(sentence) for sentence in told)
