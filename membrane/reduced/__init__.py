"""Reduced models of sweeps whose numbers scale parts of one pencil."""

from membrane.reduced.model import Answers, ReducedModel
from membrane.reduced.prepare import Solved, prepare

__all__ = ["Answers", "ReducedModel", "Solved", "prepare"]
